"""Every number that can be printed is printed once with value, source and how it is known."""

import re

import pytest
from random_records import record
from test_citations import Path, citations, numbers
from test_tables import NAMES
from typer.testing import CliRunner

from triage.assessment import assess
from triage.citation import KNOWN
from triage.cli import app
from triage.documents.all_sources import as_lines, rows
from triage.documents.sources import source_lines, sources
from triage.errors import InvalidValue
from triage.site import no_site
from triage.tables import table

ROWS = list(rows())


def test_every_table_that_cites_stands_in_the_list():
    citing = {name for name in NAMES if any(citations(table(name)))}
    assert citing <= {row.group for row in ROWS}


def leaf(tree: object, path: Path) -> object:
    for step in path:
        if isinstance(tree, dict):
            tree = tree[step]
        else:
            by_id = {str(e.get("id", n)) if isinstance(e, dict) else str(n): e
                     for n, e in enumerate(tree)}  # fmt: skip
            tree = by_id[step]
    return tree


@pytest.mark.parametrize("group", NAMES)
def test_every_number_of_a_table_stands_in_the_printed_list(group):
    printed = " ".join(row.value for row in ROWS if row.group == group)
    shown = set(re.findall(r"[-+]?[0-9][0-9.e+-]*", printed.replace(",", " ")))
    for path in numbers(table(group)):
        value = leaf(table(group), path)
        text = f"{value:g}" if isinstance(value, float) else str(value)
        assert text in shown, f"{group} {'.'.join(path)}"


@pytest.mark.parametrize("group", NAMES)
def test_every_citation_of_a_table_is_named(group):
    named = {(row.citation.source, row.citation.known) for row in ROWS if row.group == group}
    for path, found in citations(table(group)):
        if group != "limits" or path[0] != "editions":
            assert (str(found["source"]), str(found["known"])) in named, ".".join(path)


def test_a_row_recalled_inside_a_published_table_is_called_memory():
    row = next(
        r for r in ROWS if r.group == "body" and r.name.startswith("impedance / 1 / rows / 3")
    )
    assert "v 75" in row.value and row.citation.known == "memory"


@pytest.mark.parametrize("known", KNOWN)
def test_the_filter_keeps_exactly_those_known_so(known):
    kept = list(rows(known))
    assert kept == [row for row in ROWS if row.citation.known == known]
    assert kept


def test_another_word_for_known_is_refused_with_the_words_there_are():
    with pytest.raises(InvalidValue, match="memory"):
        list(rows("guess"))


def test_the_command_prints_every_group_with_its_count():
    done = CliRunner().invoke(app, ["sources"])
    assert done.exit_code == 0
    for group in {row.group for row in ROWS}:
        assert f"(data/{group}.yaml, {sum(r.group == group for r in ROWS)})" in done.stdout
    assert list(as_lines())[-1] in done.stdout
    few = CliRunner().invoke(app, ["sources", "--known", "memory"])
    kept = [line for line in few.stdout.splitlines() if line.startswith("  ")]
    assert kept and all(line.endswith("(memory)") for line in kept)


def test_the_sources_of_a_case_hold_every_source_of_its_static_estimates():
    case = assess(record({"schema": "1", "id": "0123456789abcdef" * 2}), no_site())
    named = {found for _, found in sources(case)}
    for each in case.exposure.causes.values():
        if each.static is not None:
            for basis in each.static.felt.basis.values():
                assert basis.citation is None or basis.citation in named
    assert len(source_lines(case)) == len(set(source_lines(case)))
