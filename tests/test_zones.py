"""Time/current zones: published points, conservative chords, and the severe end when unknown."""

from pathlib import Path

import pytest
import yaml
from hypothesis import given
from hypothesis import strategies as st

from triage.errors import InvalidValue, OutOfRange
from triage.physics.zones import UNKNOWN_DURATION, ZONES, heart_factor, line, zone

PUBLISHED = yaml.safe_load((Path(__file__).parent / "published/electrical.yaml").read_text())
PATHS = list(PUBLISHED["heart_factor"])


@pytest.mark.parametrize(("path", "factor"), PUBLISHED["heart_factor"].items())
def test_the_printed_heart_factors_are_reproduced(path, factor):
    assert heart_factor(path) == factor


def test_the_worked_examples_of_the_source():
    # Mitolo p. 84: 50 mA chest to left hand is 75 mA; foot to foot needs 25 times the current.
    assert 0.050 * heart_factor("chest_left_hand") == pytest.approx(0.075)
    assert 1 / heart_factor("foot_foot") == pytest.approx(25)


@pytest.mark.parametrize(("name", "seconds", "milliamperes"), PUBLISHED["zone_points"])
def test_the_lines_meet_or_stay_below_every_published_point(name, seconds, milliamperes):
    assert line(name, seconds) * 1e3 <= milliamperes * (1 + 1e-9)
    if seconds in (0.01, 2, 6, 10):
        assert line(name, seconds) * 1e3 == pytest.approx(milliamperes)


# Straight lines on log-log paper between the corners, worked by hand.
@pytest.mark.parametrize(
    ("name", "seconds", "milliamperes"),
    [
        ("b", 0.1, 40.3), ("b", 0.5, 13.1), ("b", 1, 8.1), ("c1", 0.2, 213.9),
        ("c1", 0.5, 93.5), ("c1", 1, 50.0), ("c1", 2, 40.0), ("c1", 10, 40.0), ("b", 10, 5.0),
    ],
)  # fmt: skip
def test_the_chords(name, seconds, milliamperes):
    assert line(name, seconds) * 1e3 == pytest.approx(milliamperes, rel=0.005)


@pytest.mark.parametrize("seconds", [0.0099, 0, -1, float("nan")])
def test_a_line_is_not_extended_below_ten_milliseconds(seconds):
    with pytest.raises(OutOfRange):
        line("b", seconds)


@pytest.mark.parametrize(
    ("milliamperes", "seconds", "path", "expected"),
    [
        (0.5, 10, "left_hand_feet", "AC-1"),
        (0.51, 10, "left_hand_feet", "AC-2"),
        (5, 10, "left_hand_feet", "AC-3"),
        (40, 10, "left_hand_feet", "AC-4"),
        (40, 10, "hand_hand", "AC-3"),  # 16 mA for the heart, but the muscles carry all 40
        (7, 10, "hand_hand", "AC-3"),  # the path does not weigh on the line of the muscles
        (40, 10, None, "AC-4"),
        (30, None, None, "AC-4"),  # unknown path counts 1.5
        (400, 0.001, "left_hand_feet", "AC-3"),
    ],
)
def test_zone_of_a_current(milliamperes, seconds, path, expected):
    assert zone(milliamperes / 1e3, seconds, path) == expected


currents = st.floats(0, 10)
durations = st.one_of(st.none(), st.floats(0, 100))
paths = st.one_of(st.none(), st.sampled_from(PATHS))


@given(currents, currents, durations, paths)
def test_a_larger_current_is_never_milder(first, second, duration, path):
    low, high = sorted((first, second))
    found = [ZONES.index(zone(each, duration, path)) for each in (low, high)]
    assert found[0] <= found[1]


@given(currents, st.floats(0, 100), st.floats(0, 100), paths)
def test_a_longer_time_is_never_milder(current, first, second, path):
    short, long = sorted((first, second))
    found = [ZONES.index(zone(current, each, path)) for each in (short, long)]
    assert found[0] <= found[1]


@given(currents, st.floats(0, 100), paths)
def test_not_knowing_time_or_path_is_never_milder(current, duration, path):
    known = ZONES.index(zone(current, duration, path))
    assert ZONES.index(zone(current, None, path)) >= known
    assert ZONES.index(zone(current, duration, None)) >= known


def test_the_unknown_duration_lies_where_every_line_is_flat():
    for name in ("a", "b", "c1"):
        assert line(name, UNKNOWN_DURATION) == line(name, 1000)


@pytest.mark.parametrize(("current", "duration"), [(-1, 1), (float("nan"), 1), (0.1, -1)])
def test_an_impossible_current_or_time_is_refused(current, duration):
    with pytest.raises(InvalidValue):
        zone(current, duration, None)


def test_an_unknown_path_word_is_refused_and_the_known_ones_are_named():
    with pytest.raises(InvalidValue, match="hand_hand"):
        heart_factor("ear_to_ear")
