"""Causes, findings, priors and red flags: loaded from the tables and held against each other."""

import math
from collections.abc import Mapping
from functools import cache
from typing import Any

from triage.citation import Citation
from triage.errors import BadTable
from triage.frozen import frozen
from triage.tables import citation, table

MECHANISMS = ("static", "mains", "other")
FLOORS = ("hold", "withdraw", "isolate")
FACTS = frozenset({
    "live_contact", "hot", "two_driven_signs", "breach", "wet_item", "wet_contact",
    "patient_connected", "damaged", "altered",
    "scene_changed", "heart_conductor", "pins_touched", "monitor_changed_since", "unit_disputed",
})  # fmt: skip
"""Facts of the record that a red flag may name beside findings and signs."""


@frozen
class Cause:
    """One hypothesis that explains the complaint."""

    id: str
    name: str
    mechanism: str
    danger: str
    what: str
    speaks_for: str
    speaks_against: str
    first_action: str
    never_conclude: str
    passes_together: float
    estimate: str | None
    needs_isolated_supply: bool
    closing_answer: str | None
    closing_check: str | None


@frozen
class Finding:
    """One observable and how probable each of its states is under each cause.

    Args:
        likelihood: state to cause to P(state | cause), states summing to 1.
        tempered: state to cause to the logarithm of the tempered likelihood, renormalised over
            the states, so that the expected posterior equals the prior.
    """

    id: str
    name: str
    group: str
    measured: bool
    deciding: bool
    adverse: frozenset[str]
    reassuring: frozenset[str]
    reason: str
    tempering: float
    likelihood: Mapping[str, Mapping[str, float]]
    tempered: Mapping[str, Mapping[str, float]]


@frozen
class Measured:
    """A measured value that a clearing rule asks for: check id and SI bound to exceed."""

    check: str
    above: str


@frozen
class RedFlag:
    """One row of the closed table of red flags."""

    id: str
    name: str
    findings: tuple[tuple[str, str], ...]
    signs: frozenset[str]
    facts: frozenset[str]
    scope: str
    floor: str
    passes: tuple[str, ...]
    measured: tuple[Measured, ...]
    role: str
    never: str


@frozen
class Knowledge:
    """Everything judged about causes and findings."""

    causes: Mapping[str, Cause]
    findings: Mapping[str, Finding]
    red_flags: Mapping[str, RedFlag]
    priors: Mapping[str, Mapping[str, float]]
    area_priors: Mapping[str, Mapping[str, str]]
    reference: Mapping[str, Mapping[str, Any]]
    mains_factor: tuple[float, float]
    static_factor: tuple[float, float]
    plausible_above: float
    residual_at_most: float
    cap_log: float
    wrong_story: float
    likelihood_noise: float
    prior_noise: float
    causes_citation: Citation
    findings_citation: Citation

    def family(self, mechanism: str) -> tuple[str, ...]:
        """Ids of the causes of one mechanism."""
        return tuple(c.id for c in self.causes.values() if c.mechanism == mechanism)


@cache
def knowledge() -> Knowledge:
    """The shipped knowledge, cross-checked.

    Raises:
        BadTable: the tables contradict each other.
    """
    causes_table, findings_table = table("causes"), table("findings")
    causes = {row["id"]: _cause(row) for row in causes_table["causes"]}
    findings = {
        row["id"]: _finding(row, findings_table["tempering"], tuple(causes))
        for row in findings_table["findings"]
    }
    flags = {row["id"]: _red_flag(row, findings) for row in table("red_flags")["red_flags"]}
    factor = causes_table["physics_factor"]
    return Knowledge(
        causes,
        findings,
        flags,
        {name: _prior(name, row, causes) for name, row in causes_table["priors"].items()},
        causes_table["area_priors"],
        causes_table["reference_conditions"],
        (float(factor["mains"][0]), float(factor["mains"][1])),
        (float(factor["static"][0]), float(factor["static"][1])),
        float(causes_table["static_plausible_above"]),
        float(causes_table["residual_at_most"]),
        math.log(findings_table["cap_odds"]),
        float(findings_table["wrong_story"]),
        float(findings_table["likelihood_noise"]),
        float(findings_table["prior_noise"]),
        citation(causes_table, "data/causes.yaml"),
        citation(findings_table, "data/findings.yaml"),
    )


def _probability(value: Any, where: str) -> float:
    if not isinstance(value, int | float) or not 0 < value < 1:
        raise BadTable(f"{where}: {value!r} is not a probability strictly between 0 and 1")
    return float(value)


def _cause(row: Mapping[str, Any]) -> Cause:
    where = f"data/causes.yaml {row['id']}"
    if row["mechanism"] not in MECHANISMS:
        raise BadTable(
            f"{where}: mechanism '{row['mechanism']}' is none of {', '.join(MECHANISMS)}"
        )
    closing = {key: step[key] for step in row.get("closed_by", []) for key in step}
    return Cause(
        row["id"], row["name"], row["mechanism"], row["danger"], row["what"], row["speaks_for"],
        row["speaks_against"], row["first_action"], row["never_conclude"],
        _probability(row["passes_together"], where), row.get("estimate"),
        row.get("needs") == "isolated_supply", closing.get("answer"), closing.get("check"),
    )  # fmt: skip


def _finding(
    row: Mapping[str, Any], tempering: Mapping[str, float], causes: tuple[str, ...]
) -> Finding:
    where = f"data/findings.yaml {row['id']}"
    if set(row["likelihood"]) != set(causes):
        odd = ", ".join(sorted(set(row["likelihood"]) ^ set(causes)))
        raise BadTable(f"{where}: every cause needs a likelihood and no other; see {odd}")
    if row["group"] not in tempering:
        raise BadTable(f"{where}: group '{row['group']}' has no tempering")
    likelihood = _likelihood(row, where)
    adverse = frozenset(str(each) for each in row.get("adverse", []))
    reassuring = frozenset(str(each) for each in row.get("reassuring", []))
    if not adverse | reassuring <= set(likelihood) or adverse & reassuring:
        raise BadTable(f"{where}: adverse and reassuring must be different states of it")
    power = 1.0 if row["group"] == "driven" else float(tempering[row["group"]])
    return Finding(
        row["id"], row["name"], row["group"], row["from"] == "check", bool(row.get("deciding")),
        adverse, reassuring, row["reason"], power, likelihood, _tempered(likelihood, power),
    )  # fmt: skip


def _likelihood(row: Mapping[str, Any], where: str) -> dict[str, dict[str, float]]:
    """State to cause to probability; weights of one_of are divided by their sum."""
    cells = row["likelihood"]
    if row["kind"] == "yes_no":
        yes = {cause: _probability(value, where) for cause, value in cells.items()}
        return {"yes": yes, "no": {cause: 1 - p for cause, p in yes.items()}}
    states = [str(state) for state in row["states"]]
    found: dict[str, dict[str, float]] = {state: {} for state in states}
    for cause, weights in cells.items():
        if len(weights) != len(states):
            raise BadTable(f"{where}: {cause} has {len(weights)} numbers for {len(states)} states")
        total = sum(weights)
        for state, weight in zip(states, weights, strict=True):
            found[state][cause] = _probability(weight, where) / total
    return found


def _tempered(
    likelihood: Mapping[str, Mapping[str, float]], power: float
) -> dict[str, dict[str, float]]:
    """Logarithms of P(state | cause)^power, renormalised over the states of the finding."""
    causes = next(iter(likelihood.values()))
    total = {c: math.log(sum(row[c] ** power for row in likelihood.values())) for c in causes}
    return {
        state: {c: power * math.log(row[c]) - total[c] for c in causes}
        for state, row in likelihood.items()
    }


def _prior(name: str, row: Mapping[str, float], causes: Mapping[str, Cause]) -> dict[str, float]:
    if set(row) != set(causes):
        raise BadTable(f"data/causes.yaml priors {name}: every cause needs a prior and no other")
    total = sum(_probability(value, f"prior {name}") for value in row.values())
    return {cause: value / total for cause, value in row.items()}


def _red_flag(row: Mapping[str, Any], findings: Mapping[str, Finding]) -> RedFlag:
    where = f"data/red_flags.yaml {row['id']}"
    named = tuple((w["finding"], str(w["is"])) for w in row["when"] if "finding" in w)
    for finding, state in named:
        if finding not in findings or state not in findings[finding].likelihood:
            raise BadTable(f"{where}: no finding '{finding}' with the answer '{state}'")
    facts = frozenset(w["fact"] for w in row["when"] if "fact" in w)
    if not facts <= FACTS:
        raise BadTable(f"{where}: unknown fact {', '.join(sorted(facts - FACTS))}")
    clearing, never = row.get("cleared_by"), row.get("never", "")
    if bool(clearing) == bool(never):
        raise BadTable(f"{where}: say either cleared_by or never")
    if row["floor"] not in FLOORS or row["scope"] not in ("person", "item", "circuit", "place"):
        raise BadTable(f"{where}: unknown floor or scope")
    clearing = clearing or {"passes": [], "measured": [], "role": ""}
    return RedFlag(
        row["id"], row["name"], named, frozenset(w["sign"] for w in row["when"] if "sign" in w),
        facts, row["scope"], row["floor"], tuple(clearing["passes"]),
        tuple(Measured(m["check"], str(m["above"])) for m in clearing["measured"]),
        clearing["role"], never,
    )  # fmt: skip
