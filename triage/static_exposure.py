"""What static charge was physically possible: voltage, charge, energy, P(felt) for each cause."""

from dataclasses import dataclass, replace
from functools import cache, lru_cache

from triage.bounds import Probability, Reading
from triage.conditions import Conditions, Touch
from triage.errors import InvalidValue
from triage.estimate import Estimate, product
from triage.frozen import frozen
from triage.materials import load, row_of
from triage.physics.charging import Charged, in_series, leaking, moving, quick_act
from triage.physics.discharge import in_series as shared_capacitance
from triage.physics.discharge import to_floating
from triage.physics.humidity import Humidity
from triage.physics.sensation import perceived
from triage.static_readings import beyond, measured, taken

STATIC_CAUSES = ("person_walking", "person_rising", "charged_object")
"""Static causes whose model weighs in the ranking; induction has one for print only."""
_PLATEAU_STEPS = 40
_WITH_CONTACT = 4  # nodes for each of three directions on a good path: within 1 % of 6 nodes
_EARTHING_FLOORS = ("conductive", "dissipative")
_EARTHING_SHOES = ("esd", "antistatic")
_EARTHING_WHEELS = ("conductive", "antistatic")


@frozen
class Measured:
    """Static readings that replace assumptions; None where there is none.

    Args:
        person_voltage: body voltage when the act was re-enacted [V].
        object_voltage: of the object after rolling [V].
        person_resistance: person to earth, as worn [ohm].
        object_resistance: object to earth [ohm].
        floor, footwear, casters: of one part of that path alone [ohm].
    """

    person_voltage: Reading | None = None
    object_voltage: Reading | None = None
    person_resistance: Reading | None = None
    object_resistance: Reading | None = None
    floor: Reading | None = None
    footwear: Reading | None = None
    casters: Reading | None = None


NOTHING_READ = Measured()
"""No static reading on record."""


@dataclass(frozen=True, slots=True)
class StaticStory:
    """The conditions of one static cause, hashable so that equal ones are computed once.

    Args:
        cause: person_walking, person_rising, charged_object or induction.
        floor, footwear, casters: rows of the table of materials.
        humidity: at the place.
        steps: walked or rolled; None for long enough to reach the plateau.
        pause: from the act to the touch [s].
        object_kind: kind of object on wheels that was touched, None without one.
        touch: act, bodies and contact.
        readings: measurements that replace assumptions.
    """

    cause: str
    floor: str
    footwear: str
    casters: str
    humidity: Humidity
    steps: int | None
    pause: float
    object_kind: str | None
    touch: Touch
    readings: Measured

    @property
    def of_object(self) -> bool:
        """Whether an object carried the charge rather than a person."""
        return self.cause == "charged_object"

    @property
    def wiped(self) -> bool:
        """Whether the charge sat on an insulating surface, which gives it up only in part."""
        return self.cause == "person_rising" and self.touch.act == "wipe_plastic"


@frozen
class StaticExposure:
    """One static cause under one set of conditions.

    Args:
        told: the conditions.
        body: that was charged.
        other: capacitance of the floating body opposite [F]; None for a discharge to earth.
        charge: that passes in the spark [C].
        felt: probability that the spark is felt.
    """

    told: StaticStory
    body: Charged
    other: Estimate | None
    charge: Estimate
    felt: Probability

    @property
    def voltage(self) -> Estimate:
        """Before the touch, both feet down [V]; of the surface for a wiped plastic."""
        return self.body.voltage

    @property
    def capacitance(self) -> Estimate:
        """Of the charged body to earth [F]."""
        return self.body.capacitance

    @property
    def peak(self) -> Estimate:
        """Largest voltage, one foot lifted [V]."""
        return self.body.peak

    @property
    def resistance(self) -> Estimate | None:
        """Of the charged body to earth [ohm]; None for an insulating surface."""
        return self.body.resistance

    @property
    def energy(self) -> Estimate:
        """Set free in the spark and the skin [J]."""
        return product("J", self.charge, self.voltage).scaled(0.5)

    @property
    def remaining(self) -> Estimate | None:
        """Voltage that both bodies keep after the spark [V]; None where all of it is gone."""
        return None if self.other is None else to_floating(self.body, self.other).remaining

    @property
    def threshold(self) -> Estimate:
        """Charge at which such a spark is felt [C]."""
        return _threshold(self.told.touch.held_metal)


def story(
    cause: str, conditions: Conditions, readings: Measured, defaults: Conditions
) -> StaticStory:
    """The story of one cause; what is not known is taken from `defaults`.

    Args:
        cause: one of `STATIC_CAUSES`, or induction.
        conditions: of the incident.
        readings: measurements that replace assumptions.
        defaults: reference conditions, or the widest ones for print.
    """
    humidity = conditions.humidity or defaults.humidity
    if humidity is None:
        raise InvalidValue("the default conditions must name a humidity")
    told = StaticStory(
        cause,
        conditions.floor or defaults.floor or "unknown",
        conditions.footwear or defaults.footwear or "unknown",
        conditions.casters or defaults.casters or "unknown",
        humidity,
        conditions.steps if conditions.steps is not None else defaults.steps,
        conditions.pause if conditions.pause is not None else defaults.pause or 0.0,
        conditions.object_kind,
        conditions.touch,
        readings,
    )
    if conditions.pause is None and cause != "person_rising" and _earthing(told):
        # Walking charges to tens of volts there, never felt; with no pause they stay readable.
        return replace(told, pause=0.0)
    return told


@lru_cache(maxsize=4096)
def static_exposure(told: StaticStory, order: int | None = None) -> StaticExposure:
    """Voltage, charge, energy and P(felt) of one story.

    Args:
        told: the conditions.
        order: nodes for each direction a formula resolves; 5 for many stories (P(felt) is then
            within 1e-3), None for one.

    Raises:
        OutOfRange: an input outside what the formulas were published for.
        InvalidValue: a word the table of materials does not know.
    """
    body, other = _body(told, order), _opposite(told)
    charge = body.charge if other is None else _passing(body, other)
    felt = perceived(charge, _threshold(told.touch.held_metal))
    return StaticExposure(told, body, other, charge, felt)


@cache
def _threshold(held_metal: bool) -> Estimate:
    return load().threshold("felt", held_metal=held_metal)


def _passing(body: Charged, other: Estimate) -> Estimate:
    """Charge that passes between two floating bodies.

    The capacitance they share is taken as lognormal here: P(felt) moves by 2e-5, and the grid
    does not grow.
    """
    shared = shared_capacitance(body.capacitance, other).flattened()
    return product("C", body.voltage, shared)


def _body(told: StaticStory, order: int | None) -> Charged:
    """The charged body: read where there is a reading, modelled otherwise."""
    readings = told.readings
    reading = readings.object_voltage if told.of_object else readings.person_voltage
    if told.cause == "induction":
        return _induced(told)
    if reading is None:
        return _modelled(told, order)
    like = {"source": "measured_voltage", "row": "voltage", "what": "voltage after the same act"}
    if reading.bound:
        modelled = _modelled(told, order)
        read = beyond(reading, modelled.voltage, **like)
        return Charged(read, modelled.capacitance, modelled.resistance)
    read = measured(reading.value, "V", **like)
    if told.wiped:
        return _surface(read, told)
    return Charged(read, _own(told), in_series(*_path(told)))


def _modelled(told: StaticStory, order: int | None) -> Charged:
    m = load()
    if told.cause == "person_rising":
        return _acted(told)
    if told.of_object:
        mover = m.roller(told.floor, _wheels(told), told.humidity, body="cart")
    else:
        mover = m.walker(told.floor, told.footwear, told.humidity)
    mover = replace(mover, capacitance=_own(told))
    if told.readings != NOTHING_READ:
        mover = replace(mover, resistances=_path(told))
    if mover.contact is not None and order is None:
        order = _WITH_CONTACT
    return moving(mover, seconds=_seconds(told), pause=told.pause, order=order)


def _acted(told: StaticStory) -> Charged:
    """A body charged by rising, undressing or sliding, or an insulating surface by wiping."""
    m, act = load(), told.touch.act
    if told.wiped:
        return _surface(m.act_voltage(act, told.humidity), told)
    named = f"{act}_earthing" if _earthing(told) and f"{act}_earthing" in m.acts else act
    charged = quick_act(
        m.act_charge(named, told.humidity, surface=told.touch.surface),
        _own(told),
        doubt=m.doubt(),
        corona_limit=m.walking["corona_limit"].median,
    )
    return leaking(charged, resistance=in_series(*_path(told)), seconds=told.pause)


def _earthing(told: StaticStory) -> bool:
    """Whether floor and shoes, or floor and wheels, are both made to lead charge away."""
    shod = told.casters in _EARTHING_WHEELS if told.of_object else told.footwear in _EARTHING_SHOES
    return told.floor in _EARTHING_FLOORS and shod


def _surface(voltage: Estimate, told: StaticStory) -> Charged:
    """An insulating surface: its voltage, and the charge that one spark takes from it."""
    charge = load().act_charge(told.touch.act, told.humidity)
    return Charged(voltage, charge.over(voltage, "F"))


def _induced(told: StaticStory) -> Charged:
    """A person who floats beside a charged plastic."""
    from triage.physics.induction import beside  # rare; start-up is paid by every command

    m = load()
    source = Charged(m.act_voltage("wipe_plastic", told.humidity).times(m.doubt(), "V"),
                     m.coupling())  # fmt: skip
    induced = beside(source, coupling=m.coupling(), own=_own(told))
    return Charged(induced.voltage, induced.capacitance, in_series(*_path(told)))


def _own(told: StaticStory) -> Estimate:
    """Capacitance of the charged body to earth [F]."""
    m, touch = load(), told.touch
    if told.of_object:
        return m.capacitance("person_with_cart") if touch.pushing else _object(told)
    if told.cause == "person_rising" and touch.act == "slide_patient":
        row = m.bodies["bed_with_patient"]
        return row.the("capacitance").estimate("object_capacitance", row.text)
    return _person(told)


def _person(told: StaticStory) -> Estimate:
    m = load()
    return m.capacitance(told.touch.posture or row_of(m.footwear, told.footwear).body)


def _object(told: StaticStory) -> Estimate:
    """Capacitance of the object on wheels: measured, from its size, or of its kind [F]."""
    touch = told.touch
    if touch.farads is None:
        kind = told.object_kind or "cart"
        return load().capacitance(kind if kind in load().objects else "cart")
    row = "capacitance" if touch.farads_from == "measured" else "geometry"
    found = measured(touch.farads, "F", source="object_capacitance", row=row, what="the object")
    if row == "geometry":
        basis = {n: replace(b, kind="derived", note="from its length, width and clearance")
                 for n, b in found.basis.items()}  # fmt: skip
        return replace(found, basis=basis)
    return found


def _opposite(told: StaticStory) -> Estimate | None:
    """Capacitance of what floats opposite the charged body [F]; None for a discharge to earth.

    A spark is over before shoes or wheels lead anything away, so a person who touches a charged
    object floats unless a hand holds earthed metal.
    """
    if told.of_object:
        return None if told.touch.pushing or told.touch.earthed else _person(told)
    if told.cause == "person_rising" and told.touch.act not in ("rise", "garment_off"):
        takes = told.touch.act == "slide_patient" and told.touch.lying and not told.touch.earthed
        return load().capacitance("standing") if takes else None
    return _object(told) if _object_floats(told) else None


def _object_floats(told: StaticStory) -> bool:
    """Whether the object touched keeps its charge for longer than a spark; a reading decides."""
    read = told.readings.object_resistance
    if read is None or told.object_kind is None or told.touch.floats is None:
        return told.touch.floats is True
    long = read.value * _object(told).median > taken("floating", "duration")
    return long and read.bound != "<"


def _path(told: StaticStory) -> tuple[Estimate, ...]:
    """Resistances from the charged body to earth [ohm], readings before assumptions."""
    readings = told.readings
    second, word = ("casters", _wheels(told)) if told.of_object else ("footwear", told.footwear)
    whole = readings.object_resistance if told.of_object else readings.person_resistance
    if whole is not None:
        return (_whole(told, whole, second, word),)
    return (
        _part(told, readings.floor, "floors", told.floor),
        _part(told, getattr(readings, second), second, word),
    )


def _part(told: StaticStory, reading: Reading | None, table: str, word: str) -> Estimate:
    """Resistance of floor, shoes or wheels."""
    m, air = load(), told.humidity
    if reading is None:
        return m.resistance(table, word, air)
    name = {"floors": "floor", "footwear": "footwear", "casters": "caster"}[table]
    like = {"source": f"{name}_resistance", "row": "resistance", "what": f"{name} resistance"}
    if not reading.bound:
        return measured(reading.value, "ohm", **like)
    priors = (m.resistance(table, word, air), m.resistance(table, "unknown", air))
    return beyond(reading, *priors, **like)


def _whole(told: StaticStory, reading: Reading, second: str, word: str) -> Estimate:
    """Resistance of the whole path to earth, read as one."""
    m, air = load(), told.humidity
    what = "object to earth" if told.of_object else "person, shoes and floor to earth"
    like = {"source": "resistance_to_earth", "row": "resistance", "what": what}
    if not reading.bound:
        return measured(reading.value, "ohm", **like)
    priors = [
        in_series(m.resistance("floors", floor, air), m.resistance(second, other, air))
        for floor, other in ((told.floor, word), ("unknown", "unknown"))
    ]
    return beyond(reading, *priors, **like)


def _wheels(told: StaticStory) -> str:
    return "unknown" if told.casters == "none" else told.casters


def _seconds(told: StaticStory) -> float | None:
    """Time of walking or rolling; None stands for long enough to reach the plateau."""
    if told.steps is None or told.steps >= _PLATEAU_STEPS:
        return None
    return max(told.steps, 1) / load().walking["steps_per_second"].median
