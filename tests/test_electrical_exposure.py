"""Touch currents of the mains causes, from the circumstances and through the record.

Figures: closed forms of IEC 60601-1 8.7.3 (open earth) and of the isolated supply, checked in
tests/published/electrical.yaml against two circuit solvers; here they must come out of a record.
"""

import math
import random
from typing import Any

import pytest
from random_records import record
from sample_records import spoiled

from triage.assessment import Assessment, assess
from triage.electrical_exposure import (
    ELECTRICAL_CAUSES,
    ElectricalExposure,
    ElectricalStory,
    chassis_spark,
    direct_ceiling,
    felt_chance,
    touch_current,
)
from triage.knowledge import knowledge
from triage.physics.supply_circuit import (
    Device,
    Leak,
    Link,
    Room,
    Supply,
    monitor_view,
    without_earth,
)
from triage.physics.touch_current import Mains
from triage.site import no_site

PLAIN = ElectricalStory(230.0, 50.0, moisture="dry")
ISOLATED = {
    "supply.kind": "isolated", "supply.changed_since": "no", "supply.read_at": "2026-01-14 08:00",
    "supply.alarm": "no", "items.0.supply": "isolated",
    "supply.monitor": "total_hazard_current",
}  # fmt: skip


def judged(changes: dict[str, Any]) -> Assessment:
    return assess(record(spoiled(changes)), no_site())


def isolated(**supply: str) -> Assessment:
    return judged(ISOLATED | {f"supply.{name}": value for name, value in supply.items()})


@pytest.mark.parametrize(("volts", "hertz", "kind", "microamps"), [
    ("230 V", "50 Hz", "device_mains", 158.96), ("120 V", "60 Hz", "device_mains", 99.53),
    ("230 V", "50 Hz", "adapter_strip", 339.6), ("120 V", "60 Hz", "adapter_strip", 212.6),
])  # fmt: skip
def test_an_open_earth_of_a_record_drives_what_its_ordinary_filter_lets_through(
    volts: str, hertz: str, kind: str, microamps: float
) -> None:
    found = judged({"supply.voltage": volts, "supply.frequency": hertz, "items.0.kind": kind,
                    "surroundings.footwear": None})  # fmt: skip
    each = found.exposure.causes["open_earth"].electrical
    assert each is not None
    assert each.current.median * 1e6 == pytest.approx(microamps, rel=0.005)


def test_a_touch_current_measured_with_the_earth_open_replaces_the_assumed_filter() -> None:
    found = judged({"checks.0.state": ["on", "earth_open"], "checks.0.value": "300 uA"})
    each = found.exposure.causes["open_earth"].electrical
    assert each is not None and each.current.median == pytest.approx(300e-6)


@pytest.mark.parametrize(("reading", "most"), [("2.0 mA", 2.2e-3), ("0.5 mA", 0.55e-3),
                                               ("4.9 mA", 5.39e-3)])  # fmt: skip
def test_the_ceiling_of_a_record_is_its_hazard_current_and_a_tenth(
    reading: str, most: float
) -> None:
    ceiling = isolated(current_reading=reading).exposure.ceiling
    assert ceiling is not None and ceiling.holds
    assert ceiling.value == pytest.approx(most)


def test_a_monitor_in_ohms_leaves_the_capacitance_it_cannot_see() -> None:
    found = isolated(monitor="insulation_resistance", resistance_reading="1 Mohm").exposure.ceiling
    by_hand = 230 * abs(complex(1e-6, 2 * math.pi * 50 * 200e-9))
    assert found is not None and found.value == pytest.approx(by_hand, rel=1e-9)
    assert by_hand > 0.014  # a healthy megohm still allows far more than anybody lets go of


def test_adding_leakage_never_lowers_the_ceiling() -> None:
    currents = [isolated(current_reading=f"{mA} mA") for mA in (0.1, 0.5, 1, 2, 4, 5, 9)]
    ohms = [isolated(resistance_reading=f"{k} kohm", monitor="insulation_resistance")
            for k in (2000, 500, 100, 49, 5)]  # fmt: skip
    for several in (currents, ohms):
        values = [each.exposure.ceiling.value for each in several if each.exposure.ceiling]
        assert values == sorted(values) and len(values) == len(several)


def test_no_estimate_of_one_line_passes_the_reading_that_it_rests_on() -> None:
    """|Y1 + Y2 + Yb| >= |Yb| for passive admittances; the estimate stays on the safe side of it."""
    for reading in (0.2e-3, 1e-3, 2e-3, 5e-3):
        told = ElectricalStory(120.0, 60.0, moisture="dry", hazard_current=reading, isolated=True)
        current = touch_current("isolated_first_fault", told)
        assert 0.5 * reading < current.median <= reading


def test_direct_contact_is_bounded_by_the_voltage_over_the_hazard_floor() -> None:
    assert direct_ceiling(120.0) == pytest.approx(0.24)
    for cause in ("live_cord", "outlet_wiring", "moisture", "insulation_fault"):
        assert touch_current(cause, PLAIN).quantile(0.95) < direct_ceiling(230.0)


def test_the_whole_voltage_through_the_median_body_of_the_table() -> None:
    """IEC/TS 60479-1 table 1 at 120 V, linear between its rows: 918, 1585, 2765 ohm."""
    current = touch_current("live_cord", ElectricalStory(120.0, 60.0, moisture="dry"))
    assert current.median == pytest.approx(120 / 1585, rel=0.01)
    low, high = current.interval()
    # One lognormal through both ends of the table: each may be 7 % off, the upper one upwards.
    assert 120 / 918 <= high == pytest.approx(120 / 918, rel=0.07)
    assert low == pytest.approx(120 / 2765, rel=0.07)


@pytest.mark.parametrize(("told", "charge", "energy"), [
    (ElectricalStory(230.0, 50.0), 0.716e-6, 58.2e-6),
    (ElectricalStory(120.0, 60.0), 0.373e-6, 15.8e-6),
    (ElectricalStory(230.0, 50.0, medical=False), 1.53e-6, 124e-6),
])  # fmt: skip
def test_the_spark_of_a_floating_case_has_the_charge_of_its_filter(
    told: ElectricalStory, charge: float, energy: float
) -> None:
    spark = chassis_spark(told)
    assert spark.charge.median == pytest.approx(charge, rel=0.005)
    assert spark.energy.median == pytest.approx(energy, rel=0.005)
    assert spark.through_shoes is None


def test_insulating_shoes_leave_of_a_spark_only_what_the_soles_can_hold() -> None:
    spark = chassis_spark(ElectricalStory(230.0, 50.0, series=1e10))
    in_series = 4.4e-9 * 150e-12 / (4.4e-9 + 150e-12)
    assert spark.through_shoes is not None
    by_hand = in_series * math.sqrt(2) * 115
    assert spark.through_shoes.median == pytest.approx(by_hand, rel=0.01)


def test_the_chance_that_it_must_be_felt_never_passes_the_chance_that_it_could() -> None:
    for cause in ELECTRICAL_CAUSES:
        each = ElectricalExposure(cause, PLAIN)
        assert 0 <= each.must_be_felt <= each.felt.value + 1e-9


def test_one_milliampere_must_be_felt_by_about_six_in_ten() -> None:
    """Grip curve, median 0.90 mA, spread 0.35: 0.618 at 1.0 mA; a tenth of doubt widens it."""
    told = ElectricalStory(230.0, 50.0, moisture="dry", touch_current=1e-3)
    each = ElectricalExposure("open_earth", told)
    assert each.must_be_felt == pytest.approx(0.614, abs=0.002)
    assert each.felt.value > 0.9


def test_a_higher_supply_frequency_is_felt_less() -> None:
    """IEC 60990 figure 4 weighs 400 Hz lower; 50 and 60 Hz are not weighed at all."""
    told = [ElectricalStory(115.0, hertz, moisture="dry", touch_current=0.3e-3)
            for hertz in (50.0, 60.0, 400.0)]  # fmt: skip
    fifty, sixty, four_hundred = (felt_chance("open_earth", each) for each in told)
    assert fifty == pytest.approx(sixty) and four_hundred < fifty


ORDER = ("AC-1", "AC-2", "AC-3", "AC-4")


@pytest.mark.parametrize("cause", ELECTRICAL_CAUSES)
def test_the_zone_is_never_milder_with_longer_time_or_larger_current(cause: str) -> None:
    for path in ("foot_foot", "left_hand_feet", None):
        by_time = [ElectricalExposure(cause, PLAIN, t, path).zone for t in (0.05, 0.5, 2.0, None)]
        assert by_time == sorted(by_time, key=ORDER.index)
    by_volts = [
        ElectricalExposure(cause, ElectricalStory(volts, 50.0, moisture="dry")).zone
        for volts in (24.0, 115.0, 230.0, 400.0)
    ]
    assert by_volts == sorted(by_volts, key=ORDER.index)


def test_shoes_and_a_small_contact_never_make_the_worst_case_milder() -> None:
    shod = ElectricalStory(120.0, 60.0, moisture="dry", series=1e10, area="small")
    plain = ElectricalStory(120.0, 60.0, moisture="dry")
    for cause in ELECTRICAL_CAUSES:
        assert ElectricalExposure(cause, shod).worst == ElectricalExposure(cause, plain).worst
    assert touch_current("live_cord", shod).median < touch_current("live_cord", plain).median


@pytest.mark.parametrize("reading", ["0.02 mA", "0.2 mA", "1.7 mA"])
def test_a_quiet_monitor_never_removes_a_cause(reading: str) -> None:
    quiet = isolated(current_reading=reading, alarm_source="log")
    for cause in knowledge().family("mains"):
        assert quiet.posterior.of(cause) > 0
        assert quiet.exposure.causes[cause].factor >= knowledge().mains_factor[0]


@pytest.mark.parametrize("change", [{"contacts.0.moisture": None}, {"surroundings.floor": None},
                                    {"surroundings.footwear": None}, {"contacts.0.touch": None},
                                    {"contacts.0.body_part": None}])  # fmt: skip
def test_what_is_not_known_is_neutral_in_the_ranking(change: dict[str, Any]) -> None:
    told = {"supply.voltage": "120 V", "contacts.0.touch": "point", "contacts.0.body_part": "fingertip",
            "contacts.0.covering": "bare"}  # fmt: skip
    known, unknown = judged(told), judged(told | change)
    for cause in ELECTRICAL_CAUSES:
        assert unknown.exposure.causes[cause].factor == known.exposure.causes[cause].factor


def test_opening_the_earth_of_a_device_never_raises_the_reading_of_its_monitor() -> None:
    """Of two lines. Of three the leakages differ in angle, and one may have cancelled another."""
    rng = random.Random(7)
    for room in (_random_room(rng) for _ in range(500)):
        before, after = monitor_view(room), monitor_view(without_earth(room, "d0"))
        assert after.total <= before.total * (1 + 1e-9)
        assert after.insulation >= before.insulation * (1 - 1e-9)


def _random_room(rng: random.Random) -> Room:
    def leak() -> Leak:
        ohms = rng.choice((None, 10 ** rng.uniform(2, 6)))
        return Leak(ohms, 10 ** rng.uniform(-10, -7))

    mains = Mains(rng.choice((120, 230, 400)), rng.choice((50, 60)))
    supply = Supply(mains=mains, isolated=True, leaks=(leak(), leak()))
    devices = tuple(
        Device(name=f"d{n}", filters=(leak(), leak()), earth=rng.uniform(0.05, 5))
        for n in range(rng.randint(1, 4))
    )
    links = (Link("d0", "L1", Leak(10 ** rng.uniform(0, 5))),) if rng.random() < 0.5 else ()
    return Room(supply=supply, devices=devices, links=links)


def test_a_fault_to_a_case_with_its_earth_closed_is_on_the_monitor_and_gone_with_it_open() -> None:
    """The property above would be idle on rooms whose devices leak nothing."""
    healthy = Leak(None, 10e-9)
    supply = Supply(mains=Mains(230, 50), isolated=True, leaks=(healthy, healthy))
    pump = Device(name="d0", filters=(Leak(1e3, 2.2e-9), Leak(None, 2.2e-9)))
    room = Room(supply=supply, devices=(pump,))
    assert monitor_view(room).total > 0.2
    assert monitor_view(without_earth(room, "d0")).total == pytest.approx(
        230 * 2 * math.pi * 50 * 10e-9, rel=1e-3
    )
