"""From record and judged checks to findings and defects.

A finding is one observable in one state. Told or measured follows the source of the answer, not
the question. Unknown findings are left out; of contradicting statements the most adverse counts
and the others are kept beside it.
"""

from collections.abc import Iterator, Mapping
from dataclasses import dataclass

from triage import words as w
from triage.check_table import mandatory_checks
from triage.fields import WordList
from triage.incident import Contact, Incident, Item, Statement
from triage.knowledge import Finding, knowledge
from triage.limits import Limit
from triage.quantity import Quantity
from triage.validity import (
    MAINS_KINDS,
    MAINS_POWER,
    CheckVerdict,
    covers,
    find_item,
    is_wet,
)

OBJECTS = frozenset({"cart", "stool", "bed", "table", "pole", "stand"})
"""Kinds of item that can float on wheels or feet."""
FIXED = frozenset({"furniture_fixed", "building_metal"})
"""Kinds of item that stay where they are."""
_MEASURED_SOURCES = frozenset({"log", "instrument"})
_CONDUCTING = frozenset({"earthed_metal", "another_device", "patient", "wet_floor"})
_LASTING = frozenset({"about_a_second", "longer"})
_THRESHOLDS = {
    "object_to_ground": 1e9,  # ohm: floating for charges of kilovolts (IEC 61340-5-1 bound)
    "object_voltage_after_rolling": 1e3,  # V: felt from about 1 to 3 kV
    "static_reenactment": 1e3,
}


@dataclass(frozen=True, slots=True)
class Observed:
    """One finding in one state.

    Args:
        finding: its row of knowledge.
        state: the state that counts.
        measured: from an instrument or log, not told.
        source: where the answer comes from, in words.
    """

    finding: Finding
    state: str
    measured: bool
    source: str


@dataclass(frozen=True, slots=True)
class Defect:
    """Something shown to be defective, whatever the ranking says.

    Args:
        item: the item, None where the check names none.
        check: check id, or "condition" for what was seen.
        text: in words.
        value: the reading; limit: the limit it fails.
    """

    item: str | None
    check: str
    text: str
    value: Quantity | None = None
    limit: Limit | None = None


@dataclass(frozen=True, slots=True)
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
    """

    observed: Mapping[str, Observed]
    disagreements: Mapping[str, Mapping[str, str]]
    defects: tuple[Defect, ...]
    verdicts: tuple[CheckVerdict, ...]
    touched: tuple[Item, ...]
    linked: tuple[Item, ...]
    facts: frozenset[str]
    signs: frozenset[str]


def gather(incident: Incident, verdicts: tuple[CheckVerdict, ...], supply: str | None) -> Evidence:
    """Findings, defects and facts of one record.

    Args:
        incident: the record.
        verdicts: its checks, judged.
        supply: kind of supply of the place, from record or site; None if not known.
    """
    touched, linked = involved(incident)
    told = dict(_told(incident, touched, supply))
    told |= {
        each.finding.id: each
        for each in _from_checks(incident, verdicts, touched, supply)
        if not _would_silence(each, told.get(each.finding.id))
    }
    _merge_driven(told, incident.statements)
    return Evidence(
        observed=told,
        disagreements=_disagreements(incident.statements),
        defects=tuple(_defects(incident, verdicts)),
        verdicts=verdicts,
        touched=touched,
        linked=linked,
        facts=frozenset(_facts(incident, verdicts, touched + linked)),
        signs=frozenset(sign for person in incident.persons for sign in person.signs),
    )


def _would_silence(check: Observed, said: Observed | None) -> bool:
    """Whether a check that found nothing would take an adverse answer off the record."""
    adverse = check.finding.adverse
    return said is not None and said.state in adverse and check.state not in adverse


def involved(incident: Incident) -> tuple[tuple[Item, ...], tuple[Item, ...]]:
    """Items touched, and the cords, outlets and circuits they hang on.

    Without any contact on record every item counts as touched: not knowing never shortens a list.
    """
    named = {each for contact in incident.contacts for each in contact.items}
    touched = tuple(i for i in incident.items if i.id in named or not named)
    links = {each for i in touched for each in (i.cord, i.outlet, i.circuit)}
    ids = {item.id for item in touched}
    return touched, tuple(i for i in incident.items if i.id in links and i.id not in ids)


def is_powered(item: Item) -> bool:
    """Whether the mains can reach an item; not knowing counts as yes."""
    if item.power in MAINS_POWER or (item.power is None and item.kind not in FIXED):
        return True
    return item.kind in MAINS_KINDS or item.kind is None


def speaks_about(verdict: CheckVerdict, touched: tuple[Item, ...], incident: Incident) -> bool:
    """Whether a check was made on what was touched, or on the person who touched it."""
    of = find_item(incident, verdict.check.of)
    if of is not None and of.kind == "person":
        return True
    return any(covers(verdict.check, item, incident) for item in touched)


def item_supply(item: Item, supply: str | None) -> str | None:
    """Supply word for the mandatory set: earthed, isolated, none, or None for not known."""
    if not is_powered(item):
        return "none"
    return item.supply or supply


def contact_words(incident: Incident, item: Item) -> frozenset[str]:
    """Contact words for the mandatory set: plain, wet, two_metal; empty where nothing is known."""
    contacts = [each for each in incident.contacts if item.id in each.items]
    if not contacts:
        return frozenset()
    found = {"plain"}
    if is_wet(incident, item) or any(c.moisture is None for c in contacts):
        found.add("wet")
    if any(len(c.items) > 1 or c.also_touching != "nothing" for c in contacts):
        found.add("two_metal")
    return frozenset(found)


def required_checks(incident: Incident, item: Item, supply: str | None) -> tuple[str, ...]:
    """The mandatory set of one item of this record."""
    return mandatory_checks(item_supply(item, supply), item.kind, contact_words(incident, item))


def _told(
    incident: Incident, touched: tuple[Item, ...], supply: str | None
) -> Iterator[tuple[str, Observed]]:
    for finding, state, source in _told_states(incident, touched, supply):
        if state is not None:
            row = knowledge().findings[finding]
            yield finding, Observed(row, state, source in _MEASURED_SOURCES, source or "said")


def _told_states(
    incident: Incident, touched: tuple[Item, ...], supply: str | None
) -> Iterator[tuple[str, str | None, str | None]]:
    for finding, (attribute, words) in _FROM_STATEMENTS.items():
        yield finding, _most_adverse(incident.statements, finding, attribute, words), "said"
    event, place = incident.event, incident.place
    yield "skin_mark", _skin_mark(incident), "seen"
    yield "activity", event.activity, "said"
    yield "touched", _touched_state(touched), "seen"
    yield "wet_contact", _wet_contact(incident, touched), "said"
    yield "second_contact", _second_contact(incident.contacts), "said"
    if place.area not in (None, "operating_room"):
        yield "glove", _glove(incident.contacts), "said"
    yield "recent_change", _any_yes([item.recent_change for item in touched]), "said"
    yield "floor_finish_changed", incident.surroundings.floor_finish_changed, "said"
    if supply != "earthed" or incident.supply.alarm == "yes":
        yield "monitor_alarm", incident.supply.alarm, incident.supply.alarm_source
    yield "trip", incident.supply.trip, incident.supply.trip_source
    yield "electrosurgery_active", event.electrosurgery_active, event.electrosurgery_source
    yield "pulse_delivered", event.pulse_delivered, event.pulse_source
    yield "line_event", event.line_event, event.line_event_source


_FROM_STATEMENTS: dict[str, tuple[str, WordList]] = {
    "sensation": ("sensation", w.SENSATION),
    "timing": ("timing", w.TIMING),
    "repeat_at_once": ("repeat_at_once", {"yes": (1, ""), "no": (-1, "")}),
    "repeat_after_moving": ("repeat_after_moving", {"yes": (0, ""), "no": (0, "")}),
    "others_felt": ("others_felt", {"yes": (1, ""), "no": (-1, "")}),
    "crack_heard": ("crack_heard", {"yes": (0, ""), "no": (0, "")}),
    "spark_seen": ("spark_seen", {"yes": (0, ""), "no": (0, "")}),
}


def _most_adverse(
    statements: tuple[Statement, ...], finding: str, attribute: str, words: WordList
) -> str | None:
    """The most adverse answer; among equals the one most probable under a mains fault."""
    said = sorted({a for s in statements if (a := getattr(s, attribute)) is not None})
    mains, row = knowledge().family("mains"), knowledge().findings[finding]
    return max(
        said,
        key=lambda a: (words[a][0] or 0, sum(row.likelihood[a][cause] for cause in mains), a),
        default=None,
    )


def _disagreements(statements: tuple[Statement, ...]) -> dict[str, dict[str, str]]:
    found = {}
    for finding, (attribute, _) in _FROM_STATEMENTS.items():
        said = {s.id: a for s in statements if (a := getattr(s, attribute)) is not None}
        if len(set(said.values())) > 1:
            found[finding] = said
    return found


def driven_signs(statements: tuple[Statement, ...]) -> frozenset[str]:
    """Independent signs of something that keeps acting: repeats, lasts, tingles or buzzes."""
    found = set()
    for each in statements:
        if each.repeat_at_once == "yes":
            found.add("repeats at once, standing still")
        lasting = each.timing == "while_holding" or each.duration in _LASTING
        if lasting or each.sensation in ("sustained_pain", "grip"):
            found.add("lasts while held")
        if each.sensation in ("tingle", "buzz"):
            found.add("tingles or buzzes")
    return frozenset(found)


def _merge_driven(told: dict[str, Observed], statements: tuple[Statement, ...]) -> None:
    """Answers that a store of charge cannot give are one finding; their parts then drop out."""
    lasting = any(s.timing == "while_holding" or s.duration in _LASTING for s in statements)
    repeats = any(s.repeat_at_once == "yes" for s in statements)
    if not (lasting or repeats):
        return
    told["driven"] = Observed(knowledge().findings["driven"], "yes", False, "said")
    told.pop("repeat_at_once", None)
    if told.get("timing") and told["timing"].state == "while_holding":
        told.pop("timing")


def _any_yes(answers: list[str | None]) -> str | None:
    if "yes" in answers:
        return "yes"
    return "no" if answers and None not in answers else None


def _skin_mark(incident: Incident) -> str | None:
    signs = [sign for person in incident.persons for sign in person.signs]
    if "burn" in signs:
        return "burn"
    if "pinpoint_mark" in signs:
        return "pinpoint"
    return "none" if signs else None


def _wet_contact(incident: Incident, touched: tuple[Item, ...]) -> str | None:
    if any(is_wet(incident, item) for item in touched):
        return "yes"
    contacts = incident.contacts
    wet = any(c.moisture in ("damp", "wet") or c.also_touching == "wet_floor" for c in contacts)
    if wet:
        return "yes"
    return "no" if contacts and all(c.moisture == "dry" for c in contacts) else None


def _second_contact(contacts: tuple[Contact, ...]) -> str | None:
    if any(c.also_touching in _CONDUCTING or len(c.items) > 1 for c in contacts):
        return "yes"
    return "no" if contacts and all(c.also_touching == "nothing" for c in contacts) else None


def _glove(contacts: tuple[Contact, ...]) -> str | None:
    coverings = {c.covering for c in contacts}
    if "glove" in coverings:
        return "yes"
    return "no" if coverings and None not in coverings else None


_TOUCHED_ORDER = ("cord_plug_outlet", "mains_device_on", "mains_device_plugged_off",
                  "data_phone_coax", "instrument_or_lead", "unpowered_metal_on_casters",
                  "building_metal", "battery_or_unplugged", "plastic_surface",
                  "person_or_patient")  # fmt: skip
_TOUCHED_KIND = {
    "cord": "cord_plug_outlet", "outlet": "cord_plug_outlet", "circuit": "cord_plug_outlet",
    "adapter_strip": "cord_plug_outlet", "furniture_fixed": "building_metal",
    "building_metal": "building_metal", "instrument": "instrument_or_lead",
    "electrosurgical_unit": "instrument_or_lead", "data_or_phone_line": "data_phone_coax",
    "plastic_item": "plastic_surface", "person": "person_or_patient",
}  # fmt: skip


def _touched_state(touched: tuple[Item, ...]) -> str | None:
    """What was touched; of several the one nearest to the mains, unknown if any is unknown."""
    states = [_touched_one(item) for item in touched]
    if not states or None in states:
        return None
    return min((s for s in states if s), key=_TOUCHED_ORDER.index)


def _touched_one(item: Item) -> str | None:
    if item.kind in _TOUCHED_KIND:
        return _TOUCHED_KIND[item.kind]
    if item.power in ("mains_on", "mains_standby"):
        return "mains_device_on"
    if item.power == "mains_off":
        return "mains_device_plugged_off"
    if item.power is None or item.kind in (None, "other"):
        return None
    return "unpowered_metal_on_casters" if item.kind in OBJECTS else "battery_or_unplugged"


def _from_checks(
    incident: Incident, verdicts: tuple[CheckVerdict, ...], touched: tuple[Item, ...],
    supply: str | None,
) -> Iterator[Observed]:  # fmt: skip
    """Findings from checks: one valid fail is enough, a pass must cover every item that needs it."""
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
        if each.state == "valid_fail" and each.kind is not None:
            value = f": {each.value.text}" if each.value else ""
            stage = " as left" if each.as_left else ""
            text = f"{each.kind.name} failed{stage}{value}"
            yield Defect(each.check.of, each.kind.id, text, each.value, each.limit)
    for item in incident.items:
        for condition in ("damaged", "hot", "wet"):
            if condition in item.condition:
                yield Defect(item.id, "condition", f"seen: {w.CONDITION[condition][1]}")


def _facts(
    incident: Incident, verdicts: tuple[CheckVerdict, ...], items: tuple[Item, ...]
) -> Iterator[str]:
    scene = incident.scene
    yes = {
        "live_contact": scene.live_contact, "heart_conductor": scene.heart_conductor,
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
    for condition, fact in (("hot", "hot"), ("wet", "wet_item"), ("damaged", "damaged"),
                            ("altered", "altered"), ("missing", "altered")):  # fmt: skip
        if any(condition in item.condition for item in items):
            yield fact
    if any(v.check.unit_disputed == "yes" for v in verdicts):
        yield "unit_disputed"
