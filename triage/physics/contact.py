"""A person across a source: body impedance and body voltage found together.

Body impedance falls as the voltage across the body rises, so the two settle each other.
"""

from dataclasses import dataclass

from triage.errors import InvalidValue
from triage.physics.body_impedance import hazard_floor, severe_impedance
from triage.physics.touch_current import Source


@dataclass(frozen=True, slots=True)
class Touch:
    """What settles when a person touches.

    Args:
        current: through the body, rms [A]. voltage: across the body, rms [V].
        body: impedance of the body at that voltage [ohm].
    """

    current: float
    voltage: float
    body: float


def settle(
    source: Source,
    *,
    percentile: float = 50,
    contact: str | None = None,
    moisture: str | None = None,
    series: complex = 0,
) -> Touch:
    """Current, voltage and body impedance of somebody across a source.

    Args:
        source: what the two touched points offer.
        percentile: share of adults with a lower impedance [%], 0.5 to 99.5; low is severe.
        contact: area, one of `body_impedance.CONTACTS`; None is large, the severe end.
        moisture: one of `body_impedance.MOISTURES`; None is saltwater, the severe end.
        series: shoes and floor [ohm]; 0 for a contact between two objects.

    Returns:
        The touch at the voltage where both agree.

    Raises:
        OutOfRange: percentile outside 0.5 to 99.5.
        InvalidValue: a source without a finite voltage.

    Source:
        Ohm's law with IEC/TS 60479-1; the share of the voltage on the body falls as the assumed
        voltage rises, so bisection finds the one meeting point.

    >>> found = settle(Source(120, 0), moisture="dry")
    >>> round(found.body), round(found.current * 1e3, 1)  # ohm, mA
    (1585, 75.7)
    """
    if not abs(source.open_voltage) < float("inf"):
        raise InvalidValue(f"no body voltage follows from {source.open_voltage!r} V")
    behind = source.impedance + series

    def body_at(voltage: float) -> float:
        return severe_impedance(voltage, contact=contact, moisture=moisture).at(percentile)

    low, high = 0.0, abs(source.open_voltage)
    for _ in range(60):
        middle = (low + high) / 2
        body = body_at(middle)
        if abs(source.open_voltage) * body / abs(behind + body) > middle:
            low = middle
        else:
            high = middle
    body = body_at(high)
    current = abs(source.open_voltage) / abs(behind + body)
    return Touch(current, current * body, body)


def ceiling(source: Source) -> float:
    """Most that can flow through anybody across this source: hazard floor, no shoes or floor [A].

    >>> ceiling(Source(120, 0))
    0.24
    """
    return source.current(hazard_floor())
