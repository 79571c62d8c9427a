"""Each contact of a record under each mains cause: current, most, zone, sight."""

from typing import Any

import pytest
from random_records import record
from sample_records import spoiled

from triage.assessment import assess
from triage.electrical_contacts import ContactExposure, contact_exposures, degraded_earth
from triage.electrical_exposure import ELECTRICAL_CAUSES, ElectricalStory
from triage.site import no_site

ISOLATED = {
    "supply.kind": "isolated", "supply.changed_since": "no", "supply.read_at": "2026-01-14 08:00",
    "supply.alarm": "no", "items.0.supply": "isolated", "supply.current_reading": "2.0 mA",
}  # fmt: skip


def exposures(changes: dict[str, Any]) -> tuple[ContactExposure, ...]:
    a = assess(record(spoiled(changes)), no_site())
    return contact_exposures(a.incident, a.site, a.exposure.conditions, a.verdicts)


def rows(changes: dict[str, Any]) -> dict[str, Any]:
    return {row.exposure.cause: row for row in exposures(changes)[0].causes}


def test_every_cause_stands_in_every_contact_with_an_estimate_or_a_reason() -> None:
    for changes in ({}, ISOLATED, {"contacts": []}, {"supply": {}}):
        for each in exposures(changes):
            named = {r.exposure.cause for r in each.causes} | {c for c, _ in each.unknown}
            assert named == set(ELECTRICAL_CAUSES)


@pytest.mark.parametrize("cause", ["live_cord", "insulation_fault", "moisture", "outlet_wiring",
                                   "open_earth", "isolated_first_fault"])  # fmt: skip
def test_the_reading_bounds_every_cause_that_one_line_feeds(cause: str) -> None:
    row = rows(ISOLATED)[cause]
    assert row.most == pytest.approx(2.2e-3) and row.rests_on == "monitor"
    assert row.worst <= row.most


@pytest.mark.parametrize("cause", ["isolated_line_to_line", "earth_difference"])
def test_the_reading_bounds_nothing_between_two_lines_or_two_metals(cause: str) -> None:
    row = rows(ISOLATED)[cause]
    assert row.monitor is None and row.most == pytest.approx(0.46)


def test_a_void_reading_bounds_nothing_and_the_supply_does() -> None:
    row = rows(ISOLATED | {"supply.changed_since": "yes"})["live_cord"]
    assert row.monitor is not None and not row.monitor.holds
    assert row.most == pytest.approx(0.46) and row.rests_on == "supply"


def test_two_metals_are_bounded_by_the_voltage_measured_between_them() -> None:
    check = {"id": "k2", "kind": "two_metal_voltage", "of": "pump", "second": "w3-1",
             "method": "loaded_1kohm", "supply": "earthed", "stage": "as_found",
             "same_cord": "yes", "state": ["on"], "value": "40 mV", "result": "pass",
             "instrument": "meter 1", "calibration_due": "2026-09-01", "by": "technician",
             "at": "2026-01-14 10:00"}  # fmt: skip
    row = rows({"checks": [check]})["earth_difference"]
    assert row.most == pytest.approx(80e-6)  # 40 mV over 500 ohm: 80 uA, the usual worked figure
    assert row.rests_on == "measured_voltage"


def test_contacts_are_judged_one_by_one() -> None:
    wet = {"id": "c2", "person": "p1", "items": ["w3-1"], "moisture": "wet",
           "also_touching": "earthed_metal"}  # fmt: skip
    dry = {"id": "c1", "person": "p1", "items": ["pump"], "moisture": "dry", "touch": "point",
           "body_part": "fingertip", "covering": "bare", "also_touching": "nothing"}  # fmt: skip
    first, second = exposures({"contacts": [dry, wet]})
    assert (first.story.moisture, second.story.moisture) == ("dry", "saltwater")
    assert (first.story.area, second.story.area) == ("small", None)
    assert first.story.series is not None and second.story.series is None
    assert first.body.median > second.body.median


def test_a_longer_contact_never_has_a_milder_zone() -> None:
    order = ["AC-1", "AC-2", "AC-3", "AC-4"]
    found = [rows({"statements.0.duration": w}) for w in ("instant", "about_a_second", "longer")]
    for cause in found[0]:
        zones = [order.index(each[cause].zone) for each in found]
        assert zones == sorted(zones)


def test_only_an_isolated_supply_has_a_monitor_to_see_anything() -> None:
    assert not any(row.sight for row in rows({}).values())
    seen = {s.id for s in rows(ISOLATED)["open_earth"].sight}
    assert seen == {"earth_open"}
    assert all(row.sight for row in rows(ISOLATED).values())


def test_leakage_drops_along_a_poor_earth_by_its_share_of_the_loop() -> None:
    told = ElectricalStory(25.0, 50.0, moisture="dry", touch_current=0.5e-3)
    by_hand = 0.5e-3 * 1000 / (1000 + 3250)  # 3250 ohm: IEC/TS 60479-1 table 1 at 25 V
    assert degraded_earth(told, 1000.0).median == pytest.approx(by_hand)
