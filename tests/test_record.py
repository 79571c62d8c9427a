import copy
from pathlib import Path
from typing import Any

import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st
from sample_records import RECORD_ID, spoiled, text, tree

from triage import fields, incident
from triage.canonical import canonical, case_number, digest
from triage.errors import BadRecord, TriageError
from triage.record import from_plain, load, loads, moments
from triage.strict_yaml import Plain


def faults(changes: dict[str, Any]) -> list[str]:
    with pytest.raises(BadRecord) as caught:
        loads(text(spoiled(changes)), "r.yaml")
    return caught.value.faults


def test_a_record_is_read_with_its_case_number_and_digest(tmp_path: Path) -> None:
    path = tmp_path / "r.yaml"
    path.write_text(text(tree()), "utf-8")
    record = load(path)
    assert record.incident.items[0].equipment_class == "I"
    assert record.incident.items[0].applied_part == "BF"
    assert record.incident.surroundings.humidity.value == 24
    assert record.case == case_number(RECORD_ID)
    assert record.digest == digest(canonical(tree()))
    assert record.tree == tree() and record.questions == ()


def test_the_smallest_record_is_schema_and_id() -> None:
    record = loads(f"schema: 1\nid: {RECORD_ID}\n")
    assert record.incident.items == () and record.incident.event.at is None


# A digest printed on a report must be found again in years: this one never changes.
def test_the_digest_of_the_sample_record_is_fixed_for_ever() -> None:
    assert (
        loads(f"schema: 1\nid: {RECORD_ID}\n").digest
        == "c759b0b0ec8efc1b1f88f39c5e7541daea6ed4141784158851c541c71f1402b8"
    )


def test_remarks_order_and_quoting_do_not_change_the_digest() -> None:
    one = loads(f"schema: 1\nid: {RECORD_ID}\nplace: {{area: ward, room: r1}}\n")
    other = loads(f"# note\nplace:\n  room: 'r1'\n  area: \"ward\"\nid: {RECORD_ID}\nschema: '1'\n")
    assert one.digest == other.digest


def test_a_value_spelled_otherwise_is_another_record() -> None:
    changed = spoiled({"supply.voltage": "230.0 V"})
    assert loads(text(changed)).digest != loads(text(tree())).digest


@pytest.mark.parametrize("empty", ["", "# nothing\n", "[]", "[a]", "x", "{}", "~"])
def test_a_file_without_a_record_is_refused_with_how_to_start(empty: str) -> None:
    with pytest.raises(BadRecord, match="start with 'schema: 1' and an id"):
        loads(empty)


@pytest.mark.parametrize(
    ("changes", "says"),
    [
        ({"schema": None}, "'schema' is required"),
        ({"schema": "2"}, "this program reads schema 1"),
        ({"id": None}, "'id' is required"),
        ({"id": "abc"}, "32 hexadecimal digits"),
        ({"id": "A" * 32}, "32 hexadecimal digits"),
        ({"case": "00000-00000"}, "does not belong to this id"),
        ({"contacts.0.items": ["pmp"]}, "contacts[0].items[0]: 'pmp' is not among the items"),
        ({"contacts.0.person": "p9"}, "'p9' is not among the persons (p1)"),
        ({"items.0.outlet": "w9"}, "items[0].outlet: 'w9' is not among the items"),
        ({"checks.0.of": "w9"}, "checks[0].of: 'w9' is not among the items"),
        ({"statements.0.person": "pump"}, "'pump' is not among the persons"),
        ({"scene.custody": [{"item": "x"}]}, "scene.custody[0].item: 'x' is not among the items"),
        ({"outcome": {"actions": [{"item": "x"}]}}, "outcome.actions[0].item: 'x'"),
        ({"items.1.id": "pump"}, "items[1].id: 'pump' is used twice in items"),
        ({"contacts.0.items": ["pump", "w3-1", "cord-1"]}, "a contact names one item or two"),
        ({"contacts.0.items": ["pump", "pump"]}, "a word stands twice"),
        ({"place": ["ward"]}, "place: expected fields under it"),
        ({"place": "ward"}, "place: expected fields under it, found 'ward'"),
        ({"items": {"id": "pump"}}, "items: expected a list"),
        ({"persons.0.signs": ["none", "unknown"]}, "'unknown' stands beside an answer"),
        ({"supply.voltage": "230"}, "has no unit"),
        ({"surroundings.humidity": "68 F"}, "is not a unit of relative humidity"),
        ({"surroundings.humidity": "130 %"}, "is outside 0 % RH to 100 % RH"),
        ({"event.at": "07:20"}, "is not a time"),
        ({"event.when": "x"}, "did you mean"),
    ],
)  # fmt: skip
def test_a_record_that_cannot_be_taken_says_where_and_why(
    changes: dict[str, Any], says: str
) -> None:
    if "event.when" in changes:
        changes, says = {"event.activty": "walking"}, "did you mean 'activity'?"
    found = faults(changes)
    assert any(says in each for each in found), found
    assert all(each.startswith("r.yaml:") for each in found)


def test_every_fault_is_reported_at_once() -> None:
    found = faults({"supply.voltage": "230", "surroundings.floor": "lava", "event.at": "noon",
                    "items.0.kind": "toaster", "plce": "x"})  # fmt: skip
    assert len(found) == 5


def test_wrong_references_and_ids_are_reported_at_once() -> None:
    assert (
        len(faults({"checks.0.of": "a", "contacts.0.items": ["b"], "statements.0.person": "c"}))
        == 3
    )


@pytest.mark.parametrize(
    ("changes", "place"),
    [({"scene.changes": ["none", "cleaned"]}, "scene.changes"),
     ({"persons.0.signs": ["none", "burn"]}, "persons[0].signs"),
     ({"items.0.condition": ["intact", "wet"]}, "items[0].condition"),
     ({"scene.flammable": ["none", "oxygen"]}, "scene.flammable"),
     ({"checks.0.disturbed": ["none", "cleaned"]}, "checks[0].disturbed")],
)  # fmt: skip
def test_none_beside_something_stays_a_visible_question(
    changes: dict[str, Any], place: str
) -> None:
    (question,) = loads(text(spoiled(changes))).questions
    assert question.startswith(place)


def test_microamperes_on_an_isolation_monitor_are_asked_about() -> None:
    (question,) = loads(text(spoiled({"supply.current_reading": "1.9 uA"}))).questions
    assert question.startswith("supply.current_reading: 1.9 uA is unusual")
    assert "was 1.90 mA meant?" in question


def test_every_time_of_a_record_is_found_wherever_it_stands() -> None:
    record = loads(text(spoiled({"entries": [{"at": "2026-01-15 08:00"}]})))
    assert {each.text for _, each in moments(record.incident)} == {
        "2026-01-14 07:20", "2026-09-01", "2026-01-14 09:00", "2026-01-15 08:00",
    }  # fmt: skip


# ---------------------------------------------------------------------- any input at all

SCALARS = st.one_of(
    st.sampled_from(["", "unknown", "no", "12:30", "010", "1 mA", "<5 uA", "nan V", "1e999 V", "pump", "p1",
                     "yes", "2026-01-14", "2026-10-25 02:30", "-1", "1,234 ohm", "I", "snap", "none"]),
    st.text(max_size=12),
)  # fmt: skip
TREES = st.recursive(
    SCALARS,
    lambda below: st.one_of(
        st.lists(below, max_size=3),
        st.dictionaries(
            st.one_of(st.sampled_from([name for each in (incident.Incident, incident.Item, incident.Check)
                                       for name, _ in fields.table(each)]), st.text(max_size=5)),
            below, max_size=4,
        ),
    ),
    max_leaves=12,
)  # fmt: skip


def paths(part: Any, above: str = "") -> list[str]:
    found = []
    pairs = (
        part.items()
        if isinstance(part, dict)
        else enumerate(part)
        if isinstance(part, list)
        else ()
    )
    for key, value in pairs:
        below = f"{above}.{key}" if above else str(key)
        found += [below, *paths(value, below)]
    return found


def answers(part: Any) -> Any:
    """Every answer of a part by field name, so that two readings can be compared."""
    if isinstance(part, tuple):
        return [answers(each) for each in part]
    if type(part).__module__ != incident.__name__:
        return part
    return {name: answers(getattr(part, name)) for name, _ in fields.table(type(part))}


def assert_read_or_refused(record: Any) -> None:
    try:
        found = from_plain(Plain("r", record))
    except TriageError:
        return
    again = loads(text(found.tree))
    assert again.digest == found.digest
    assert answers(again.incident) == answers(found.incident)


@settings(suppress_health_check=[HealthCheck.too_slow], deadline=None)
@given(TREES)
def test_any_tree_is_a_record_that_reads_back_or_a_deliberate_error(record: Any) -> None:
    assert_read_or_refused(record)


@settings(max_examples=300, deadline=None)
@given(st.sampled_from(paths(tree())), TREES)
def test_a_record_with_anything_in_any_place_reads_back_or_is_refused(
    path: str, value: Any
) -> None:
    assert_read_or_refused(spoiled({path: value}))


@settings(deadline=None)
@given(st.data())
def test_any_damage_to_the_text_of_a_record_is_read_or_refused(data: st.DataObject) -> None:
    whole = text(tree())
    place = data.draw(st.integers(0, len(whole)))
    cut = data.draw(st.integers(0, 10))
    damaged = whole[:place] + data.draw(st.text(max_size=8)) + whole[place + cut :]
    try:
        record = loads(damaged)
    except TriageError:
        return
    assert loads(text(record.tree)).digest == record.digest


def test_a_record_that_was_read_does_not_share_its_tree_with_the_sample() -> None:
    before = copy.deepcopy(tree())
    loads(text(tree()))
    assert tree() == before
