"""The facts part: reported, seen, measured, done; no ranking, no estimate, no opinion."""

import pytest
from printed_texts import NAMES, drawn, example, own_words, strings

from triage.documents.facts import STATE_WORDS, facts_sections
from triage.knowledge import knowledge


@pytest.mark.parametrize("name", NAMES)
def test_every_statement_stands_word_for_word_with_its_language(name: str) -> None:
    a = example(name)
    blocks = [b for section in facts_sections(a) for b in section["blocks"]]
    quotes = {b["text"]: b for b in blocks if b["kind"] == "quote"}

    for each in a.incident.statements:
        if each.words:
            assert quotes[each.words]["language"] == (each.language or "en")
            assert f"({each.id})" in quotes[each.words]["heading"]


@pytest.mark.parametrize("name", NAMES)
def test_every_check_stands_with_reading_and_verdict(name: str) -> None:
    a = example(name)
    (section,) = [s for s in facts_sections(a) if s["title"] == "Readings against limits"]
    rows = [row for b in section["blocks"] if b["kind"] == "table" for row in b["rows"]]

    assert len(rows) >= len(a.verdicts)
    for verdict in a.verdicts:
        wanted = STATE_WORDS[verdict.state]
        value = verdict.check.value or ""
        assert any(wanted in " ".join(row) and value in " ".join(row) for row in rows)


@pytest.mark.parametrize("seed", range(0, 120, 4))
def test_facts_hold_no_ranking_and_no_probability(seed: int) -> None:
    a = drawn(seed)
    shown = own_words(" . ".join(strings(facts_sections(a))), a)

    words = ("probable", "likely", "decibans", "estimate", "rank")
    assert [word for word in words if word in shown.lower()] == []
    assert not any(cause.name in shown for cause in knowledge().causes.values())


def test_a_record_without_checks_says_so() -> None:
    from triage.assessment import assess
    from triage.documents.field_guide import blank_record
    from triage.record import loads
    from triage.site import no_site

    a = assess(loads(blank_record("0123456789abcdef" * 2)), no_site())
    assert "No check is on record." in list(strings(facts_sections(a)))
