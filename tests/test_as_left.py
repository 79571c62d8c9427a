"""Checks as left after repair, and which items a check speaks about."""

import pytest
from sample_records import spoiled, text
from test_validity import SPOILS, check, verdict

from triage.evidence import gather
from triage.record import loads
from triage.site import no_site
from triage.validity import covers, judge_checks


@pytest.mark.parametrize("value", ["40 uA", "20 mA"])
def test_as_left_never_speaks_about_what_was_felt(value: str) -> None:
    left = check(stage="as_left", value=value, result=None, disturbed=["repaired"])
    incident = loads(text(spoiled(left))).incident
    verdicts = judge_checks(incident, no_site())
    assert verdicts[0].as_left
    without = loads(text(spoiled({"checks": []}))).incident
    found, bare = gather(incident, verdicts, "earthed"), gather(without, (), "earthed")
    # That the item is defective still, after repair, is another matter than the event.
    assert [each.check for each in found.defects] == ["touch_current"] * (value == "20 mA")
    assert {k: o.state for k, o in found.observed.items()} == {
        k: o.state for k, o in bare.observed.items()
    }


@pytest.mark.parametrize("name", ["wrong method", "isolated supply", "calibration not known", "before the event",
                                  "time not known", "no value", "unit in doubt", "not said of which item"])  # fmt: skip
def test_as_left_is_no_excuse_for_a_doubtful_reading(name: str) -> None:
    assert verdict({**check(stage="as_left"), **SPOILS[name]}).state == "invalid_pass"


def test_as_left_may_follow_repair_with_a_new_cord() -> None:
    left = check(stage="as_left", same_cord="no", disturbed=["repaired", "cord_swapped"])
    assert verdict(left).state == "valid_pass"


# which item a check speaks about


def test_a_check_speaks_about_its_item_its_outlet_and_the_cord_it_was_made_with() -> None:
    changed = spoiled({
        "items.0.cord": "cord-1",
        "checks": [
            {"id": "k1", "kind": "outlet_test", "of": "w3-1"},
            {"id": "k2", "kind": "earth_continuity", "of": "pump", "same_cord": "yes"},
            {"id": "k3", "kind": "earth_continuity", "of": "pump", "same_cord": "no"},
            {"id": "k4", "kind": "touch_current", "of": "pump", "same_cord": "yes"},
            {"id": "k5", "kind": "two_metal_voltage", "of": "pump", "second": "cord-2"},
            {"id": "k6", "kind": "outlet_test"},
        ],
    })  # fmt: skip
    incident = loads(text(changed)).incident
    about = {
        c.id: {i.id for i in incident.items if covers(c, i, incident)} for c in incident.checks
    }
    assert about == {
        "k1": {"pump", "w3-1"}, "k2": {"pump", "cord-1"}, "k3": {"pump"}, "k4": {"pump"},
        "k5": {"pump", "cord-2"}, "k6": set(),
    }  # fmt: skip


def test_as_left_in_another_state_than_the_events_is_no_pass_unless_the_method_needs_no_state() -> (
    None
):
    assert verdict(check(stage="as_left", state=["on"])).state == "valid_pass"
    assert verdict(check(stage="as_left", state=["standby"])).state == "invalid_pass"
    off_the_mains = check(stage="as_left", state=["unplugged"], method="alternative", supply=None)
    assert verdict(off_the_mains).state == "valid_pass"


def test_a_stated_fail_with_an_open_reading_still_names_its_limit() -> None:
    found = verdict(check(value="<5 mA", result="fail"))
    assert found.state == "valid_fail"
    assert found.limit is not None and all(
        c.margin is None for j in found.judgements for c in j.comparisons
    )
