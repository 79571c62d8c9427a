"""The wall card: the first minute for people without the program, by the program's own rules."""

from collections.abc import Mapping
from functools import cache
from typing import Any

from triage.assessment import Assessment, assess
from triage.disposition import Level
from triage.documents.paper import Paper, contact_lines, site_paper
from triage.frozen import frozen
from triage.paper_texts import PaperTexts
from triage.questions import FIRST_MINUTE, Option, Question, sections
from triage.record import from_plain
from triage.site import Site, no_site
from triage.strict_yaml import Plain

LEVEL_MARK = {Level.HOLD: "▲", Level.WITHDRAW: "◆", Level.ISOLATE: "■"}
MEDICAL_MARK, POWER_MARK = "●", "△"
_LEVEL_TEXT = {Level.WITHDRAW: "withdraw", Level.ISOLATE: "isolate"}
_BARE = {
    "schema": "1", "id": "0" * 32,
    "persons": [{"id": "p1", "who": "staff"}],
    "statements": [{"id": "s1", "person": "p1"}],
    "items": [{"id": "i1", "kind": "device_mains", "power": "mains_on"}],
    "contacts": [{"id": "c1", "person": "p1", "items": ["i1"]}],
}  # fmt: skip
"""A record in which nothing is known but that a mains device was touched: the least mild case."""


@frozen
class Weight:
    """What one answer alone leads to.

    Args:
        level: disposition. medical: medical help is needed now.
        power: somebody depends on the power.
    """

    level: Level
    medical: bool
    power: bool

    @property
    def marks(self) -> str:
        """Its marks on the card; none for a hold, which every report begins with."""
        level = LEVEL_MARK[self.level] if self.level > Level.HOLD else ""
        power = POWER_MARK if self.power else ""
        return level + (MEDICAL_MARK if self.medical else "") + power


@cache
def weights() -> Mapping[tuple[str, str], Weight]:
    """Question id and word of every answer of the first minute, and what it leads to alone."""
    return {(q.id, o.word): _weight(o) for q in first_minute() for o in q.options}


def first_minute() -> tuple[Question, ...]:
    """The questions of the first minute."""
    return next(each.questions for each in sections() if each.id == FIRST_MINUTE)


def _weight(option: Option) -> Weight:
    tree = {name: _copied(part) for name, part in _BARE.items()}
    for path, value in option.sets:
        above, name = path.rsplit(".", 1)
        given = [*value] if isinstance(value, tuple) else value
        part = tree.setdefault(above.removesuffix("[]"), {})
        (part[0] if above.endswith("[]") else part)[name] = given
    found: Assessment = assess(from_plain(Plain("card", tree)), no_site())
    depends = found.incident.scene.dependence not in (None, "none")
    return Weight(found.headline, found.care.urgency == "now", depends)


def _copied(part: Any) -> Any:
    return [dict(each) for each in part] if isinstance(part, list) else part


def card(site: Site) -> Paper:
    """The card of a site.

    Args:
        site: gives contacts, language and paper.
    """
    t = PaperTexts(site)
    matter = {
        "heading": t("card.title"), "lead": t("card.lead"),
        "now": t("card.now"), "steps": t.several("card.steps"),
        "questions_title": t("card.questions"), "questions": [_row(q, t) for q in first_minute()],
        "marks_title": t("card.marks"), "marks": legend(t), "unmarked": t("card.unmarked"),
        "not_known": t("card.not_known"),
        "call": t("card.call"), "contacts": contact_lines(t, site),
    }  # fmt: skip
    return site_paper("card.html", t, site=site, title=t("card.title"), matter=matter)


def _row(question: Question, t: PaperTexts) -> dict[str, Any]:
    answers = [
        {"text": t(f"option.{question.id}.{o.word}", o.says),
         "marks": weights()[question.id, o.word].marks}
        for o in question.options
    ]  # fmt: skip
    return {"ask": t(f"ask.{question.id}", question.ask), "answers": answers}


def legend(t: PaperTexts) -> list[dict[str, str]]:
    """Mark and meaning of the answers of the first minute, the person first."""
    used = {mark for each in weights().values() for mark in each.marks}
    rows = [{"mark": MEDICAL_MARK, "text": t("card.mark.medical")}] if MEDICAL_MARK in used else []
    for level in sorted(_LEVEL_TEXT, reverse=True):
        if LEVEL_MARK[level] in used:
            text = t(f"card.mark.{_LEVEL_TEXT[level]}")
            rows.append({"mark": LEVEL_MARK[level], "text": text})
    return [*rows, {"mark": POWER_MARK, "text": t("card.mark.power")}]
