"""From the record to the circumstances of an electrical contact, and what voids a reading."""

from collections.abc import Iterator, Mapping
from functools import cache
from typing import Any

from triage.clock import before
from triage.conditions import Conditions
from triage.electrical_exposure import ElectricalStory
from triage.fields import table
from triage.incident import Contact, Incident, Item, Supply
from triage.physics.zones import heart_factor
from triage.quantity import parse
from triage.site import Site
from triage.tables import table as knowledge_table
from triage.validity import CheckVerdict, find_item

_MEDICAL = frozenset({"device_mains", "device_battery", "electrosurgical_unit", "bed", "table",
                      "stimulator_defibrillator", "pole", "stand", "instrument"})  # fmt: skip
_FLOOR_RESISTANCE = {"conductive": 1e6, "dissipative": 1e9}
_BOTH_LINES_NEAR = ("cord", "outlet", "adapter_strip")


def electrical_story(
    incident: Incident, found: Conditions, touched: tuple[Item, ...],
    verdicts: tuple[CheckVerdict, ...], contacts: tuple[Contact, ...] | None = None,
) -> ElectricalStory:  # fmt: skip
    """The circumstances of the contact, with the monitor's reading whether it binds or not.

    Args:
        incident: the record. found: its circumstances in SI.
        touched: the items touched.
        verdicts: judged checks; valid readings replace assumptions.
        contacts: the contacts it is about; all of the record where left out.
    """
    mine = incident.contacts if contacts is None else contacts
    current, insulation = incident.supply.current_reading, incident.supply.resistance_reading
    return ElectricalStory(
        found.voltage,
        found.frequency,
        any(item.kind in _MEDICAL or item.kind is None for item in touched) or not touched,
        _moisture(mine),
        _series(mine, found),
        current.value if current and not current.bound else None,
        insulation.value if insulation and not insulation.bound else None,
        valid_reading(verdicts, "two_metal_voltage"),
        # With the earth closed the reading says nothing about the same item with its earth open.
        valid_reading(tuple(v for v in verdicts if "earth_open" in v.check.state), "touch_current"),
        found.isolated is True and all(item.supply != "earthed" for item in touched),
        _area(mine),
    )


def lasted(incident: Incident) -> float | None:
    """How long the contact lasted, at the severe end of what was said [s]; None if not known.

    The longest of all statements; not known as soon as one that tells what was felt leaves it out.
    """
    told = [s.duration for s in incident.statements if s.duration or s.sensation or s.timing]
    known = _seconds()
    if not told or any(word not in known for word in told):
        return None
    return max(known[word] for word in told if word is not None)


def path_through(contacts: tuple[Contact, ...]) -> str | None:
    """Path through the body, the most dangerous of several; None if not known.

    One person with two contacts may have carried the current between them, so that is not known.
    """
    people = [each.person for each in contacts]
    if not contacts or len(set(people)) < len(people):
        return None
    paths = [_path(each) for each in contacts]
    return None if None in paths else max((p for p in paths if p), key=heart_factor)


def void_reasons(
    incident: Incident, site: Site, verdicts: tuple[CheckVerdict, ...] = ()
) -> list[str]:
    """Why the monitor's reading binds nothing at the time of the event.

    Args:
        incident: the record. site: gives the time zone.
        verdicts: judged checks; a failed alarm test takes every worth from a reading.
    """
    found = dict.fromkeys([
        *(f"{text} is unusual and its unit may be wrong" for text in _unusual(incident)),
        *_untimely(incident, site), *_another_source(incident), *_untrusted(verdicts),
    ])  # fmt: skip
    return list(found)


def _untimely(incident: Incident, site: Site) -> Iterator[str]:
    supply = incident.supply
    if supply.changed_since != "no":
        known = "was" if supply.changed_since == "yes" else "may have been"
        yield f"something {known} plugged or unplugged before it was read"
    if supply.read_at is None:
        yield "it is not known when it was read"
    elif before(supply.read_at, incident.event.at, site.zone) is True:
        yield "it was read before the event"


def _another_source(incident: Incident) -> Iterator[str]:
    """Answers by which the current did not come from one line of this supply."""
    for contact in incident.contacts:
        items = [i for i in (find_item(incident, each) for each in contact.items) if i is not None]
        if any(i.supply == "earthed" for i in items):
            yield "an item was on an earthed supply"
        if any(i.power == "battery" for i in items):
            yield "an item ran on its battery"
        if any(i.kind in _BOTH_LINES_NEAR for i in items):
            yield "both lines may have been touched at a cord, plug or outlet"
    if incident.supply.alarm == "yes":
        yield "the monitor was in alarm: a first fault was present"
    if "yes" in (incident.event.electrosurgery_active, incident.event.pulse_delivered):
        yield "the source may be high frequency or a pulse"


def _untrusted(verdicts: tuple[CheckVerdict, ...]) -> Iterator[str]:
    if any(v.kind and v.kind.id == "isolated_alarm_test" and v.state.endswith("_fail")
           and not v.as_left for v in verdicts):  # fmt: skip
        yield "the monitor failed its alarm test"


def open_void_questions(incident: Incident, verdicts: tuple[CheckVerdict, ...]) -> tuple[str, ...]:
    """Ids of reasons that would void a ceiling and that the record does not settle.

    Args:
        incident: the record. verdicts: its checks, judged.
    """
    items = [i for c in incident.contacts for i in map(incident_items(incident).get, c.items) if i]
    tested = incident.supply.monitor_tested is not None or any(
        v.kind and v.kind.id == "isolated_alarm_test" and v.state == "valid_pass" for v in verdicts
    )
    long_enough = any(s.duration in ("about_a_second", "longer") for s in incident.statements)
    settled = {
        "not_at_the_time": incident.supply.changed_since is not None,
        "line_to_line": bool(items),
        "first_fault": incident.supply.alarm is not None,
        "other_supply": bool(items) and all(i.supply or i.power == "none" for i in items),
        "own_source": bool(items) and all(i.power for i in items),
        "not_power_frequency": None not in (incident.event.electrosurgery_active,
                                            incident.event.pulse_delivered),
        "inductive_leakage": False,
        "too_short": long_enough,
        "untested_monitor": tested,
    }  # fmt: skip
    return tuple(each for each, known in settled.items() if not known)


def incident_items(incident: Incident) -> Mapping[str, Item]:
    """The items of a record by id."""
    return {item.id: item for item in incident.items}


def _unusual(incident: Incident) -> list[str]:
    """Monitor readings outside their plausible range."""
    rows, found = dict(table(Supply)), []
    for name in ("current_reading", "resistance_reading"):
        reading, usual = getattr(incident.supply, name), rows[name].plausible
        if reading and usual and not usual[0] <= reading.value <= usual[1]:
            found.append(reading.text)
    return found


def _moisture(contacts: tuple[Contact, ...]) -> str | None:
    """Dry, or the severe end for anything wet; not known stays None and is shown as severe."""
    found = {contact.moisture for contact in contacts}
    if found & {"damp", "wet"}:
        return "saltwater"
    return "dry" if found == {"dry"} else None


def _series(contacts: tuple[Contact, ...], found: Conditions) -> float | None:
    """Shoes and floor in the path only when it is known that nothing else was touched."""
    alone = contacts and all(c.also_touching == "nothing" and len(c.items) < 2 for c in contacts)
    if not alone or found.footwear is None or found.floor is None:
        return None
    if found.floor in _FLOOR_RESISTANCE and found.footwear in ("esd", "antistatic"):
        return _FLOOR_RESISTANCE[found.floor]
    return 1e8 if found.footwear in ("esd", "antistatic", "leather") else 1e10


def _area(contacts: tuple[Contact, ...]) -> str | None:
    """Small only where every contact was a dry bare fingertip; anything else is the large one."""
    small = bool(contacts) and all(
        c.moisture == "dry" and c.covering == "bare"
        and (c.touch == "point" or (c.touch is None and c.body_part == "fingertip"))
        for c in contacts
    )  # fmt: skip
    return "small" if small else None


def _path(contact: Contact) -> str | None:
    """Path of one contact; None where the second point is not known."""
    if len(contact.items) > 1 and contact.body_part != "both_hands":
        return None
    for row in knowledge_table("touch_sources")["paths"]:
        if contact.body_part in row["body_part"] and contact.also_touching in row["also_touching"]:
            return str(row["path"])
    return None


@cache
def _seconds() -> dict[str | None, float]:
    rows: list[dict[str, Any]] = knowledge_table("touch_sources")["durations"]
    return {row["id"]: parse(row["seconds"], "duration").value for row in rows}


def valid_reading(verdicts: tuple[CheckVerdict, ...], kind: str) -> float | None:
    """The largest valid reading of a kind of check that speaks about the event [SI].

    Args:
        verdicts: judged checks. kind: id of the check.
    """
    values = [
        v.value.value
        for v in verdicts
        if v.kind and v.kind.id == kind and v.state in ("valid_pass", "valid_fail")
        and not v.as_left and v.value and v.value.bound != "<" and v.value.value > 0
    ]  # fmt: skip
    return max(values, default=None)
