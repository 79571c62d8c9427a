"""From the record to the circumstances of an electrical contact, and what voids a reading."""

from triage.clock import before
from triage.conditions import Conditions
from triage.electrical_exposure import ElectricalStory
from triage.fields import table
from triage.incident import Incident, Item, Supply
from triage.site import Site
from triage.validity import CheckVerdict, find_item

_MEDICAL = frozenset({"device_mains", "device_battery", "electrosurgical_unit", "bed", "table",
                      "stimulator_defibrillator", "pole", "stand", "instrument"})  # fmt: skip
_FLOOR_RESISTANCE = {"conductive": 1e6, "dissipative": 1e9}


def electrical_story(
    incident: Incident, found: Conditions, touched: tuple[Item, ...],
    verdicts: tuple[CheckVerdict, ...],
) -> ElectricalStory:  # fmt: skip
    """The circumstances of the contact, with the monitor's reading whether it binds or not."""
    current, insulation = incident.supply.current_reading, incident.supply.resistance_reading
    return ElectricalStory(
        found.voltage,
        found.frequency,
        any(item.kind in _MEDICAL or item.kind is None for item in touched) or not touched,
        _moisture(incident),
        _series(incident, found),
        current.value if current and not current.bound else None,
        insulation.value if insulation and not insulation.bound else None,
        _valid_reading(verdicts, "two_metal_voltage"),
        # With the earth closed the reading says nothing about the same item with its earth open.
        _valid_reading(tuple(v for v in verdicts if "earth_open" in v.check.state),
                       "touch_current"),
        found.isolated is True and all(item.supply != "earthed" for item in touched),
    )  # fmt: skip


def void_reasons(incident: Incident, site: Site) -> list[str]:
    """Why the monitor's reading binds nothing at the time of the event."""
    supply, reasons = incident.supply, []
    reasons += [f"{text} is unusual and its unit may be wrong" for text in _unusual(incident)]
    if supply.changed_since != "no":
        known = "was" if supply.changed_since == "yes" else "may have been"
        reasons.append(f"something {known} plugged or unplugged before it was read")
    if supply.read_at is None:
        reasons.append("it is not known when it was read")
    elif before(supply.read_at, incident.event.at, site.zone) is True:
        reasons.append("it was read before the event")
    for contact in incident.contacts:
        items = [find_item(incident, each) for each in contact.items]
        if any(i is not None and i.supply == "earthed" for i in items):
            reasons.append("an item was on an earthed supply")
        if any(i is not None and i.kind in ("cord", "outlet", "adapter_strip") for i in items):
            reasons.append("both lines may have been touched at a cord, plug or outlet")
    return reasons


def _unusual(incident: Incident) -> list[str]:
    """Monitor readings outside their plausible range."""
    rows, found = dict(table(Supply)), []
    for name in ("current_reading", "resistance_reading"):
        reading, usual = getattr(incident.supply, name), rows[name].plausible
        if reading and usual and not usual[0] <= reading.value <= usual[1]:
            found.append(reading.text)
    return found


def _moisture(incident: Incident) -> str | None:
    """Dry, or the severe end for anything wet; not known stays None and is shown as severe."""
    found = {contact.moisture for contact in incident.contacts}
    if found & {"damp", "wet"}:
        return "saltwater"
    return "dry" if found == {"dry"} else None


def _series(incident: Incident, found: Conditions) -> float | None:
    """Shoes and floor in the path only when it is known that nothing else was touched."""
    contacts = incident.contacts
    alone = contacts and all(c.also_touching == "nothing" and len(c.items) < 2 for c in contacts)
    if not alone or found.footwear is None or found.floor is None:
        return None
    if found.floor in _FLOOR_RESISTANCE and found.footwear in ("esd", "antistatic"):
        return _FLOOR_RESISTANCE[found.floor]
    return 1e8 if found.footwear in ("esd", "antistatic", "leather") else 1e10


def _valid_reading(verdicts: tuple[CheckVerdict, ...], kind: str) -> float | None:
    values = [
        v.value.value
        for v in verdicts
        if v.kind and v.kind.id == kind and v.state in ("valid_pass", "valid_fail")
        and not v.as_left and v.value and v.value.bound != "<" and v.value.value > 0
    ]  # fmt: skip
    return max(values, default=None)
