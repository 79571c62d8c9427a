"""The posterior of whole assessments against the formula written out, over a thousand records.

Everything is built anew here from the tables as they are filed: likelihoods, tempering, cap,
allowance, floor under joint passes, limits of the physics factor, and what the physics replaces.
Only which answers stand on record and the physics factor itself come from the program.
"""

import math
from functools import cache
from typing import Any

import pytest
from fail_safe_support import trees
from random_records import record

from triage.assessment import Assessment, assess
from triage.site import no_site
from triage.tables import table

CHUNKS, SIZE = 6, 170


@cache
def filed() -> dict[str, Any]:
    return table("findings") | {"causes": {row["id"]: row for row in table("causes")["causes"]}}


@cache
def chances(finding: str) -> dict[str, dict[str, float]]:
    """State to cause to tempered likelihood, from the row as filed."""
    row = next(each for each in filed()["findings"] if each["id"] == finding)
    tau, found = float(filed()["tempering"][row["group"]]), {}
    if row["kind"] == "yes_no":
        plain = {c: {"yes": float(p), "no": 1 - float(p)} for c, p in row["likelihood"].items()}
    else:
        plain = {
            c: dict(zip(row["states"], map(float, weights), strict=True))
            for c, weights in row["likelihood"].items()
        }
    for cause, weights in plain.items():
        shares = {s: (w / sum(weights.values())) ** tau for s, w in weights.items()}
        for state, share in shares.items():
            found.setdefault(state, {})[cause] = share / sum(shares.values())
    return found


def group_of(finding: str) -> str:
    return str(next(each["group"] for each in filed()["findings"] if each["id"] == finding))


def written_out(a: Assessment) -> dict[str, float]:
    """P(cause) by the formula, cause by cause, in plain products."""
    observed = dict(a.evidence.observed)
    if any(each.static is not None for each in a.exposure.causes.values()):
        for replaced in ("humidity", "ground_path", "casters"):
            observed.pop(replaced, None)
    causes = list(a.posterior.causes)
    prior = dict(zip(causes, a.posterior.prior, strict=True))
    story = {c: prior[c] * _factor(a, c) for c in causes}
    groups: dict[str, dict[str, float]] = {}
    reading = dict.fromkeys(causes, 1.0)
    passes = dict.fromkeys(causes, 1.0)
    any_pass = False
    for name, seen in observed.items():
        row, group = chances(name)[seen.state], group_of(name)
        if seen.measured and group == "tests" and seen.state == "no":
            any_pass = True
            target = passes
        elif seen.measured:
            target = reading
        else:
            target = groups.setdefault(group, dict.fromkeys(causes, 1.0))
        for c in causes:
            target[c] *= row[c]
    for group in groups.values():
        best = max(group.values())
        for c in causes:
            story[c] *= max(group[c], best / float(filed()["cap_odds"]))
    whole, wrong = math.fsum(story.values()), float(filed()["wrong_story"])
    doubtful = any(
        n in observed and observed[n].state == "yes" for n in ("wet_contact", "recent_change")
    )
    raw = {}
    for c in causes:
        least = min(float(filed()["causes"][c]["passes_together"]) * (2 if doubtful else 1), 1.0)
        joint = max(passes[c], least) if any_pass else 1.0
        raw[c] = ((1 - wrong) * story[c] / whole + wrong * prior[c]) * reading[c] * joint
    return {c: p / math.fsum(raw.values()) for c, p in raw.items()}


def _factor(a: Assessment, cause: str) -> float:
    """The physics factor, held to its limits: 0.2 to 5 for mains, 0.01 to 5 for static."""
    each, row = a.exposure.causes.get(cause), filed()["causes"][cause]
    if each is None or not row.get("estimate"):
        assert each is None or each.factor == 1.0
        return 1.0
    low = {"mains": 0.2, "static": 0.01}.get(row["mechanism"], 1.0)
    assert low <= each.factor <= 5.0
    return each.factor


@pytest.mark.parametrize("chunk", range(200, 200 + CHUNKS))
def test_every_posterior_is_the_formula_and_its_weights_add_up(chunk):
    driven = measured = 0
    for _, tree in trees(chunk, SIZE):
        a = assess(record(tree), no_site())
        wanted = written_out(a)
        assert a.posterior.probability == pytest.approx(
            [wanted[c] for c in a.posterior.causes], abs=1e-9
        )
        one, two = a.posterior.pair
        odds = 10 * math.log10(wanted[one] / wanted[two])
        assert math.fsum(w.decibans for w in a.posterior.weights) == pytest.approx(odds, abs=1e-9)
        driven += "driven" in a.evidence.observed
        measured += any(o.measured for o in a.evidence.observed.values())
    assert driven > 10 and measured > 50
