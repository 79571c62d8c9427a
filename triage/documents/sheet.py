"""The incident sheet: two pages for pen or tablet, in the order of the scene."""

from collections.abc import Iterator
from typing import Any

from triage import words as w
from triage.cautions import cautions
from triage.check_table import CheckKind, check_kinds
from triage.documents.card import first_minute, legend, weights
from triage.documents.limit_words import limit_text
from triage.documents.paper import Paper, site_paper
from triage.documents.wording import spoken
from triage.errors import InvalidValue
from triage.fields import WordList
from triage.paper_texts import PaperTexts
from triage.quantity import Quantity
from triage.questions import Question, every_question, room_defaults
from triage.site import Room, Site

_HEAD = ("case", "when", "recorder", "room")
_ITEM = ("thing", "asset", "outlet", "cord", "owner", "last")
_ITEM_ROWS = 4
_PERSON = ("role", "review")
_ASKED = ("current_reading", "read_at", "changed_since", "humidity", "humidity_where",
          "humidity_at", "floor", "footwear")  # fmt: skip
"""Questions with a line of their own, by id."""
_WHO = {"any_staff": "S", "biomedical": "B", "licensed_electrician": "E"}
_CAUTIONS = ("local_rules_first", "only_listed_tests", "void_readings", "sterile_field",
             "contained_evidence", "quiet_monitor", "isolated_bench_tests", "ignition",
             "hold_until_signed", "symptoms_route")  # fmt: skip
"""Cautions that hold before anything is known about the case."""


def sheet(site: Site, room: str | None = None) -> Paper:
    """The sheet of a site, with the defaults of one room to be confirmed.

    Args:
        site: gives limits, rooms, language and paper.
        room: id of a room of the site file.

    Raises:
        InvalidValue: the site file has no such room.
    """
    t, chosen = PaperTexts(site), _room(site, room)
    plain = ("lead", "first", "said", "by", "at", "talked", "language", "things", "contact", "body",
             "second", "before", "supply", "defaults", "no_defaults", "confirmed", "checks",
             "checks_lead", "cautions", "verify", "pass", "fail")  # fmt: skip
    matter = {
        "t": {name: t(f"sheet.{name}") for name in plain},
        "heading": t("sheet.title"),
        "head": [{"name": name, "label": t(f"sheet.{name}")} for name in _HEAD]
        + _lines(_PERSON, t),
        "room_value": f"{chosen.name or chosen.id} ({chosen.id})" if chosen else "",
        "first": [_first(q, t) for q in first_minute()],
        "marks": legend(t),
        "asked": _lines(_ASKED, t),
        "items": [{"name": name, "label": t(f"sheet.{name}")} for name in _ITEM],
        "item_rows": list(range(1, _ITEM_ROWS + 1)),
        "defaults": list(_defaults(chosen, t)) if chosen else [],
        "checks": [_check(kind, site, t) for kind in check_kinds().values()],
        "columns": [t(f"sheet.{name}") for name in ("check", "who", "limit", "value", "state",
                                                    "instrument")],
        "cautions": [t(f"caution.{c.id}", c.text) for c in cautions() if c.id in _CAUTIONS],
    }  # fmt: skip
    made = site_paper("sheet.html", t, site=site, title=t("sheet.title"), matter=matter)
    return Paper(made.template, made.context, made.identifier, made.missing, fillable=True)


def _room(site: Site, name: str | None) -> Room | None:
    if name is None:
        return None
    found = site.room(name)
    if found is None:
        known = ", ".join(each.id for each in site.file.rooms) or "none"
        raise InvalidValue(f"the site file has no room '{name}'; rooms: {known}")
    return found


def _lines(names: tuple[str, ...], t: PaperTexts) -> list[dict[str, str]]:
    """Questions by id, each with a line of its own under a short name."""
    known = {question.id for _, question in every_question()}
    return [{"name": name, "label": t(f"sheet.field.{name}")} for name in names if name in known]


def _first(question: Question, t: PaperTexts) -> dict[str, Any]:
    answers = [
        {"name": f"{question.id}:{o.word}",
         "text": t(f"option.{question.id}.{o.word}", o.says),
         "marks": weights()[question.id, o.word].marks}
        for o in question.options
    ]  # fmt: skip
    return {"ask": t(f"ask.{question.id}", question.ask), "answers": answers}


def _defaults(room: Room, t: PaperTexts) -> Iterator[dict[str, str]]:
    """What the room of the site file brings, with a box to confirm each."""
    words: dict[str, WordList] = {"area": w.AREA, "supply": w.SUPPLY, "monitor": w.MONITOR,
                                  "floor": w.FLOOR, "footwear": w.FOOTWEAR,
                                  "casters": w.CASTERS}  # fmt: skip
    for name in room_defaults():
        value = getattr(room, name)
        if value is not None:
            shown = value.text if isinstance(value, Quantity) else words[name][value][1]
            label = t(f"default.{name}", spoken(name))
            yield {"name": f"default:{name}", "text": f"{label}: {shown}"}


def _check(kind: CheckKind, site: Site, t: PaperTexts) -> dict[str, str]:
    marks = ("◇" if kind.patient_absent else "") + ("▽" if kind.drops_power else "")
    nothing = "sheet.look" if kind.counts_as_pass == "nothing_found" else "sheet.none"
    return {
        "name": kind.id,
        "text": f"{kind.order}. {t(f'check.{kind.id}', kind.name)}",
        "who": f"{_WHO[kind.performer]} {marks}".rstrip(),
        "limit": limit_text(kind, site) or t(nothing),
    }
