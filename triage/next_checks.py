"""Which check next, on what, by whom: most telling about a mains fault for its minutes first.

A mandatory check is never dropped, a check whose precondition is not met is listed after it, and
nobody is ever told to touch it again.
"""

import math
from collections.abc import Iterator, Mapping

from triage.check_table import CheckKind, check_kinds
from triage.disposition import Inputs, ItemDisposition
from triage.frozen import frozen
from triage.incident import Item
from triage.involvement import FIXED, OBJECTS, is_powered, item_supply
from triage.knowledge import Finding, knowledge
from triage.validity import covers

MOST = 12
"""Longest list printed beyond the mandatory checks (judgement: one page)."""
_ISOLATED_ONLY = frozenset({"isolated_line_voltages", "isolated_alarm_test", "plug_step_test",
                            "monitor_log"})  # fmt: skip
_POWERED_ONLY = frozenset({"earth_continuity", "earth_in_place", "touch_current",
                           "insulation_resistance"})  # fmt: skip
_STATIC_ONLY = frozenset({"object_to_ground", "object_voltage_after_rolling", "static_reenactment",
                          "person_to_ground", "floor_resistance", "caster_resistance",
                          "footwear_resistance"})  # fmt: skip


@frozen
class NextCheck:
    """One check proposed.

    Args:
        kind: its row. item: id it is made on, "" for the place.
        mandatory: release needs it.
        bits: information about the family of mains faults.
        score: bits times urgency over minutes.
        after: what must be done or known first, in words.
    """

    kind: CheckKind
    item: str
    mandatory: bool
    bits: float
    score: float
    after: tuple[str, ...]


def propose(given: Inputs, items: tuple[ItemDisposition, ...]) -> tuple[NextCheck, ...]:
    """Checks still worth making, in order: possible now first, then by score, then fixed order."""
    by_id = {item.id: item for item in given.incident.items}
    found: dict[tuple[str, str], NextCheck] = {}
    for each in items:
        for check in each.missing:
            if _failed(check, by_id[each.item], given):
                continue  # a defect already; the next result that counts is the one as left
            _add(found, given, check_kinds()[check], by_id[each.item], True)
    for item in given.evidence.touched:
        for kind in check_kinds().values():
            if _useful(kind, item, given):
                _add(found, given, kind, item, False)
    order = sorted(found.values(), key=lambda n: (bool(n.after), -n.score, n.kind.order, n.item))
    mandatory = sum(n.mandatory for n in order)
    optional_left = max(MOST - mandatory, 3)
    return tuple(_limited(order, optional_left))


def _failed(check: str, item: Item, given: Inputs) -> bool:
    return any(
        v.kind and v.kind.id == check and v.state == "valid_fail"
        and covers(v.check, item, given.incident)
        for v in given.evidence.verdicts
    )  # fmt: skip


def _limited(order: list[NextCheck], optional_left: int) -> Iterator[NextCheck]:
    for each in order:
        if each.mandatory:
            yield each
        elif optional_left > 0:
            optional_left -= 1
            yield each


def _add(
    found: dict[tuple[str, str], NextCheck], given: Inputs, kind: CheckKind, item: Item,
    mandatory: bool,
) -> None:  # fmt: skip
    place = item.outlet if kind.id == "outlet_test" and item.outlet else item.id
    key = (kind.id, place)
    if key in found and (found[key].mandatory or not mandatory):
        return
    bits = information(kind, given)
    urgency = kind.perishable
    found[key] = NextCheck(
        kind, place, mandatory, bits, bits * urgency / kind.minutes, tuple(_after(kind, given))
    )


def _useful(kind: CheckKind, item: Item, given: Inputs) -> bool:
    """Whether an optional check fits the item and has not been made."""
    if kind.id == "humidity_reading":
        return given.exposure.conditions.humidity is None
    if kind.finding is None or (item.kind or "other") not in kind.applies_to:
        return False
    supply = item_supply(item, given.supply)
    if kind.id in _ISOLATED_ONLY and supply not in ("isolated", None):
        return False
    if kind.id == "outlet_test" and supply not in ("earthed", None):
        return False
    if kind.id in _POWERED_ONLY and not is_powered(item):
        return False
    if kind.id in _STATIC_ONLY and not (item.kind in OBJECTS or item.kind in FIXED):
        return kind.id == "static_reenactment"
    if kind.id == "two_metal_voltage" and not _second_contact_possible(given):
        return False
    return not any(
        v.kind and v.kind.id == kind.id and v.state.startswith(("valid", "informative"))
        and covers(v.check, item, given.incident)
        for v in given.evidence.verdicts
    )  # fmt: skip


def _second_contact_possible(given: Inputs) -> bool:
    seen = given.evidence.observed.get("second_contact")
    return seen is None or seen.state == "yes"


def _after(kind: CheckKind, given: Inputs) -> Iterator[str]:
    scene = given.incident.scene
    if kind.patient_absent and scene.patient_connected != "no":
        yield "after the patient is on other equipment"
    if (kind.drops_power or kind.patient_absent) and scene.dependence != "none":
        yield "after the clinician in charge agrees and nobody depends on it"
    if kind.destroys_evidence:
        yield "after photographs and the reading as found"
    if kind.needs_maker:
        yield "after the maker's instructions are at hand"
    if kind.id == "static_reenactment" and any(not f.cleared for f in given.flags):
        yield "after no red flag stands; with a meter, not a finger"


def information(kind: CheckKind, given: Inputs) -> float:
    """Bits that the check's finding tells about the family of mains faults; 0 without a finding.

    Computed with the tempered likelihoods renormalised over the states, so that the expected
    posterior equals the prior.
    """
    finding = knowledge().findings.get(kind.finding or "")
    if finding is None or finding.id in given.evidence.observed:
        return 0.0
    p = dict(zip(given.posterior.causes, given.posterior.probability, strict=True))
    return information_of(finding, p)


def information_of(finding: Finding, p: Mapping[str, float]) -> float:
    """Bits about the mains family from one finding under a distribution over causes."""
    mains = set(knowledge().family("mains"))
    bits = _entropy(math.fsum(p[c] for c in mains))
    for row in finding.tempered.values():
        joint = {c: p[c] * math.exp(row[c]) for c in p}
        total = math.fsum(joint.values())
        bits -= total * _entropy(math.fsum(joint[c] for c in mains) / total)
    return max(bits, 0.0)


def _entropy(p: float) -> float:
    if p <= 0 or p >= 1:
        return 0.0
    return -p * math.log2(p) - (1 - p) * math.log2(1 - p)
