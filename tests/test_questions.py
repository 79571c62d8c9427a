"""Questions: every one fits the table of fields, and a table that does not is refused."""

import copy

import pytest

from triage import questions
from triage.check_table import check_kinds
from triage.errors import BadTable
from triage.questions import every_question, field_at, room_defaults, sections
from triage.tables import table


@pytest.fixture
def spoiled(monkeypatch: pytest.MonkeyPatch):
    """Load the questions from a copy that a test may spoil."""
    found = copy.deepcopy(table("questions"))
    monkeypatch.setattr(questions, "table", lambda name: found)
    sections.cache_clear()
    room_defaults.cache_clear()
    yield found
    sections.cache_clear()
    room_defaults.cache_clear()


def test_the_first_minute_has_at_most_eight_questions() -> None:
    assert sections()[0].id == "first_minute"
    assert len(sections()[0].questions) == 8


def test_every_question_is_one_short_sentence() -> None:
    for section, question in every_question():
        assert len(question.ask.split()) <= 16, f"{section.id} {question.id}"
        assert question.ask.endswith("?")
        assert question.ask.count("?") == 1


def test_no_field_is_asked_for_twice_outside_of_the_first_minute() -> None:
    paths = [question.path for _, question in every_question() if question.path]
    assert sorted(set(paths)) == sorted(paths)


def test_every_answer_of_the_gate_to_static_controls_is_asked_for() -> None:
    asked = {question.path for _, question in every_question()}
    asked |= {path for _, q in every_question() for option in q.options for path, _ in option.sets}
    assert asked >= {
        "statements[].sensation", "statements[].timing", "statements[].repeat_at_once",
        "statements[].others_felt", "contacts[].moisture", "contacts[].also_touching",
        "supply.kind", "supply.alarm", "surroundings.humidity", "surroundings.floor",
        "surroundings.footwear", "items[].casters", "event.electrosurgery_active",
        "event.pulse_delivered", "event.line_event", "event.pins_touched", "scene.dependence",
        "scene.live_contact", "scene.heart_conductor", "scene.changes",
    }  # fmt: skip


@pytest.mark.parametrize(
    "path", ["event.nowhen", "persons.signs", "event[].at", "persons[]", "event"]
)
def test_a_path_that_is_no_field_is_refused(path: str) -> None:
    with pytest.raises(BadTable):
        field_at(path)


def test_a_condition_with_an_unknown_word_is_refused(spoiled) -> None:
    spoiled["sections"][1]["questions"][1]["when"] = [{"path": "persons[].who", "among": ["robot"]}]
    with pytest.raises(BadTable, match="robot"):
        sections()


def test_an_option_that_sets_an_unknown_word_is_refused(spoiled) -> None:
    spoiled["sections"][0]["questions"][0]["options"][0]["sets"] = {"scene.live_contact": "perhaps"}
    with pytest.raises(BadTable, match="perhaps"):
        sections()


def test_a_question_of_another_list_is_refused(spoiled) -> None:
    spoiled["sections"][1]["questions"][0]["path"] = "items[].kind"
    with pytest.raises(BadTable, match="does not belong"):
        sections()


def test_an_id_used_twice_is_refused(spoiled) -> None:
    spoiled["sections"][1]["questions"][1]["id"] = "first_hurt"
    with pytest.raises(BadTable, match="used twice: first_hurt"):
        sections()


def test_a_room_default_that_no_site_file_has_is_refused(spoiled) -> None:
    spoiled["room_defaults"]["wallpaper"] = "place.area"
    with pytest.raises(BadTable, match="wallpaper"):
        room_defaults()


def test_a_value_is_asked_for_exactly_where_the_kind_of_check_has_one() -> None:
    (value,) = [q for _, q in every_question() if q.path == "checks[].value"]
    without = {kind.id for kind in check_kinds().values() if kind.quantity is None}
    assert value.when[1].not_among == without
