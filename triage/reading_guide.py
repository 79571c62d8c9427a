"""What readings on record mean: line voltages, loaded volts, plug steps, isolated outlets, alarms.

For print beside the verdicts; it judges nothing and changes no disposition.
"""

import re
from collections.abc import Iterator
from math import pi, sqrt

from triage.electrical_tables import OutletTest, monitor_tables
from triage.errors import InvalidValue
from triage.frozen import frozen
from triage.in_force import limits_from
from triage.incident import Check, Incident
from triage.limits import Limit, load_limits
from triage.physics.body_impedance import hazard_floor
from triage.physics.monitors import LineVoltages, device_step, read_line_voltages
from triage.physics.supply_circuit import Device, Leak, Person, Room, Supply, touch
from triage.physics.touch_current import Mains
from triage.quantity import Quantity, parse
from triage.site import Site
from triage.tables import table
from triage.validity import CheckVerdict, find_item
from triage.verdict import Comparison, Judgement, compare, judge

_VOLTS = re.compile(r"(?<![\w.,])(\d+(?:\.\d+)?)\s*(mV|kV|V)\b")
_METER = {"loaded_1kohm": 1e3, "loaded_3kohm": 3e3}
_OUTLET_ROW = {
    ("touch_current", "direct_earthed"): "touch_current",
    ("touch_current", "differential_earthed"): "differential",
    ("applied_part_leakage", None): "applied_part_direct",
    ("outlet_test", None): "outlet_polarity",
}
_IN_HOSPITAL = ("medical", "installation")
"""Scopes of the editions that a hospital can have in force."""
MONITOR_CHECKS = ("monitor_log", "isolated_alarm_test")
"""Checks whose edition gives the alarm value of the monitor."""
_COLLAPSES = 0.1
"""Share of the open voltage left under load below which a source counts as capacitive (judgement:
the reading guide of IEEE Std 1695 tells the two by one or two orders)."""


@frozen
class Lines:
    """A reading of an isolated supply: both lines to earth and between them [V]."""

    check: Check
    first: float
    second: float
    between: float
    read: LineVoltages


@frozen
class Loaded:
    """A metal read open and under load.

    Args:
        check: as recorded. meter: load [ohm].
        open_voltage: None where none was written down [V]. loaded: [V].
        current: through the load [A]. most: through a person at the hazard floor [A].
        capacitance: that would explain both readings, None unless it collapses [F].
    """

    check: Check
    meter: float
    open_voltage: float | None
    loaded: float
    current: float
    most: float
    capacitance: float | None


@frozen
class Step:
    """The largest step of a plug test beside the step of an ordinary device [A]."""

    check: Check
    step: float
    ordinary: float


@frozen
class OutletExample:
    """A device with its earth open, touched through the measuring resistance [A].

    Args:
        name: what it is. earthed, quiet, loaded: on an earthed, a quiet isolated and a loaded
            isolated supply.
    """

    name: str
    earthed: float
    quiet: float
    loaded: float


@frozen
class IsolatedTest:
    """A test made from an isolated outlet, or from one that is not known.

    Args:
        verdict: its judgement. row: what such a test is worth.
        examples: the same mistake in numbers at this supply.
    """

    verdict: CheckVerdict
    row: OutletTest
    examples: tuple[OutletExample, ...]


@frozen
class Threshold:
    """The monitor's reading beside the alarm value of one edition.

    Args:
        limit: the row. comparison: the reading held against it.
        standing: named (by the site as in force), taken (where it names none) or other.
    """

    limit: Limit
    comparison: Comparison
    standing: str


def line_voltages(
    incident: Incident, verdicts: tuple[CheckVerdict, ...]
) -> Iterator[Lines | Check]:
    """Line voltages on record as pictures; the check alone where both values were not given.

    The remark is read for voltages in the order the check asks for: line one to earth, line two
    to earth, line to line; without the last the voltage of the supply counts.
    """
    for verdict in verdicts:
        if verdict.kind is None or verdict.kind.id != "isolated_line_voltages":
            continue
        volts = _volts(verdict.check.reason)
        if len(volts) == 2 and incident.supply.voltage is not None:
            volts.append(incident.supply.voltage.value)
        try:
            if len(volts) != 3:
                raise InvalidValue("both line voltages are needed")
            read = read_line_voltages(volts[0], volts[1], volts[2])
            yield Lines(verdict.check, volts[0], volts[1], volts[2], read)
        except InvalidValue:
            yield verdict.check


def loaded_metal(verdicts: tuple[CheckVerdict, ...], frequency: float) -> Iterator[Loaded]:
    """Metal voltages under load that have a value; the remark's first voltage is the open one."""
    for v in verdicts:
        ohms = _METER.get(v.check.method or "")
        wanted = v.kind is not None and v.kind.id in ("metal_voltage_loaded", "two_metal_voltage")
        if not wanted or ohms is None or v.value is None:
            continue
        yield _loaded(v.check, v.value.value, ohms, frequency)


def _loaded(check: Check, loaded: float, ohms: float, frequency: float) -> Loaded:
    volts = _volts(check.reason)
    above = volts[0] if volts and volts[0] >= loaded else None
    capacitance = None
    if above and 0 < loaded < _COLLAPSES * above:
        reactance = ohms * sqrt((above / loaded) ** 2 - 1)
        capacitance = 1 / (2 * pi * frequency * reactance)
    # A passive source drives at most R/500 times as much through 500 ohm as through R.
    most = loaded / min(ohms, hazard_floor())
    return Loaded(check, ohms, above, loaded, loaded / ohms, most, capacitance)


def plug_steps(verdicts: tuple[CheckVerdict, ...], mains: Mains) -> Iterator[Step]:
    """Plug tests with a value beside the step of a device with an ordinary filter."""
    row = next(r for r in table("touch_sources")["sources"]
               if r["id"] == "filter_capacitance_medical")  # fmt: skip
    ordinary = device_step(mains, parse(row["median"], "capacitance").value)
    for v in verdicts:
        if v.kind is not None and v.kind.id == "plug_step_test" and v.value is not None:
            yield Step(v.check, v.value.value, ordinary)


def isolated_tests(verdicts: tuple[CheckVerdict, ...], mains: Mains) -> Iterator[IsolatedTest]:
    """Tests from an outlet that was isolated or is not known, and that do not count for it."""
    rows = {row.id: row for row in monitor_tables().outlet_tests}
    for v in verdicts:
        if v.kind is None or v.check.supply == "earthed" or not v.state.startswith("invalid"):
            continue
        name = _OUTLET_ROW.get((v.kind.id, v.check.method)) or _OUTLET_ROW.get((v.kind.id, None))
        if name is None or v.check.method in ("alternative", "own_source_on_applied_part"):
            continue
        currents = v.kind.quantity == "current"
        yield IsolatedTest(v, rows[name], outlet_examples(mains) if currents else ())


def outlet_examples(mains: Mains) -> tuple[OutletExample, ...]:
    """Example devices with an open earth on an earthed, a quiet and a loaded isolated supply.

    Args:
        mains: line-to-neutral of the earthed supply, line-to-line of the isolated ones.
    """
    given = table("touch_sources")["isolated_outlet_examples"]
    quiet, loaded = (
        Supply(mains=mains, isolated=True, leaks=(_leak(None, given[name]),) * 2)
        for name in ("quiet_line", "loaded_line")
    )
    supplies = (Supply(mains=mains, isolated=False), quiet, loaded)
    person = Person("device", "earth", parse(given["measuring"], "resistance").value)
    found = []
    for each in given["devices"]:
        ohms = None if each["resistance"] == "none" else each["resistance"]
        filters = (_leak(ohms, each["line"]), _leak(None, each["other"]))
        device = Device(name="device", filters=filters, earth=None)
        reads = [touch(Room(supply=s, devices=(device,)), person)[0] for s in supplies]
        found.append(OutletExample(each["name"], *reads))
    return tuple(found)


def example_limits() -> tuple[float, float]:
    """The two limits the examples cross: of the open earth and of the intact one [A]."""
    given = table("touch_sources")["isolated_outlet_examples"]
    return parse(given["limit"], "current").value, parse(given["strict_limit"], "current").value


def _leak(ohms: str | None, farads: str) -> Leak:
    resistance = None if ohms is None else parse(ohms, "resistance").value
    return Leak(resistance, parse(farads, "capacitance").value)


def alarm_thresholds(incident: Incident, site: Site) -> tuple[Threshold, ...]:
    """The monitor's reading against the alarm values of every edition, the one in force first.

    Args:
        incident: the record. site: names the edition in force.

    Returns:
        Nothing without a reading; each row is of one edition.
    """
    supply, found = incident.supply, []
    for reading in (supply.current_reading, supply.resistance_reading):
        if reading is None:
            continue
        rows = list(load_limits().find(check="monitor_log", kind=reading.kind))
        used, standing = _edition_in_force(rows, site)
        found += [
            Threshold(row, compare(reading.value, reading.bound, row),
                      standing if row.edition.id == used else "other")
            for row in rows
        ]  # fmt: skip
    return tuple(sorted(found, key=lambda each: each.standing == "other"))


def _edition_in_force(rows: list[Limit], site: Site) -> tuple[str, str]:
    """Edition of the site, or the first of the table, and which of the two it is."""
    ids = [row.edition.id for row in rows]
    named = [
        e.edition for e in site.file.editions if e.check in MONITOR_CHECKS and e.edition in ids
    ]
    return (str(named[0]), "named") if named else (ids[0] if ids else "", "taken")


def other_editions(verdict: CheckVerdict, incident: Incident) -> tuple[Judgement, ...]:
    """The same reading under editions that are not in force, measured by the same method.

    Args:
        verdict: a judged check. incident: gives the class and part of the item.

    Returns:
        One judgement an edition, never a mixture; none where the check has no limit or value.
    """
    if verdict.kind is None or verdict.value is None or not verdict.judgements:
        return ()
    source = limits_from(verdict.check, verdict.kind)
    used = {each.edition.id for each in verdict.judgements}
    if source is None:
        return ()
    item = find_item(incident, verdict.check.of)
    condition = next(
        (f"open_{each}" for each in ("earth", "neutral") if f"{each}_open" in verdict.check.state),
        None,
    )
    rows = load_limits().find(
        check=source.check, condition=condition, method=source.method, kind=verdict.value.kind,
        equipment_class=item.equipment_class if item and item.equipment_class in ("I", "II")
        else None,
        part=item.applied_part if item and item.applied_part in ("B", "BF", "CF") else None,
    )  # fmt: skip
    rest = tuple(r for r in rows if r.edition.id not in used and r.edition.scope in _IN_HOSPITAL)
    return judge(verdict.value.value, _sign(verdict.value), rest)


def _sign(value: Quantity) -> str:
    return value.text[0] if value.text[0] in "≤≥" else value.bound


def _volts(text: str | None) -> list[float]:
    """Voltages in a remark, in order; what cannot be read is left out."""
    scale = {"mV": 1e-3, "V": 1.0, "kV": 1e3}
    return [float(number) * scale[unit] for number, unit in _VOLTS.findall(text or "")]
