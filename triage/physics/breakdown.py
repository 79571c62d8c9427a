"""How far a spark jumps: gap against voltage in air, and the voltage below which none does."""

from math import log, sqrt

from triage.errors import InvalidValue, OutOfRange

PASCHEN_MINIMUM = 327.0
"""[V] below which no spark starts in air at any gap, at 7.5 um; high-voltage engineering page
(published). Below it there is contact conduction only."""

PRESSURE = 101325.0
"""[Pa] standard air pressure."""

GAP_SOURCE = "uniform-field breakdown of air"


def relative_density(temperature: float = 20.0, pressure: float = PRESSURE) -> float:
    """Density of air relative to 20 degC and 101.3 kPa.

    Args:
        temperature: [degC], -40 to 60.
        pressure: [Pa], above 0.

    >>> round(relative_density(25.0), 3)
    0.983
    """
    if not -40 <= temperature <= 60:
        raise OutOfRange("temperature", temperature, -40, 60, "degC", GAP_SOURCE)
    if not pressure > 0:
        raise InvalidValue(f"pressure must be above 0 Pa, got {pressure!r}")
    return pressure / PRESSURE * 293.15 / (273.15 + temperature)


def breakdown_voltage(gap: float, density: float = 1.0) -> float:
    """Voltage that breaks a uniform air gap.

    Args:
        gap: [m], 2e-5 to 0.1.
        density: relative to 20 degC and 101.3 kPa.

    Returns:
        Voltage [V].

    Raises:
        OutOfRange: the gap is outside the range of the formula.

    Source:
        24.22 d + 6.08 sqrt(d) [kV, cm], high-voltage engineering texts; coefficients from memory.

    >>> round(breakdown_voltage(0.0028004))
    10000
    """
    if not 2e-5 <= gap <= 0.1:
        raise OutOfRange("gap", gap, 2e-5, 0.1, "m", GAP_SOURCE)
    reduced = gap * 100 * density
    return 1e3 * (24.22 * reduced + 6.08 * sqrt(reduced))


def spark_gap(voltage: float, density: float = 1.0) -> float | None:
    """Longest uniform air gap that a voltage jumps; the inverse of `breakdown_voltage`.

    Args:
        voltage: [V], up to 60 kV.
        density: relative to 20 degC and 101.3 kPa.

    Returns:
        Gap [m], or None below the Paschen minimum: no spark at all.

    >>> round(spark_gap(5000) * 1e3, 2)  # mm
    1.2
    """
    if not 0 <= voltage <= 6e4:
        raise OutOfRange("voltage", voltage, 0, 6e4, "V", GAP_SOURCE)
    if voltage < PASCHEN_MINIMUM:
        return None
    root = (sqrt(6.08**2 + 4 * 24.22 * voltage / 1e3) - 6.08) / (2 * 24.22)
    return root * root / density / 100


def paschen_voltage(gap: float, pressure: float = PRESSURE) -> float:
    """Breakdown voltage of a short uniform gap after Paschen.

    Args:
        gap: [m]; pressure times gap from the minimum (1.12 Pa m, 305 V) up to 850 Pa m.
        pressure: [Pa].

    Returns:
        Voltage [V].

    Raises:
        OutOfRange: left of the minimum, or beyond the tabulated body voltages.

    Source:
        V = B p d / (C + ln p d), A = 112.5 and B = 2737.5 per kPa cm (published, engineering
        calculator), secondary emission 0.01 (C = 1.1787 in cm Torr).

    >>> round(paschen_voltage(0.0022838), -1)
    10000.0
    """
    torr_cm = pressure / 133.322368 * gap * 100
    offset = log(15 / log(1 + 1 / 0.01))
    if not 1.12 <= pressure * gap <= 850:
        raise OutOfRange("pressure times gap", pressure * gap, 1.12, 850, "Pa m", "Paschen's law")
    return 365 * torr_cm / (offset + log(torr_cm))


def furthest_plausible_gap(voltage: float) -> float:
    """Longest jump from a finger or other rounded conductor that body voltage explains [m].

    Args:
        voltage: [V], 0 or more.

    Source:
        Streamers in non-uniform fields need about 0.5 kV/mm; judgement. A longer reported spark
        is not a body-static signature.

    >>> furthest_plausible_gap(25e3)
    0.05
    """
    if not voltage >= 0:
        raise InvalidValue(f"voltage must be 0 or more, got {voltage!r}")
    return voltage / 5e5
