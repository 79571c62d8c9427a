"""Values in a log: which column, decimal sign, unit; each proved by the file or asked for."""

import re
from collections.abc import Iterable
from functools import lru_cache

from triage.errors import BadRecord, CannotTell, InvalidValue
from triage.frozen import frozen
from triage.logs.options import DECIMALS, QUANTITY, Options
from triage.quantity import EXAMPLE, parse

_NAMES = {
    "humidity": re.compile(r"humid|hygro|(?:^|[^a-z])r\.?h(?:[^a-z]|$)", re.IGNORECASE),
    "temperature": re.compile(r"temp", re.IGNORECASE),
    "monitor-current": re.compile(
        r"hazard|leakage|current|(?:^|[^a-z])thc(?:[^a-z]|$)", re.IGNORECASE
    ),
    "monitor-resistance": re.compile(r"resist|insulation", re.IGNORECASE),
}
_NOT_A_READING = re.compile(
    r"set.?p(?:oin)?t|target|limit|alarm|demand|outdoor|outside", re.IGNORECASE
)
_NUMBER = re.compile(r"([<>≤≥]?)\s*([-+−]?\d[\d.,'\u00a0 ]*|[-+−]?[.,]\d+)\s*(.*)", re.DOTALL)
_POSSIBLE = {"humidity": (0, 100), "temperature": (-60, 80), "monitor-current": (0, 1),
             "monitor-resistance": (0, 1e12)}  # fmt: skip


@frozen
class Values:
    """The values of a log.

    Args:
        numbers: SI value (% RH, °C) of each row; None where the cell holds no number.
        bounds: "<" or ">" for a value beyond the instrument's range, else "", for each row.
        how: how they were read, in words.
        outside: line numbers of numbers that cannot be, such as 130 %.
        empty: line numbers of cells without a number.
    """

    numbers: tuple[float | None, ...]
    bounds: tuple[str, ...]
    how: str
    outside: tuple[int, ...]
    empty: tuple[int, ...]


def is_unit(text: str, kind: str) -> bool:
    """Whether a text is a unit of a kind of quantity."""
    try:
        parse(f"1 {_unit(text, kind)}", kind)
    except InvalidValue:
        return False
    return True


def _unit(text: str, kind: str) -> str:
    """One spelling for units as systems write them."""
    bare = text.strip(" []()").replace("deg ", "deg")
    if kind == "relative_humidity" and re.sub(r"[ .]", "", bare.lower()) in ("%rh", "rh%", "%"):
        return "%"
    return bare


def unit_of(name: str, kind: str) -> str | None:
    """The unit in the name of a column, in brackets or as its last word.

    >>> unit_of("Room 2 humidity [%RH]", "relative_humidity"), unit_of("THC_mA", "current")
    ('%', 'mA')
    """
    bracketed = re.findall(r"[\[(]([^\[\]()]*)[\])]", name)
    for each in (*bracketed[::-1], *re.split(r"[\s_,/]+", name)[:0:-1]):
        if each and is_unit(each, kind):
            return _unit(each, kind)
    return None


def find_column(header: tuple[str, ...], width: int, name: str, options: Options) -> int:
    """The column of values.

    Args:
        header: names of the columns, empty where the file has none.
        width: cells in the first row.
        name: of the file, for messages.
        options: what was said.

    Raises:
        CannotTell: none or several fit.
        BadRecord: the column said does not exist.
    """
    if options.column:
        return _said(header, width, name, options.column)
    pattern = _NAMES[options.kind]
    found = [n for n, each in enumerate(header)
             if pattern.search(each) and not _NOT_A_READING.search(each)]  # fmt: skip
    if options.sensor and len(found) != 1:
        mine = [n for n in found if options.sensor.lower() in header[n].lower()]
        found = mine or found
    if len(found) == 1:
        return found[0]
    there = ", ".join(f"{n + 1} '{each[:60]}'" for n, each in enumerate(header)) or "no header"
    which = (
        f"{len(found)} columns look like {options.kind}"
        if found
        else f"no column is named as {options.kind}"
    )
    raise CannotTell(f"{name}: {which}; say --column with a name or a number (columns: {there})")


def _said(header: tuple[str, ...], width: int, name: str, said: str) -> int:
    exact = [n for n, each in enumerate(header) if each.strip().lower() == said.strip().lower()]
    if len(exact) == 1:
        return exact[0]
    if said.isdecimal() and 1 <= int(said) <= max(width, len(header)):
        return int(said) - 1
    raise BadRecord([f"{name}: no one column '{said}'; columns: {', '.join(header) or width}"])


def read_values(
    cells: Iterable[tuple[int, str]], *, header: str, name: str, options: Options
) -> Values:
    """Read the cells of the column of values.

    Args:
        cells: line number and cell of each row.
        header: name of the column, empty where there is none.
        name: of the file, for messages.
        options: what was said.

    Raises:
        CannotTell: decimal sign or unit neither said nor proved.
        BadRecord: cells that contradict the decimal sign or each other.
    """
    split = [(line, _NUMBER.fullmatch(cell.strip()) if len(cell) < 80 else None)
             for line, cell in cells]  # fmt: skip
    kind = QUANTITY[options.kind]
    general = options.unit or unit_of(header, kind)
    if options.unit and not is_unit(options.unit, kind):
        raise InvalidValue(f"--unit: '{options.unit}' is no unit of {options.kind}")
    units = {match[3].strip() for _, match in split if match}
    known = {each: _own_unit(each, kind) for each in units}
    scales = {each: _scale(own or general, kind, name, options.kind)
              for each, own in known.items() if own or each == ""}  # fmt: skip
    _refuse_two_units(known, general, kind, name)
    decimal, how = _decimal(split, scales, name, options)
    return _converted(split, scales, decimal, f"{how}; unit {_named(known, general)}", options.kind)


def _named(known: dict[str, str | None], general: str | None) -> str:
    own = sorted({each for each in known.values() if each})
    return " and ".join(own) if own else str(general)


def _own_unit(text: str, kind: str) -> str | None:
    return _unit(text, kind) if text and is_unit(text, kind) else None


def _refuse_two_units(
    known: dict[str, str | None], general: str | None, kind: str, name: str
) -> None:
    own = {each for each in known.values() if each}
    if own and general and _unit(general, kind) not in own:
        raise BadRecord([f"{name}: cells say {', '.join(sorted(own))}, header or option {general}"])


def _scale(unit: str | None, kind: str, name: str, word: str) -> tuple[float, float]:
    """Factor and offset from the unit to SI."""
    if unit is None:
        raise CannotTell(f"{name}: no unit of {word} in header or cells; say --unit, as in "
                         f"'{EXAMPLE[kind]}'")  # fmt: skip
    low = parse(f"0 {_unit(unit, kind)}", kind).value
    return parse(f"1 {_unit(unit, kind)}", kind).value - low, low


Split = list[tuple[int, re.Match[str] | None]]
Scales = dict[str, tuple[float, float]]


def _decimal(split: Split, scales: Scales, name: str, options: Options) -> tuple[str, str]:
    """The decimal sign that reads every number, and how that is known."""
    if options.decimal:
        return DECIMALS[options.decimal], f"decimal {options.decimal}, as said"
    signed = [(match[2], scales[match[3].strip()]) for _, match in split
              if match and match[3].strip() in scales and re.search("[.,]", match[2])]  # fmt: skip
    if not signed:
        return ".", "whole numbers"
    low, high = _POSSIBLE[options.kind]
    fits = [word for word, mark in DECIMALS.items()
            if all((value := number(text, mark)) is not None and low <= value * a + b <= high
                   for text, (a, b) in signed)]  # fmt: skip
    if len(fits) == 1:
        return DECIMALS[fits[0]], f"decimal {fits[0]}"
    if fits:
        raise CannotTell(f"{name}: '{signed[0][0]}' can be read two ways; say --decimal")
    strict = [word for word, mark in DECIMALS.items()
              if all(number(text, mark) is not None for text, _ in signed)]  # fmt: skip
    if len(strict) == 1:
        return DECIMALS[strict[0]], f"decimal {strict[0]}"
    raise CannotTell(f"{name}: point and comma are used in more than one way; say --decimal")


@lru_cache(maxsize=65536)
def number(text: str, decimal: str) -> float | None:
    """A number with a known decimal sign; the other sign only between groups of three.

    >>> number("1.234,5", ","), number("24,5", "."), number("24,5", ",")
    (1234.5, None, 24.5)
    """
    other = "," if decimal == "." else "."
    plain = text.strip().replace("−", "-")
    grouped = rf"[-+]?\d{{1,3}}(?:[{other}' \u00a0]\d{{3}})+(?:[{decimal}]\d*)?"
    if not re.fullmatch(rf"{grouped}|[-+]?(?:\d+(?:[{decimal}]\d*)?|[{decimal}]\d+)", plain):
        return None
    return float(re.sub(rf"[{other}' \u00a0]", "", plain).replace(decimal, "."))


def _converted(split: Split, scales: Scales, decimal: str, how: str, kind: str) -> Values:
    low, high = _POSSIBLE[kind]
    numbers: list[float | None] = []
    bounds: list[str] = []
    outside: list[int] = []
    empty: list[int] = []
    for line, match in split:
        scale = scales.get(match[3].strip()) if match else None
        found = number(match[2], decimal) if match and scale else None
        value = found * scale[0] + scale[1] if found is not None and scale else None
        if value is None:
            empty.append(line)
        elif not low <= value <= high:
            outside.append(line)
            value = None
        numbers.append(value)
        bounds.append({"≤": "<", "≥": ">"}.get(match[1], match[1]) if match else "")
    return Values(tuple(numbers), tuple(bounds), how, tuple(outside), tuple(empty))
