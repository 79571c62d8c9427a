"""Peaks of a walking test, found by hand and by SciPy."""

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy.signal import find_peaks

from triage.errors import InvalidValue
from triage.physics.walking_test import evaluated

# One trace drawn by hand: seven steps up and down, the highest five 90 80 70 60 50.
BY_HAND = [0, 50, 10, 90, -20, 60, 5, 40, -40, 80, 0, 70, -10, 30, 0]


def samples(volts) -> list[tuple[float, float]]:
    """One sample every tenth of a second."""
    return [(i / 10, float(v)) for i, v in enumerate(volts)]


def test_the_five_highest_peaks_and_lowest_valleys_are_reported():
    found = evaluated(samples(BY_HAND))
    assert found.peaks == (90, 80, 70, 60, 50)
    assert found.valleys == (-40, -20, -10, 0, 5)
    assert found.mean_peak == 70
    assert found.mean_valley == -13
    assert found.largest == 90


@given(st.lists(st.integers(-200, 200), min_size=60, max_size=120))
def test_peaks_are_those_of_scipy(volts):
    heights = np.array(volts, dtype=float)
    peaks, valleys = (
        sorted(s * h[find_peaks(s * h)[0]] * s) for s, h in ((1, heights), (-1, heights))
    )
    if min(len(peaks), len(valleys)) < 5:
        return
    found = evaluated(samples(volts))
    assert list(found.peaks) == peaks[::-1][:5]
    assert list(found.valleys) == valleys[:5]


def test_a_flat_top_is_one_peak():
    volts = [0, 9, 9, 0, 8, 0, 7, 0, 6, 0, 5, 0, 1]
    assert evaluated(samples(volts)).peaks == (9, 8, 7, 6, 5)


@pytest.mark.parametrize("volts", [[], [1], [0, 1, 0, 1, 0], list(range(50))])
def test_too_few_peaks_are_not_a_walking_test(volts):
    with pytest.raises(InvalidValue, match="needs 5 peaks"):
        evaluated(samples(volts))


def test_times_must_rise():
    with pytest.raises(InvalidValue, match="rise"):
        evaluated([(0, 1), (0, 2)])
