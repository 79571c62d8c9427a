"""A discharge: charge, energy, what remains, peak current, and the test-bench equivalents."""

from math import atan2, atanh, exp, sin, sqrt

from triage.errors import InvalidValue
from triage.estimate import Estimate, product, through
from triage.frozen import frozen
from triage.physics.charging import Charged, softplus

SPARK_RESISTANCE = 30.0
"""[ohm] left in the arc when the current peaks; fitted to simulated sparks, judgement."""

SKIN_PATH = 1500.0
"""[ohm] finger to metal, the human-body model of ANSI/ESDA/JEDEC JS-001."""

METAL_PATH = 330.0
"""[ohm] hand-held metal to metal, the network of IEC 61000-4-2."""


def stored_energy(capacitance: float, voltage: float) -> float:
    """Energy held by a charged body [J], C V^2 / 2.

    Args:
        capacitance: to earth [F], above 0.
        voltage: to earth [V], either sign.

    Source:
        Halliday, Resnick, Walker, Fundamentals of Physics, ch. 25.

    >>> round(stored_energy(130e-12, 3000) * 1e3, 3)  # mJ
    0.585
    """
    return _positive("capacitance", capacitance) * voltage**2 / 2


def voltage_for_energy(capacitance: float, energy: float) -> float:
    """Voltage at which a body holds an energy [V].

    >>> round(voltage_for_energy(130e-12, 0.28e-3))
    2075
    """
    return float((2 * _positive("energy", energy) / _positive("capacitance", capacitance)) ** 0.5)


@frozen
class TwoBodies:
    """What passes between two floating bodies, and what stays.

    Args:
        charge: that passes [C].
        energy: set free in the spark and the skin [J].
        remaining: voltage of both afterwards [V]: the cause of a second shock.
    """

    charge: float
    energy: float
    remaining: float


def between(c1: float, v1: float, *, c2: float, v2: float) -> TwoBodies:
    """Discharge between two bodies that both float.

    Args:
        c1: capacitance of the first to earth [F].
        v1: its voltage [V].
        c2: capacitance of the second [F].
        v2: its voltage [V].

    Source:
        Conservation of charge; textbook electrostatics.

    >>> found = between(130e-12, 5000, c2=80e-12, v2=0)
    >>> round(found.energy * 1e3, 4), round(found.charge * 1e6, 4), round(found.remaining, 1)
    (0.619, 0.2476, 3095.2)
    """
    together = _positive("capacitance", c1) + _positive("capacitance", c2)
    series = c1 * c2 / together
    step = v1 - v2
    return TwoBodies(series * step, series * step**2 / 2, (c1 * v1 + c2 * v2) / together)


def in_series(c1: Estimate, c2: Estimate) -> Estimate:
    """Capacitance that two floating bodies share, C1 C2 / (C1 + C2) [F]."""
    ratio = c1.over(c2, "")
    return product("F", c1, through(lambda r: -softplus(r), ratio, unit="", order=10))


@frozen
class Spark:
    """What a discharge of a charged body carries.

    Args:
        charge: that passes [C].
        energy: set free in the spark and the skin [J].
        remaining: voltage of both bodies afterwards [V]; None if all is gone.
    """

    charge: Estimate
    energy: Estimate
    remaining: Estimate | None


def to_earth(body: Charged) -> Spark:
    """Discharge of a body to something earthed: everything passes."""
    return Spark(body.charge, body.energy, None)


def to_floating(body: Charged, other: Estimate) -> Spark:
    """Discharge of a body to an uncharged floating object; what remains gives a second shock.

    Args:
        body: charged.
        other: capacitance of the object to earth [F], on a source of its own.
    """
    passed = product("C", body.voltage, in_series(body.capacitance, other))
    ratio = other.over(body.capacitance, "")
    kept = through(lambda r: -softplus(r), ratio, unit="", order=10)
    energy = product("J", passed, body.voltage).scaled(0.5)
    return Spark(passed, energy, product("V", body.voltage, kept))


def peak_current(voltage: float, path: float) -> float:
    """Largest current of the slow part of a body spark [A], about 0.8 V / (R + arc).

    Args:
        voltage: before the spark [V], 1 to 25 kV.
        path: resistance of body and skin [ohm]: `SKIN_PATH` or `METAL_PATH`.

    Source:
        Fitted to sparks simulated with the Rompe-Weizel law, 150 pF, 0.3 uH; judgement.

    >>> round(peak_current(8000, SKIN_PATH), 1)
    4.2
    """
    return 0.8 * voltage / (_positive("resistance", path) + SPARK_RESISTANCE)


def duration(capacitance: float, path: float) -> float:
    """Time in which 95 % of the charge has passed [s], 3 R C.

    >>> round(duration(130e-12, 1500) * 1e6, 2)  # us
    0.58
    """
    return 3 * _positive("capacitance", capacitance) * _positive("resistance", path)


def specific_energy(capacitance: float, voltage: float, path: float) -> float:
    """Integral of the squared current of an RC discharge [A2 s], C V^2 / (2 R).

    Source:
        Electrical Safety of Low-Voltage Systems, p. 221.

    >>> round(specific_energy(1e-6, 1e4, 1000), 3)
    0.05
    """
    return stored_energy(capacitance, voltage) / _positive("resistance", path)


@frozen
class Circuit:
    """A charged capacitance that discharges through a resistance and an inductance.

    Args:
        capacitance: [F].
        resistance: [ohm].
        inductance: [H].
    """

    capacitance: float
    resistance: float
    inductance: float

    def current(self, voltage: float, seconds: float) -> float:
        """Current at a time after contact [A].

        Args:
            voltage: of the capacitance before contact [V].
            seconds: after contact [s], 0 or more.

        Source:
            Series RLC discharge, any circuit theory text; both roots real (aperiodic), equal, or
            complex (ringing).
        """
        damping = self.resistance / (2 * self.inductance)
        square = damping**2 - 1 / (self.inductance * self.capacitance)
        rate = sqrt(abs(square))
        if rate * seconds < 1e-6:
            shape = seconds * exp(-damping * seconds)
        elif square > 0:
            slow, fast = exp((rate - damping) * seconds), exp(-(rate + damping) * seconds)
            shape = (slow - fast) / (2 * rate)
        else:
            shape = exp(-damping * seconds) * sin(rate * seconds) / rate
        return voltage / self.inductance * shape

    def peak_time(self) -> float:
        """Time after contact at which the current is largest [s]."""
        damping = self.resistance / (2 * self.inductance)
        square = damping**2 - 1 / (self.inductance * self.capacitance)
        rate = sqrt(abs(square))
        if rate < 1e-6 * damping:
            return 1 / damping
        return (atanh(rate / damping) if square > 0 else atan2(rate, damping)) / rate

    def peak(self, voltage: float) -> float:
        """Largest current [A]."""
        return self.current(voltage, self.peak_time())


HUMAN_BODY = Circuit(100e-12, SKIN_PATH, 5e-6)
"""Human-body model of ANSI/ESDA/JEDEC JS-001, 100 pF through 1500 ohm; the inductance is a
judgement that keeps peak and rise time (2 to 10 ns) within the limits for a short circuit."""

GENERATOR = Circuit(150e-12, METAL_PATH, 0.1e-6)
"""Slow part of the IEC 61000-4-2 generator, 150 pF through 330 ohm; inductance a judgement. Its
fast first peak is not in this circuit: see `contact_discharge`."""


def contact_discharge(voltage: float) -> tuple[float, float, float]:
    """Current that an IEC 61000-4-2 generator must deliver in contact discharge.

    Args:
        voltage: test level [V].

    Returns:
        First peak (within 15 %), at 30 ns and at 60 ns (within 30 %) [A].

    Source:
        IEC 61000-4-2 Ed. 2 (2008), superseded by Ed. 3 (2025): 3.75, 2 and 1 A for each kV.

    >>> contact_discharge(8000)
    (30.0, 16.0, 8.0)
    """
    return 3.75e-3 * voltage, 2e-3 * voltage, 1e-3 * voltage


def _positive(name: str, value: float) -> float:
    if not value > 0:
        raise InvalidValue(f"{name} must be above 0, got {value!r}")
    return value
