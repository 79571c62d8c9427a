"""The properties of prior, unknown answers and gate notice a program that was broken on purpose.

A property that cannot fail proves nothing: each rule is taken out here, and the very property that
guards it must find a case. The order of answers has its own breakages beside it.
"""

import random
from collections.abc import Callable
from typing import Any

import pytest
from fail_safe_support import (
    judged,
    lowered,
    only,
    site,
    standing,
    talked_down,
    trees,
    wrongly_open,
)
from random_records import Tree, clean_tree, passing_check, record
from test_fail_safe import deciding_changes
from test_neutral_things import conclusions, spelled_out

import triage.assessment
import triage.disposition
import triage.evidence
import triage.fields
from triage.assessment import assess
from triage.disposition import Level
from triage.knowledge import knowledge
from triage.site import from_plain
from triage.strict_yaml import Plain
from triage.told import Observed

Patch = pytest.MonkeyPatch

# the prior


def _floors_only_while_likely(patch: Patch) -> None:
    genuine = triage.disposition._floors

    def floors(item: Any, given: Any) -> Any:
        return genuine(item, given) if given.posterior.family("mains") > 0.01 else iter(())

    patch.setattr(triage.disposition, "_floors", floors)


def test_the_property_of_flags_and_priors_notices_floors_that_fall_with_the_probability(
    monkeypatch,
):
    cases = [tree for _, tree in trees(40, 60)]
    monkeypatch.setattr(triage.assessment, "prior", only("person_walking"))
    assert not any(talked_down(judged(tree)) for tree in cases)
    _floors_only_while_likely(monkeypatch)
    assert any(talked_down(judged(tree)) for tree in cases)


def test_the_property_of_flags_and_priors_notices_flags_that_read_the_prior(monkeypatch):
    genuine, known = triage.assessment.raise_flags, {}
    cases = [tree for _, tree in trees(41, 30)]
    plain = [judged(tree).flags for tree in cases]

    def remembering(*_: object) -> dict[str, float]:
        known.update(only("person_walking")())
        return known

    monkeypatch.setattr(triage.assessment, "prior", remembering)
    assert [judged(tree).flags for tree in cases] == plain
    monkeypatch.setattr(
        triage.assessment, "raise_flags",
        lambda *given: () if known.get("person_walking", 0) > 0.9 else genuine(*given),
    )  # fmt: skip
    assert [judged(tree).flags for tree in cases] != plain


def test_the_property_of_a_careful_site_notices_a_site_that_lowers_mains_causes(monkeypatch):
    raised = [{"cause": c, "times": "20"} for c in knowledge().family("mains")]
    careful = from_plain(Plain("site", {"schema": "1", "policy": {"raised": raised}}))
    found = record(clean_tree(random.Random(1), "device"))

    def worse() -> list[str]:
        return lowered(standing(assess(found, site())), standing(assess(found, careful)))

    assert not worse()
    genuine = triage.assessment.prior
    monkeypatch.setattr(
        triage.assessment, "prior",
        lambda area, supply, the_site: genuine(area, supply, the_site)
        if the_site is site() else only("person_walking")(),
    )  # fmt: skip
    assert worse()


# unknown answers


def _unknown_means_no(patch: Patch) -> None:
    """Reads the word "unknown" as the first reassuring word of its list."""
    genuine = triage.fields.Reader._value

    def value(self: Any, row: Any, raw: Any, path: str) -> Any:
        if row.kind == "word" and raw == "unknown":
            calm = [word for word, (order, _) in row.words.items() if (order or 0) < 0]
            return calm[0] if calm else None
        return genuine(self, row, raw, path)

    patch.setattr(triage.fields.Reader, "_value", value)


def _silence_means_no(patch: Patch) -> None:
    """Takes every finding that nobody answered for the answer "no"."""
    genuine = triage.evidence.told_findings

    def told(*given: Any) -> Any:
        found = dict(genuine(*given))
        for name, row in knowledge().findings.items():
            if set(row.likelihood) == {"yes", "no"} and not row.measured and name not in found:
                found[name] = Observed(row, "no", False, "said")
        return found.items()

    patch.setattr(triage.evidence, "told_findings", told)


def test_the_property_of_unknown_answers_notices_unknown_read_as_reassuring(monkeypatch):
    cases = [tree for _, tree in trees(70, 30)]

    def differ() -> bool:
        return any(
            conclusions(judged(spelled_out(tree))) != conclusions(judged(tree)) for tree in cases
        )

    assert not differ()
    _unknown_means_no(monkeypatch)
    assert differ()


@pytest.mark.parametrize("breaks", [None, _silence_means_no])
def test_a_record_that_says_nothing_leaves_the_prior_as_it_is(breaks, monkeypatch):
    if breaks:
        breaks(monkeypatch)
    found = judged({"schema": "1", "id": "0" * 32}).posterior
    moved = max(abs(a - b) for a, b in zip(found.prior, found.probability, strict=True))
    assert (moved > 0.01) if breaks else (moved < 1e-12)


# the gate


def _drop(name: str) -> Callable[[Patch], None]:
    return lambda patch: patch.setattr(triage.disposition, name, lambda *_: iter(()))


def _flags_do_not_shut(patch: Patch) -> None:
    genuine = triage.disposition._shut_by
    patch.setattr(
        triage.disposition, "_shut_by",
        lambda given: (text for text in genuine(given) if not text.startswith("red flag")),
    )  # fmt: skip


def opened_by_a_change(story: str) -> list[str]:
    """Deciding answers and checks whose loss does not shut the gate."""
    tree = clean_tree(random.Random(7), story)
    return [what for what, changed in deciding_changes(tree) if judged(changed).gate.open]


@pytest.mark.parametrize("breaks", [_drop("_answers_shut"), _drop("_item_shuts"), _drop("_shut_by")],
                         ids=["answers", "checks", "everything"])  # fmt: skip
def test_the_property_of_the_deciding_set_notices_a_gate_without(breaks, monkeypatch):
    assert not opened_by_a_change("device")
    breaks(monkeypatch)
    assert opened_by_a_change("device")


def _fails_as_left() -> Tree:
    """A defect that no finding of the ranking shows."""
    tree = clean_tree(random.Random(3), "device", measured=True)
    left = passing_check("x", "earth_continuity", tree["items"][0])
    tree["checks"].append(left | {"stage": "as_left", "value": "9 ohm"})
    return tree


def _burnt() -> Tree:
    tree = clean_tree(random.Random(4), "plate")
    tree["persons"][0]["signs"] = ["burn"]
    return tree


@pytest.mark.parametrize(("breaks", "case"), [
    (_flags_do_not_shut, _burnt), (_drop("_shut_by"), _fails_as_left),
], ids=["a flag stands", "a defect"])  # fmt: skip
def test_the_property_of_the_open_gate_notices_when(breaks, case, monkeypatch):
    assert not judged(case()).gate.open
    breaks(monkeypatch)
    try:
        found = wrongly_open(judged(case()))
    except AssertionError as refused:  # the assessment itself refuses to be built like that
        found = [str(refused)]
    assert found


def test_the_property_of_the_open_gate_notices_a_threshold_that_nothing_reaches(monkeypatch):
    monkeypatch.setattr(triage.disposition, "upper_mains", lambda *_: 0.9)
    a = judged(clean_tree(random.Random(5), "plate"))
    assert not a.gate.open and a.headline == Level.HOLD
