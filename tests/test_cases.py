"""Own cases told in the record's words: safety and usefulness side by side."""

from pathlib import Path
from typing import Any

import pytest
import yaml
from random_records import FAILING, Tree, complete_checks, passing_check, record

from triage.assessment import Assessment, assess
from triage.care import URGENCY
from triage.disposition import Level
from triage.knowledge import knowledge
from triage.site import no_site

CASES: list[dict[str, Any]] = yaml.safe_load(
    (Path(__file__).parent / "cases" / "stories.yaml").read_text(encoding="utf-8")
)["cases"]
SUPPLY = {"kind": "earthed", "voltage": "230 V", "frequency": "50 Hz"}


def tree_of(case: dict[str, Any]) -> Tree:
    """A record from the short form of a case."""
    item = dict(zip(("kind", "power", "supply"), case.get("item", "").split(), strict=False))
    tree: Tree = {
        "schema": "1", "id": f"{CASES.index(case):032x}", "place": {"area": case["area"]},
        "persons": [{"id": "p1", "who": "staff"} | case.get("person", {})],
        "statements": [{"id": "s1"} | case["say"]],
        "scene": case.get("scene", {}),
        "items": [{"id": "it"} | item] if item else [],
        "contacts": [{"id": "c1", "person": "p1", "items": ["it"]} | case.get("contact", {})]
        if item else [],
        "event": {"at": "2026-01-14 10:30"} | case.get("event", {}),
        "surroundings": {"floor": "vinyl", "footwear": "ordinary"},
        "supply": SUPPLY | case.get("supply", {}),
    }  # fmt: skip
    if "rh" in case:
        tree["surroundings"] |= {"humidity": f"{case['rh']} %RH", "humidity_where": "at_place",
                                 "humidity_at": "2026-01-14 10:30"}  # fmt: skip
    for field in ("condition", "casters"):
        if field in case:
            tree["items"][0][field] = case[field]
    if case.get("complete"):
        tree["event"] |= {"electrosurgery_active": "no", "pulse_delivered": "no",
                          "line_event": "no", "pins_touched": "no"}  # fmt: skip
        tree["scene"] = {"changes": ["none"], "dependence": "none"}
        tree["checks"] = complete_checks(tree)
    tree.setdefault("checks", []).extend(_checks(case, tree))
    return tree


def _checks(case: dict[str, Any], tree: Tree) -> list[Tree]:
    named = dict(case.get("checks", {})) | dict.fromkeys(case.get("extra", []), "pass")
    found = []
    for kind, result in named.items():
        check = passing_check(f"x{kind}", kind, tree["items"][0])
        if result == "fail":
            check |= {"result": "fail"} | ({"value": FAILING[kind]} if kind in FAILING else {})
        found.append(check)
    return found


def judged(case: dict[str, Any]) -> Assessment:
    return assess(record(tree_of(case)), no_site())


def mechanism(cause: str) -> str:
    return knowledge().causes[cause].mechanism


def truth_mechanism(case: dict[str, Any]) -> str:
    truth = str(case["truth"])
    return truth if truth in ("static", "mains", "other", "unsettled") else mechanism(truth)


def only_a_defect(case: dict[str, Any], a: Assessment) -> bool:
    """The only electrical fact is a defect found by a check."""
    return bool(a.evidence.defects) and "static" in case["first"]


@pytest.mark.parametrize("case", CASES, ids=lambda c: c["id"])
def test_no_case_gets_a_forbidden_conclusion(case):
    a = judged(case)
    assert a.headline.name.lower() in case["accept"], a.gate.shut_by
    assert URGENCY.index(a.care.urgency) >= URGENCY.index(case.get("care", "route"))
    if truth_mechanism(case) == "mains":
        assert a.headline > Level.STATIC_CONTROLS
        assert mechanism(a.posterior.ranked[0]) != "static" or only_a_defect(case, a)
    if case.get("open"):
        assert a.sensitivity.firmness != "stable"


def _useful(case: dict[str, Any], a: Assessment) -> bool:
    """One of the first three checks can tell the truth from its rivals."""
    family = {truth_mechanism(case), "mains"}
    return any(
        n.mandatory or {mechanism(c) for c in n.kind.separates} & family
        for n in a.next_checks[:3]
    )  # fmt: skip


def test_the_figures_over_all_cases(capsys):
    found = [(case, judged(case)) for case in CASES]
    first = [mechanism(a.posterior.ranked[0]) in c["first"] for c, a in found]
    among = [
        truth_mechanism(c) in {mechanism(x) for x in a.posterior.ranked[:3]}
        for c, a in found if c["truth"] != "unsettled"
    ]  # fmt: skip
    exact = [
        c["truth"] in a.posterior.ranked[:3]
        for c, a in found if c["truth"] in knowledge().causes
    ]  # fmt: skip
    static = [(c, a) for c, a in found if truth_mechanism(c) == "static"]
    complete = [a for c, a in static if c.get("complete")]
    open_cases = [(c, a) for c, a in found if a.next_checks]
    useful = [_useful(c, a) for c, a in open_cases]
    severe = [a.headline >= Level.WITHDRAW for c, a in static if "withdraw" not in c["accept"]]
    let_go = sum(a.headline == Level.STATIC_CONTROLS for a in complete)
    with capsys.disabled():
        print(
            f"\n{len(CASES)} cases. safety: defensible first rank {sum(first)}/{len(first)}, "
            f"true family among the first three {sum(among)}/{len(among)}, the very "
            f"cause {sum(exact)}/{len(exact)}, useful check "
            f"{sum(useful)}/{len(useful)}; usefulness: {let_go}/{len(complete)} complete "
            f"static truths let go, {sum(severe)}/{len(severe)} severe"
        )
        for (c, a), good in zip(found, first, strict=True):
            if not good:
                print(f"  {c['id']}: first {a.posterior.ranked[:3]}")
    assert len(CASES) >= 80
    assert sum(first) >= 0.95 * len(first)
    assert sum(among) >= 0.97 * len(among)
    assert sum(useful) >= 0.9 * len(useful)
    assert let_go >= 0.75 * len(complete)
    assert sum(severe) <= 0.1 * len(severe)
