"""What happens to each item, outlet and circuit, and to the room, with reasons.

Every adverse answer carries its own floor; the result is the maximum over floors and gate, so that
a more adverse answer can never lower it. The gate needs the whole deciding set, known and
reassuring; anything unknown or invalid keeps it shut.
"""

from collections.abc import Iterator, Mapping
from enum import IntEnum

from triage.check_table import cannot_be_released, check_kinds
from triage.diagnosis import CONFLICT_BLOCKS, RESIDUAL, Posterior
from triage.evidence import Defect, Evidence
from triage.exposure import Exposure
from triage.frozen import frozen
from triage.incident import Incident, Item
from triage.involvement import FIXED, required_checks
from triage.knowledge import Cause, Finding, knowledge
from triage.red_flags import Flag, would_clear
from triage.release_gate import deciding_posterior, release_threshold, upper_mains
from triage.site import Site
from triage.told import Observed
from triage.validity import CheckVerdict, covers, through_cord

NOT_VALID = " is not done and valid"
"""How the gate names a check that is still open."""


class Level(IntEnum):
    """Dispositions from mildest to most severe."""

    STATIC_CONTROLS = 1
    HOLD = 2
    WITHDRAW = 3
    ISOLATE = 4


_FLOOR = {"hold": Level.HOLD, "withdraw": Level.WITHDRAW, "isolate": Level.ISOLATE}
_STAYS = FIXED | {"outlet", "circuit", None}
_OF_THE_SUPPLY = frozenset({"outlet_test", "isolated_line_voltages", "isolated_alarm_test"})
_LINKED_NEEDS = _OF_THE_SUPPLY | {"visual_inspection", "earth_continuity", "insulation_resistance"}


@frozen
class Gate:
    """Whether static may be the disposition.

    Args:
        open: every condition holds.
        shut_by: the conditions that do not, in words.
        upper: upper limit of P(F), None where it was not reached.
        threshold: it must lie below this.
    """

    open: bool
    shut_by: tuple[str, ...]
    upper: float | None
    threshold: float


@frozen
class ItemDisposition:
    """One item, outlet or circuit; item "" is the room.

    Args:
        item: id. level: disposition. reasons: why, most severe first.
        would_change: what would make it milder.
        missing: mandatory checks without a valid pass.
    """

    item: str
    level: Level
    reasons: tuple[str, ...]
    would_change: tuple[str, ...]
    missing: tuple[str, ...]


@frozen
class Inputs:
    """Everything the decision rests on."""

    incident: Incident
    evidence: Evidence
    exposure: Exposure
    flags: tuple[Flag, ...]
    posterior: Posterior
    priors: Mapping[str, float]
    supply: str | None
    site: Site


def decide(given: Inputs) -> tuple[Gate, tuple[ItemDisposition, ...], ItemDisposition]:
    """The gate, a disposition for each item that matters, and one for the room."""
    gate = open_gate(given)
    items = tuple(_decide_item(item, given, gate) for item in _items_that_matter(given))
    return gate, items, _decide_room(given, items, gate)


def _items_that_matter(given: Inputs) -> Iterator[Item]:
    """Touched, linked, and any other item with a defect or flag of its own."""
    involved = {i.id for i in given.evidence.touched + given.evidence.linked}
    marked = {d.item for d in given.evidence.defects}
    marked |= {i for flag in given.flags for i in flag.items}
    yield from (i for i in given.incident.items if i.id in involved | marked)


def missing_checks(item: Item, given: Inputs) -> tuple[str, ...]:
    """Mandatory checks of an item without a valid result; of linked items only their own part."""
    needed = required_checks(given.incident, item, given.supply)
    if item not in given.evidence.touched:
        needed = tuple(each for each in needed if each in _LINKED_NEEDS)
    return tuple(each for each in needed if not _done(each, item, given))


def _done(check: str, item: Item, given: Inputs) -> bool:
    mine = [v for v in _of(given.evidence.verdicts, check, item, given.incident) if not v.as_left]
    good = any(v.state in ("valid_pass", "informative") for v in mine)
    return good and not any(v.state in ("valid_fail", "invalid_fail") for v in mine)


def _of(
    verdicts: tuple[CheckVerdict, ...], check: str, item: Item, incident: Incident
) -> Iterator[CheckVerdict]:
    for each in verdicts:
        if each.kind and each.kind.id == check and covers(each.check, item, incident):
            yield each


def open_gate(given: Inputs) -> Gate:
    """Try every condition of release; the draws only when all the others hold."""
    threshold = release_threshold(given.site.miss_ratio)
    shut = tuple(dict.fromkeys(_shut_by(given)))
    if shut:
        return Gate(False, shut, None, threshold)
    observed, factors = _deciding(given), _factors(given)
    found = deciding_posterior(given.priors, observed, factors)
    residual = found[RESIDUAL] + found["not_electrical"]
    if residual > knowledge().residual_at_most:
        return Gate(
            False, ("too much stays unexplained by the causes on the list",), None, threshold
        )
    upper = upper_mains(given.priors, observed, factors)
    if upper >= threshold:
        text = (
            f"a mains fault could still be as probable as {upper:.1%}; under {threshold:.1%} needed"
        )
        return Gate(False, (text,), upper, threshold)
    return Gate(True, (), upper, threshold)


def _deciding(given: Inputs) -> tuple[Observed, ...]:
    """Findings of the deciding set, and static measurements, which can only help when they pass."""
    return tuple(
        o for _, o in sorted(given.evidence.observed.items())
        if o.finding.deciding or o.finding.group == "static_tests"
    )  # fmt: skip


def _factors(given: Inputs) -> dict[str, float]:
    return {cause: each.factor for cause, each in given.exposure.causes.items()}


def _shut_by(given: Inputs) -> Iterator[str]:
    if not given.evidence.touched:
        yield "no item on record"
    if any(not contact.items for contact in given.incident.contacts):
        yield "not known: what was touched"
    for item in given.evidence.touched + given.evidence.linked:
        yield from _item_shuts(item, given)
    yield from _answers_shut(given)
    yield from (f"red flag: {f.flag.name}" for f in given.flags if not f.cleared)
    yield from (f"defect: {d.text}" for d in given.evidence.defects)
    for each in given.evidence.verdicts:
        if each.state == "invalid_fail" and each.kind:
            yield f"{each.kind.name} failed and does not count; it is repeated first"
    for finding, value in given.posterior.conflicts.items():
        if value >= CONFLICT_BLOCKS:
            yield f"conflict: {knowledge().findings[finding].name} is asked again and signed"
    yield from (_unclosed(cause) for cause in knowledge().causes.values() if _open(cause, given))
    if given.exposure.static_plausible is not True:
        yield "static is not plausible here, or cannot be estimated"


def _item_shuts(item: Item, given: Inputs) -> Iterator[str]:
    if item.kind is None:
        yield f"{item.id}: it is not known what it is"
        return
    if item.kind in cannot_be_released():
        yield f"{item.id}: {cannot_be_released()[item.kind]}"
        return
    for check in missing_checks(item, given):
        verdicts = list(_of(given.evidence.verdicts, check, item, given.incident))
        if any(v.state == "not_practicable" for v in verdicts):
            yield (
                f"{item.id}: {check_kinds()[check].name} is not practicable; undetermined, "
                "residual risk accepted by a named role until a date, with a watch plan"
            )
        else:
            yield f"{item.id}: {check_kinds()[check].name}{NOT_VALID}"


def _answers_shut(given: Inputs) -> Iterator[str]:
    """Answers of the deciding set that are not known or not reassuring."""
    observed = given.evidence.observed
    for finding in knowledge().findings.values():
        if not finding.deciding or finding.measured or finding.id in _SURROUNDINGS:
            continue
        if finding.id == "driven" or (finding.id == "monitor_alarm" and given.supply == "earthed"):
            continue
        seen = observed.get(finding.id)
        if _settled(finding, given):
            continue
        if seen is None and finding.id in given.evidence.answered:
            yield f"not reassuring: {finding.name}, something kept acting"
        elif seen is None:
            yield f"not known: {finding.name}"
        elif finding.reassuring and seen.state not in finding.reassuring:
            yield f"not reassuring: {finding.name}, {seen.state.replace('_', ' ')}"
    if given.supply is None:
        yield "not known: earthed or isolated supply"
    conditions = given.exposure.conditions
    shoes_or_wheels = conditions.casters if conditions.object_kind else conditions.footwear
    for value, name in ((conditions.humidity, "humidity at the place"), (conditions.floor, "floor"),
                        (shoes_or_wheels, "footwear or wheels")):  # fmt: skip
        if value is None:
            yield f"not known: {name}"


def _settled(finding: Finding, given: Inputs) -> bool:
    """Whether measured static answers for an adverse answer, and so for an unknown one too.

    Unknown counts like adverse here: were only the adverse answer let through, not knowing would be
    the worse answer of the two. It needs a flag that a measured charge clears ("others felt it").
    """
    flags = [f for f in knowledge().red_flags.values() if finding.id in dict(f.findings)]
    return bool(flags) and all(
        flag.measured and would_clear(flag, given.incident, given.evidence, given.supply)
        for flag in flags
    )


_SURROUNDINGS = frozenset({"humidity", "ground_path"})


def _open(cause: Cause, given: Inputs) -> bool:
    """Whether another energised source is not yet excluded by its named answer or check."""
    if cause.closing_answer is None:
        return False
    seen = given.evidence.observed.get(cause.closing_answer)
    if seen is not None and seen.state == "no":
        return False
    if getattr(given.incident.event, cause.closing_answer) == "no":
        return False
    return not any(
        v.kind and v.kind.id == cause.closing_check and v.state == "valid_pass" and not v.as_left
        and _closes(v, given)
        for v in given.evidence.verdicts
    )  # fmt: skip


def _closes(verdict: CheckVerdict, given: Inputs) -> bool:
    """A log speaks for the whole place, a reading only for the item it was made on."""
    if verdict.kind is not None and verdict.kind.quantity is None:
        return True
    items = given.evidence.touched + given.evidence.linked
    return any(covers(verdict.check, item, given.incident) for item in items)


def _unclosed(cause: Cause) -> str:
    return f"not excluded: {cause.name.lower()}"


def _decide_item(item: Item, given: Inputs, gate: Gate) -> ItemDisposition:
    floors = sorted(_floors(item, given), key=lambda pair: -pair[0])
    missing = missing_checks(item, given)
    named = item.kind is not None and item.kind not in cannot_be_released()
    base = Level.STATIC_CONTROLS if gate.open and named and not missing else Level.HOLD
    level = max([base, *(level for level, _ in floors)])
    reasons = tuple(dict.fromkeys(text for _, text in floors))
    if not reasons:
        reasons = ("checks complete and clean, static plausible",) if gate.open else (
            "held until the named checks and answers are complete",
        )  # fmt: skip
    change = [f.missing for f in given.flags if item.id in f.open_items]
    change += [f"valid pass: {check_kinds()[each].name}" for each in missing]
    if item.kind is None:
        change.insert(0, "say what it is; its checks follow from that")
    return ItemDisposition(item.id, level, reasons, tuple(dict.fromkeys(change)), missing)


def _floors(item: Item, given: Inputs) -> Iterator[tuple[Level, str]]:
    """Every floor under one item, with its reason."""
    for flag in given.flags:
        if item.id in flag.open_items:
            yield _FLOOR[flag.flag.floor], f"{flag.flag.name} ({flag.because})"
    for defect in given.evidence.defects:
        if _shares(defect, item, given):
            yield _defect_floor(defect.check, item), defect.text
    for each in given.evidence.verdicts:
        if each.state == "invalid_fail" and each.kind and covers(each.check, item, given.incident):
            yield Level.HOLD, f"{each.kind.name} failed and is repeated: {'; '.join(each.reasons)}"


def _shares(defect: Defect, item: Item, given: Inputs) -> bool:
    """Whether a defect is an item's own, its tested cord's, or of no named item."""
    if defect.item is None:
        return item in given.evidence.touched
    if defect.item == item.id:
        return True
    return defect.source is not None and through_cord(defect.source, item, given.incident)


def _defect_floor(check: str, item: Item) -> Level:
    """A defect of the supply or of fixed metal is made dead at its source; others are withdrawn."""
    of_place = item.kind in FIXED or item.kind in ("outlet", "circuit")
    electrical = check not in ("condition", "visual_inspection")
    if check in _OF_THE_SUPPLY or (of_place and electrical):
        return Level.ISOLATE
    return Level.WITHDRAW


def _decide_room(given: Inputs, items: tuple[ItemDisposition, ...], gate: Gate) -> ItemDisposition:
    """The room: restricted while its supply or fixed metal is in doubt."""
    kinds = {i.id: i.kind for i in given.incident.items}
    floors = [(_FLOOR[f.flag.floor], f"{f.flag.name} ({f.because})")
              for f in given.flags if "" in f.open_items]  # fmt: skip
    for each in items:
        fixed = kinds[each.item] in _STAYS  # of an unknown kind nobody knows whether it moves
        if fixed and each.level > Level.STATIC_CONTROLS:
            floors.append((each.level, f"{each.item} is part of it"))
        elif each.level == Level.ISOLATE:
            floors.append((Level.ISOLATE, f"{each.item}: its circuit"))
    if not given.incident.items:
        floors.append((Level.HOLD, "it is not known what was touched"))
    level = max([Level.STATIC_CONTROLS, *(level for level, _ in floors)])
    reasons = tuple(dict.fromkeys(t for _, t in sorted(floors, key=lambda pair: -pair[0])))
    if not reasons:
        reasons = ("only movable items are held" if not gate.open else "nothing is held",)
    return ItemDisposition("", level, reasons, (), ())
