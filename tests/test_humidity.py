"""Humidity against PsychroLib and CoolProp, and the answer of charging to it."""

import random
from math import exp, log

import CoolProp.HumidAirProp as air
import psychrolib
import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy import integrate, stats

from triage.errors import InvalidValue, OutOfRange
from triage.estimate import Estimate
from triage.materials import load
from triage.physics.humidity import (
    Humidity,
    Response,
    dew_point,
    frost_point,
    resistance_factor,
    saturation_pressure,
    saturation_pressure_ice,
    transfer_doubt,
    transferred,
)

psychrolib.SetUnitSystem(psychrolib.SI)
GENERAL = load().responses["general"]

# Sensor [degC], relative humidity there, place [degC], relative humidity there (PsychroLib 2.5.0
# and CoolProp 8.0.0 agree to the digits given).
PAIRS = [
    (22, 0.30, 18, 0.3844), (22, 0.30, 26, 0.2359), (20, 0.50, 24, 0.3917),
    (24, 0.20, 20, 0.2553), (18, 0.45, 27, 0.2604), (27, 0.08, 20, 0.1220),
    (21, 0.60, 17, 0.7702), (23, 0.25, 23, 0.2500), (19, 0.55, 24, 0.4049),
    (25, 0.40, 20, 0.5420),
]  # fmt: skip


def by_psychrolib(fraction: float, sensor: float, place: float) -> float:
    """The same air at another temperature, by its humidity ratio."""
    ratio = psychrolib.GetHumRatioFromRelHum(sensor, fraction, 101325)
    return psychrolib.GetRelHumFromHumRatio(place, ratio, 101325)


def by_coolprop(fraction: float, sensor: float, place: float) -> float:
    """The same air at another temperature, by its humidity ratio."""
    ratio = air.HAPropsSI("W", "T", sensor + 273.15, "P", 101325, "R", fraction)
    return air.HAPropsSI("R", "T", place + 273.15, "P", 101325, "W", ratio)


@pytest.mark.parametrize(("sensor", "fraction", "place", "expected"), PAIRS)
def test_moved_readings_agree_with_both_libraries(sensor, fraction, place, expected):
    found = transferred(fraction, sensor, place)
    assert found == pytest.approx(expected, abs=3e-4)
    assert found == pytest.approx(by_psychrolib(fraction, sensor, place), abs=3e-4)
    assert found == pytest.approx(by_coolprop(fraction, sensor, place), abs=3e-4)


# 0.1 % of the value: the Magnus form is within 0.3 % of the steam tables and most of it cancels.
def test_a_thousand_random_readings_agree_with_both_libraries():
    draw = random.Random(1)
    checked = 0
    while checked < 1000:
        sensor, place, fraction = draw.uniform(5, 40), draw.uniform(5, 40), draw.uniform(0.02, 1)
        if by_psychrolib(fraction, sensor, place) > 0.99:
            continue
        found = transferred(fraction, sensor, place)
        assert found == pytest.approx(by_psychrolib(fraction, sensor, place), rel=2.5e-3)
        assert found == pytest.approx(by_coolprop(fraction, sensor, place), rel=2.5e-3)
        checked += 1


# WMO-No. 8 states the formula; the steam-table values are those of PsychroLib.
@pytest.mark.parametrize("temperature", [5, 10, 15, 20, 23, 25, 30, 40])
def test_the_vapour_pressure_is_within_three_per_mille_of_the_steam_tables(temperature):
    expected = psychrolib.GetSatVapPres(temperature)
    assert saturation_pressure(temperature) == pytest.approx(expected, rel=3e-3)


@pytest.mark.parametrize("temperature", [-30, -20, -10, -1])
def test_the_vapour_pressure_over_ice_is_that_of_the_library(temperature):
    expected = psychrolib.GetSatVapPres(temperature)
    assert saturation_pressure_ice(temperature) == pytest.approx(expected, rel=5e-3)


# 1499-RP, dew points of 27 degC 8 %, 18 degC 15 %, 5 degC 25 %: over water, not over ice.
@pytest.mark.parametrize(
    ("temperature", "fraction", "printed"), [(27, 0.08, -10), (18, 0.15, -8.9), (5, 0.25, -13.1)]
)
def test_a_dew_point_below_zero_is_over_water_and_a_frost_point_over_ice(
    temperature, fraction, printed
):
    dew, frost = dew_point(temperature, fraction), frost_point(temperature, fraction)
    assert dew == pytest.approx(printed, abs=0.35)
    library = psychrolib.GetTDewPointFromRelHum(temperature, fraction)
    assert frost == pytest.approx(library, abs=0.1)
    assert frost - dew > 0.8


@pytest.mark.parametrize(("temperature", "fraction"), [(22, 0.30), (25, 0.40), (21, 0.60)])
def test_a_dew_point_above_zero_agrees_with_the_library(temperature, fraction):
    library = psychrolib.GetTDewPointFromRelHum(temperature, fraction)
    assert dew_point(temperature, fraction) == pytest.approx(library, abs=0.05)
    assert frost_point(temperature, fraction) is None


@given(st.floats(0.02, 0.9), st.floats(5, 40), st.floats(5, 40))
def test_a_reading_moved_there_and_back_is_itself(fraction, sensor, place):
    there = fraction * saturation_pressure(sensor) / saturation_pressure(place)
    if there <= 1:
        assert transferred(there, place, sensor) == pytest.approx(fraction)


@pytest.mark.parametrize(
    "attempt",
    [
        lambda: transferred(0.9, 25, 15),
        lambda: saturation_pressure(61),
        lambda: saturation_pressure(float("nan")),
        lambda: saturation_pressure_ice(1),
    ],
)
def test_air_outside_the_formula_is_unknown_not_a_number(attempt):
    with pytest.raises(OutOfRange):
        attempt()


# WMO-No. 8: -45 to 60 degC over water, -65 to 0 degC over ice.
@pytest.mark.parametrize(
    ("formula", "low", "high"), [(saturation_pressure, -45, 60), (saturation_pressure_ice, -65, 0)]
)
def test_the_range_of_the_vapour_pressure_ends_where_it_says(formula, low, high):
    assert 0 < formula(low) < formula(high)
    for outside in (low - 0.1, high + 0.1):
        with pytest.raises(OutOfRange):
            formula(outside)


@pytest.mark.parametrize(("fraction", "sd"), [(1.2, 0), (-0.1, 0), (0.3, -1), (float("nan"), 0)])
def test_a_humidity_that_cannot_be_is_refused(fraction, sd):
    with pytest.raises(InvalidValue):
        Humidity(fraction, sd)


def test_the_doubt_of_a_moved_reading_follows_a_small_change():
    step = transferred(0.30, 22, 22.001) - transferred(0.30, 22, 22)
    assert transfer_doubt(0.30, 22, (0, 1)) == pytest.approx(-step / 0.001, rel=1e-3)
    assert transfer_doubt(0.30, 22, (0.02, 0.5, 1)) > 0.02


def exact_moments(response: Response, mean: float, sd: float) -> tuple[float, float]:
    """Mean of ln factor and its covariance with humidity, by adaptive integration."""
    points = [(k - mean) / sd for k in response.knees if abs(k - mean) < 9 * sd] or None

    def integral(weight):
        return integrate.quad(
            lambda z: stats.norm.pdf(z) * response.at(mean + sd * z) * weight(z),
            -9, 9, points=points, epsabs=1e-12, limit=200,
        )[0]  # fmt: skip

    return integral(lambda z: 1.0), integral(lambda z: z)


@given(st.floats(0.05, 0.9), st.floats(0.01, 0.1))
def test_the_lognormal_answer_has_the_exact_mean_and_covariance(mean, sd):
    middle, slope = exact_moments(GENERAL, mean, sd)
    found = GENERAL.factor(Humidity(mean, sd))
    assert log(found.median) == pytest.approx(middle, abs=1e-8)
    assert found.loadings.get("humidity", 0.0) == pytest.approx(slope, abs=1e-8)


# What the lognormal answer costs where it is worst: at a knee with the widest doubt (8 points).
@pytest.mark.parametrize("knee", [0.40, 0.60])
@pytest.mark.parametrize("level", [200, 500, 1000, 2000])
def test_at_a_knee_the_lognormal_answer_moves_a_chance_by_less_than_one_percent(knee, level):
    spread = (log(2.5) ** 2 + log(1.8) ** 2) ** 0.5
    volts = Estimate.lognormal(1500, {"v": spread}, "V")
    smooth = volts.times(GENERAL.factor(Humidity(knee, 0.08)), "V").probability_above(level)

    def density(z: float) -> float:
        middle = log(1500 / level) + GENERAL.at(knee + 0.08 * z)
        return stats.norm.pdf(z) * stats.norm.cdf(middle / spread)

    exact = integrate.quad(density, -9, 9, points=[(k - knee) / 0.08 for k in (0.4, 0.6)])[0]
    assert smooth == pytest.approx(exact, abs=0.01)


@given(st.floats(0, 0.99), st.floats(0, 0.01))
def test_damper_air_never_raises_the_answer(fraction, more):
    for response in load().responses.values():
        assert response.at(fraction + more) <= response.at(fraction) + 1e-12


def test_the_answer_is_one_at_the_reference_and_falls_by_the_published_slopes():
    assert GENERAL.at(0.25) == pytest.approx(0)
    # Unger 1981: ln(3700 / 6150) over 24 points is -0.021 a point.
    assert GENERAL.at(0.26) - GENERAL.at(0.25) == pytest.approx(log(3700 / 6150) / 24, rel=0.1)
    assert exp(GENERAL.at(0.40) - GENERAL.at(0.20)) == pytest.approx(0.64, abs=0.005)


@pytest.mark.parametrize(
    ("knees", "slopes"), [((0.4,), (-1.0,)), ((0.4,), (-1.0, 0.5)), ((0.2,), (-1.0, -2.0))]
)
def test_a_response_that_does_not_fall_is_refused(knees, slopes):
    with pytest.raises(InvalidValue):
        Response(0.25, knees, slopes)


def test_damp_air_never_raises_a_resistance():
    assert resistance_factor(Humidity(0.45, 0.05), 0.5).median == pytest.approx(0.1)
    with pytest.raises(InvalidValue):
        resistance_factor(Humidity(0.45), -0.1)
