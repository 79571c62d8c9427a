"""The same circuits in the ngspice program: ours must agree to a part in ten thousand."""

import random
import re
import shutil
import subprocess

import pytest

from triage.physics.supply_circuit import Device, Leak, Link, Person, Room, Supply, touch
from triage.physics.touch_current import Mains

PROGRAM = shutil.which("ngspice")
pytestmark = pytest.mark.skipif(PROGRAM is None, reason="the program ngspice is not installed")

US = Mains(120, 60)
EU = Mains(230, 50)
GOOD = Leak(None, 2.2e-9)


def isolated(*leaks: Leak, mains: Mains = US) -> Supply:
    return Supply(mains=mains, isolated=True, leaks=leaks)


def earthed(mains: Mains = US, neutral: float | None = 0.1) -> Supply:
    return Supply(mains=mains, isolated=False, neutral=neutral)


def netlist(room: Room, person: Person) -> str:
    """The room written out part by part, without any of our solver."""
    parts: list[str] = []

    def node(name: str) -> str:
        return "0" if name == "earth" else name

    def add(first: str, second: str, leak: Leak) -> None:
        k = len(parts)
        if leak.resistance is not None:
            parts.append(f"R{k} {node(first)} {node(second)} {leak.resistance!r}")
        if leak.capacitance:
            parts.append(f"C{k} {node(first)} {node(second)} {leak.capacitance!r}")

    supply = room.supply
    for line, leak in zip(supply.lines, supply.leaks, strict=False):
        add(line, "earth", leak)
    for k in range(supply.phases):
        ends = f"L{k + 1} L{k + 2}" if supply.isolated else f"L{k + 1} 0"
        if f"L{k + 2}" in supply.lines or not supply.isolated:
            parts.append(f"Vsupply{k} {ends} AC {supply.mains.voltage} {-120 * k}")
    if not supply.isolated and supply.neutral is not None:
        add("N", "earth", Leak(supply.neutral))
    for device in room.devices:
        for line, leak in zip(supply.lines, device.filters, strict=False):
            add(line, device.name, leak)
        if device.earth is not None:
            add(device.name, device.earth_to, Leak(device.earth))
        if device.load is not None:
            add("L1", supply.lines[1], Leak(device.load))
    for link in room.links:
        add(link.first, link.second, link.leak)
    parts.append(f"Vsense {node(person.first)} body 0")
    parts.append(f"Rbody body {node(person.second)} {person.impedance.real!r}")
    hertz = supply.mains.frequency
    # rshunt gives every node the direct-current path the program insists on.
    control = [".options rshunt=1e15", ".control", f"ac lin 1 {hertz} {hertz}",
               "print mag(i(vsense))", ".endc", ".end"]  # fmt: skip
    return "\n".join(["* room", *parts, *control]) + "\n"


def by_ngspice(room: Room, person: Person) -> float:
    done = subprocess.run(
        [PROGRAM, "-b"], input=netlist(room, person), capture_output=True, text=True, timeout=60
    )
    match = re.search(r"mag\(i\(vsense\)\)\s*=\s*(\S+)", done.stdout)
    assert match, done.stdout + done.stderr
    return float(match[1])


def open_earth(*filters: Leak, load: float | None = None) -> tuple[Device, ...]:
    return (Device(name="pump", filters=filters, earth=None, load=load),)


LINE = Person("L1", "earth", 1000)
CASE = Person("pump", "earth", 1000)
LISTED = {
    "leakage 2 mA": (Room(supply=isolated(*[Leak(None, 44.2097e-9)] * 2)), LINE),
    "leakage 2 mA, 10 kohm": (
        Room(supply=isolated(*[Leak(None, 44.2097e-9)] * 2)), Person("L1", "earth", 10e3),
    ),
    "50 kohm on the other line": (
        Room(supply=isolated(Leak(None, 10e-9), Leak(50e3, 10e-9))), LINE,
    ),
    "first fault": (Room(supply=isolated(Leak(None, 10e-9), Leak(1e3, 10e-9))), LINE),
    "resistive leakage": (Room(supply=isolated(Leak(24e3), Leak(24e3))), LINE),
    "230 V, 50 kohm": (
        Room(supply=isolated(Leak(None, 2e-9), Leak(50e3, 2e-9), mains=EU)), LINE,
    ),
    "line to line": (
        Room(supply=isolated(Leak(None, 5e-9), Leak(None, 5e-9))), Person("L1", "L2", 1000),
    ),
    "open earth, earthed": (
        Room(supply=earthed(EU), devices=open_earth(*[Leak(None, 4.7e-9)] * 2)), CASE,
    ),
    "three phases isolated": (
        Room(
            supply=Supply(
                mains=Mains(208, 60), isolated=True, phases=3,
                leaks=(Leak(None, 10e-9), Leak(50e3, 20e-9), Leak(None, 5e-9)),
            )
        ),
        Person("L3", "earth", 1000),
    ),
    "three phases earthed": (
        Room(
            supply=Supply(mains=EU, isolated=False, phases=3),
            devices=open_earth(GOOD, Leak(None, 4.7e-9), Leak(1e6)),
        ),
        CASE,
    ),
    "open earth, open neutral": (
        Room(supply=earthed(neutral=None), devices=open_earth(GOOD, GOOD, load=100.0)), CASE,
    ),
    "open earth, first fault": (
        Room(supply=isolated(Leak(None, 10e-9), Leak(1.0, 10e-9)), devices=open_earth(GOOD, GOOD)),
        CASE,
    ),
    "open earth, one-sided filter": (
        Room(
            supply=isolated(Leak(None, 20e-9), Leak(None, 20e-9)),
            devices=open_earth(Leak(None, 4.7e-9), Leak()),
        ),
        CASE,
    ),
    "lethal fault on a quiet isolated outlet": (
        Room(
            supply=isolated(Leak(None, 5e-9), Leak(None, 5e-9)),
            devices=open_earth(Leak(1e3), Leak()),
        ),
        CASE,
    ),
    "strip that lost its earth": (
        Room(
            supply=earthed(),
            devices=tuple(
                Device(name=f"d{k}", filters=(Leak(None, 2.21e-9), Leak()), earth_to="strip")
                for k in range(10)
            ),
        ),
        Person("d0", "earth", 1000),
    ),
}  # fmt: skip


@pytest.mark.parametrize("case", LISTED)
def test_a_listed_circuit_gives_the_same_current(case):
    room, person = LISTED[case]
    assert touch(room, person)[0] == pytest.approx(by_ngspice(room, person), rel=1e-4)


def random_room(seed: int) -> tuple[Room, Person]:
    draw = random.Random(seed)

    def leak() -> Leak:
        ohms = draw.choice([None, 10 ** draw.uniform(3, 7)])
        return Leak(ohms, 10 ** draw.uniform(-10, -7))

    supply = draw.choice([isolated(leak(), leak()), isolated(leak(), leak(), mains=EU), earthed()])
    devices = tuple(
        Device(
            name=f"d{k}",
            filters=(leak(), leak()),
            earth=draw.choice([None, 0.1, 10.0]),
            load=draw.choice([None, 50.0]),
        )
        for k in range(draw.randint(1, 5))
    )
    links = (Link("d0", "rail", leak()), Link("rail", "earth", leak()))
    ends = draw.choice([("L1", "earth"), ("d0", "earth"), ("d0", "rail"), ("d0", "L1")])
    return Room(supply=supply, devices=devices, links=links), Person(*ends, draw.uniform(500, 1e5))


@pytest.mark.parametrize("seed", range(12))
def test_a_random_room_gives_the_same_current(seed):
    room, person = random_room(seed)
    assert touch(room, person)[0] == pytest.approx(by_ngspice(room, person), rel=1e-4)
