"""Body impedance against the printed percentiles, and the severe end for what is unknown."""

from pathlib import Path

import pytest
import yaml
from hypothesis import given
from hypothesis import strategies as st

from triage.errors import InvalidValue, OutOfRange
from triage.physics.body_impedance import (
    CONTACTS,
    MOISTURES,
    Spread,
    floor_series,
    hazard_floor,
    impedance,
    impedance_citation,
    severe_impedance,
)

PUBLISHED = yaml.safe_load((Path(__file__).parent / "published/electrical.yaml").read_text())


@pytest.mark.parametrize(("volts", "low", "median", "high"), PUBLISHED["body_impedance"])
def test_the_printed_percentiles_are_reproduced(volts, low, median, high):
    found = impedance(volts, moisture="dry")
    assert (found.low, found.median, found.high) == (low, median, high)


# Linear in voltage between rows, worked by hand from the rows of table 1.
@pytest.mark.parametrize(
    ("volts", "expected"),
    [
        (60, (1275, 2300, 4200)), (115, (936, 1620, 2855)), (120, (918, 1585, 2765)),
        (230, (773, 1217, 1882)), (240, (769, 1201, 1846)),
    ],
)  # fmt: skip
def test_between_rows_the_table_is_read_along_straight_lines(volts, expected):
    found = impedance(volts, moisture="dry")
    assert (found.low, found.median, found.high) == pytest.approx(expected, rel=0.001)


def test_the_spread_is_the_one_of_the_printed_percentiles():
    # ln(6100 / 1750) / 3.29 and ln(1900 / 775) / 3.29
    assert impedance(25, moisture="dry").sigma == pytest.approx(0.3795, abs=0.001)
    assert impedance(225, moisture="dry").sigma == pytest.approx(0.2726, abs=0.001)


@pytest.mark.parametrize("percentile", [5, 50, 95])
def test_a_percentile_of_the_table_is_met_exactly(percentile):
    found = Spread(1750, 3250, 6100)
    expected = {5: 1750, 50: 3250, 95: 6100}[percentile]
    assert found.at(percentile) == pytest.approx(expected)


@pytest.mark.parametrize("percentile", [0, 0.4, 99.6, 100, float("nan")])
def test_a_percentile_beyond_the_data_is_refused(percentile):
    with pytest.raises(OutOfRange):
        Spread(1750, 3250, 6100).at(percentile)


@pytest.mark.parametrize("volts", [24.9, 1000.1, -1, float("nan")])
def test_a_voltage_outside_the_table_is_refused(volts):
    with pytest.raises(OutOfRange):
        impedance(volts, moisture="dry")


def test_an_area_without_a_table_is_refused_and_the_tables_are_named():
    with pytest.raises(InvalidValue, match="small water contact; there are .*large dry"):
        impedance(50, contact="small", moisture="water")


@given(st.one_of(st.none(), st.floats(0, 5000)))
def test_what_is_unknown_takes_the_severe_end(volts):
    unknown = severe_impedance(volts)
    for contact in CONTACTS:
        for moisture in MOISTURES:
            assert unknown.low <= severe_impedance(volts, contact=contact, moisture=moisture).low


def test_no_voltage_means_the_hazard_floor():
    assert severe_impedance(None).high == hazard_floor() == 500


@given(st.floats(25, 999), st.floats(0.1, 1))
def test_impedance_never_rises_with_voltage(volts, step):
    for percentile in ("low", "median", "high"):
        below = getattr(impedance(volts, moisture="dry"), percentile)
        assert getattr(impedance(volts + step, moisture="dry"), percentile) <= below + 1e-9


def test_a_value_between_a_printed_and_a_recalled_row_is_not_called_published():
    assert impedance_citation(50, contact="large", moisture="dry").known == "published"
    assert impedance_citation(60, contact="large", moisture="dry").known == "memory"
    assert impedance_citation(120, contact="large", moisture="saltwater").known == "memory"


# R || 100 pF in series with 1 kohm across the full line; worked with the calculator of NumPy.
@pytest.mark.parametrize(
    ("volts", "hertz", "ohms", "microamperes"),
    [
        (120, 60, 1e5, 1188), (120, 60, 1e6, 120), (120, 60, 1e7, 12.8), (120, 60, 1e9, 4.5),
        (230, 50, 1e5, 2277), (230, 50, 1e6, 230), (230, 50, 1e7, 24.1), (230, 50, 1e9, 7.2),
    ],
)  # fmt: skip
def test_floor_and_shoes_limit_a_one_hand_contact(volts, hertz, ohms, microamperes):
    current = volts / abs(1000 + floor_series(ohms, 100e-12, hertz))
    assert current * 1e6 == pytest.approx(microamperes, rel=0.01)


@pytest.mark.parametrize("bad", [(0, 1e-10, 50), (-1, 0, 50), (1e6, -1e-12, 50)])
def test_an_impossible_floor_is_refused(bad):
    with pytest.raises(InvalidValue):
        floor_series(*bad)
