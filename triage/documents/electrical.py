"""The electrical lines of the analysis: currents by contact, readings explained, other sources."""

from collections.abc import Iterator
from typing import Any

from triage.assessment import Assessment
from triage.documents.held_fast import held_lines
from triage.documents.wording import NBSP, amount, amount_range, item_name, percent
from triage.documents.wording import percent_range as percents
from triage.electrical_contacts import (
    ContactCause,
    ContactExposure,
    contact_exposures,
    degraded_earth,
)
from triage.electrical_exposure import ElectricalStory, chassis_spark
from triage.electrical_story import open_void_questions, valid_reading, void_reasons
from triage.electrical_tables import OtherSource, monitor_tables, other_sources
from triage.incident import Incident
from triage.knowledge import knowledge
from triage.materials import load
from triage.physics.monitors import device_step
from triage.physics.sensation import perceived
from triage.physics.touch_current import Mains
from triage.quantity import parse
from triage.tables import table

Block = dict[str, Any]
_PATHS = {
    "left_hand_feet": "hand to feet, as the left one", "both_hands_feet": "both hands to feet",
    "foot_foot": "foot to foot", None: "not known, the most dangerous one taken",
}  # fmt: skip
_SEES = {"yes": "sees", "no": "does not see", "partly": "does not reliably see"}
_EARTH = ("earth_continuity", "earth_in_place")
_UNNOTICED = 1e-6
"""Current that is only named as less than this [A]: far below every curve of perception."""
_KINDS = {"total_hazard_current": ("hazard",), "insulation_resistance": ("resistance",)}
_KIND_NAME = {"hazard": "A monitor in milliamperes", "resistance": "A monitor in ohms"}


def electrical_blocks(a: Assessment) -> list[Block]:
    """Current, ceiling, chance and zone of each mains cause, contact by contact."""
    found = contact_exposures(a.incident, a.site, a.exposure.conditions, a.verdicts)
    blocks: list[Block] = []
    for same in _alike(found):
        blocks.append({"kind": "heading", "text": "; ".join(_contact_name(c, a) for c in same)})
        blocks.append({"kind": "text", "class": "note", "text": _circumstances(same[0])})
        blocks.append(_table(same[0], a))
    blocks.append({"kind": "list", "lines": list(_closing_lines(a, found))})
    return blocks


def electrical_lines(a: Assessment) -> Iterator[str]:
    """The same for the terminal, a line for each cause."""
    found = contact_exposures(a.incident, a.site, a.exposure.conditions, a.verdicts)
    for same in _alike(found):
        yield f"{'; '.join(_contact_name(c, a) for c in same)}. {_circumstances(same[0])}"
        for name, current, most, could, must, worst in _rows(same[0], a):
            if most:
                yield (f"{name}: {current}; at most {most}; could be felt {could}, must be {must}; "
                       f"worst credible case {worst}.")  # fmt: skip
            else:
                yield f"{name}: {current}, {worst}."
    yield from _closing_lines(a, found)


def _closing_lines(a: Assessment, found: tuple[ContactExposure, ...]) -> Iterator[str]:
    yield from ceiling_lines(a)
    yield from held_lines(a, found)
    yield from _measured_lines(a, found)
    yield from dict.fromkeys(_spark_lines(found))
    yield from _volt_lines(a)
    yield from sight_lines(a, found)


def _alike(found: tuple[ContactExposure, ...]) -> list[list[ContactExposure]]:
    """Contacts under the same circumstances together, so that a table is printed once."""
    groups: dict[tuple[Any, ...], list[ContactExposure]] = {}
    for each in found:
        groups.setdefault((each.story, each.duration, each.path), []).append(each)
    return list(groups.values())


def _contact_name(found: ContactExposure, a: Assessment) -> str:
    contact = found.contact
    if contact is None:
        return "No contact on record; whatever was touched"
    things = " and ".join(item_name(a.incident, i) for i in contact.items)
    return f"Contact {contact.id}: {things or 'something not known'}"


def _circumstances(found: ContactExposure) -> str:
    story, body = found.story, found.body
    skin = {"dry": "dry skin", "saltwater": "damp or wet skin"}.get(
        story.moisture or "", "moisture not known, wet taken"
    )
    area = "a dry fingertip" if story.area else "a large contact"
    time = f"{amount(found.duration, 'duration', 1)} taken" if found.duration else "not known, long"
    supply = "isolated" if story.isolated else "earthed or not known to be isolated"
    shoes = ("; through shoes and floor, nothing else touched as told, which a contact left out "
             "of the story would change" if story.series is not None else "")  # fmt: skip
    return (
        f"{amount(story.voltage, 'voltage', 3)}, {amount(story.frequency, 'frequency')}, supply "
        f"{supply}; {skin}, {area}; body {amount(body.median, 'resistance')} "
        f"({amount_range((body.low, body.high), 'resistance')}){shoes}; duration {time}; path "
        f"{_PATHS[found.path]}, heart factor {found.factor:g}. The worst credible case takes a "
        f"large contact, no shoes and the 95{NBSP}% point."
    )


def _ranked(found: ContactExposure, a: Assessment) -> list[ContactCause]:
    place = {cause: n for n, cause in enumerate(a.posterior.ranked)}
    return sorted(found.causes, key=lambda row: place[row.exposure.cause])


def _cells(row: ContactCause) -> tuple[str, ...]:
    each = row.exposure
    middle = amount(each.current.median, "current")
    interval = amount_range(each.current.interval(), "current")
    rests = {"monitor": "by the monitor", "measured_voltage": "by the volts measured"}.get(
        row.rests_on, "by the supply"
    )
    could, spread = percent(each.felt.value), percents(each.felt)
    return (
        middle if middle == interval else f"{middle} ({interval})",
        f"{amount(row.most, 'current')} {rests}",
        could if could == spread else f"{could} ({spread})",
        percent(each.must_be_felt),
        f"{row.zone} at {amount(row.worst, 'current')}",
    )


def _rows(found: ContactExposure, a: Assessment) -> list[list[str]]:
    """One row a cause, causes that come out alike in one row, the most probable first."""
    names, groups = knowledge().causes, dict[tuple[str, ...], list[str]]()
    for row in _ranked(found, a):
        groups.setdefault(_cells(row), []).append(names[row.exposure.cause].name)
    rows = [["; ".join(causes), *cells] for cells, causes in groups.items()]
    reasons: dict[str, list[str]] = {}
    for cause, why in found.unknown:
        reasons.setdefault(why, []).append(names[cause].name)
    return rows + [["; ".join(causes), "no estimate", "", "", "", why]
                   for why, causes in reasons.items()]  # fmt: skip


def _table(found: ContactExposure, a: Assessment) -> Block:
    columns = (("If it was", 28), ("Current, 9 in 10", 18), ("At most", 15),
               ("Could be felt", 14), ("Must be", 11), ("Worst credible", 14))  # fmt: skip
    return {"kind": "table", "rows": _rows(found, a),
            "columns": [{"name": n, "width": x} for n, x in columns]}  # fmt: skip


def ceiling_lines(a: Assessment) -> Iterator[str]:
    """What the monitor's reading allows, why it binds nothing, and what is not settled about it."""
    ceiling, supply = a.exposure.ceiling, a.incident.supply
    yield (
        "At most by the supply: its whole voltage over 500 Ω, shoes and floor left out. No cause "
        "is excluded because a current is too small to be felt."
    )
    if ceiling is None or ceiling.value is None:
        if a.exposure.conditions.isolated:
            yield "No monitor reading is on record, so nothing limits the current of one line."
        return
    reading = supply.current_reading or supply.resistance_reading
    shown = reading.text if reading else "not known"
    added = "a tenth is added for the instrument"
    if supply.current_reading is None:
        added = "a monitor in ohms sees no capacitance, 200 nF are taken"
    value = amount(ceiling.value, "current")
    if ceiling.holds:
        yield f"By the monitor ({shown}; {added}): at most {value}, from one line to earth only."
    else:
        why = "; ".join(void_reasons(a.incident, a.site, a.verdicts))
        yield f"The monitor ({shown}) would allow {value}, but binds nothing: {why}."
    asked = open_void_questions(a.incident, a.verdicts)
    questions = [row.question for row in monitor_tables().void if row.id in asked]
    if questions:
        yield f"An adverse answer would void it: {' '.join(questions)}"


def _measured_lines(a: Assessment, found: tuple[ContactExposure, ...]) -> Iterator[str]:
    """Readings on record turned into a current: the earth as measured, the touch current."""
    earths = [v for v in a.verdicts if v.kind and v.kind.id in _EARTH]
    ohms = [r for kind in _EARTH if (r := valid_reading(tuple(earths), kind)) is not None]
    # Off the scale says only how good it was not: that is an open earth, above.
    if ohms and not any(v.value and v.value.bound == ">" for v in earths):
        current = degraded_earth(found[0].story, max(ohms))
        low, high = current.interval()
        amounts = (
            f"{amount(current.median, 'current')} ({amount_range((low, high), 'current')})"
            if high >= _UNNOTICED else f"less than {amount(_UNNOTICED, 'current')}"
        )  # fmt: skip
        yield (
            f"Through an earth of {amount(max(ohms), 'resistance')}, the worst as measured, "
            f"ordinary leakage would drive {amounts} through the person; an earth that opens at "
            "times drives what stands above for an open one."
        )
    if any(each.story.touch_current for each in found):
        yield "For an open earth the touch current as measured is taken, not an assumed filter."


def _spark_lines(found: tuple[ContactExposure, ...]) -> Iterator[str]:
    """Charge and energy of a case with an open earth: why it feels like static."""
    for story in dict.fromkeys(each.story for each in found):
        spark = chassis_spark(story)
        felt = perceived(spark.charge, load().threshold("felt"))
        text = (
            f"A case whose earth is open stands at up to {amount(spark.voltage, 'voltage')} crest "
            f"and gives a contact spark of {amount(spark.charge.median, 'charge')} "
            f"({amount_range(spark.charge.interval(), 'charge')}), "
            f"{amount(spark.energy.median, 'energy')}: felt as a snap by "
            f"{percent(felt.value)} ({percents(felt)}), like static, at every touch."
        )
        if spark.through_shoes is not None:
            shared = amount(spark.through_shoes.median, "charge")
            text += f" Through these shoes, nothing else touched, {shared}."
        if story.isolated:
            text += " On an isolated supply this is the most; a balanced one gives less."
        yield text


def _volt_lines(a: Assessment) -> Iterator[str]:
    """A voltage that a supply has between lines: it is taken in full."""
    volts = a.exposure.conditions.voltage
    for row in table("touch_sources")["line_to_line"]["voltages"]:
        if abs(parse(row["between"], "voltage").value - volts) < 0.5 and (
            a.exposure.conditions.isolated is not True
        ):
            yield (f"{row['between']} may be the voltage between two lines; one line to earth "
                   f"then has {row['to_earth']}. The whole voltage is taken.")  # fmt: skip


def sight_lines(a: Assessment, found: tuple[ContactExposure, ...]) -> Iterator[str]:
    """What the monitor of an isolated supply would show of these causes, and what it cannot see."""
    sights = dict.fromkeys(s for each in found for row in each.causes for s in row.sight)
    if not sights:
        return
    for kind in _KINDS.get(_monitor(a) or "", ("hazard", "resistance")):
        for word, verb in _SEES.items():
            conditions = [
                each.condition[0].lower() + each.condition[1:]
                + (f" ({each.note})" if each.note and word != "yes" else "")
                for each in sights if getattr(each, kind) == word
            ]  # fmt: skip
            if conditions:
                yield f"{_KIND_NAME[kind]} {verb}: {'; '.join(conditions)}."
    yield (
        f"When the earth of an ordinary device opens the reading in milliamperes falls, by about "
        f"{amount(_fall(found[0].story), 'current')}. A quiet monitor removes no cause."
    )


def _fall(told: ElectricalStory) -> float:
    """How far the reading falls when the earth of an ordinary device opens [A]."""
    given = next(r for r in table("touch_sources")["sources"]
                 if r["id"] == "filter_capacitance_medical")  # fmt: skip
    filters = parse(given["median"], "capacitance").value
    return device_step(Mains(told.voltage, told.frequency), filters)


def _monitor(a: Assessment) -> str | None:
    room = a.site.room(a.incident.place.room)
    return a.incident.supply.monitor or (room.monitor if room else None)


def other_source_blocks(a: Assessment) -> list[Block]:
    """Sources besides mains leakage that are not excluded: what to ask and what would show it."""
    rows = [[_source_name(s), s.felt_as, s.question, s.shows, s.excludes]
            for s in not_excluded(a)]  # fmt: skip
    if not rows:
        return []
    columns = (("Source", 17), ("Felt as", 20), ("Ask", 22), ("Shown by", 20), ("Excluded by", 21))
    return [
        {"kind": "table", "rows": rows, "columns": [{"name": n, "width": x} for n, x in columns]},
        {"kind": "text", "class": "note",
         "text": "Each is tied to a moment: the answer to its question decides, not a mains test."},
    ]  # fmt: skip


def other_source_lines(a: Assessment) -> Iterator[str]:
    """The same for the terminal."""
    for s in not_excluded(a):
        yield (f"{_source_name(s)} ({s.output}): felt as {s.felt_as}. Ask: {s.question} "
               f"Shown by: {s.shows}. Excluded by: {s.excludes}.")  # fmt: skip


def not_excluded(a: Assessment) -> tuple[OtherSource, ...]:
    """Sources of a cause that no answer or check has closed, and of mains causes still possible."""
    causes = knowledge().causes
    left = {
        name for name, cause in causes.items()
        if f"not excluded: {cause.name.lower()}" in a.gate.shut_by
        or (cause.mechanism == "mains" and a.sensitivity.ranges[name].high >= 0.02)
    }  # fmt: skip
    return tuple(
        s for s in other_sources()
        if left & set(s.causes) and (s.id != "glove" or _gloved(a.incident))
    )  # fmt: skip


def _gloved(incident: Incident) -> bool:
    """Whether a glove was in the path, or may have been."""
    return not incident.contacts or any(c.covering in (None, "glove") for c in incident.contacts)


def _source_name(source: OtherSource) -> str:
    return source.id.replace("_", " ").capitalize()
