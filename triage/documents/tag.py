"""Tags: one for each item, its disposition readable at arm's length, the number made offline."""

from typing import Any

from triage.assessment import Assessment
from triage.disposition import ItemDisposition, Level
from triage.documents.paper import Paper, case_paper, contact_lines
from triage.documents.wording import item_name, nobody_depends, room_name
from triage.incident import Incident, Item
from triage.involvement import FIXED
from triage.paper_texts import PaperTexts
from triage.validity import find_item

_WORD = {
    Level.STATIC_CONTROLS: "static_controls",
    Level.HOLD: "hold",
    Level.WITHDRAW: "withdraw",
    Level.ISOLATE: "isolate",
}
_MARK = {Level.STATIC_CONTROLS: "○", Level.HOLD: "▲", Level.WITHDRAW: "◆", Level.ISOLATE: "■"}
_OWN = (None, "own", "built_in")


def tag(a: Assessment) -> Paper:
    """One tag a page for each item that matters, most severe first.

    Args:
        a: the assessment.
    """
    t = PaperTexts(a.site)
    order = sorted(a.items, key=lambda i: (-i.level, i.item)) or [a.room]
    tags = [_tag(each, a, t) for each in order]
    return case_paper("tag.html", t, a=a, title=t("tag.title"), matter={"tags": tags})


def _tag(each: ItemDisposition, a: Assessment, t: PaperTexts) -> dict[str, Any]:
    """With dependence, or where that is not known, the condition stands before everything."""
    item, word = find_item(a.incident, each.item), _WORD[each.level]
    lead = "" if nobody_depends(a.incident) else f"{t('tag.after')}: "
    rows = [[t("tag.item"), f"{item_name(a.incident, each.item)} · {room_name(a)}"]]
    if item is not None and item.asset:
        rows.append([t("tag.asset"), item.asset])
    if item is not None and item.kind not in FIXED | {"outlet", "circuit"}:
        rows.append([t("tag.with"), _kept_with(item, a.incident) or t("tag.nothing")])
    rows.append([t("tag.contact"), contact_lines(t, a.site, ("biomedical",))[0]])
    return {
        "word": t(f"tag.level.{word}"),
        "mark": _MARK[each.level],
        "condition": "" if nobody_depends(a.incident) else t("tag.condition"),
        "dont": f"{lead}{t('tag.dont')}",
        "order": t(f"tag.order.{word}"),
        "back": t("tag.back") if item is not None and item.owner not in _OWN else "",
        "number": a.record.case,
        "rows": rows,
        "signed": t("tag.signed"),
    }


def _kept_with(item: Item | None, incident: Incident) -> str:
    """Cord and items that name it as theirs; an outlet or circuit stays where it is."""
    if item is None:
        return ""
    found = [item.cord] if item.cord else []
    found += [each.id for each in incident.items if each.cord == item.id]
    return ", ".join(item_name(incident, each) for each in found)
