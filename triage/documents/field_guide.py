"""The record's fields in words: the guide for people, and an empty record to fill in.

Both are made from the one table of fields, so they cannot go stale.
"""

from collections.abc import Iterator

from triage.canonical import case_number
from triage.fields import Field, WordList, table
from triage.incident import SCHEMA, Incident
from triage.quantity import EXAMPLE

_TIME = "a time, such as 2026-01-14 07:20, 2026-01-14 morning or 2026-01-14"


def field_guide() -> str:
    """Every field of the record as Markdown, one list a part."""
    lines = ["Every field may be left out or `unknown`, but those marked *required*.", ""]
    for title, record_class in _classes(Incident, "record"):
        lines += [f"**{title}**", ""]
        for name, row in table(record_class):
            lines.append(f"- `{name}`{' (*required*)' if row.required else ''}: {_row(row)}")
        lines.append("")
    return "\n".join(lines).rstrip() + "\n"


def _classes(record_class: type, title: str) -> Iterator[tuple[str, type]]:
    yield title, record_class
    for name, row in table(record_class):
        if row.of is not None:
            path = name if title == "record" else f"{title}.{name}"
            yield from _classes(row.of, f"{path}[]" if row.kind == "parts" else path)


def _row(row: Field) -> str:
    return f"{row.help} {_answer(row)}".rstrip()


def _answer(row: Field) -> str:
    """How the answer is typed."""
    if row.kind == "word":
        return f"*{_words(row.words)}*"
    if row.kind == "words":
        inside = _words(row.words) if row.words else f"ids of {row.to}" if row.to else "words"
        return f"*A list of: {inside}*"
    if row.kind == "quantity":
        return f"*Such as {EXAMPLE[row.quantity]}.*"
    if row.kind == "time":
        return f"*{_TIME.capitalize()}.*"
    if row.kind == "reference":
        return f"*The id of one of the {row.to}.*"
    if row.kind == "count":
        return "*A whole number.*"
    return ""


def _words(words: WordList) -> str:
    return ", ".join(words)


def blank_record(record_id: str) -> str:
    """An empty record with a comment at every field.

    Args:
        record_id: 32 hexadecimal digits, new for every record.
    """
    lines = [
        "# One incident. Leave out, or write `unknown`, whatever is not known.",
        "# Roles, never names; no patient identifiers anywhere.",
        f"schema: {SCHEMA}",
        f"id: {record_id}",
        f"case: {case_number(record_id)}",
    ]
    for name, row in table(Incident):
        if name not in ("schema", "id", "case"):
            lines += _blank(name, row, "")
    return "\n".join(lines) + "\n"


def _blank(name: str, row: Field, indent: str) -> Iterator[str]:
    hint = f"{row.help} {_answer(row)}".replace("*", "").strip()
    if row.of is None:
        yield f"{indent}# {name}:  # {hint}"
        return
    yield f"{indent}# {row.help}"
    yield f"{indent}{'# ' if indent.startswith('#') else ''}{name}:"
    if row.kind == "part":
        for below, each in table(row.of):
            yield from _blank(below, each, f"{indent}  ")
        return
    mark = "- "
    for below, each in table(row.of):
        hint = f"{each.help} {_answer(each)}".replace("*", "").strip()
        yield f"{indent}  # {mark}{below}:  # {hint}"
        mark = "  "
