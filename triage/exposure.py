"""What was physically possible, for each cause: estimates, P(felt), and its weight in the ranking.

The only place that changes record quantities into physics. A formula out of its published range
gives unknown with the reason, never a number.
"""

from collections.abc import Mapping
from dataclasses import dataclass, replace
from typing import Any

from triage import conditions as c
from triage.bounds import Ceiling, Probability
from triage.conditions import Conditions
from triage.electrical_exposure import (
    ELECTRICAL_CAUSES,
    ElectricalExposure,
    ElectricalStory,
    ceiling,
    electrical_exposure,
)
from triage.electrical_story import electrical_story, void_reasons
from triage.errors import InvalidValue
from triage.frozen import frozen
from triage.incident import Incident
from triage.involvement import involved, speaks_about
from triage.knowledge import Knowledge, knowledge
from triage.physics.humidity import Humidity
from triage.site import Site
from triage.static_exposure import (
    STATIC_CAUSES,
    Measured,
    StaticExposure,
    static_exposure,
    story,
)
from triage.validity import CheckVerdict

_WIDEST = Conditions(
    Humidity(0.35, 0.12), "not known: heating season taken, 35 % with a doubt of 12 points",
    None, None, None, None, None, None, 0.0, False, 0.0, None, (),
)  # fmt: skip


@dataclass(frozen=True, slots=True)
class CauseExposure:
    """One cause in the light of physics.

    Args:
        cause: its id.
        static: voltages and charges, for a static cause with a model.
        electrical: current, for a mains cause.
        factor: weight in the ranking, P(felt) here over P(felt) under reference conditions,
            within the bounds of the table; 1 without a model.
        unknown: why there is no estimate.
    """

    cause: str
    static: StaticExposure | None
    electrical: ElectricalExposure | None
    factor: float
    unknown: str = ""

    @property
    def felt(self) -> Probability | None:
        """P(felt) here; None where there is no model or an input was out of range."""
        if self.static is not None:
            return self.static.felt
        return self.electrical.felt if self.electrical is not None else None


@frozen
class Exposure:
    """Everything physically possible at one incident.

    Args:
        conditions: the circumstances it rests on.
        causes: by cause id, those with or without a model alike.
        ceiling: what the monitor's reading allows through one line, None without a reading.
        static_plausible: some static story would be felt often enough; None if not known.
        notes: what was taken for granted, in words.
    """

    conditions: Conditions
    causes: Mapping[str, CauseExposure]
    ceiling: Ceiling | None
    static_plausible: bool | None
    notes: tuple[str, ...]


def estimate_exposure(
    incident: Incident, site: Site, verdicts: tuple[CheckVerdict, ...]
) -> Exposure:
    """What was physically possible under every cause.

    Args:
        incident: the record.
        site: gives rooms and their defaults.
        verdicts: judged checks; valid measurements replace assumptions.
    """
    k = knowledge()
    touched, _ = involved(incident)
    found = c.resolve(incident, site, touched)
    reference = _reference(k, c.care_area(incident, site))
    about = tuple(v for v in verdicts if speaks_about(v, touched, incident))
    measured = _measured(about)
    causes = {name: _static(name, found, measured, reference, k) for name in STATIC_CAUSES}
    read = electrical_story(incident, found, touched, about)
    monitored = read.hazard_current is not None or read.insulation is not None
    void = tuple(void_reasons(incident, site)) if monitored else ()
    causes |= {name: _electrical(name, read, bool(void), found, k) for name in ELECTRICAL_CAUSES}
    for cause in k.causes:
        causes.setdefault(cause, CauseExposure(cause, None, None, 1.0))
    return Exposure(
        found, causes, ceiling(read, void), _plausible(causes, k),
        tuple(_notes(found, void)),
    )  # fmt: skip


def widest_conditions() -> Conditions:
    """What is taken for print where nothing is known: the widest rows, heating-season air."""
    return _WIDEST


def _reference(k: Knowledge, area: str | None) -> Conditions:
    """Reference conditions of a care area; of a ward where the area has no row."""
    row: Mapping[str, Any] = k.reference.get(area or "", k.reference["ward"])
    return Conditions(
        Humidity(row["humidity"] / 100, 0.05), "", row["floor"], row["footwear"], row["casters"],
        int(row["steps"]), 0.0, None, 0.0, False, 0.0, None, (),
    )  # fmt: skip


def _measured(verdicts: tuple[CheckVerdict, ...]) -> Measured:
    """The largest valid static measurements: they say what the story could have reached."""

    def largest(kind: str) -> float | None:
        values = [
            v.value.value
            for v in verdicts
            if v.kind and v.kind.id == kind and v.state == "informative" and v.value
            and v.value.value > 0 and not v.value.bound and not v.as_left
        ]  # fmt: skip
        return max(values, default=None)

    return Measured(
        largest("static_reenactment"), largest("object_voltage_after_rolling"),
        largest("person_to_ground"), largest("object_to_ground"),
    )  # fmt: skip


def _static(
    cause: str, found: Conditions, measured: Measured, reference: Conditions, k: Knowledge
) -> CauseExposure:
    try:
        shown = static_exposure(story(cause, found, measured, _WIDEST))
        weighed = static_exposure(story(cause, found, measured, reference)).felt.value
        usual = replace(reference, object_kind=found.object_kind)
        there = static_exposure(story(cause, usual, Measured(), reference)).felt.value
    except InvalidValue as error:
        return CauseExposure(cause, None, None, 1.0, str(error))
    return CauseExposure(cause, shown, None, _clipped(weighed, there, k.static_factor))


def _electrical(
    cause: str, read: ElectricalStory, void: bool, found: Conditions, k: Knowledge
) -> CauseExposure:
    """A mains cause; an isolated line needs an isolated supply to have an estimate.

    A reading that binds nothing excludes nothing, but a high one still counts: the factor is then
    the larger of the two, so that a doubt about the reading never speaks for static.
    """
    if cause.startswith("isolated_") and found.isolated is False:
        return CauseExposure(cause, None, None, 1.0, "the supply is not isolated")
    told = replace(read, hazard_current=None, insulation=None) if void else read
    try:
        here = electrical_exposure(cause, told)
        weighed = [
            # Shoes and floor are no part of the reference, and a contact left out of the story is
            # its commonest mistake: they are shown and never speak against a mains cause.
            electrical_exposure(
                cause, replace(each, moisture=each.moisture or "dry", series=None)
            ).chance
            for each in ((told, read) if void else (told,))
        ]
        # The priors of these causes were judged for an earthed supply and a direct return path.
        usual = ElectricalStory(told.voltage, told.frequency, told.medical, "dry")
        there = electrical_exposure(cause, usual).chance
    except InvalidValue as error:
        return CauseExposure(cause, None, None, 1.0, str(error))
    return CauseExposure(cause, None, here, _clipped(max(weighed), there, k.mains_factor))


def _clipped(here: float, there: float, bounds: tuple[float, float]) -> float:
    low, high = bounds
    if there <= 0:
        return 1.0 if here <= 0 else high
    return min(max(here / there, low), high)


def _plausible(causes: Mapping[str, CauseExposure], k: Knowledge) -> bool | None:
    felt = [s.felt.value for name in STATIC_CAUSES if (s := causes[name].static) is not None]
    return max(felt) >= k.plausible_above if felt else None


def _notes(found: Conditions, void: tuple[str, ...]) -> list[str]:
    notes = [found.humidity_text if found.humidity else _WIDEST.humidity_text]
    if not found.voltage_known:
        notes.append(f"supply voltage not known: {found.voltage:.0f} V taken")
    for name in ("floor", "footwear", "casters"):
        if name in found.defaults:
            notes.append(f"{name} taken from the site file")
        elif getattr(found, name) is None and (name != "casters" or found.object_kind):
            notes.append(f"{name} not known: the widest row taken")
    notes.extend(f"the monitor's reading binds nothing: {reason}" for reason in void)
    return notes
