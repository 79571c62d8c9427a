"""Which items an incident involves, what can reach them, and which checks they must pass."""

from collections.abc import Iterator

from triage.check_table import mandatory_checks
from triage.incident import Incident, Item
from triage.validity import MAINS_KINDS, MAINS_POWER, CheckVerdict, covers, find_item, is_wet

OBJECTS = frozenset({"cart", "stool", "bed", "table", "pole", "stand"})
"""Kinds of item that can float on wheels or feet."""
FIXED = frozenset({"furniture_fixed", "building_metal"})
"""Kinds of item that stay where they are."""
_CONNECTABLE = frozenset({"device_mains", "device_battery", "electrosurgical_unit",
                          "stimulator_defibrillator"})  # fmt: skip


def involved(incident: Incident) -> tuple[tuple[Item, ...], tuple[Item, ...]]:
    """Items touched, and what they hang on: cords, outlets, circuits, the device of a cord.

    Without any contact on record every item counts as touched: not knowing never shortens a list.
    Touching a patient brings in every device that may have been connected to the patient.
    """
    named = {each for contact in incident.contacts for each in contact.items}
    touched = tuple(i for i in incident.items if i.id in named or not named)
    ids = {item.id for item in touched}
    links = {i.id for i in incident.items if i.cord in ids} | set(
        _on_the_patient(incident, touched)
    )
    frontier = [i for i in incident.items if i.id in ids | links]
    while frontier:
        hung = {each for i in frontier for each in (i.cord, i.outlet, i.circuit)} - links - ids
        links |= {each for each in hung if each is not None}
        frontier = [i for i in incident.items if i.id in hung]
    return touched, tuple(i for i in incident.items if i.id in links - ids)


def _on_the_patient(incident: Incident, touched: tuple[Item, ...]) -> Iterator[str]:
    """Devices a touched patient may be connected to."""
    at_patient = any(i.kind == "person" for i in touched) or any(
        c.also_touching == "patient" for c in incident.contacts
    )
    if at_patient and incident.scene.patient_connected != "no":
        yield from (i.id for i in incident.items if i.kind in _CONNECTABLE)


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
