"""Quantities: text with a unit to an SI value and back.

The kind of the field decides what a unit letter means ("F" is a temperature there, a
capacitance elsewhere). A bare number is refused wherever a unit matters.
"""

import math
import re
from dataclasses import dataclass

from triage.errors import InvalidValue

_PREFIX = {"p": 1e-12, "n": 1e-9, "u": 1e-6, "m": 1e-3, "": 1.0, "k": 1e3, "M": 1e6, "G": 1e9}
_PREFIX_ABOVE = {"T": 1e12}


def _scaled(names: tuple[str, ...], prefixes: str) -> dict[str, float]:
    """Every prefix of `prefixes` (a blank stands for none) before every unit name."""
    scale = _PREFIX | _PREFIX_ABOVE
    return {(p + name).strip(): scale[p.strip()] for name in names for p in prefixes}


# Aliases as people type them; case of the prefix always matters (m is milli, M is mega).
_UNITS: dict[str, dict[str, float]] = {
    "current": _scaled(("A", "a"), "num ") | {"kA": 1e3},
    "voltage": _scaled(("V", "v"), "um k"),
    "resistance": _scaled(("ohm", "ohms", "Ohm", "Ω"), "um kMGT"),
    "capacitance": _scaled(("F",), "pnum "),
    "charge": _scaled(("C",), "pnum "),
    "energy": _scaled(("J",), "num "),
    "power": _scaled(("W", "VA"), "m k"),
    "frequency": _scaled(("Hz",), " kM") | {"hz": 1.0},
    "force": _scaled(("N",), "m ") | {"g": 9.80665e-3, "oz": 0.27801385},
    "length": {"mm": 1e-3, "cm": 1e-2, "m": 1.0, "in": 0.0254, "ft": 0.3048},
    "duration": {
        "us": 1e-6, "ms": 1e-3, "s": 1.0, "sec": 1.0, "second": 1.0, "seconds": 1.0,
        "min": 60.0, "minute": 60.0, "minutes": 60.0, "h": 3600.0, "hour": 3600.0,
        "hours": 3600.0, "d": 86400.0, "day": 86400.0, "days": 86400.0,
    },
    "relative_humidity": {"%": 1.0, "%RH": 1.0, "% RH": 1.0, "%rh": 1.0, "% rh": 1.0},
    "humidity_points": {"points": 1.0, "%RH": 1.0, "% RH": 1.0},
    "temperature": {"C": 1.0, "degC": 1.0, "°C": 1.0, "K": 1.0, "F": 1.0, "degF": 1.0, "°F": 1.0},
    "temperature_difference": {"K": 1.0, "degC": 1.0, "°C": 1.0, "degF": 5 / 9, "°F": 5 / 9},
}  # fmt: skip

_SYMBOL = {
    "current": "A", "voltage": "V", "resistance": "Ω", "capacitance": "F", "charge": "C",
    "energy": "J", "power": "W", "frequency": "Hz", "force": "N", "length": "m",
    "duration": "s", "relative_humidity": "% RH", "humidity_points": "points",
    "temperature": "°C", "temperature_difference": "K",
}  # fmt: skip
KINDS = tuple(_UNITS)
"""The kinds of quantity. SI inside, but % RH and °C for humidity and temperature, as the
humidity formulas are published."""

EXAMPLE = {
    "current": "1.9 mA", "voltage": "230 V", "resistance": "0.08 ohm", "capacitance": "130 pF",
    "charge": "0.2 uC", "energy": "0.6 mJ", "power": "90 W", "frequency": "50 Hz",
    "force": "115 g", "length": "10 mm", "duration": "2 s", "relative_humidity": "24 %",
    "humidity_points": "3 points", "temperature": "21 degC", "temperature_difference": "2 K",
}  # fmt: skip
"""How each kind of quantity is typed."""

# Escapes, since editors merge the look-alikes: micro sign, Greek mu, ohm sign to Greek omega.
_ONE_SPELLING = str.maketrans({"\u00b5": "u", "\u03bc": "u", "\u2126": "\u03a9"})
_SHAPE = re.compile(
    r"(?P<bound>[<>≤≥])?\s*(?P<number>[-+−]?(?:\d+(?:[.,]\d*)?|[.]\d+)(?:[eE][-+]?\d+)?)"
    r"\s*(?P<unit>\D.*)?",
    re.ASCII,
)


@dataclass(frozen=True, slots=True)
class Quantity:
    """A value as typed, its kind and its SI value.

    Args:
        text: as typed, unit included.
        kind: one of `KINDS`.
        value: SI (humidity in % RH, temperature in °C); where a bound stands, the bound.
        bound: "" for a value, "<" or ">" for a reading beyond the instrument's range.
    """

    text: str
    kind: str
    value: float
    bound: str = ""


def _number(text: str) -> float:
    """A decimal number; a comma only where it cannot be a thousands mark.

    Raises:
        InvalidValue: a comma that could be either.
    """
    plain = text.replace("−", "-")
    if re.fullmatch(r"[-+]?[1-9]\d{0,2},\d{3}", plain):
        raise InvalidValue(f"'{text}' could be a decimal or a thousands mark; write a point")
    return float(plain.replace(",", "."))


def _normal_unit(unit: str) -> str:
    """One spelling for the micro sign and the ohm sign."""
    return unit.strip().translate(_ONE_SPELLING)


def parse(text: str, kind: str) -> Quantity:
    """Read a quantity of a known kind.

    Args:
        text: number, unit and an optional "<" or ">" before it.
        kind: one of `KINDS`.

    Raises:
        InvalidValue: no number, no unit, or a unit that is not of this kind.

    >>> parse("180 µA", "current").value
    0.00018
    >>> parse("68 F", "temperature").value
    20.0
    >>> parse("<10 uA", "current").bound
    '<'
    """
    match = _SHAPE.fullmatch(text.strip())
    if not match:
        raise InvalidValue(
            f"'{text}' is not a {kind.replace('_', ' ')}; write it like '{EXAMPLE[kind]}'"
        )
    unit = _normal_unit(match["unit"] or "")
    if not unit:
        raise InvalidValue(f"'{text}' has no unit; write it like '{EXAMPLE[kind]}'")
    if unit not in _UNITS[kind]:
        raise InvalidValue(
            f"'{unit}' is not a unit of {kind.replace('_', ' ')}; write it like '{EXAMPLE[kind]}'"
        )
    value = _number(match["number"]) * _UNITS[kind][unit]
    if not math.isfinite(value):
        raise InvalidValue(f"'{text}' is not a finite number")
    if kind == "temperature":
        value = _celsius(value, unit)
    bound = {"≤": "<", "≥": ">"}.get(match["bound"] or "", match["bound"] or "")
    return Quantity(text.strip(), kind, value, bound)


def _celsius(value: float, unit: str) -> float:
    """Temperature in °C from a value in the unit typed."""
    if unit.endswith("F"):
        return round((value - 32) * 5 / 9, 9)
    return value - 273.15 if unit == "K" else value


def worded(value: float | None, kind: str, digits: int = 2) -> str:
    """A value for print, rounded to significant digits with a fitting prefix.

    Args:
        value: SI; None prints as "not known".
        kind: one of `KINDS`.
        digits: significant digits, 1 or more.

    >>> worded(0.00018, "current"), worded(2500, "voltage"), worded(None, "charge")
    ('180 µA', '2.5 kV', 'not known')
    """
    if value is None:
        return "not known"
    symbol = _SYMBOL[kind]
    if kind in ("relative_humidity", "humidity_points", "temperature", "temperature_difference"):
        return f"{_rounded(value, 3 if abs(value) >= 100 else digits)} {symbol}"
    if kind == "duration" and value >= 120:
        return _long_duration(value)
    if value == 0:
        return f"0 {symbol}"
    for prefix, scale in (("T", 1e12), ("G", 1e9), ("M", 1e6), ("k", 1e3), ("", 1.0),
                          ("m", 1e-3), ("µ", 1e-6), ("n", 1e-9), ("p", 1e-12)):  # fmt: skip
        shown = float(f"{value / scale:.{digits - 1}e}")
        if abs(shown) >= 1:
            return f"{_rounded(shown, digits)} {prefix}{symbol}"
    return f"{value:.{digits - 1}e} {symbol}"


def _long_duration(value: float) -> str:
    """Seconds as minutes, hours or days."""
    for unit, scale in (("d", 86400.0), ("h", 3600.0), ("min", 60.0)):
        if value >= 2 * scale:
            return f"{_rounded(value / scale, 2)} {unit}"
    return f"{_rounded(value, 2)} s"


def _rounded(value: float, digits: int) -> str:
    """Significant digits without an exponent and without trailing noise."""
    if value == 0:
        return "0"
    places = digits - 1 - math.floor(math.log10(abs(value)))
    text = f"{round(value, places):.{max(places, 0)}f}"
    return text
