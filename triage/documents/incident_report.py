"""The incident report: one document for the risk office, facts and analysis apart."""

from pathlib import Path
from typing import Any

from triage.assessment import Assessment
from triage.documents.analysis import analysis_sections
from triage.documents.as_data import as_data
from triage.documents.facts import facts_sections
from triage.documents.page_one import page_one
from triage.documents.sources import source_lines
from triage.documents.summary import Summary, summarise, watch_line
from triage.documents.whole_file import write_whole
from triage.documents.wording import room_name, spoken
from triage.render import Attachment, render_html, render_pdf
from triage.tables import table


def context(a: Assessment, s: Summary, *, page_one_only: bool = False) -> dict[str, Any]:
    """Everything the template may name, worded and rounded.

    Args:
        a: the assessment. s: its summary.
        page_one_only: leave the other parts out.
    """
    file = a.site.file
    state = "final" if a.incident.outcome.confirmed_cause else "preliminary"
    parts = [] if page_one_only else _parts(a, s)
    paper, heading = file.paper or "A4", _heading(a)
    return {
        "language": file.language or "en",
        "paper": paper,
        "title": f"Incident report {a.record.case}, issue 1, {state}",
        "draft": False,
        "running": {
            "issue": f"Incident {a.record.case} · issue 1 · {state}",
            "digest": f"record {a.record.digest[:12]} · knowledge {a.knowledge[:8]} · "
            f"program {a.version}",
            "page": "Page",
            "of": "of",
        },
        "heading": {"name": "Incident report", "lines": heading},
        "page_one": page_one(a, s, heading, paper),
        "parts": parts,
    }


def _heading(a: Assessment) -> list[str]:
    incident, facility = a.incident, a.site.file.facility
    place = room_name(a)
    when = incident.event.at.text if incident.event.at else "time not known"
    by = incident.recorded_by or "role not recorded"
    at = f", {incident.recorded_at.text}" if incident.recorded_at else ""
    where = f"{facility} · {place}" if facility else place
    return [f"{where} · event {when}", f"Recorded by {by}{at}"]


def _parts(a: Assessment, s: Summary) -> list[dict[str, Any]]:
    wording = a.site.file.wording
    return [
        {"title": "Facts", "marking": wording.facts_marking or "", "sections": facts_sections(a)},
        {"title": "Analysis", "marking": wording.analysis_marking or "",
         "sections": analysis_sections(a)},
        {"title": "Cautions, signatures, sources", "marking": wording.analysis_marking or "",
         "sections": _closing(a, s)},
    ]  # fmt: skip


def _closing(a: Assessment, s: Summary) -> list[dict[str, Any]]:
    sections = [
        {"title": "Not known", "wide": False,
         "blocks": [{"kind": "list", "lines": list(s.unknown)}]},
        {"title": "Cautions", "wide": False,
         "blocks": [{"kind": "list", "lines": list(s.cautions)}]},
        {"title": "The person", "wide": False, "blocks": _care(a)},
        {"title": "Signatures", "wide": True,
         "blocks": [{"kind": "signatures", "columns": _SIGNATURE_COLUMNS,
                     "rows": _SIGNATURE_ROWS}]},
        {"title": "Departures and versions", "wide": False,
         "blocks": [{"kind": "list", "lines": list(_departures(a))}]},
        {"title": "Sources of the numbers", "wide": True,
         "blocks": [{"kind": "text", "class": "note", "text": _SOURCES_NOTE},
                    {"kind": "sources", "lines": list(source_lines(a))}]},
    ]  # fmt: skip
    if s.questions:
        sections.insert(0, {"title": "Please confirm", "wide": False,
                            "blocks": [{"kind": "list", "lines": list(s.questions)}]})  # fmt: skip
    return sections


def _care(a: Assessment) -> list[dict[str, Any]]:
    """Every action for the person, and the published positions where they differ."""
    rows = [
        [row.action, _URGENCY[row.urgency], " ".join(row.sources) or "—"] for row in a.care.rows
    ]
    columns = [{"name": "What to arrange", "width": 42}, {"name": "How soon", "width": 14},
               {"name": "Published positions", "width": 44}]  # fmt: skip
    return [
        {"kind": "table", "columns": columns, "rows": rows},
        {"kind": "text", "text": watch_line()},
        {"kind": "text", "class": "note", "text": " ".join(table("care")["disclaimer"].split())},
    ]


_URGENCY = {"now": "now", "same_day": "today", "route": "ordinary route"}
_SIGNATURE_COLUMNS = [
    {"name": "Part", "width": 16}, {"name": "Role", "width": 34},
    {"name": "Signature", "width": 32}, {"name": "Date", "width": 18},
]  # fmt: skip
_SIGNATURE_ROWS = [[part, "", "", ""] for part in ("Author", "Reviewer", "Approver")]
_SOURCES_NOTE = (
    "Published: the source was read. Memory: recalled, verify against the edition in force. "
    "Judgement: a choice of this program with its reason. Local codes, the maker's instructions "
    "and licensed practice take precedence."
)


def _departures(a: Assessment) -> list[str]:
    file = a.site.file
    lines = [f"Edition in force for {spoken(e.check)}: {e.edition}" for e in file.editions]
    lines += [f"Limit {t.limit} tightened to {t.value}" for t in file.tightened]
    lines += [
        f"{spoken(r.cause)} made {r.times} times as probable: {r.reason or 'no reason'}"
        for r in file.policy.raised
    ]
    if file.policy.miss_ratio:
        lines.append(f"A missed fault weighs as {file.policy.miss_ratio} needless holds")
    for approval in file.approvals:
        when = approval.at.text if approval.at else "date not recorded"
        lines.append(f"Site file approved by {approval.role or 'role not recorded'}, {when}")
    if not lines:
        lines.append("Shipped values throughout; no site file departs from them")
    lines.append(f"Record {a.record.digest}")
    lines.append(f"Site file {a.site.digest}")
    lines.append(f"Knowledge {a.knowledge}; program {a.version}; schema {a.schema}")
    return lines


def write_report(a: Assessment, target: Path, *, page_one_only: bool = False) -> tuple[str, ...]:
    """Write the report as one PDF with the record and the assessment inside.

    Args:
        a: the assessment.
        target: the file to write; it appears whole or not at all.
        page_one_only: page one alone.

    Returns:
        Notes for the person who asked, such as characters printed as codes.

    Raises:
        CannotWrite: the place cannot be written.
        MissingLibrary: a system library for rendering is absent.
    """
    import json

    from triage.canonical import canonical

    s = summarise(a)
    made = context(a, s, page_one_only=page_one_only)
    data = json.dumps(as_data(a, s), ensure_ascii=False, indent=1, sort_keys=True).encode()
    attached = [
        Attachment("record.json", canonical(a.record.tree), "The record in canonical form"),
        Attachment("assessment.json", data, "The assessment as data"),
    ]
    pdf = render_pdf(
        render_html("incident_report.html", made), title=made["title"], attachments=attached,
        identifier=bytes.fromhex(a.record.digest)[:16],
    )  # fmt: skip
    write_whole(target, pdf.content)
    if pdf.missing_glyphs:
        count = len(pdf.missing_glyphs)
        return (f"{count} characters have no glyph here and are printed as codes",)
    return ()
