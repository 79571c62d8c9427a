"""The limits in force at this site for one reading: edition chosen, values made stricter."""

from dataclasses import replace

from triage.check_table import CheckKind, LimitsFrom
from triage.citation import Citation
from triage.errors import InvalidValue
from triage.incident import Check, Item
from triage.limits import Limit, load_limits
from triage.quantity import Quantity, parse
from triage.site import Site
from triage.verdict import Judgement, judge

_FOLLOWS = {"monitor_log": "isolated_alarm_test"}
"""Checks that follow the edition named for another: one monitor has one alarm value."""
OWN = "site file"
"""How the source of a limit made stricter begins."""


def held_against_limits(
    check: Check, kind: CheckKind, *, item: Item | None, value: Quantity | None, site: Site
) -> tuple[Judgement, ...]:
    """The value against the edition in force; nothing where there is no value or no row.

    Args:
        check: as recorded.
        kind: its row in the table of checks.
        item: what was checked, None if not known.
        value: the reading.
        site: may choose an edition and make limits stricter.
    """
    source = limits_from(check, kind)
    if source is None or value is None or value.value < 0:
        return ()
    chosen = _edition_named(kind, site)
    rows = _rows(check, item, source=source, edition=chosen, quantity=value.kind) or _rows(
        check, item, source=source, edition=source.edition, quantity=value.kind
    )
    sign = value.text[0] if value.text[0] in "≤≥" else value.bound
    return judge(value.value, sign, tuple(tightened(row, site) for row in rows))


def _edition_named(kind: CheckKind, site: Site) -> str | None:
    """The edition that the site file names for a kind of check."""
    named = (kind.id, _FOLLOWS.get(kind.id))
    return next((e.edition for e in site.file.editions if e.check in named and e.edition), None)


def limits_of_kind(kind: CheckKind, site: Site) -> tuple[Limit, ...]:
    """Every limit that a reading of one kind of check can be held against at a site.

    Args:
        kind: its row in the table of checks.
        site: may choose an edition and make limits stricter.
    """
    found: dict[str, Limit] = {}
    for source in kind.limits_from:
        for edition in (_edition_named(kind, site), source.edition):
            rows = edition in load_limits().editions and load_limits().find(
                check=source.check, edition=edition, method=source.method, kind=kind.quantity
            )
            if rows:
                found.update((row.id, tightened(row, site)) for row in rows)
                break
    return tuple(found.values())


def limits_from(check: Check, kind: CheckKind) -> LimitsFrom | None:
    """Which limits the method of a check is held against; None where it has none."""
    return next((each for each in kind.limits_from if check.method in each.methods), None)


def _rows(
    check: Check, item: Item | None, *, source: LimitsFrom, edition: str | None, quantity: str
) -> tuple[Limit, ...]:
    """Rows of one edition for a check; none for an edition that is not on file."""
    if edition not in load_limits().editions:
        return ()
    return load_limits().find(
        check=source.check,
        edition=edition,
        condition=_condition(check),
        equipment_class=item.equipment_class
        if item and item.equipment_class != "internal"
        else None,
        part=item.applied_part if item and item.applied_part != "none" else None,
        method=source.method,
        kind=quantity,
    )


def tightened(limit: Limit, site: Site) -> Limit:
    """A limit as the site file makes it stricter; the shipped one where it does not.

    Args:
        limit: a shipped row.
        site: its `tightened` names limits by id; a looser or unreadable value changes nothing.
    """
    typed = next((each.value for each in site.file.tightened if each.limit == limit.id), None)
    try:
        value = parse(typed or "", limit.kind)
    except InvalidValue:
        return limit
    if value.bound or not is_stricter(value.value, limit):
        return limit
    cited = Citation(f"{OWN}, stricter than {limit.text} of {limit.edition.text()}")
    return replace(limit, value=value.value, text=value.text, citation=cited, disputed=False)


def is_stricter(value: float, limit: Limit) -> bool:
    """Whether a value in SI, above 0, leaves less room than a shipped limit."""
    return 0 < value < limit.value if limit.sense == "max" else value > limit.value


def _condition(check: Check) -> str | None:
    if "earth_open" in check.state:
        return "open_earth"
    return "open_neutral" if "neutral_open" in check.state else None
