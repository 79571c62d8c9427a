"""The limits table: one value a row, with its edition, method, condition and citation.

A limit that is not `published` never prints without `Limit.warning`. Verdicts: verdict.py.
"""

from collections import Counter
from collections.abc import Mapping
from dataclasses import dataclass
from functools import cache
from typing import Any

from triage.citation import Citation
from triage.errors import BadTable, InvalidValue
from triage.frozen import frozen
from triage.quantity import parse
from triage.tables import table

ANY = "any"
"""Word of a row that does not depend on the property."""

CONDITIONS = (
    "normal", "open_earth", "open_neutral", "single_fault", "mains_on_part", ANY,
)  # fmt: skip
"""States of the supply and the item while measuring; `single_fault` covers both open conductors."""

CLASSES = ("I", "II", ANY)
"""Protection classes of the item."""

PARTS = ("B", "BF", "CF", ANY)
"""Types of applied part."""

METHODS = (
    "touch", "direct", "differential", "alternative", "direct_dc", "all_parts_joined",
    "all_parts_joined_dc", "auxiliary", "signal_part", ANY,
)  # fmt: skip
"""Ways of measuring a current; `direct` of an applied part is its patient leakage."""

ITEMS = (
    "general", "without_cord", "cord", "permanently_installed", "system", "fixed_metal",
    "documented_exception", "portable", "stationary_motor", "no_earthed_accessible_parts",
    "mobile_xray", "mobile_xray_with_extra_earth", "mineral_insulated_heater", "applied_part",
    "existing_or_isolated_ground", "existing_critical_care", "existing_general_care",
    "flammables_or_fast_charging", "conductive_class", "antistatic_class",
)  # fmt: skip
"""Sorts of item, or parts of it measured, that have values of their own."""

SENSES = ("max", "min")
"""Which side of the value a reading must not be on."""

SCOPES = ("medical", "installation", "laboratory", "non_medical", "static")
"""Kinds of things an edition is written for."""

CHECKS = (
    "earth_continuity", "earth_in_place", "touch_current", "earth_leakage",
    "applied_part_leakage", "insulation_resistance", "outlet_earth", "outlet_retention",
    "metal_voltage_loaded", "two_metal_voltage", "isolated_line_resistance",
    "isolated_alarm_test", "monitor_log", "floor_resistance", "caster_resistance",
    "object_to_ground", "footwear_resistance", "static_reenactment", "reference",
)  # fmt: skip
"""Checks a row can serve; `reference` rows are context and never give a verdict."""

_SINGLE_FAULTS = ("open_earth", "open_neutral")
_WARNINGS = {
    "published": "",
    "memory": "from memory: verify against the edition in force",
    "judgement": "our working value, not a standard's limit: verify against the edition in force",
}


@frozen
class Edition:
    """One edition of one standard, which a site can name as the one in force.

    Args:
        id: short id. standard: its name. year: year or state. region: where it is used.
        scope: one of `SCOPES`. note: anything a chooser should know.
    """

    id: str
    standard: str
    year: str
    region: str
    scope: str
    note: str

    def text(self) -> str:
        """Standard and year for print."""
        return f"{self.standard} ({self.year})" if self.year else self.standard


@dataclass(frozen=True, slots=True, kw_only=True)
class Limit:
    """One value that a reading must not exceed or fall short of.

    Args:
        id: short id, unique. check: one of `CHECKS`. quantity: what is measured.
        kind: kind of quantity (current, resistance ...). edition: where the value stands.
        clause: of that edition. methods, conditions, classes, parts: where it applies.
        item: `general`, or the one sort of item or way of measuring it is for.
        sense: `max` or `min`. strict: equality fails too. value: in SI. text: as in the table.
        disputed: sources print different values for this. citation, note: for the reader.
    """

    id: str
    check: str
    quantity: str
    kind: str
    edition: Edition
    clause: str
    methods: tuple[str, ...]
    conditions: tuple[str, ...]
    classes: tuple[str, ...]
    parts: tuple[str, ...]
    item: str
    sense: str
    strict: bool
    value: float
    text: str
    disputed: bool
    citation: Citation
    note: str

    @property
    def warning(self) -> str:
        """What must be printed beside the value: empty, or that the edition must be read."""
        if self.disputed and not _WARNINGS[self.citation.known]:
            return "sources disagree: verify against the edition in force"
        return _WARNINGS[self.citation.known]

    def fits(self, condition: str | None, equipment_class: str | None, part: str | None) -> bool:
        """Whether the row applies; None means not known and never leaves a row out."""
        asked = {condition, "single_fault"} if condition in _SINGLE_FAULTS else {condition}
        return (
            (condition is None or ANY in self.conditions or bool(asked & set(self.conditions)))
            and _matches(equipment_class, self.classes)
            and _matches(part, self.parts)
        )


@frozen
class Limits:
    """All rows and editions.

    Args:
        rows: in file order. editions: by id.
    """

    rows: tuple[Limit, ...]
    editions: dict[str, Edition]

    def find(
        self,
        *,
        check: str | None = None,
        edition: str | None = None,
        condition: str | None = None,
        equipment_class: str | None = None,
        part: str | None = None,
        method: str | None = None,
        item: str | None = "general",
        kind: str | None = None,
    ) -> tuple[Limit, ...]:
        """Rows that may apply; an argument left out or None leaves every row in.

        Args:
            check: one of `CHECKS`. edition: id of one edition. condition: one of `CONDITIONS`.
            equipment_class: `I` or `II`. part: `B`, `BF` or `CF`. method: of measuring.
            item: `general`, another sort, or None for all. kind: kind of quantity.

        Raises:
            InvalidValue: a word that no row or list knows.
        """
        self._known(check, edition, condition, method, item)
        return tuple(
            row
            for row in self.rows
            if (check is None or row.check == check)
            and (edition is None or row.edition.id == edition)
            and (item is None or row.item == item)
            and (kind is None or row.kind == kind)
            and _matches(method, row.methods)
            and row.fits(condition, equipment_class, part)
        )

    def choices(self, check: str) -> tuple[Edition, ...]:
        """Editions that have a row for this check, in file order: what a site can choose from."""
        self._known(check)
        ids = dict.fromkeys(row.edition.id for row in self.rows if row.check == check)
        return tuple(self.editions[each] for each in ids)

    def _known(self, check: str | None, *others: str | None) -> None:
        lists = (CHECKS, tuple(self.editions), CONDITIONS, METHODS, ITEMS)
        for word, known in zip((check, *others), lists, strict=False):
            if word is not None and word not in known:
                raise InvalidValue(f"limits know no '{word}'; known: {', '.join(known)}")


def _matches(asked: str | None, words: tuple[str, ...]) -> bool:
    return asked is None or ANY in words or asked in words


@cache
def load_limits() -> Limits:
    """The shipped table, read once and cross-checked.

    Raises:
        BadTable: rows that contradict each other, or words and units nobody knows.
    """
    return read_limits(table("limits"))


def read_limits(table: Mapping[str, list[dict[str, Any]]]) -> Limits:
    """Rows and editions from plain mappings, cross-checked.

    Args:
        table: `editions` and `limits`, as in data/limits.yaml.

    Raises:
        BadTable: as `load_limits`; the text names the row.
    """
    editions = {each["id"]: _edition(each) for each in table["editions"]}
    rows = tuple(_limit(each, editions) for each in table["limits"])
    _check_unique([each["id"] for each in table["editions"]] + [row.id for row in rows])
    _check_disputes(rows)
    _check_one_value(rows)
    return Limits(rows, editions)


def _edition(given: dict[str, Any]) -> Edition:
    _check_words(given, {"id", "standard", "year", "region", "scope", "note"}, set())
    edition = Edition(**{key: str(value) for key, value in given.items()})
    if edition.scope not in SCOPES:
        raise BadTable(f"limits.yaml: edition {edition.id} has unknown scope '{edition.scope}'")
    return edition


_NEEDED = {"id", "check", "quantity", "kind", "edition", "clause", "sense", "value", "source",
           "place", "known", "note"}  # fmt: skip
_FREE = {"method", "condition", "class", "part", "item", "strict", "disputed"}


def _limit(given: dict[str, Any], editions: dict[str, Edition]) -> Limit:
    _check_words(given, _NEEDED, _FREE)
    where = f"limits.yaml: {given['id']}"
    for key, known in (("check", CHECKS), ("sense", SENSES), ("edition", tuple(editions))):
        if given[key] not in known:
            raise BadTable(f"{where}: unknown {key} '{given[key]}'")
    try:
        value = parse(str(given["value"]), given["kind"])
    except (InvalidValue, KeyError) as error:
        raise BadTable(f"{where}: {error}") from error
    return Limit(
        id=given["id"],
        check=given["check"],
        quantity=given["quantity"],
        kind=given["kind"],
        edition=editions[given["edition"]],
        clause=str(given["clause"]),
        methods=_words(given.get("method"), METHODS, where),
        conditions=_words(given.get("condition"), CONDITIONS, where),
        classes=_words(given.get("class"), CLASSES, where),
        parts=_words(given.get("part"), PARTS, where),
        item=_words(given.get("item", "general"), ITEMS, where)[0],
        sense=given["sense"],
        strict=given.get("strict", False),
        value=value.value,
        text=value.text,
        disputed=given.get("disputed", False),
        citation=Citation(str(given["source"]), str(given["place"]), given["known"]),
        note=str(given["note"]),
    )


def _words(given: Any, known: tuple[str, ...], where: str) -> tuple[str, ...]:
    found = (ANY,) if given is None else (given,) if isinstance(given, str) else tuple(given)
    strange = [word for word in found if word not in known]
    if strange or not found:
        raise BadTable(f"{where}: unknown word {strange}; known: {known}")
    return found


def _check_words(given: dict[str, Any], needed: set[str], free: set[str]) -> None:
    faults = (needed - set(given)) | (set(given) - needed - free)
    if faults:
        raise BadTable(f"limits.yaml: {given.get('id')} lacks or does not know {sorted(faults)}")


def _check_unique(ids: list[str]) -> None:
    twice = sorted(each for each, count in Counter(ids).items() if count > 1)
    if twice:
        raise BadTable(f"limits.yaml: ids given twice: {', '.join(twice)}")


def _place_of(row: Limit) -> tuple[Any, ...]:
    return (
        row.check, row.quantity, row.edition.id, row.methods, row.conditions, row.classes,
        row.parts, row.item, row.sense,
    )  # fmt: skip


def _check_one_value(rows: tuple[Limit, ...]) -> None:
    plain = Counter(_place_of(row) for row in rows if not row.disputed)
    twice = sorted(str(place[:3]) for place, count in plain.items() if count > 1)
    if twice:
        raise BadTable(f"limits.yaml: two undisputed values for {', '.join(twice)}")


def _check_disputes(rows: tuple[Limit, ...]) -> None:
    disputed = Counter(_place_of(row) for row in rows if row.disputed)
    for row in rows:
        alone = row.disputed and disputed[_place_of(row)] < 2
        if alone and "print" not in row.note:
            raise BadTable(f"limits.yaml: {row.id} is disputed by no other row and no note")
