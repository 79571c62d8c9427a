"""Words for what was concluded: dispositions, probabilities, items, checks.

Every order to cut power stands behind its condition when somebody depends on it, or may.
"""

import re

from triage import words as w
from triage.assessment import Assessment
from triage.bounds import Probability
from triage.disposition import ItemDisposition, Level
from triage.fields import WordList
from triage.incident import Incident, Item
from triage.involvement import FIXED
from triage.quantity import worded
from triage.sensitivity import Range
from triage.validity import find_item

NBSP = "\u00a0"
LEVEL_NAME = {
    Level.STATIC_CONTROLS: "Static controls",
    Level.HOLD: "Hold",
    Level.WITHDRAW: "Withdrawal and quarantine",
    Level.ISOLATE: "Isolation of the circuit",
}
"""Names of the dispositions; none of them is an order."""
_ORDER = {
    Level.STATIC_CONTROLS: "static controls; release is signed by the authorised roles.",
    Level.HOLD: "hold out of use until the named checks are done and valid.",
    Level.WITHDRAW: "withdraw and quarantine as found, with all that was connected to it.",
    Level.ISOLATE: "isolate the circuit; a licensed electrician before it is used again.",
}
_ORDER_FIXED = {
    Level.HOLD: "bar it from use where it stands until the named checks are done and valid.",
    Level.WITHDRAW: "bar it from use where it stands, as found.",
}
CONDITION = (
    "Before any step below the clinician in charge agrees, and whoever depends on it is on another "
    "supply, on battery or cared for by hand. A person still in contact comes before everything."
)
"""The condition before every order to cut power while somebody depends on it, or may."""
_FIRST_FAULT = (
    "Isolated supply with a first fault: the case is finished or brought to a stopping point, "
    "nothing is plugged in, and the room is closed afterwards."
)
_NOT_RETURNED = {"hire": "the hire firm", "loan": "its lender", "trial": "the supplier",
                 "patient": "the patient", "staff": "its owner",
                 "contractor": "the contractor"}  # fmt: skip


def nobody_depends(incident: Incident) -> bool:
    """Whether it is known that nobody depends on the circuit or device."""
    return incident.scene.dependence == "none"


def condition(incident: Incident) -> str:
    """What stands before every order of this incident; empty where nobody depends on it."""
    return "" if nobody_depends(incident) else CONDITION


def order(level: Level, item: Item | None, incident: Incident) -> str:
    """What happens to an item, as a sentence; with dependence it is only the second step."""
    fixed = item is not None and (item.kind in FIXED or item.owner == "built_in")
    sentence = _ORDER_FIXED.get(level, _ORDER[level]) if fixed else _ORDER[level]
    if level == Level.STATIC_CONTROLS or nobody_depends(incident):
        return sentence[0].upper() + sentence[1:]
    return f"After that: {sentence}"


def item_order(each: ItemDisposition, incident: Incident) -> str:
    """The order for one item, with what its owner must know."""
    item = find_item(incident, each.item)
    text = order(each.level, item, incident)
    if item is not None and item.owner in _NOT_RETURNED and each.level > Level.STATIC_CONTROLS:
        text += f" Not returned to {_NOT_RETURNED[item.owner]} before release; told in writing."
    return text


def room_line(assessment: Assessment) -> str:
    """What may be used in the room, and who decides."""
    incident, room = assessment.incident, assessment.room
    reasons = "; ".join(_with_name(incident, each) for each in room.reasons)
    if room.level >= Level.WITHDRAW:
        return f"Room: restricted ({reasons}). {_room_order(assessment)}"
    if room.level == Level.HOLD:
        return (
            f"Room: restricted where it is held; the engineer on duty decides. Because: {reasons}."
        )
    return f"Room: may be used without the held items; the engineer on duty decides ({reasons})."


def _room_order(assessment: Assessment) -> str:
    """What happens to a restricted room; only a fault of the supply itself needs it cut."""
    if any(f.flag.id == "monitor_alarm" and not f.cleared for f in assessment.flags):
        return _FIRST_FAULT
    if assessment.room.level == Level.ISOLATE:
        return order(Level.ISOLATE, None, assessment.incident)
    return "People keep away from it; a licensed electrician decides which circuit is made dead."


def _with_name(incident: Incident, reason: str) -> str:
    """A reason that opens with the id of an item, with the name that people call it by."""
    head, rest = re.match(r"([^\s:]*)(.*)", reason, re.DOTALL).groups()  # type: ignore[union-attr]
    item = find_item(incident, head)
    return f"{item.name}{rest}" if item is not None and item.name else reason


def meaning(words: WordList, word: str | None) -> str:
    """The meaning of a record word; "not known" for none."""
    return words[word][1] if word is not None else "not known"


def spoken(text: str) -> str:
    """Words of the tables as people read them, without their underscores."""
    return text.replace("_", " ")


def meanings(words: WordList, found: tuple[str, ...]) -> str:
    """Meanings of several words in one line."""
    return "; ".join(words[each][1] for each in found) if found else "not known"


def item_name(incident: Incident, item_id: str | None) -> str:
    """An item as people call it, with its short id."""
    if not item_id:
        return "the room"
    item = find_item(incident, item_id)
    if item is None:
        return item_id
    if item.name:
        return f"{item.name} ({item.id})"
    return f"{meaning(w.ITEM_KIND, item.kind)} ({item.id})" if item.kind else item.id


def room_name(assessment: Assessment) -> str:
    """The place as people call it: as recorded, else as the site file names the room."""
    place = assessment.incident.place
    known = assessment.site.room(place.room)
    return place.room_name or (known.name if known else None) or place.room or "place not known"


def likelihood(p: float) -> str:
    """A probability in words."""
    for bound, words in ((0.9, "very probable"), (0.65, "probable"), (0.35, "about even"),
                         (0.1, "possible"), (0.02, "unlikely")):  # fmt: skip
        if p >= bound:
            return words
    return "very unlikely"


def percent(p: float) -> str:
    """A probability to one figure, never 0 or 100 %."""
    if p < 0.01:
        return f"under{NBSP}1{NBSP}%"
    if p > 0.95:
        return f"over{NBSP}95{NBSP}%"
    rounded = round(p * 100) if p < 0.095 else min(max(round(p * 10), 1), 9) * 10
    return f"{rounded}{NBSP}%"


def percent_range(found: Range | Probability) -> str:
    """A range of a probability, each end to one figure."""
    low, high = percent(found.low), percent(found.high)
    return low if low == high else f"{low} to {high}"


def amount(value: float | None, kind: str, digits: int = 2) -> str:
    """A quantity for print, its unit never torn off."""
    return worded(value, kind, digits).replace(" ", NBSP)


def amount_range(interval: tuple[float, float], kind: str) -> str:
    """An interval of a quantity for print."""
    low, high = (amount(each, kind) for each in interval)
    return low if low == high else f"{low} to {high}"
