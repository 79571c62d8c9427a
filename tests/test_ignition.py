"""Ignition by a body spark against published minimum energies, and the trap in their units."""

from math import log

import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy import stats

from triage.errors import InvalidValue, OutOfRange
from triage.estimate import Estimate
from triage.physics.discharge import voltage_for_energy
from triage.physics.ignition import can_ignite, checked_solvent_energy, is_priority, with_oxygen


# Body of 130 pF: mJ and the voltage that holds it.
@pytest.mark.parametrize(
    ("millijoules", "kilovolts"),
    [(0.65, 3.16), (0.28, 2.08), (0.19, 1.71), (0.14, 1.47), (0.016, 0.50), (0.0012, 0.14)],
)
def test_the_voltage_at_which_a_body_reaches_an_ignition_energy(millijoules, kilovolts):
    assert voltage_for_energy(130e-12, millijoules * 1e-3) == pytest.approx(kilovolts * 1e3, abs=6)


# A web table prints ethanol 28, propane 25, acetone 55 "mJ" beside hydrogen 0.016: units of 0.01.
@pytest.mark.parametrize("millijoules", [28, 25, 55, 0.0028])
def test_an_energy_in_the_wrong_unit_is_refused(millijoules):
    with pytest.raises(OutOfRange, match="minimum ignition energy"):
        checked_solvent_energy(millijoules * 1e-3)


@pytest.mark.parametrize("millijoules", [0.1, 0.65, 2.0])
def test_an_energy_of_a_solvent_passes(millijoules):
    assert checked_solvent_energy(millijoules * 1e-3) == millijoules * 1e-3


@pytest.mark.parametrize("millijoules", [0.099, 2.01])
def test_just_outside_the_range_of_solvents_an_energy_is_refused(millijoules):
    with pytest.raises(OutOfRange, match="covers 0.0001 to 0.002 J"):
        checked_solvent_energy(millijoules * 1e-3)


def test_oxygen_lowers_the_energy_from_air_to_its_own_value():
    assert with_oxygen(0.19e-3, 0.0012e-3, 0.21) == pytest.approx(0.19e-3)
    assert with_oxygen(0.19e-3, 0.0012e-3, 1.0) == pytest.approx(0.0012e-3)
    # Halfway between 21 and 100 % the energy is the geometric mean of the two.
    assert with_oxygen(4e-4, 1e-6, 0.605) == pytest.approx(2e-5)


@given(st.floats(0.21, 1), st.floats(0, 0.5))
def test_more_oxygen_never_makes_ignition_harder(fraction, more):
    richer = min(fraction + more, 1.0)
    assert with_oxygen(2e-4, 2e-6, richer) <= with_oxygen(2e-4, 2e-6, fraction) * (1 + 1e-12)


def test_the_chance_of_ignition_is_the_closed_form():
    energy = Estimate.lognormal(0.3e-3, {"v": 1.2, "model_doubt": 1.1}, "J")
    found = can_ignite(energy, 0.28e-3)
    assert found.value == pytest.approx(stats.norm.cdf(log(0.3 / 0.28) / (1.2**2 + 1.1**2) ** 0.5))
    assert found.low < found.value < found.high


@pytest.mark.parametrize(
    ("felt", "wet", "oxygen", "expected"),
    [
        (True, True, False, True),
        (True, False, True, True),
        (True, False, False, False),
        (True, None, False, True),
        (None, True, False, True),
        (False, True, True, False),
    ],
)
def test_a_shock_beside_fuel_or_oxygen_is_a_priority_and_unknown_counts(
    felt, wet, oxygen, expected
):
    assert is_priority(felt, wet, oxygen) is expected


@pytest.mark.parametrize(
    "attempt",
    [
        lambda: with_oxygen(1e-4, 1e-6, 0.1),
        lambda: with_oxygen(1e-4, 1e-6, 1.01),
        lambda: with_oxygen(1e-6, 1e-4, 0.5),
        lambda: can_ignite(Estimate.exact(1e-3, "J"), 0.0),
    ],
)
def test_what_cannot_be_is_refused(attempt):
    with pytest.raises(InvalidValue):
        attempt()
