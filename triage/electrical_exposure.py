"""What current was physically possible under each mains cause, and the ceiling a monitor allows."""

import math
from collections.abc import Callable
from dataclasses import dataclass, replace
from functools import cache, lru_cache

from triage.bounds import Basis, Ceiling, Probability
from triage.conditions import assumed
from triage.errors import BadTable
from triage.estimate import Estimate, through
from triage.physics.body_impedance import floor_series, hazard_floor, severe_impedance
from triage.physics.monitors import ceiling_from_hazard, ceiling_from_insulation
from triage.physics.networks import weight
from triage.physics.perception import threshold
from triage.physics.touch_current import (
    Mains,
    contact_spark,
    insulation_fault,
    open_earth,
    shunt,
)
from triage.physics.zones import zone
from triage.quadrature import normal_cdf
from triage.quantity import parse
from triage.tables import citation, table

ELECTRICAL_CAUSES = ("open_earth", "insulation_fault", "isolated_first_fault",
                     "isolated_line_to_line", "outlet_wiring", "live_cord", "earth_difference",
                     "moisture")  # fmt: skip
"""Mains causes, each with a model of its touch current."""
_ORDER = 24
_UNITS = {"capacitance": "F", "resistance": "ohm", "voltage": "V", "current": "A", "share": ""}
_CURVES = ("touch", "sensitive")


@dataclass(frozen=True, slots=True)
class ElectricalStory:
    """The circumstances of one contact, hashable so that equal ones are computed once.

    Args:
        voltage, frequency: of the supply [V, Hz].
        medical: the item is a medical device; other items leak more.
        moisture: dry, water or None for not known (the severe end).
        series: resistance to earth through shoes and floor [ohm], None for a direct return path.
        hazard_current: shown by the monitor [A], None if not known or void.
        insulation: shown by the monitor [ohm], None if not known or void.
        metal_voltage: measured between the two metals, loaded [V].
        touch_current: measured at the item, valid [A].
        isolated: the contact was on an isolated supply: one line drives what the system leaks.
        area: small for a dry bare fingertip; None for the large contact, the severe end.
    """

    voltage: float
    frequency: float
    medical: bool = True
    moisture: str | None = None
    series: float | None = None
    hazard_current: float | None = None
    insulation: float | None = None
    metal_voltage: float | None = None
    touch_current: float | None = None
    isolated: bool = False
    area: str | None = None


@dataclass(frozen=True, slots=True)
class ElectricalExposure:
    """One mains cause of one contact; its numbers are computed when they are asked for.

    Args:
        cause: one of `ELECTRICAL_CAUSES`. told: the circumstances.
        duration: of the contact [s], None if not known. path: through the body, None if not known.
    """

    cause: str
    told: ElectricalStory
    duration: float | None = None
    path: str | None = None

    @property
    def current(self) -> Estimate:
        """Current through the person [A]."""
        return touch_current(self.cause, self.told)

    @property
    def felt(self) -> Probability:
        """Whether it could be felt, with the chance at the 5 and 95 % points of the current."""
        low, high = (
            _chance(math.log(each), self.told.frequency) for each in self.current.interval()
        )
        return Probability(felt_chance(self.cause, self.told), low, high, self.current.basis)

    @property
    def must_be_felt(self) -> float:
        """Chance by the curve of a firm grip: below it somebody may well have felt nothing."""
        median, spread, _ = threshold("grip")
        return self.current.probit(median / _weight(self.told.frequency), spread)

    @property
    def worst(self) -> float:
        """Current of the worst credible case [A]: 95 % point, large contact, no shoes or floor."""
        severe = replace(self.told, series=None, area=None)
        return touch_current(self.cause, severe).quantile(0.95)

    @property
    def zone(self) -> str:
        """Zone of the worst credible case; duration and path not known take the severe end."""
        return zone(self.worst, self.duration, self.path)


@lru_cache(maxsize=4096)
def touch_current(cause: str, told: ElectricalStory) -> Estimate:
    """Current through the person under one cause [A].

    Args:
        cause: one of `ELECTRICAL_CAUSES`.
        told: the circumstances.
    """
    return (_ISOLATED if told.isolated else _CURRENTS)[cause](told)


@lru_cache(maxsize=4096)
def felt_chance(cause: str, told: ElectricalStory) -> float:
    """Chance that it could be felt: the curve that feels more easily decides.

    Args:
        cause: one of `ELECTRICAL_CAUSES`.
        told: the circumstances.
    """
    current, heavier = touch_current(cause, told), _weight(told.frequency)
    return max(current.probit(m / heavier, s) for m, s in _curves())


@dataclass(frozen=True, slots=True)
class ChassisSpark:
    """What a case with an open earth discharges at the first contact, at most (at the crest).

    Args:
        voltage: crest [V].
        charge, energy: into a person joined to earth [C, J].
        through_shoes: charge into a person on shoes and floor of this story [C]; None where
            those are not in the path.
    """

    voltage: float
    charge: Estimate
    energy: Estimate
    through_shoes: Estimate | None


def chassis_spark(told: ElectricalStory) -> ChassisSpark:
    """The contact spark of a floating case on an earthed supply; on an isolated one the most.

    Args:
        told: supply and kind of item.
    """
    mains, filters = Mains(told.voltage, told.frequency), _filter(told)
    leak = shunt(None, filters.median, mains)
    spark = contact_spark(open_earth(mains, leak, leak), mains)
    charge = filters.scaled(spark.charge / filters.median, "C")
    energy = filters.scaled(spark.energy / filters.median, "J")
    if told.series is None:
        return ChassisSpark(spark.voltage, charge, energy, None)
    # The filter and the soles in series; the soles' resistance is far too large to matter.
    soles = parse(_row("footwear_capacitance")["median"], "capacitance").value
    shared = through(
        lambda log_charge: log_charge - math.log1p(math.exp(log_charge) / spark.voltage / soles),
        charge, unit="C",
    )  # fmt: skip
    return ChassisSpark(spark.voltage, charge, energy, shared)


def ceiling(told: ElectricalStory, void: tuple[str, ...]) -> Ceiling | None:
    """The most that one line can drive through a person to earth, by the monitor's reading.

    Args:
        told: the circumstances; its reading is used even where `void` says that it binds nothing.
        void: why the reading binds nothing.
    """
    tolerance = assumed("monitor_tolerance")
    mains = Mains(told.voltage, told.frequency)
    if told.hazard_current is not None:
        return Ceiling(ceiling_from_hazard(told.hazard_current, tolerance), "A", void)
    if told.insulation is not None:
        return Ceiling(ceiling_from_insulation(mains, told.insulation), "A", void)
    return None


@cache
def _curves() -> tuple[tuple[float, float], ...]:
    """Median [A] and spread of the curves; the one that feels more easily decides."""
    return tuple(threshold(curve)[:2] for curve in _CURVES)


def _chance(log_current: float, frequency: float) -> float:
    """P(felt) at one current, ln A."""
    log_weighted = log_current + math.log(_weight(frequency))
    return max(normal_cdf((log_weighted - math.log(m)) / s) for m, s in _curves())


def _weight(frequency: float) -> float:
    """How much of a current counts for feeling it; above 100 Hz less than all."""
    return weight(frequency, "reaction") if frequency > 100 else 1.0


@cache
def _assumed(name: str, source: str = "assumed_source") -> Estimate:
    """An assumed row as an estimate over a named source of doubt."""
    row = next((each for each in table("touch_sources")["sources"] if each["id"] == name), None)
    if row is None:
        raise BadTable(f"data/touch_sources.yaml has no row '{name}'")
    unit = {"capacitance": "F", "resistance": "ohm", "voltage": "V", "current": "A", "share": ""}[
        row["kind"]
    ]
    basis = {source: Basis(row["name"], "default", "", citation(row, name))}
    if "between" in row:
        low, high = (_number(text, row["kind"]) for text in row["between"])
        span = math.log(high / low)
        score = Estimate.lognormal(1.0, {source: 1.0}, "", basis)  # ln value = z
        return through(
            lambda z: math.log(low) + span * normal_cdf(z), score, unit=unit, order=_ORDER
        )
    median = parse(row["median"], row["kind"]).value
    return Estimate.lognormal(median, {source: float(row["spread"])}, unit, basis)


def _number(text: object, kind: str) -> float:
    """A bound of a row in SI; a share is a bare number."""
    return float(str(text)) if kind == "share" else parse(str(text), kind).value


def assumed_names() -> tuple[tuple[str, str], ...]:
    """Id and plain name of every assumed source, for the list of sources."""
    return tuple((row["id"], row["name"]) for row in table("touch_sources")["sources"])


def _series(told: ElectricalStory) -> complex:
    if told.series is None:
        return 0j
    capacitance = parse(_row("footwear_capacitance")["median"], "capacitance").value
    return floor_series(told.series, capacitance, told.frequency)


def _row(name: str) -> dict[str, str]:
    return next(each for each in table("touch_sources")["sources"] if each["id"] == name)


def _body(told: ElectricalStory) -> Estimate:
    """Impedance of the body; the severe end for what is not known."""
    found = severe_impedance(told.voltage, contact=told.area, moisture=told.moisture)
    sigma = found.sigma
    basis = {"body_impedance": Basis("impedance of the body", "default")}
    return Estimate.lognormal(found.median, {"body_impedance": sigma}, "ohm", basis)


def _through_body(source: Estimate, told: ElectricalStory, law: Callable[..., float]) -> Estimate:
    """A current that depends on an assumed source and on the body, both with their doubt."""
    return through(law, source, _body(told), unit="A", order=6)


def _open_earth(told: ElectricalStory) -> Estimate:
    if told.touch_current is not None:
        basis = {"assumed_source": Basis("touch current, measured", "measured")}
        return Estimate.lognormal(told.touch_current, {"assumed_source": 0.1}, "A", basis)
    mains, series = Mains(told.voltage, told.frequency), _series(told)

    def law(log_capacitance: float, log_body: float) -> float:
        leak = shunt(None, math.exp(log_capacitance), mains)
        return math.log(open_earth(mains, leak, leak).current(math.exp(log_body), series))

    return _through_body(_filter(told), told, law)


def _filter(told: ElectricalStory) -> Estimate:
    """Capacitance of each line to the case [F]."""
    return _assumed("filter_capacitance_medical" if told.medical else "filter_capacitance_other")


def _insulation_fault(told: ElectricalStory) -> Estimate:
    mains, series = Mains(told.voltage, told.frequency), _series(told)

    def law(log_fault: float, log_body: float) -> float:
        source = insulation_fault(mains, fault=math.exp(log_fault), earth=None)
        return math.log(source.current(math.exp(log_body), series))

    return _through_body(_assumed("insulation_fault"), told, law)


def _moisture(told: ElectricalStory) -> Estimate:
    series = _series(told)

    def law(log_path: float, log_body: float) -> float:
        total = abs(math.exp(log_path) + math.exp(log_body) + series)
        return math.log(told.voltage / total)

    return _through_body(_assumed("moisture_path"), told, law)


def _earth_difference(told: ElectricalStory) -> Estimate:
    """Two metals at different potential: the return path never goes through the floor."""
    if told.metal_voltage is not None and told.metal_voltage > 0:
        basis = {"assumed_source": Basis("voltage between the metals, measured", "measured")}
        volts = Estimate.lognormal(told.metal_voltage, {"assumed_source": 0.1}, "V", basis)
    else:
        volts = _assumed("earth_difference")
    return volts.over(_body(told), "A")


def _direct(told: ElectricalStory) -> Estimate:
    """A bare live part: nothing but the body, shoes and floor."""
    series = _series(told)
    return through(
        lambda log_body: math.log(told.voltage / abs(math.exp(log_body) + series)),
        _body(told),
        unit="A",
    )


def _line_to_line(told: ElectricalStory) -> Estimate:
    """Both lines: shoes and floor are not in the path."""
    return Estimate.exact(told.voltage, "V").over(_body(told), "A")


def _isolated_line(told: ElectricalStory) -> Estimate:
    """One line to earth: the leakage of the whole system, the person's path in series.

    The reading is the most that can flow; the share that does depends on which line leaks.
    """
    mains, series = Mains(told.voltage, told.frequency), _series(told)
    if told.hazard_current is not None and told.hazard_current > 0:
        basis = {"assumed_source": Basis("monitor reading", "measured")}
        hazard = Estimate.lognormal(told.hazard_current, {"assumed_source": 0.1}, "A", basis)
    elif told.insulation is not None and told.insulation > 0:
        capacitance = _assumed("system_capacitance")
        hazard = through(
            lambda c: math.log(
                mains.voltage * abs(shunt(told.insulation, math.exp(c), mains))
            ),
            capacitance, unit="A",
        )  # fmt: skip
    else:
        hazard = _assumed("hazard_current")

    def law(log_hazard: float, log_body: float) -> float:
        leak = math.exp(log_hazard) / mains.voltage  # |Y2|, taken as capacitive
        path = abs(math.exp(log_body) + series + 1 / (2j * leak))
        return math.log(mains.voltage / 2 / path)

    return _through_body(hazard, told, law)


def _isolated_open_earth(told: ElectricalStory) -> Estimate:
    """An open earth on an isolated supply: a share of what an earthed supply would drive."""
    return _open_earth(told).times(_assumed("isolated_share", "isolated_share"), "A")


_CURRENTS: dict[str, Callable[[ElectricalStory], Estimate]] = {
    "open_earth": _open_earth,
    "insulation_fault": _insulation_fault,
    "isolated_first_fault": _isolated_line,
    "isolated_line_to_line": _line_to_line,
    "outlet_wiring": _direct,
    "live_cord": _direct,
    "earth_difference": _earth_difference,
    "moisture": _moisture,
}


_ISOLATED = _CURRENTS | {
    "open_earth": _isolated_open_earth,
    "insulation_fault": _isolated_line,
    "outlet_wiring": _isolated_line,
    "live_cord": _isolated_line,
    "moisture": _isolated_line,
}
"""On an isolated supply one bare line or bad case drives only what the rest of the system leaks."""


def direct_ceiling(voltage: float) -> float:
    """Upper bound for a direct contact: full voltage over the hazard floor of the body [A]."""
    return voltage / hazard_floor()
