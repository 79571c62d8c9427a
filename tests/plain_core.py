"""The ranking stripped to Bayes' rule, and the same network built in two libraries of others.

Plain: no tempering, no cap, no allowance for a wrong story, no floor under joint passes, no physics.
"""

import dataclasses
import math
import random
import warnings
from collections.abc import Callable, Mapping, Sequence
from typing import Any

import pytest

from triage.knowledge import Knowledge, knowledge
from triage.told import Observed

Query = Callable[[Mapping[str, str]], list[float]]
"""From finding ids and their answers to P(cause), in the order of the table of causes."""
LIBRARIES = ("pgmpy", "pyagrum")
TOO_HEAVY = (
    "{} is not installed: with what it needs it takes over 100 MB, so it is no part of the test set; "
    "the comparison with enumeration always runs (test_diagnosis.py)"
)


def plain_knowledge() -> Knowledge:
    """The shipped tables with everything switched off that is not Bayes' rule."""
    k = knowledge()
    findings = {}
    for name, row in k.findings.items():
        logs = {s: {c: math.log(p) for c, p in r.items()} for s, r in row.likelihood.items()}
        findings[name] = dataclasses.replace(row, tempering=1.0, tempered=logs)
    causes = {c: dataclasses.replace(v, passes_together=1e-300) for c, v in k.causes.items()}
    return dataclasses.replace(
        k, findings=findings, causes=causes, cap_log=math.inf, wrong_story=0.0
    )


def random_case(rng: random.Random, k: Knowledge) -> list[Observed]:
    """Random answers to up to all findings, told or measured."""
    names = rng.sample(sorted(k.findings), rng.randint(0, len(k.findings)))
    rows = [k.findings[name] for name in names]
    return [
        Observed(
            row, rng.choice(sorted(row.likelihood)), row.measured or rng.random() < 0.2, "said"
        )
        for row in rows
    ]


def network(library: str, priors: Mapping[str, float]) -> Query:
    """The same network in a library: one node for the cause, one child for every finding."""
    with warnings.catch_warnings():
        warnings.simplefilter("ignore")  # its own imports warn about its own future
        pytest.importorskip(library, reason=TOO_HEAVY.format(library))
        return {"pgmpy": _pgmpy, "pyagrum": _pyagrum}[library](list(priors.values()))


def _tables() -> list[tuple[str, list[str], list[list[float]]]]:
    """Every finding with its states and, for each state, P(state | cause) over causes."""
    return [
        (name, sorted(row.likelihood),
         [[row.likelihood[s][c] for c in knowledge().causes] for s in sorted(row.likelihood)])
        for name, row in sorted(knowledge().findings.items())
    ]  # fmt: skip


def _pgmpy(priors: Sequence[float]) -> Query:
    import logging

    from pgmpy.factors.discrete import TabularCPD
    from pgmpy.inference import VariableElimination
    from pgmpy.models import DiscreteBayesianNetwork

    logging.getLogger("pgmpy").setLevel(logging.ERROR)
    tables = _tables()
    net = DiscreteBayesianNetwork([("cause", name) for name, _, _ in tables])
    net.add_cpds(TabularCPD("cause", len(priors), [[p] for p in priors]))
    for name, states, rows in tables:
        net.add_cpds(TabularCPD(name, len(states), rows, ["cause"], [len(priors)]))
    places = {name: states for name, states, _ in tables}
    inference = VariableElimination(net)

    def ask(seen: Mapping[str, str]) -> list[float]:
        evidence = {name: places[name].index(state) for name, state in seen.items()}
        found: Any = inference.query(["cause"], evidence=evidence, show_progress=False)
        return [float(p) for p in found.values]

    return ask


def _pyagrum(priors: Sequence[float]) -> Query:
    import pyagrum

    tables = _tables()
    net = pyagrum.BayesNet()
    net.add(pyagrum.RangeVariable("cause", "", 0, len(priors) - 1))
    net.cpt("cause")[:] = list(priors)
    for name, states, rows in tables:
        net.add(pyagrum.LabelizedVariable(name, "", states))
        net.addArc("cause", name)
        for number, column in enumerate(zip(*rows, strict=True)):
            net.cpt(name)[{"cause": number}] = list(column)
    inference = pyagrum.LazyPropagation(net)

    def ask(seen: Mapping[str, str]) -> list[float]:
        inference.setEvidence(dict(seen))
        inference.makeInference()
        return [float(p) for p in inference.posterior("cause").toarray()]

    return ask
