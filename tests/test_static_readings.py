"""Readings as estimates: a value with its doubt, a bound as a bound."""

import pytest
from scipy.stats import norm, truncnorm

from triage.bounds import Reading
from triage.errors import BadTable
from triage.estimate import Estimate
from triage.static_readings import beyond, cited, measured, name_of, spread, taken

WIDE = Estimate.lognormal(1e11, {"r": 3.0}, "ohm")
LIKE = {"source": "r", "row": "resistance", "what": "floor"}


def test_a_value_keeps_its_middle_and_has_the_doubt_of_its_row():
    found = measured(2e9, "ohm", **LIKE)
    assert found.median == pytest.approx(2e9)
    assert found.loadings == {"r": pytest.approx(spread("resistance"))}
    assert found.basis["r"].citation == cited("resistance")


# SciPy's truncated normal as the independent law of a lognormal cut at a bound.
@pytest.mark.parametrize(("bound", "value"), [(">", 1e9), (">", 1e11), (">", 1e13), ("<", 1e11),
                                              ("<", 1e9)])  # fmt: skip
def test_a_bound_cuts_the_assumption_like_a_truncated_normal(bound, value):
    import math

    edge = (math.log(value) - math.log(1e11)) / 3
    low, high = (edge, math.inf) if bound == ">" else (-math.inf, edge)
    law = truncnorm(low, high, loc=math.log(1e11), scale=3)
    found = beyond(Reading(value, "ohm", bound), WIDE, **LIKE)
    assert found.mean_log == pytest.approx(law.mean(), abs=0.02)
    assert found.variance_log == pytest.approx(law.var(), rel=0.02)


def test_a_bound_that_contradicts_the_first_assumption_falls_to_the_next():
    narrow = Estimate.lognormal(1e5, {"r": 0.5}, "ohm")
    found = beyond(Reading(1e9, "ohm", ">"), narrow, WIDE, **LIKE)
    assert found.median > 1e10


@pytest.mark.parametrize(("bound", "above"), [(">", 0.841), ("<", 0.159)])
def test_a_bound_that_nothing_explains_is_placed_beyond_itself(bound, above):
    narrow = Estimate.lognormal(1e5, {"r": 0.5}, "ohm")
    value = 1e9 if bound == ">" else 1.0
    found = beyond(Reading(value, "ohm", bound), narrow, **LIKE)
    assert found.probability_above(value) == pytest.approx(above, abs=0.001)
    assert norm.cdf(1) == pytest.approx(0.841, abs=0.001)


def test_every_row_that_is_taken_has_its_value_and_name():
    assert taken("pause", "duration") == 1.0
    assert taken("hazard_energy", "energy") == pytest.approx(0.35)
    assert name_of("pause").startswith("time from")
    with pytest.raises(BadTable, match="no row"):
        taken("nothing", "duration")
