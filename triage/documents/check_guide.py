"""What each open check proves: how it is done, by whom, what a reading says, and when to stop."""

from collections.abc import Iterator
from typing import Any

from triage.assessment import Assessment
from triage.check_table import PERFORMERS, CheckKind
from triage.documents.summary import PERFORMER_NAME
from triage.documents.wording import NBSP, item_name
from triage.next_checks import NextCheck

Block = dict[str, Any]
_STOP_LIVE = (
    "Stop and keep people clear if a reading shows a source that drives current, or if anything "
    "is hot, wet or bare."
)
_STOP_DEAD = "Stop if it is not shown to be dead first."
_CIRCUIT = {"live": "circuit live", "dead": "circuit dead", "none": "no work on the circuit"}


def open_check_blocks(a: Assessment) -> list[Block]:
    """One compact line a kind of check, grouped by who may do it."""
    blocks: list[Block] = []
    start = 1
    for performer in PERFORMERS:
        lines = [_compact(kind, group, a) for kind, group in _by_kind(a, performer)]
        if lines:
            blocks.append({"kind": "heading", "text": PERFORMER_NAME[performer]})
            blocks.append({"kind": "steps", "lines": lines, "start": start})
            start += len(lines)
    if blocks:
        text = f"Live: {_STOP_LIVE} Dead: {_STOP_DEAD}"
        blocks.append({"kind": "text", "class": "note", "text": text})
    return blocks


def _by_kind(a: Assessment, performer: str) -> list[tuple[CheckKind, list[NextCheck]]]:
    """Open checks in their order, those of one kind and with one precondition together."""
    groups: dict[tuple[str, tuple[str, ...]], list[NextCheck]] = {}
    for each in a.next_checks:
        if each.kind.performer == performer:
            groups.setdefault((each.kind.id, each.after), []).append(each)
    return [(group[0].kind, group) for group in groups.values()]


def _compact(kind: CheckKind, group: list[NextCheck], a: Assessment) -> str:
    items = ", ".join(
        item_name(a.incident, n.item) + ("" if n.mandatory else " (not needed for release)")
        for n in group
    )
    circuit = {"live": ", live", "dead": ", dead"}.get(kind.circuit, "")
    before = f" Made {'; '.join(group[0].after)}." if group[0].after else ""
    told = f" Told first: {kind.alarms_others.rstrip('.')}." if kind.alarms_others else ""
    reads = " ".join(f"If {when}: {means.rstrip('.')}." for when, means in kind.reads)
    return f"{kind.name}: {items}; {kind.minutes}{NBSP}min each{circuit}.{before}{told} {reads}"


def check_lines(a: Assessment) -> Iterator[str]:
    """What each kind of open check proves, in full."""
    seen: set[str] = set()
    for each in a.next_checks:
        if each.kind.id not in seen:
            seen.add(each.kind.id)
            yield " ".join(_full(each.kind)).rstrip()


def _full(kind: CheckKind) -> Iterator[str]:
    yield f"{kind.name}. {kind.what} How: {' '.join(kind.how)}"
    yield f"A valid pass says: {kind.shows_pass} A valid fail says: {kind.shows_fail}"
    yield f"It does not show: {kind.does_not_show}"
    ways = "; ".join(f"{each.method.replace('_', ' ')}: {each.note.rstrip('.')}"
                     for each in kind.accepts)  # fmt: skip
    yield f"Accepted: {ways}. If it does not count: {kind.retest}"
    yield f"It is done {'; '.join(_terms(kind))}. {_stop(kind)}"


def _terms(kind: CheckKind) -> Iterator[str]:
    """Who may do it and what it disturbs."""
    yield f"by {PERFORMER_NAME[kind.performer].lower()}, {kind.minutes} min"
    yield _CIRCUIT.get(kind.circuit, kind.circuit)
    yield "patient absent" if kind.patient_absent else "a patient may be there"
    yield "takes power away" if kind.drops_power else "leaves power on"
    yield kind.alarms_others.rstrip(".") if kind.alarms_others else "alarms nobody"
    yield "enters a sterile area" if kind.sterile_area else "no sterile area"
    yield "destroys evidence" if kind.destroys_evidence else "keeps the evidence"
    yield "only as the maker allows" if kind.needs_maker else "no maker needed"


def _stop(kind: CheckKind) -> str:
    return {"live": _STOP_LIVE, "dead": _STOP_DEAD}.get(kind.circuit, "")
