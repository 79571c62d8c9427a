"""What a person who touches would carry, cause by cause: each cause is a Thevenin source.

All voltages are rms, all impedances complex ohms at the supply frequency. A cause function
returns a `Source`; the person, shoes and floor are put across it by `Source.current`.
"""

from dataclasses import dataclass
from math import pi, sqrt

from triage.errors import InvalidValue


@dataclass(frozen=True, slots=True)
class Mains:
    """A sinusoidal supply: line-to-neutral (earthed) or line-to-line (isolated) voltage.

    Args:
        voltage: E, rms [V], above 0.
        frequency: f [Hz], above 0.
    """

    voltage: float
    frequency: float

    def __post_init__(self) -> None:
        """Refuse a supply without voltage or frequency."""
        if not (self.voltage > 0 and self.frequency > 0):
            raise InvalidValue(f"no supply has {self.voltage!r} V at {self.frequency!r} Hz")

    @property
    def angular(self) -> float:
        """Angular frequency, 2 pi f [rad/s]."""
        return 2 * pi * self.frequency


@dataclass(frozen=True, slots=True)
class Source:
    """What the touched point offers: open-circuit voltage and the impedance behind it.

    Args:
        open_voltage: rms, against what the other end of the body touches [V].
        impedance: between the two touched points without the person [ohm].
    """

    open_voltage: complex
    impedance: complex

    def current(self, body: complex, series: complex = 0) -> float:
        """Current through the person, I = |V / (Z + Zb + Zs)|.

        Args:
            body: Zb, body impedance [ohm].
            series: Zs, shoes and floor, or 0 for a contact between two objects [ohm].

        Returns:
            rms current [A]; infinite for a stiff source into nothing.

        >>> Source(120, 0).current(1000)
        0.12
        """
        total = abs(self.impedance + body + series)
        if total == 0:
            return float("inf") if self.open_voltage else 0.0
        return abs(self.open_voltage) / total

    def reading(self, meter: complex) -> float:
        """Voltage a meter of this input impedance [ohm] shows across the touched points [V].

        >>> round(Source(60, 1 / (4.4e-9 * 376.99112j)).reading(10e6), 2)
        59.89
        """
        return self.current(meter) * abs(meter)


def shunt(resistance: float | None, capacitance: float, mains: Mains) -> complex:
    """Admittance of a resistance beside a capacitance, Y = 1/R + j w C.

    Args:
        resistance: R, above 0, or None for no resistive path [ohm].
        capacitance: C, 0 or more [F].
        mains: gives the frequency.

    Returns:
        Y [S].

    Raises:
        InvalidValue: R not above 0, or C negative.
    """
    if not capacitance >= 0 or (resistance is not None and not resistance > 0):
        raise InvalidValue(f"leakage cannot be {resistance!r} ohm beside {capacitance!r} F")
    conductance = 0.0 if resistance is None else 1 / resistance
    return complex(conductance, mains.angular * capacitance)


def open_earth(
    mains: Mains,
    line: complex,
    neutral: complex,
    *,
    neutral_open: bool = False,
    to_earth: complex = 0,
) -> Source:
    """Chassis of a class I device whose protective earth is open, on an earthed supply.

    Args:
        mains: line-to-neutral supply.
        line: admittance line to chassis (filter capacitor, insulation) [S].
        neutral: admittance neutral to chassis [S].
        neutral_open: the neutral is open too and the load is on, so both poles stand at line.
        to_earth: admittance chassis to earth beside the person (trolley, data cable) [S].

    Returns:
        Chassis against earth.

    Raises:
        InvalidValue: nothing ties the chassis to anything.

    Source:
        Voltage divider of two admittances; IEC 60601-1 8.7.3 treats the open earth as the single
        fault under which touch current is judged.

    >>> m = Mains(120, 60)
    >>> y = shunt(None, 2.2e-9, m)
    >>> round(open_earth(m, y, y).current(1000) * 1e6, 2)  # uA
    99.53
    """
    total = line + neutral + to_earth
    if total == 0:
        raise InvalidValue("a chassis without any leakage path has no defined voltage")
    driving = line + neutral if neutral_open else line
    return Source(mains.voltage * driving / total, 1 / total)


def insulation_fault(
    mains: Mains, fault: float, *, earth: float | None, wiring: float = 0.0
) -> Source:
    """Chassis of a device whose line insulation leaks or has broken down, earthed supply.

    Args:
        mains: line-to-neutral supply.
        fault: resistance line to chassis [ohm], 0 or more.
        earth: protective-earth resistance chassis to earth [ohm]; None means open.
        wiring: line conductor resistance up to the fault [ohm].

    Returns:
        Chassis against earth, for the time until a protective device opens.

    Raises:
        InvalidValue: a negative resistance, or no resistance anywhere in the loop.

    >>> abs(insulation_fault(Mains(120, 60), 0, earth=0.3, wiring=0.3).open_voltage)
    60.0
    """
    loop = fault + wiring
    if not (fault >= 0 and wiring >= 0) or (earth is not None and not earth >= 0):
        raise InvalidValue("resistances in a fault loop cannot be negative")
    if earth is None:
        return Source(mains.voltage, loop)
    if loop + earth == 0:
        raise InvalidValue("a fault loop needs some resistance")
    return Source(mains.voltage * earth / (loop + earth), loop * earth / (loop + earth))


def earth_drop(current: float, resistance: float) -> Source:
    """Voltage a current drives along an earth or neutral conductor that metal is joined to.

    Covers swapped earth and neutral (load current in the earth wire), a shared earth, a borrowed
    neutral, and a chassis lifted by its own leakage over a poor protective earth
    (Ib = IL Rpe / (Rpe + Zb)).

    Args:
        current: rms [A], 0 or more.
        resistance: of the conductor up to the reference [ohm], 0 or more.

    Returns:
        The metal against the reference.

    Raises:
        InvalidValue: a negative input.

    >>> round(earth_drop(1, 0.1).current(500) * 1e6)  # shared earth, uA
    200
    >>> round(earth_drop(0.5e-3, 1000).current(1000) * 1e6)  # degraded earth, uA
    250
    """
    if not (current >= 0 and resistance >= 0):
        raise InvalidValue("current and resistance cannot be negative")
    return Source(current * resistance, resistance)


def direct(mains: Mains, path: float = 0.0) -> Source:
    """A line touched directly or through a film: bare cord, line-earth swap, moisture, no earth.

    Also one line of an isolated supply against the other line, and against earth once the other
    line has a first fault.

    Args:
        mains: the supply the touched conductor belongs to.
        path: resistance of liquid or damaged insulation in between [ohm].

    Returns:
        The touched point against the other pole (earth, or the other line).

    Raises:
        InvalidValue: path is negative.

    >>> round(direct(Mains(120, 60), 10e3).current(0) * 1e3, 1)  # moisture, mA
    12.0
    """
    if not path >= 0:
        raise InvalidValue(f"path resistance cannot be {path!r} ohm")
    return Source(mains.voltage, path)


def open_neutral(mains: Mains, load_here: float, load_other: float | None = None) -> Source:
    """Neutral, and a frame wrongly joined to it, after the neutral opened upstream.

    Args:
        mains: line-to-neutral supply.
        load_here: resistance of the load between this line and the neutral [ohm].
        load_other: load between the opposite line of a split-phase supply and the same
            neutral [ohm]; None for a two-wire circuit.

    Returns:
        Neutral against earth.

    Raises:
        InvalidValue: a load is not above 0.

    >>> open_neutral(Mains(120, 60), 10, 30).open_voltage
    60.0
    """
    if not load_here > 0 or (load_other is not None and not load_other > 0):
        raise InvalidValue("a load needs a resistance above 0")
    if load_other is None:
        return Source(mains.voltage, load_here)
    total = load_here + load_other
    return Source(mains.voltage * (load_other - load_here) / total, load_here * load_other / total)


def earth_difference(voltage: float, resistance: float = 0.0) -> Source:
    """Two earthed items, or two metals within reach, that differ in potential.

    Args:
        voltage: measured or assumed between them, rms [V].
        resistance: of the loop behind it; 0 is the severe end [ohm].

    Returns:
        One item against the other.

    >>> round(earth_difference(0.040).current(500) * 1e6)  # uA
    80
    """
    return Source(voltage, resistance)


def capacitive_pickup(mains: Mains, coupling: float, to_earth: float = 0.0) -> Source:
    """Unearthed metal (table, rail) near a live cable.

    Args:
        mains: the supply of the cable.
        coupling: capacitance cable to metal [F], above 0.
        to_earth: capacitance metal to earth [F], 0 or more; 0 is the severe end.

    Returns:
        The metal against earth.

    Raises:
        InvalidValue: coupling not above 0 or to_earth negative.

    >>> round(capacitive_pickup(Mains(120, 60), 100e-12).current(1000) * 1e6, 1)
    4.5
    """
    if not (coupling > 0 and to_earth >= 0):
        raise InvalidValue("pick-up needs a coupling capacitance above 0 F")
    total = coupling + to_earth
    return Source(mains.voltage * coupling / total, 1 / (1j * mains.angular * total))


def isolated_line(mains: Mains, touched: complex, other: complex) -> Source:
    """One line of an isolated supply against earth.

    Args:
        mains: line-to-line supply.
        touched: Y1, leakage of the touched line to earth [S].
        other: Y2, leakage of the other line to earth [S].

    Returns:
        Touched line against earth: V = E Y2 / (Y1 + Y2), Z = 1 / (Y1 + Y2).

    Raises:
        InvalidValue: neither line leaks, so its voltage is undefined (no steady current).

    >>> m = Mains(120, 60)
    >>> y = shunt(None, 44.2097e-9, m)
    >>> round(isolated_line(m, y, y).current(1000) * 1e3, 4)  # mA
    1.9989
    """
    total = touched + other
    if total == 0:
        raise InvalidValue("an isolated supply without leakage has no defined voltage to earth")
    return Source(mains.voltage * other / total, 1 / total)


@dataclass(frozen=True, slots=True)
class Spark:
    """What a floating, mains-driven chassis discharges at first contact, touched at crest.

    Args:
        capacitance: C [F]. voltage: crest [V]. charge: Q = C V [C]. energy: C V^2 / 2 [J].
    """

    capacitance: float
    voltage: float
    charge: float
    energy: float


def contact_spark(source: Source, mains: Mains) -> Spark:
    """Charge and energy of the contact spark, at most (contact at the crest of the wave).

    Args:
        source: the chassis against what the person touches.
        mains: gives the frequency.

    Returns:
        The spark; all zero capacitance for a source that holds no charge.

    Source:
        Q = C V, W = C V^2 / 2 with C the imaginary part of 1/Z over w. The discharge lasts a few
        microseconds: impulse effect tables (0.1 to 10 ms) do not cover it.

    >>> m = Mains(230, 50)
    >>> y = shunt(None, 2.2e-9, m)
    >>> spark = contact_spark(open_earth(m, y, y), m)
    >>> round(spark.charge * 1e6, 3), round(spark.energy * 1e6, 1)
    (0.716, 58.2)
    """
    stiff = source.impedance == 0
    capacitance = 0.0 if stiff else max(0.0, (1 / source.impedance).imag / mains.angular)
    crest = sqrt(2) * abs(source.open_voltage)
    return Spark(capacitance, crest, capacitance * crest, capacitance * crest**2 / 2)
