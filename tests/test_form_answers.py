"""Typed answers: read as a record file reads them, echoed in full, doubted where a unit slipped."""

import pytest
from form_walk import NOW

from triage.clock import parse
from triage.errors import InvalidValue
from triage.form.answers import pick, pick_several, read, read_value

SIGNS = [("none", "none seen or reported"), ("burn", "a burn"), ("thrown", "was thrown back"),
         ("could_not_let_go", "could not let go")]  # fmt: skip


def answer(path: str, typed: str, *, among=(), zone: str = "Europe/Vienna"):
    return read(path, typed, among=among, present=NOW, zone=zone)


@pytest.mark.parametrize(
    "typed", ["4", "could_not_let_go", "Could not let go", "could", "could-not"]
)
def test_a_choice_is_taken_by_number_word_or_clear_beginning(typed: str) -> None:
    assert pick(typed, SIGNS)[0] == "could_not_let_go"


@pytest.mark.parametrize("typed", ["0", "5", "x", "-1", "1.0", "٣"])
def test_what_is_not_among_the_choices_is_never_guessed(typed: str) -> None:
    with pytest.raises(InvalidValue, match="is not one of them"):
        pick(typed, SIGNS)


def test_a_beginning_that_fits_two_choices_is_never_guessed() -> None:
    with pytest.raises(InvalidValue, match="fits several"):
        pick("b", [("burn", "a burn"), ("buzz", "buzzing")])


@pytest.mark.parametrize(
    "typed", ["2 3", "2,3", "burn; thrown", "thrown burn", "burn, was thrown back"]
)
def test_several_choices_are_taken_in_any_order(typed: str) -> None:
    assert [word for word, _ in pick_several(typed, SIGNS)] == ["burn", "thrown"]


def test_one_bad_word_refuses_all_of_several() -> None:
    with pytest.raises(InvalidValue, match="'bun'"):
        pick_several("thrown bun", SIGNS)


# SI Brochure, 9th edition, table 7: milli 1e-3, micro 1e-6, kilo 1e3.
@pytest.mark.parametrize(
    ("path", "typed", "echo"),
    [
        ("supply.current_reading", "1.9 mA", "1.9 mA (0.0019 A)"),
        ("supply.current_reading", "1900 uA", "1900 uA (1.9 mA, 0.0019 A)"),
        ("supply.resistance_reading", "180 kohm", "180 kohm (180 kΩ, 180000 Ω)"),
        ("supply.voltage", "230 V", "230 V"),
        ("surroundings.temperature_at_place", "68 F", "68 F (20 °C)"),
        ("surroundings.humidity", "<20 %", "<20 % (< 20 % RH)"),
    ],
)
def test_a_quantity_is_echoed_in_full(path: str, typed: str, echo: str) -> None:
    assert answer(path, typed).echo == echo


def test_milliamperes_typed_as_amperes_are_doubted_with_the_likely_unit() -> None:
    found = answer("supply.current_reading", "0.9 A")
    assert "was 900 µA meant?" in found.doubt
    assert found.value == "0.9 A", "what was typed is kept, not what was guessed"


@pytest.mark.parametrize("typed", ["1.9", "1.9 V", "much", "1,234 mA", "-5 mA"])
def test_a_reading_without_its_unit_or_beyond_reason_is_refused(typed: str) -> None:
    with pytest.raises(InvalidValue):
        answer("supply.current_reading", typed)


@pytest.mark.parametrize("typed", ["u", "U", "unknown", " u "])
def test_not_known_is_an_answer_everywhere(typed: str) -> None:
    for path in (
        "persons[0].signs",
        "supply.voltage",
        "event.at",
        "place.room_name",
        "event.steps",
    ):
        assert answer(path, typed, among=SIGNS if "signs" in path else ()).value == "unknown"
    assert read_value(typed, "touch_current").value == "unknown"


# Vienna is one hour ahead of UTC in winter; the present of these tests is 10:00 UTC.
@pytest.mark.parametrize(
    ("typed", "value"),
    [
        ("now", "2026-12-01 11:00"),
        ("07:20", "2026-12-01 07:20"),
        ("7.20", "2026-12-01 07:20"),
        ("yesterday 23:59", "2026-11-30 23:59"),
        ("2026-01-14 morning", "2026-01-14 morning"),
    ],
)
def test_a_time_of_day_gets_the_day_of_the_site(typed: str, value: str) -> None:
    assert answer("event.at", typed).value == value


def test_now_in_a_doubled_hour_keeps_its_offset() -> None:
    # Clocks in Vienna went back from 03:00 to 02:00 on 25 October 2026 (Directive 2000/84/EC).
    doubled = parse("2026-10-25 00:30Z")
    found = read("event.at", "now", among=(), present=doubled, zone="Europe/Vienna")
    assert found.value == "2026-10-25 00:30Z"


@pytest.mark.parametrize("typed", ["25:00", "2026-02-30", "soon", "2026-03-29 02:30"])
def test_a_time_that_cannot_be_is_refused(typed: str) -> None:
    with pytest.raises(InvalidValue):
        answer("event.at", typed)


def test_a_value_of_a_check_is_held_against_the_range_of_its_kind() -> None:
    assert read_value("38 uA", "touch_current").doubt == ""
    assert "was 38.0 mA meant?" in read_value("38 A", "touch_current").doubt
    with pytest.raises(InvalidValue, match="not a unit of current"):
        read_value("0.1 ohm", "touch_current")


def test_a_text_longer_than_its_field_is_refused_and_not_cut() -> None:
    with pytest.raises(InvalidValue, match="at most 120"):
        answer("place.room_name", "x" * 121)


@pytest.mark.parametrize("typed", ["a\x1b[2J", "half \ud800", "null\x00"])
def test_text_that_could_act_on_a_terminal_is_refused(typed: str) -> None:
    with pytest.raises(InvalidValue, match="is not allowed"):
        answer("event.summary", typed)
