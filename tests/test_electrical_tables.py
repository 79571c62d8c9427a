"""What monitors see, checked by solving each condition, and the table of other sources."""

import pytest

from triage.electrical_tables import SEEN, monitor_tables, other_sources, sees
from triage.errors import InvalidValue
from triage.physics.supply_circuit import Device, Leak, Link, Room, Supply, monitor_view
from triage.physics.touch_current import Mains

HEALTHY = Leak(1e6, 10e-9)
FILTER = Leak(None, 2.2e-9)


def room(first: Leak = HEALTHY, second: Leak = HEALTHY, *devices: Device) -> Room:
    supply = Supply(mains=Mains(120, 60), isolated=True, leaks=(first, second))
    return Room(supply=supply, devices=devices)


# Condition -> the room before and with it. A bridge sees a change of the two line voltages.
CONDITIONS = {
    "resistive_one_line": (room(), room(Leak(20e3, 10e-9))),
    "balanced_leakage": (room(), room(Leak(1e6, 100e-9), Leak(1e6, 100e-9))),
    "capacitive_leak": (room(), room(Leak(1e6, 100e-9))),
    "fault_earth_intact": (
        room(HEALTHY, HEALTHY, Device(name="x", filters=(FILTER, FILTER))),
        room(HEALTHY, HEALTHY, Device(name="x", filters=(Leak(1.0), FILTER))),
    ),
    "fault_earth_open": (
        room(HEALTHY, HEALTHY, Device(name="x", filters=(FILTER, FILTER), earth=None)),
        room(HEALTHY, HEALTHY, Device(name="x", filters=(Leak(1.0), FILTER), earth=None)),
    ),
    "earth_open": (
        room(HEALTHY, HEALTHY, Device(name="x", filters=(FILTER, FILTER))),
        room(HEALTHY, HEALTHY, Device(name="x", filters=(FILTER, FILTER), earth=None)),
    ),
    "line_to_line": (
        room(),
        Room(supply=room().supply, links=(Link("L1", "L2", Leak(1000.0)),)),
    ),
}


@pytest.mark.parametrize("condition", CONDITIONS)
def test_the_table_says_what_the_circuit_says(condition):
    before, after = (monitor_view(each) for each in CONDITIONS[condition])
    row = next(each for each in monitor_tables().sight if each.id == condition)
    assert (after.total > 1.2 * before.total) == (row.hazard == "yes")
    if row.resistance != "partly":
        assert (after.insulation < 0.8 * before.insulation) == (row.resistance == "yes")
    if row.balance != "partly":
        shift = abs(after.line_voltages[0] - before.line_voltages[0])
        assert (shift > 12) == (row.balance == "yes")


def test_partly_never_counts_as_seen():
    partly = [each for each in monitor_tables().sight if each.hazard == "partly"]
    assert partly and not any(sees(each.id, "hazard") for each in partly)


def test_no_kind_of_monitor_sees_an_open_earth_or_a_line_to_line_contact():
    for condition in ("earth_open", "fault_earth_open", "line_to_line", "other_supply"):
        assert not any(sees(condition, kind) for kind in ("hazard", "resistance", "balance"))


@pytest.mark.parametrize(("condition", "monitor"), [("nothing", "hazard"), ("earth_open", "x")])
def test_an_unknown_condition_or_monitor_is_refused(condition, monitor):
    with pytest.raises(InvalidValue):
        sees(condition, monitor)


def test_every_word_of_the_table_is_a_known_one():
    for row in monitor_tables().sight:
        assert {row.hazard, row.resistance, row.balance} <= set(SEEN)


def test_every_reason_that_voids_a_ceiling_has_a_question_that_finds_it():
    assert len(monitor_tables().void) >= 8
    assert all(each.question.endswith("?") and each.reason for each in monitor_tables().void)


def test_no_leakage_test_from_an_isolated_outlet_is_valid_but_the_alternative_one():
    worth = {each.id: each.worth for each in monitor_tables().outlet_tests}
    for each in ("earth_leakage_direct", "touch_current", "differential", "applied_part_direct"):
        assert worth[each] == "invalid"
    for each in ("alternative", "earth_resistance", "insulation"):
        assert worth[each] == "valid"


def test_every_other_source_has_its_moment_question_and_both_proofs():
    assert {"electrosurgery", "defibrillator", "stimulator", "plug_pins", "lightning"} <= {
        each.id for each in other_sources()
    }
    assert all(each.question.endswith("?") for each in other_sources())


def test_asking_before_unplugging_comes_before_the_first_unplugging():
    steps = monitor_tables().response
    asks = next(k for k, step in enumerate(steps) if "depends" in step)
    unplugs = next(k for k, step in enumerate(steps) if step.startswith("Otherwise unplug"))
    assert asks < unplugs
