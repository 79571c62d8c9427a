"""Electrosurgery, plug pins and pulses against hand sums and printed figures."""

import pytest
from hypothesis import given
from hypothesis import strategies as st

from triage.errors import InvalidValue
from triage.physics.other_sources import (
    VACUUM_PERMITTIVITY,
    glove_capacitance,
    glove_current,
    pin_voltage,
    pulse_energy,
    strip_touch_current,
)


# e0 er A / d by hand: 0.2 mm, er 3 dry and 7 soaked.
@pytest.mark.parametrize(
    ("square_cm", "permittivity", "picofarads"), [(1, 3, 13.3), (10, 3, 133), (10, 7, 310)]
)
def test_a_glove_is_a_plate_capacitor(square_cm, permittivity, picofarads):
    found = glove_capacitance(square_cm * 1e-4, 0.2e-3, permittivity)
    assert found * 1e12 == pytest.approx(picofarads, rel=0.005)


@pytest.mark.parametrize(
    ("volts", "square_cm", "milliamperes"), [(1000, 1, 23.6), (1000, 10, 235), (3000, 10, 706)]
)
def test_an_intact_glove_passes_electrosurgery(volts, square_cm, milliamperes):
    glove = glove_capacitance(square_cm * 1e-4, 0.2e-3)
    found = glove_current(volts, 400e3, glove)
    assert found * 1e3 == pytest.approx(milliamperes, rel=0.005)


def test_the_electric_constant_is_the_one_of_scipy():
    from scipy.constants import epsilon_0

    assert pytest.approx(epsilon_0, rel=1e-9) == VACUUM_PERMITTIVITY


def test_pins_without_a_bleed_resistor_keep_the_crest():
    assert pin_voltage(325, 1e-6, bleed=None, elapsed=60) == 325


def test_pins_fall_to_a_third_after_one_time_constant():
    # IEC 60950 asks for 37 % of the crest after one second.
    assert pin_voltage(100, 1e-6, bleed=1e6, elapsed=1) == pytest.approx(37, rel=0.01)


@given(st.floats(0, 10), st.floats(0, 10))
def test_waiting_never_raises_the_pins(first, second):
    low, high = sorted((first, second))
    late, early = (pin_voltage(325, 0.1e-6, bleed=1e6, elapsed=t) for t in (high, low))
    assert late <= early


def test_one_percent_of_ninety_watt_is_the_bipolar_leakage_limit():
    # 67 mA into 200 ohm for one second, as the service manual of a 90 W output prints it.
    assert pulse_energy(0.067, 1, 200) == pytest.approx(0.90, rel=0.005)


def test_a_strip_without_earth_sums_its_leakages():
    assert strip_touch_current([100e-6] * 10) == pytest.approx(1e-3)
    assert strip_touch_current([]) == 0


@pytest.mark.parametrize(
    "call",
    [
        lambda: glove_capacitance(0, 1e-4),
        lambda: glove_capacitance(1e-4, 0),
        lambda: glove_current(-1, 1e5, 1e-11),
        lambda: glove_current(1, 0, 1e-11),
        lambda: pin_voltage(325, 0, bleed=1e6, elapsed=1),
        lambda: pin_voltage(325, 1e-6, bleed=0, elapsed=1),
        lambda: pin_voltage(325, 1e-6, bleed=1e6, elapsed=-1),
        lambda: pulse_energy(0.1, -1),
        lambda: strip_touch_current([-1e-6]),
    ],
)
def test_impossible_inputs_are_refused(call):
    with pytest.raises(InvalidValue):
        call()
