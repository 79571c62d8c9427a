"""The table of checks: what each proves, who may do it, and which must pass before release."""

from collections.abc import Mapping
from functools import cache
from typing import Any

from triage import words as w
from triage.citation import Citation
from triage.errors import BadTable
from triage.frozen import frozen
from triage.knowledge import knowledge
from triage.quantity import parse
from triage.tables import citation, table

PERFORMERS = ("any_staff", "biomedical", "licensed_electrician")
_COUNTS = ("within_limit", "any_valid_value", "nothing_found")


@frozen
class Accepts:
    """One accepted way of doing a check: method, supplies, whether a reading is needed."""

    method: str
    supplies: frozenset[str]
    note: str
    value_needed: bool
    any_state: bool


@frozen
class LimitsFrom:
    """Which rows of the table of limits a value is held against.

    Args:
        methods: methods of the check this is for.
        check: check id in the table of limits.
        method: method word used there, None for any.
        edition: edition used where the site names none.
    """

    methods: frozenset[str]
    check: str
    method: str | None
    edition: str


@frozen
class CheckKind:
    """One kind of check.

    Args:
        quantity: kind of its value, None where the answer is pass or fail only.
        low, high: SI range of a possible reading; None without a value.
        counts_as_pass: within_limit, any_valid_value or nothing_found.
        accepts: accepted methods and supplies.
        state_as_event: the item must be powered as it was at the event.
    """

    id: str
    order: int
    name: str
    what: str
    how: tuple[str, ...]
    quantity: str | None
    low: float | None
    high: float | None
    counts_as_pass: str
    applies_to: frozenset[str]
    performer: str
    circuit: str
    patient_absent: bool
    drops_power: bool
    alarms_others: str | None
    sterile_area: bool
    destroys_evidence: bool
    needs_maker: bool
    minutes: int
    perishable: int
    limits_from: tuple[LimitsFrom, ...]
    accepts: tuple[Accepts, ...]
    state_as_event: bool
    shows_pass: str
    shows_fail: str
    does_not_show: str
    retest: str
    finding: str | None
    separates: tuple[str, ...]
    reads: tuple[tuple[str, str], ...]
    citation: Citation


@frozen
class MandatoryRow:
    """Checks demanded of some kinds of item on some supplies in some contacts."""

    id: str
    kinds: frozenset[str]
    supplies: frozenset[str]
    contacts: frozenset[str]
    checks: tuple[str, ...]
    why: str


@cache
def check_kinds() -> Mapping[str, CheckKind]:
    """Every kind of check by id, in the fixed safety order.

    Raises:
        BadTable: a row lacks a field or names something unknown.
    """
    rows = sorted(table("checks")["checks"], key=lambda row: row["order"])
    return {row["id"]: _check_kind(row) for row in rows}


@cache
def _mandatory_rows() -> tuple[MandatoryRow, ...]:
    rows = tuple(
        MandatoryRow(
            row["id"], frozenset(row["kinds"]), frozenset(row["supplies"]),
            frozenset(row["contacts"]), tuple(row["checks"]), row["why"],
        )
        for row in table("checks")["mandatory"]
    )  # fmt: skip
    for row in rows:
        unknown = (row.kinds - set(w.ITEM_KIND)) | (set(row.checks) - set(check_kinds()))
        if unknown:
            raise BadTable(
                f"data/checks.yaml mandatory {row.id}: unknown {', '.join(sorted(unknown))}"
            )
    return rows


@cache
def cannot_be_released() -> Mapping[str, str]:
    """Item kinds that this program never releases, with the reason."""
    return {row["kind"]: row["reason"] for row in table("checks")["cannot_be_released_here"]}


@cache
def mandatory_checks(
    supply: str | None, kind: str | None, contacts: frozenset[str]
) -> tuple[str, ...]:
    """Checks that must be valid passes before an item may be released.

    Args:
        supply: earthed, isolated, none, or None for not known: every row of the kind then counts.
        kind: kind of item; None (not known) or a kind without a row gives an empty tuple, and
            such an item cannot be released.
        contacts: some of plain, wet, two_metal; empty means not known.

    Returns:
        Check ids in the fixed safety order.
    """
    if kind is None or kind in cannot_be_released():
        return ()
    found: set[str] = set()
    for row in _mandatory_rows():
        on_supply = supply is None or row.supplies & {"any", supply}
        in_contact = not contacts or row.contacts & (contacts | {"any", "plain"})
        if kind in row.kinds and on_supply and in_contact:
            found.update(row.checks)
    return tuple(check for check in check_kinds() if check in found)


def _check_kind(row: Mapping[str, Any]) -> CheckKind:
    where = f"data/checks.yaml {row.get('id')}"
    try:
        kind = _built(row, where)
    except KeyError as error:
        raise BadTable(f"{where}: lacks {error}") from None
    if kind.performer not in PERFORMERS or kind.counts_as_pass not in _COUNTS:
        raise BadTable(f"{where}: unknown performer or counts_as_pass")
    if kind.finding is not None and kind.finding not in knowledge().findings:
        raise BadTable(f"{where}: no finding '{kind.finding}'")
    unknown = set(kind.separates) - set(knowledge().causes) | kind.applies_to - set(w.ITEM_KIND)
    if unknown:
        raise BadTable(f"{where}: unknown {', '.join(sorted(unknown))}")
    return kind


def _built(row: Mapping[str, Any], where: str) -> CheckKind:
    quantity = None if row["quantity"] == "none" else str(row["quantity"])
    low, high = (parse(v, quantity).value for v in row["range"]) if quantity else (None, None)
    none_to_none = None if row["alarms_others"] == "none" else str(row["alarms_others"])
    proves = row["proves"]
    return CheckKind(
        row["id"], int(row["order"]), row["name"], row["what"], tuple(row["how"]),
        quantity, low, high, row["counts_as_pass"], frozenset(row["applies_to"]),
        row["performer"], row["circuit"], row["patient_absent"], row["drops_power"], none_to_none,
        row["sterile_area"], row["destroys_evidence"], row["needs_maker"],
        int(row["minutes"]), int(row["perishable"]),
        tuple(_limits_from(each) for each in row.get("limits_from", [])),
        tuple(_accepts(each) for each in row["accepts"]), bool(row["item_state_needed"]),
        proves["pass"], proves["fail"], proves["does_not_show"], row["retest"],
        None if row["finding"] == "none" else str(row["finding"]), tuple(row["separates"]),
        tuple((str(r["when"]), str(r["means"])) for r in row["reads"]), citation(row, where),
    )  # fmt: skip


def _accepts(row: Mapping[str, Any]) -> Accepts:
    return Accepts(
        row["method"], frozenset(row["supply"]), row.get("note", ""),
        row.get("value_needed", True), row.get("any_state", False),
    )  # fmt: skip


def _limits_from(row: Mapping[str, Any]) -> LimitsFrom:
    return LimitsFrom(frozenset(row["methods"]), row["check"], row.get("as"), row["edition"])
