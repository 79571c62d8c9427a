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
    assert "static is not plausible here, or cannot be estimated" in a.gate.shut_by


def test_the_headline_is_the_most_severe_of_all():
    a = judged(with_fail("device", "outlet_test", of=2))
    assert a.headline == max(a.room.level, *(each.level for each in a.items))


# every condition that keeps the gate shut, said in words, and nothing else with it


def changed(story: str, part: str, **answers: object) -> Tree:
    """A clean record with some answers of one part, or of the first of a list, changed."""
    tree = clean_tree(random.Random(20), story)
    place = tree[part][0] if isinstance(tree[part], list) else tree[part]
    place |= answers
    return tree


SHUT = {
    "not known: what it felt like": changed("plate", "statements", sensation="unknown"),
    "not known: when it was felt": changed("plate", "statements", timing="unknown"),
    "not reassuring: when it was felt, on release": changed(
        "plate", "statements", timing="on_release"
    ),
    "not known: earthed or isolated supply": changed("plate", "supply", kind="unknown"),
    "not known: humidity at the place": changed("plate", "surroundings", humidity="unknown"),
    "not known: floor": changed("plate", "surroundings", floor="unknown"),
    "not known: footwear or wheels": changed("plate", "surroundings", footwear="unknown"),
    "not known: isolation monitor in alarm": changed("isolated_device", "supply", alarm="unknown"),
}


@pytest.mark.parametrize("text", SHUT)
def test_one_unknown_answer_shuts_the_gate_and_is_named(text):
    assert text in judged(SHUT[text]).gate.shut_by


def test_the_wheels_of_an_object_are_asked_for_and_shoes_are_not():
    tree = clean_tree(random.Random(21), "cart")
    tree["items"][0]["casters"] = "unknown"
    assert "not known: footwear or wheels" in judged(tree).gate.shut_by
    tree = clean_tree(random.Random(21), "cart", measured=True)
    tree["surroundings"]["footwear"] = "unknown"
    assert "not known: footwear or wheels" not in judged(tree).gate.shut_by


def test_an_alarm_nobody_answered_shuts_nothing_on_an_earthed_supply():
    tree = clean_tree(random.Random(22), "device")
    tree["supply"].pop("alarm", None)
    assert judged(tree).gate.open


def test_an_answer_merged_into_driven_is_said_to_have_kept_acting():
    found = judged(changed("plate", "statements", repeat_at_once="yes")).gate.shut_by
    wanted = "not reassuring: again at a second touch, standing still, something kept acting"
    assert wanted in found


def test_what_was_touched_must_be_known_and_must_be_something():
    tree = changed("plate", "contacts", items="unknown")
    assert "not known: what was touched" in judged(tree).gate.shut_by
    assert "no item on record" in judged({"schema": "1", "id": "0" * 32}).gate.shut_by
    assert "no item on record" not in judged(clean_tree(random.Random(23), "plate")).gate.shut_by
    unnamed = changed("plate", "items", kind="unknown")
    assert "plate: it is not known what it is" in judged(unnamed).gate.shut_by
    assert judged(unnamed).items[0].would_change[0].startswith("say what it is")


def test_a_defect_and_a_doubtful_fail_are_named_as_what_shuts_the_gate():
    found = judged(with_fail("device", "touch_current")).gate.shut_by
    assert any(text.startswith("defect: ") for text in found)
    tree = with_fail("device", "touch_current")
    tree["checks"][-1]["calibration_due"] = "2020-01-01"
    found = judged(tree).gate.shut_by
    assert any("failed and does not count" in text for text in found)
    assert not any(text.startswith("defect: ") for text in found)


CLOSED_BY = {  # answer of the event: the log that stands in for it
    "electrosurgery_active": "electrosurgery_log", "pulse_delivered": "pulse_log",
    "line_event": "site_event_log", "pins_touched": "pin_voltage",
}  # fmt: skip


@pytest.mark.parametrize("answer", CLOSED_BY)
def test_another_source_is_excluded_by_its_answer_or_by_its_check_and_not_as_left(answer):
    tree = clean_tree(random.Random(24), "device")
    assert judged(tree).gate.open
    tree["event"][answer] = "unknown"
    assert any(t.startswith("not excluded: ") for t in judged(tree).gate.shut_by)
    source = {"electrosurgery_active": "electrosurgical_unit",
              "pulse_delivered": "stimulator_defibrillator"}  # fmt: skip
    if answer in source:
        tree["items"].append({"id": "source", "kind": source[answer]})
    item = tree["items"][-1 if answer in source else 0]
    check = passing_check("x", CLOSED_BY[answer], item)
    tree["checks"].append(check)
    assert not any(t.startswith("not excluded: ") for t in judged(tree).gate.shut_by)
    check["stage"] = "as_left"
    assert any(t.startswith("not excluded: ") for t in judged(tree).gate.shut_by)


def test_a_reading_of_another_item_excludes_nothing_and_a_log_speaks_for_the_place():
    for answer, excluded in (("pins_touched", False), ("line_event", True)):
        tree = clean_tree(random.Random(25), "device")
        tree["items"].append({"id": "other", "kind": "device_mains", "power": "mains_on"})
        tree["event"][answer] = "unknown"
        tree["checks"].append(passing_check("x", CLOSED_BY[answer], tree["items"][-1]))
        found = judged(tree).gate.shut_by
        assert any(t.startswith("not excluded: ") for t in found) is not excluded


def test_too_much_left_unexplained_shuts_the_gate(monkeypatch):
    import dataclasses

    import triage.disposition

    strict = dataclasses.replace(triage.disposition.knowledge(), residual_at_most=1e-6)
    monkeypatch.setattr(triage.disposition, "knowledge", lambda: strict)
    gate = judged(clean_tree(random.Random(26), "plate")).gate
    assert gate.shut_by == ("too much stays unexplained by the causes on the list",)
    assert gate.upper is None and not gate.open


def test_a_chance_at_the_threshold_shuts_the_gate_and_both_are_told(monkeypatch):
    import triage.disposition

    limit = judged(clean_tree(random.Random(27), "plate")).gate.threshold
    for upper, is_open in ((limit, False), (limit * 0.999, True)):
        monkeypatch.setattr(triage.disposition, "upper_mains", lambda *_, u=upper: u)
        gate = judged(clean_tree(random.Random(27), "plate")).gate
        assert (gate.open, gate.upper) == (is_open, upper)


# which items are listed, and what holds the room


def bystander(**answers: object) -> Tree:
    tree = clean_tree(random.Random(28), "device")
    tree["items"].append({"id": "near", "kind": "device_mains", "power": "mains_on"} | answers)
    return tree


def test_a_thing_that_was_only_near_is_listed_when_something_is_wrong_with_it():
    assert "near" not in levels(bystander())
    assert levels(bystander(condition=["damaged"]))["near"] == Level.WITHDRAW


def test_a_linked_item_needs_only_its_own_part_of_the_checks():
    tree = clean_tree(random.Random(29), "device")
    tree["checks"] = []
    missing = {each.item: set(each.missing) for each in judged(tree).items}
    assert (
        missing["outlet"]
        == {"outlet_test", "visual_inspection", "insulation_resistance"} & (missing["outlet"])
    )
    assert "outlet_test" in missing["outlet"]
    assert "touch_current" in missing["pump"]
    assert "touch_current" not in missing["cord"] | missing["outlet"]


def test_every_missing_check_is_named_as_what_would_change_the_disposition():
    tree = clean_tree(random.Random(30), "plate")
    tree["checks"] = []
    item = judged(tree).items[0]
    assert item.reasons == ("held until the named checks and answers are complete",)
    assert sum(text.startswith("valid pass: ") for text in item.would_change) == len(item.missing)


def test_the_room_is_held_with_what_stays_in_it_and_not_with_what_can_be_taken_away():
    movable, fixed = (clean_tree(random.Random(31), story) for story in ("cart", "plate"))
    for tree in (movable, fixed):
        tree["checks"] = []
    assert judged(movable).room.level == Level.STATIC_CONTROLS
    assert judged(movable).room.reasons == ("only movable items are held",)
    room = judged(fixed).room
    assert (room.level, room.reasons) == (Level.HOLD, ("plate is part of it",))
    assert judged(clean_tree(random.Random(31), "plate")).room.reasons == ("nothing is held",)


def test_a_movable_thing_whose_source_is_made_dead_takes_its_circuit_with_it():
    tree = clean_tree(random.Random(32), "device")
    tree["items"][0]["condition"] = ["hot"]
    a = judged(tree)
    assert a.room.level == Level.ISOLATE
    assert "pump: its circuit" in a.room.reasons


def test_a_defect_of_no_named_item_is_a_defect_of_what_was_touched():
    tree = with_fail("device", "earth_continuity")
    tree["checks"][-1] |= {"of": "unknown"}
    assert levels(tree)["pump"] == Level.WITHDRAW


def test_a_fail_through_the_cord_reaches_the_cord_and_one_of_the_device_alone_does_not():
    assert levels(with_fail("device", "earth_continuity"))["cord"] == Level.WITHDRAW
    assert levels(with_fail("device", "touch_current"))["cord"] < Level.WITHDRAW


@pytest.mark.parametrize("calibrated", ["2027-01-01", "2020-01-01"])
def test_a_check_that_also_failed_is_still_missing_although_it_passed_too(calibrated):
    tree = with_fail("device", "touch_current")
    tree["checks"][-1]["calibration_due"] = calibrated
    missing = {each.item: each.missing for each in judged(tree).items}
    assert "touch_current" in missing["pump"]
