"""How people and objects charge: walking and rolling, quick acts, and the leak to earth.

A moving contact is a current source with an internal resistance: on a good earth path the voltage
is current times resistance, on an insulating one it ends at the open-circuit voltage of the
material pair, where resistance no longer matters.
"""

from dataclasses import dataclass
from math import exp, expm1, log, log1p

from triage.errors import InvalidValue
from triage.estimate import Estimate, product, through

NOTHING = 30.0
"""Time constants after which a charge counts as gone: e^-30 of it is left."""

VACUUM_PERMITTIVITY = 8.8541878128e-12
"""[F/m], CODATA 2018."""


def largest_step_charge(area: float, breakdown_field: float = 3e6) -> float:
    """Most charge one sole can separate before the air under it breaks down.

    Args:
        area: of the sole [m2], above 0.
        breakdown_field: of air between planes [V/m].

    Returns:
        Charge [C].

    Source:
        Jonassen, Charging by Walking, Compliance Engineering (2001).

    >>> round(largest_step_charge(0.015) * 1e7, 2)
    3.98
    """
    if not (area > 0 and breakdown_field > 0):
        raise InvalidValue(f"area and field must be above 0, got {area!r} and {breakdown_field!r}")
    return VACUUM_PERMITTIVITY * breakdown_field * area


def load_line(source_voltage: float, open_voltage: float) -> float:
    """Plateau voltage of a current source with internal resistance over a leak.

    Args:
        source_voltage: charging current times resistance to earth [V], above 0.
        open_voltage: of the material pair with no leak [V], above 0.

    Returns:
        Plateau [V].

    Source:
        Saito, Oyo Buturi 32(5) 301-309 (1963): voltage falls in a straight line with leak time.

    >>> round(load_line(1500, 3000))
    1000
    """
    if not (source_voltage > 0 and open_voltage > 0):
        raise InvalidValue(f"voltages must be above 0, got {source_voltage!r}, {open_voltage!r}")
    return source_voltage * open_voltage / (source_voltage + open_voltage)


def approach(plateau: float, seconds: float, time_constant: float) -> float:
    """Voltage on the way to the plateau [V], V (1 - exp(-t / tau)).

    Source:
        Saito 1963 (above); Ficker, J. Electrostatics 64 (2006) 10-16.

    >>> round(approach(1000, 2, 2))
    632
    """
    if not (seconds >= 0 and time_constant > 0):
        raise InvalidValue(f"time cannot be {seconds!r} s with a time constant {time_constant!r} s")
    return -plateau * expm1(-seconds / time_constant)


def decay_time(start: float, end: float, resistance: float, capacitance: float) -> float:
    """Time for a charge to leak away from one voltage to another [s], R C ln(V0 / V1).

    Args:
        start: voltage now [V].
        end: voltage then [V], above 0 and at most `start`.
        resistance: to earth [ohm].
        capacitance: to earth [F].

    >>> round(decay_time(10e3, 2e3, 3e11, 125e-12), 1)
    60.4
    """
    if not 0 < end <= start:
        raise InvalidValue(f"a leak goes down to a voltage above 0, got {start!r} to {end!r} V")
    return resistance * capacitance * log(start / end)


@dataclass(frozen=True, slots=True, kw_only=True)
class Mover:
    """A person walking, or an object rolling, as a source of charge.

    Args:
        current: short-circuit charging current [A].
        open_voltage: of the material pair [V].
        resistances: in series to earth [ohm], one or two (floor and shoe, floor and caster, or
            one measured as a system).
        capacitance: to earth [F].
        doubt: factor on the voltage for what the model does not know.
        contact: voltage that a lifted foot adds on a good earth path [V], or None.
        peak_factor: by which the voltage rises while one foot is lifted, 1 for objects.
    """

    current: Estimate
    open_voltage: Estimate
    resistances: tuple[Estimate, ...]
    capacitance: Estimate
    doubt: Estimate
    contact: Estimate | None = None
    peak_factor: float = 1.0

    @property
    def resistance(self) -> Estimate:
        """Resistance to earth [ohm]."""
        return in_series(*self.resistances)


@dataclass(frozen=True, slots=True)
class Charged:
    """A charged body: everything a discharge needs, on shared sources of doubt.

    Args:
        voltage: to earth, both feet down [V].
        capacitance: to earth, both feet down [F].
        resistance: to earth [ohm], or None if not known.
        peak_factor: by which the voltage rises while one foot is lifted.
    """

    voltage: Estimate
    capacitance: Estimate
    resistance: Estimate | None = None
    peak_factor: float = 1.0

    @property
    def peak(self) -> Estimate:
        """Largest voltage, one foot lifted [V]: for questions of exceeding, never for charge."""
        return self.voltage.scaled(self.peak_factor)

    @property
    def charge(self) -> Estimate:
        """C V [C]; it stays the same while one foot is lifted and the voltage rises."""
        return product("C", self.capacitance, self.voltage)

    @property
    def time_constant(self) -> Estimate | None:
        """R C, in which the voltage falls to 37 % [s]; None if the resistance is not known."""
        if self.resistance is None:
            return None
        return product("s", self.resistance, self.capacitance)

    @property
    def energy(self) -> Estimate:
        """C V^2 / 2 [J]."""
        return product("J", self.charge, self.voltage).scaled(0.5)


def in_series(*resistances: Estimate, order: int = 6) -> Estimate:
    """Sum of one or two resistances [ohm].

    Raises:
        InvalidValue: none, or more than two; measure the path as a system instead.
    """
    if len(resistances) == 1:
        return resistances[0]
    if len(resistances) != 2:
        raise InvalidValue(f"one or two resistances in series, got {len(resistances)}")
    first, second = resistances
    ratio = second.over(first, "")
    return product("ohm", first, through(softplus, ratio, unit="", order=order))


def moving(
    mover: Mover, *, seconds: float | None, pause: float = 0.0, order: int | None = None
) -> Charged:
    """Voltage of a person or object after moving, then standing still, then touching.

    Args:
        mover: the source of charge.
        seconds: how long it moved [s]; None for long enough to reach the plateau.
        pause: time between the last movement and the touch [s].
        order: nodes for each direction a formula resolves. By default 20 on the plateau and 6
            with time or contact in play: the probability of a shock is then within 2e-6, and
            within 1e-3 (usually 3e-5).

    Returns:
        The charged body; voltage with both feet down.

    Source:
        Saito 1963 and Jonassen 2001, as in `load_line` and `approach`.
    """
    if (seconds is not None and not seconds > 0) or not pause >= 0:
        raise InvalidValue(f"moving for {seconds!r} s with a pause of {pause!r} s cannot be")
    timed = seconds is not None or pause > 0
    order = order or (6 if timed or mover.contact else 20)
    resistance = in_series(*mover.resistances, order=order)
    arguments = [product("", mover.current, resistance, mover.open_voltage.power(-1, "1/V"))]
    if timed:
        arguments.append(product("s", resistance, mover.capacitance))
    if mover.contact:
        arguments.append(mover.contact.over(mover.open_voltage, ""))

    def log_shape(u: float, *rest: float) -> float:
        """Ln of V over open-circuit voltage, from ln(I R / V_oc), ln(R C), ln(contact / V_oc)."""
        more = softplus(u)
        value = u - more
        if seconds is not None:
            value += log(-expm1(-seconds * exp(min(more - rest[0], 40.0))))
        if mover.contact:
            value += softplus(rest[-1] - value)
        if pause > 0:
            value -= min(pause * exp(-rest[0]), NOTHING)
        return value

    shape = through(log_shape, *arguments, unit="", order=order)
    voltage = product("V", mover.open_voltage, shape, mover.doubt)
    lifted = mover.peak_factor if mover.contact is None else 1.0
    return Charged(voltage, mover.capacitance, resistance, lifted)


def quick_act(
    charge: Estimate, capacitance: Estimate, *, doubt: Estimate, corona_limit: float
) -> Charged:
    """Voltage right after an act that separates a charge at once (rising, undressing, sliding).

    Args:
        charge: separated [C].
        capacitance: of the body that keeps it [F].
        doubt: factor on the voltage for what the model does not know.
        corona_limit: voltage that corona lets nobody pass [V].

    Source:
        V = Q / C, rounded off towards the corona limit as V / (1 + V / limit); the form of the
        rounding is a judgement.
    """
    free = product("V", charge, capacitance.power(-1, "1/F"))
    limit = log(corona_limit)
    held = through(lambda v: -softplus(v - limit), free, unit="", order=24)
    return Charged(product("V", free, held, doubt), capacitance)


def leaking(body: Charged, *, resistance: Estimate, seconds: float) -> Charged:
    """The same body after a time in which its charge leaks to earth.

    Args:
        body: as charged.
        resistance: to earth [ohm].
        seconds: time [s], 0 or more.
    """
    if not seconds >= 0:
        raise InvalidValue(f"a leak lasts 0 s or more, got {seconds!r}")
    if seconds == 0:
        return Charged(body.voltage, body.capacitance, resistance)
    tau = product("s", resistance, body.capacitance)
    left = through(lambda t: -min(seconds * exp(-t), NOTHING), tau, unit="", order=10)
    return Charged(product("V", body.voltage, left), body.capacitance, resistance)


def softplus(x: float) -> float:
    """Ln(1 + e^x) without overflow."""
    return x + log1p(exp(-x)) if x > 0 else log1p(exp(x))
