"""Each cause as a Thevenin source, against hand sums and an independent circuit program.

Values marked ngspice were computed with ngspice 39 on the same circuit; test_ngspice.py runs it.
"""

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st

from triage.errors import InvalidValue
from triage.physics.touch_current import (
    Mains,
    Source,
    capacitive_pickup,
    contact_spark,
    direct,
    earth_difference,
    earth_drop,
    insulation_fault,
    isolated_line,
    open_earth,
    open_neutral,
    shunt,
)

US = Mains(120, 60)
EU = Mains(230, 50)


def microamperes(source: Source, body: complex = 1000) -> float:
    return source.current(body) * 1e6


@pytest.mark.parametrize(
    ("mains", "farads", "expected", "meter_volts"),
    [
        (US, 2.2e-9, 99.53, 59.89),
        (US, 4.7e-9, 212.6, 59.98),
        (EU, 1.0e-9, 72.3, 113.6),
        (EU, 2.2e-9, 158.96, 114.7),
        (EU, 4.7e-9, 339.6, 114.9),  # ngspice
    ],
)
def test_an_open_earth_drives_the_filter_current_through_the_person(
    mains, farads, expected, meter_volts
):
    each = shunt(None, farads, mains)
    source = open_earth(mains, each, each)
    assert microamperes(source) == pytest.approx(expected, rel=0.005)
    assert source.reading(10e6) == pytest.approx(meter_volts, rel=0.005)


def test_an_open_neutral_as_well_doubles_the_current():
    each = shunt(None, 2.2e-9, US)
    found = microamperes(open_earth(US, each, each, neutral_open=True))
    assert found == pytest.approx(199.1, rel=0.005)  # ngspice


def test_a_low_impedance_meter_tells_a_filter_from_a_fault():
    each = shunt(None, 2.2e-9, US)
    phantom, fault = open_earth(US, each, each), insulation_fault(US, 100, earth=None)
    assert phantom.reading(10e6) > 59 and phantom.reading(3000) < 0.4
    assert fault.reading(10e6) > 119 and fault.reading(3000) > 115


@pytest.mark.parametrize(
    ("mains", "farads", "charge", "energy"),
    [(US, 2.2e-9, 0.373, 15.8), (EU, 2.2e-9, 0.716, 58.2), (EU, 4.7e-9, 1.53, 124)],
)
def test_the_contact_spark_of_a_floating_chassis(mains, farads, charge, energy):
    each = shunt(None, farads, mains)
    spark = contact_spark(open_earth(mains, each, each), mains)
    assert spark.charge * 1e6 == pytest.approx(charge, rel=0.005)
    assert spark.energy * 1e6 == pytest.approx(energy, rel=0.005)
    # CV and CV^2/2 by hand
    assert spark.charge == pytest.approx(2 * farads * math.sqrt(2) * mains.voltage / 2)


def test_a_stiff_source_holds_no_charge():
    assert contact_spark(direct(US), US).charge == 0


@pytest.mark.parametrize(
    ("mains", "fault", "milliamperes"), [(US, 0, 120), (EU, 0, 230), (US, 1000, 60)]
)
def test_a_fault_with_the_earth_open_puts_the_line_on_the_person(mains, fault, milliamperes):
    assert insulation_fault(mains, fault, earth=None).current(1000) * 1e3 == milliamperes


@pytest.mark.parametrize(("mains", "ohms", "volts"), [(US, 0.3, 60), (EU, 0.5, 115)])
def test_an_intact_earth_divides_the_voltage_until_the_breaker_opens(mains, ohms, volts):
    source = insulation_fault(mains, 0, earth=ohms, wiring=ohms)
    assert source.open_voltage == pytest.approx(volts)


@pytest.mark.parametrize(
    ("leakage", "earth", "expected"), [(5e-3, 0.5, 2.5), (0.5e-3, 10, 4.95), (0.5e-3, 1000, 250)]
)
def test_a_poor_earth_lets_part_of_the_leakage_through_the_person(leakage, earth, expected):
    assert microamperes(earth_drop(leakage, earth)) == pytest.approx(expected, rel=0.005)


def test_the_fault_loop_and_the_leakage_form_of_a_poor_earth_agree():
    loop = insulation_fault(US, 240e3, earth=10)
    assert microamperes(loop) == pytest.approx(microamperes(earth_drop(0.5e-3, 10)), rel=1e-3)


def test_swapped_earth_and_neutral_put_the_wire_drop_on_the_metal():
    source = earth_drop(10, 0.1)  # 10 A in 0.1 ohm
    assert source.open_voltage == pytest.approx(1.0)
    assert 0.99 < source.current(1000) * 1e3 < source.current(500) * 1e3 < 2.0


def test_moisture_of_ten_kilohm_passes_twelve_milliamperes():
    assert direct(US, 10e3).current(0) * 1e3 == pytest.approx(12)


@pytest.mark.parametrize(
    ("volts", "body", "expected"), [(0.040, 500, 80), (0.5, 1000, 500), (1, 1000, 1000)]
)
def test_a_difference_between_two_earths_flows_through_both_hands(volts, body, expected):
    assert microamperes(earth_difference(volts), body) == pytest.approx(expected)


@pytest.mark.parametrize(("mains", "expected"), [(US, 4.5), (EU, 7.2)])
def test_pick_up_by_a_table_is_microamperes(mains, expected):
    assert microamperes(capacitive_pickup(mains, 100e-12)) == pytest.approx(expected, rel=0.01)


def test_an_open_neutral_upstream_drifts_to_the_lighter_load():
    assert open_neutral(US, 10, 30).open_voltage == pytest.approx(60)
    assert open_neutral(US, 20, 20).open_voltage == 0
    assert open_neutral(US, 100).open_voltage == 120


# Rows: leakage of line 1, leakage of line 2, body -> current of line 1 [mA]. NumPy and ngspice.
@pytest.mark.parametrize(
    ("first", "second", "body", "milliamperes"),
    [
        ((None, 22.10e-9), (None, 22.10e-9), 1e3, 0.9999),
        ((None, 22.10e-9), (None, 22.10e-9), 10e3, 0.9864),
        ((None, 44.21e-9), (None, 44.21e-9), 500, 1.9997),
        ((None, 44.21e-9), (None, 44.21e-9), 1e3, 1.9989),
        ((None, 44.21e-9), (None, 44.21e-9), 2e3, 1.9956),
        ((None, 44.21e-9), (None, 44.21e-9), 10e3, 1.8974),
        ((None, 81.79e-9), (None, 81.79e-9), 1e3, 3.6930),
        ((None, 81.79e-9), (None, 81.79e-9), 10e3, 3.1493),
        ((None, 110.5e-9), (None, 110.5e-9), 500, 4.9957),
        ((None, 110.5e-9), (None, 110.5e-9), 10e3, 3.8411),
        ((60e3, 0), (60e3, 0), 500, 1.9672),
        ((60e3, 0), (60e3, 0), 10e3, 1.5000),
        ((24e3, 0), (24e3, 0), 1e3, 4.6154),
        ((24e3, 0), (24e3, 0), 10e3, 2.7273),
        ((None, 10e-9), (50e3, 10e-9), 1e3, 2.3943),
        ((50e3, 10e-9), (None, 10e-9), 1e3, 0.4435),
        ((None, 10e-9), (24e3, 10e-9), 1e3, 4.8195),
        ((None, 10e-9), (1e3, 10e-9), 1e3, 60.00),
    ],
)
def test_one_line_of_an_isolated_supply(first, second, body, milliamperes):
    source = isolated_line(US, shunt(*first, US), shunt(*second, US))
    assert source.current(body) * 1e3 == pytest.approx(milliamperes, rel=0.005)


@pytest.mark.parametrize(("body", "milliamperes"), [(500, 240), (1000, 120), (2000, 60)])
def test_line_to_line_only_the_body_limits(body, milliamperes):
    assert direct(US).current(body) * 1e3 == milliamperes


def test_a_supply_or_chassis_that_nothing_ties_is_refused_not_zero():
    with pytest.raises(InvalidValue):
        isolated_line(US, 0, 0)
    with pytest.raises(InvalidValue):
        open_earth(US, 0, 0)


@pytest.mark.parametrize(
    "make",
    [
        lambda: Mains(0, 50),
        lambda: Mains(120, math.nan),
        lambda: shunt(0, 0, US),
        lambda: shunt(None, -1e-12, US),
        lambda: insulation_fault(US, -1, earth=None),
        lambda: insulation_fault(US, 0, earth=0),
        lambda: earth_drop(-1, 1),
        lambda: direct(US, -1),
        lambda: open_neutral(US, 0),
        lambda: capacitive_pickup(US, 0),
    ],
)
def test_impossible_inputs_are_refused(make):
    with pytest.raises(InvalidValue):
        make()


def test_a_stiff_source_into_nothing_is_unbounded():
    assert direct(US).current(0) == math.inf
    assert Source(0, 0).current(0) == 0


capacitance = st.floats(1e-12, 1e-6)
resistance = st.one_of(st.none(), st.floats(10, 1e8))


@given(capacitance, resistance, capacitance, resistance, st.floats(100, 1e6))
def test_the_body_current_never_exceeds_the_hazard_current(c1, r1, c2, r2, body):
    y1, y2 = shunt(r1, c1, US), shunt(r2, c2, US)
    assert isolated_line(US, y1, y2).current(body) <= US.voltage * abs(y2) * (1 + 1e-12)


@given(capacitance, capacitance, st.floats(0, 1e6), st.floats(0, 1e6))
def test_more_series_resistance_never_raises_the_current(c1, c2, less, more):
    source = open_earth(US, shunt(None, c1, US), shunt(None, c2, US))
    low, high = sorted((less, more))
    assert source.current(1000, high) <= source.current(1000, low) * (1 + 1e-12)
