"""Disagreeing witnesses are each tried; the ranking itself never changes by it."""

import copy

import pytest
import sample_records
from random_records import record

from triage.assessment import assess
from triage.documents.witnesses import witness_lines, witness_verdict
from triage.site import no_site

SNAP = {"sensation": "snap", "timing": "first_touch", "repeat_at_once": "no", "duration": "instant"}
BUZZ = {"sensation": "buzz", "timing": "while_holding", "repeat_at_once": "yes",
        "duration": "longer"}  # fmt: skip


def told(*stories):
    tree = sample_records.tree()
    tree["statements"] = [{"id": f"s{n}", **each} for n, each in enumerate(stories, 1)]
    tree["checks"] = []
    return assess(record(tree), no_site())


def test_one_witness_or_agreeing_witnesses_need_no_trial():
    assert told(SNAP).testimony.each == ()
    assert told(SNAP, SNAP).testimony.each == ()
    assert witness_lines(told(SNAP, SNAP)) == [] and witness_verdict(told(SNAP)) == ""


@pytest.mark.parametrize("number", [1, 2])
def test_each_believed_alone_gives_the_ranking_of_a_record_with_that_statement_only(number):
    both = told(SNAP, BUZZ)
    tree = sample_records.tree()
    story = (SNAP, BUZZ)[number - 1]
    tree["statements"], tree["checks"] = [{"id": f"s{number}", **story}], []
    alone = assess(record(tree), no_site())
    row = both.testimony.each[number - 1]
    assert row.statement == f"s{number}"
    assert row.first == alone.posterior.ranked[0]
    assert row.probability == pytest.approx(alone.posterior.of(row.first), abs=1e-12)
    assert row.mains == pytest.approx(alone.posterior.family("mains"), abs=1e-12)


def test_it_is_said_when_the_first_cause_depends_on_whom_one_believes():
    a = told(SNAP, BUZZ)
    assert a.testimony.matters
    assert "depends on which witness" in witness_verdict(a)
    assert sum("alone is believed" in line for line in witness_lines(a)) == 2


def test_it_is_said_when_the_first_cause_is_the_same_either_way():
    a = told(BUZZ, BUZZ | {"sensation": "tingle"})
    assert a.testimony.each and not a.testimony.matters
    assert "the same whichever" in witness_verdict(a)


def test_the_ranking_takes_the_adverse_answer_whatever_the_trial_says():
    with_both, adverse = told(SNAP, BUZZ), told(BUZZ)
    assert with_both.posterior.probability == pytest.approx(adverse.posterior.probability)


def test_a_statement_that_answers_nothing_is_not_tried():
    tree = sample_records.tree()
    tree["statements"] = [{"id": "s1", **SNAP}, {"id": "s2", **BUZZ}, {"id": "s3", "words": "?"}]
    a = assess(record(copy.deepcopy(tree)), no_site())
    assert [each.statement for each in a.testimony.each] == ["s1", "s2"]
