"""The facts part of the report: reported, seen, measured, done. No ranking, no estimate."""

from collections.abc import Iterator
from typing import Any

from triage import words as w
from triage.assessment import Assessment
from triage.documents.readings import limit_lines
from triage.documents.wording import item_name, meaning, meanings
from triage.incident import Check, Incident, Statement
from triage.validity import CheckVerdict

STATE_WORDS = {
    "valid_pass": "passed", "valid_fail": "FAILED", "invalid_pass": "does not count",
    "invalid_fail": "failed, repeat",
    "repeated": "failed, did not count, repeated later", "informative": "read",
    "not_done": "not done",    "not_practicable": "not practicable",
}  # fmt: skip
Block = dict[str, Any]


def facts_sections(a: Assessment) -> list[dict[str, Any]]:
    """Every section of the facts part that has something to say."""
    incident = a.incident
    found = [
        ("What was reported", False, list(_statements(incident))),
        ("Persons", False, [_table((("Person", 28), ("Signs", 42), ("Review", 30)),
                                   [_person_row(p) for p in incident.persons])]),
        ("Items", True, [_table((("Item", 26), ("Power and supply", 26), ("State after", 22),
                                 ("Whose, last good test", 26)), list(_items(incident)))]),
        ("Contacts", False, [_list(list(_contacts(incident)))]),
        ("Place and supply", False, [_list(list(_place(a)))]),
        ("Scene and custody", False, [_list(list(_scene(incident)))]),
        ("Readings against limits", True, list(_checks(a))),
        ("Notifications and numbers", False, [_list(list(_numbers(incident)))]),
    ]  # fmt: skip
    return [
        {"title": title, "wide": wide, "blocks": [b for b in blocks if b]}
        for title, wide, blocks in found
        if any(blocks)
    ]


def _table(columns: tuple[tuple[str, int], ...], rows: list[list[str]]) -> Block:
    if not rows:
        return {}
    shaped = [{"name": name, "width": width} for name, width in columns]
    return {"kind": "table", "columns": shaped, "rows": rows}


def _list(lines: list[str]) -> Block:
    return {"kind": "list", "lines": lines} if lines else {}


def _statements(incident: Incident) -> Iterator[Block]:
    for each in incident.statements:
        heading = ", ".join(_statement_heading(each))
        if each.words:
            language = each.language or "en"
            yield {"kind": "quote", "heading": heading, "text": each.words, "language": language}
        mapped = list(_mapped(each))
        if mapped:
            by = f" (mapped by {each.mapped_by})" if each.mapped_by else ""
            text = f"{each.id}, as mapped{by}: {'; '.join(mapped)}."
            yield {"kind": "text", "text": text, "class": "note"}


def _statement_heading(each: Statement) -> Iterator[str]:
    yield f"Reported by {each.by or 'a witness'} ({each.id})"
    if each.at:
        yield each.at.text
    if each.talked:
        yield meaning(w.TALKED, each.talked)
    if each.interpreter == "yes":
        yield "through an interpreter"


def _mapped(each: Statement) -> Iterator[str]:
    for name, words, value in (("felt", w.SENSATION, each.sensation),
                               ("when", w.TIMING, each.timing),
                               ("how long", w.DURATION, each.duration)):  # fmt: skip
        if value is not None:
            yield f"{name}: {meaning(words, value)}"
    for name, answer in (("again at once", each.repeat_at_once),
                         ("others felt it", each.others_felt),
                         ("again after moving", each.repeat_after_moving),
                         ("crack heard", each.crack_heard),
                         ("spark seen", each.spark_seen)):  # fmt: skip
        if answer is not None:
            yield f"{name}: {answer}"


def _person_row(person: Any) -> list[str]:
    review = meaning(w.REVIEW, person.review)
    if person.review_at:
        review += f", {person.review_at.text}"
    signs = meanings(w.SIGNS, person.signs)
    if person.breach == "yes":
        signs += "; skin or glove pierced"
    return [person.role or meaning(w.WHO, person.who), signs, review]


def _items(incident: Incident) -> Iterator[list[str]]:
    for item in incident.items:
        supply = [meaning(w.POWER, item.power)]
        supply += [meaning(w.SUPPLY, item.supply)] if item.supply else []
        supply += [f"at {item_name(incident, item.outlet)}"] if item.outlet else []
        owner = [meaning(w.OWNER, item.owner)] if item.owner else []
        owner += [f"last good {item.last_good.text}"] if item.last_good else []
        owner += [item.last_good_value] if item.last_good_value else []
        state = meanings(w.CONDITION, item.condition)
        whose = "; ".join(owner) or "not known"
        yield [item_name(incident, item.id), "; ".join(supply), state, whose]


def _contacts(incident: Incident) -> Iterator[str]:
    for each in incident.contacts:
        who = next((p.role or p.id for p in incident.persons if p.id == each.person), "somebody")
        things = " and ".join(item_name(incident, i) for i in each.items) or "something not known"
        details = [f"with the {meaning(w.BODY_PART, each.body_part)}" if each.body_part else "",
                   meaning(w.TOUCH, each.touch) if each.touch else "",
                   meaning(w.COVERING, each.covering) if each.covering else "",
                   meaning(w.MOISTURE, each.moisture),
                   f"also touching: {meaning(w.ALSO_TOUCHING, each.also_touching)}"]  # fmt: skip
        yield f"{who} touched {things}; {', '.join(d for d in details if d)}."


def _place(a: Assessment) -> Iterator[str]:
    incident, s = a.incident, a.incident.surroundings
    found = a.exposure.conditions
    yield f"Air: {found.humidity_text}."
    shoes = meaning(w.FOOTWEAR, found.footwear)
    yield f"Floor: {meaning(w.FLOOR, found.floor)}; footwear: {shoes}."
    air = meaning(w.AIR_HANDLING, s.air_handling) if s.air_handling else None
    seat = meaning(w.SEAT, s.seat) if s.seat else None
    garment = meaning(w.GARMENT, s.garment) if s.garment else None
    for label, value in (("Air handling", air), ("Risen from", seat), ("Taken off", garment),
                         ("Garments", s.garments),
                         ("Furniture and films", s.furniture),
                         ("Cleaning product", s.cleaning_product),
                         ("Sensor", s.sensor)):  # fmt: skip
        if value:
            yield f"{label}: {value}."
    yield from _supply(incident)


def _supply(incident: Incident) -> Iterator[str]:
    s = incident.supply
    if s.kind:
        volts = f", {s.voltage.text}" if s.voltage else ""
        yield f"Supply: {meaning(w.SUPPLY, s.kind)}{volts}."
    reading = s.current_reading or s.resistance_reading
    if reading:
        when = f" at {s.read_at.text}" if s.read_at else ", time not known"
        yield f"Monitor ({meaning(w.MONITOR, s.monitor)}) read {reading.text}{when}."
    for name, answer, source in (("Monitor in alarm", s.alarm, s.alarm_source),
                                 ("Breaker or residual-current device tripped", s.trip,
                                  s.trip_source)):  # fmt: skip
        if answer:
            known = f" ({meaning(w.SOURCE, source)})" if source else ""
            yield f"{name}: {answer}{known}."


def _scene(incident: Incident) -> Iterator[str]:
    scene = incident.scene
    by = f", by {scene.changed_by}" if scene.changed_by else ""
    at = f", {scene.changed_at.text}" if scene.changed_at else ""
    yield f"Changed before it was looked at: {meanings(w.CHANGES, scene.changes)}{by}{at}."
    yield f"Depends on it: {meaning(w.DEPENDENCE, scene.dependence)}."
    for name, answer in (("Patient connected", scene.patient_connected),
                         ("Replacement at hand", scene.replacement),
                         ("Conductor to the heart", scene.heart_conductor),
                         ("Logs saved before power-off", scene.logs_saved)):  # fmt: skip
        if answer:
            yield f"{name}: {answer}."
    if scene.log_clock_error:
        yield f"Clock error of logs: {scene.log_clock_error}."
    for photo in scene.photos:
        digest = f", SHA-256 {photo.sha256[:16]}…" if photo.sha256 else ""
        yield f"Photograph: {photo.what or 'not described'}{digest}."
    for step in scene.custody:
        parts = [f"from {step.from_role}" if step.from_role else "",
                 f"to {step.to_role}" if step.to_role else "",
                 step.at.text if step.at else "", step.where or "",
                 "contaminated" if step.contaminated == "yes" else "",
                 step.contained or ""]  # fmt: skip
        yield f"Custody of {item_name(incident, step.item)}: {', '.join(p for p in parts if p)}."


def _checks(a: Assessment) -> Iterator[Block]:
    if not a.verdicts:
        yield {"kind": "text", "text": "No check is on record."}
        return
    columns = (("Check and item", 25), ("Stage, by, when", 24), ("Reading", 11),
               ("Limit and edition", 20), ("Result", 20))  # fmt: skip
    yield _table(columns, [_check_row(v, a.incident) for v in a.verdicts])
    warned = dict.fromkeys(
        f"{v.limit.text}, {v.limit.edition.text()}: {v.limit.warning}."
        for v in a.verdicts if v.limit and v.limit.warning
    )  # fmt: skip
    if warned:
        yield _list(list(warned))
    yield _list(list(limit_lines(a)))


def _check_row(v: CheckVerdict, incident: Incident) -> list[str]:
    name = v.kind.name if v.kind else v.check.kind or "not named"
    what = f"{name}: {item_name(incident, v.check.of) if v.check.of else 'item not named'}"
    limit = "none in the table"
    if v.limit:
        sense = "at most" if v.limit.sense == "max" else "at least"
        limit = f"{sense} {v.limit.text}, {v.limit.edition.text()} ({v.limit.citation.known})"
    result = STATE_WORDS[v.state]
    if v.as_left:
        result += ", as left: counts for release only"
    if v.reasons:
        result += f": {'; '.join(v.reasons)}"
    return [what, _stage(v.check), v.check.value or "—", limit, result]


def _stage(check: Check) -> str:
    found = [check.stage.replace("_", " ") if check.stage else "stage not known"]
    found += [check.by] if check.by else []
    found += [check.at.text] if check.at else []
    found += [f"instrument {check.instrument}"] if check.instrument else []
    return ", ".join(found)


def _numbers(incident: Incident) -> Iterator[str]:
    for each in incident.cross_references:
        yield f"{meaning(w.REFERENCE_KIND, each.kind)}: {each.number or 'not known'}."
    for note in incident.outcome.notifications:
        number = f", number {note.number}" if note.number else ""
        at = f", {note.at.text}" if note.at else ""
        yield f"Told: {note.to or 'not named'}{at}{number}."
    decided = incident.outcome.reportable or "undecided"
    by = f" by {incident.outcome.reportable_by}" if incident.outcome.reportable_by else ""
    reason = f": {incident.outcome.reportable_reason}" if incident.outcome.reportable_reason else ""
    yield f"Reportable to an authority: {meaning(w.REPORTABLE, decided)}{by}{reason}."
