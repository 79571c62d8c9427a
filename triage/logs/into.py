"""Values of a log put into the text of a record, which is checked to say just that in addition."""

import json
import re
from typing import Any

from triage.errors import BadRecord, CannotWrite
from triage.fields import is_unknown
from triage.logs.reading import LogReading
from triage.quantity import worded
from triage.strict_yaml import parse

Values = dict[str, dict[str, str]]
"""Section of a record to field to text."""


def values_for(reading: LogReading) -> Values:
    """What a reading fills in a record: the excerpt always, the rest where there is a value."""
    kind, found = reading.log.options.kind, {"log_excerpt": reading.excerpt.strip()}
    if reading.value is None:
        return {"surroundings": found}
    at, shown = reading.moment.text, as_typed(reading.value, kind, reading.bound)
    sensor = f"{reading.log.sensor} (log)"[-80:]
    if kind == "humidity":
        return {"surroundings": {"humidity": shown, "humidity_at": at, "sensor": sensor} | found}
    if kind == "temperature":
        return {"surroundings": {"temperature_at_sensor": shown, "sensor": sensor} | found}
    field = "current_reading" if kind == "monitor-current" else "resistance_reading"
    return {"supply": {field: shown, "read_at": at}, "surroundings": found}


def as_typed(value: float, kind: str, bound: str = "") -> str:
    """A value as a record holds it.

    >>> as_typed(24.55, "humidity"), as_typed(0.0012, "monitor-current", ">")
    ('24.6 %', '> 1.20 mA')
    """
    if kind == "humidity":
        text = f"{value:.1f} %"
    elif kind == "temperature":
        text = f"{value:.1f} degC"
    else:
        text = worded(value, "current" if kind == "monitor-current" else "resistance", 3)
    return f"{bound} {text}" if bound else text


def as_yaml(values: Values) -> list[str]:
    """The lines of a record that hold these values."""
    found = []
    for section, fields in values.items():
        found += [f"{section}:", *_block(fields, "  ")]
    return found


def with_values(text: str, name: str, values: Values) -> str:
    """The text of a record with values added; comments and order of what was there stay.

    Args:
        text: of the record.
        name: of its file, for messages.
        values: to add.

    Raises:
        BadRecord: the text is not a record.
        CannotWrite: a field already holds something else, or the file has a form in which the
            place of the new lines cannot be found.
    """
    tree = parse(text, name).tree
    if not isinstance(tree, dict):
        raise CannotWrite(f"{name}: holds no record")
    wanted = {**tree}
    lines = text.splitlines()
    for section, fields in values.items():
        there = tree.get(section)
        inside = there if isinstance(there, dict) else {}
        taken = [each for each in fields if not is_unknown(inside.get(each, ""))]
        if taken:
            raise CannotWrite(f"{name}: {section}.{taken[0]} already holds an answer; take it out "
                              "first, or add the lines by hand")  # fmt: skip
        wanted[section] = {**inside, **fields}
        lines = _added(lines, inside, section, fields)
    made = "\n".join(lines) + "\n"
    if _tree(made, name) != wanted:
        raise CannotWrite(f"{name}: cannot find the place of the new lines; add them by hand")
    return made


def _tree(text: str, name: str) -> Any:
    """What a text says; None where the new lines made it unreadable."""
    try:
        return parse(text, name).tree
    except BadRecord:
        return None


def _added(
    lines: list[str], inside: dict[str, Any], section: str, fields: dict[str, str]
) -> list[str]:
    """The lines with the fields added at the top of their section."""
    head = next((n for n, each in enumerate(lines) if _is_head(each, section)), None)
    if head is None:
        flow = next((n for n, each in enumerate(lines) if each.startswith(f"{section}: {{")), None)
        if flow is None:
            return [*lines, f"{section}:", *_block(fields, "  ")]
        return _into_flow(lines, flow, section, fields)
    end = _end(lines, head)
    own = lines[head + 1 : end]
    dent = next((row[: len(row) - len(row.lstrip())] for row in own if _key(row) in inside), "  ")
    kept = [row for row in own if not (_key(row) in fields and _key(row) in inside)]
    return [*lines[:head], f"{section}:", *_block(fields, dent), *kept, *lines[end:]]


def _key(row: str) -> str:
    """The key that a line of a block begins with."""
    match = re.match(r"\s+(\w+):(?:\s|$)", row)
    return match[1] if match else ""


def _is_head(line: str, section: str) -> bool:
    return bool(re.fullmatch(rf"{section}:\s*(?:unknown|~|null)?\s*(?:#.*)?", line))


def _end(lines: list[str], head: int) -> int:
    """Line where the next section begins."""
    later = range(head + 1, len(lines))
    return next((n for n in later if re.match(r"[^\s#]", lines[n])), len(lines))


def _into_flow(lines: list[str], at: int, section: str, fields: dict[str, str]) -> list[str]:
    """A section written in braces."""
    start = len(f"{section}: {{")
    rest = lines[at][start:]
    for name in fields:
        rest = re.sub(rf"\b{name}:\s*(?:unknown|~|null)\s*,?\s*", "", rest)
    added = ", ".join(f"{name}: {json.dumps(text)}" for name, text in fields.items())
    return [*lines[:at], f"{section}: {{{added}, {rest}", *lines[at + 1 :]]


def _block(fields: dict[str, Any], dent: str) -> list[str]:
    found = []
    for name, text in fields.items():
        if "\n" in text:
            found += [
                f"{dent}{name}: |-",
                *(f"{dent}  {each}".rstrip() for each in text.split("\n")),
            ]
        else:
            found.append(f"{dent}{name}: {_scalar(text)}")
    return found


def _scalar(text: str) -> str:
    """A scalar, quoted where YAML could read more into it."""
    plain = re.fullmatch(r"[A-Za-z0-9<>][A-Za-z0-9 .%°µΩ()+/:-]*", text)
    quoted = not plain or ": " in text or text.endswith((" ", ":")) or text[0] in "<>"
    return json.dumps(text, ensure_ascii=False) if quoted else text
