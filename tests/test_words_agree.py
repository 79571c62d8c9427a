"""The words of the record and the words of the tables are the same words."""

import re

import pytest

from triage import words as w
from triage.check_table import cannot_be_released, check_kinds
from triage.fields import table as rows_of
from triage.incident import Check, Item, Scene, Statement
from triage.involvement import FIXED, OBJECTS
from triage.knowledge import FACTS, knowledge
from triage.materials import load as load_materials
from triage.tables import table
from triage.validity import DESTROYING, MAINS_KINDS, MAINS_POWER

ROWS = {name: row for part in (Check, Item, Scene, Statement) for name, row in rows_of(part)}
STATED = {
    "sensation": w.SENSATION, "timing": w.TIMING, "activity": w.ACTIVITY,
}  # fmt: skip


@pytest.mark.parametrize(("mine", "theirs"), [("FLOOR", "floors"), ("FOOTWEAR", "footwear")])
def test_every_word_for_floor_and_footwear_has_its_material_and_the_reverse(
    mine: str, theirs: str
) -> None:
    assert set(getattr(load_materials(), theirs)) == set(getattr(w, mine)) | {"unknown"}


def test_every_word_for_wheels_has_its_material_and_the_reverse() -> None:
    assert set(load_materials().casters) - {"unknown"} == set(w.CASTERS) - {"none"}


@pytest.mark.parametrize("finding", STATED)
def test_every_answer_of_the_record_is_a_state_of_its_finding_and_the_reverse(finding: str) -> None:
    assert set(knowledge().findings[finding].likelihood) == set(STATED[finding])


@pytest.mark.parametrize("finding", ["sensation", "timing"])
def test_the_order_of_an_answer_is_the_order_of_its_finding(finding: str) -> None:
    row = knowledge().findings[finding]
    order = {word: each[0] for word, each in STATED[finding].items()}
    assert row.adverse == {word for word, place in order.items() if place >= 1}
    assert row.reassuring == {word for word, place in order.items() if place == -1}


@pytest.mark.parametrize(
    "name", [n for n, row in rows_of(Statement) if set(row.words) == {"yes", "no"}]
)
def test_every_yes_or_no_of_a_statement_is_a_finding_and_in_the_same_order(name: str) -> None:
    if name == "interpreter":
        assert name not in knowledge().findings
        return
    row = knowledge().findings[name]
    assert set(row.likelihood) == {"yes", "no"}
    assert ("yes" in row.adverse) == (ROWS[name].words["yes"][0] == 1)
    assert ("no" in row.reassuring) == (ROWS[name].words["no"][0] == -1)


def test_every_kind_of_item_can_be_released_by_a_set_of_checks_or_is_refused() -> None:
    demanded = {kind for row in table("checks")["mandatory"] for kind in row["kinds"]}
    refused = set(cannot_be_released())
    assert demanded | refused == set(w.ITEM_KIND)
    assert not demanded & refused


def test_every_kind_of_item_that_a_room_of_the_program_names_is_a_word() -> None:
    named = OBJECTS | FIXED | MAINS_KINDS
    named |= {kind for each in check_kinds().values() for kind in each.applies_to}
    assert named <= set(w.ITEM_KIND)
    assert not OBJECTS & FIXED and not FIXED & MAINS_KINDS


def test_supplies_and_contacts_of_the_mandatory_table_are_words_of_the_record() -> None:
    rows = table("checks")["mandatory"]
    assert {word for row in rows for word in row["supplies"]} <= {*w.SUPPLY, "none", "any"}
    assert {word for row in rows for word in row["contacts"]} <= {
        "plain",
        "wet",
        "two_metal",
        "any",
    }
    accepted = {
        word for kind in check_kinds().values() for way in kind.accepts for word in way.supplies
    }
    assert accepted <= {*w.SUPPLY, "any", "own_source"}


def test_what_destroys_evidence_is_an_adverse_change_of_the_record() -> None:
    assert DESTROYING <= set(w.CHANGES)
    assert all(w.CHANGES[word][0] >= 1 for word in DESTROYING)
    assert set(w.CHANGES) - DESTROYING == {"none", "moved", "unplugged", "powered_down"}


def test_a_change_before_a_check_is_a_change_of_the_scene() -> None:
    assert set(ROWS["disturbed"].words) == set(w.CHANGES)
    assert all(ROWS["disturbed"].words[word][0] >= 1 for word in DESTROYING)


def test_powered_from_the_mains_means_the_same_everywhere() -> None:
    assert MAINS_POWER <= set(w.POWER)
    assert {word for word in w.POWER if word.startswith("mains")} == MAINS_POWER
    assert {word.removeprefix("mains_") for word in MAINS_POWER} <= set(w.TEST_STATE)


def test_every_sign_and_fact_that_a_red_flag_names_can_be_recorded() -> None:
    flags = knowledge().red_flags.values()
    assert {sign for flag in flags for sign in flag.signs} <= set(w.SIGNS)
    assert {fact for flag in flags for fact in flag.facts} == FACTS


@pytest.mark.parametrize("sign", [word for word, (order, _) in w.SIGNS.items() if order == 2])
def test_every_grave_sign_raises_a_red_flag(sign: str) -> None:
    assert any(sign in flag.signs for flag in knowledge().red_flags.values())


@pytest.mark.parametrize("answer", [word for word, (order, _) in w.SENSATION.items() if order == 2])
def test_every_grave_sensation_raises_a_red_flag(answer: str) -> None:
    assert any(("sensation", answer) in flag.findings for flag in knowledge().red_flags.values())


def test_every_check_that_clears_a_red_flag_exists() -> None:
    flags = knowledge().red_flags.values()
    named = {check for flag in flags for check in (*flag.passes, *(m.check for m in flag.measured))}
    assert named <= set(check_kinds())


def test_priors_are_given_for_every_care_area_of_the_record() -> None:
    # Another place has no row of its own and takes the mixture of all.
    assert set(knowledge().area_priors) == set(w.AREA) - {"other"}


@pytest.mark.parametrize("cause", knowledge().causes.values(), ids=lambda each: each.id)
def test_what_closes_a_cause_exists(cause) -> None:
    assert cause.closing_check is None or cause.closing_check in check_kinds()
    if cause.closing_answer is not None:
        assert re.split(r"[ :=]", cause.closing_answer)[0]
