"""The circumstances of one incident in SI: air, floor, shoes, wheels, supply, each with its doubt.

The record comes first, the room of the site file second. What neither knows stays None.
"""

from dataclasses import dataclass

from triage.clock import hours_between
from triage.errors import OutOfRange
from triage.incident import Incident, Item
from triage.involvement import OBJECTS, is_powered
from triage.physics.humidity import Humidity, transfer_doubt, transferred
from triage.quantity import parse
from triage.site import Site
from triage.tables import table

NEAR_SD, FAR_SD = 0.03, 0.08
"""Doubt of a humidity read in the room within the hour, and of any other (fraction, judgement)."""
_SENSOR_SDS = (0.02, 0.5, 1.0)  # humidity as a fraction, temperature at sensor, at place [K]
_INSULATING_CASTERS = frozenset({"rubber", "nylon"})
_LIES_ON = frozenset({"bed", "table", "person"})


@dataclass(frozen=True, slots=True)
class Touch:
    """What a static discharge needs to know of act, bodies and contact; hashable.

    Args:
        act: quick act, a row of the table of acts.
        surface: what was risen from or taken off, a row of seats or garments, if known.
        pushing: a cart was pushed and something else was touched.
        lying: somebody or something lying on what was touched was slid.
        posture: row of bodies where it does not follow from the shoes.
        farads: capacitance of the touched object [F], None for that of its kind.
        farads_from: measured or geometry.
        floats: the touched object has no path to earth within the time of a spark.
        earthed: the person touched earthed metal or a wet floor at the same time.
        held_metal: the spark went to metal held in the hand.
        plastic: a plastic sheet, film or screen was there to be charged.
    """

    act: str = "rise"
    surface: str | None = None
    pushing: bool = False
    lying: bool = False
    posture: str | None = None
    farads: float | None = None
    farads_from: str = ""
    floats: bool | None = None
    earthed: bool = False
    held_metal: bool = False
    plastic: bool = False


@dataclass(frozen=True, slots=True)
class Conditions:
    """What the physics needs; None is not known.

    Args:
        humidity: at the place, as a fraction with its doubt.
        humidity_text: how it was come by, in words.
        floor, footwear, casters: words of the table of materials.
        steps: walked before the touch. pause: from the act to the touch [s].
        object_kind: kind of object on wheels that was touched.
        voltage, frequency: of the supply [V, Hz]. isolated: True, False or not known.
        defaults: which of these came from the site file.
        touch: act, bodies and contact of the discharge.
    """

    humidity: Humidity | None
    humidity_text: str
    floor: str | None
    footwear: str | None
    casters: str | None
    steps: int | None
    pause: float | None
    object_kind: str | None
    voltage: float
    voltage_known: bool
    frequency: float
    isolated: bool | None
    defaults: tuple[str, ...]
    touch: Touch = Touch()


def resolve(incident: Incident, site: Site, touched: tuple[Item, ...]) -> Conditions:
    """Circumstances from record and site file."""
    room = site.room(incident.place.room)
    surroundings, defaults = incident.surroundings, []
    found: dict[str, str | None] = {}
    for name, said in (("floor", surroundings.floor), ("footwear", surroundings.footwear),
                       ("casters", _casters(touched))):  # fmt: skip
        usual = getattr(room, name) if room else None
        found[name] = said or usual
        if said is None and usual is not None:
            defaults.append(name)
    humidity, text = _humidity(incident, site)
    voltage, known = _supply_value(incident, site, "voltage")
    frequency, _ = _supply_value(incident, site, "frequency")
    supply = supply_kind(incident, site)
    rolling = min((i.kind for i in touched if i.kind in OBJECTS), default=None)
    pause = incident.event.pause
    return Conditions(
        humidity, text, found["floor"], found["footwear"], found["casters"],
        incident.event.steps, pause.value if pause else None, rolling,
        voltage, known, frequency, None if supply is None else supply == "isolated",
        tuple(defaults), touch_of(incident, touched),
    )  # fmt: skip


def touch_of(incident: Incident, touched: tuple[Item, ...]) -> Touch:
    """Act, bodies and contact of the discharge.

    Args:
        incident: the record.
        touched: what was touched; with no contact on record everything.
    """
    contacts, activity = incident.contacts, incident.event.activity
    objects = [i for i in touched if i.kind in OBJECTS]
    lying = any(i.kind in _LIES_ON for i in touched) or any(
        c.also_touching == "patient" for c in contacts
    )
    farads, source = _capacitance(objects)
    patients = bool(incident.persons) and all(p.who == "patient" for p in incident.persons)
    act, surface = _act(incident, lying)
    return Touch(
        act=act,
        surface=surface,
        pushing=activity == "pushing_cart" and bool(contacts) and not objects,
        lying=lying,
        posture="seated" if patients and activity not in ("walking", "pushing_cart") else None,
        farads=farads,
        farads_from=source,
        floats=_floats(objects) if len(objects) == len(touched) else None,
        earthed=any(c.also_touching in ("earthed_metal", "wet_floor") for c in contacts),
        held_metal=bool(contacts) and all(c.covering == "held_metal" for c in contacts),
        plastic=any(i.kind == "plastic_item" for i in incident.items),
    )


def _act(incident: Incident, lying: bool) -> tuple[str, str | None]:
    """The quick act and its surface; rising charges more and stands for both unless only a
    garment is named."""
    if incident.event.activity == "handling_plastic":
        return ("slide_patient" if lying else "wipe_plastic"), None
    seat, garment = incident.surroundings.seat, incident.surroundings.garment
    return ("garment_off", garment) if garment and not seat else ("rise", seat)


def _capacitance(objects: list[Item]) -> tuple[float | None, str]:
    """Capacitance of the one object touched: measured, or from its size."""
    if len(objects) != 1:
        return None, ""
    only = objects[0]
    if only.capacitance and not only.capacitance.bound:
        return only.capacitance.value, "measured"
    sizes = [each for each in (only.length, only.width, only.clearance) if each and not each.bound]
    if len(sizes) < 3:
        return None, ""
    from triage.physics.capacitance import plate_over_floor  # rare; start-up is paid by all

    length, width, clearance = (each.value for each in sizes)
    return plate_over_floor(length * width, clearance), "geometry"


def _floats(objects: list[Item]) -> bool | None:
    """Whether what was touched stands on insulating wheels without any supply."""
    if not objects or any(is_powered(i) or i.casters is None for i in objects):
        return None
    return all(i.casters in _INSULATING_CASTERS for i in objects)


def supply_kind(incident: Incident, site: Site) -> str | None:
    """Earthed, isolated or not known."""
    room = site.room(incident.place.room)
    return incident.supply.kind or (room.supply if room else None)


def care_area(incident: Incident, site: Site) -> str | None:
    """Kind of care area, from record or site file."""
    room = site.room(incident.place.room)
    return incident.place.area or (room.area if room else None)


def _casters(touched: tuple[Item, ...]) -> str | None:
    """The wheels of what was touched; of several objects that differ none are known."""
    found = {i.casters for i in touched if i.kind in OBJECTS}
    return found.pop() if len(found) == 1 else None


def assumed(name: str) -> float:
    """A single assumed value of the table of touch sources, in SI."""
    row = next(each for each in table("touch_sources")["sources"] if each["id"] == name)
    value = row["value"]
    return float(value) if row["kind"] == "share" else parse(str(value), row["kind"]).value


def _supply_value(incident: Incident, site: Site, name: str) -> tuple[float, bool]:
    room = site.room(incident.place.room)
    said = getattr(incident.supply, name) or (getattr(room, name) if room else None)
    return (said.value, True) if said else (assumed(f"nominal_{name}"), False)


def _humidity(incident: Incident, site: Site) -> tuple[Humidity | None, str]:
    """Humidity at the place: moved by temperature, doubted by distance in place and time."""
    s = incident.surroundings
    if s.humidity is None or s.humidity.bound:
        return None, "humidity at the place is not known"
    fraction = s.humidity.value / 100
    text = f"{s.humidity.text} read"
    sensor, place = s.temperature_at_sensor, s.temperature_at_place
    sd = _doubt(incident, site)
    if sensor and place and s.humidity_where != "at_place":
        try:
            fraction = transferred(fraction, sensor.value, place.value)
            moved = transfer_doubt(fraction, place.value, _SENSOR_SDS)
        except OutOfRange as error:
            return None, f"humidity cannot be moved to the place: {error}"
        sd = max(sd, moved)
        text += f", moved from {sensor.text} to {place.text}: {fraction * 100:.0f} %"
    if not 0 < fraction <= 1:
        return None, f"{text}, which is beyond 0 to 100 %"
    return Humidity(fraction, sd, "measured"), f"{text}, doubt {sd * 100:.0f} points"


def _doubt(incident: Incident, site: Site) -> float:
    """Near in place and within the hour, or far; not knowing counts as far."""
    s = incident.surroundings
    hours = hours_between(s.humidity_at, incident.event.at, site.zone)
    near = s.humidity_where in ("at_place", "same_room") and hours is not None and hours <= 1.1
    return NEAR_SD if near else FAR_SD
