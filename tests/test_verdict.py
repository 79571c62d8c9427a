"""A reading against limits: exact values, bounds, equality, and editions kept apart."""

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st

from triage.errors import InvalidValue
from triage.limits import load_limits
from triage.quantity import parse
from triage.verdict import compare, judge

LIMITS = load_limits()
BY_ID = {row.id: row for row in LIMITS.rows}
TOUCH = BY_ID["nfpa2012-touch-nc"]  # max 100 uA
EARTH = BY_ID["nfpa2012-pe"]  # below 0.50 ohm
INSULATION = BY_ID["t62353-2007-ins-i"]  # min 2 Mohm
WIRING = BY_ID["nfpa2012-new-wiring"]  # above 200 kohm

ORDER = {"pass": 0, "undecided": 1, "fail": 2}


@pytest.mark.parametrize(
    ("text", "row", "verdict"),
    [
        ("100 uA", TOUCH, "pass"),
        ("0.1 mA", TOUCH, "pass"),
        ("100.1 uA", TOUCH, "fail"),
        ("<10 uA", TOUCH, "pass"),
        ("<100 uA", TOUCH, "pass"),
        ("<500 uA", TOUCH, "undecided"),
        (">500 uA", TOUCH, "fail"),
        (">100 uA", TOUCH, "fail"),
        (">10 uA", TOUCH, "undecided"),
        ("0.49 ohm", EARTH, "pass"),
        ("0.50 ohm", EARTH, "fail"),
        ("500 mohm", EARTH, "fail"),
        ("2 Mohm", INSULATION, "pass"),
        (">2 Mohm", INSULATION, "pass"),
        (">100 Mohm", INSULATION, "pass"),
        (">1 Mohm", INSULATION, "undecided"),
        ("<1 Mohm", INSULATION, "fail"),
        ("<2 Mohm", INSULATION, "fail"),
        ("<3 Mohm", INSULATION, "undecided"),
        ("200 kohm", WIRING, "fail"),
        ("201 kohm", WIRING, "pass"),
    ],
)
def test_the_verdict_of_a_reading_as_typed(text, row, verdict):
    reading = parse(text, row.kind)
    assert compare(reading.value, reading.bound, row).verdict == verdict


@pytest.mark.parametrize(
    ("bound", "verdict"), [("≤", "undecided"), ("<", "pass"), ("≥", "fail"), (">", "fail")]
)
def test_equality_counts_only_where_the_bound_includes_it(bound, verdict):
    assert compare(0.5, bound, EARTH).verdict == verdict


def test_the_margin_is_the_share_of_the_limit_that_is_left():
    assert compare(80e-6, "", TOUCH).margin == pytest.approx(0.2)
    assert compare(150e-6, "", TOUCH).margin == pytest.approx(-0.5)
    assert compare(4e6, "", INSULATION).margin == pytest.approx(1.0)
    assert compare(500e-6, "<", TOUCH).margin is None


@pytest.mark.parametrize("bad", [(-1e-6, ""), (math.nan, ""), (math.inf, ""), (1e-6, "~")])
def test_an_impossible_reading_is_refused(bad):
    with pytest.raises(InvalidValue):
        compare(*bad, TOUCH)


readings = st.floats(0, 1e12)
rows = st.sampled_from([TOUCH, EARTH, INSULATION, WIRING])


@given(readings, readings, rows)
def test_a_worse_reading_never_gets_a_better_verdict(first, second, row):
    better, worse = sorted((first, second), reverse=row.sense == "min")
    found = [ORDER[compare(each, "", row).verdict] for each in (better, worse)]
    assert found[0] <= found[1]


@given(readings, st.floats(0, 1), rows)
def test_a_bounded_verdict_holds_for_every_value_behind_the_bound(edge, share, row):
    for bound, true in (("<", edge * share), (">", edge * (1 + share) + 1)):
        if bound == "<" and math.isclose(true, edge, rel_tol=1e-6):
            continue
        bounded = compare(edge, bound, row).verdict
        exact = compare(true, "", row).verdict
        assert bounded in ("undecided", exact)


def test_an_edition_fails_when_any_of_its_rows_fails():
    rows = LIMITS.find(check="touch_current", edition="nfpa99-2012")
    (found,) = judge(300e-6, "", rows)
    assert found.verdict == "fail"
    assert {each.verdict for each in found.comparisons} == {"pass", "fail"}


def test_a_dispute_between_sources_shows_and_the_stricter_governs():
    rows = LIMITS.find(
        check="earth_leakage", edition="iec62353-2007", equipment_class="II", method="alternative"
    )
    (between,) = judge(300e-6, "", rows)
    assert between.verdict == "fail" and between.disputed
    (below,) = judge(150e-6, "", rows)
    assert below.verdict == "pass" and not below.disputed


def test_editions_that_differ_are_both_returned():
    rows = LIMITS.find(check="touch_current", condition="open_earth", equipment_class="I")
    found = {each.edition.id: each.verdict for each in judge(400e-6, "", rows)}
    assert found["nfpa99-2005"] == "fail" and found["nfpa99-2012"] == "pass"


@given(st.floats(0, 1), st.sampled_from(["touch_current", "earth_leakage"]))
def test_no_judgement_mixes_editions(reading, check):
    for each in judge(reading, "", LIMITS.find(check=check, item=None)):
        assert {c.limit.edition for c in each.comparisons} == {each.edition}


def test_no_row_is_no_verdict_and_never_a_pass():
    assert judge(1e-6, "", ()) == ()


def test_reference_rows_never_give_a_verdict():
    assert judge(1.0, "", LIMITS.find(check="reference", kind="voltage", item=None)) == ()


def test_the_alarm_must_come_between_two_currents():
    rows = LIMITS.find(check="isolated_alarm_test", edition="nec-2017")
    verdicts = [judge(each, "", rows)[0].verdict for each in (3e-3, 4.5e-3, 5e-3, 6e-3)]
    assert verdicts == ["fail", "pass", "pass", "fail"]


def test_one_reading_is_not_held_against_two_kinds_of_quantity():
    with pytest.raises(InvalidValue, match="kinds"):
        judge(5e-3, "", LIMITS.find(check="isolated_alarm_test"))
