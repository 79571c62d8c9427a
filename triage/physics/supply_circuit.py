"""A room's supply as a network: lines, leakage, devices, lost earths, faults, and who touches.

Built for any mixture of these; the closed forms of touch_current.py are its special cases.
"""

from cmath import exp
from collections.abc import Iterator
from dataclasses import dataclass, replace
from math import pi

from triage.errors import InvalidValue
from triage.physics.nodal import EARTH, Emf, Solution, Tie, solve
from triage.physics.touch_current import Mains, Source, Spark, contact_spark

CONDUCTOR = 0.1
"""Judgement: resistance of an intact neutral or earth conductor when not measured [ohm]."""


@dataclass(frozen=True, slots=True)
class Leak:
    """A resistance beside a capacitance between two points.

    Args:
        resistance: R [ohm], above 0; None for no resistive path.
        capacitance: C [F], 0 or more.
    """

    resistance: float | None = None
    capacitance: float = 0.0

    def __post_init__(self) -> None:
        """Refuse what no leak is.

        Raises:
            InvalidValue: R not above 0, or C negative.
        """
        if not self.capacitance >= 0 or not (self.resistance is None or self.resistance > 0):
            raise InvalidValue(f"no leak is {self.resistance!r} ohm beside {self.capacitance!r} F")


@dataclass(frozen=True, slots=True)
class Link:
    """A leak between two named nodes: a fault, liquid, a cable screen, a bond.

    Args:
        first: node name. second: node name. leak: what joins them.
    """

    first: str
    second: str
    leak: Leak


@dataclass(frozen=True, slots=True, kw_only=True)
class Supply:
    """Where a room's power comes from.

    Args:
        mains: line-to-line for an isolated supply, line-to-neutral for an earthed one.
        isolated: no line is joined to earth.
        phases: 1 or 3.
        leaks: of each line to earth: transformer, cable, monitor. Left out: none.
        neutral: resistance of the neutral conductor of an earthed supply [ohm]; None is open.
    """

    mains: Mains
    isolated: bool
    phases: int = 1
    leaks: tuple[Leak, ...] = ()
    neutral: float | None = CONDUCTOR

    def __post_init__(self) -> None:
        """Refuse what no supply is.

        Raises:
            InvalidValue: other than one or three phases, more leaks than lines, or a neutral of
                no resistance.
        """
        if self.phases not in (1, 3) or len(self.leaks) > len(self.lines):
            raise InvalidValue("a supply has 1 or 3 phases and at most one leak a line")
        if self.neutral is not None and not self.neutral > 0:
            raise InvalidValue(f"no neutral conductor has {self.neutral!r} ohm")

    @property
    def lines(self) -> tuple[str, ...]:
        """Names of the live conductors, neutral included."""
        if self.isolated:
            return ("L1", "L2") if self.phases == 1 else ("L1", "L2", "L3")
        return ("L1", "N") if self.phases == 1 else ("L1", "L2", "L3", "N")


@dataclass(frozen=True, slots=True, kw_only=True)
class Device:
    """A device on the supply; its name is the node of its chassis.

    Args:
        name: node of the chassis. filters: leak of each line to the chassis, in line order.
        earth: resistance of its protective earth [ohm]; None is open.
        earth_to: node its earth goes to: `earth`, or a strip that may itself have lost it.
        load: resistance between its first two lines when on [ohm]; None is off.
    """

    name: str
    filters: tuple[Leak, ...] = ()
    earth: float | None = CONDUCTOR
    earth_to: str = EARTH
    load: float | None = None

    def __post_init__(self) -> None:
        """Refuse resistances no device has.

        Raises:
            InvalidValue: an earth or load resistance not above 0.
        """
        for each in (self.earth, self.load):
            if each is not None and not each > 0:
                raise InvalidValue(f"{self.name}: no conductor has {each!r} ohm")


@dataclass(frozen=True, slots=True)
class Person:
    """Somebody who joins two nodes.

    Args:
        first: node touched. second: the other node: `earth`, a line, another chassis.
        impedance: of the body with shoes and floor [ohm]; 0 is the worst case.
    """

    first: str
    second: str
    impedance: complex


@dataclass(frozen=True, slots=True, kw_only=True)
class Room:
    """Everything that hangs on one supply.

    Args:
        supply: the source. devices: on it. links: faults and other paths.
    """

    supply: Supply
    devices: tuple[Device, ...] = ()
    links: tuple[Link, ...] = ()

    def __post_init__(self) -> None:
        """Refuse two things at one node.

        Raises:
            InvalidValue: two devices of one name, or one named like a line or earth.
        """
        names = [each.name for each in self.devices]
        if len({*names, *self.supply.lines, EARTH}) < len(names) + len(self.supply.lines) + 1:
            raise InvalidValue(f"devices need names of their own: {', '.join(names)}")


@dataclass(frozen=True, slots=True)
class MonitorView:
    """What a line monitor of either kind would show, nobody touching.

    Args:
        hazard_currents: of each line in order [A]. total: the largest, the reading [A].
        insulation: DC resistance of all lines together to earth [ohm]; infinite for none.
        line_voltages: of each line to earth [V]; None where nothing defines it.
    """

    hazard_currents: tuple[float, ...]
    total: float
    insulation: float
    line_voltages: tuple[float | None, ...]


def touch(room: Room, *people: Person) -> tuple[float, ...]:
    """Current through each person touching at the same time.

    Args:
        room: the network.
        people: who touches what.

    Returns:
        rms current of each [A]; 0 for somebody no path drives a current through.

    Raises:
        InvalidValue: an impossible network, or a person at a node the room does not have.

    >>> leak = Leak(capacitance=44.2097e-9)
    >>> supply = Supply(mains=Mains(120, 60), isolated=True, leaks=(leak, leak))
    >>> round(touch(Room(supply=supply), Person("L1", "earth", 1000))[0] * 1e3, 4)  # mA
    1.9989
    """
    _check_nodes(room, people)
    ties, emfs = _network(room)
    shorts = [(p.first, p.second, 0j) for p in people if p.impedance == 0]
    bodies = [(p.first, p.second, 1 / p.impedance) for p in people if p.impedance != 0]
    found = solve([*ties, *bodies], [*emfs, *shorts])
    through = iter(found.currents[len(emfs) :])
    return tuple(abs(next(through)) if p.impedance == 0 else _through(found, p) for p in people)


def voltages(room: Room, *people: Person) -> dict[str, complex]:
    """Voltage of every defined node against earth, with these people touching [V].

    Raises:
        InvalidValue: an impossible network, or a person at a node the room does not have.
    """
    _check_nodes(room, people)
    ties, emfs = _network(room)
    bodies = [(p.first, p.second, 1 / p.impedance) for p in people]
    return solve([*ties, *bodies], emfs).voltages


def thevenin(room: Room, first: str, second: str = EARTH) -> Source:
    """What two points offer: open-circuit voltage and the impedance behind it.

    Args:
        room: the network without the person. first: node. second: node.

    Raises:
        InvalidValue: nothing joins one of the nodes to earth.

    >>> y = Leak(capacitance=2.2e-9)
    >>> pump = Device(name="pump", filters=(y, y), earth=None)
    >>> room = Room(supply=Supply(mains=Mains(120, 60), isolated=False), devices=(pump,))
    >>> round(abs(thevenin(room, "pump").open_voltage), 2)
    60.0
    """
    ties, emfs = _network(room)
    open_voltage = solve(ties, emfs).between(first, second)
    dead = [(a, b, 0j) for a, b, _ in emfs]
    try:
        current = solve(ties, [*dead, (first, second, 1 + 0j)]).currents[-1]
    except InvalidValue:
        return Source(open_voltage, 0)  # an ideal source stands between the two points
    return Source(open_voltage, 1 / current)


def chassis_spark(room: Room, device: str, against: str = EARTH) -> Spark:
    """Contact spark between a chassis and what the person is joined to, at the crest."""
    return contact_spark(thevenin(room, device, against), room.supply.mains)


def monitor_view(room: Room) -> MonitorView:
    """What either kind of monitor shows on an isolated supply.

    Args:
        room: the network; put the monitor's own leakage into the supply's leaks.

    Raises:
        InvalidValue: the supply is earthed.

    >>> leak = Leak(capacitance=10e-9)
    >>> supply = Supply(mains=Mains(120, 60), isolated=True, leaks=(leak, Leak(50e3, 10e-9)))
    >>> view = monitor_view(Room(supply=supply))
    >>> round(view.total * 1e3, 3), round(view.insulation)
    (2.442, 50000)
    """
    lines = room.supply.lines
    if not room.supply.isolated:
        raise InvalidValue("a line monitor belongs to an isolated supply")
    hazards = tuple(touch(room, Person(line, EARTH, 0))[0] for line in lines)
    found = voltages(room)
    volts = tuple(abs(found[line]) if line in found else None for line in lines)
    return MonitorView(hazards, max(hazards), _insulation(room), volts)


def without_earth(room: Room, device: str) -> Room:
    """The same room with the protective earth of one device open."""
    return replace(
        room,
        devices=tuple(
            replace(each, earth=None) if each.name == device else each for each in room.devices
        ),
    )


def without(room: Room, device: str) -> Room:
    """The same room with one device unplugged."""
    return replace(room, devices=tuple(e for e in room.devices if e.name != device))


def _check_nodes(room: Room, people: tuple[Person, ...]) -> None:
    # A misspelt node would float and give 0 A: the one answer that must never come by accident.
    nodes = {EARTH, *room.supply.lines, *(device.name for device in room.devices)}
    nodes.update(device.earth_to for device in room.devices)
    nodes.update(end for link in room.links for end in (link.first, link.second))
    strange = {p.first for p in people} | {p.second for p in people}
    if strange - nodes:
        raise InvalidValue(f"no node {sorted(strange - nodes)}; there are {sorted(nodes)}")


def _through(found: Solution, person: Person) -> float:
    # A node that nothing joins to earth floats along with the person: no current.
    if person.first not in found.voltages or person.second not in found.voltages:
        return 0.0
    return abs(found.between(person.first, person.second) / person.impedance)


def _insulation(room: Room) -> float:
    ties, emfs = _network(room, direct=True)
    dead = [(a, b, 0j) for a, b, _ in emfs]
    current = solve(ties, [*dead, (room.supply.lines[0], EARTH, 1 + 0j)]).currents[-1]
    # Rounding leaves about 1e-17 A where no path exists.
    return 1 / current.real if abs(current) > 1e-15 else float("inf")


def _network(room: Room, *, direct: bool = False) -> tuple[list[Tie], list[Emf]]:
    """Admittances and sources; `direct` leaves every capacitance out."""
    angular = 0.0 if direct else room.supply.mains.angular
    ties = [
        (a, b, complex(0.0 if r is None else 1 / r, angular * c)) for a, b, r, c in _leaks(room)
    ]
    return ties, _emfs(room.supply)


def _leaks(room: Room) -> Iterator[tuple[str, str, float | None, float]]:
    supply, lines = room.supply, room.supply.lines
    for line, leak in zip(lines, supply.leaks, strict=False):
        yield line, EARTH, leak.resistance, leak.capacitance
    if not supply.isolated and supply.neutral is not None:
        yield "N", EARTH, supply.neutral, 0.0
    for device in room.devices:
        for line, leak in zip(lines, device.filters, strict=False):
            yield line, device.name, leak.resistance, leak.capacitance
        if device.earth is not None:
            yield device.name, device.earth_to, device.earth, 0.0
        if device.load is not None:
            yield lines[0], lines[1], device.load, 0.0
    for link in room.links:
        yield link.first, link.second, link.leak.resistance, link.leak.capacitance


def _emfs(supply: Supply) -> list[Emf]:
    volts = supply.mains.voltage
    turn = [exp(-2j * pi * k / 3) for k in range(3)]
    if supply.isolated and supply.phases == 1:
        return [("L1", "L2", volts + 0j)]
    if supply.isolated:
        return [("L1", "L2", volts * turn[0]), ("L2", "L3", volts * turn[1])]
    return [(f"L{k + 1}", EARTH, volts * turn[k]) for k in range(supply.phases)]
