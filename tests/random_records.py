"""Random but valid record trees over the one table of fields: seeded, thousands in a minute.

`random_tree` draws from every word list; `clean_tree` builds a static truth with a complete, valid,
clean set of checks, the only kind of record on which the release gate can open; `spoil` changes a
few answers of a tree. Trees are plain dicts of text, as the record reader hands them on.
"""

import copy
import random
from collections.abc import Iterator
from typing import Any

from triage import words as w
from triage.assessment import assess
from triage.fields import Field, table
from triage.incident import (
    Contact,
    Event,
    Incident,
    Item,
    Person,
    Place,
    Scene,
    Statement,
    Supply,
    Surroundings,
)
from triage.record import Record, from_plain
from triage.site import no_site
from triage.strict_yaml import Plain

Tree = dict[str, Any]

EVENT = "2026-01-14 10:30"
CHECKED = "2026-01-14 13:00"
CALIBRATED = "2027-01-01"
PASSING = {  # kind: (method, supply of the check, value that passes, states beside the event's)
    "visual_inspection": ("full_length_look", None, None, ()),
    "monitor_log": ("log_exported", "isolated", "0.4 mA", ()),
    "metal_voltage_loaded": ("loaded_1kohm", None, "2 mV", ()),
    "earth_in_place": ("low_current_to_room_earth", None, "0.05 ohm", ()),
    "outlet_test": ("full_outlet_test", "earthed", "0.1 ohm", ()),
    "isolated_line_voltages": ("high_impedance_meter", "isolated", "110 V", ()),
    "isolated_alarm_test": ("resistor_200_ohm_per_volt", "isolated", "4.5 mA", ()),
    "earth_continuity": ("low_current_flexed", None, "0.08 ohm", ("flexed",)),
    "insulation_resistance": ("dc_500v", None, "200 Mohm", ("wet",)),
    "touch_current": ("direct_earthed", "earthed", "20 uA", ("wet",)),
    "applied_part_leakage": ("own_source_on_applied_part", None, "5 uA", ()),
    "pin_voltage": ("pins_after_one_second", None, "2 V", ()),
    "two_metal_voltage": ("loaded_1kohm", None, "2 mV", ()),
    "object_to_ground": ("dc_100v", None, "20 Gohm", ()),
    "object_voltage_after_rolling": ("contactless_meter", None, "6 kV", ("moved",)),
    "static_reenactment": ("contactless_meter", None, "8 kV", ()),
    "instrument_insulation": ("high_voltage_detector", None, None, ()),
    "electrosurgery_log": ("log_exported", None, None, ()),
    "pulse_log": ("log_exported", None, None, ()),
    "site_event_log": ("records_exported", None, None, ()),
}
FAILING = {
    "metal_voltage_loaded": "60 V", "earth_in_place": "900 ohm", "outlet_test": "50 ohm",
    "isolated_alarm_test": "40 mA", "earth_continuity": "9 ohm",
    "insulation_resistance": "20 kohm", "touch_current": "3 mA", "two_metal_voltage": "30 V",
    "applied_part_leakage": "9 mA",
}  # fmt: skip
"""A value that fails, for the kinds whose value decides."""
STATE = {"mains_on": "on", "mains_standby": "standby", "mains_off": "off"}
_MAIN_KINDS = tuple(k for k in w.ITEM_KIND if k not in ("cord", "outlet", "circuit"))


def record(tree: Tree) -> Record:
    """A tree as a record, by the reader of the program."""
    return from_plain(Plain("random", copy.deepcopy(tree)))


def identity(rng: random.Random) -> Tree:
    """The head of a record."""
    return {"schema": "1", "id": f"{rng.getrandbits(128):032x}"}


def answers(rng: random.Random, part: type, known: float, reassuring: float = 0.0) -> Tree:
    """Answers to the closed word lists of one part, each known with a probability.

    Args:
        reassuring: chance that an answer with an order is drawn from its reassuring words.
    """
    found: Tree = {}
    for name, row in table(part):
        if not row.words or rng.random() > known:
            continue
        words = list(row.words)
        calm = [each for each in words if (row.words[each][0] or 0) < 0]
        if calm and rng.random() < reassuring:
            words = calm
        if row.kind == "word":
            found[name] = rng.choice([*words, "unknown"])
        elif row.kind == "words":
            found[name] = sorted(set(rng.choices(words, k=rng.choice((1, 1, 2)))))
    return found


def random_tree(rng: random.Random) -> Tree:
    """A record drawn over the whole table of fields; nothing in it need make sense."""
    known, calm = rng.choice((0.3, 0.6, 0.9)), rng.choice((0.3, 0.7, 0.95))
    items = _items(rng, known, calm)
    tree = identity(rng) | {
        "place": answers(rng, Place, known),
        "persons": [{"id": f"p{n}"} | answers(rng, Person, known, calm)
                    for n in range(rng.choice((0, 1, 1, 2)))],
        "statements": [{"id": f"s{n}", "words": "it bit me"} | answers(rng, Statement, known, calm)
                       for n in range(rng.choice((0, 1, 1, 2, 3)))],
        "scene": answers(rng, Scene, known, calm),
        "items": items,
        "event": {"at": EVENT} | answers(rng, Event, known, calm),
        "surroundings": _surroundings(rng, known),
        "supply": _supply(rng, known, calm),
    }  # fmt: skip
    tree["contacts"] = _contacts(rng, items, known, calm)
    tree["checks"] = [random_check(rng, f"k{n}", items) for n in range(rng.choice((0, 2, 5, 9)))]
    tree["checks"] = [each for each in tree["checks"] if each]
    return tree


def _items(rng: random.Random, known: float, calm: float) -> list[Tree]:
    found: list[Tree] = []
    for n in range(rng.choice((0, 1, 1, 2, 2))):
        item = {"id": f"i{n}"} | answers(rng, Item, known, calm)
        item["kind"] = rng.choice(_MAIN_KINDS)
        if rng.random() < 0.4:
            found.append({"id": f"o{n}", "kind": "outlet"})
            item["outlet"] = f"o{n}"
        if rng.random() < 0.4:
            found.append({"id": f"c{n}", "kind": "cord"})
            item["cord"] = f"c{n}"
        found.append(item)
    return found


def _surroundings(rng: random.Random, known: float) -> Tree:
    found = answers(rng, Surroundings, known)
    if rng.random() < known:
        found |= {"humidity": f"{rng.randint(8, 85)} %RH", "humidity_at": EVENT}
    return found


def _supply(rng: random.Random, known: float, calm: float) -> Tree:
    found = answers(rng, Supply, known, calm)
    if rng.random() < 0.3:
        found |= {"current_reading": f"{rng.choice((0.02, 0.4, 3))} mA", "read_at": CHECKED}
    return found


def _contacts(rng: random.Random, items: list[Tree], known: float, calm: float) -> list[Tree]:
    ids = [item["id"] for item in items]
    found = []
    for n in range(rng.choice((0, 1, 1, 2))):
        contact = {"id": f"t{n}"} | answers(rng, Contact, known, calm)
        if ids:
            contact["items"] = rng.sample(ids, min(len(ids), rng.choice((1, 1, 2))))
        found.append(contact)
    return found


def random_check(rng: random.Random, name: str, items: list[Tree]) -> Tree:
    """One check of a random kind on a random item, valid more often than not."""
    if not items:
        return {}
    item = rng.choice(items)
    kind = rng.choice(list(PASSING))
    check = passing_check(name, kind, item)
    if rng.random() < 0.3 and kind in FAILING:
        check |= {"result": "fail", "value": FAILING[kind]}
    elif rng.random() < 0.15:
        check |= {"result": "fail"}
    if rng.random() < 0.2:
        check |= {"stage": rng.choice(("as_left", "after_disturbance", "unknown"))}
    if rng.random() < 0.15:
        check |= {"same_cord": rng.choice(("no", "unknown"))}
    if rng.random() < 0.1:
        check |= {"unit_disputed": rng.choice(("yes", "no"))}
    if rng.random() < 0.1:
        check |= {"disturbed": [rng.choice(list(w.CHANGES))]}
    if rng.random() < 0.05:
        check |= {"result": "not_practicable", "reason": "cannot be reached"}
    return check


def passing_check(name: str, kind: str, item: Tree, second: str | None = None) -> Tree:
    """A valid pass of one kind on one item."""
    method, supply, value, states = PASSING[kind]
    power = STATE.get(item.get("power", ""))
    found: Tree = {
        "id": name, "kind": kind, "of": item["id"], "method": method, "stage": "as_found",
        "same_cord": "yes", "instrument": "instrument 7", "calibration_due": CALIBRATED,
        "by": "biomedical technician", "at": CHECKED, "result": "pass",
        "state": sorted({*states, power or "on"}),
    }  # fmt: skip
    if kind == "touch_current" and item.get("supply") == "isolated":
        method, supply = "alternative", None
        found["method"] = method
    if supply:
        found["supply"] = supply
    if value:
        found["value"] = value
    if second and kind == "two_metal_voltage":
        found["second"] = second
    return found


STATIC_STORIES = ("plate", "rail", "cart", "device", "isolated_device")


def clean_tree(rng: random.Random, story: str, *, measured: bool = False) -> Tree:
    """A static truth with every deciding answer reassuring and every mandatory check a valid pass.

    Args:
        story: one of `STATIC_STORIES`.
        measured: static was measured too.
    """
    items = copy.deepcopy(_STORY_ITEMS[story])
    area, supply = _STORY_PLACE[story]
    dry = rng.choice(("18", "24", "30"))
    tree = identity(rng) | {
        "place": {"area": rng.choice(area)},
        "persons": [{"id": "p1", "who": "staff", "signs": ["none"], "breach": "no"}],
        "statements": [_calm_statement(rng)],
        "scene": {"live_contact": "no", "dependence": "none", "heart_conductor": "no",
                  "changes": ["none"], "patient_connected": "no", "flammable": ["none"]},
        "items": items,
        "contacts": [{"id": "t1", "person": "p1", "items": [items[0]["id"]],
                      "body_part": "fingertip", "touch": "point", "covering": "bare",
                      "moisture": "dry", "also_touching": "nothing"}],
        "event": {"at": EVENT, "activity": _STORY_ACTIVITY[story], "steps": "40",
                  "pause": "0.5 s", "electrosurgery_active": "no", "pulse_delivered": "no",
                  "line_event": "no", "pins_touched": "no"},
        "surroundings": {"humidity": f"{dry} %RH", "humidity_where": "at_place",
                         "humidity_at": EVENT, "floor": rng.choice(("vinyl", "resin")),
                         "footwear": rng.choice(("ordinary", "foam_clog"))},
        "supply": {"kind": supply, "voltage": "230 V", "frequency": "50 Hz", "trip": "no"},
    }  # fmt: skip
    if supply == "isolated":
        tree["supply"] |= {"alarm": "no", "alarm_source": "log", "changed_since": "no"}
    tree["checks"] = complete_checks(tree)
    if measured:
        tree["checks"] += static_checks(tree, story)
    return tree


def _calm_statement(rng: random.Random) -> Tree:
    return {
        "id": "s1", "by": "nurse", "words": "a snap", "sensation": "snap", "duration": "instant",
        "timing": rng.choice(("in_gap", "first_touch")), "repeat_at_once": "no",
        "others_felt": "no", "crack_heard": rng.choice(("yes", "unknown")),
    }  # fmt: skip


_STORY_ITEMS: dict[str, list[Tree]] = {
    "plate": [{"id": "plate", "kind": "furniture_fixed", "power": "none"}],
    "rail": [{"id": "rail", "kind": "building_metal", "power": "none"}],
    "cart": [{"id": "cart", "kind": "cart", "power": "none", "casters": "rubber"}],
    "device": [
        {"id": "pump", "kind": "device_mains", "power": "mains_on", "supply": "earthed",
         "equipment_class": "I", "cord": "cord", "outlet": "outlet", "condition": ["intact"]},
        {"id": "cord", "kind": "cord", "condition": ["intact"]},
        {"id": "outlet", "kind": "outlet", "supply": "earthed", "condition": ["intact"]},
    ],
    "isolated_device": [
        {"id": "monitor", "kind": "device_mains", "power": "mains_on", "supply": "isolated",
         "equipment_class": "I", "outlet": "socket", "condition": ["intact"]},
        {"id": "socket", "kind": "outlet", "supply": "isolated"},
    ],
}  # fmt: skip
_STORY_PLACE = {
    "plate": (("ward", "corridor", "clinic"), "earthed"),
    "rail": (("ward", "nicu"), "earthed"),
    "cart": (("ward", "nicu"), "earthed"),
    "device": (("ward", "clinic"), "earthed"),
    "isolated_device": (("operating_room", "icu"), "isolated"),
}
_STORY_ACTIVITY = {
    "plate": "walking", "rail": "rising_undressing", "cart": "pushing_cart",
    "device": "walking", "isolated_device": "walking",
}  # fmt: skip


def complete_checks(tree: Tree) -> list[Tree]:
    """A valid pass of every mandatory check that the program misses on any item."""
    found = assess(record(tree | {"checks": []}), no_site())
    trees = {item["id"]: item for item in tree["items"]}
    named = [(kind, trees[each.item]) for each in found.items for kind in each.missing]
    return [passing_check(f"k{n}", kind, item) for n, (kind, item) in enumerate(named)]


def static_checks(tree: Tree, story: str) -> list[Tree]:
    """Static measured: the object after rolling, or the act again with a meter."""
    item = tree["items"][0]
    if story == "cart":
        return [passing_check("m1", "object_voltage_after_rolling", item)]
    return [passing_check("m1", "static_reenactment", item)]


def spoil(rng: random.Random, tree: Tree, times: int) -> Tree:
    """A copy with some answers drawn anew or left out."""
    found = copy.deepcopy(tree)
    places = list(answer_places(found))
    for _ in range(times):
        holder, name, row = rng.choice(places)
        if row.kind == "words":
            holder[name] = sorted(set(rng.choices(list(row.words), k=1)))
        else:
            holder[name] = rng.choice([*row.words, "unknown"])
    return found


def answer_places(tree: Tree) -> Iterator[tuple[Tree, str, Field]]:
    """Every place of a tree that holds, or could hold, a word of a closed list."""
    yield from _places(tree, Incident)


def _places(tree: Tree, part: type) -> Iterator[tuple[Tree, str, Field]]:
    for name, row in table(part):
        if row.kind == "part" and row.of:
            yield from _places(tree.setdefault(name, {}), row.of)
        elif row.kind == "parts" and row.of:
            for each in tree.get(name, []):
                yield from _places(each, row.of)
        elif row.words and name not in _NOT_ANSWERS:
            yield tree, name, row


_NOT_ANSWERS = frozenset({"how_confirmed", "reportable", "kind"})
