"""A person across a source: the settled pair, and the ceiling nobody exceeds."""

import pytest
from hypothesis import given
from hypothesis import strategies as st

from triage.errors import InvalidValue, OutOfRange
from triage.physics.body_impedance import CONTACTS, MOISTURES
from triage.physics.contact import ceiling, settle
from triage.physics.touch_current import Source


# Full line voltage on the body: interpolated table 1 of IEC/TS 60479-1, worked by hand.
@pytest.mark.parametrize(
    ("volts", "percentile", "milliamperes"),
    [(120, 5, 131), (120, 50, 75.7), (120, 95, 43.4), (230, 5, 298), (230, 50, 189),
     (230, 95, 122)],
)  # fmt: skip
def test_a_stiff_source_puts_its_whole_voltage_on_the_body(volts, percentile, milliamperes):
    found = settle(Source(volts, 0), percentile=percentile, moisture="dry")
    assert found.current * 1e3 == pytest.approx(milliamperes, rel=0.005)
    assert found.voltage == pytest.approx(volts)


sources = st.builds(
    Source,
    st.floats(0.001, 400),
    st.builds(lambda r, x: complex(r, -x), st.floats(0, 1e7), st.floats(0, 1e7)),
)
percentiles = st.floats(0.5, 99.5)
areas = st.one_of(st.none(), st.sampled_from(CONTACTS))
skins = st.one_of(st.none(), st.sampled_from(MOISTURES))


@given(sources, percentiles, areas, skins)
def test_current_voltage_and_impedance_agree(source, percentile, contact, moisture):
    found = settle(source, percentile=percentile, contact=contact, moisture=moisture)
    assert found.voltage == pytest.approx(found.current * found.body)
    assert found.current == pytest.approx(source.current(found.body))


@given(sources, percentiles, areas, skins)
def test_nobody_exceeds_the_ceiling(source, percentile, contact, moisture):
    found = settle(source, percentile=percentile, contact=contact, moisture=moisture)
    if percentile >= 5:
        assert found.current <= ceiling(source) * (1 + 1e-9)


@given(sources, percentiles, percentiles)
def test_a_lower_impedance_person_never_carries_less(source, first, second):
    low, high = sorted((first, second))
    assert settle(source, percentile=low).current >= settle(source, percentile=high).current * (
        1 - 1e-9
    )


def test_a_weak_source_does_not_care_about_the_body():
    # 2 x 2.2 nF at 120 V 60 Hz: 99.5 uA through any body below some ten kilohm
    source = Source(60, 1 / (2j * 3.14159265 * 60 * 4.4e-9))
    wet, dry = settle(source), settle(source, moisture="dry", percentile=95)
    assert wet.current == pytest.approx(dry.current, rel=0.001)
    assert wet.current * 1e6 == pytest.approx(99.5, rel=0.002)


def test_shoes_and_floor_take_the_voltage_off_the_body():
    found = settle(Source(120, 0), series=1e6)
    assert found.current * 1e6 == pytest.approx(120, rel=0.005)
    assert found.voltage < 0.5


def test_what_has_no_answer_is_refused():
    with pytest.raises(OutOfRange):
        settle(Source(120, 0), percentile=0)
    with pytest.raises(InvalidValue):
        settle(Source(float("nan"), 0))
