"""Ranges contain their point, and firmness follows the lead."""

import random

import pytest
from random_records import clean_tree, random_tree, record

from triage.assessment import assess
from triage.sensitivity import LEANING, STABLE
from triage.site import no_site


def assessments():
    for seed in range(120):
        rng = random.Random(seed)
        tree = random_tree(rng) if seed % 3 else clean_tree(rng, "device")
        yield assess(record(tree), no_site())


def test_every_range_contains_its_point_and_stays_between_0_and_1():
    for a in assessments():
        for cause, each in a.sensitivity.ranges.items():
            assert 0 <= each.low <= each.point <= each.high <= 1
            assert each.point == pytest.approx(a.posterior.of(cause), abs=1e-15)
        mains = a.sensitivity.mains
        assert mains.low <= mains.point <= mains.high
        assert mains.point == pytest.approx(a.posterior.family("mains"), abs=1e-12)


def test_few_facts_are_never_called_stable():
    a = assess(record({"schema": "1", "id": "1" * 32, "place": {"area": "clinic"}}), no_site())
    assert a.sensitivity.firmness != "stable"


def test_firmness_follows_the_chance_that_the_first_rank_is_kept():
    words = set()
    for a in assessments():
        kept, word = a.sensitivity.first_kept, a.sensitivity.firmness
        words.add(word)
        wanted = "stable" if kept >= STABLE else "leaning" if kept >= LEANING else "open"
        assert word == wanted and 0.5 <= kept <= 1
    assert words == {"stable", "leaning", "open"}


def test_three_lines_of_the_weights_are_named_as_what_it_hangs_on():
    for a in assessments():
        labels = {w.label for w in a.posterior.weights}
        assert len(a.sensitivity.hangs_on) == 3
        assert set(a.sensitivity.hangs_on) <= labels
        named = [abs(w.decibans) for w in a.posterior.weights if w.label in a.sensitivity.hangs_on]
        others = [
            abs(w.decibans) for w in a.posterior.weights if w.label not in a.sensitivity.hangs_on
        ]
        assert min(named) >= max(others, default=0)


def test_the_closed_form_is_near_the_draws_in_the_middle():
    """Against 4000 plain draws of the same noise with NumPy, where P lies between 0.1 and 0.9."""
    import numpy as np

    a = assess(record({"schema": "1", "id": "2" * 32, "place": {"area": "ward"}}), no_site())
    rng = np.random.default_rng(7)
    p = np.array(a.posterior.probability)[:, None]
    noisy = p * np.exp(0.7 * rng.standard_normal((len(p), 4000)))
    share = noisy / noisy.sum(axis=0)
    mains = [a.posterior.causes.index(c) for c in a.sensitivity.ranges if c in _mains()]
    low, high = np.quantile(share[mains].sum(axis=0), [0.05, 0.95])
    assert a.sensitivity.mains.low == pytest.approx(low, abs=0.02)
    assert a.sensitivity.mains.high == pytest.approx(high, abs=0.03)


def _mains():
    from triage.knowledge import knowledge

    return knowledge().family("mains")
