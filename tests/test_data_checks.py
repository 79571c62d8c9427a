"""data/checks.yaml: what makes a valid result, and what must pass before an item leaves hold."""

import re

import numpy as np
import pytest

from triage import words as w
from triage.quantity import parse
from triage.tables import table

ROWS = {row["id"]: row for row in table("checks")["checks"]}
MANDATORY = table("checks")["mandatory"]
REFUSED = {row["kind"]: row["reason"] for row in table("checks")["cannot_be_released_here"]}
KINDS = tuple(w.ITEM_KIND)

# Faults that a good-looking item can hide: a set must hold a check that shows each of them.
FAULT_SHOWN_BY = {
    "open earth": {"earth_continuity", "earth_in_place"},
    "insulation": {"insulation_resistance", "touch_current"},
    "supply": {"outlet_test", "isolated_alarm_test"},
}
POWER_OFF = re.compile(r"\b(unplug|isolate|switch off|withdraw|power off|disconnect|turn off)\b")


def demanded(kind: str, supply: str, contact: str) -> set[str]:
    """The union that the table prescribes, written here apart from the program's own loader."""

    def matches(words: list[str], word: str) -> bool:
        return word == "unknown" or "any" in words or word in words

    return {
        check
        for row in MANDATORY
        if kind in row["kinds"]
        and matches(row["supplies"], supply)
        and matches(row["contacts"], contact)
        for check in row["checks"]
    }


def chassis_current(fault: float, to_earth: tuple[float, float], line_earthed: bool) -> float:
    """Current in A through 1 kohm from a case with open earth; line 1 leaks to it through `fault`.

    Two nodes (line 2 as reference, unknown line 1 is 120 V above it): earth and case.
    Source: nodal analysis, Kirchhoff; 120 V, 60 Hz; to_earth = capacitances of lines 1 and 2.
    """
    omega, volts = 2 * np.pi * 60, 120.0
    y1, y2 = (1j * omega * c for c in to_earth)
    if line_earthed:
        y2 = 1e9
    meter, leak = 1 / 1000.0, 1 / fault
    matrix = np.array([[y1 + y2 + meter, -meter], [-meter, meter + leak]])
    earth, case = np.linalg.solve(matrix, np.array([y1 * volts, leak * volts]))
    return float(abs(case - earth) * meter)


def test_the_order_is_the_fixed_safety_order_without_gaps() -> None:
    # Looking and reading what fades come first, live readings before the plug moves, static last.
    assert [row["order"] for row in ROWS.values()] == list(range(1, len(ROWS) + 1))
    position = {name: row["order"] for name, row in ROWS.items()}
    assert position["visual_inspection"] < position["metal_voltage_loaded"]
    assert position["earth_in_place"] < position["earth_continuity"] < position["touch_current"]
    assert position["two_metal_voltage"] < position["object_to_ground"]


def test_a_leakage_reading_from_an_isolated_outlet_hides_a_deadly_fault() -> None:
    # Check values: 60 mA on earthed mains, 226 uA on a quiet isolated system, hard fault of 1 kohm.
    quiet = (5e-9, 5e-9)
    assert chassis_current(1000, quiet, line_earthed=True) == pytest.approx(60e-3, rel=0.005)
    assert chassis_current(1000, quiet, line_earthed=False) == pytest.approx(226.2e-6, rel=0.005)


@pytest.mark.parametrize("check", ["touch_current", "applied_part_leakage"])
def test_mains_leakage_counts_only_from_an_earthed_supply_or_the_testers_own(check: str) -> None:
    for way in ROWS[check]["accepts"]:
        assert set(way["supply"]) <= {"earthed", "own_source"}, way["method"]


def test_outlet_tests_and_isolated_tests_count_only_on_their_own_supply() -> None:
    assert all(way["supply"] == ["earthed"] for way in ROWS["outlet_test"]["accepts"])
    for check in ("isolated_line_voltages", "isolated_alarm_test", "plug_step_test", "monitor_log"):
        assert all(way["supply"] == ["isolated"] for way in ROWS[check]["accepts"]), check


def test_earth_continuity_counts_from_any_supply() -> None:
    assert all(way["supply"] == ["any"] for way in ROWS["earth_continuity"]["accepts"])


@pytest.mark.parametrize("check", ["earth_continuity", "earth_in_place", "outlet_test"])
def test_an_open_earth_is_a_possible_reading_and_exactly_zero_is_not(check: str) -> None:
    low, high = (parse(text, "resistance").value for text in ROWS[check]["range"])
    assert low > 0
    assert high >= parse("100 Mohm", "resistance").value


@pytest.mark.parametrize("row", ROWS.values(), ids=ROWS)
def test_every_row_has_a_range_of_its_quantity_and_a_wider_possible_one(row: dict) -> None:
    possible = [parse(text, row["quantity"]).value for text in row["range"]]
    usual = [parse(text, row["quantity"]).value for text in row["usual"]]
    if row["quantity"] == "none":
        assert possible == usual == []
    else:
        assert possible[0] <= usual[0] < usual[1] <= possible[1]


@pytest.mark.parametrize("row", ROWS.values(), ids=ROWS)
def test_no_step_removes_power_or_asks_for_another_touch(row: dict) -> None:
    for step in [*row["how"], row["retest"]]:
        assert not POWER_OFF.search(step.lower()), step
        assert "touch it" not in step.lower() and "feel" not in step.lower(), step


def test_live_and_panel_work_is_never_for_any_staff() -> None:
    # 29 CFR 1910.333: work on or near exposed live parts is for qualified persons.
    assert all(r["performer"] != "any_staff" for r in ROWS.values() if r["circuit"] == "live")


def test_what_puts_current_into_a_circuit_is_done_without_the_patient() -> None:
    for check in ("earth_in_place", "outlet_test", "isolated_alarm_test", "insulation_resistance"):
        assert ROWS[check]["patient_absent"] is True, check


def test_the_alarm_test_resistor_draws_the_alarm_current_at_any_voltage() -> None:
    # NFPA 99-1999 3-3.3.4.2: 200 ohm for each volt; NEC 2017 517.160(B)(1): alarm at 5 mA.
    low, high = (parse(text, "current").value for text in ROWS["isolated_alarm_test"]["usual"])
    for volts in (120.0, 208.0, 240.0):
        assert volts / (200 * volts) == pytest.approx(5e-3)
    assert low < 5e-3 < high


@pytest.mark.parametrize("kind", KINDS)
def test_every_kind_of_item_has_a_set_or_a_reason_why_not(kind: str) -> None:
    has_set = bool(demanded(kind, "unknown", "unknown"))
    assert has_set != bool(REFUSED.get(kind))


@pytest.mark.parametrize("kind", [kind for kind in KINDS if kind not in REFUSED])
def test_not_knowing_supply_or_contact_never_shortens_the_set(kind: str) -> None:
    for supply in ("earthed", "isolated", "none"):
        for contact in ("plain", "wet", "two_metal"):
            known = demanded(kind, supply, contact)
            assert known, (supply, contact)
            assert known >= demanded(kind, supply, "plain")
            assert known <= demanded(kind, "unknown", contact)
            assert known <= demanded(kind, supply, "unknown")


@pytest.mark.parametrize(
    "kind", ["device_mains", "electrosurgical_unit", "stimulator_defibrillator"]
)
@pytest.mark.parametrize("supply", ["earthed", "isolated"])
@pytest.mark.parametrize("contact", ["plain", "wet", "two_metal"])
def test_each_fault_of_a_mains_device_fails_a_member_of_its_set(
    kind: str, supply: str, contact: str
) -> None:
    found = demanded(kind, supply, contact)
    for fault, checks in FAULT_SHOWN_BY.items():
        assert found & checks, fault
    assert {"visual_inspection", "metal_voltage_loaded"} <= found


@pytest.mark.parametrize("kind", ["cart", "bed", "table", "pole", "stand"])
def test_furniture_on_a_supply_is_tested_as_a_mains_device(kind: str) -> None:
    for supply in ("earthed", "isolated"):
        assert demanded(kind, supply, "plain") >= demanded("device_mains", supply, "plain")


def test_an_unpowered_cart_needs_its_metal_measured_and_its_hidden_supply_sought() -> None:
    found = demanded("cart", "none", "plain")
    assert found == {"visual_inspection", "metal_voltage_loaded", "object_to_ground"}


@pytest.mark.parametrize("kind", KINDS)
def test_two_metals_are_measured_against_each_other(kind: str) -> None:
    if kind not in REFUSED:
        assert "two_metal_voltage" in demanded(kind, "none", "two_metal")


def test_a_demanded_check_applies_to_every_kind_it_is_demanded_of() -> None:
    for row in MANDATORY:
        for check in row["checks"]:
            missing = set(row["kinds"]) - set(ROWS[check]["applies_to"])
            assert not missing, (row["id"], check, missing)
