"""The figures of the human body: citations, and no number without one."""

import pytest

from triage.errors import BadTable
from triage.physics.figures import citations, cited, row, section, value

# Recalled from a standard that was not read: these must never be called published.
RECALLED = {
    "impedance: large, water", "impedance: large, saltwater", "impedance: medium, dry",
    "impedance: medium, water", "impedance: medium, saltwater", "impedance: small, dry",
    "impedance: small, saltwater", "networks: medical", "networks: let_go",
    "body: initial_resistance", "let_go: men",
}  # fmt: skip


def test_every_figure_has_a_source_and_says_how_it_is_known():
    assert len(citations()) > 30
    assert all(citation.source for _, citation in citations())


def test_recalled_figures_are_never_called_published():
    known = dict(citations())
    assert RECALLED <= set(known)
    assert {known[each].known for each in RECALLED} == {"memory"}


def test_chords_and_mixed_perception_curves_are_called_judgement():
    known = dict(citations())
    for each in ("zone_lines: b", "zone_lines: c1", "perception: touch", "perception: grip"):
        assert known[each].known == "judgement"


def test_a_row_is_found_by_its_id_and_an_unknown_one_is_refused():
    assert value("body", "hazard_floor") == 500
    assert cited("friction", "voltage").known == "published"
    with pytest.raises(BadTable, match="hazard_floor"):
        row("body", "elbow")
    with pytest.raises(BadTable, match="impedance"):
        section("soul")


def test_no_impedance_rises_with_voltage_or_falls_with_percentile():
    for table in section("impedance"):
        rows = table["rows"]
        assert [r["v"] for r in rows] == sorted({r["v"] for r in rows})
        for one, two in zip(rows, rows[1:], strict=False):
            assert all(a >= b for a, b in zip(one["ohm"], two["ohm"], strict=True))
        assert all(r["ohm"] == sorted(r["ohm"]) for r in rows)
