"""The terminal: narrow lines, marked characters, one order, reasons only when asked for."""

import pytest
from printed_texts import NAMES, RAW, UNDERSCORED, drawn, example, own_words
from sample_records import text, tree

from triage.assessment import assess
from triage.documents.plain_text import WIDTH, plain_text
from triage.documents.summary import summarise
from triage.record import loads
from triage.site import no_site


@pytest.mark.parametrize("name", NAMES)
def test_no_line_is_wider_than_a_terminal(name: str) -> None:
    lines = plain_text(example(name), why=True).splitlines()

    assert [line for line in lines if len(line) > WIDTH and not line.startswith("WEIGHTS")] == []
    assert all(line == line.rstrip() for line in lines)


@pytest.mark.parametrize("name", NAMES)
def test_every_line_of_the_summary_is_on_the_terminal(name: str) -> None:
    a = example(name)
    s, flat = summarise(a), " ".join(plain_text(a).split())
    said = [*s.person, *s.reviews, s.condition, s.headline, s.room, *s.defects, s.causes_lead,
            s.causes_note, *s.unknown, *s.questions, *s.cautions,
            *(line for _, lines in s.next_checks for line in lines),
            *(i.disposition for i in s.items)]  # fmt: skip

    assert [each for each in said if " ".join(each.split()) not in flat] == []


def test_typed_characters_that_could_act_are_shown_as_their_codes() -> None:
    record = tree()
    record["items"][0]["name"] = "pump\u202e\u200b"
    record["event"]["summary"] = "e" + "\u0301" * 9
    shown = plain_text(assess(loads(text(record)), no_site()), why=True)

    assert "pump[U+202E][U+200B]" in shown and "[U+0301]×6" in shown
    assert RAW.findall(shown) == []


@pytest.mark.parametrize("seed", range(0, 60, 3))
def test_checks_are_numbered_through_all_performers(seed: int) -> None:
    a = drawn(seed)
    body = plain_text(a).split("\nNEXT CHECKS\n")[1].split("\nCAUTIONS\n")[0]
    numbers = [int(x.split(".")[0]) for x in body.splitlines() if x[2:4].strip(" .").isdigit()]

    assert numbers == list(range(1, len(a.next_checks) + 1))


@pytest.mark.parametrize("name", NAMES)
def test_the_weights_add_up_to_the_odds_they_print(name: str) -> None:
    a = example(name)
    body = plain_text(a, why=True).split("\nWEIGHTS in decibans")[1].split("\nRED FLAGS")[0]
    rows = [line.split(None, 1) for line in body.splitlines()[1:] if line.strip()]

    assert rows[-1][1] == "odds of the pair"
    total = float(rows[-1][0])
    assert sum(float(value) for value, _ in rows[:-1]) == pytest.approx(total, abs=0.05 * len(rows))


@pytest.mark.parametrize("seed", range(0, 60, 6))
def test_reasons_are_printed_in_words_and_not_as_a_program_writes_them(seed: int) -> None:
    a = drawn(seed)

    assert UNDERSCORED.findall(own_words(plain_text(a, why=True), a)) == []
