"""The work request to facilities: where, what was observed, what to record first, tests, return.

It holds no ranking, no estimate, no role of a witness and no free text of a statement.
"""

from collections.abc import Iterator
from typing import Any

from triage import words as w
from triage.assessment import Assessment
from triage.check_table import CheckKind, check_kinds
from triage.conditions import supply_kind
from triage.documents.limit_words import limit_text
from triage.documents.paper import Paper, case_paper, contact_lines
from triage.documents.wording import (
    NBSP,
    item_name,
    meaning,
    meanings,
    nobody_depends,
    room_name,
    spoken,
)
from triage.incident import Item, Statement
from triage.paper_texts import PaperTexts

Block = dict[str, Any]
_OF_PLACE = ("outlet", "circuit", "furniture_fixed", "building_metal", "data_or_phone_line")
_EVERYWHERE = ("metal_voltage_loaded", "two_metal_voltage", "site_event_log")
_EARTHED = ("outlet_test",)
_ISOLATED = ("isolated_line_voltages", "isolated_alarm_test", "monitor_log")


def work_request(a: Assessment) -> Paper:
    """One page for the electrician, with blanks and a return box.

    Args:
        a: the assessment.
    """
    t = PaperTexts(a.site)
    known = a.incident.scene.dependence
    lead = "" if nobody_depends(a.incident) else t("tag.condition")
    depends = meaning(w.DEPENDENCE, known) if known else t("workrequest.not_recorded")
    sections = [
        ("where", [_list(_where(a))]),
        ("observed", [_list(_observed(a))]),
        ("state", [_write([[t("workrequest.depends"), depends, t("workrequest.branch"), ""],
                           [t("workrequest.isolated"), "", t("workrequest.area"), ""]])]),
        ("before", [{"kind": "steps", "lines": t.several("workrequest.record")}]),
        ("tests", _tests(a, t)),
        ("return", [_write(_return_box(t))]),
        ("readings", [_list([*_monitor(a), *_readings(a)]
                            or [t("workrequest.no_reading")])]),
    ]  # fmt: skip
    back = contact_lines(t, a.site, ("biomedical",))[0]
    titles = {"return": f"{t('workrequest.return')}: {back}"}
    matter = {
        "form": "dense",
        "heading": f"{t('workrequest.title')} {a.record.case}",
        "lead": lead,
        "sections": [{"title": titles.get(name) or t(f"workrequest.{name}"), "blocks": blocks}
                     for name, blocks in sections],
    }  # fmt: skip
    return case_paper("paper.html", t, a=a, title=t("workrequest.title"), matter=matter)


def _return_box(t: PaperTexts) -> list[list[str]]:
    """Blanks two by two."""
    blanks = [[each, ""] for each in t.several("workrequest.returned")]
    return [first + second for first, second in zip(blanks[::2], blanks[1::2], strict=True)]


def _list(lines: Any) -> Block:
    return {"kind": "list", "lines": list(lines)}


def _write(rows: list[list[str]]) -> Block:
    return {"kind": "lines", "rows": rows}


def _where(a: Assessment) -> Iterator[str]:
    place, room = a.incident.place, a.site.room(a.incident.place.room)
    parts = [room_name(a), place.position or "", place.room or ""]
    yield " · ".join(dict.fromkeys(each for each in parts if each))
    if room and room.outlet_group:
        yield room.outlet_group
    yield from (_place_item(each, a) for each in a.incident.items if each.kind in _OF_PLACE)
    for each in a.incident.items:
        if each.outlet:
            yield f"{item_name(a.incident, each.id)}: {item_name(a.incident, each.outlet)}"
    when = a.incident.event.at
    numbers = [f"{spoken(r.kind or '')} {r.number}" for r in a.incident.cross_references
               if r.number]  # fmt: skip
    yield " · ".join([when.text if when else "time not known", *numbers])


def _place_item(item: Item, a: Assessment) -> str:
    parts = [item_name(a.incident, item.id), item.asset or "", item.outlet_group or "",
             item_name(a.incident, item.circuit) if item.circuit else "",
             meaning(w.SUPPLY, item.supply) if item.supply else "",
             meanings(w.CONDITION, item.condition) if item.condition else ""]  # fmt: skip
    return " · ".join(each for each in parts if each)


def _observed(a: Assessment) -> Iterator[str]:
    """What was felt, in the words of the closed lists, and at what."""
    for contact in a.incident.contacts:
        items = ", ".join(item_name(a.incident, each) for each in contact.items) or "not known"
        also = contact.also_touching
        second = f"; also touched: {meaning(w.ALSO_TOUCHING, also)}" if also else ""
        yield f"Touched: {items}; {meaning(w.MOISTURE, contact.moisture)}{second}"
    yield from dict.fromkeys(_felt(each) for each in a.incident.statements if each.sensation)


def _felt(each: Statement) -> str:
    told = [meaning(w.SENSATION, each.sensation)]
    told += [meaning(w.TIMING, each.timing)] if each.timing else []
    told += [meaning(w.DURATION, each.duration)] if each.duration else []
    return f"Felt: {'; '.join(told)}"


def _monitor(a: Assessment) -> Iterator[str]:
    supply = a.incident.supply
    if supply.kind:
        volts = f", {supply.voltage.text}" if supply.voltage else ""
        yield f"{meaning(w.SUPPLY, supply.kind)}{volts}"
    for reading in (supply.current_reading, supply.resistance_reading):
        if reading:
            at = f", read {supply.read_at.text}" if supply.read_at else ""
            yield f"Monitor: {reading.text}{at}; alarm at the event: {supply.alarm or 'not known'}"
    if supply.trip:
        yield f"Breaker or residual-current device tripped: {supply.trip}"


def _readings(a: Assessment) -> Iterator[str]:
    for each in a.incident.checks:
        kind = check_kinds().get(each.kind or "")
        parts = [f"{kind.name if kind else each.kind}: {item_name(a.incident, each.of)}",
                 each.value or meaning(w.RESULT, each.result),
                 spoken(each.stage or ""), f"on {each.supply} supply" if each.supply else "",
                 each.instrument or "", each.at.text if each.at else ""]  # fmt: skip
        yield " · ".join(part for part in parts if part)


def wanted(a: Assessment) -> tuple[CheckKind, ...]:
    """Tests asked for: of the supply that it is, or of both where that is not known."""
    supply = supply_kind(a.incident, a.site)
    names = {*_EVERYWHERE}
    names |= {*_EARTHED} if supply != "isolated" else set()
    names |= {*_ISOLATED} if supply != "earthed" else set()
    names |= {n.kind.id for n in a.next_checks if n.kind.performer == "licensed_electrician"}
    return tuple(kind for kind in check_kinds().values() if kind.id in names)


def _tests(a: Assessment, t: PaperTexts) -> list[Block]:
    rows = [
        [f"{t(f'check.{kind.id}', kind.name)}, {kind.minutes}{NBSP}min",
         limit_text(kind, a.site) or t("sheet.none"), "", "", ""]
        for kind in wanted(a)
    ]  # fmt: skip
    columns = [
        {"name": t("workrequest.test"), "width": 30}, {"name": t("workrequest.limit"), "width": 21},
        {"name": t("workrequest.found"), "width": 16}, {"name": t("workrequest.left"), "width": 16},
        {"name": t("workrequest.instrument"), "width": 17},
    ]  # fmt: skip
    notes = [t("workrequest.neighbours")]
    if any("*" in row[1] for row in rows):
        notes.append(t("workrequest.verify"))
    return [{"kind": "table", "class": "tests", "columns": columns, "rows": rows},
            {"kind": "text", "class": "note", "text": " ".join(notes)}]  # fmt: skip
