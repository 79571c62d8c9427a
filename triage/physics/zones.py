"""Time/current zones of AC through the body, 15 to 100 Hz, with conservative chords.

The published curves have no closed formula. The corner points in data/body.yaml are joined by
straight lines on log-log paper chosen to err to the more severe zone; print them as chords.
"""

from functools import cache
from math import exp, log

from triage.errors import InvalidValue, OutOfRange
from triage.physics.figures import row, section

ZONES = ("AC-1", "AC-2", "AC-3", "AC-4")
"""Mild to severe: not felt to perceptible; startle; strong contraction; fibrillation risk."""

UNKNOWN_DURATION = 3.0
"""Duration [s] assumed when nobody knows how long the contact lasted: all lines are flat there."""


def heart_factor(path: str | None) -> float:
    """Weight of a path for the heart against left hand to feet; unknown takes the largest.

    Args:
        path: a path of data/body.yaml, for example `hand_hand`; None if unknown.

    Returns:
        F; the equivalent current is F x I.

    Raises:
        InvalidValue: no such path.

    Source:
        IEC 60479-1 table 12, quoted by Mitolo, table 5.1, p. 84.

    >>> round(0.050 * heart_factor("chest_left_hand") * 1e3)  # mA
    75
    """
    factors: dict[str, float] = section("heart_factors")["rows"]
    if path is None:
        return max(factors.values())
    if path not in factors:
        raise InvalidValue(f"'{path}' is not a body path; known: {', '.join(factors)}")
    return factors[path]


def line(name: str, duration: float) -> float:
    """Current on one zone line at a duration.

    Args:
        name: `a`, `b` or `c1`.
        duration: t [s], 0.01 or more.

    Returns:
        Current [A].

    Raises:
        OutOfRange: duration below 10 ms, where the curves begin.

    >>> round(line("b", 0.5) * 1e3, 1), round(line("c1", 0.5) * 1e3, 1)  # mA
    (13.1, 93.5)
    """
    points = _corners(name)
    if not duration >= points[0][0]:
        raise OutOfRange("duration", duration, points[0][0], 10, "s", "IEC 60479-1 zone lines")
    for (t0, i0), (t1, i1) in zip(points, points[1:], strict=False):
        if duration <= t1:
            return exp(log(i0) + log(duration / t0) / log(t1 / t0) * log(i1 / i0))
    return points[-1][1]


def zone(current: float, duration: float | None, path: str | None) -> str:
    """Zone of a current; what is unknown takes the severe end.

    Args:
        current: rms through the body [A], 0 or more.
        duration: t [s]; None is taken as `UNKNOWN_DURATION`, below 10 ms as 10 ms.
        path: as `heart_factor`; scales the fibrillation line only, as in the standard.

    Returns:
        One of `ZONES`; a current on a line belongs to the more severe side, except on line a.

    Raises:
        InvalidValue: current or duration negative or not a number.

    >>> zone(0.0002, None, None), zone(0.045, None, "left_hand_feet")
    ('AC-1', 'AC-4')
    """
    if not current >= 0 or (duration is not None and not duration >= 0):
        raise InvalidValue(f"no zone for {current!r} A during {duration!r} s")
    time = UNKNOWN_DURATION if duration is None else max(duration, _corners("b")[0][0])
    if current * heart_factor(path) >= line("c1", time):
        return "AC-4"
    if current >= line("b", time):
        return "AC-3"
    return "AC-2" if current > line("a", time) else "AC-1"


@cache
def _corners(name: str) -> tuple[tuple[float, float], ...]:
    return tuple((float(t), float(i)) for t, i in row("zone_lines", name)["points"])
