"""What a monitor's reading allows, and the guides around it."""

from math import inf
from pathlib import Path

import pytest
import yaml
from hypothesis import given
from hypothesis import strategies as st

from triage.errors import InvalidValue
from triage.physics.monitors import (
    LEAKAGE_CAPACITANCE,
    alarm_test_resistor,
    build_up,
    ceiling_from_hazard,
    ceiling_from_insulation,
    device_step,
    hazard_current,
    read_line_voltages,
    total_hazard_bounds,
)
from triage.physics.touch_current import Mains, shunt

PUBLISHED = yaml.safe_load((Path(__file__).parent / "published/electrical.yaml").read_text())
US = Mains(120, 60)
EU = Mains(230, 50)


@pytest.mark.parametrize(("volts", "ohms"), PUBLISHED["test_resistor"])
def test_the_acceptance_resistor_draws_five_milliamperes_at_any_voltage(volts, ohms):
    assert alarm_test_resistor(volts) == ohms
    assert volts / ohms == pytest.approx(5e-3)


# E |1/R + j w C| at 230 V 50 Hz, by hand.
@pytest.mark.parametrize(
    ("ohms", "farads", "milliamperes"),
    [(50e3, 0, 4.600), (50e3, 50e-9, 5.849), (200e3, 20e-9, 1.847), (1e6, 100e-9, 7.229)],
)
def test_the_ceiling_of_the_resistance_kind(ohms, farads, milliamperes):
    found = ceiling_from_insulation(EU, ohms, farads)
    assert found * 1e3 == pytest.approx(milliamperes, rel=0.005)


def test_a_healthy_resistance_reading_with_unknown_capacitance_bounds_little():
    assert ceiling_from_insulation(EU, 1e6) > 14e-3
    assert ceiling_from_insulation(EU, 1e6) == ceiling_from_insulation(
        EU, 1e6, LEAKAGE_CAPACITANCE[1]
    )


@pytest.mark.parametrize("reading", [None, 0])
def test_no_resistance_reading_is_no_bound(reading):
    assert ceiling_from_insulation(EU, reading) == inf


def test_the_ceiling_of_the_hazard_kind_carries_its_tolerance():
    assert ceiling_from_hazard(1.4e-3) == pytest.approx(1.54e-3)


def test_the_total_is_the_larger_of_two_hazard_currents():
    one, two = hazard_current(US, shunt(None, 10e-9, US), shunt(None, 30e-9, US))
    assert max(one, two) * 1e3 == pytest.approx(1.3572, rel=0.005)
    assert min(one, two) * 1e3 == pytest.approx(0.452, rel=0.005)


@given(st.complex_numbers(max_magnitude=1e-2), st.complex_numbers(max_magnitude=1e-2))
def test_fault_and_monitor_currents_add_as_phasors(fault, monitor):
    low, high = total_hazard_bounds(abs(fault), abs(monitor))
    assert low - 1e-12 <= abs(fault + monitor) <= high + 1e-12


@pytest.mark.parametrize(
    ("mains", "farads", "microamperes"),
    [(US, 2.2e-9, 99.5), (EU, 2.2e-9, 159), (US, 4.7e-9, 213), (EU, 4.7e-9, 340)],
)
def test_the_step_of_one_device(mains, farads, microamperes):
    assert device_step(mains, farads) * 1e6 == pytest.approx(microamperes, rel=0.005)


@pytest.mark.parametrize(("devices", "milliamperes"), [(10, 2.126), (20, 4.253)])
def test_many_good_devices_reach_the_alarm_by_themselves(devices, milliamperes):
    assert build_up(US, [4.7e-9] * devices) * 1e3 == pytest.approx(milliamperes, rel=0.005)


def test_cable_adds_about_the_trade_rule_of_a_microampere_a_foot():
    assert build_up(US, [], cable=0.3048) * 1e6 == pytest.approx(1.4, rel=0.02)


@pytest.mark.parametrize(
    ("first", "second", "picture"),
    [
        (60, 60, "balanced"),
        (59.48, 61.54, "balanced"),
        (90, 30, "unbalanced"),
        (84.85, 84.85, "mixed_leakage"),
        (114.26, 21.17, "mixed_leakage"),
        (119.98, 1.357, "first_fault"),
        (0, 120, "first_fault"),
        (118.57, 10.68, "first_fault"),
        (20, 15, "not_this_supply"),
    ],
)
def test_the_line_voltage_guide(first, second, picture):
    assert read_line_voltages(first, second, 120).picture == picture
    assert read_line_voltages(second, first, 120).picture == picture


passive = st.builds(
    lambda ohms, farads: shunt(ohms, farads, US), st.floats(1e3, 1e8), st.floats(0, 1e-6)
)


@given(passive, passive, passive)
def test_adding_leakage_never_lowers_the_ceiling_of_the_hazard_kind(one, two, more):
    before = ceiling_from_hazard(max(hazard_current(US, one, two)))
    assert ceiling_from_hazard(max(hazard_current(US, one + more, two))) >= before
    assert ceiling_from_hazard(max(hazard_current(US, one, two + more))) >= before


@given(st.floats(1, 1e8), st.floats(1, 1e8), st.floats(0, 1e-6), st.floats(0, 1e-6))
def test_adding_leakage_never_lowers_the_ceiling_of_the_resistance_kind(r1, r2, c1, c2):
    low_r, high_r = sorted((r1, r2))
    low_c, high_c = sorted((c1, c2))
    assert ceiling_from_insulation(US, low_r, high_c) >= ceiling_from_insulation(US, high_r, low_c)


@given(passive, passive, st.floats(1, 1e6))
def test_the_resistance_ceiling_with_the_true_capacitance_holds_for_a_person(one, two, body):
    whole = one + two
    resistance = 1 / whole.real
    ceiling = ceiling_from_insulation(US, resistance, whole.imag / US.angular)
    person = US.voltage * abs(two / body / (whole + 1 / body))
    assert person <= ceiling * (1 + 1e-9)


@pytest.mark.parametrize(
    "call",
    [
        lambda: ceiling_from_hazard(-1e-3),
        lambda: ceiling_from_hazard(1e-3, -0.1),
        lambda: ceiling_from_hazard(float("nan")),
        lambda: ceiling_from_insulation(EU, -5),
        lambda: ceiling_from_insulation(EU, 1e6, -1e-9),
        lambda: alarm_test_resistor(0),
        lambda: total_hazard_bounds(-1, 0),
        lambda: read_line_voltages(-1, 1, 120),
        lambda: read_line_voltages(1, 1, 0),
    ],
)
def test_impossible_readings_are_refused(call):
    with pytest.raises(InvalidValue):
        call()
