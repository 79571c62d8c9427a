"""From record and judged checks to findings and defects.

A finding is one observable in one state. Told or measured follows the source of the answer, not
the question. Unknown findings are left out; of contradicting statements the most adverse counts
and the others are kept beside it.
"""

from collections.abc import Iterator, Mapping

from triage import words as w
from triage.frozen import frozen
from triage.incident import Check, Incident, Item
from triage.involvement import involved, required_checks, speaks_about
from triage.knowledge import knowledge
from triage.limits import Limit
from triage.quantity import Quantity
from triage.told import Observed, disagreements, driven_signs, merge_driven, told_findings
from triage.validity import CheckVerdict, covers

_LOGS = frozenset({"electrosurgery_log", "pulse_log", "site_event_log", "glove_leak_test"})
"""Checks whose fail is a fact of the event, not a defect of the item."""
_THRESHOLDS = {
    "object_to_ground": 1e9,  # ohm: floating for charges of kilovolts (IEC 61340-5-1 bound)
    "object_voltage_after_rolling": 1e3,  # V: felt from about 1 to 3 kV
    "static_reenactment": 1e3,
}


@frozen
class Defect:
    """Something shown to be defective, whatever the ranking says.

    Args:
        item: the item, None where the check names none.
        check: check id, or "condition" for what was seen.
        text: in words.
        value: the reading; limit: the limit it fails. source: the check that failed.
    """

    item: str | None
    check: str
    text: str
    value: Quantity | None = None
    limit: Limit | None = None
    source: Check | None = None


@frozen
class Evidence:
    """Everything observed about one incident.

    Args:
        observed: finding id to what was observed.
        disagreements: finding id to statement id to state, where statements differ.
        defects: valid fails and damage seen.
        verdicts: every check judged.
        touched: items at the contact. linked: their cords, outlets and circuits.
        facts: facts of the record that red flags may name.
        signs: signs seen on any person.
        answered: findings that somebody answered, those merged into another one too.
    """

    observed: Mapping[str, Observed]
    disagreements: Mapping[str, Mapping[str, str]]
    defects: tuple[Defect, ...]
    verdicts: tuple[CheckVerdict, ...]
    touched: tuple[Item, ...]
    linked: tuple[Item, ...]
    facts: frozenset[str]
    signs: frozenset[str]
    answered: frozenset[str]


def gather(incident: Incident, verdicts: tuple[CheckVerdict, ...], supply: str | None) -> Evidence:
    """Findings, defects and facts of one record.

    Args:
        incident: the record.
        verdicts: its checks, judged.
        supply: kind of supply of the place, from record or site; None if not known.
    """
    touched, linked = involved(incident)
    told = dict(told_findings(incident, touched, supply))
    told |= {
        each.finding.id: each
        for each in _from_checks(incident, verdicts, touched, supply)
        if not _would_silence(each, told.get(each.finding.id))
    }
    answered = frozenset(told)
    merge_driven(told, incident.statements)
    return Evidence(
        observed=told,
        disagreements=disagreements(incident.statements),
        defects=tuple(_defects(incident, verdicts)),
        verdicts=verdicts,
        touched=touched,
        linked=linked,
        facts=frozenset(_facts(incident, verdicts, touched + linked)),
        signs=frozenset(sign for person in incident.persons for sign in person.signs),
        answered=answered,
    )


def _would_silence(check: Observed, said: Observed | None) -> bool:
    """Whether a check that found nothing would take an adverse answer off the record."""
    adverse = check.finding.adverse
    return said is not None and said.state in adverse and check.state not in adverse


def _from_checks(
    incident: Incident, verdicts: tuple[CheckVerdict, ...], touched: tuple[Item, ...],
    supply: str | None,
) -> Iterator[Observed]:  # fmt: skip
    """Findings from checks: one valid fail is enough, a pass must cover all that need it."""
    for finding in knowledge().findings.values():
        kinds = {v.kind.id for v in verdicts if v.kind and v.kind.finding == finding.id}
        state = _check_state(incident, verdicts, touched, supply, kinds) if kinds else None
        if state is not None:
            yield Observed(finding, state, True, "instrument")


def _check_state(
    incident: Incident, verdicts: tuple[CheckVerdict, ...], touched: tuple[Item, ...],
    supply: str | None, kinds: set[str],
) -> str | None:  # fmt: skip
    mine = [v for v in verdicts if v.kind and v.kind.id in kinds and not v.as_left]
    if any(v.state == "valid_fail" for v in mine):
        return "yes"
    readings = [v for v in mine if v.state == "informative" and speaks_about(v, touched, incident)]
    answers = [a for v in readings if v.kind and v.value and (a := _above(v.kind.id, v.value))]
    if answers:
        return "no" if "no" in answers else "yes"
    return "no" if _pass_covers_all(incident, mine, touched, supply, kinds) else None


def _above(check: str, value: Quantity) -> str | None:
    """Whether a reading lies above the mark that makes it speak for static; None if open."""
    mark = _THRESHOLDS.get(check)
    if mark is None or (value.bound == "<" and value.value > mark):
        return None
    if value.bound == ">" and value.value < mark:
        return None
    return "yes" if value.value > mark or (value.bound == ">" and value.value == mark) else "no"


def _pass_covers_all(
    incident: Incident, mine: list[CheckVerdict], touched: tuple[Item, ...], supply: str | None,
    kinds: set[str],
) -> bool:  # fmt: skip
    needing = [i for i in touched if kinds & set(required_checks(incident, i, supply))]
    passes = [v for v in mine if v.state == "valid_pass"]
    if not needing:
        return bool(passes) and any(
            covers(v.check, item, incident) for v in passes for item in touched
        )
    return all(any(covers(v.check, item, incident) for v in passes) for item in needing)


def _defects(incident: Incident, verdicts: tuple[CheckVerdict, ...]) -> Iterator[Defect]:
    for each in verdicts:
        if each.state == "valid_fail" and each.kind is not None and each.kind.id not in _LOGS:
            value = f": {each.value.text}" if each.value else ""
            stage = " as left" if each.as_left else ""
            text = f"{each.kind.name} failed{stage}{value}"
            yield Defect(each.check.of, each.kind.id, text, each.value, each.limit, each.check)
    for item in incident.items:
        for condition in ("damaged", "live_part", "hot", "wet"):
            if condition in item.condition:
                yield Defect(item.id, "condition", f"seen: {w.CONDITION[condition][1]}")


def _facts(
    incident: Incident, verdicts: tuple[CheckVerdict, ...], items: tuple[Item, ...]
) -> Iterator[str]:
    scene = incident.scene
    yes = {
        "live_contact": scene.live_contact, "heart_conductor": scene.heart_conductor,
        "patient_connected": scene.patient_connected,
        "pins_touched": incident.event.pins_touched,
        "monitor_changed_since": incident.supply.changed_since,
    }  # fmt: skip
    yield from (fact for fact, answer in yes.items() if answer == "yes")
    if any(person.breach == "yes" for person in incident.persons):
        yield "breach"
    if set(scene.changes) - {"none"}:
        yield "scene_changed"
    if len(driven_signs(incident.statements)) > 1:
        yield "two_driven_signs"
    if any(c.moisture == "wet" or c.also_touching == "wet_floor" for c in incident.contacts):
        yield "wet_contact"
    if incident.event.activity == "wet_cleaning":
        yield "wet_contact"
    for condition, fact in (("hot", "hot"), ("wet", "wet_item"), ("damaged", "damaged"),
                            ("live_part", "damaged"),
                            ("altered", "altered"), ("missing", "altered")):  # fmt: skip
        if any(condition in item.condition for item in items):
            yield fact
    if any(v.check.unit_disputed == "yes" for v in verdicts):
        yield "unit_disputed"
