"""A disposition for each item and the room, with its reasons and what would change it."""

import random

import pytest
from random_records import FAILING, Tree, clean_tree, passing_check, record

from triage.assessment import Assessment, assess
from triage.check_table import cannot_be_released
from triage.disposition import Level
from triage.site import from_plain, no_site
from triage.strict_yaml import Plain


def judged(tree: Tree) -> Assessment:
    return assess(record(tree), no_site())


def levels(tree: Tree) -> dict[str, Level]:
    a = judged(tree)
    return {each.item: each.level for each in (*a.items, a.room)}


def with_fail(story: str, kind: str, of: int = 0) -> Tree:
    tree = clean_tree(random.Random(1), story)
    value = {"value": FAILING[kind]} if kind in FAILING else {}
    check = passing_check("f", kind, tree["items"][of]) | {"result": "fail"} | value
    tree["checks"].append(check)
    return tree


def test_a_complete_clean_static_truth_is_let_go_and_says_why():
    a = judged(clean_tree(random.Random(2), "device"))
    assert a.headline == Level.STATIC_CONTROLS
    assert all(each.reasons and not each.missing for each in a.items)
    assert a.gate.upper < a.gate.threshold


@pytest.mark.parametrize("kind", ["earth_continuity", "insulation_resistance", "touch_current",
                                  "visual_inspection", "metal_voltage_loaded"])  # fmt: skip
def test_a_failed_check_of_a_device_withdraws_it(kind):
    assert levels(with_fail("device", kind))["pump"] == Level.WITHDRAW


def test_a_failed_outlet_isolates_the_outlet_and_the_room_shows_it():
    found = levels(with_fail("device", "outlet_test", of=2))
    assert found["outlet"] == found[""] == Level.ISOLATE


@pytest.mark.parametrize(("story", "kind"), [
    ("plate", "metal_voltage_loaded"), ("rail", "two_metal_voltage"), ("plate", "earth_in_place"),
])  # fmt: skip
def test_live_fixed_metal_is_made_dead_at_its_source(story, kind):
    found = levels(with_fail(story, kind))
    assert max(found.values()) == Level.ISOLATE


def test_a_doubtful_fail_holds_and_is_repeated():
    tree = clean_tree(random.Random(3), "device")
    tree["checks"].append(
        passing_check("f", "touch_current", tree["items"][0])
        | {"result": "fail", "value": FAILING["touch_current"], "calibration_due": "2020-01-01"}
    )
    a = judged(tree)
    assert a.headline == Level.HOLD
    assert any("repeated" in reason for each in a.items for reason in each.reasons)


def test_a_fail_away_from_the_event_is_a_fail_all_the_same():
    tree = with_fail("device", "touch_current")
    tree["checks"][-1] |= {"same_cord": "no", "disturbed": ["cleaned"], "unit_disputed": "yes"}
    assert levels(tree)["pump"] == Level.WITHDRAW


@pytest.mark.parametrize("kind", [*cannot_be_released(), "unknown"])
def test_an_item_kind_without_a_set_of_checks_is_never_let_go(kind):
    tree = clean_tree(random.Random(4), "plate")
    tree["items"][0]["kind"] = kind
    a = judged(tree)
    assert a.headline >= Level.HOLD and not a.gate.open


def test_not_practicable_leads_to_an_accepted_residual_risk_and_never_to_static():
    tree = clean_tree(random.Random(5), "rail")
    for check in tree["checks"]:
        if check["kind"] == "two_metal_voltage":
            check |= {"result": "not_practicable", "value": "unknown", "reason": "no access"}
    a = judged(tree)
    assert a.headline == Level.HOLD
    assert any("residual risk accepted" in reason for reason in a.gate.shut_by)


def test_without_any_item_the_room_is_held():
    a = judged({"schema": "1", "id": "0" * 32})
    assert a.room.level == Level.HOLD and a.items == ()


def test_a_conflict_of_one_in_ten_keeps_the_gate_shut_until_asked_again(monkeypatch):
    import dataclasses

    import triage.assessment

    genuine = triage.assessment.diagnose
    monkeypatch.setattr(
        triage.assessment, "diagnose",
        lambda *args: dataclasses.replace(genuine(*args), conflicts={"timing": 1.0}),
    )  # fmt: skip
    a = judged(clean_tree(random.Random(6), "plate"))
    assert not a.gate.open
    assert a.gate.shut_by == ("conflict: when it was felt is asked again and signed",)


def test_a_more_careful_site_lowers_the_threshold_and_nothing_else_opens():
    careful = from_plain(Plain("site", {"schema": "1", "policy": {"miss_ratio": "100000"}}))
    a = assess(record(clean_tree(random.Random(7), "plate")), careful)
    assert not a.gate.open and a.gate.threshold == pytest.approx(1 / 100_001)


def test_static_that_nobody_could_feel_is_no_explanation():
    tree = clean_tree(random.Random(8), "plate")
    tree["surroundings"] |= {"floor": "conductive", "footwear": "esd", "humidity": "70 %RH"}
    a = judged(tree)
    assert not a.gate.open


def test_the_headline_is_the_most_severe_of_all():
    a = judged(with_fail("device", "outlet_test", of=2))
    assert a.headline == max(a.room.level, *(each.level for each in a.items))
