"""The brief for the next shift: open cases, worst first, on one page where it can be."""

from collections.abc import Iterator, Sequence
from typing import Any

from triage import words as w
from triage.assessment import Assessment
from triage.canonical import digest
from triage.clock import Moment, before
from triage.disposition import Level
from triage.documents.paper import Paper, site_paper
from triage.documents.wording import LEVEL_NAME, item_name, meaning, nobody_depends, room_name
from triage.paper_texts import PaperTexts
from triage.site import Site
from triage.validity import find_item

_MOST = 2
"""Items, checks and actions named for one case (judgement: several cases to a page)."""
_URGENCY = ("route", "same_day", "now")


def brief(cases: Sequence[Assessment], site: Site, *, at: Moment, unread: Sequence[str]) -> Paper:
    """Every case given, worst first.

    Args:
        cases: the assessments.
        site: gives language and paper.
        at: time that due dates are held against.
        unread: names of files that could not be read; they are named on the paper.
    """
    t = PaperTexts(site)
    rows = [_row(a, t, at) for a in sorted(cases, key=_worst_first)]
    names = ("case", "standing", "person", "held", "next", "due")
    widths = (16, 13, 13, 20, 17, 21)
    columns = [{"name": t(f"brief.{name}"), "width": width}
               for name, width in zip(names, widths, strict=True)]  # fmt: skip
    blocks: list[dict[str, Any]] = [{"kind": "table", "columns": columns, "rows": rows}]
    sections = [{"title": f"{t('brief.as_of')} {at.text}", "blocks": blocks}]
    if unread:
        sections.append({"title": t("brief.not_read"),
                         "blocks": [{"kind": "list", "lines": list(unread)}]})  # fmt: skip
    blank = [[t("brief.by"), ""], [t("brief.to"), ""]]
    sections.append({"title": t("brief.handed"), "blocks": [{"kind": "lines", "rows": blank}]})
    matter = {
        "form": "wide", "heading": t("brief.title"), "lead": t("brief.lead"), "sections": sections,
    }  # fmt: skip
    made = site_paper("paper.html", t, site=site, title=t("brief.title"), matter=matter)
    whole = digest("".join(a.record.digest for a in cases).encode() + at.text.encode())
    return Paper(made.template, made.context, bytes.fromhex(whole)[:16], made.missing)


def _worst_first(a: Assessment) -> tuple[int, int, str]:
    return -a.headline, -_URGENCY.index(a.care.urgency), a.record.case


def _row(a: Assessment, t: PaperTexts, at: Moment) -> list[str]:
    when = a.incident.event.at
    lost_first = sorted(a.next_checks, key=lambda n: -n.kind.perishable)
    return [
        f"{a.record.case} · {room_name(a)} · {when.text if when else 'time not known'}",
        _standing(a),
        "; ".join(f"{p.role or meaning(w.WHO, p.who)}: {meaning(w.REVIEW, p.review)}"
                  for p in a.incident.persons) or "nobody on record",
        _held(a, t),
        _listed(list(dict.fromkeys(n.kind.name for n in lost_first)), t),
        "; ".join(_due(a, t, at)) or t("brief.nothing_due"),
    ]  # fmt: skip


def _standing(a: Assessment) -> str:
    depends = "" if nobody_depends(a.incident) else "; somebody depends on it, or not known"
    return f"{LEVEL_NAME[a.headline]}{depends}"


def _held(a: Assessment, t: PaperTexts) -> str:
    """Items by the last place on record where they are kept."""
    kept: dict[str, list[str]] = {}
    for each in a.items:
        if each.level > Level.STATIC_CONTROLS:
            places = [h.where for h in a.incident.scene.custody if h.item == each.item and h.where]
            where = places[-1] if places else t("brief.nowhere")
            kept.setdefault(where, []).append(_short_name(a, each.item))
    return "; ".join(f"{_listed(items, t)} ({where})" for where, items in kept.items())


def _short_name(a: Assessment, item_id: str) -> str:
    item = find_item(a.incident, item_id)
    return item.name if item is not None and item.name else item_name(a.incident, item_id)


def _listed(lines: list[str], t: PaperTexts) -> str:
    left = len(lines) - _MOST
    more = [f"{left} {t('brief.more')}"] if left > 0 else []
    return ", ".join([*lines[:_MOST], *more])


def _due(a: Assessment, t: PaperTexts, at: Moment) -> Iterator[str]:
    """Open actions, overdue ones first, then by date; without a date last."""
    open_actions = [each for each in a.incident.outcome.actions if each.done is None]
    late = [each for each in open_actions if each.due and before(each.due, at, a.site.zone)]
    rest = sorted((each for each in open_actions if each not in late),
                  key=lambda each: each.due.text if each.due else "~")  # fmt: skip
    for each in [*late, *rest]:
        when = each.due.text if each.due else t("brief.open_dated")
        mark = f"{t('brief.overdue')} " if each in late else ""
        yield f"{mark}{when} {each.owner or ''}: {each.what or ''}"
    if a.incident.outcome.watch_plan:
        yield a.incident.outcome.watch_plan
