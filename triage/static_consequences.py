"""What a static discharge does: what else is noticed, its current, its decay, and what it upsets.

Computed for print only; the ranking needs no more than P(felt).
"""

from collections.abc import Iterable, Iterator
from dataclasses import dataclass
from math import log, sqrt

from triage.bounds import Probability
from triage.conditions import Conditions
from triage.errors import InvalidValue, OutOfRange
from triage.estimate import Estimate, product
from triage.incident import Incident, Item, Statement
from triage.materials import load
from triage.physics.breakdown import spark_gap
from triage.physics.discharge import (
    METAL_PATH,
    SKIN_PATH,
    duration,
    in_series,
    peak_current,
)
from triage.physics.sensation import (
    EPISTEMIC,
    after_not_noticing,
    after_noticing,
    after_words,
    perceived,
)
from triage.static_exposure import StaticExposure, static_exposure
from triage.static_limits import HumidityRule
from triage.static_limits import load as limits
from triage.static_readings import spread, taken

_BY_CHARGE = ("unpleasant", "painful")
_BY_VOLTAGE = ("heard", "seen")
READ_AT_ONCE = frozenset({"open_circuit_voltage", "charging_current", "quick_act_voltage",
                          "contact_voltage", "model_doubt"})  # fmt: skip
"""Sources that a voltage read after the same act replaces together."""
_FOR_SYNTHETIC = "synthetic_floor"  # the one rule of the table that goes by the floor
_LEAN = 5  # nodes for each direction; several observations in turn multiply them
_LADDER = {"sting": "prick"}  # words of the record that are words of the published ladder


@dataclass(frozen=True, slots=True)
class Share:
    """What one source of doubt contributes to an estimate.

    Args:
        source: its name.
        share: of the variance of ln value, 0 to 1.
        saved: part of the spread that goes away once this source is known.
    """

    source: str
    share: float
    saved: float


@dataclass(frozen=True, slots=True)
class AfterStatements:
    """A discharge in the light of what people noticed.

    Args:
        voltage: of the charged body [V]. capacitance: of it [F].
        because: what was taken into account, in words.
    """

    voltage: Estimate
    capacitance: Estimate
    because: tuple[str, ...]


@dataclass(frozen=True, slots=True)
class Ignition:
    """The spark against a vapour.

    Args:
        fuel: row of the table of fuels.
        oxygen: whether the energy is that of enriched air.
        minimum: least ignition energy [J].
        chance: that a spark that was felt carries more, at the best mixture: an upper bound.
    """

    fuel: str
    oxygen: bool
    minimum: float
    chance: float


def noticed(exposure: StaticExposure) -> dict[str, Probability]:
    """P(unpleasant), P(painful), P(heard), P(seen) of one discharge."""
    m, held = load(), exposure.told.touch.held_metal
    found = {
        name: perceived(exposure.charge, m.threshold(name, held_metal=held)) for name in _BY_CHARGE
    }
    return found | {name: perceived(exposure.voltage, m.threshold(name)) for name in _BY_VOLTAGE}


def spark_path(exposure: StaticExposure) -> float:
    """Resistance of body and skin that the spark goes through [ohm]."""
    return METAL_PATH if exposure.told.touch.held_metal else SKIN_PATH


def current(exposure: StaticExposure) -> Estimate:
    """Largest current of the slow part of the spark [A]."""
    return exposure.voltage.scaled(peak_current(1.0, spark_path(exposure)), "A")


def lasting(exposure: StaticExposure) -> Estimate:
    """Time in which 95 % of the charge passes [s]."""
    shared = exposure.capacitance
    if exposure.other is not None:
        shared = in_series(shared, exposure.other)
    return shared.scaled(duration(1.0, spark_path(exposure)), "s")


def gap(exposure: StaticExposure) -> float | None:
    """Air that the middle voltage jumps [m]; None below sparking or beyond the formula."""
    try:
        return spark_gap(exposure.voltage.median)
    except OutOfRange:
        return None


def decay(exposure: StaticExposure) -> Estimate | None:
    """Time until the middle voltage has leaked away to `quiet_voltage` [s].

    None on an insulating surface, and where the voltage is that low from the start.
    """
    quiet = taken("quiet_voltage", "voltage")
    if exposure.resistance is None or exposure.voltage.median <= quiet:
        return None
    tau = product("s", exposure.resistance, exposure.capacitance)
    return tau.scaled(log(exposure.voltage.median / quiet))


def after_statements(exposure: StaticExposure, statements: Iterable[Statement]) -> AfterStatements:
    """Voltage and capacitance given that it was felt, and heard or seen where people say so.

    Witnesses who differ on crack or spark settle nothing; an answer left out settles nothing.
    Where nobody could notice such a discharge the estimates stay as they are, without a reason.
    """
    said = tuple(statements)
    lean = static_exposure(exposure.told, _LEAN)
    try:
        voltage, capacitance, charge = (
            after_noticing(each, lean.charge, lean.threshold)
            for each in (lean.voltage, lean.capacitance, lean.charge)
        )
        return _after_more(said, voltage, capacitance, charge)
    except InvalidValue:
        return AfterStatements(lean.voltage, lean.capacitance, ())


def _after_more(
    said: tuple[Statement, ...], voltage: Estimate, capacitance: Estimate, charge: Estimate
) -> AfterStatements:
    """Words, crack and spark on top of having felt it."""
    because = ["felt"]
    word = {_LADDER.get(s.sensation or "") for s in said if s.sensation}
    if len(word) == 1 and (named := word.pop()) is not None:
        between = limits().between(named)
        voltage, capacitance = (
            after_words(each, charge, between, spread("words")) for each in (voltage, capacitance)
        )
        because.append(f"called a {named}")
    for name, field in (("heard", "crack_heard"), ("seen", "spark_seen")):
        answers = {getattr(s, field) for s in said} - {None}
        if len(answers) != 1:
            continue
        there = answers == {"yes"}
        judge = after_noticing if there else after_not_noticing
        threshold = load().threshold(name)
        capacitance = judge(capacitance, voltage, threshold)
        voltage = judge(voltage, voltage, threshold)
        because.append(name if there else f"not {name}")
    return AfterStatements(voltage, capacitance, tuple(because))


def ignitions(incident: Incident, exposures: Iterable[StaticExposure]) -> tuple[Ignition, ...]:
    """The sparks that were possible against what could burn within reach, the worst of them."""
    energies = list(_felt_energies(exposures))
    return tuple(
        Ignition(fuel, oxygen, least, max(e.probability_above(least) for e in energies))
        for fuel, oxygen, least in _fuels(incident.scene.flammable)
        if energies
    )


def _felt_energies(exposures: Iterable[StaticExposure]) -> Iterator[Estimate]:
    """Energies of those discharges that somebody can feel at all."""
    for each in exposures:
        try:
            yield after_noticing(each.energy, each.charge, each.threshold)
        except InvalidValue:
            continue


def _fuels(within_reach: tuple[str, ...]) -> Iterator[tuple[str, bool, float]]:
    """Fuel, enriched air or not, least energy [J]; of an unnamed vapour the easiest solvent."""
    fuels = {word: fuel for word, fuel in limits().fuels.items() if word != "hydrogen"}
    if "wet_alcohol" in within_reach:
        yield "ethanol", False, min(fuels["ethanol"].in_air)
    if "other_vapour" in within_reach:
        least = min(fuels, key=lambda word: min(fuels[word].in_air))
        yield least, False, min(fuels[least].in_air)
    if "oxygen" in within_reach:
        rich = {word: min(f.in_oxygen) for word, f in fuels.items() if f.in_oxygen}
        least = min(rich, key=lambda word: rich[word])
        yield least, True, rich[least]


def upsets(incident: Incident, exposure: StaticExposure) -> tuple[tuple[Item, Probability], ...]:
    """For each item with a declared immunity the chance that the discharge exceeds it."""
    return tuple(
        (item, exposure.peak.chance_above(item.immunity.value, EPISTEMIC))
        for item in incident.items
        if item.immunity is not None and item.immunity.bound != "<"
    )


def room_rules(conditions: Conditions, area: str | None) -> tuple[tuple[HumidityRule, bool], ...]:
    """Each published humidity rule for such a room, and whether the reading keeps it.

    Args:
        conditions: with the humidity and the floor.
        area: kind of care area; the rules for operating rooms hold there only.
    """
    if conditions.humidity is None:
        return ()
    fraction = conditions.humidity.fraction
    floor = load().floors.get(conditions.floor or "")
    return tuple(
        (rule, rule.allows(fraction))
        for word, rule in limits().room_humidity.items()
        if (floor is not None and floor.synthetic if word == _FOR_SYNTHETIC
            else area == "operating_room")
    )  # fmt: skip


def far_from_harm(exposure: StaticExposure) -> tuple[float, float]:
    """Energy and charge at the upper end (95 %) as parts of the marks for direct harm."""
    energy, charge = taken("hazard_energy", "energy"), taken("hazard_charge", "charge")
    return exposure.energy.quantile(0.95) / energy, exposure.charge.quantile(0.95) / charge


def shares(estimate: Estimate) -> tuple[Share, ...]:
    """What each source contributes to the spread, largest first, and what knowing it would save."""
    found = estimate.contributions()
    return tuple(Share(name, each, 1 - sqrt(max(1 - each, 0.0))) for name, each in found.items())


def saved_by_voltage(estimate: Estimate) -> float:
    """Part of the spread that goes away once the voltage is read after the same act.

    Resistances, humidity and what acts together with them count as replaced, too; the error of
    the reading stays.

    Args:
        estimate: voltage, or what is made from it.
    """
    total = estimate.variance_log
    if total == 0:
        return 0.0
    replaced = sum(each.share for each in shares(estimate) if _in_the_voltage(each.source))
    left = (1 - replaced) * total + spread("voltage") ** 2
    return max(1 - sqrt(max(left, 0.0) / total), 0.0) if replaced else 0.0


def _in_the_voltage(source: str) -> bool:
    return (
        source in READ_AT_ONCE
        or source == "humidity"
        or source.startswith("interaction")
        or source.endswith("_resistance")
    )
