"""What a static discharge would have meant here, in lines: the leading static cause in detail."""

from collections.abc import Iterator

from triage import conditions
from triage.assessment import Assessment
from triage.bounds import Probability
from triage.documents.summary import best_of
from triage.documents.wording import (
    amount,
    amount_range,
    item_name,
    percent,
    percent_range,
)
from triage.estimate import Estimate
from triage.knowledge import knowledge
from triage.static_consequences import (
    after_statements,
    current,
    decay,
    far_from_harm,
    gap,
    ignitions,
    lasting,
    noticed,
    room_rules,
    saved_by_voltage,
    shares,
    upsets,
)
from triage.static_exposure import STATIC_CAUSES, StaticExposure

SOURCE = {
    "charging_current": "charging current",
    "floor_resistance": "floor resistance",
    "footwear_resistance": "shoe resistance",
    "caster_resistance": "wheel resistance",
    "resistance_to_earth": "resistance to earth, measured",
    "open_circuit_voltage": "voltage of the materials without a leak",
    "capacitance": "capacitance of the person",
    "object_capacitance": "capacitance of the object",
    "coupling_capacitance": "capacitance between person and plastic",
    "contact_voltage": "voltage of a lifted foot",
    "quick_act_voltage": "voltage of the act",
    "surface_material": "seat or garment",
    "measured_voltage": "measured voltage",
    "humidity": "humidity",
    "model_doubt": "doubt about the model",
    "spread_between_people": "spread between people",
    "interaction": "several of these together",
}
"""Sources of doubt in words; a threshold is named after its sensation."""
MEASURED_BY = {
    "floor_resistance": "floor resistance",
    "footwear_resistance": "footwear resistance",
    "caster_resistance": "caster resistance",
    "capacitance": "body capacitance with a meter",
    "object_capacitance": "capacitance of the object with a meter",
    "humidity": "humidity at the spot",
}
"""The measurement that replaces a source by itself."""


def source_name(source: str) -> str:
    """A source of doubt in words."""
    if source.startswith("interaction"):
        return SOURCE["interaction"]
    return SOURCE.get(source, source.replace("_", " "))


def reenactment(cause: str) -> str:
    """The check that reads the voltage of a cause after the same act."""
    return "the voltage after rolling" if cause == "charged_object" else "a static re-enactment"


def static_alerts(a: Assessment) -> Iterator[str]:
    """Ignition and device upset, where vapour or a declared immunity is on record."""
    known = [e for name in STATIC_CAUSES if (e := a.exposure.causes[name].static) is not None]
    for each in ignitions(a.incident, known) if a.care.ignition else ():
        vapour = each.fuel.replace("_", " ")
        what = (
            f"a vapour in enriched air ({vapour} is the easiest on file)"
            if each.oxygen
            else f"{vapour} vapour in air"
        )
        yield (
            f"Fire: {what} lights from {amount(each.minimum, 'energy')}; a spark that was felt "
            f"carries more with {percent(each.chance)} (the best mixture at the spark is taken)."
        )
    cause = best_of(a, "static")
    leading = a.exposure.causes[cause].static if cause else None
    if leading is not None:
        for item, chance in upsets(a.incident, leading):
            level = amount(item.immunity.value if item.immunity else None, "voltage")
            yield (
                f"Device upset: {item_name(a.incident, item.id)} declares {level}; such a "
                f"discharge exceeds it with {_chance(chance)}."
            )


def static_lines(a: Assessment) -> Iterator[str]:
    """The leading static cause in detail, then ignition, upset and the rules for the air."""
    cause = best_of(a, "static")
    leading = a.exposure.causes[cause].static if cause else None
    if cause is not None and leading is not None:
        yield from _discharge(a, cause, leading)
        yield spread_line(leading.voltage, cause)
    yield from _induction(a)
    yield from static_alerts(a)
    if not a.incident.scene.flammable:
        yield "Not known whether wet alcohol, vapour or oxygen was within reach: ask first."
    area = conditions.care_area(a.incident, a.site)
    for rule, kept in room_rules(a.exposure.conditions, area):
        word = "kept" if kept else "not kept"
        yield f"Rule for the air, {word}: {rule.text} ({rule.citation.text()})."


def _discharge(a: Assessment, cause: str, spark: StaticExposure) -> Iterator[str]:
    name, found = knowledge().causes[cause].name, noticed(spark)
    yield (
        f"{name}: felt {_chance(spark.felt)}, unpleasant {_chance(found['unpleasant'])}, painful "
        f"{percent(found['painful'].value)}; heard {percent(found['heard'].value)}, seen "
        f"{percent(found['seen'].value)}."
    )
    after = after_statements(spark, a.incident.statements)
    given = f"Given that it was {', '.join(after.because)}" if after.because else (
        "Nobody would notice it"
    )  # fmt: skip
    yield (
        f"{given}: {_spread(after.voltage, 'voltage')} on "
        f"{amount(after.capacitance.median, 'capacitance')}."
    )
    path = "metal in the hand" if spark.told.touch.held_metal else "the bare finger"
    jump = gap(spark)
    yield (
        f"Peak current through {path} {_spread(current(spark), 'current')}, over in about "
        f"{amount(lasting(spark).median, 'duration')}; the middle voltage jumps "
        f"{amount(jump, 'length') + ' of air' if jump is not None else 'no gap, it only touches'}."
    )
    if spark.remaining is not None:
        yield (
            f"Two floating bodies share the charge: {_spread(spark.remaining, 'voltage')} stays on "
            "both, so a touch of earthed metal soon after can snap once more."
        )
    gone = decay(spark)
    if gone is not None:
        yield f"Left alone the charge is gone (under 100 V) after {_spread(gone, 'duration')}."
    energy, charge = far_from_harm(spark)
    yield (
        f"At the upper end it has {percent(energy)} of the energy and {percent(charge)} of the "
        "charge at which a single discharge harms directly; the danger is the start: a fall, a "
        "slip of the hand."
    )


def spread_line(estimate: Estimate, cause: str) -> str:
    """What the spread of a voltage comes from, and what measuring would save."""
    parts = [
        f"{source_name(each.source)} {percent(each.share)}"
        for each in shares(estimate)[:3]
        if each.share >= 0.05
    ]
    line = f"The spread of the voltage comes from {', '.join(parts) or 'no single input'}"
    saved = [
        f"{MEASURED_BY[each.source]} {percent(each.saved)}"
        for each in shares(estimate)
        if each.source in MEASURED_BY and each.saved >= 0.05
    ]
    if (whole := saved_by_voltage(estimate)) > 0:
        saved.insert(0, f"{reenactment(cause)} {percent(whole)}")
    return f"{line}; of the spread measuring would save: {', '.join(saved)}." if saved else (
        f"{line}."
    )  # fmt: skip


def _induction(a: Assessment) -> Iterator[str]:
    found = a.exposure.causes.get("induction")
    if found is not None and found.static is not None:
        yield (
            f"Induction by the plastic: {_spread(found.static.voltage, 'voltage')} on the person, "
            f"felt {_chance(found.static.felt)}; it has no weight in the ranking."
        )


def _chance(found: Probability) -> str:
    return f"{percent(found.value)} ({percent_range(found)})"


def _spread(estimate: Estimate, kind: str) -> str:
    return f"{amount(estimate.median, kind)} ({amount_range(estimate.interval(), kind)})"
