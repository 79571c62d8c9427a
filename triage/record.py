"""A record file read whole: the incident, its questions and its digest."""

from collections.abc import Iterator
from pathlib import Path
from typing import Any

from triage.canonical import canonical, case_number, digest
from triage.clock import Moment
from triage.errors import InvalidValue
from triage.fields import Reader, table
from triage.frozen import frozen
from triage.incident import SCHEMA, Incident
from triage.strict_yaml import Plain, parse, read

_LISTS = ("persons", "statements", "items", "contacts", "checks")


@frozen
class Record:
    """One incident as filed.

    Args:
        incident: the parsed record.
        case: its short case number.
        digest: SHA-256 of the canonical form of what was typed.
        tree: what was typed, for storing and attaching.
        questions: implausible values and contradictions that stay visible.
        name: file name, for messages.
        moments: every time in it, with its path.
    """

    incident: Incident
    case: str
    digest: str
    tree: Any
    questions: tuple[str, ...]
    name: str
    moments: tuple[tuple[str, Moment], ...] = ()


def load(path: Path) -> Record:
    """Read one record file.

    Raises:
        CannotRead: the file cannot be opened.
        BadRecord: every fault found, each with its place.
    """
    return from_plain(read(path))


def loads(text: str, name: str = "record") -> Record:
    """Read one record from text.

    Raises:
        BadRecord: every fault found, each with its place.
    """
    return from_plain(parse(text, name))


def from_plain(plain: Plain) -> Record:
    """Check a plain tree against the table of fields.

    Raises:
        BadRecord: every fault found, each with its place.
    """
    reader = Reader(plain)
    if not isinstance(plain.tree, dict) or not plain.tree:
        reader.fault("", "holds no record; start with 'schema: 1' and an id")
        reader.finish()
    incident: Incident = reader.build(Incident, plain.tree, "")
    if not reader.faults:
        _check_identity(reader, incident)
        _check_ids(reader, incident)
        _check_references(reader, incident)
        _check_questions(reader, incident)
    reader.finish()
    return Record(
        incident,
        case_number(incident.id),
        digest(canonical(plain.tree)),
        plain.tree,
        tuple(reader.questions),
        plain.name,
        tuple(moments(incident)),
    )


def _check_identity(reader: Reader, incident: Incident) -> None:
    if incident.schema != SCHEMA:
        reader.fault(
            "schema", f"'{incident.schema}' is not known here; this program reads schema {SCHEMA}"
        )
    try:
        number = case_number(incident.id)
    except InvalidValue as error:
        reader.fault("id", str(error))
        return
    if incident.case is not None and incident.case.upper() != number:
        reader.fault("case", f"'{incident.case}' does not belong to this id; it is {number}")


def _check_ids(reader: Reader, incident: Incident) -> None:
    for name in _LISTS:
        seen: set[str] = set()
        for number, each in enumerate(getattr(incident, name)):
            if each.id in seen:
                reader.fault(f"{name}[{number}].id", f"'{each.id}' is used twice in {name}")
            seen.add(each.id)


def _references(part: Any, path: str) -> Iterator[tuple[str, str, str]]:
    """Every reference below a part: (path, list it names, id)."""
    for name, row in table(type(part)):
        value = getattr(part, name)
        below = f"{path}.{name}" if path else name
        if row.to and isinstance(value, str):
            yield below, row.to, value
        elif row.to and value:
            yield from ((f"{below}[{n}]", row.to, each) for n, each in enumerate(value))
        elif row.kind == "part":
            yield from _references(value, below)
        elif row.kind == "parts":
            for number, each in enumerate(value):
                yield from _references(each, f"{below}[{number}]")


def _check_references(reader: Reader, incident: Incident) -> None:
    known = {name: {each.id for each in getattr(incident, name)} for name in _LISTS}
    for path, target, found in _references(incident, ""):
        if found not in known[target]:
            there = ", ".join(sorted(known[target])) or "none"
            reader.fault(path, f"'{found}' is not among the {target} ({there})")


def _check_questions(reader: Reader, incident: Incident) -> None:
    for number, contact in enumerate(incident.contacts):
        if len(contact.items) > 2:
            reader.fault(f"contacts[{number}].items", "a contact names one item or two")
    for path, nothing, answers in _several_answers(incident):
        if nothing in answers and len(answers) > 1:
            reader.question(path, f"'{nothing}' stands beside another answer; the other counts")


def _several_answers(incident: Incident) -> Iterator[tuple[str, str, tuple[str, ...]]]:
    """Lists that may hold a word for nothing: path, that word, the list."""
    yield "scene.changes", "none", incident.scene.changes
    yield "scene.flammable", "none", incident.scene.flammable
    for number, person in enumerate(incident.persons):
        yield f"persons[{number}].signs", "none", person.signs
    for number, item in enumerate(incident.items):
        yield f"items[{number}].condition", "intact", item.condition
    for number, check in enumerate(incident.checks):
        yield f"checks[{number}].disturbed", "none", check.disturbed


def moments(part: Any, path: str = "") -> Iterator[tuple[str, Moment]]:
    """Every time in a record or part of one, with its path."""
    for name, row in table(type(part)):
        found, below = getattr(part, name), f"{path}.{name}" if path else name
        if isinstance(found, Moment):
            yield below, found
        elif row.kind == "part":
            yield from moments(found, below)
        elif row.kind == "parts":
            for number, each in enumerate(found):
                yield from moments(each, f"{below}[{number}]")


def clock_faults(record: Record, zone: str) -> list[str]:
    """Times that a clock change of the zone doubles or skips, each with its path."""
    faults = []
    for path, moment in record.moments:
        try:
            moment.interval(zone)
        except InvalidValue as error:
            faults.append(f"{record.name}: {path}: {error}")
    return faults
