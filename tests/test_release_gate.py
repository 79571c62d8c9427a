"""The release gate: its threshold, its confidence limit and its deterministic draws."""

import math
import random

import numpy as np
import pytest
from scipy.stats import binom
from test_diagnosis import CAUSES, random_observed, random_priors

import triage.release_gate as gate
from triage.diagnosis import build_case, evaluate
from triage.knowledge import knowledge
from triage.release_gate import DRAWS, UPPER_RANK, release_threshold, upper_mains
from triage.told import Observed

K = knowledge()
MAINS = [CAUSES.index(c) for c in K.family("mains")]


@pytest.mark.parametrize(("ratio", "threshold"), [(50, 0.0196), (100, 0.0099), (1000, 0.0010)])
def test_the_threshold_is_the_cost_of_a_hold_over_both_costs(ratio, threshold):
    """Pauker and Kassirer, NEJM 1980;302:1109: act where p exceeds C / (C + B)."""
    assert release_threshold(ratio) == pytest.approx(threshold, abs=5e-5)


def test_the_rank_is_the_upper_confidence_limit_of_the_95th_percentile():
    """Order statistics: P(Binomial(n, 0.95) < r) >= 0.95, by SciPy."""
    assert binom.cdf(UPPER_RANK - 1, DRAWS, 0.95) >= 0.95
    assert binom.cdf(UPPER_RANK - 2, DRAWS, 0.95) < 0.95


def test_without_noise_every_draw_is_the_plain_posterior(monkeypatch):
    import dataclasses

    still = dataclasses.replace(K, likelihood_noise=0.0, prior_noise=0.0)
    monkeypatch.setattr(gate, "knowledge", lambda: still)
    gate._noisy.cache_clear()
    try:
        for seed in range(25):
            rng = random.Random(seed)
            priors, observed = random_priors(rng), random_observed(rng)
            factors = {c: rng.uniform(0.2, 5) for c in CAUSES}
            found = evaluate(build_case(priors, observed, factors))
            assert upper_mains(priors, observed, factors) == pytest.approx(
                sum(found[i] for i in MAINS), rel=1e-9
            )
    finally:
        gate._noisy.cache_clear()


def test_the_limit_lies_over_the_point_and_is_the_same_twice_and_in_any_order():
    for seed in range(40):
        rng = random.Random(seed)
        priors, observed = random_priors(rng), random_observed(rng)
        upper = upper_mains(priors, observed, {})
        point = sum(evaluate(build_case(priors, observed, {}))[i] for i in MAINS)
        assert upper >= point
        assert upper_mains(priors, rng.sample(observed, len(observed)), {}) == upper


def test_the_draws_are_standard_normal_and_each_stream_is_its_own():
    one, other = gate._normals("sensation", "open_earth", "snap"), gate._normals("a", "b", "c")
    assert np.mean(one) == pytest.approx(0, abs=4 / math.sqrt(DRAWS))
    assert np.std(one) == pytest.approx(1, abs=0.06)
    assert abs(np.corrcoef(one, other)[0, 1]) < 0.09
    assert (gate._normals("sensation", "open_earth", "snap") == one).all()


def test_every_row_of_draws_sums_to_one_over_the_states():
    for name, row in list(K.findings.items())[:6]:
        total = sum(np.exp(gate._noisy(name, state)) for state in row.likelihood)
        assert np.allclose(total, 1, atol=1e-12)


def test_a_failed_mandatory_check_raises_the_limit_and_a_missing_one_never_lowers_it():
    """On the percentile as on the point, over the checks whose pass the gate asks for."""
    story = {"sensation": "snap", "timing": "in_gap", "repeat_at_once": "no", "others_felt": "no",
             "touched": "mains_device_on", "wet_contact": "no", "second_contact": "no"}  # fmt: skip
    tests = [f for f, row in K.findings.items() if row.group == "tests" and row.deciding]
    told = [Observed(K.findings[f], s, False, "said") for f, s in story.items()]
    passed = [Observed(K.findings[f], "no", True, "instrument") for f in tests]
    priors = K.priors["ward"]
    whole = upper_mains(priors, told + passed, {})
    for name in tests:
        rest = [o for o in passed if o.finding.id != name]
        failed = [*rest, Observed(K.findings[name], "yes", True, "instrument")]
        without = upper_mains(priors, told + rest, {})
        assert whole <= without <= upper_mains(priors, told + failed, {})


@pytest.mark.parametrize("finding", ["sensation", "timing", "repeat_at_once", "others_felt",
                                     "wet_contact", "second_contact"])  # fmt: skip
def test_the_reassuring_answer_of_a_deciding_question_gives_a_lower_limit_than_an_adverse_one(
    finding,
):
    row = K.findings[finding]
    upper = {
        s: upper_mains(K.priors["ward"], [Observed(row, s, False, "said")], {})
        for s in row.likelihood
    }
    calm = max(upper[s] for s in row.reassuring)
    adverse = [upper[s] for s in row.adverse if s not in ("heat", "thrown")]
    assert calm <= min(adverse)
