from dataclasses import dataclass
from typing import Any

import pytest

from triage import fields
from triage.errors import BadRecord
from triage.fields import UNKNOWN, Field, Reader, table
from triage.strict_yaml import Plain, parse

COLOURS = {"red": (1, ""), "blue_green": (-1, ""), "IV": (None, "")}


@dataclass(frozen=True, slots=True, kw_only=True)
class Leaf:
    id: str = fields.ident("Short id.", required=True)
    note: str | None = fields.text("A note.", 10)


@dataclass(frozen=True, slots=True, kw_only=True)
class Tree:
    name: str | None = fields.text("Name.", 20)
    colour: str | None = fields.word("Colour.", COLOURS)
    colours: tuple[str, ...] = fields.several("Colours.", COLOURS)
    links: tuple[str, ...] = fields.references("Leaves named.", "leaves")
    sure: str | None = fields.yes_no("Sure?")
    steps: int | None = fields.count("Steps.", 0, 100)
    current: Any = fields.amount("Current.", "current", possible=(0, 1), plausible=(1e-5, 0.05))
    at: Any = fields.time("When.")
    leaves: tuple[Leaf, ...] = fields.parts("Leaves.", Leaf, 3)


def built(text: str) -> tuple[Tree, Reader]:
    reader = Reader(parse(text, "f.yaml"))
    found = reader.build(Tree, reader.plain.tree, "")
    reader.finish()
    return found, reader


def faults(text: str) -> list[str]:
    with pytest.raises(BadRecord) as caught:
        built(text)
    return caught.value.faults


@pytest.mark.parametrize(
    "typed", ["", "unknown", "~", "null", "Unknown", "UNKNOWN", "NULL", "' unknown '"]
)
@pytest.mark.parametrize("name", [name for name, _ in table(Tree)])
def test_unknown_blank_and_left_out_are_the_same_for_every_kind_of_field(
    name: str, typed: str
) -> None:
    assert getattr(built(f"{name}: {typed}\n")[0], name) == getattr(Tree(), name)


def test_all_faults_come_at_once_each_with_line_column_and_path() -> None:
    found = faults(
        "nam: x\ncolour: pink\nsteps: 5 m\ncurrent: '5'\nat: '12:30'\nleaves:\n- note: far too long a note\n"
    )
    assert [each.split(" ")[0] for each in found] == [
        "f.yaml:1:6", "f.yaml:2:9", "f.yaml:3:8", "f.yaml:4:10", "f.yaml:5:5", "f.yaml:7:9", "f.yaml:7:3",
    ]  # fmt: skip
    assert [each.split(" ")[1] for each in found] == [
        "nam:", "colour:", "steps:", "current:", "at:", "leaves[0].note:", "leaves[0]:",
    ]  # fmt: skip


@pytest.mark.parametrize(
    ("text", "says"),
    [
        ("colou: red\n", "did you mean 'colour'?"),
        ("zzzzzz: red\n", "known here: name, colour"),
        ("12: red\n", "no field of that name"),
        ("'': red\n", "no field of that name"),
        ("colour: pink\n", "'pink' is not one of: red, blue_green, IV, unknown"),
        ("colour: [red]\n", "expected one value, found a list"),
        ("colour: {red: 1}\n", "expected one value, found a group"),
        ("colours: red\n", "expected a list, found 'red'"),
        ("colours: {red: 1}\n", "expected a list"),
        ("colours: [[red]]\n", "expected one value, found a list"),
        ("colours: [pink, red]\n", "colours[0]: 'pink' is not one of"),
        ("leaves: x\n", "expected a list, found 'x'"),
        ("leaves: [x]\n", "expected fields under it, found 'x'"),
        ("leaves: [[a]]\n", "expected fields under it"),
        ("leaves: [{id: a}, {id: b}, {id: c}, {id: d}]\n", "4 entries; at most 3 are allowed"),
        ("leaves: [{note: a}]\n", "'id' is required: Short id."),
        ("leaves: [{id: unknown}]\n", "'id' is required"),
        ("leaves: [{id: 'a b'}]\n", "'a b' is not an id"),
        ("leaves: [{id: ../x}]\n", "is not an id"),
        ("name: 123456789012345678901\n", "21 characters; at most 20 are kept"),
        ("steps: -1\n", "is not a whole number from 0 to 100"),
        ("steps: 101\n", "is not a whole number from 0 to 100"),
        ("steps: 1.0\n", "is not a whole number"),
        ("steps: 1e1\n", "is not a whole number"),
        ("steps: '\u0665'\n", "is not a whole number"),
        ("steps: 99999999999999999999\n", "is not a whole number"),
        ("current: 2 A\n", "2 A is outside 0 A to 1.0 A"),
        ("current: -1 mA\n", "-1 mA is outside"),
        ("current: 5\n", "'5' has no unit"),
        ("at: 07:20\n", "is not a time"),
        ("sure: 'true'\n", "'true' is not one of: yes, no, unknown"),
        ("sure: n\n", "'n' is not one of: yes, no, unknown"),
        ("links: [a, a]\n", "a word stands twice"),
        ("colours: [red, RED]\n", "a word stands twice"),
        ("colours: [blue_green, unknown]\n", "'unknown' stands beside an answer"),
        ("colours: ['', red]\n", "'unknown' stands beside an answer"),
    ],
)  # fmt: skip
def test_a_fault_says_what_was_found_and_what_would_do(text: str, says: str) -> None:
    assert any(says in each for each in faults(text)), faults(text)


@pytest.mark.parametrize("bad", ["\x00", "\x1b", "\x7f", "\x9f", "\ud800"])
def test_a_control_character_is_refused_also_where_no_file_was_read(bad: str) -> None:
    reader = Reader(Plain("form", {"name": f"x{bad}y"}))
    reader.build(Tree, reader.plain.tree, "")
    with pytest.raises(BadRecord, match=f"name: control character U.{ord(bad):04X} is not allowed"):
        reader.finish()


def test_a_long_wrong_value_is_shown_shortened() -> None:
    (found,) = faults("colour: " + "x" * 500 + "\n")
    assert len(found) < 140 and "..." in found


@pytest.mark.parametrize(
    ("typed", "word"),
    [("red", "red"), ("Red", "red"), ("blue green", "blue_green"), ("Blue-Green", "blue_green"),
     ("IV", "IV"), ("iv", "IV"), ("' red '", "red")],
)  # fmt: skip
def test_a_word_is_recognised_in_any_case_and_kept_as_the_list_has_it(
    typed: str, word: str
) -> None:
    assert built(f"colour: {typed}\n")[0].colour == word


@pytest.mark.parametrize(("typed", "steps"), [("010", 10), ("08", 8), ("0", 0), ("100", 100)])
def test_a_leading_zero_does_not_change_a_count(typed: str, steps: int) -> None:
    assert built(f"steps: {typed}\n")[0].steps == steps


def test_free_text_is_kept_exactly() -> None:
    assert built("name: '  no, 12:30 '\n")[0].name == "  no, 12:30 "


@pytest.mark.parametrize(
    ("typed", "meant"),
    [("5 uA", "5.00 mA"), ("0.9 uA", "900 \u00b5A"), ("5 nA", "5.00 mA"), ("80 mA", "80.0 \u00b5A")],
)  # fmt: skip
def test_a_likely_slip_of_unit_becomes_a_question_and_keeps_the_value(
    typed: str, meant: str
) -> None:
    found, reader = built(f"current: {typed}\n")
    (question,) = reader.questions
    assert question.startswith("current: ") and f"was {meant} meant?" in question
    assert found.current.text == typed


@pytest.mark.parametrize("typed", ["0 A", "0.0 mA"])
def test_an_implausible_value_without_a_likely_slip_asks_for_confirmation(typed: str) -> None:
    (question,) = built(f"current: {typed}\n")[1].questions
    assert "please confirm" in question


def test_a_plausible_value_raises_no_question() -> None:
    assert built("current: 1.9 mA\n")[1].questions == []


def test_an_answer_that_is_not_known_stands_between_reassuring_and_adverse() -> None:
    row = Field("word", "Colour.", words=COLOURS)
    assert (row.order("blue_green"), row.order(None), row.order("red")) == (-1, 0, 1)
    assert row.order("IV") is None
    assert fields.YES_ADVERSE["yes"][0] == fields.NO_ADVERSE["no"][0] == 1
    assert fields.YES_ADVERSE["no"][0] == fields.NO_ADVERSE["yes"][0] == -1
    assert {each[0] for each in fields.YES_NO_NEUTRAL.values()} == {None}


def test_the_words_for_not_known_are_lower_case_as_they_are_compared() -> None:
    assert {each.lower() for each in UNKNOWN} == UNKNOWN
