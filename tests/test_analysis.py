"""The analysis part: every section, charts with words, the same numbers as page one."""

import re

import pytest
from printed_texts import NAMES, drawn, example, strings

from triage.documents.analysis import analysis_sections
from triage.documents.wording import likelihood, percent_range
from triage.knowledge import knowledge


def titles(seed_or_name: int | str) -> list[str]:
    """Titles of the sections of an example or a random record."""
    a = drawn(seed_or_name) if isinstance(seed_or_name, int) else example(seed_or_name)
    return [each["title"] for each in analysis_sections(a)]


@pytest.mark.parametrize("name", NAMES)
def test_ranking_reasons_and_physics_are_always_there(name: str) -> None:
    found = titles(name)

    for title in ("Ranked causes", "What was physically possible", "Why this disposition"):
        assert title in found
    assert len(found) == len(set(found))


@pytest.mark.parametrize("name", NAMES)
def test_the_table_of_causes_says_what_the_ranking_says(name: str) -> None:
    a = example(name)
    section = next(s for s in analysis_sections(a) if s["title"] == "Ranked causes")
    rows = next(b for b in section["blocks"] if b["kind"] == "table")["rows"]
    causes = {cause.name: key for key, cause in knowledge().causes.items()}

    assert [causes[row[0]] for row in rows] == [
        c for c in a.posterior.ranked if causes_shown(c, rows, causes)
    ]
    for row in rows:
        cause = causes[row[0]]
        assert likelihood(a.posterior.of(cause)) in row
        assert percent_range(a.sensitivity.ranges[cause]) in row


def causes_shown(cause: str, rows: list[list[str]], causes: dict[str, str]) -> bool:
    """Whether a cause has a row."""
    return cause in {causes[row[0]] for row in rows}


@pytest.mark.parametrize("seed", range(0, 60, 5))
def test_every_chart_is_told_in_words_first_and_has_a_caption(seed: int) -> None:
    blocks = [b for s in analysis_sections(drawn(seed)) for b in s["blocks"]]
    charts = [b for b in blocks if b["kind"] == "chart"]

    assert charts
    for each in charts:
        told = re.search(r"<title>(.*?)</title>", each["svg"], re.DOTALL)
        assert told and len(told[1]) > 30 and each["caption"].strip()
        assert "nan" not in each["svg"] and "inf" not in each["svg"].replace("infusion", "")


@pytest.mark.parametrize("name", NAMES)
def test_every_flag_and_every_reason_stands_in_the_analysis(name: str) -> None:
    a = example(name)
    shown = " ".join(strings(analysis_sections(a)))

    assert [f.flag.name for f in a.flags if f.flag.name not in shown] == []
    assert [r for i in a.items for r in i.reasons if r not in shown] == []
