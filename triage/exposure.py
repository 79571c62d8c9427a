"""What was physically possible, for each cause: estimates, P(felt), and its weight in the ranking.

The only place that changes record quantities into physics. A formula out of its published range
gives unknown with the reason, never a number.
"""

from collections.abc import Iterator, Mapping
from dataclasses import dataclass, replace
from functools import cache
from typing import Any

from triage import conditions as c
from triage.bounds import Ceiling, Probability, Reading
from triage.conditions import Conditions, Touch
from triage.electrical_exposure import (
    ELECTRICAL_CAUSES,
    ElectricalExposure,
    ElectricalStory,
    ceiling,
    felt_chance,
)
from triage.electrical_story import electrical_story, lasted, path_through, void_reasons
from triage.errors import InvalidValue
from triage.frozen import frozen
from triage.incident import Incident
from triage.involvement import involved, speaks_about
from triage.knowledge import Knowledge, knowledge
from triage.materials import load
from triage.physics.humidity import Humidity
from triage.quantity import worded
from triage.site import Site
from triage.static_exposure import (
    STATIC_CAUSES,
    Measured,
    StaticExposure,
    static_exposure,
    story,
)
from triage.static_readings import taken
from triage.validity import CheckVerdict

_NO_HUMIDITY = "not known: heating season taken, 35 % with a doubt of 12 points"


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
    measured = _measured(verdicts, about)
    causes = {name: _static(name, found, measured, reference, k) for name in STATIC_CAUSES}
    read = electrical_story(incident, found, touched, about)
    monitored = read.hazard_current is not None or read.insulation is not None
    void = tuple(void_reasons(incident, site, verdicts)) if monitored else ()
    how = lasted(incident), path_through(incident.contacts)
    for name in ELECTRICAL_CAUSES:
        causes[name] = _electrical(ElectricalExposure(name, read, *how), bool(void), found, k)
    for cause in k.causes:
        causes.setdefault(cause, CauseExposure(cause, None, None, 1.0))
    if found.touch.plastic and "induction" in causes:
        causes["induction"] = _induction(found, measured)
    return Exposure(
        found, causes, ceiling(read, void), _plausible(causes, k),
        tuple(_notes(found, void)),
    )  # fmt: skip


@cache
def widest_conditions() -> Conditions:
    """What is taken for print where nothing is known: the widest rows, heating-season air."""
    return Conditions(
        Humidity(0.35, 0.12), _NO_HUMIDITY, None, None, None, None, taken("pause", "duration"),
        None, 0.0, False, 0.0, None, (),
    )  # fmt: skip


def _reference(k: Knowledge, area: str | None) -> Conditions:
    """Reference conditions of a care area; of a ward where the area has no row."""
    row: Mapping[str, Any] = k.reference.get(area or "", k.reference["ward"])
    return Conditions(
        Humidity(row["humidity"] / 100, 0.05), "", row["floor"], row["footwear"], row["casters"],
        int(row["steps"]), 0.0, None, 0.0, False, 0.0, None, (),
    )  # fmt: skip


def _measured(verdicts: tuple[CheckVerdict, ...], about: tuple[CheckVerdict, ...]) -> Measured:
    """The valid static readings; the largest of each kind says what the story could have reached.

    Of wheels the lowest counts, since it drains the object. A floor is read where people stand,
    not on what was touched.

    Args:
        verdicts: all judged checks.
        about: those made on what was touched or on the person.
    """

    def readings(kind: str, made: tuple[CheckVerdict, ...]) -> list[tuple[float, str]]:
        found = [v.value for v in made if v.kind and v.kind.id == kind and v.value
                 and v.state == "informative" and not v.as_left]  # fmt: skip
        return sorted((each.value, each.bound) for each in found if each.value >= 0)

    def largest(kind: str, unit: str, made: tuple[CheckVerdict, ...] = about) -> Reading | None:
        found = readings(kind, made)
        return _reading(*found[-1], unit) if found else None

    casters = readings("caster_resistance", about)
    return Measured(
        largest("static_reenactment", "V"),
        largest("object_voltage_after_rolling", "V"),
        largest("person_to_ground", "ohm"),
        largest("object_to_ground", "ohm"),
        largest("floor_resistance", "ohm", verdicts),
        largest("footwear_resistance", "ohm"),
        _reading(*casters[0], "ohm") if casters else None,
    )


def _reading(value: float, bound: str, unit: str) -> Reading | None:
    """A reading; 0 V is below what a meter resolves, and 0 ohm is no reading."""
    if value > 0:
        return Reading(value, unit, bound)
    return Reading(taken("zero_voltage", "voltage"), unit, "<") if unit == "V" else None


def _static(
    cause: str, found: Conditions, measured: Measured, reference: Conditions, k: Knowledge
) -> CauseExposure:
    """A static cause; the act is a finding of its own and is the same in both conditions."""
    touch = found.touch
    usual = replace(
        reference, object_kind=found.object_kind,
        touch=Touch(act=touch.act, pushing=touch.pushing, lying=touch.lying),
    )  # fmt: skip
    # Earthed metal in the other hand is an adverse answer: it is shown and never speaks for static.
    here = replace(found, touch=replace(touch, earthed=False))
    try:
        shown = static_exposure(story(cause, found, measured, widest_conditions()))
        weighed = static_exposure(story(cause, here, measured, reference)).felt.value
        there = static_exposure(story(cause, usual, Measured(), reference)).felt.value
    except InvalidValue as error:
        return CauseExposure(cause, None, None, 1.0, str(error))
    return CauseExposure(cause, shown, None, _clipped(weighed, there, k.static_factor))


def _induction(found: Conditions, measured: Measured) -> CauseExposure:
    """Induction by a plastic on record: shown, and neutral in the ranking.

    No published voltage or distance says how often it is strong enough.
    """
    told = story("induction", found, measured, widest_conditions())
    try:
        return CauseExposure("induction", static_exposure(told), None, 1.0)
    except InvalidValue as error:
        return CauseExposure("induction", None, None, 1.0, str(error))


def _electrical(
    read: ElectricalExposure, void: bool, found: Conditions, k: Knowledge
) -> CauseExposure:
    """A mains cause; an isolated line needs an isolated supply to have an estimate.

    A reading that binds nothing excludes nothing, but a high one still counts: the factor is then
    the larger of the two, so that a doubt about the reading never speaks for static.
    """
    cause = read.cause
    if cause.startswith("isolated_") and found.isolated is False:
        return CauseExposure(cause, None, None, 1.0, "the supply is not isolated")
    told = replace(read.told, hazard_current=None, insulation=None) if void else read.told
    try:
        weighed = [
            # Shoes, floor and a small contact are no part of the reference, and a contact left out
            # of the story is its commonest mistake: they are shown and never speak against a
            # mains cause.
            felt_chance(
                cause, replace(each, moisture=each.moisture or "dry", series=None, area=None)
            )
            for each in ((told, read.told) if void else (told,))
        ]
        # The priors of these causes were judged for an earthed supply and a direct return path.
        usual = ElectricalStory(told.voltage, told.frequency, told.medical, "dry")
        there = felt_chance(cause, usual)
    except InvalidValue as error:
        return CauseExposure(cause, None, None, 1.0, str(error))
    factor = _clipped(max(weighed), there, k.mains_factor)
    return CauseExposure(cause, None, replace(read, told=told), factor)


def _clipped(here: float, there: float, bounds: tuple[float, float]) -> float:
    low, high = bounds
    if there <= 0:
        return 1.0 if here <= 0 else high
    return min(max(here / there, low), high)


def _plausible(causes: Mapping[str, CauseExposure], k: Knowledge) -> bool | None:
    felt = [s.felt.value for name in STATIC_CAUSES if (s := causes[name].static) is not None]
    return max(felt) >= k.plausible_above if felt else None


def _notes(found: Conditions, void: tuple[str, ...]) -> list[str]:
    notes = [found.humidity_text if found.humidity else _NO_HUMIDITY]
    if not found.voltage_known:
        notes.append(f"supply voltage not known: {found.voltage:.0f} V taken")
    for name in ("floor", "footwear", "casters"):
        if name in found.defaults:
            notes.append(f"{name} taken from the site file")
        elif getattr(found, name) is None and (name != "casters" or found.object_kind):
            notes.append(f"{name} not known: the widest row taken")
    notes.extend(_touch_notes(found))
    notes.extend(f"the monitor's reading binds nothing: {reason}" for reason in void)
    return notes


def _touch_notes(found: Conditions) -> Iterator[str]:
    """What was taken for granted about act and contact of a static discharge."""
    touch = found.touch
    if found.pause is None:
        pause = worded(taken("pause", "duration"), "duration")
        yield f"pause before the touch not known: {pause} taken for static"
    if touch.act != "rise":
        yield f"act of the hands: {load().acts[touch.act].text}"
    if touch.farads is not None:
        how = "measured" if touch.farads_from == "measured" else "from its size"
        yield f"capacitance of the object {worded(touch.farads, 'capacitance')}, {how}"
    if touch.floats:
        yield "what was touched stands on insulating wheels and keeps part of a charge"
    if touch.held_metal:
        yield "the spark went to metal in the hand, which is felt less easily"
