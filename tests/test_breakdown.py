"""Spark gaps against tabulated values of the two published laws."""

import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy.optimize import brentq

from triage.errors import InvalidValue, OutOfRange
from triage.physics.breakdown import (
    breakdown_voltage,
    furthest_plausible_gap,
    paschen_voltage,
    relative_density,
    spark_gap,
)

# kV, mm: uniform-field formula at 20 degC, and Paschen with A 15, B 365 (per cm Torr), computed
# independently from the formulas of the high-voltage literature.
UNIFORM = {1: 0.1284, 3: 0.6157, 5: 1.1962, 10: 2.8004, 20: 6.2699, 30: 9.890}
PASCHEN = {1: 0.1231, 3: 0.5264, 5: 0.9915, 10: 2.2838, 20: 5.1545, 30: 8.239}


@pytest.mark.parametrize(("kilovolts", "millimetres"), UNIFORM.items())
def test_the_gap_of_a_voltage(kilovolts, millimetres):
    assert spark_gap(kilovolts * 1e3) * 1e3 == pytest.approx(millimetres, rel=1e-3)


@pytest.mark.parametrize(("kilovolts", "millimetres"), PASCHEN.items())
def test_the_voltage_of_a_short_gap_after_paschen(kilovolts, millimetres):
    assert paschen_voltage(millimetres * 1e-3) == pytest.approx(kilovolts * 1e3, rel=1e-3)


@given(st.floats(400, 6e4), st.floats(0.7, 1.2))
def test_the_gap_is_the_inverse_of_the_breakdown_voltage(volts, density):
    gap = spark_gap(volts, density)
    if gap > 2e-5:
        assert breakdown_voltage(gap, density) == pytest.approx(volts)
        root = brentq(lambda g: breakdown_voltage(g, density) - volts, 2e-5, 0.1)
        assert gap == pytest.approx(root, rel=1e-6)


# The two laws are different fits to air: they differ by up to a fifth over 1 to 30 kV.
@given(st.floats(2e-4, 5e-3))
def test_the_two_laws_agree_to_a_fifth(gap):
    assert breakdown_voltage(gap) == pytest.approx(paschen_voltage(gap), rel=0.22)


# Measured minimum of air about 327 V at 7.5 um; of Paschen's formula 305 V at 11 um.
def test_below_the_paschen_minimum_there_is_no_spark():
    assert spark_gap(300) is None
    assert paschen_voltage(1.11e-5) == pytest.approx(305, abs=1)


def test_thin_air_breaks_over_a_longer_gap():
    assert relative_density(-10, 101325) == pytest.approx(293.15 / 263.15)
    assert relative_density(20, 84e3) == pytest.approx(0.829, abs=1e-3)
    assert spark_gap(5000, relative_density(20, 84e3)) > spark_gap(5000)


def test_a_spark_of_five_centimetres_needs_more_than_a_body_holds():
    assert furthest_plausible_gap(20e3) < 0.05
    assert furthest_plausible_gap(5e3) > spark_gap(5e3)


@pytest.mark.parametrize(
    "attempt",
    [
        lambda: breakdown_voltage(0.5),
        lambda: breakdown_voltage(float("nan")),
        lambda: paschen_voltage(5e-6),
        lambda: spark_gap(1e6),
        lambda: relative_density(80),
    ],
)
def test_outside_the_published_range_there_is_no_number(attempt):
    with pytest.raises(OutOfRange):
        attempt()


# The ends of each published range still give a number; just outside there is none.
@pytest.mark.parametrize(
    ("formula", "inside", "outside"),
    [
        (relative_density, (-40, 60), (-40.1, 60.1)),
        (breakdown_voltage, (2e-5, 0.1), (1.99e-5, 0.1001)),
        (paschen_voltage, (1.12 / 101325, 850 / 101325), (1.11 / 101325, 851 / 101325)),
        (spark_gap, (0, 6e4), (-1, 60001)),
    ],
)
def test_a_range_ends_where_it_says(formula, inside, outside):
    for value in inside:
        formula(value)
    for value in outside:
        with pytest.raises(OutOfRange):
            formula(value)


def test_paschen_at_another_pressure_depends_on_the_product_alone():
    assert paschen_voltage(1e-3, 50e3) == pytest.approx(paschen_voltage(0.5e-3, 100e3))


@pytest.mark.parametrize(
    "attempt", [lambda: relative_density(20, 0), lambda: furthest_plausible_gap(-1)]
)
def test_what_cannot_be_is_refused(attempt):
    with pytest.raises(InvalidValue):
        attempt()
