"""Rooms on isolated and earthed supplies against independent solutions of the same circuits.

Expected values: NumPy nodal analysis and ngspice 39 of the listed circuits; tolerance 0.5 %.
"""

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from triage.errors import InvalidValue
from triage.physics.supply_circuit import (
    Device,
    Leak,
    Link,
    Person,
    Room,
    Supply,
    chassis_spark,
    monitor_view,
    thevenin,
    touch,
    voltages,
    without,
    without_earth,
)
from triage.physics.touch_current import Mains

US = Mains(120, 60)
EU = Mains(230, 50)
GOOD = Leak(None, 2.2e-9)


def nano(farads: float, ohms: float | None = None) -> Leak:
    return Leak(ohms, farads * 1e-9)


def isolated(*leaks: Leak, mains: Mains = US, phases: int = 1) -> Supply:
    return Supply(mains=mains, isolated=True, leaks=leaks, phases=phases)


def earthed(mains: Mains = US, neutral: float | None = 0.1) -> Supply:
    return Supply(mains=mains, isolated=False, neutral=neutral)


def milliamperes(room: Room, first: str, second: str = "earth", ohms: complex = 1000) -> float:
    return touch(room, Person(first, second, ohms))[0] * 1e3


@pytest.mark.parametrize(
    ("leaks", "total", "volts"),
    [
        ((nano(44.2097), nano(44.2097)), 2.000, (60, 60)),
        ((nano(10), nano(10, 50e3)), 2.442, (114.26, 21.17)),
        ((nano(10), nano(10, 24e3)), 5.020, (118.57, 10.68)),
        ((nano(10), nano(30)), 1.3572, (90.0, 30.0)),
        ((nano(0, 100e3), nano(26.53)), 1.2002, (84.85, 84.85)),
    ],
)
def test_what_the_hazard_current_monitor_and_a_voltmeter_show(leaks, total, volts):
    view = monitor_view(Room(supply=isolated(*leaks)))
    assert view.total * 1e3 == pytest.approx(total, rel=0.005)
    assert view.line_voltages == pytest.approx(volts, rel=0.005)


def test_a_person_on_one_line_lifts_the_other():
    room = Room(supply=isolated(nano(44.2097), nano(44.2097)))
    assert milliamperes(room, "L1") == pytest.approx(1.9989, rel=0.005)
    found = voltages(room, Person("L1", "earth", 1000))
    assert abs(found["L2"]) == pytest.approx(119.95, rel=0.005)


@pytest.mark.parametrize(
    ("mains", "leaks", "expected"),
    [
        (US, (nano(10), nano(10, 50e3)), 2.3943),
        (US, (nano(10), nano(10, 1e3)), 60.00),
        (US, (Leak(24e3), Leak(24e3)), 4.6154),
        (EU, (nano(2), nano(2, 50e3)), 4.512),
        (EU, (nano(2), nano(2)), 0.1445),
    ],
)
def test_a_person_of_one_kilohm_on_line_one(mains, leaks, expected):
    room = Room(supply=isolated(*leaks, mains=mains))
    assert milliamperes(room, "L1") == pytest.approx(expected, rel=0.005)


def test_line_to_line_only_the_body_limits_and_the_monitor_reads_as_before():
    room = Room(supply=isolated(nano(5), nano(5)))
    assert milliamperes(room, "L1", "L2") == pytest.approx(120)
    assert milliamperes(room, "L1", "L2") > 100 * monitor_view(room).total * 1e3


def test_a_voltmeter_on_a_quiet_system_shifts_it():
    room = Room(supply=isolated(nano(1), nano(1)))
    found = voltages(room, Person("L1", "earth", 10e6))
    assert abs(found["L1"]) == pytest.approx(59.48, rel=0.005)
    assert abs(found["L2"]) == pytest.approx(61.54, rel=0.005)


def test_a_low_impedance_meter_collapses_a_phantom_voltage():
    room = Room(supply=isolated(nano(10), nano(10)))
    found = voltages(room, Person("L1", "earth", 3000))
    assert abs(found["L1"]) == pytest.approx(1.357, rel=0.005)
    assert abs(found["L2"]) == pytest.approx(119.98, rel=0.005)


def ten_devices() -> Room:
    devices = tuple(Device(name=f"d{k}", filters=(GOOD, GOOD)) for k in range(10))
    return Room(supply=isolated(nano(10), nano(10)), devices=devices)


def test_the_reading_of_ten_devices_and_with_one_earth_open():
    room = ten_devices()
    assert monitor_view(room).total * 1e3 == pytest.approx(1.4476, rel=0.005)
    opened = monitor_view(without_earth(room, "d3")).total
    assert opened * 1e3 == pytest.approx(1.3481, rel=0.005)
    assert opened == pytest.approx(monitor_view(without(room, "d3")).total, rel=1e-6)


def test_a_hard_fault_behind_an_open_earth_stays_invisible_until_somebody_touches():
    room = ten_devices()
    faulty = Device(name="bad", filters=(Leak(1e-3), Leak()), earth=None)
    with_fault = Room(supply=room.supply, devices=(*room.devices, faulty))
    before, after = monitor_view(room), monitor_view(with_fault)
    assert after.total == pytest.approx(before.total, rel=1e-3)
    assert milliamperes(with_fault, "bad") == pytest.approx(1.446, rel=0.005)


def test_the_resistance_kind_of_monitor_is_blind_to_capacitance():
    quiet = monitor_view(Room(supply=isolated(nano(0, 1e6), nano(0, 1e6))))
    loaded = monitor_view(Room(supply=isolated(nano(100, 1e6), nano(100, 1e6))))
    assert quiet.insulation == loaded.insulation == pytest.approx(500e3)
    assert loaded.total > 8 * quiet.total
    assert monitor_view(Room(supply=isolated(nano(5), nano(5)))).insulation == float("inf")


@pytest.mark.parametrize(
    ("mains", "leak", "neutral", "load", "expected"),
    [
        (US, GOOD, 0.1, None, 99.53),
        (EU, nano(4.7), 0.1, None, 339.6),
        (US, GOOD, None, 100.0, 199.1),
    ],
)
def test_open_earth_on_an_earthed_supply(mains, leak, neutral, load, expected):
    device = Device(name="pump", filters=(leak, leak), earth=None, load=load)
    room = Room(supply=earthed(mains, neutral), devices=(device,))
    assert milliamperes(room, "pump") * 1e3 == pytest.approx(expected, rel=0.005)


@pytest.mark.parametrize(
    ("filters", "leaks", "expected"),
    [
        ((GOOD, GOOD), (nano(10), nano(10)), 0.0),
        ((nano(4.7), Leak()), (nano(20), nano(20)), 95.1),
        ((GOOD, GOOD), (nano(10), nano(10, 1.0)), 99.53),
    ],
)
def test_open_earth_on_an_isolated_supply(filters, leaks, expected):
    device = Device(name="pump", filters=filters, earth=None)
    room = Room(supply=isolated(*leaks), devices=(device,))
    found = milliamperes(room, "pump") * 1e3
    assert found == pytest.approx(expected, rel=0.005, abs=1e-6)


def test_the_spark_of_a_floating_chassis():
    room = Room(
        supply=earthed(EU), devices=(Device(name="pump", filters=(GOOD, GOOD), earth=None),)
    )
    spark = chassis_spark(room, "pump")
    assert spark.charge * 1e6 == pytest.approx(0.716, rel=0.005)
    assert spark.energy * 1e6 == pytest.approx(58.2, rel=0.005)


# Touch current read through 1 kohm with the earth open [uA], by supply of the outlet.
SUPPLIES = {
    "earthed": earthed(),
    "quiet": isolated(nano(5), nano(5)),
    "loaded": isolated(nano(44.2097), nano(44.2097)),
    "unbalanced": isolated(nano(10), nano(30)),
    "fault_50k": isolated(nano(10), nano(10, 50e3)),
}
UNDER_TEST = {
    "good": (GOOD, GOOD),
    "line_1_only": (nano(4.7), Leak()),
    "line_2_only": (Leak(), nano(4.7)),
    "bad_100k": (Leak(100e3), Leak()),
    "lethal_1k": (Leak(1e3), Leak()),
}
READINGS = [
    ("good", [99.5, 0.0, 0.0, 44.8, 90.4]),
    ("line_1_only", [212.6, 72.3, 100.9, 142.7, 196.1]),
    ("line_2_only", [0.0, 72.3, 100.9, 47.6, 36.3]),
    ("bad_100k", [1188, 211, 570, 745, 784]),
    ("lethal_1k", [60000, 226, 1996, 1357, 2348]),
]


@pytest.mark.parametrize(
    ("device", "supply", "expected"),
    [(d, s, e) for d, row in READINGS for s, e in zip(SUPPLIES, row, strict=True)],
)
def test_device_tests_from_an_isolated_outlet_mislead(device, supply, expected):
    item = Device(name="item", filters=UNDER_TEST[device], earth=None)
    room = Room(supply=SUPPLIES[supply], devices=(item,))
    assert milliamperes(room, "item") * 1e3 == pytest.approx(expected, rel=0.005, abs=0.05)


def test_a_lethal_fault_passes_five_hundred_microamperes_on_a_quiet_isolated_outlet():
    item = Device(name="item", filters=UNDER_TEST["lethal_1k"], earth=None)
    quiet = milliamperes(Room(supply=SUPPLIES["quiet"], devices=(item,)), "item")
    solid = milliamperes(Room(supply=SUPPLIES["earthed"], devices=(item,)), "item")
    assert quiet < 0.5 < 50 < solid


def test_earth_leakage_of_a_lethal_fault_is_distorted_alike():
    item = Device(name="item", filters=UNDER_TEST["lethal_1k"], earth=None)
    solid = milliamperes(Room(supply=SUPPLIES["earthed"], devices=(item,)), "item", ohms=0.1)
    quiet = milliamperes(Room(supply=SUPPLIES["quiet"], devices=(item,)), "item", ohms=0.1)
    assert solid * 1e3 == pytest.approx(119988, rel=0.005)
    assert quiet * 1e3 == pytest.approx(226, rel=0.005)


def test_a_strip_that_lost_its_earth_adds_all_leakages_on_every_frame():
    filters = (nano(2.21), Leak())  # 100 uA each at 120 V 60 Hz
    devices = tuple(Device(name=f"d{k}", filters=filters, earth_to="strip") for k in range(10))
    room = Room(supply=earthed(), devices=devices)
    assert milliamperes(room, "d0") == pytest.approx(1.0, rel=0.01)
    assert milliamperes(room, "d9") == pytest.approx(milliamperes(room, "d0"), rel=1e-6)


def test_two_hands_between_two_earthed_items():
    pump = Device(name="pump", filters=(Leak(24e3), Leak()), earth=10.0)  # 5 mA in 10 ohm
    rail = Link("rail", "earth", Leak(0.1))
    room = Room(supply=earthed(), devices=(pump,), links=(rail,))
    assert milliamperes(room, "pump", "rail") * 1e3 == pytest.approx(
        5e-3 * 10 / 1e3 * 1e6, rel=0.02
    )


def test_a_line_swapped_with_the_earth():
    room = Room(supply=earthed(), devices=(Device(name="pump", earth=0.1, earth_to="L1"),))
    assert milliamperes(room, "pump") == pytest.approx(120, rel=0.005)


def test_two_people_at_once_share_what_the_leakage_gives():
    room = Room(supply=isolated(nano(44.2097), nano(44.2097)))
    both = touch(room, Person("L1", "earth", 1000), Person("L1", "earth", 1000))
    assert sum(both) == pytest.approx(2e-3, rel=0.005)
    opposite = touch(room, Person("L1", "earth", 1000), Person("L2", "earth", 1000))
    assert opposite[0] * 1e3 == pytest.approx(60, rel=0.005)


def test_touching_with_no_resistance_gives_the_hazard_current():
    room = Room(supply=isolated(nano(10), nano(10, 50e3)))
    assert milliamperes(room, "L1", ohms=0) == pytest.approx(2.442, rel=0.005)


def test_a_supply_without_any_leakage_drives_nothing_through_one_line():
    assert milliamperes(Room(supply=isolated()), "L1") == pytest.approx(0, abs=1e-12)


def test_three_balanced_phases_stand_at_the_star_voltage():
    room = Room(supply=isolated(*[nano(10)] * 3, mains=Mains(208, 60), phases=3))
    view = monitor_view(room)
    star = 208 / 3**0.5
    assert view.line_voltages == pytest.approx((star, star, star))
    # shorting one line: sum of two line voltages over their leakages, 3 x w C x star
    assert view.total == pytest.approx(3 * 376.99 * 10e-9 * star, rel=1e-4)


def test_an_earthed_three_phase_supply_has_its_phases_in_the_right_places():
    room = Room(
        supply=Supply(mains=EU, isolated=False, phases=3),
        devices=(Device(name="x", filters=(GOOD, GOOD, GOOD), earth=None),),
    )
    found = voltages(room)
    assert abs(found["L1"] - found["L2"]) == pytest.approx(230 * 3**0.5)
    assert abs(found["x"]) < 1e-9  # equal filters of three phases cancel


def test_the_thevenin_source_predicts_every_person():
    room = Room(supply=isolated(nano(10), nano(10, 50e3)))
    source = thevenin(room, "L1")
    for ohms in (200, 1000, 50e3):
        assert source.current(ohms) * 1e3 == pytest.approx(milliamperes(room, "L1", ohms=ohms))
    assert thevenin(Room(supply=earthed()), "L1").impedance == 0


@pytest.mark.parametrize("nodes", [("L3", "earth"), ("L1", "erth"), ("pmup", "earth")])
def test_a_person_at_a_node_the_room_does_not_have_is_refused_not_zero(nodes):
    with pytest.raises(InvalidValue, match="no node"):
        touch(Room(supply=isolated(nano(1), nano(1))), Person(*nodes, 1000))


def test_what_no_supply_is_gets_refused():
    with pytest.raises(InvalidValue):
        Supply(mains=US, isolated=True, phases=2)
    with pytest.raises(InvalidValue):
        isolated(GOOD, GOOD, GOOD)
    with pytest.raises(InvalidValue, match="isolated"):
        monitor_view(Room(supply=earthed()))
    with pytest.raises(InvalidValue, match="neutral"):
        earthed(neutral=0)


@pytest.mark.parametrize(
    "make",
    [
        lambda: Leak(0),
        lambda: Leak(-1, 1e-9),
        lambda: Leak(None, -1e-9),
        lambda: Leak(None, float("nan")),
        lambda: Device(name="x", earth=0),
        lambda: Device(name="x", load=-5),
        lambda: Room(supply=earthed(), devices=(Device(name="x"), Device(name="x"))),
        lambda: Room(supply=earthed(), devices=(Device(name="L1"),)),
    ],
)
def test_what_no_leak_or_conductor_is_gets_refused(make):
    with pytest.raises(InvalidValue):
        make()


leak = st.builds(Leak, st.one_of(st.none(), st.floats(1e3, 1e8)), st.floats(1e-12, 1e-6))
device = st.lists(st.tuples(leak, leak), max_size=4).map(
    lambda found: tuple(Device(name=f"d{k}", filters=pair) for k, pair in enumerate(found))
)
rooms = st.builds(
    lambda one, two, devices: Room(supply=isolated(one, two), devices=devices), leak, leak, device
)


@settings(max_examples=150)
@given(rooms, st.sampled_from(["L1", "L2"]), st.floats(1, 1e6), st.floats(0, 1e6))
def test_no_body_current_exceeds_the_hazard_current_of_its_line(room, line, ohms, reactance):
    view = monitor_view(room)
    hazard = view.hazard_currents[("L1", "L2").index(line)]
    body = touch(room, Person(line, "earth", complex(ohms, -reactance)))[0]
    assert body <= hazard * (1 + 1e-9) <= view.total * (1 + 1e-9)


@settings(max_examples=60)
@given(leak, leak, leak, st.sampled_from(["L1", "L2", "L3"]), st.floats(1, 1e6))
def test_the_same_holds_for_each_line_of_three_phases(one, two, three, line, ohms):
    room = Room(supply=isolated(one, two, three, phases=3))
    hazard = monitor_view(room).hazard_currents[("L1", "L2", "L3").index(line)]
    assert touch(room, Person(line, "earth", ohms))[0] <= hazard * (1 + 1e-9)


@settings(max_examples=100)
@given(rooms.filter(lambda room: room.devices))
def test_opening_a_device_earth_never_raises_the_reading(room):
    before = monitor_view(room)
    after = monitor_view(without_earth(room, "d0"))
    # An earth conductor of 0.1 ohm instead of none moves the phase by at most 1e-4.
    assert after.total <= before.total * (1 + 1e-3)
    assert after.insulation >= before.insulation * (1 - 1e-3)


@settings(max_examples=100)
@given(leak, leak, leak, st.sampled_from([0, 1]))
def test_adding_leakage_never_lowers_the_reading(one, two, extra, line):
    room = Room(supply=isolated(one, two))
    more = Room(supply=room.supply, links=(Link(f"L{line + 1}", "earth", extra),))
    assert monitor_view(more).total >= monitor_view(room).total * (1 - 1e-9)
