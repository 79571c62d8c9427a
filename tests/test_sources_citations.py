"""No printed number without a source that says how it is known."""

import re

import pytest
from printed_texts import NAMES, drawn, example, report_context, strings

from triage.citation import KNOWN
from triage.documents.sources import source_lines, sources

SEEDS = list(range(0, 60, 5))


def assessments(case: int | str):
    """An example by name or a random record by seed."""
    return drawn(case) if isinstance(case, int) else example(case)


@pytest.mark.parametrize("case", [*NAMES, *SEEDS])
def test_every_source_line_names_its_source_and_ends_in_how_it_is_known(case: int | str) -> None:
    lines = source_lines(assessments(case))

    assert len(lines) >= 10
    assert [line for line in lines if not re.search(rf"\(({'|'.join(KNOWN)})\)", line)] == []
    assert [line for line in lines if not line.split(": ", 1)[1].strip()] == []
    assert len(lines) == len(set(lines))


@pytest.mark.parametrize("case", [*NAMES, *SEEDS])
def test_every_limit_that_a_reading_was_held_against_is_listed(case: int | str) -> None:
    a = assessments(case)
    lines = " ".join(source_lines(a))
    used = [
        comparison.limit
        for verdict in a.verdicts
        for judgement in verdict.judgements
        for comparison in judgement.comparisons
    ]
    used += [verdict.limit for verdict in a.verdicts if verdict.limit]

    assert [each.id for each in used if each.text not in lines] == []
    assert [each.id for each in used if each.citation.text() not in lines] == []


@pytest.mark.parametrize("case", [*NAMES, *SEEDS])
def test_everything_that_is_cited_by_what_is_printed_is_listed(case: int | str) -> None:
    a = assessments(case)
    listed = {citation for _, citation in sources(a)}

    assert {row.citation for row in a.care.rows} <= listed
    assert {c.citation for c in a.cautions if c.citation} <= listed
    assert {n.kind.citation for n in a.next_checks} <= listed


@pytest.mark.parametrize("case", [*NAMES, *SEEDS])
def test_what_the_shown_estimates_rest_on_is_listed(case: int | str) -> None:
    a = assessments(case)
    names = " ".join(name for name, _ in sources(a))
    quantities = [row[0] for row in report_context(a)["page_one"]["estimates"]]

    if any("Voltage" in each for each in quantities):
        assert "floors" in names or "floor" in names
        assert "felt" in names and "capacitance" in names
    if any("Touch current" in each for each in quantities):
        assert "perception" in names


@pytest.mark.parametrize("name", NAMES)
def test_the_report_prints_every_source_line(name: str) -> None:
    a = example(name)
    shown = set(strings(report_context(a)["parts"]))

    assert [line for line in source_lines(a) if line not in shown] == []
