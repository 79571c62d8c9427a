"""What a check is worth: valid pass, valid fail, invalid, informative, or not done.

A check speaks about the event only when the item, cord and outlet are the event's, nothing was
repaired, cleaned, swapped or opened before, method and supply are accepted for that check, the
state covers the event's, the instrument was in calibration, the unit undisputed, the value
possible.
"""

from collections.abc import Iterator
from dataclasses import replace

from triage.check_table import Accepts, CheckKind, check_kinds
from triage.clock import before
from triage.errors import InvalidValue
from triage.frozen import frozen
from triage.in_force import held_against_limits, limits_from
from triage.incident import Check, Contact, Incident, Item
from triage.limits import Limit
from triage.quantity import Quantity, parse
from triage.site import Site
from triage.verdict import Judgement

DESTROYING = frozenset({"cleaned", "cord_swapped", "repaired"})
"""Changes after which a pass says nothing about the event."""
MAINS_KINDS = frozenset({"device_mains", "adapter_strip", "cord", "electrosurgical_unit",
                         "stimulator_defibrillator"})  # fmt: skip
"""Items built for mains: cord and outlet belong to what is tested."""
MAINS_POWER = frozenset({"mains_on", "mains_standby", "mains_off"})
_ALWAYS_COUNT_AS_FAIL = frozenset({"earth_continuity", "visual_inspection"})
_STATE_OF_POWER = {"mains_on": "on", "mains_standby": "standby", "mains_off": "off"}
_NO_INSTRUMENT = frozenset({"monitor_log", "humidity_reading"})
_WET_STATE_NEEDED = frozenset({"insulation_resistance", "touch_current"})


@frozen
class CheckVerdict:
    """One check judged.

    Args:
        check: as recorded.
        kind: its row in the table of checks, None where the kind is not known.
        state: valid_pass, valid_fail, invalid_pass, invalid_fail, informative (a valid value that
            is neither pass nor fail), repeated (an invalid fail with a later valid result),
            not_practicable or not_done.
        as_left: it was made after repair and counts only towards release.
        reasons: why it is not valid, in words.
        value: the value read, None without one.
        limit: the limit that decided, None without one.
        judgements: every edition it was held against.
    """

    check: Check
    kind: CheckKind | None
    state: str
    as_left: bool = False
    reasons: tuple[str, ...] = ()
    value: Quantity | None = None
    limit: Limit | None = None
    judgements: tuple[Judgement, ...] = ()


def judge_checks(incident: Incident, site: Site) -> tuple[CheckVerdict, ...]:
    """Judge every check of a record, in the order recorded."""
    found = tuple(judge_check(check, incident, site) for check in incident.checks)
    return tuple(
        replace(each, state="repeated") if _repeated(each, found, site) else each for each in found
    )


def _repeated(failed: CheckVerdict, all_checks: tuple[CheckVerdict, ...], site: Site) -> bool:
    """Whether a fail that does not count was repeated later with a result that does."""
    return failed.state == "invalid_fail" and any(
        each.kind is failed.kind
        and (each.check.of, each.check.second) == (failed.check.of, failed.check.second)
        and each.state in ("valid_pass", "valid_fail", "informative")
        and not each.as_left
        and before(failed.check.at, each.check.at, site.zone) is True
        for each in all_checks
    )


def judge_check(check: Check, incident: Incident, site: Site) -> CheckVerdict:
    """Judge one check.

    Args:
        check: as recorded.
        incident: the record it belongs to.
        site: gives the edition of limits in force and the time zone.
    """
    kind = check_kinds().get(check.kind or "")
    if kind is None:
        return CheckVerdict(check, None, "not_done", reasons=(_unknown_kind(check),))
    item = find_item(incident, check.of)
    value, problem = _value(check, kind)
    judgements = held_against_limits(check, kind, item=item, value=value, site=site)
    outcome = _outcome(check, kind, value, judgements)
    if check.result == "not_practicable" and outcome != "fail":
        why = (check.reason or "no reason given",)
        return CheckVerdict(check, kind, "not_practicable", reasons=why, value=value)
    if outcome is None:
        return CheckVerdict(check, kind, "not_done", reasons=_open(judgements), value=value)
    as_left = check.stage == "as_left"
    doubts = tuple(_doubts(check, kind, item, incident, site)) + ((problem,) if problem else ())
    if not judgements and value is not None and limits_from(check, kind) is not None:
        doubts += ("no limit on file fits this item, method and state",)
    away = tuple(_away_from_event(check, kind, item, incident, site))
    state = _state(kind, outcome, bool(doubts), bool(away))
    return CheckVerdict(
        check, kind, state, as_left, doubts + away, value,
        _deciding_limit(judgements), judgements,
    )  # fmt: skip


def find_item(incident: Incident, item_id: str | None) -> Item | None:
    """The item of an id."""
    return next((item for item in incident.items if item.id == item_id), None)


def _unknown_kind(check: Check) -> str:
    return f"'{check.kind or ''}' is not in the table of checks"


def _open(judgements: tuple[Judgement, ...]) -> tuple[str, ...]:
    """Why there is neither pass nor fail."""
    if any(each.verdict == "undecided" for each in judgements):
        return ("the reading leaves it open whether the limit is kept",)
    return ("no result and no value",)


def _state(kind: CheckKind, outcome: str, doubtful: bool, away: bool) -> str:
    """Invalid pass = not done; invalid fail = hold, but earth and damage always count.

    What only puts a check away from the event (another cord, cleaned first, a milder state) takes
    the worth from a pass and never from a fail: the item fails all the same, and an adverse answer
    about the scene must not turn a defect into a doubt.
    """
    if outcome == "fail":
        counts = not doubtful or kind.id in _ALWAYS_COUNT_AS_FAIL
        return "valid_fail" if counts else "invalid_fail"
    if outcome == "informative":
        return "invalid_pass" if doubtful or away else "informative"
    return "invalid_pass" if doubtful or away else "valid_pass"


def _value(check: Check, kind: CheckKind) -> tuple[Quantity | None, str | None]:
    """The value read, and what is wrong with it."""
    if check.value is None or kind.quantity is None:
        return None, None
    try:
        value = parse(check.value, kind.quantity)
    except InvalidValue as error:
        return None, str(error)
    if kind.low is not None and kind.high is not None and not kind.low <= value.value <= kind.high:
        return value, f"{value.text} lies outside what this check can read"
    return value, None


def _outcome(
    check: Check, kind: CheckKind, value: Quantity | None, judgements: tuple[Judgement, ...]
) -> str | None:
    """The outcome; of a stated and a computed result the more adverse counts."""
    if kind.counts_as_pass == "any_valid_value":
        return "informative" if value is not None else None
    found = {each.verdict for each in judgements} | {check.result}
    if "fail" in found:
        return "fail"
    if "undecided" in found:
        return None
    return "pass" if "pass" in found else None


def _deciding_limit(judgements: tuple[Judgement, ...]) -> Limit | None:
    """The row with the least room."""
    rows = [each for judgement in judgements for each in judgement.comparisons]
    known = [each for each in rows if each.margin is not None]
    if known:
        return min(known, key=lambda each: each.margin or 0.0).limit
    return rows[0].limit if rows else None


def _doubts(
    check: Check, kind: CheckKind, item: Item | None, incident: Incident, site: Site
) -> Iterator[str]:
    """Why the reading itself is doubtful, whatever it says."""
    if item is None:
        yield "it does not say which item was checked"
    elif item.kind not in (None, *kind.applies_to) and kind.counts_as_pass != "any_valid_value":
        yield f"it is not a check of this kind of item: {(item.kind or '').replace('_', ' ')}"
    accepted = next((each for each in kind.accepts if each.method == check.method), None)
    yield from _method_reasons(check, kind, accepted)
    if check.method == "no_protective_earth" and (item is None or item.equipment_class != "II"):
        yield "only an item of class II has no protective earth to test"
    if accepted and accepted.value_needed and kind.quantity and check.value is None:
        yield "no value was written down"
    if kind.quantity and kind.id not in _NO_INSTRUMENT:
        yield from _calibration_reasons(check, site)
    yield from _time_reasons(check, incident, site)


def _away_from_event(
    check: Check, kind: CheckKind, item: Item | None, incident: Incident, site: Site
) -> Iterator[str]:
    """Why a pass does not speak about the event."""
    if check.unit_disputed == "yes":
        yield "the unit is in doubt"
    accepted = next((each for each in kind.accepts if each.method == check.method), None)
    if check.stage == "as_left":
        if item is not None and not (accepted and accepted.any_state):
            yield from _power_reasons(check, kind, item)
        return
    yield from _set_reasons(check, item)
    yield from _disturbance_reasons(check, item, incident, site)
    if item is not None and not (accepted and accepted.any_state):
        yield from _item_state_reasons(check, kind, item, incident)


def _method_reasons(check: Check, kind: CheckKind, accepted: Accepts | None) -> Iterator[str]:
    if accepted is None:
        known = ", ".join(each.method for each in kind.accepts)
        yield f"method '{check.method or 'not known'}' is not accepted; accepted: {known}"
        return
    if accepted.supplies & {"any", "own_source"} or check.supply in accepted.supplies:
        return
    allowed = " or ".join(sorted(accepted.supplies))
    used = _supply_word(check.supply)
    yield f"made on {used}; this method needs an {allowed} supply. {kind.retest}"


def _supply_word(supply: str | None) -> str:
    return f"an {supply} supply" if supply else "a supply that is not known"


def _calibration_reasons(check: Check, site: Site) -> Iterator[str]:
    if check.instrument is None:
        yield "no instrument was written down"
    if check.calibration_due is None:
        yield "calibration of the instrument is not known"
    elif before(check.calibration_due, check.at, site.zone) is not False:
        yield "the instrument was past its calibration, or the time is not known"


def _time_reasons(check: Check, incident: Incident, site: Site) -> Iterator[str]:
    """A check made before the event says nothing about it, and not knowing counts the same."""
    later = before(incident.event.at, check.at, site.zone)
    if later is None:
        yield "it is not known to have been made after the event; give both times closely enough"
    elif not later:
        yield "it was made before the event"


def _set_reasons(check: Check, item: Item | None) -> Iterator[str]:
    """Cord and outlet must be the event's, wherever the item has them."""
    if item is None:
        return
    if check.cord is not None and item.cord is not None and check.cord != item.cord:
        yield "another cord was used"
    if check.outlet is not None and item.outlet is not None and check.outlet != item.outlet:
        yield "another outlet was used"
    has_cord = item.kind in MAINS_KINDS or item.kind is None or item.power in MAINS_POWER
    named = check.cord is not None and (check.cord, check.outlet) == (item.cord, item.outlet)
    if check.same_cord == "no":
        yield "not the cord and outlet of the event"
    elif has_cord and check.same_cord is None and not named:
        yield "it is not known whether cord and outlet were the event's"


def _disturbance_reasons(
    check: Check, item: Item | None, incident: Incident, site: Site
) -> Iterator[str]:
    if check.stage is None:
        yield "as found, after disturbance or as left is not known"
    changed = DESTROYING & set(check.disturbed)
    if changed:
        yield f"made after: {_listed(changed)}"
    elif check.stage == "after_disturbance" and not set(check.disturbed) - {"none"}:
        yield "made after a disturbance that is not named"
    if item is not None and {"altered", "missing"} & set(item.condition):
        yield "the item was changed since the event"
    earlier = DESTROYING & set(incident.scene.changes)
    if earlier and before(check.at, incident.scene.changed_at, site.zone) is not True:
        yield f"the scene was changed before it: {_listed(earlier)}"


def _item_state_reasons(
    check: Check, kind: CheckKind, item: Item, incident: Incident
) -> Iterator[str]:
    yield from _power_reasons(check, kind, item)
    if kind.id in _WET_STATE_NEEDED and is_wet(incident, item) and "wet" not in check.state:
        yield "the event was wet and the check was not made in that state"


def _power_reasons(check: Check, kind: CheckKind, item: Item) -> Iterator[str]:
    if kind.state_as_event:
        needed = _STATE_OF_POWER.get(item.power or "", "on" if item.power is None else "")
        if needed and needed not in check.state:
            yield f"the item was not in the state of the event ({needed})"


def _listed(words: frozenset[str] | set[str]) -> str:
    return ", ".join(word.replace("_", " ") for word in sorted(words))


_OF_THE_OUTLET = frozenset({"outlet_test", "isolated_line_voltages", "isolated_alarm_test",
                            "monitor_log"})  # fmt: skip
_WITH_THE_CORD = frozenset({"visual_inspection", "earth_continuity", "insulation_resistance"})


def covers(check: Check, item: Item, incident: Incident) -> bool:
    """Whether a check speaks about an item: made of it, of its outlet, or through that cord."""
    if check.of == item.id or (check.kind == "two_metal_voltage" and check.second == item.id):
        return True
    if check.kind in _OF_THE_OUTLET:
        return check.of is not None and check.of in (item.outlet, item.circuit)
    return check.same_cord == "yes" and through_cord(check, item, incident)


def through_cord(check: Check, item: Item, incident: Incident) -> bool:
    """Whether an item is the cord of what was checked, in a check that goes through a cord.

    A fail reaches that cord whether or not it was surely the one used; a pass needs `covers`.
    """
    tested = find_item(incident, check.of)
    return (
        item.kind == "cord"
        and check.kind in _WITH_THE_CORD
        and tested is not None
        and tested.cord == item.id
    )


def contacts_of(incident: Incident, item: Item) -> tuple[Contact, ...]:
    """The contacts that name an item."""
    return tuple(each for each in incident.contacts if item.id in each.items)


def is_wet(incident: Incident, item: Item) -> bool:
    """Whether liquid was on the item or at a contact with it."""
    at_contact = any(c.moisture in ("damp", "wet") or c.also_touching == "wet_floor"
                     for c in contacts_of(incident, item))  # fmt: skip
    return at_contact or "wet" in item.condition or incident.event.activity == "wet_cleaning"
