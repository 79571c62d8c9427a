"""The plain core against two independent libraries for Bayesian networks, equal to 1e-9."""

import random

import pytest
from plain_core import LIBRARIES, network, plain_knowledge, random_case
from test_diagnosis import random_priors

import triage.diagnosis
from triage.diagnosis import build_case, evaluate


@pytest.mark.parametrize("library", LIBRARIES)
def test_the_plain_core_equals_an_independent_library(library, monkeypatch):
    plain = plain_knowledge()
    monkeypatch.setattr(triage.diagnosis, "knowledge", lambda: plain)
    for group in range(5):
        priors = random_priors(random.Random(group))
        ask = network(library, priors)
        for seed in range(20):
            observed = random_case(random.Random(f"{group} {seed}"), plain)
            wanted = ask({o.finding.id: o.state for o in observed})
            found = evaluate(build_case(priors, observed, {}))
            assert found == pytest.approx(wanted, abs=1e-9)
