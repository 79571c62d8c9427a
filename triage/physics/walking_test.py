"""A walking test: peaks of body voltage against time, found as the test standards do."""

from collections.abc import Sequence
from dataclasses import dataclass
from itertools import pairwise

from triage.errors import InvalidValue

COUNT = 5
"""Highest peaks, and lowest valleys, that are reported."""


@dataclass(frozen=True, slots=True)
class WalkingTest:
    """What a walking test shows.

    Args:
        peaks: the highest peaks, highest first [V].
        valleys: the lowest valleys, lowest first [V].
    """

    peaks: tuple[float, ...]
    valleys: tuple[float, ...]

    @property
    def mean_peak(self) -> float:
        """Mean of the highest peaks [V]."""
        return sum(self.peaks) / len(self.peaks)

    @property
    def mean_valley(self) -> float:
        """Mean of the lowest valleys [V]."""
        return sum(self.valleys) / len(self.valleys)

    @property
    def largest(self) -> float:
        """Largest voltage of either sign [V]."""
        return max(abs(v) for v in (*self.peaks, *self.valleys))


def evaluated(samples: Sequence[tuple[float, float]]) -> WalkingTest:
    """Peaks and valleys of a recorded walking test.

    Args:
        samples: (time [s], voltage [V]), in order of time.

    Raises:
        InvalidValue: times do not rise, or there are fewer than five peaks or five valleys.

    Source:
        ANSI/ESD STM97.2 (2016) and IEC 61340-4-5: five positive and five negative peaks are
        recorded (published); that their means are reported is from memory.

    >>> walk = [(t / 2, 100 if t % 2 else 50) for t in range(13)]
    >>> found = evaluated(walk)
    >>> found.mean_peak, found.mean_valley
    (100.0, 50.0)
    """
    if any(b[0] <= a[0] for a, b in pairwise(samples)):
        raise InvalidValue("times of a walking test must rise from sample to sample")
    turns = _turns([v for _, v in samples])
    peaks = sorted((v for v, up in turns if up), reverse=True)[:COUNT]
    valleys = sorted(v for v, up in turns if not up)[:COUNT]
    if min(len(peaks), len(valleys)) < COUNT:
        raise InvalidValue(
            f"a walking test needs {COUNT} peaks and {COUNT} valleys, "
            f"found {len(peaks)} and {len(valleys)}"
        )
    return WalkingTest(tuple(peaks), tuple(valleys))


def _turns(volts: Sequence[float]) -> list[tuple[float, bool]]:
    """Inner turning points as (voltage, is a peak); a flat top counts once."""
    levels = [v for i, v in enumerate(volts) if i == 0 or v != volts[i - 1]]
    return [
        (here, here > before)
        for before, here, after in zip(levels, levels[1:], levels[2:], strict=False)
        if (here > before) == (here > after)
    ]
