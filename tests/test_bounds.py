"""Readings, ceilings, probabilities and the basis of an estimate."""

import pytest

from triage.bounds import Basis, Ceiling, Probability, Reading
from triage.errors import InvalidValue
from triage.estimate import Estimate, product, through

VOLTS = Estimate.lognormal(1000, {"v": 0.5}, "V")


@pytest.mark.parametrize("other", [Reading(5, "uA", "<"), Ceiling(5, "A"), None, 5.0])
def test_a_bound_or_a_bare_number_never_enters_a_calculation(other):
    for attempt in (
        lambda: VOLTS.times(other, "V"),
        lambda: product("V", other, VOLTS),
        lambda: through(lambda a, b: a + b, VOLTS, other, unit="V"),
    ):
        with pytest.raises(TypeError, match="not an estimate"):
            attempt()


@pytest.mark.parametrize("other", [Reading(5, "uA"), Ceiling(5, "A")])
def test_bounds_have_no_arithmetic_of_their_own(other):
    for attempt in (lambda: other * 2, lambda: other + other, lambda: other < other):
        with pytest.raises(TypeError):
            attempt()


def test_a_ceiling_with_a_reason_against_it_does_not_hold():
    assert Ceiling(5e-6, "A").holds
    assert not Ceiling(5e-6, "A", ("monitor silenced",)).holds
    assert not Ceiling(None, "A").holds


@pytest.mark.parametrize(
    "attempt",
    [
        lambda: Reading(5, "uA", "~"),
        lambda: Basis("floor", "guessed"),
        lambda: Probability(1.2, 0, 1),
        lambda: Probability(0.5, float("nan"), 1),
    ],
)
def test_what_cannot_be_is_refused(attempt):
    with pytest.raises(InvalidValue):
        attempt()
