"""From the answers of a record to duration, path, area and what voids a reading."""

from typing import Any

import pytest
from random_records import record
from sample_records import spoiled

from triage.assessment import Assessment, assess
from triage.electrical_story import lasted, open_void_questions, path_through, void_reasons
from triage.electrical_tables import monitor_tables
from triage.physics.zones import heart_factor
from triage.site import no_site
from triage.tables import table

QUIET = {
    "supply.kind": "isolated", "supply.changed_since": "no", "supply.read_at": "2026-01-14 08:00",
    "supply.current_reading": "1 mA", "supply.alarm": "no", "items.0.supply": "isolated",
    "event.electrosurgery_active": "no", "event.pulse_delivered": "no",
    "statements.0.duration": "longer", "supply.monitor_tested": "2025-12-01",
}  # fmt: skip


def judged(changes: dict[str, Any]) -> Assessment:
    return assess(record(spoiled(changes)), no_site())


def reasons(changes: dict[str, Any]) -> str:
    found = judged(QUIET | changes)
    return "; ".join(void_reasons(found.incident, found.site, found.verdicts))


@pytest.mark.parametrize(("words", "seconds"), [
    (["instant"], 0.5), (["about_a_second"], 2.0), (["longer"], None), ([None], None),
    (["instant", "about_a_second"], 2.0), (["instant", "longer"], None),
])  # fmt: skip
def test_a_contact_lasted_as_long_as_the_longest_that_was_said(
    words: list[str | None], seconds: float | None
) -> None:
    told = [{"id": f"s{n}", "words": "ow", "sensation": "snap"} | ({"duration": w} if w else {})
            for n, w in enumerate(words)]  # fmt: skip
    assert lasted(judged({"statements": told}).incident) == seconds


def test_somebody_who_only_saw_the_monitor_says_nothing_about_the_duration() -> None:
    told = [{"id": "s1", "words": "ow", "sensation": "snap", "duration": "instant"},
            {"id": "s2", "words": "the monitor was quiet"}]  # fmt: skip
    assert lasted(judged({"statements": told}).incident) == 0.5


@pytest.mark.parametrize(("part", "also", "path"), [
    ("fingertip", "nothing", "left_hand_feet"), ("hand", "wet_floor", "left_hand_feet"),
    ("both_hands", "nothing", "both_hands_feet"), ("leg", "nothing", "foot_foot"),
    ("hand", "earthed_metal", None), ("hand", "patient", None), ("hand", "unsure", None),
    ("trunk", "nothing", None), ("head", "nothing", None), (None, "nothing", None),
    ("hand", None, None),
])  # fmt: skip
def test_a_path_is_known_only_where_both_ends_are(
    part: str | None, also: str | None, path: str | None
) -> None:
    changes = {"contacts.0.body_part": part, "contacts.0.also_touching": also}
    assert path_through(judged(changes).incident.contacts) == path


def test_a_path_that_is_not_known_is_the_most_dangerous_one() -> None:
    known = {row["path"] for row in table("touch_sources")["paths"]}
    assert all(heart_factor(None) >= heart_factor(path) for path in known)


def test_two_contacts_of_one_person_may_have_carried_the_current_between_them() -> None:
    one = {"id": "c1", "person": "p1", "items": ["pump"], "body_part": "leg",
           "also_touching": "nothing"}  # fmt: skip
    assert path_through(judged({"contacts": [one]}).incident.contacts) == "foot_foot"
    both = judged({"contacts": [one, one | {"id": "c2"}]}).incident.contacts
    assert path_through(both) is None


@pytest.mark.parametrize(("change", "reason"), [
    ({"supply.changed_since": "yes"}, "was plugged or unplugged"),
    ({"supply.changed_since": None}, "may have been plugged"),
    ({"supply.read_at": None}, "not known when it was read"),
    ({"supply.read_at": "2026-01-14 06:00"}, "before the event"),
    ({"items.0.supply": "earthed"}, "earthed supply"), ({"items.0.power": "battery"}, "battery"),
    ({"items.0.kind": "cord"}, "both lines"), ({"supply.alarm": "yes"}, "first fault"),
    ({"event.electrosurgery_active": "yes"}, "high frequency"),
    ({"event.pulse_delivered": "yes"}, "a pulse"), ({"supply.current_reading": "0.9 A"}, "unusual"),
])  # fmt: skip
def test_each_answer_that_voids_a_ceiling_says_why(change: dict[str, Any], reason: str) -> None:
    assert reasons({}) == ""
    assert reason in reasons(change)


def test_a_monitor_that_failed_its_alarm_test_binds_nothing() -> None:
    test = {"id": "k2", "kind": "isolated_alarm_test", "of": "w3-1", "supply": "isolated",
            "method": "resistor_200_ohm_per_volt", "stage": "as_found", "same_cord": "yes",
            "value": "9 mA", "result": "fail", "instrument": "box 1",
            "calibration_due": "2026-09-01", "by": "electrician",
            "at": "2026-01-14 10:00"}  # fmt: skip
    assert "failed its alarm test" in reasons({"checks": [test]})


@pytest.mark.parametrize("change", [
    {"supply.alarm": "yes"}, {"items.0.power": "battery"}, {"event.electrosurgery_active": "yes"},
])  # fmt: skip
def test_what_voids_a_reading_never_speaks_for_static(change: dict[str, Any]) -> None:
    held, void = judged(QUIET), judged(QUIET | change)
    for cause, each in held.exposure.causes.items():
        if each.electrical is not None:
            assert void.exposure.causes[cause].factor >= each.factor


def test_every_question_left_open_is_a_row_of_the_table_and_an_answer_closes_it() -> None:
    known = {row.id for row in monitor_tables().void}
    answered, empty = judged(QUIET), judged({"supply": {"kind": "isolated"}, "contacts": []})
    left = open_void_questions(answered.incident, answered.verdicts)
    assert left == ("inductive_leakage",)
    assert set(open_void_questions(empty.incident, empty.verdicts)) == known
