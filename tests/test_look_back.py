"""A confirmed defect opens the look-back; the ranking alone never does."""

import random

import pytest
import sample_records
from random_records import clean_tree, record

from triage import look_back as room
from triage.assessment import assess
from triage.documents.look_back import look_back_blocks, look_back_lines
from triage.errors import BadTable
from triage.site import no_site


def assessed(tree):
    return assess(record(tree), no_site())


def crushed(**outcome):
    tree = sample_records.spoiled({"items.0.condition": ["damaged"]})
    return assessed(tree | {"outcome": outcome})


def test_a_static_case_opens_none():
    a = assessed(clean_tree(random.Random(1), "cart"))
    assert a.look_back == () and look_back_blocks(a) == []


def test_a_buzzing_story_without_a_defect_opens_none():
    tree = sample_records.tree()
    tree["statements"][0] |= {"sensation": "buzz", "timing": "while_holding"}
    tree["checks"] = []
    a = assessed(tree)
    assert a.posterior.family("mains") > 0.5 and a.look_back == ()


def test_a_defect_opens_every_question():
    a = crushed()
    assert [each.question for each in a.look_back] == list(room.questions())
    assert all("Not yet done" in line for line in look_back_lines(a))
    assert {row[1] for row in look_back_blocks(a)[0]["rows"]} == {"not yet done"}


def test_an_answer_closes_its_question_and_an_empty_one_does_not():
    a = crushed(look_back=[
        {"question": "sister_units", "answer": "three found, all pass", "by": "biomedical"},
        {"question": "cord_batch"},
    ])  # fmt: skip
    answers = {each.question.id: each.answer for each in a.look_back}
    assert answers["sister_units"] == "three found, all pass"
    assert answers["cord_batch"] is None


@pytest.mark.parametrize(("how", "opens"), [
    ("reproduced", True), ("defect_consistent", True), ("by_exclusion", False),
    ("never_established", False),
])  # fmt: skip
def test_a_confirmed_mains_cause_opens_it_but_exclusion_confirms_nothing(how, opens):
    tree = sample_records.tree()
    tree["checks"] = []
    tree["outcome"] = {"confirmed_cause": "open_earth", "how_confirmed": how}
    assert bool(assessed(tree).look_back) is opens


def test_a_confirmed_static_cause_opens_none():
    tree = sample_records.tree()
    tree["checks"] = []
    tree["outcome"] = {"confirmed_cause": "person_walking", "how_confirmed": "static_measured"}
    assert assessed(tree).look_back == ()


@pytest.mark.parametrize("change", [{"owner": "nobody"}, {"id": "last_known_good"}])
def test_a_table_with_an_unknown_owner_or_a_doubled_question_is_refused(monkeypatch, change):
    rows = [dict(row) for row in room.table("look_back")["questions"]]
    rows[1] |= change
    monkeypatch.setattr(room, "table", lambda name: {"questions": rows})
    room.questions.cache_clear()
    with pytest.raises(BadTable):
        room.questions()
    monkeypatch.undo()
    room.questions.cache_clear()
