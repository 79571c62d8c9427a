"""Red flags: findings and facts after which reassurance is forbidden, and what clears them.

Knows no probability, so that no prior can reach it. A cleared flag stays on the report.
"""

from collections.abc import Iterator

from triage.evidence import Evidence
from triage.frozen import frozen
from triage.incident import Incident, Item
from triage.involvement import is_powered, item_supply, required_checks
from triage.knowledge import Measured, RedFlag, knowledge
from triage.quantity import parse
from triage.validity import CheckVerdict, covers, find_item

_ISOLATED_INSTEAD_OF_OUTLET = ("isolated_line_voltages", "isolated_alarm_test")
_ITEM_CONDITIONS = {
    "hot": ("hot",),
    "damaged": ("damaged", "live_part"),
    "altered": ("altered", "missing"),
}


@frozen
class Flag:
    """One red flag standing on one incident.

    Args:
        flag: its row.
        items: ids of the items in its scope; empty for the place.
        because: what raised it, in words.
        open_items: ids on which it is not cleared; for a place flag ("",) while it stands.
        missing: what would clear it, in words.
    """

    flag: RedFlag
    items: tuple[str, ...]
    because: str
    open_items: tuple[str, ...]
    missing: str

    @property
    def cleared(self) -> bool:
        """Whether it holds nothing any more."""
        return not self.open_items


def raise_flags(incident: Incident, evidence: Evidence, supply: str | None) -> tuple[Flag, ...]:
    """Every red flag of one incident, cleared ones included.

    Args:
        incident: the record.
        evidence: findings, facts and judged checks.
        supply: kind of supply of the place.
    """
    found = []
    for flag in knowledge().red_flags.values():
        because = "; ".join(_because(flag, evidence))
        if because:
            found.append(_standing(flag, because, incident, evidence, supply))
    return tuple(found)


def _because(flag: RedFlag, evidence: Evidence) -> Iterator[str]:
    for finding, state in flag.findings:
        seen = evidence.observed.get(finding)
        said = set(evidence.disagreements.get(finding, {}).values())
        if state in said or (seen is not None and seen.state == state):
            yield f"{knowledge().findings[finding].name}: {state.replace('_', ' ')}"
    for sign in sorted(flag.signs & evidence.signs):
        yield sign.replace("_", " ")
    for fact in sorted(flag.facts & evidence.facts):
        yield _FACT_WORDS[fact]


_FACT_WORDS = {
    "live_contact": "somebody is still in contact", "hot": "hot or smoking",
    "two_driven_signs": "two independent signs of something that keeps acting",
    "breach": "skin or glove pierced", "wet_item": "liquid in or on an item",
    "damaged": "damage seen", "wet_contact": "wet contact",
    "patient_connected": "a patient was connected", "altered": "an item was changed or is missing",
    "scene_changed": "the scene was changed before it was looked at",
    "heart_conductor": "a patient there has a conductor to the heart",
    "pins_touched": "plug pins or contacts were touched",
    "monitor_changed_since": "something was plugged or unplugged before the reading",
    "unit_disputed": "the unit of a reading is in doubt",
}  # fmt: skip


def _standing(
    flag: RedFlag, because: str, incident: Incident, evidence: Evidence, supply: str | None
) -> Flag:
    items = _scope(flag, incident, evidence)
    if flag.scope == "place":
        clear = bool(items) and all(_cleared(flag, i, incident, evidence, supply) for i in items)
        return Flag(flag, (), because, () if clear else ("",), _missing(flag))
    still = tuple(i.id for i in items if not _cleared(flag, i, incident, evidence, supply))
    ids = tuple(i.id for i in items)
    # Without any item on record the flag stands on the place: it must never vanish.
    return Flag(flag, ids, because, still if items else ("",), _missing(flag))


def _scope(flag: RedFlag, incident: Incident, evidence: Evidence) -> tuple[Item, ...]:
    touched = evidence.touched
    if flag.scope == "circuit":
        circuits = tuple(i for i in evidence.linked + touched if i.kind in ("circuit", "outlet"))
        return circuits or touched
    if flag.scope == "item" and flag.facts & set(_ITEM_CONDITIONS):
        words = {w for fact in flag.facts for w in _ITEM_CONDITIONS.get(fact, ())}
        return tuple(i for i in incident.items if words & set(i.condition))
    if flag.id == "unit_disputed":
        doubted = [v.check.of for v in evidence.verdicts if v.check.unit_disputed == "yes"]
        named = [item for each in doubted if (item := find_item(incident, each))]
        return tuple(named) or touched
    return touched


def would_clear(flag: RedFlag, incident: Incident, evidence: Evidence, supply: str | None) -> bool:
    """Whether the checks on record clear a flag on everything it reaches, raised or not."""
    items = _scope(flag, incident, evidence)
    return bool(items) and all(_cleared(flag, i, incident, evidence, supply) for i in items)


def _missing(flag: RedFlag) -> str:
    """What clears a flag, in words."""
    if flag.never:
        return f"not cleared by this program. {flag.never}"
    steps = [each.replace("_", " ") for each in flag.passes]
    steps += [f"{m.check.replace('_', ' ')} above {m.above}" for m in flag.measured]
    return f"cleared by valid passes of: {', '.join(steps)}; signed by {flag.role}"


def _cleared(
    flag: RedFlag, item: Item, incident: Incident, evidence: Evidence, supply: str | None
) -> bool:
    if flag.never:
        return False
    needed = _needed_passes(flag, item, incident, supply)
    if flag.passes and not needed:
        return False  # nothing that could clear it can be made on this item
    if not all(_passed(check, item, incident, evidence) for check in needed):
        return False
    return all(_above(m, item, evidence.verdicts) for m in flag.measured)


def _needed_passes(
    flag: RedFlag, item: Item, incident: Incident, supply: str | None
) -> tuple[str, ...]:
    """All named passes for a powered item; for others those that can be made on it at all."""
    if is_powered(item):
        if item_supply(item, supply) == "isolated" and "outlet_test" in flag.passes:
            kept = tuple(each for each in flag.passes if each != "outlet_test")
            return kept + _ISOLATED_INSTEAD_OF_OUTLET
        return flag.passes
    possible = set(required_checks(incident, item, supply)) | {"metal_voltage_loaded"}
    return tuple(each for each in flag.passes if each in possible)


def _passed(check: str, item: Item, incident: Incident, evidence: Evidence) -> bool:
    mine = [
        v for v in evidence.verdicts
        if v.kind and v.kind.id == check and not v.as_left and covers(v.check, item, incident)
    ]  # fmt: skip
    return any(v.state == "valid_pass" for v in mine) and not any(
        v.state in ("valid_fail", "invalid_fail") for v in mine
    )


def _above(measured: Measured, item: Item, verdicts: tuple[CheckVerdict, ...]) -> bool:
    kind = "resistance" if measured.check == "object_to_ground" else "voltage"
    bound = parse(measured.above, kind).value
    return any(
        v.kind and v.kind.id == measured.check and v.state == "informative" and v.value
        and not v.as_left and v.check.of == item.id and v.value.value > bound
        and v.value.bound != "<"
        for v in verdicts
    )  # fmt: skip
