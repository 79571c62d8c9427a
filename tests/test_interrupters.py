"""Opening times of residual current devices against the published law and tables."""

from pathlib import Path

import pytest
import yaml
from hypothesis import given
from hypothesis import strategies as st

from triage.errors import InvalidValue
from triage.physics.interrupters import acts, gfci_time, rcd_band, rcd_time

PUBLISHED = yaml.safe_load((Path(__file__).parent / "published/electrical.yaml").read_text())


@pytest.mark.parametrize(("milliamperes", "seconds"), PUBLISHED["gfci"])
def test_the_interrupter_law(milliamperes, seconds):
    assert gfci_time(milliamperes / 1e3) == pytest.approx(seconds, rel=0.001)


@pytest.mark.parametrize(("milliamperes", "seconds", "kind"), PUBLISHED["rcd"])
def test_the_times_of_a_thirty_milliampere_device(milliamperes, seconds, kind):
    assert rcd_time(milliamperes / 1e3, 0.030, kind) == seconds


@pytest.mark.parametrize("milliamperes", [0, 1, 5.99])
def test_below_six_milliamperes_nothing_need_open(milliamperes):
    assert gfci_time(milliamperes / 1e3) is None
    assert rcd_time(milliamperes / 1e3, 0.030) is None


def test_above_the_range_of_the_law_the_time_is_not_shortened_further():
    assert gfci_time(10) == gfci_time(0.264)


def test_between_multiples_the_longer_time_holds():
    assert rcd_time(0.149, 0.030) == 0.150
    assert rcd_time(0.100, 0.030, "delayed") == 0.5


@given(st.floats(0.006, 10), st.floats(0.006, 10))
def test_more_current_never_opens_later(first, second):
    low, high = sorted((first, second))
    assert gfci_time(high) <= gfci_time(low)


@pytest.mark.parametrize(
    ("isolated", "line_to_line", "expected"),
    [(False, False, True), (True, False, False), (None, False, False), (False, True, False),
     (False, None, False)],
)  # fmt: skip
def test_a_device_acts_only_where_residual_current_is_known_to_flow(
    isolated, line_to_line, expected
):
    assert acts(isolated=isolated, line_to_line=line_to_line) is expected


def test_the_device_may_open_from_half_its_rating():
    assert rcd_band(0.030) == (0.015, 0.030)


@pytest.mark.parametrize(
    "call",
    [
        lambda: gfci_time(-1),
        lambda: rcd_time(-1, 0.03),
        lambda: rcd_time(0.1, 0),
        lambda: rcd_time(0.1, 0.03, "quick"),
        lambda: rcd_band(0),
    ],
)
def test_impossible_inputs_are_refused(call):
    with pytest.raises(InvalidValue):
        call()
