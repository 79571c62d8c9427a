"""Sources other than mains leakage: what little of them can be put into a formula.

Electrosurgery through a glove, charge left on plug pins, stimulating pulses.
"""

from math import exp, pi, sqrt

from triage.errors import InvalidValue

VACUUM_PERMITTIVITY = 8.8541878128e-12
"""Electric constant [F/m]. Source: CODATA 2018."""


def glove_capacitance(area: float, thickness: float, permittivity: float = 3.0) -> float:
    """Capacitance of a glove between an instrument and the skin, C = e0 er A / d.

    Args:
        area: A, contact [m2], above 0.
        thickness: d [m], above 0; two gloves add.
        permittivity: er; 3 dry (judgement), about 7 when soaked.

    Returns:
        C [F].

    Raises:
        InvalidValue: an input not above 0.

    Source:
        Parallel plates, Halliday, Resnick, Walker, Fundamentals of Physics, ch. 25.

    >>> round(glove_capacitance(1e-4, 0.2e-3) * 1e12, 1)  # pF
    13.3
    """
    if not (area > 0 and thickness > 0 and permittivity > 0):
        raise InvalidValue("a glove has an area, a thickness and a permittivity above 0")
    return VACUUM_PERMITTIVITY * permittivity * area / thickness


def glove_current(peak: float, frequency: float, capacitance: float, body: float = 200.0) -> float:
    """High-frequency current an intact glove passes by its capacitance.

    Args:
        peak: crest voltage of the instrument against the body [V], 0 or more.
        frequency: f [Hz], above 0.
        capacitance: of the glove [F], above 0.
        body: path behind it [ohm]; 200 ohm is the load of the leakage test.

    Returns:
        rms current, V / sqrt(2) / sqrt(R^2 + (1/wC)^2) [A]; not comparable with 50/60 Hz curves.

    Raises:
        InvalidValue: an input out of sense.

    >>> c = glove_capacitance(1e-4, 0.2e-3)
    >>> round(glove_current(1000, 400e3, c) * 1e3, 1)  # mA
    23.6
    """
    if not (peak >= 0 and frequency > 0 and capacitance > 0 and body >= 0):
        raise InvalidValue("glove current needs a voltage, a frequency and a capacitance")
    return peak / sqrt(2) / abs(body + 1 / (2j * pi * frequency * capacitance))


def pin_voltage(crest: float, capacitance: float, *, bleed: float | None, elapsed: float) -> float:
    """Voltage left on plug pins some time after unplugging at the crest.

    Args:
        crest: of the supply, sqrt(2) E [V].
        capacitance: between the pins [F], above 0.
        bleed: discharge resistor [ohm]; None is missing or open.
        elapsed: since unplugging [s], 0 or more.

    Returns:
        V = Vc exp(-t / R C) [V].

    Raises:
        InvalidValue: an input out of sense.

    >>> round(pin_voltage(325, 1e-6, bleed=1e6, elapsed=1))
    120
    """
    if not (capacitance > 0 and elapsed >= 0) or (bleed is not None and not bleed > 0):
        raise InvalidValue("stored charge needs a capacitance, a time and a resistor above 0")
    return crest if bleed is None else crest * exp(-elapsed / (bleed * capacitance))


def pulse_energy(current: float, duration: float, load: float = 500.0) -> float:
    """Energy of one rectangular stimulus into a load, I^2 R t [J].

    Args:
        current: of the pulse [A]. duration: of the pulse [s], 0 or more. load: [ohm].

    >>> round(pulse_energy(0.080, 0.2e-3) * 1e3, 2)  # train of four at 80 mA, mJ
    0.64
    """
    if not (duration >= 0 and load >= 0):
        raise InvalidValue("a pulse has no negative duration or load")
    return current**2 * load * duration


def strip_touch_current(leakages: list[float]) -> float:
    """Most a person can carry when the one earth of a strip is lost: all leakages in sum [A].

    Args:
        leakages: earth leakage of each device on the strip [A].

    >>> round(strip_touch_current([100e-6] * 10) * 1e3, 3)
    1.0
    """
    if any(not each >= 0 for each in leakages):
        raise InvalidValue("a leakage current cannot be negative")
    return sum(leakages)
