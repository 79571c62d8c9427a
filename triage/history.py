"""Earlier reports on the same asset, outlet group or room: shown, never part of the ranking."""

from collections.abc import Iterable, Iterator
from dataclasses import dataclass, field

from triage.assessment import Assessment
from triage.frozen import frozen
from triage.incident import Incident
from triage.knowledge import knowledge

SURVEY_FROM = 2
"""Reports not settled as static on one asset or outlet group that demand a survey at once.

A choice of ours on the safe side: two already form a pattern that no single test would show.
"""
_KINDS = ("asset", "outlet group", "room")
_SURVEYED = ("asset", "outlet group")


@dataclass(frozen=True, slots=True, order=True)
class Mark:
    """What two reports have in common: asset, outlet group or room, and which one.

    Case and blanks of a name do not count, since people type them differently.
    """

    kind: str
    key: str
    name: str = field(compare=False)


@frozen
class EarlierReport:
    """One earlier report that shares something with this one.

    Args:
        case: its number. when: its time as typed, None if not known.
        shared: what it has in common with the present one.
        ended: "fault", "static" or "undetermined".
        says: how it ended, in words.
    """

    case: str
    when: str | None
    shared: tuple[Mark, ...]
    ended: str
    says: str


@frozen
class History:
    """Earlier reports, and where several of them demand a survey.

    Args:
        reports: those that share something, in the order given.
        surveys: asset or outlet group to the cases on it, the present one too.
        looked_at: how many earlier records were compared.
    """

    reports: tuple[EarlierReport, ...]
    surveys: tuple[tuple[Mark, tuple[str, ...]], ...]
    looked_at: int


def history(present: Assessment, earlier: Iterable[Assessment]) -> History:
    """What was reported before about the things and the place of this incident.

    Args:
        present: the assessment at hand.
        earlier: other assessments, in any order; the present record among them is left out.
    """
    mine = _marks(present)
    found, looked_at = [], 0
    for each in sorted(earlier, key=lambda a: (a.record.case, a.incident.id)):
        if each.incident.id == present.incident.id:
            continue
        looked_at += 1
        theirs = _marks(each)
        shared = tuple(
            sorted((m for m in mine if m in theirs), key=lambda m: (_KINDS.index(m.kind), m.key))
        )
        if shared:
            at = each.incident.event.at
            found.append(
                EarlierReport(each.record.case, at.text if at else None, shared, *_ended(each))
            )
    return History(tuple(found), tuple(_surveys(present, mine, found)), looked_at)


def _marks(a: Assessment) -> frozenset[Mark]:
    items = a.incident.items
    assets = {_mark("asset", i.asset) for i in items if i.asset}
    groups = {_mark("outlet group", i.outlet_group) for i in items if i.outlet_group}
    return frozenset(assets | groups | _room(a))


def _mark(kind: str, name: str) -> Mark:
    return Mark(kind, "".join(name.split()).casefold(), name)


def _room(a: Assessment) -> set[Mark]:
    """The room by its id of today, where the site file knows an earlier one."""
    room = a.incident.place.room
    if room is None:
        return set()
    today = next((r.id for r in a.site.file.rooms if room in (r.id, *r.former_names)), room)
    return {_mark("room", today)}


def _ended(a: Assessment) -> tuple[str, str]:
    if a.evidence.defects:
        return "fault", f"defect found: {a.evidence.defects[0].text}"
    k, cause = knowledge(), a.incident.outcome.confirmed_cause
    if cause is not None and cause in k.causes and _is_confirmed(a.incident):
        kind = k.causes[cause].mechanism
        return {"mains": "fault", "static": "static"}.get(kind, "undetermined"), (
            f"confirmed: {k.causes[cause].name.lower()}"
        )
    if a.gate.open:
        return "static", "static, every condition held"
    return "undetermined", "not settled"


def _is_confirmed(incident: Incident) -> bool:
    return incident.outcome.how_confirmed not in (None, "by_exclusion", "never_established")


def _surveys(
    present: Assessment, mine: frozenset[Mark], found: list[EarlierReport]
) -> Iterator[tuple[Mark, tuple[str, ...]]]:
    here = () if _ended(present)[0] == "static" else (present.record.case,)
    for mark in sorted(m for m in mine if m.kind in _SURVEYED):
        open_ones = tuple(r.case for r in found if mark in r.shared and r.ended != "static")
        if open_ones and len(open_ones) + len(here) >= SURVEY_FROM:
            yield mark, (*open_ones, *here)
