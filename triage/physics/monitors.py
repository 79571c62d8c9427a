"""Isolated-supply monitors: what their reading allows a person to carry, and what they cannot see.

A monitor of the hazard-current kind shows the current that *would* flow if a line were joined
to earth, not one that flows. A monitor of the insulation-resistance kind sees resistance only.
"""

from dataclasses import dataclass
from math import isclose

from triage.errors import InvalidValue
from triage.physics.touch_current import Mains

READING_TOLERANCE = 0.10
"""Judgement: no tolerance was found in the codes; the 200 ohm-per-volt resistor calibrates it."""

LEAKAGE_CAPACITANCE = (5e-9, 200e-9)
"""Judgement: system capacitance to earth when unknown [F], 100 pF/m of cable plus filters."""


def hazard_current(mains: Mains, first: complex, second: complex) -> tuple[float, float]:
    """Current that flows if line 1, and if line 2, of an isolated supply is joined to earth.

    Args:
        mains: line-to-line supply.
        first: Y1, leakage of line 1 to earth [S].
        second: Y2, leakage of line 2 to earth [S].

    Returns:
        (E |Y2|, E |Y1|) [A]; a monitor shows the larger as total hazard current.

    Source:
        NEC 2023 article 100, hazard current (from NFPA 99-2021 3.3.72); CSA C22.2 No. 204.

    >>> m = Mains(120, 60)
    >>> y = 1j * m.angular * 44.2097e-9
    >>> round(max(hazard_current(m, y, y)) * 1e3, 3)  # mA
    2.0
    """
    return mains.voltage * abs(second), mains.voltage * abs(first)


def total_hazard_bounds(fault: float, monitor: float) -> tuple[float, float]:
    """Range of the total from fault and monitor hazard currents, which add as phasors [A].

    Args:
        fault: everything but the monitor [A].
        monitor: the monitor alone [A].

    >>> low, high = total_hazard_bounds(3.7e-3, 1.0e-3)
    >>> round(low * 1e3, 1), round(high * 1e3, 1)
    (2.7, 4.7)
    """
    if not (fault >= 0 and monitor >= 0):
        raise InvalidValue("hazard currents cannot be negative")
    return abs(fault - monitor), fault + monitor


def ceiling_from_hazard(reading: float, tolerance: float = READING_TOLERANCE) -> float:
    """Most a person can carry between one line and earth at this total hazard current.

    Holds at power frequency, for resistive and capacitive leakage, at the time of the reading.

    Args:
        reading: total hazard current shown at the time of the event [A].
        tolerance: of the monitor, share of the reading.

    Returns:
        Ib <= THC (1 + tolerance) [A].

    Raises:
        InvalidValue: negative reading or tolerance.

    Source:
        |Y1 + Y2 + Yb| >= |Yb| for admittances with no negative part, so E |Y2 Yb / sum| <= E |Y2|.

    >>> round(ceiling_from_hazard(2e-3) * 1e3, 2)  # mA
    2.2
    """
    if not (reading >= 0 and tolerance >= 0):
        raise InvalidValue(f"a hazard current cannot be {reading!r} A +- {tolerance!r}")
    return reading * (1 + tolerance)


def ceiling_from_insulation(
    mains: Mains, resistance: float | None, capacitance: float | None = None
) -> float:
    """Most a person can carry between one line and earth at this insulation resistance.

    Args:
        mains: line-to-line supply.
        resistance: reading of the monitor, both lines to earth [ohm]; None or 0 gives no bound.
        capacitance: of the whole system to earth [F]; None takes the high end of
            `LEAKAGE_CAPACITANCE`, because this kind of monitor cannot see it.

    Returns:
        E |1/R + j w C| [A]; infinite without a reading.

    Raises:
        InvalidValue: negative resistance or capacitance.

    >>> round(ceiling_from_insulation(Mains(230, 50), 1e6, 100e-9) * 1e3, 3)  # mA
    7.229
    """
    if not (resistance is None or resistance >= 0) or not (capacitance or 0) >= 0:
        raise InvalidValue("insulation resistance and capacitance cannot be negative")
    if not resistance:
        return float("inf")
    farads = LEAKAGE_CAPACITANCE[1] if capacitance is None else capacitance
    return mains.voltage * abs(1 / resistance + 1j * mains.angular * farads)


def alarm_test_resistor(voltage: float) -> float:
    """Resistance line to earth that must make the monitor alarm, 200 ohm per volt.

    Args:
        voltage: line to line [V], above 0.

    Returns:
        R [ohm]; the current through it is 5.000 mA at any voltage.

    Source:
        NFPA 99-1999, 3-3.3.4.2.

    >>> alarm_test_resistor(120), alarm_test_resistor(208), alarm_test_resistor(240)
    (24000, 41600, 48000)
    """
    if not voltage > 0:
        raise InvalidValue(f"line voltage cannot be {voltage!r} V")
    return 200 * voltage


def device_step(mains: Mains, filter_capacitance: float) -> float:
    """Rise of either hazard current when a device with intact earth is plugged in, E w C.

    Args:
        mains: line-to-line supply.
        filter_capacitance: line to chassis, each line [F].

    Returns:
        Step [A]; no step where similar devices give one hints at an open earth, no more:
        panels resolve about 0.1 mA. Never unplug while somebody depends on the supply.

    >>> round(device_step(Mains(120, 60), 2.2e-9) * 1e6, 1)  # uA
    99.5
    """
    return mains.voltage * mains.angular * filter_capacitance


def build_up(
    mains: Mains, filters: list[float], *, cable: float = 0.0, per_metre: float = 100e-12
) -> float:
    """Hazard current the devices and the cable of a room explain together.

    Args:
        mains: line-to-line supply.
        filters: line-to-chassis capacitance of each earthed device, per line [F].
        cable: length [m].
        per_metre: capacitance to earth of each line [F/m]; 50 to 150 pF/m is usual.

    Returns:
        Expected reading without faults and without the monitor [A].

    >>> round(build_up(Mains(120, 60), [4.7e-9] * 10) * 1e3, 3)  # mA
    2.126
    """
    return device_step(mains, sum(filters) + cable * per_metre)


@dataclass(frozen=True, slots=True)
class LineVoltages:
    """Two line-to-earth voltages read as a picture of the supply.

    Args:
        picture: `balanced`, `first_fault`, `mixed_leakage`, `unbalanced`, `not_this_supply`.
        means: one sentence for a reader.
    """

    picture: str
    means: str


def read_line_voltages(first: float, second: float, between: float) -> LineVoltages:
    """Guide to two line-to-earth readings; volts say nothing about current.

    Args:
        first: line 1 to earth [V]. second: line 2 to earth [V]. between: line to line [V].

    Returns:
        The picture; the first that fits, most dangerous first.

    Raises:
        InvalidValue: a negative reading or no line voltage.

    Source:
        V1 = E Y2 / (Y1 + Y2): pure resistance or pure capacitance sums to E, a mixture to more.

    >>> read_line_voltages(84.85, 84.85, 120).picture
    'mixed_leakage'
    """
    if not (first >= 0 and second >= 0 and between > 0):
        raise InvalidValue("line voltages are magnitudes, and the supply needs one above 0")
    low, total = min(first, second) / between, (first + second) / between
    if total < 0.85:
        return LineVoltages("not_this_supply", "Too low: meter loads it, or nothing is connected.")
    if low < 0.10:
        return LineVoltages("first_fault", "One line is close to earth: first fault, or a meter.")
    if total > 1.05:
        return LineVoltages("mixed_leakage", "One line leaks by resistance, the other by capacity.")
    if isclose(first, second, rel_tol=0.15):
        return LineVoltages("balanced", "Both lines alike, as in a healthy supply.")
    return LineVoltages("unbalanced", "One line leaks more than the other.")
