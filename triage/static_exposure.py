"""What static charge was physically possible: voltage, charge, energy, P(felt) for each cause."""

from dataclasses import dataclass, replace
from functools import lru_cache

from triage.bounds import Basis, Probability
from triage.conditions import Conditions
from triage.errors import InvalidValue
from triage.estimate import Estimate
from triage.frozen import frozen
from triage.materials import load
from triage.physics.charging import Charged, leaking, moving, quick_act
from triage.physics.humidity import Humidity
from triage.physics.sensation import perceived

STATIC_CAUSES = ("person_walking", "person_rising", "charged_object")
"""Static causes that have a model; induction has none."""
_PLATEAU_STEPS = 40
_ROLLING_STEPS = 40
_ACT_OF_ACTIVITY = {"handling_plastic": "slide_patient"}


@frozen
class Measured:
    """Static measurements that replace assumptions; None where there is none.

    Args:
        person_voltage: body voltage when the act was re-enacted [V].
        object_voltage: of the object after rolling [V].
        person_resistance: person to earth, as worn [ohm].
        object_resistance: object to earth [ohm].
    """

    person_voltage: float | None = None
    object_voltage: float | None = None
    person_resistance: float | None = None
    object_resistance: float | None = None


@dataclass(frozen=True, slots=True)
class StaticStory:
    """The conditions of one static cause, hashable so that equal ones are computed once."""

    cause: str
    floor: str
    footwear: str
    casters: str
    humidity: Humidity
    steps: int | None
    pause: float
    act: str
    body: str
    voltage: float | None = None
    resistance: float | None = None


@dataclass(frozen=True, slots=True)
class StaticExposure:
    """One static cause under one set of conditions."""

    voltage: Estimate
    capacitance: Estimate
    charge: Estimate
    energy: Estimate
    peak: Estimate
    felt: Probability


def story(
    cause: str, conditions: Conditions, measured: Measured, defaults: Conditions
) -> StaticStory:
    """The story of one cause; what is not known is taken from `defaults`.

    Args:
        cause: one of `STATIC_CAUSES`.
        conditions: of the incident.
        measured: measurements that replace assumptions.
        defaults: reference conditions, or the widest ones for print.
    """
    humidity = conditions.humidity or defaults.humidity
    if humidity is None:
        raise InvalidValue("the default conditions must name a humidity")
    rolling = cause == "charged_object"
    return StaticStory(
        cause,
        conditions.floor or defaults.floor or "unknown",
        conditions.footwear or defaults.footwear or "unknown",
        conditions.casters or defaults.casters or "unknown",
        humidity,
        conditions.steps if conditions.steps is not None else defaults.steps,
        conditions.pause if conditions.pause is not None else defaults.pause or 0.0,
        "rise",
        conditions.object_kind or "cart" if rolling else "standing",
        measured.object_voltage if rolling else measured.person_voltage,
        measured.object_resistance if rolling else measured.person_resistance,
    )


@lru_cache(maxsize=4096)
def static_exposure(told: StaticStory) -> StaticExposure:
    """Voltage, charge, energy and P(felt) of one story.

    Raises:
        OutOfRange: an input outside what the formulas were published for.
        InvalidValue: a word the table of materials does not know.
    """
    charged = _charged(told)
    felt = perceived(charged.charge, load().threshold("felt"))
    return StaticExposure(
        charged.voltage, charged.capacitance, charged.charge, charged.energy, charged.peak, felt
    )


def _charged(told: StaticStory) -> Charged:
    m = load()
    if told.voltage is not None:
        name = "person_with_cart" if told.cause == "charged_object" else "standing"
        basis = {"measured_voltage": Basis("voltage read after the same act", "measured")}
        read = Estimate.lognormal(told.voltage, {"measured_voltage": 0.2}, "V", basis)
        return Charged(read, m.capacitance(name))
    if told.cause == "person_rising":
        return _risen(told)
    if told.cause == "charged_object":
        body = told.body if told.body in m.objects else "cart"
        casters = "unknown" if told.casters == "none" else told.casters
        mover = m.roller(told.floor, casters, told.humidity, body=body)
    else:
        mover = m.walker(told.floor, told.footwear, told.humidity)
    if told.resistance is not None:
        mover = replace(mover, resistances=(_resistance(told.resistance),))
    return moving(mover, seconds=_seconds(told), pause=told.pause)


def _seconds(told: StaticStory) -> float | None:
    """Time of walking or rolling; None stands for long enough to reach the plateau."""
    if told.steps is None or told.steps >= _PLATEAU_STEPS:
        return None
    return max(told.steps, 1) / load().walking["steps_per_second"].median


def _risen(told: StaticStory) -> Charged:
    m = load()
    good_path = told.floor in ("conductive", "dissipative") and told.footwear in (
        "esd",
        "antistatic",
    )
    act = f"{told.act}_earthing" if good_path else told.act
    charged = quick_act(
        m.act_charge(act, told.humidity),
        m.capacitance("standing"),
        doubt=m.doubt(),
        corona_limit=m.walking["corona_limit"].median,
    )
    if told.resistance is None:
        path = m.walker(told.floor, told.footwear, told.humidity).resistance
    else:
        path = _resistance(told.resistance)
    return leaking(charged, resistance=path, seconds=told.pause) if told.pause > 0 else charged


def _resistance(value: float) -> Estimate:
    basis = {"floor_resistance": Basis("resistance to earth, measured", "measured")}
    return Estimate.lognormal(value, {"floor_resistance": 0.2}, "ohm", basis)
