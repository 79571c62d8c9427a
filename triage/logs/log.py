"""One log read whole: its samples on one time scale, how it was read, and what is odd in it."""

import re
from itertools import groupby
from pathlib import Path

from triage.errors import BadRecord, CannotTell
from triage.frozen import frozen
from triage.logs.oddities import flags_of
from triage.logs.options import EVENTS, Options
from triage.logs.samples import Sample
from triage.logs.sheet import Row, Sheet, from_bytes, read_sheet
from triage.logs.stamps import Stamps, read_stamps
from triage.logs.values import Values, find_column, read_values

_NAME_COLUMN = re.compile(r"sensor|point(?: name)?|tag|device|location|channel|object|source", re.I)
_UNIT_COLUMN = re.compile(r"units?", re.I)
_VALUE_COLUMN = re.compile(r"value|reading|present value", re.I)


@frozen
class Log:
    """A log as read.

    Args:
        sheet: its rows as text.
        options: what was said about it.
        sensor: the column or the name whose values were taken; "" for a log of events.
        moments: (seconds since 1970 UTC of wall time, line number) of each placed row, in order.
        samples: its values in order of time; empty for a log of events.
        read_as: how it was read, in words.
        flags: what is odd in the whole of it, in words.
    """

    sheet: Sheet
    options: Options
    sensor: str
    moments: tuple[tuple[float, int], ...]
    samples: tuple[Sample, ...]
    read_as: tuple[str, ...]
    flags: tuple[str, ...]


def load(path: Path, options: Options) -> Log:
    """Read a log file.

    Raises:
        CannotRead: no such file, a folder, no permission.
        BadRecord: not a text log, or one that contradicts itself.
        CannotTell: readable in more than one way; the text names the option that decides.
        InvalidValue: an option that cannot be.
    """
    return _log(read_sheet(path, options), options)


def loads(data: bytes, name: str, options: Options) -> Log:
    """Read a log from the bytes of its file; raises as `load`."""
    return _log(from_bytes(data, name, options), options)


def _log(sheet: Sheet, options: Options) -> Log:
    rows, sensor = _chosen_rows(sheet, options)
    stamps = read_stamps(((n, sheet.stamp(cells)) for n, cells in rows), sheet.name, options)
    values, column = (None, "") if options.kind == EVENTS else _values(sheet, rows, options)
    placed = [(at - options.ahead, row[0]) for at, row in zip(stamps.seconds, rows, strict=True)
              if at is not None]  # fmt: skip
    return Log(
        sheet, options, " ".join(filter(None, (column, sensor))),
        tuple(sorted(placed)),
        _samples(stamps, values, rows, options) if values else (),
        _read_as(sheet, stamps, values, column),
        flags_of(sheet, stamps, values, options),
    )  # fmt: skip


def _chosen_rows(sheet: Sheet, options: Options) -> tuple[tuple[Row, ...], str]:
    """The rows of one sensor, where a column names the sensor of each row."""
    column = next((n for n, each in enumerate(sheet.header) if _NAME_COLUMN.fullmatch(each)), None)
    if column is None:
        return sheet.rows, ""
    names = sorted({_cell(cells, column) for _, cells in sheet.rows})
    said = (options.sensor or "").lower()
    mine = [each for each in names if each.lower() == said]
    if not mine and said:
        mine = [each for each in names if said in each.lower()]
    if options.kind == EVENTS and not mine:
        return sheet.rows, ""
    mine = mine or (names if len(names) == 1 else [])
    if len(mine) != 1:
        there = ", ".join(f"'{each[:40]}'" for each in names[:12])
        raise CannotTell(f"{sheet.name}: rows of {len(names)} sensors ({there}); say --sensor")
    return tuple(row for row in sheet.rows if _cell(row[1], column) == mine[0]), mine[0]


def _cell(cells: list[str], column: int) -> str:
    return cells[column].strip() if column < len(cells) else ""


def _values(sheet: Sheet, rows: tuple[Row, ...], options: Options) -> tuple[Values, str]:
    """The values of the rows and the name of their column."""
    header, name, width = sheet.header, sheet.name, max(len(cells) for _, cells in rows)
    wide = next((n for n, cells in rows if header and _filled(cells) > len(header)), None)
    if wide:
        raise BadRecord([
            f"{name}:{wide}: more cells than the header has names; a decimal comma between commas? "
            "export with semicolons, or say --delimiter"
        ])  # fmt: skip
    plain = [n for n, each in enumerate(header) if _VALUE_COLUMN.fullmatch(each)]
    unnamed = len(plain) == 1 and options.column is None and _long(header)
    column = plain[0] if unnamed else find_column(header, width, name, options)
    if column in sheet.times:
        raise BadRecord([f"{name}: column {column + 1} holds the time, not a value"])
    unit = next((n for n, each in enumerate(header) if _UNIT_COLUMN.fullmatch(each)), None)
    cells = [(n, _with_unit(each, column, unit)) for n, each in rows]
    title = header[column] if column < len(header) else ""
    values = read_values(cells, header=title, name=name, options=options)
    return values, title or f"column {column + 1}"


def _long(header: tuple[str, ...]) -> bool:
    return any(_NAME_COLUMN.fullmatch(each) for each in header)


def _filled(cells: list[str]) -> int:
    """Number of cells without empty ones at the end."""
    return max((n for n, each in enumerate(cells, 1) if each.strip()), default=0)


def _with_unit(cells: list[str], column: int, unit: int | None) -> str:
    value = _cell(cells, column)
    bare = value != "" and (value[-1].isdigit() or value[-1] in ".,")
    return f"{value} {_cell(cells, unit)}" if bare and unit is not None else value


def _samples(
    stamps: Stamps, values: Values, rows: tuple[Row, ...], options: Options
) -> tuple[Sample, ...]:
    """Values in order of time, one for each time."""
    found = sorted(
        (at - options.ahead, value, bound, row[0])
        for at, value, bound, row in zip(
            stamps.seconds, values.numbers, values.bounds, rows, strict=True
        )
        if at is not None and value is not None
    )
    return tuple(_joined(list(each), options) for _, each in groupby(found, lambda each: each[0]))


def _joined(same: list[tuple[float, float, str, int]], options: Options) -> Sample:
    """One sample from all rows of one time: of a monitor the least favourable, else the mean."""
    low, high = same[0], same[-1]
    middle = sum(each[1] for each in same) / len(same)
    if options.kind == "monitor-current":
        value, bound = high[1:3]
    elif options.kind == "monitor-resistance":
        value, bound = low[1:3]
    else:
        value, bound = middle, next((each[2] for each in same if each[2]), "")
    return Sample(low[0], value, low[1], high[1], bound)


def _read_as(sheet: Sheet, stamps: Stamps, values: Values | None, column: str) -> tuple[str, ...]:
    marks = {";": "semicolons", ",": "commas", "\t": "tabs", "|": "bars"}
    header = f"header in line {sheet.header_line}" if sheet.header else "no header"
    found = [f"{sheet.encoding}, {marks[sheet.delimiter]}, {header}", stamps.how]
    if values:
        found.append(f"values from '{column}', {values.how}")
    return tuple(found)
