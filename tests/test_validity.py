from typing import Any

import pytest
from sample_records import spoiled, text, tree

from triage.check_table import check_kinds
from triage.record import loads
from triage.site import Site, no_site
from triage.validity import CheckVerdict, judge_checks

CHECK = "checks.0."


def verdict(changes: dict[str, Any] | None = None, site: Site | None = None) -> CheckVerdict:
    incident = loads(text(spoiled(changes or {}))).incident
    return judge_checks(incident, site or no_site())[0]


def check(**fields: Any) -> dict[str, Any]:
    """Changes that make the sample's check another one; None takes a field out."""
    return {CHECK + name: value for name, value in fields.items()}


EARTH = check(
    kind="earth_continuity", method="low_current_flexed", value="0.08 ohm", state=["flexed"]
)
LOOK = check(kind="visual_inspection", method="full_length_look", value=None, state=None)
INSULATION = check(
    kind="insulation_resistance", method="dc_500v", value="200 Mohm", state=["unplugged"]
)
OUTLET = check(
    kind="outlet_test", method="full_outlet_test", value="0.1 ohm", of="w3-1", state=None
)
METAL = check(kind="metal_voltage_loaded", method="loaded_1kohm", value="2 mV")
GROUND = {
    **check(kind="object_to_ground", method="dc_100v", value="20 Gohm"),
    "items.0.kind": "cart", "items.0.power": "none",
}  # fmt: skip
SOUND = {
    "touch": {},
    "earth": EARTH,
    "look": LOOK,
    "insulation": INSULATION,
    "outlet": OUTLET,
    "metal": METAL,
}


@pytest.mark.parametrize("kind", SOUND)
def test_a_check_made_rightly_is_a_valid_pass(kind: str) -> None:
    found = verdict(SOUND[kind])
    assert (found.state, found.reasons, found.as_left) == ("valid_pass", (), False)


SPOILS = {
    "another cord": check(same_cord="no"),
    "another cord by id": {"items.0.cord": "cord-1", **check(cord="cord-2")},
    "another outlet by id": check(outlet="cord-2"),
    "cord not known": check(same_cord=None),
    "right cord, outlet not known": {"items.0.cord": "cord-1", **check(same_cord=None, cord="cord-1")},
    "after repair": check(disturbed=["repaired"]),
    "after cleaning": check(disturbed=["cleaned"]),
    "after a new cord": check(disturbed=["cord_swapped"]),
    "after a disturbance not named": check(stage="after_disturbance"),
    "after a disturbance called none": check(stage="after_disturbance", disturbed=["none"]),
    "stage not known": check(stage=None),
    "scene cleaned before it": {"scene.changes": ["cleaned"], "scene.changed_at": "2026-01-14 08:00"},
    "scene cleaned, nobody knows when": {"scene.changes": ["cleaned"]},
    "scene repaired the same morning": {"scene.changes": ["repaired"], "scene.changed_at": "2026-01-14 morning"},
    "item altered": {"items.0.condition": ["altered"]},
    "item gone": {"items.0.condition": ["missing"]},
    "wrong method": check(method="by_hand"),
    "method of another check": check(method="dc_10v"),
    "method not known": check(method=None),
    "isolated supply": check(supply="isolated"),
    "supply not known": check(supply=None),
    "out of calibration": check(calibration_due="2026-01-13"),
    "calibration ends that day": check(calibration_due="2026-01-14"),
    "calibration not known": check(calibration_due=None),
    "no instrument": check(instrument=None),
    "unit in doubt": check(unit_disputed="yes"),
    "value out of range": check(value="2 A"),
    "negative value": check(value="-40 uA"),
    "value without a unit": check(value="40"),
    "value of another kind": check(value="40 V"),
    "value not readable": check(value="fine"),
    "no value": check(value=None),
    "before the event": check(at="2026-01-14 07:00"),
    "the year before": check(at="2025-01-14"),
    "perhaps before the event": check(at="2026-01-14"),
    "time not known": check(at=None),
    "time of the event not known": {"event.at": None},
    "in standby": check(state=["standby"]),
    "state not known": check(state=None),
    "switched off": check(state=["off", "warm"]),
    "powered otherwise": {"items.0.power": "mains_standby"},
    "power at the event not known": {"items.0.power": None, **check(state=["standby"])},
    "wet event, tested dry": {"contacts.0.moisture": "wet"},
    "damp event, tested dry": {"contacts.0.moisture": "damp"},
    "wet item, tested dry": {"items.0.condition": ["wet"]},
    "on a wet floor, tested dry": {"contacts.0.also_touching": "wet_floor"},
    "cleaning when it happened, tested dry": {"event.activity": "wet_cleaning"},
    "not said of which item": check(of=None),
    "of an item it is no check for": check(of="w3-1"),
    "kind not known": check(kind=None),
    "kind not in the table": check(kind="tongue_test"),
    "not practicable": check(result="not_practicable", value=None, reason="in use"),
    "no result and no value": check(result=None, value=None),
    "reading leaves it open": check(value=">40 uA", result=None),
    "stated pass, reading leaves it open": check(value=">40 uA"),
    "value over the limit": check(value="20 mA"),
    "stated fail": check(result="fail"),
}  # fmt: skip


@pytest.mark.parametrize("name", SPOILS)
def test_no_single_spoiling_leaves_a_valid_pass(name: str) -> None:
    found = verdict(SPOILS[name])
    assert found.state not in ("valid_pass", "informative")
    assert found.reasons or found.state == "valid_fail"


REASONS = {
    "another cord": "not the cord and outlet of the event",
    "another cord by id": "another cord was used",
    "another outlet by id": "another outlet was used",
    "cord not known": "not known whether cord and outlet were the event's",
    "after repair": "made after: repaired",
    "after a disturbance not named": "a disturbance that is not named",
    "scene cleaned, nobody knows when": "the scene was changed before it: cleaned",
    "item gone": "the item was changed since the event",
    "wrong method": "accepted: direct_earthed, differential_earthed, alternative",
    "isolated supply": "this method needs an earthed supply",
    "supply not known": "a supply that is not known",
    "out of calibration": "past its calibration",
    "calibration not known": "calibration of the instrument is not known",
    "unit in doubt": "the unit is in doubt",
    "value out of range": "outside what this check can read",
    "value without a unit": "has no unit",
    "no value": "no value was written down",
    "before the event": "made before the event",
    "perhaps before the event": "not known to have been made after the event",
    "in standby": "not in the state of the event (on)",
    "wet event, tested dry": "the event was wet",
    "not said of which item": "does not say which item",
    "of an item it is no check for": "not a check of this kind of item: outlet",
    "kind not in the table": "'tongue_test' is not in the table of checks",
    "no result and no value": "no result and no value",
    "reading leaves it open": "leaves it open whether the limit is kept",
}


@pytest.mark.parametrize("name", REASONS)
def test_the_reason_is_said_in_words(name: str) -> None:
    assert any(REASONS[name] in each for each in verdict(SPOILS[name]).reasons)


@pytest.mark.parametrize("name", SPOILS)
def test_no_spoiling_makes_a_failed_check_pass(name: str) -> None:
    failing = {**check(value="20 mA", result="fail"), **SPOILS[name]}
    assert "pass" not in verdict(failing).state


ANY_KIND = {CHECK + name for name in ("same_cord", "disturbed", "stage", "method", "at")}
ANY_KIND |= {"event.at", "scene.changes", "scene.changed_at"}
PAIRS = [
    (name, kind)
    for name in SPOILS
    for kind in SOUND
    # An outlet has no cord of its own.
    if set(SPOILS[name]) <= ANY_KIND and (name, kind) != ("cord not known", "outlet")
]


@pytest.mark.parametrize(("name", "kind"), PAIRS)
def test_what_spoils_one_kind_of_check_spoils_every_kind(name: str, kind: str) -> None:
    assert verdict({**SOUND[kind], **SPOILS[name]}).state != "valid_pass"


def test_an_outlet_test_asks_for_no_cord() -> None:
    assert verdict({**OUTLET, **SPOILS["cord not known"]}).state == "valid_pass"


@pytest.mark.parametrize("name", ["calibration not known", "no instrument", "out of calibration"])
def test_looking_needs_no_instrument(name: str) -> None:
    assert verdict({**LOOK, **SPOILS[name]}).state == "valid_pass"


def test_a_spoiled_measurement_is_not_informative_either() -> None:
    assert verdict(GROUND).state == "informative"
    for spoil in (check(method="dc_5v"), check(calibration_due=None), check(at=None), check(value=None),
                  check(disturbed=["cleaned"])):  # fmt: skip
        assert verdict({**GROUND, **spoil}).state != "informative"


@pytest.mark.parametrize("kind", [EARTH, LOOK], ids=["earth_continuity", "visual_inspection"])
@pytest.mark.parametrize("name", ["another cord", "wrong method", "calibration not known", "time not known",
                                  "before the event", "after repair", "not said of which item"])  # fmt: skip
def test_a_failed_earth_and_visible_damage_count_however_they_were_found(
    kind: dict[str, Any], name: str
) -> None:
    assert verdict({**kind, **check(result="fail"), **SPOILS[name]}).state == "valid_fail"


@pytest.mark.parametrize("name", ["wrong method", "calibration not known", "isolated supply", "value out of range",
                                  "before the event", "no instrument"])  # fmt: skip
def test_another_failed_check_with_a_doubtful_reading_is_held_and_repeated(name: str) -> None:
    assert verdict({**check(value="20 mA", result="fail"), **SPOILS[name]}).state == "invalid_fail"


@pytest.mark.parametrize("stated", ["pass", None])
def test_a_value_over_the_limit_fails_whatever_was_stated(stated: str | None) -> None:
    # IEC 60601-1 ed. 3, 8.7.3: touch current 100 uA normal, 500 uA in single fault condition.
    assert verdict(check(value="0.6 mA", result=stated)).state == "valid_fail"
    assert verdict({**EARTH, **check(value="25 ohm", result=stated)}).state == "valid_fail"


def test_a_stated_fail_counts_although_the_value_keeps_the_limit() -> None:
    assert verdict(check(value="10 uA", result="fail")).state == "valid_fail"


def test_a_value_within_the_limit_passes_without_a_stated_result() -> None:
    found = verdict(check(result=None))
    assert found.state == "valid_pass"
    assert found.limit is not None and found.value is not None and found.value.text == "40 uA"


def test_a_reading_below_the_instruments_range_passes_and_above_it_fails() -> None:
    assert verdict(check(value="<10 uA", result=None)).state == "valid_pass"
    assert verdict(check(value=">20 mA", result=None)).state == "valid_fail"


def test_the_deciding_limit_is_the_one_with_the_least_room() -> None:
    found = verdict({})
    rooms = [c.margin for j in found.judgements for c in j.comparisons]
    assert len(rooms) >= 1
    assert found.limit in [
        c.limit for j in found.judgements for c in j.comparisons if c.margin == min(rooms)
    ]


ALARM = {
    "items.1.supply": "isolated",
    **check(kind="isolated_alarm_test", method="resistor_200_ohm_per_volt", supply="isolated", of="w3-1",
            result=None),
}  # fmt: skip


@pytest.mark.parametrize(
    ("value", "limit", "state"),
    # NEC 2017, 517.160(B)(1): alarm at 5.0 mA in total at the latest, none below 3.7 mA.
    [("4.9 mA", "nec2017-alarm", "valid_pass"), ("3.8 mA", "nec2017-no-alarm", "valid_pass"),
     ("5.1 mA", "nec2017-alarm", "valid_fail"), ("3.6 mA", "nec2017-no-alarm", "valid_fail")],
)  # fmt: skip
def test_between_two_limits_the_nearer_one_decides(value: str, limit: str, state: str) -> None:
    found = verdict({**ALARM, **check(value=value)})
    assert found.limit is not None
    assert (found.limit.id, found.state) == (limit, state)


def test_a_cord_and_an_outlet_named_as_the_events_are_the_events() -> None:
    named = {"items.0.cord": "cord-1", **check(same_cord=None, cord="cord-1", outlet="w3-1")}
    assert verdict(named).state == "valid_pass"
    assert verdict({**named, CHECK + "same_cord": "yes"}).state == "valid_pass"


def test_not_practicable_keeps_its_reason() -> None:
    found = verdict(check(result="not_practicable", value=None, reason="in use"))
    assert (found.state, found.reasons) == ("not_practicable", ("in use",))


def test_a_value_beside_not_practicable_still_speaks() -> None:
    assert verdict(check(result="not_practicable", value="20 mA")).state == "valid_fail"


@pytest.mark.parametrize("value", ["40 uA", ">40 uA", "fine", None])
def test_what_was_not_practicable_is_no_pass_whatever_stands_beside_it(value: str | None) -> None:
    assert verdict(check(result="not_practicable", value=value)).state == "not_practicable"


def repeated(first: dict[str, Any], second: dict[str, Any]) -> list[str]:
    """States of two checks, the first a fail from an isolated supply."""
    sample = tree()["checks"][0]
    bad = {**sample, "value": "20 mA", "result": "fail", "supply": "isolated", **first}
    good = {**sample, "id": "k2", "at": "2026-01-14 10:00", **second}
    known = [
        {name: value for name, value in each.items() if value is not None} for each in (bad, good)
    ]
    incident = loads(text(spoiled({"checks": known}))).incident
    return [each.state for each in judge_checks(incident, no_site())]


def test_a_doubtful_fail_is_settled_by_a_later_valid_result() -> None:
    assert repeated({}, {}) == ["repeated", "valid_pass"]
    assert repeated({}, {"value": "20 mA", "result": "fail"}) == ["repeated", "valid_fail"]


@pytest.mark.parametrize(
    ("first", "second"),
    [({}, {"at": "2026-01-14 08:00"}), ({}, {"at": "2026-01-14 09:00"}), ({}, {"supply": "isolated"}),
     ({}, {"stage": "as_left"}), ({"at": None}, {}), ({}, {"kind": "metal_voltage_loaded", "method": "loaded_1kohm",
                                                            "value": "2 mV"})],
)  # fmt: skip
def test_a_doubtful_fail_stays_where_nothing_valid_came_later(
    first: dict[str, Any], second: dict[str, Any]
) -> None:
    assert repeated(first, second)[0] == "invalid_fail"


def test_another_pair_of_metals_does_not_settle_a_doubtful_fail() -> None:
    pair = {"kind": "two_metal_voltage", "method": "loaded_1kohm", "second": "w3-1"}
    doubtful = {**pair, "value": "60 V", "calibration_due": None}
    assert repeated(doubtful, {**pair, "value": "2 mV"})[0] == "repeated"
    assert repeated(doubtful, {**pair, "value": "2 mV", "second": "cord-1"})[0] == "invalid_fail"


def test_a_valid_fail_is_never_settled_by_a_later_pass() -> None:
    assert repeated({"supply": "earthed"}, {}) == ["valid_fail", "valid_pass"]


def test_only_an_item_without_protective_earth_may_go_without_that_test() -> None:
    method = {**EARTH, **check(method="no_protective_earth", value=None)}
    assert verdict({**method, "items.0.equipment_class": "II"}).state == "valid_pass"
    for other in ("I", "internal", None):
        assert verdict({**method, "items.0.equipment_class": other}).state == "invalid_pass"


def test_a_test_off_the_mains_asks_for_no_state_and_no_supply() -> None:
    # The alternative method joins the poles of the item and brings its own source (IEC 62353, 5.3.3.2).
    off = check(method="alternative", state=["unplugged"], supply=None)
    assert verdict(off).state == "valid_pass"
    assert verdict({**off, "contacts.0.moisture": "wet"}).state == "valid_pass"


def test_a_wet_event_is_answered_by_a_wet_test() -> None:
    assert (
        verdict({"contacts.0.moisture": "wet", **check(state=["on", "wet"])}).state == "valid_pass"
    )


def test_a_mild_disturbance_that_is_named_leaves_the_check_valid() -> None:
    for word in ("moved", "unplugged", "powered_down"):
        assert verdict(check(stage="after_disturbance", disturbed=[word])).state == "valid_pass"


def test_a_scene_changed_after_the_check_leaves_it_valid() -> None:
    later = {"scene.changes": ["cleaned"], "scene.changed_at": "2026-01-14 10:00"}
    assert verdict(later).state == "valid_pass"


def test_every_kind_of_check_in_every_state_of_the_sample_is_judged() -> None:
    for kind in check_kinds():
        for method in [each.method for each in check_kinds()[kind].accepts] + [None]:
            found = verdict(check(kind=kind, method=method))
            assert found.state in (
                "valid_pass",
                "valid_fail",
                "invalid_pass",
                "invalid_fail",
                "informative",
                "not_done",
            )


def test_the_sample_is_untouched_by_its_spoilings() -> None:
    spoiled(SPOILS["another cord"])
    assert tree()["checks"][0]["same_cord"] == "yes"
