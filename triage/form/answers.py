"""Typed text to the value of a field, by the same reading as a record file, echoed in full."""

import re
from collections.abc import Sequence
from datetime import datetime, timedelta

from triage import clock
from triage.check_table import CheckKind, check_kinds
from triage.clock import Moment, find_zone
from triage.errors import InvalidValue
from triage.fields import UNKNOWN, Field, Reader, table
from triage.frozen import frozen
from triage.incident import Incident
from triage.quantity import Quantity, parse, worded
from triage.strict_yaml import Plain

NOT_KNOWN = "unknown"
_SPLIT = re.compile(r"\s+")
_COMMA = re.compile(r"\s*[,;]\s*")
_CLOCK = re.compile(r"(?:(yesterday|today) +)?([0-2]?\d)[:.h]([0-5]\d)")


@frozen
class Reading:
    """One answer as read.

    Args:
        value: text or list of texts for the record.
        echo: the answer in full, so that a slip is seen.
        doubt: a question about it, empty for none.
    """

    value: str | list[str]
    echo: str
    doubt: str = ""


def says_unknown(typed: str) -> bool:
    """Whether an answer says that it is not known."""
    return typed.strip().lower() in UNKNOWN | {"u"}


def pick(typed: str, among: Sequence[tuple[str, str]]) -> tuple[str, str]:
    """One of the choices by number, word or clear beginning.

    Raises:
        InvalidValue: none of them, or several.

    >>> pick("2", [("yes", "yes"), ("no", "no")])
    ('no', 'no')
    """
    plain = _plain(typed)
    if re.fullmatch(r"[0-9]{1,3}", plain) and 1 <= int(plain) <= len(among):
        return among[int(plain) - 1]
    exact = [each for each in among if plain in _spoken(each)]
    near = exact or [
        each for each in among if plain and any(s.startswith(plain) for s in _spoken(each))
    ]
    if len(near) != 1:
        why = "fits several of them" if near else "is not one of them"
        raise InvalidValue(f"'{typed.strip()[:40]}' {why}; type a number or a word of the list")
    return near[0]


def _spoken(choice: tuple[str, str]) -> tuple[str, str]:
    """A choice as it may be typed: its word, or what it says."""
    return _plain(choice[0]), _plain(choice[1])


def _plain(text: str) -> str:
    return re.sub(r"[\s_-]+", "_", text.strip().lower())


def pick_several(typed: str, among: Sequence[tuple[str, str]]) -> list[tuple[str, str]]:
    """Several of the choices, by numbers or words with blanks or commas between.

    Raises:
        InvalidValue: any of them is none of the choices.
    """
    try:
        return [pick(typed, among)]
    except InvalidValue:
        split = _COMMA if _COMMA.search(typed) else _SPLIT
    found = [pick(each, among) for each in split.split(typed.strip()) if each]
    return [each for each in among if each in found]


def read(
    path: str, typed: str, *, among: Sequence[tuple[str, str]], present: Moment, zone: str
) -> Reading:
    """An answer to the field at a path such as "items[0].power".

    Args:
        among: choices, where the answer is chosen.
        present: the present, for "now" and a bare time of day.
        zone: zone of the site.

    Raises:
        InvalidValue: it cannot be the answer; the text says what would do.
    """
    holder, name, row = _row(path)
    if says_unknown(typed):
        return Reading(NOT_KNOWN, "not known")
    if row.kind == "words":
        return _several(row, typed, among)
    if among:
        word, meaning = pick(typed, among)
        return Reading(word, meaning)
    text = _time(typed, present, zone) if row.kind == "time" else typed.strip()
    found, questions = _by_the_table(holder, name, text)
    return Reading(text, _echo(row, found, text), questions)


def _several(row: Field, typed: str, among: Sequence[tuple[str, str]]) -> Reading:
    found = pick_several(typed, among)
    words = [word for word, _ in found]
    nothing = [w for w in words if w in row.words and (row.order(w) or 0) < 0]
    if nothing and len(words) > 1 and nothing[0] in ("none", "intact"):
        raise InvalidValue(f"'{nothing[0]}' cannot stand beside another; give one or the other")
    if row.to and len(words) > 2:
        raise InvalidValue("one or two of them; a third touch is another contact")
    return Reading(words, "; ".join(meaning for _, meaning in found))


def _row(path: str) -> tuple[type, str, Field]:
    """Class that holds the field of a path, its name and its row."""
    of: type = Incident
    *above, name = re.sub(r"\[\d+\]", "", path).split(".")
    for step in above:
        below = dict(table(of))[step].of
        assert below is not None, f"{path} is a path of questions.yaml, checked on loading"
        of = below
    return of, name, dict(table(of))[name]


def _by_the_table(holder: type, name: str, text: str) -> tuple[object, str]:
    """The value as a record file would read it, and the question that it raises."""
    reader = Reader(Plain("answer", {}))
    required = {key: "x" for key, row in table(holder) if row.required}
    built = reader.build(holder, required | {name: text}, "")
    if reader.faults:
        raise InvalidValue(reader.faults[0].partition(f"{name}: ")[2])
    doubts = [each.partition(": ")[2] for each in reader.questions]
    return getattr(built, name), "; ".join(doubts)


def _echo(row: Field, found: object, text: str) -> str:
    if row.kind == "quantity":
        return _in_full(parse(text, row.quantity))
    if isinstance(found, Moment):
        return f"{found.text}, to the {found.precision}"
    return text


def _in_full(quantity: Quantity) -> str:
    """A value as typed, as it would be printed, and in the bare unit: a slip of prefix is seen.

    >>> _in_full(parse("1400 uA", "current"))
    '1400 uA (1.4 mA, 0.0014 A)'
    """
    shown = worded(quantity.value, quantity.kind, 3)
    number, _, unit = shown.partition(" ")
    shown = f"{number.rstrip('0').rstrip('.')} {unit}" if "." in number else shown
    bare = f"{quantity.value:.6g} {worded(1.0, quantity.kind, 1).partition(' ')[2]}"
    others = [each for each in dict.fromkeys((shown, bare)) if each != quantity.text]
    bound = f"{quantity.bound} " if quantity.bound else ""
    return f"{quantity.text} ({bound}{', '.join(others)})" if others else quantity.text


def _time(typed: str, present: Moment, zone: str) -> str:
    """A time as typed; "now", "07:20" and "yesterday 07:20" become a date and a time.

    Raises:
        InvalidValue: not a time, or one that the site's clock skips or doubles.
    """
    plain = typed.strip().lower()
    today = present.interval(zone)[0].astimezone(find_zone(zone))
    bare = _CLOCK.fullmatch(plain)
    if plain == "now":
        text = _now(present, today, zone)
    elif bare:
        day = today - timedelta(days=bare[1] == "yesterday")
        text = f"{day:%Y-%m-%d} {int(bare[2]):02}:{bare[3]}"
    else:
        text = typed.strip()
    clock.parse(text).interval(zone)
    return text


def _now(present: Moment, local: datetime, zone: str) -> str:
    """The present as the clock on the wall shows it; with its offset where that is unclear."""
    text = f"{local:%Y-%m-%d %H:%M}"
    try:
        same = clock.parse(text).interval(zone) == present.interval(zone)
    except InvalidValue:
        same = False
    return text if same else present.text


def read_value(typed: str, kind: str | None) -> Reading:
    """The value of a check, held against the range of readings of its kind.

    Args:
        kind: id of the kind of check; None, or a kind without a value, takes any text.

    Raises:
        InvalidValue: no number with a unit of the right quantity.
    """
    found = check_kinds().get(kind or "")
    if says_unknown(typed):
        return Reading(NOT_KNOWN, "not known")
    if found is None or found.quantity is None:
        _by_the_table(_row("checks.value")[0], "value", typed.strip())
        return Reading(typed.strip(), typed.strip())
    value = parse(typed, found.quantity)
    return Reading(value.text, _in_full(value), _doubt(value.value, value.bound, found))


def _doubt(value: float, bound: str, kind: CheckKind) -> str:
    low, high = kind.low, kind.high
    if bound or low is None or high is None or not kind.quantity or low <= value <= high:
        return ""
    usual = f"{worded(low, kind.quantity)} to {worded(high, kind.quantity)}"
    for factor in (1e-3, 1e3, 1e-6, 1e6):
        if low <= value * factor <= high:
            likely = worded(value * factor, kind.quantity, 3)
            return f"readings of this check lie in {usual}; was {likely} meant?"
    return f"readings of this check lie in {usual}"
