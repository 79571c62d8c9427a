"""Findings that somebody told or saw: from statements, items, contacts and the event."""

from collections.abc import Iterator
from dataclasses import dataclass

from triage import words as w
from triage.fields import WordList
from triage.incident import Contact, Incident, Item, Statement
from triage.involvement import OBJECTS, involved
from triage.knowledge import Finding, knowledge
from triage.validity import is_wet

_MEASURED_SOURCES = frozenset({"log", "instrument"})
_CONDUCTING = frozenset({"earthed_metal", "another_device", "patient", "wet_floor"})
_LASTING = frozenset({"about_a_second", "longer"})


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


def told_findings(
    incident: Incident, touched: tuple[Item, ...], supply: str | None
) -> Iterator[tuple[str, Observed]]:
    """Findings from answers, by finding id.

    Args:
        incident: the record. touched: items at the contact. supply: of the place.
    """
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
    yield "liquid_in_item", _seen_on(touched, "wet"), "seen"
    yield "live_part_exposed", _live_part(touched), "seen"
    yield "visible_damage", _damage(incident, touched), "seen"
    yield "hot_or_smoking", _hot(incident, touched), "seen"
    yield "lost_consciousness", _unconscious(incident), "seen"
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


def disagreements(statements: tuple[Statement, ...]) -> dict[str, dict[str, str]]:
    """Finding id to statement id to answer, where statements differ."""
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


def merge_driven(told: dict[str, Observed], statements: tuple[Statement, ...]) -> None:
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


def _seen_on(touched: tuple[Item, ...], condition: str) -> str | None:
    """Whether a state was seen on an item touched; all of them looked at without it means no."""
    if any(condition in item.condition for item in touched):
        return "yes"
    looked = all({"intact", "damaged"} & set(item.condition) for item in touched)
    return "no" if touched and looked else None


def _live_part(touched: tuple[Item, ...]) -> str | None:
    """Whether a bare live part was seen; damage seen does not mean that no part lay bare."""
    if any("live_part" in item.condition for item in touched):
        return "yes"
    return "no" if touched and all("intact" in item.condition for item in touched) else None


def _damage(incident: Incident, touched: tuple[Item, ...]) -> str | None:
    """Damage seen on what was touched or on its cord or outlet, unless a bare part says the same.

    Only a valid inspection may say that there is none.
    """
    _, linked = involved(incident)
    if _live_part(touched) == "yes":
        return None
    return "yes" if any("damaged" in item.condition for item in touched + linked) else None


def _hot(incident: Incident, touched: tuple[Item, ...]) -> str | None:
    """Heat or smoke on anything involved; nobody notes that there was none."""
    _, linked = involved(incident)
    return "yes" if any("hot" in item.condition for item in touched + linked) else None


def _unconscious(incident: Incident) -> str | None:
    signs = (sign for person in incident.persons for sign in person.signs)
    return "yes" if "lost_consciousness" in signs else None


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
