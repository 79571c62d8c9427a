"""The assessment calls the rooms and names what it was made with."""

import dataclasses
import random

import pytest
from random_records import clean_tree, record

from triage.assessment import assess, latest, named_conflicts
from triage.disposition import Level
from triage.site import no_site
from triage.tables import knowledge_digest


def test_an_empty_record_is_assessed_and_says_what_is_not_known():
    a = assess(record({"schema": "1", "id": "0" * 32}), no_site())
    assert a.headline == Level.HOLD
    for name in ("earthed or isolated supply", "time of the event", "kind of care area", "floor"):
        assert name in a.unknown


def test_it_names_digest_of_knowledge_version_and_schema():
    a = assess(record(clean_tree(random.Random(1), "cart")), no_site())
    assert a.knowledge == knowledge_digest() and len(a.knowledge) == 64
    assert a.version and a.schema == "1"


def test_it_speaks_for_the_latest_time_in_the_record():
    found = record(clean_tree(random.Random(2), "cart"))
    a = assess(found, no_site())
    assert a.at == latest(found, no_site())
    assert a.at is not None and a.at.text.startswith("2027-01-01")


def test_a_release_under_a_standing_flag_cannot_be_built():
    tree = clean_tree(random.Random(3), "plate")
    tree["statements"][0]["sensation"] = "grip"
    a = assess(record(tree), no_site())
    let_go = tuple(dataclasses.replace(i, level=Level.STATIC_CONTROLS) for i in a.items)
    with pytest.raises(AssertionError, match="standing red flag"):
        dataclasses.replace(a, items=let_go)


def test_a_misfit_is_named_when_the_leader_almost_never_gives_the_answer():
    tree = clean_tree(random.Random(4), "plate")
    tree["contacts"][0]["moisture"] = "wet"
    a = assess(record(tree), no_site())
    assert a.posterior.ranked[0].startswith("person")
    assert "wet_contact" in {o.finding.id for o in a.misfits}


def test_named_conflicts_are_those_over_the_mark_strongest_first():
    tree = clean_tree(random.Random(5), "plate")
    tree["statements"][0]["repeat_at_once"] = "yes"
    found = named_conflicts(assess(record(tree), no_site()).posterior)
    assert found and found[0][0] == "driven"
    values = [value for _, value in found]
    assert values == sorted(values, reverse=True) and min(values) >= 0.7
