"""The questions of the form and the papers: wording, order, branching, held against the fields."""

from collections.abc import Iterator, Mapping
from functools import cache
from typing import Any

from triage.errors import BadTable
from triage.fields import Field
from triage.fields import table as rows_of
from triage.frozen import frozen
from triage.incident import Incident
from triage.site import Room
from triage.tables import table

_LEAVES_OPEN = ("ident", "text", "quantity", "time", "count", "reference")


@frozen
class Condition:
    """One condition of a question.

    Args:
        path: field it looks at.
        among: holds only when the answer is known and one of these; None where not used.
        not_among: these answers rule the question out; not knowing does not.
        known: True: any known answer; False: none; None where not used.
    """

    path: str
    among: frozenset[str] | None
    not_among: frozenset[str]
    known: bool | None


@frozen
class Option:
    """One short answer of a question with options: its word, what it says, the fields it sets."""

    word: str
    says: str
    sets: tuple[tuple[str, str | tuple[str, ...]], ...]


@frozen
class Question:
    """One question.

    Args:
        id: its name, known to no reader.
        path: the field it answers, such as "persons[].signs"; empty for a question with options.
        ask: one short sentence. help: shown on demand. example: how the answer is typed.
        when: conditions, all of which must hold.
        options: short answers in place of the words of the field.
        many: several options may be chosen.
        makes: kind of item that naming the thing adds; empty for none.
        room: whether the answer is a room id of the site file.
    """

    id: str
    path: str
    ask: str
    help: str
    example: str
    when: tuple[Condition, ...]
    options: tuple[Option, ...]
    many: bool
    makes: str
    room: bool

    @property
    def field(self) -> Field:
        """The row of the table of fields; a plain text row for a question with options."""
        return field_at(self.path) if self.path else Field("text", self.ask)


@frozen
class Section:
    """Some questions under a title.

    Args:
        part: list of the record that is gone through part by part; empty for none.
        expected: whether one such part always stands there.
        another: the question after each part.
    """

    id: str
    title: str
    part: str
    expected: bool
    another: str
    questions: tuple[Question, ...]


FIRST_MINUTE = "first_minute"
"""Id of the section that gives a provisional disposition."""


@cache
def sections() -> tuple[Section, ...]:
    """Every section in the order of the scene.

    Raises:
        BadTable: a path, word, condition or id that does not fit the table of fields.
    """
    found = tuple(_section(row) for row in table("questions")["sections"])
    ids = [q.id for s in found for q in s.questions] + [s.id for s in found]
    twice = {each for each in ids if ids.count(each) > 1}
    if twice:
        raise BadTable(f"data/questions.yaml: used twice: {', '.join(sorted(twice))}")
    return found


@cache
def room_defaults() -> Mapping[str, str]:
    """Field of a site room to the field that it answers once a person has confirmed it.

    Raises:
        BadTable: a field that does not exist.
    """
    found: dict[str, str] = table("questions")["room_defaults"]
    unknown = set(found) - {name for name, _ in rows_of(Room)}
    if unknown:
        raise BadTable(f"data/questions.yaml room_defaults: no {', '.join(sorted(unknown))}")
    for path in found.values():
        field_at(path)
    return found


def field_at(path: str) -> Field:
    """The row of a path such as "persons[].signs".

    Raises:
        BadTable: no such field.

    >>> field_at("supply.trip").help
    'Did a breaker or residual-current device trip?'
    """
    of: type | None = Incident
    found: Field | None = None
    for step in path.split("."):
        name = step.removesuffix("[]")
        found = dict(rows_of(of)).get(name) if of else None
        if found is None or step.endswith("[]") != (found.kind == "parts"):
            raise BadTable(f"data/questions.yaml: no field '{path}'")
        of = found.of
    if found is None or found.of is not None:
        raise BadTable(f"data/questions.yaml: '{path}' is not one field")
    return found


def _section(row: Mapping[str, Any]) -> Section:
    part = row.get("part", "")
    if part and dict(rows_of(Incident))[part].kind != "parts":
        raise BadTable(f"data/questions.yaml {row['id']}: '{part}' is not a list")
    asked = tuple(_question(each, part) for each in row["questions"])
    return Section(
        row["id"], row["title"], part, bool(row.get("expected")), row.get("another", ""), asked
    )


def _question(row: Mapping[str, Any], part: str) -> Question:
    path, where = row.get("path", ""), f"data/questions.yaml {row['id']}"
    if bool(path) == ("options" in row):
        raise BadTable(f"{where}: needs a path or options, and not both")
    if path and path.startswith(f"{part}[]") != bool(part):
        raise BadTable(f"{where}: '{path}' does not belong to the section")
    found = Question(
        row["id"], path, row["ask"], row.get("help", ""), row.get("example", ""),
        tuple(_condition(each, where) for each in row.get("when", [])),
        tuple(_option(each, where) for each in row.get("options", [])),
        bool(row.get("many")), row.get("makes", ""), bool(row.get("room")),
    )  # fmt: skip
    if found.makes and found.makes not in field_at("items[].kind").words:
        raise BadTable(f"{where}: '{found.makes}' is no kind of item")
    if path:
        field_at(path)
    return found


def _option(row: Mapping[str, Any], where: str) -> Option:
    for path, value in row["sets"].items():
        _known_words(path, [value] if isinstance(value, str) else value, where)
    sets = tuple((p, v if isinstance(v, str) else tuple(v)) for p, v in row["sets"].items())
    return Option(row["word"], row.get("says", row["word"]), sets)


def _condition(row: Mapping[str, Any], where: str) -> Condition:
    _known_words(row["path"], [*row.get("among", []), *row.get("not_among", [])], where)
    among = frozenset(row["among"]) if "among" in row else None
    return Condition(row["path"], among, frozenset(row.get("not_among", [])), row.get("known"))


def _known_words(path: str, words: list[str], where: str) -> None:
    row = field_at(path)
    if not row.words and row.kind in _LEAVES_OPEN:
        return
    unknown = [each for each in words if each not in row.words]
    if unknown:
        raise BadTable(f"{where}: {path} knows no {', '.join(map(str, unknown))}")


def every_question() -> Iterator[tuple[Section, Question]]:
    """Every question with its section, in order."""
    for section in sections():
        for question in section.questions:
            yield section, question
