"""From record and judged checks to findings, defects and facts."""

import random

import pytest
from random_records import FAILING, Tree, clean_tree, passing_check, record

from triage.assessment import assess
from triage.evidence import Evidence
from triage.site import no_site


def evidence(tree: Tree) -> Evidence:
    return assess(record(tree), no_site()).evidence


def story(name: str = "device") -> Tree:
    return clean_tree(random.Random(1), name)


def state(found: Evidence, finding: str) -> str | None:
    seen = found.observed.get(finding)
    return seen.state if seen else None


def test_an_unknown_answer_is_no_finding():
    tree = story()
    tree["statements"][0]["sensation"] = "unknown"
    assert state(evidence(tree), "sensation") is None


def test_of_statements_that_differ_the_most_adverse_counts_and_both_are_kept():
    tree = story()
    tree["statements"].append({"id": "s2", "sensation": "tingle"})
    found = evidence(tree)
    assert state(found, "sensation") == "tingle"
    assert found.disagreements["sensation"] == {"s1": "snap", "s2": "tingle"}


@pytest.mark.parametrize("change", [
    {"repeat_at_once": "yes"}, {"timing": "while_holding"}, {"duration": "longer"},
])  # fmt: skip
def test_what_static_cannot_do_becomes_the_one_finding_driven(change):
    tree = story()
    tree["statements"][0] |= change
    found = evidence(tree)
    assert state(found, "driven") == "yes"
    assert state(found, "repeat_at_once") is None
    assert state(found, "timing") != "while_holding"


def test_told_or_measured_follows_the_source_of_the_answer():
    tree = clean_tree(random.Random(2), "isolated_device")
    for source, measured in (("said", False), ("seen", False), ("log", True), ("instrument", True)):
        tree["supply"]["alarm_source"] = source
        assert evidence(tree).observed["monitor_alarm"].measured is measured


def test_one_valid_fail_is_a_finding_and_a_defect_with_its_reading():
    tree = story()
    mine = next(c for c in tree["checks"] if c["kind"] == "touch_current")
    mine |= {"value": FAILING["touch_current"], "result": "fail"}
    found = evidence(tree)
    assert state(found, "touch_current_fails") == "yes"
    (defect,) = [d for d in found.defects if d.check == "touch_current"]
    assert defect.item == "pump" and defect.value.text == FAILING["touch_current"]


def test_a_pass_must_cover_every_touched_item_that_needs_it():
    tree = story()
    assert state(evidence(tree), "touch_current_fails") == "no"
    tree["items"].append({"id": "second", "kind": "device_mains", "power": "mains_on"})
    tree["contacts"][0]["items"].append("second")
    assert state(evidence(tree), "touch_current_fails") is None


@pytest.mark.parametrize(("value", "wanted"), [
    ("8 kV", "yes"), ("0.4 kV", "no"), ("> 900 V", None), ("< 5 kV", None), ("> 1 kV", "yes"),
])  # fmt: skip
def test_a_static_reading_speaks_for_static_only_over_its_mark(value, wanted):
    tree = story("plate")
    tree["checks"].append(
        passing_check("m", "static_reenactment", tree["items"][0]) | {"value": value}
    )
    assert state(evidence(tree), "static_reenacted") == wanted


def test_a_static_reading_of_another_object_says_nothing():
    tree = story("cart")
    tree["items"].append({"id": "other", "kind": "cart", "power": "none"})
    tree["checks"].append(passing_check("m", "object_voltage_after_rolling", tree["items"][1]))
    assert state(evidence(tree), "rolling_voltage") is None


def test_damage_liquid_and_heat_seen_are_defects():
    for condition in ("damaged", "wet", "hot"):
        tree = story()
        tree["items"][1]["condition"] = [condition]
        assert [(d.item, d.check) for d in evidence(tree).defects] == [("cord", "condition")]


def test_damage_seen_speaks_for_damage_and_never_against_a_bare_live_part():
    """A crushed cord seen on arrival must not count as "no bare part was seen"."""
    tree = story()
    assert state(evidence(tree), "live_part_exposed") == "no"
    tree["checks"] = []
    for item in (0, 1):  # the pump touched, and the cord it hangs on
        found = story()
        found["checks"], found["items"][item]["condition"] = [], ["damaged"]
        seen = evidence(found)
        assert (state(seen, "visible_damage"), seen.observed["visible_damage"].measured) == (
            "yes",
            False,
        )
        assert state(seen, "live_part_exposed") == (None if item == 0 else "no")
    assert state(evidence(tree), "visible_damage") is None  # intact at a glance is no inspection


def test_a_bare_part_and_the_damage_around_it_are_one_finding():
    tree = story()
    tree["checks"], tree["items"][0]["condition"] = [], ["damaged", "live_part"]
    found = evidence(tree)
    assert state(found, "live_part_exposed") == "yes"
    assert state(found, "visible_damage") is None


def test_a_passed_inspection_does_not_take_damage_seen_off_the_record():
    tree = story()
    tree["items"][1]["condition"] = ["damaged"]
    assert {c["kind"] for c in tree["checks"]} >= {"visual_inspection"}
    assert state(evidence(tree), "visible_damage") == "yes"


def test_an_as_left_reading_is_no_finding_about_the_event():
    tree = story("plate")
    left = passing_check("m", "static_reenactment", tree["items"][0]) | {"stage": "as_left"}
    tree["checks"].append(left)
    assert state(evidence(tree), "static_reenacted") is None
