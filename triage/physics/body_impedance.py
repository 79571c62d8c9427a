"""Impedance of a person between two touched points, by voltage, area, moisture and percentile.

What is not known takes the severe end: wet with salt, large contact, the 5th percentile, and
never above the hazard floor where a ceiling is asked for.
"""

from dataclasses import replace
from functools import cache
from math import exp, log, pi
from statistics import NormalDist

from triage.citation import Citation
from triage.errors import InvalidValue, OutOfRange
from triage.frozen import frozen
from triage.physics.figures import section, value

CONTACTS = ("large", "medium", "small")
"""Contact areas of the tables: about 10 000, 1 000 and 100 mm2."""

MOISTURES = ("dry", "water", "saltwater")
"""Skin states of the tables; sweat counts as saltwater."""

_Z95 = NormalDist().inv_cdf(0.95)
_SOURCE = "IEC/TS 60479-1"


@frozen
class Spread:
    """Body impedance of the population at one voltage [ohm]: 5th, 50th and 95th percentile."""

    low: float
    median: float
    high: float

    @property
    def sigma(self) -> float:
        """Spread of the natural log of the impedance, ln(high / low) / (2 x 1.645).

        >>> round(Spread(1750, 3250, 6100).sigma, 2)
        0.38
        """
        return log(self.high / self.low) / (2 * _Z95)

    def at(self, percentile: float) -> float:
        """Impedance not exceeded by `percentile` % of adults, lognormal on each side of the median.

        Args:
            percentile: 0.5 to 99.5.

        Raises:
            OutOfRange: outside 0.5 to 99.5, where three points say nothing.

        >>> round(Spread(1750, 3250, 6100).at(5))
        1750
        """
        if not 0.5 <= percentile <= 99.5:
            raise OutOfRange("percentile", percentile, 0.5, 99.5, "%", _SOURCE)
        z = NormalDist().inv_cdf(percentile / 100)
        edge = self.low if z < 0 else self.high
        return self.median * exp(abs(z) / _Z95 * log(edge / self.median))


def impedance(voltage: float, *, contact: str = "large", moisture: str = "saltwater") -> Spread:
    """Total body impedance hand to hand at 50/60 Hz, linear between the rows of the table.

    Args:
        voltage: across the body, rms [V].
        contact: one of `CONTACTS`.
        moisture: one of `MOISTURES`.

    Returns:
        5th, 50th and 95th percentile [ohm].

    Raises:
        InvalidValue: no table for that area and moisture.
        OutOfRange: voltage outside the rows of that table.

    Source:
        IEC/TS 60479-1 tables 1 to 7 and 9; citations with the tables in data/body.yaml.

    >>> impedance(50, moisture="dry")
    Spread(low=1375.0, median=2500.0, high=4600.0)
    """
    volts, ohms, _, _ = _table(contact, moisture)
    if not volts[0] <= voltage <= volts[-1]:
        place = f"{_SOURCE}, {contact} {moisture} contact"
        raise OutOfRange("body voltage", voltage, volts[0], volts[-1], "V", place)
    upper = next(i for i, v in enumerate(volts) if voltage <= v)
    lower = max(0, upper - 1)
    share = 0.0 if upper == lower else (voltage - volts[lower]) / (volts[upper] - volts[lower])
    pairs = zip(ohms[lower], ohms[upper], strict=True)
    return Spread(*(a + share * (b - a) for a, b in pairs))


def impedance_citation(voltage: float, *, contact: str, moisture: str) -> Citation:
    """Where the impedance at this voltage [V] comes from; memory if a row used is from memory."""
    volts, _, recalled, citation = _table(contact, moisture)
    upper = next((i for i, v in enumerate(volts) if voltage <= v), len(volts) - 1)
    used = {upper} if voltage == volts[upper] else {upper, max(0, upper - 1)}
    return replace(citation, known="memory") if used & recalled else citation


def severe_impedance(
    voltage: float | None, *, contact: str | None = None, moisture: str | None = None
) -> Spread:
    """Body impedance for a ceiling or a best estimate when anything may be unknown.

    Below the first row the first row is used (impedance only rises as voltage falls). Above the
    last row of a smaller contact the large contact counts, above 1000 V or without a voltage the
    hazard floor. An area and moisture without a table take the next more severe moisture.

    Args:
        voltage: across the body, rms [V]; None if unknown.
        contact: one of `CONTACTS`; None takes large.
        moisture: one of `MOISTURES`; None takes saltwater.

    >>> severe_impedance(None).low
    500.0
    >>> severe_impedance(5, moisture="dry").median
    3250.0
    """
    area = contact or "large"
    state = moisture or "saltwater"
    if (area, state) not in _tables():
        state = "saltwater"
    if voltage is not None and voltage > _table(area, state)[0][-1]:
        area = "large"
    volts, _, _, _ = _table(area, state)
    if voltage is None or voltage > volts[-1]:
        floor = hazard_floor()
        return Spread(floor, floor, floor)
    return impedance(max(voltage, volts[0]), contact=area, moisture=state)


@cache
def hazard_floor() -> float:
    """Body impedance below which no path is assumed, for ceilings [ohm]."""
    return value("body", "hazard_floor")


def floor_series(resistance: float, capacitance: float, frequency: float) -> complex:
    """Shoes and floor in series with the body: a resistance beside a capacitance.

    Args:
        resistance: R to ground through footwear and floor [ohm], above 0.
        capacitance: C of the soles to ground [F], 0 or more.
        frequency: f [Hz], 0 or more.

    Returns:
        Zs = R / (1 + j w R C) [ohm]; 0 belongs to a contact between two objects.

    Raises:
        InvalidValue: R not above 0 or C negative.

    >>> z = 1000 + floor_series(1e6, 100e-12, 60)
    >>> round(120 / abs(z) * 1e6)  # uA
    120
    """
    if not (resistance > 0 and capacitance >= 0 and frequency >= 0):
        raise InvalidValue(f"floor cannot be {resistance!r} ohm beside {capacitance!r} F")
    return resistance / (1 + 2j * pi * frequency * resistance * capacitance)


_Table = tuple[list[float], list[list[float]], set[int], Citation]


@cache
def _tables() -> dict[tuple[str, str], _Table]:
    return {(each["contact"], each["moisture"]): _read(each) for each in section("impedance")}


def _read(each: dict) -> _Table:  # type: ignore[type-arg]
    rows = each["rows"]
    return (
        [float(r["v"]) for r in rows],
        [[float(z) for z in r["ohm"]] for r in rows],
        {i for i, r in enumerate(rows) if r.get("memory")},
        Citation(**each["citation"]),
    )


def _table(contact: str, moisture: str) -> _Table:
    try:
        return _tables()[contact, moisture]
    except KeyError:
        known = ", ".join(f"{a} {m}" for a, m in _tables())
        raise InvalidValue(
            f"no impedance table for {contact} {moisture} contact; there are {known}"
        ) from None
