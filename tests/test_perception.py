"""Chance of feeling a current and of not letting go, against printed percentiles."""

from pathlib import Path

import pytest
import yaml
from hypothesis import given
from hypothesis import strategies as st
from scipy.stats import lognorm, norm

from triage.errors import BadTable, InvalidValue
from triage.physics.perception import (
    cannot_let_go,
    could_be_felt,
    felt,
    friction_felt,
    must_be_felt,
    threshold,
)

PUBLISHED = yaml.safe_load((Path(__file__).parent / "published/electrical.yaml").read_text())


# The printed 0.5 % points carry two digits, so the chance is met to a fifth.
@pytest.mark.parametrize(("curve", "milliamperes", "chance"), PUBLISHED["perception"])
def test_the_printed_percentiles_of_perception(curve, milliamperes, chance):
    assert felt(milliamperes / 1e3, curve) == pytest.approx(chance, rel=0.2)


@pytest.mark.parametrize(("group", "milliamperes", "chance"), PUBLISHED["let_go"])
def test_the_printed_half_percent_of_letting_go(group, milliamperes, chance):
    assert cannot_let_go(milliamperes / 1e3, group) == pytest.approx(chance, rel=0.02)


@pytest.mark.parametrize("curve", ["touch", "grip", "sensitive", "leitgeb_men"])
@pytest.mark.parametrize("milliamperes", [0.02, 0.05, 0.1, 0.2, 0.34, 0.5, 1, 1.45, 2])
def test_the_curve_is_the_lognormal_of_scipy(curve, milliamperes):
    median, sigma, _ = threshold(curve)
    expected = lognorm(sigma, scale=median).cdf(milliamperes / 1e3)
    assert felt(milliamperes / 1e3, curve) == pytest.approx(expected, rel=1e-9, abs=1e-12)


@pytest.mark.parametrize(
    ("milliamperes", "men", "women"), [(6, 0.0001, 0.005), (9, 0.005, 0.195), (16, 0.519, 0.999)]
)
def test_letting_go_is_the_normal_of_scipy(milliamperes, men, women):
    assert cannot_let_go(milliamperes / 1e3, "men") == pytest.approx(men, abs=0.0005)
    assert cannot_let_go(milliamperes / 1e3, "women") == pytest.approx(women, abs=0.0005)
    assert cannot_let_go(milliamperes / 1e3, "men") == pytest.approx(
        norm(15.87, 2.667).cdf(milliamperes)
    )


@given(st.floats(1e-3, 1))
def test_everybody_counts_as_the_group_that_lets_go_least(current):
    groups = [cannot_let_go(current, group) for group in ("men", "women")]
    assert cannot_let_go(current) >= max(groups)


@given(st.floats(0, 1))
def test_could_be_felt_is_the_higher_of_the_two_curves(current):
    assert could_be_felt(current) >= felt(current, "touch")
    assert could_be_felt(current) >= felt(current, "sensitive")


@given(st.floats(0, 1), st.floats(0, 1))
def test_more_current_is_never_felt_less(first, second):
    low, high = sorted((first, second))
    assert must_be_felt(low) <= must_be_felt(high)
    assert could_be_felt(low) <= could_be_felt(high)


def test_a_room_reading_of_two_milliamperes_without_alarm_is_felt_by_nearly_all():
    # Published training table OSHA 3075: 1 mA is a faint tingle.
    assert must_be_felt(2e-3) > 0.98
    assert must_be_felt(1e-3) > 0.5


def test_high_frequency_is_felt_less():
    assert felt(1e-3, "touch", frequency=10e3) < 0.05 < felt(1e-3, "touch", frequency=50)


def test_zero_and_unbounded_current_are_certain():
    assert felt(0, "touch") == 0 and felt(float("inf"), "touch") == 1


@pytest.mark.parametrize(
    ("volts", "amperes", "dry", "expected"),
    [
        (1.5, None, True, True), (1.4, None, True, False), (None, 0.15e-6, True, True),
        (60, None, False, False), (None, None, True, True), (0.5, 1e-6, True, True),
    ],
)  # fmt: skip
def test_a_buzz_on_dry_sliding_needs_a_volt_and_a_half(volts, amperes, dry, expected):
    assert friction_felt(volts, amperes, dry_sliding=dry) is expected


@pytest.mark.parametrize("call", [felt, cannot_let_go])
def test_a_negative_current_is_refused(call):
    with pytest.raises(InvalidValue):
        call(-1e-3, "men" if call is cannot_let_go else "touch")


def test_a_curve_nobody_knows_is_refused():
    with pytest.raises(BadTable, match="touch"):
        felt(1e-3, "elbow")
