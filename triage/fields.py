"""Kinds of field, and how a plain tree becomes a frozen record: all faults at once.

A record class is a frozen dataclass whose fields carry a `Field`. That one table feeds
validation, the printed field guide and every form. Unknown, blank and left out are None.
"""

import dataclasses
import re
from collections.abc import Mapping
from dataclasses import dataclass, field
from typing import Any, TypeVar, dataclass_transform

from triage import clock, quantity
from triage.errors import BadRecord, InvalidValue
from triage.strict_yaml import BAD_CHARACTERS, Plain

T = TypeVar("T")

UNKNOWN = frozenset({"", "unknown", "~", "null"})
"""Scalars that say that the answer is not known."""

WordList = Mapping[str, tuple[int | None, str]]
"""Word to (order, meaning): -1 reassuring, 0 as good as unknown, 1 and up adverse, None neutral."""

YES_NO_NEUTRAL: WordList = {"yes": (None, "yes"), "no": (None, "no")}
YES_ADVERSE: WordList = {"yes": (1, "yes"), "no": (-1, "no")}
NO_ADVERSE: WordList = {"yes": (-1, "yes"), "no": (1, "no")}

_IDENT = re.compile(r"[A-Za-z0-9][A-Za-z0-9_.-]{0,39}")


def is_unknown(raw: Any) -> bool:
    """Whether a scalar as typed says that the answer is not known."""
    return isinstance(raw, str) and raw.strip().lower() in UNKNOWN


@dataclass(frozen=True, slots=True)
class Field:
    """One row of the table of fields.

    Args:
        kind: text, word, words, quantity, time, ident, reference, count, number, parts, part.
        help: what is asked, one sentence.
        words: for word and words: the closed list.
        quantity: for a quantity: its kind.
        possible: SI bounds outside which the value is refused.
        plausible: SI bounds outside which a question is put.
        most: longest text, or most parts in a list.
        of: for parts and part: the record class.
        to: for a reference: which list it names, such as "items".
        required: whether a record without it is refused.
    """

    kind: str
    help: str
    words: WordList = field(default_factory=dict)
    quantity: str = ""
    possible: tuple[float, float] | None = None
    plausible: tuple[float, float] | None = None
    most: int = 2000
    of: type | None = None
    to: str = ""
    required: bool = False

    def order(self, word: str | None) -> int | None:
        """Where an answer stands in the safety order; None for a neutral word."""
        return 0 if word is None else self.words[word][0]


def _entry(description: Field) -> Any:
    empty: Any = () if description.kind in ("parts", "words") else None
    if description.kind == "part" and description.of:
        empty = description.of()
    return field(default=empty, metadata={"field": description})


class Part:
    """Base of every part of a record: built from keywords, never changed afterwards.

    A plain base instead of generated methods: making those for every part costs a third of the
    start-up.
    """

    __slots__ = ()

    def __init__(self, **values: Any):
        """Take the values given; what is not given is not known."""
        for each in dataclasses.fields(self):  # type: ignore[arg-type]
            object.__setattr__(self, each.name, values.pop(each.name, each.default))
        if values:
            raise TypeError(f"no field {', '.join(values)} in {type(self).__name__}")

    def __setattr__(self, name: str, value: object) -> None:
        """Refuse every change."""
        raise dataclasses.FrozenInstanceError(f"{name} of a record cannot be changed")


@dataclass_transform(frozen_default=True, kw_only_default=True)
def record_part(of: type[T]) -> type[T]:
    """Make a class of fields a part of a record; it derives from `Part`."""
    return dataclass(init=False, repr=False, eq=False, slots=True, kw_only=True)(of)


def text(help: str, most: int = 2000) -> Any:
    """Free text as typed."""
    return _entry(Field("text", help, most=most))


def ident(help: str, *, required: bool = False) -> Any:
    """A short id: letters, digits, point, dash, underscore."""
    return _entry(Field("ident", help, required=required))


def reference(help: str, to: str) -> Any:
    """The id of a part of this record, such as an item."""
    return _entry(Field("reference", help, to=to))


def references(help: str, to: str) -> Any:
    """Several ids of parts of this record."""
    return _entry(Field("words", help, to=to))


def word(help: str, words: WordList) -> Any:
    """One word of a closed list."""
    return _entry(Field("word", help, words=words))


def several(help: str, words: WordList) -> Any:
    """Several words of a closed list."""
    return _entry(Field("words", help, words=words))


def yes_no(help: str, words: WordList = YES_NO_NEUTRAL) -> Any:
    """Yes, no or unknown; `words` says which of the two is the adverse answer, if either."""
    return _entry(Field("word", help, words=words))


def amount(
    help: str,
    kind: str,
    *,
    possible: tuple[float, float] | None = None,
    plausible: tuple[float, float] | None = None,
) -> Any:
    """A quantity with its unit in the text."""
    return _entry(Field("quantity", help, quantity=kind, possible=possible, plausible=plausible))


def count(help: str, low: int = 0, high: int = 10_000) -> Any:
    """A whole number without a unit."""
    return _entry(Field("count", help, possible=(low, high)))


def time(help: str) -> Any:
    """A time as typed, with its precision."""
    return _entry(Field("time", help))


def parts(help: str, of: type, most: int = 200) -> Any:
    """A list of parts of one kind."""
    return _entry(Field("parts", help, of=of, most=most))


def part(help: str, of: type) -> Any:
    """One part."""
    return _entry(Field("part", help, of=of))


_tables: dict[type, tuple[tuple[str, Field], ...]] = {}


def table(record_class: type) -> tuple[tuple[str, Field], ...]:
    """Name and row of every field of a record class, in order."""
    if record_class not in _tables:
        _tables[record_class] = tuple(
            (each.name, each.metadata["field"])
            for each in dataclasses.fields(record_class)
            if "field" in each.metadata
        )
    return _tables[record_class]


class Reader:
    """Builds record objects from a plain file and gathers every fault and question."""

    def __init__(self, plain: Plain):
        """Start on one file."""
        self.plain = plain
        self.faults: list[str] = []
        self.questions: list[str] = []

    def fault(self, path: str, message: str) -> None:
        """Note a fault with its place."""
        self.faults.append(f"{self.plain.at(path)} {path or 'file'}: {message}")

    def question(self, path: str, message: str) -> None:
        """Note something implausible: the value is kept and the question stays visible."""
        self.questions.append(f"{path}: {message}")

    def finish(self) -> None:
        """Raise once, with everything found.

        Raises:
            BadRecord: any fault was noted.
        """
        if self.faults:
            raise BadRecord(self.faults)

    def build(self, record_class: type, tree: Any, path: str) -> Any:
        """One record object from a mapping; unknown fields are faults."""
        if not isinstance(tree, dict):
            if not is_unknown(tree):
                self.fault(path, f"expected fields under it, found '{_short(tree)}'")
            return record_class() if not _required(record_class) else None
        rows = dict(table(record_class))
        values = {}
        for name, raw in tree.items():
            below = f"{path}.{name}" if path else name
            if name not in rows:
                self.fault(below, _unknown_field(name, rows))
            else:
                values[name] = self._value(rows[name], raw, below)
        for name, row in rows.items():
            if row.required and values.get(name) is None:
                self.fault(path, f"'{name}' is required: {row.help}")
        return record_class(**{k: v for k, v in values.items() if v is not None})

    def _value(self, row: Field, raw: Any, path: str) -> Any:
        if row.kind == "part":
            return self.build(row.of, raw, path) if row.of else None
        if row.kind in ("parts", "words"):
            return self._list(row, raw, path)
        if not isinstance(raw, str):
            self.fault(
                path, f"expected one value, found a {'list' if isinstance(raw, list) else 'group'}"
            )
            return None
        if is_unknown(raw):
            return None
        if bad := BAD_CHARACTERS.search(raw):
            self.fault(path, f"control character U+{ord(bad[0]):04X} is not allowed")
            return None
        try:
            return self._scalar(row, raw, path)
        except InvalidValue as error:
            self.fault(path, str(error))
            return None

    def _list(self, row: Field, raw: Any, path: str) -> tuple[Any, ...] | None:
        if is_unknown(raw):
            return None
        if not isinstance(raw, list):
            self.fault(path, f"expected a list, found '{_short(raw)}'")
            return None
        if len(raw) > row.most:
            self.fault(path, f"{len(raw)} entries; at most {row.most} are allowed")
            return None
        each = dataclasses.replace(row, kind="word" if row.words else "ident")
        found = []
        for number, item in enumerate(raw):
            below = f"{path}[{number}]"
            value = self.build(row.of, item, below) if row.of else self._value(each, item, below)
            if value is not None:
                found.append(value)
        if not row.of and isinstance(raw, list):
            self._one_answer_each(raw, found, path)
        return tuple(found)

    def _one_answer_each(self, raw: list[Any], found: list[Any], path: str) -> None:
        """A word twice is a slip; "unknown" beside a word would leave the reassuring one alone."""
        if len(set(found)) < len(found):
            self.fault(path, f"a word stands twice: {', '.join(found)}")
        if found and any(is_unknown(each) for each in raw):
            self.fault(path, "'unknown' stands beside an answer; keep the one or the others")

    def _scalar(self, row: Field, raw: str, path: str) -> Any:
        if row.kind == "word":
            return _word(row, raw)
        if row.kind == "quantity":
            return self._quantity(row, raw, path)
        if row.kind == "time":
            return clock.parse(raw)
        if row.kind == "count":
            return _count(row, raw)
        if row.kind in ("ident", "reference"):
            if not _IDENT.fullmatch(raw.strip()):
                raise InvalidValue(f"'{_short(raw)}' is not an id: up to 40 letters, digits, . - _")
            return raw.strip()
        if len(raw) > row.most:
            raise InvalidValue(f"{len(raw)} characters; at most {row.most} are kept")
        return raw

    def _quantity(self, row: Field, raw: str, path: str) -> quantity.Quantity:
        found = quantity.parse(raw, row.quantity)
        if row.possible and not row.possible[0] <= found.value <= row.possible[1]:
            low, high = (quantity.worded(v, row.quantity) for v in row.possible)
            raise InvalidValue(f"{raw.strip()} is outside {low} to {high}")
        if row.plausible and not row.plausible[0] <= found.value <= row.plausible[1]:
            self.question(path, _implausible(found, row.plausible))
        return found


def _implausible(found: quantity.Quantity, plausible: tuple[float, float]) -> str:
    """The question for a value outside its plausible range, with the likely slip of unit."""
    low, high = plausible
    usual = f"{quantity.worded(low, found.kind)} to {quantity.worded(high, found.kind)}"
    for factor in (1e-3, 1e3, 1e-6, 1e6):
        if low <= found.value * factor <= high:
            likely = quantity.worded(found.value * factor, found.kind, 3)
            return f"{found.text} is unusual (usual: {usual}); was {likely} meant?"
    return f"{found.text} is unusual (usual: {usual}); please confirm"


def _required(record_class: type) -> bool:
    return any(row.required for _, row in table(record_class))


def _short(raw: Any) -> str:
    shown = raw if isinstance(raw, str) else str(raw)
    return shown if len(shown) <= 40 else shown[:37] + "..."


def _word(row: Field, raw: str) -> str:
    plain = raw.strip().lower().replace(" ", "_").replace("-", "_")
    found = next((word for word in row.words if word.lower() == plain), None)
    if found is None:
        raise InvalidValue(f"'{_short(raw)}' is not one of: {', '.join(row.words)}, unknown")
    return found


def _count(row: Field, raw: str) -> int:
    low, high = row.possible or (0, 10_000)
    if not re.fullmatch(r"[0-9]{1,9}", raw.strip()) or not low <= int(raw) <= high:
        raise InvalidValue(f"'{_short(raw)}' is not a whole number from {low:g} to {high:g}")
    return int(raw)


def _unknown_field(name: str, rows: Mapping[str, Field]) -> str:
    from difflib import get_close_matches

    near = get_close_matches(name, rows, n=1)
    hint = f"; did you mean '{near[0]}'?" if near else f"; known here: {', '.join(rows)}"
    return f"no field of that name{hint}"
