"""The look-back after a confirmed defect, question by question."""

from typing import Any

from triage.assessment import Assessment

_OWNER = {
    "biomedical": "biomedical engineering", "ward": "the ward", "electrician": "the electrician",
    "risk": "the risk office",
}  # fmt: skip


def look_back_blocks(a: Assessment) -> list[dict[str, Any]]:
    """A table of the questions for the report; empty where no defect is confirmed."""
    if not a.look_back:
        return []
    columns = [{"name": "Question", "width": 46}, {"name": "Answer", "width": 34},
               {"name": "By", "width": 20}]  # fmt: skip
    rows = [
        [each.question.ask, each.answer or "not yet done", each.by or _owner(each.question.owner)]
        for each in a.look_back
    ]
    return [{"kind": "table", "columns": columns, "rows": rows}]


def look_back_lines(a: Assessment) -> list[str]:
    """The same as lines of text."""
    return [
        f"{each.question.ask} {each.answer or f'Not yet done: {_owner(each.question.owner)}'}"
        + (f" ({each.by})" if each.by else "")
        for each in a.look_back
    ]


def _owner(owner: str) -> str:
    return _OWNER[owner]
