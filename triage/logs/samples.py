"""Samples of a log in order of time, and what can be said of them: steps, gaps, stuck values."""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from itertools import groupby, pairwise
from statistics import median

HOUR = 3600.0
_GAP = 2.5
"""A pause of so many usual steps is a gap; judgement: one row lost makes two steps."""
_STUCK_ROWS, _STUCK_TIME = 12, 3 * HOUR
"""Rows and seconds of one same value that are doubted; judgement: room air at one decimal does
not stand still for three hours, at whole numbers it may."""


@dataclass(frozen=True, slots=True)
class Sample:
    """One value of a log.

    Args:
        at: seconds since 1970 UTC, wall time.
        value: SI (% RH, °C).
        low: least value given for that time.
        high: greatest value given for that time.
        bound: "<" or ">" where the value is the end of the instrument's range.
    """

    at: float
    value: float
    low: float
    high: float
    bound: str = ""


def usual_step(times: Sequence[float]) -> float | None:
    """Median time between neighbours [s]; None for fewer than two times."""
    steps = [b - a for a, b in pairwise(times) if b > a]
    return median(steps) if steps else None


def gaps(times: Sequence[float]) -> list[tuple[float, float]]:
    """Begin and end of every pause longer than two and a half usual steps [s since 1970]."""
    step = usual_step(times)
    return [(a, b) for a, b in pairwise(times) if step and b - a > _GAP * step]


def resolution(samples: Sequence[Sample]) -> float:
    """Smallest step between two values of a log, unit of the value; 0 where all are the same.

    With few rows it is larger than the step of the instrument, never smaller.
    """
    values = sorted({each.value for each in samples if each.low == each.high})
    noise = 1e-9 * max(map(abs, values), default=0)
    return min((b - a for a, b in pairwise(values) if b - a > noise), default=0.0)


def stuck(samples: Sequence[Sample]) -> Iterator[tuple[Sample, Sample, int]]:
    """First, last and number of samples of every long run of one value."""
    for _, run in groupby(samples, lambda each: (each.low, each.high)):
        same = list(run)
        if len(same) >= _STUCK_ROWS and same[-1].at - same[0].at >= _STUCK_TIME:
            yield same[0], same[-1], len(same)
