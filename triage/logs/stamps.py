"""Times in a log: shape, order of the date, zone; each proved by the file or asked for."""

import re
from collections.abc import Iterable
from datetime import UTC, date, datetime, timedelta
from functools import lru_cache

from triage.clock import find_zone
from triage.errors import BadRecord, CannotTell
from triage.frozen import frozen
from triage.logs.options import DATE_ORDERS, Options

_DATE = r"(?P<a>\d{1,4})(?P<sep>[-/.])(?P<b>\d{1,2}|[A-Za-z]{3})(?P=sep)(?P<c>\d{4}|\d{1,2})"
_TIME = (
    r"(?P<hour>\d{1,2}):(?P<minute>\d{2})(?::(?P<second>\d{2})(?:[.,]\d{1,9})?)?"
    r"(?:\s?(?P<half>[AaPp])\.?[Mm]\.?)?\s?(?P<offset>[Zz]|[-+]\d{2}:?\d{2})?"
)
_STAMP = re.compile(
    rf"{_DATE}(?:[Tt]|,?\s+){_TIME}|(?P<epoch>\d{{10}}(?:\.\d+)?|\d{{13}})", re.ASCII
)
_DAY_ALONE, _TIME_ALONE = re.compile(_DATE, re.ASCII), re.compile(_TIME, re.ASCII)
_MONTHS = dict(
    zip("jan feb mar apr may jun jul aug sep oct nov dec".split(), range(1, 13), strict=True)
)
SHAPES = "2026-01-14 07:20, 14.01.2026 07:20:00, 01/14/2026 7:20 AM, or seconds since 1970"
"""Times that are recognised."""
Day = tuple[str, str, str]


@frozen
class Stamps:
    """The times of a log.

    Args:
        seconds: seconds since 1970 UTC for each row; None where the row's time cannot be placed.
        how: how they were read, in words.
        doubled: line numbers of rows in an hour that the clock change doubles.
        skipped: line numbers of rows in an hour that the clock change skips.
        impossible: line numbers of rows whose time does not exist.
        half_day: whether no hour after noon occurs in more than a day.
    """

    seconds: tuple[float | None, ...]
    how: str
    doubled: tuple[int, ...]
    skipped: tuple[int, ...]
    impossible: tuple[int, ...]
    half_day: bool


def time_columns(cells: list[str]) -> list[tuple[int, ...]]:
    """Every place of a row that holds a whole time: one column, or a date and a time beside it."""
    found: list[tuple[int, ...]] = []
    for number, cell in enumerate(cells):
        bare = cell.strip()
        if len(bare) > 40:
            continue
        if _STAMP.fullmatch(bare):
            found.append((number,))
        elif _DAY_ALONE.fullmatch(bare) and number + 1 < len(cells):
            if _TIME_ALONE.fullmatch(cells[number + 1].strip()):
                found.append((number, number + 1))
    return found


def holds_time(cells: list[str], columns: tuple[int, ...]) -> bool:
    """Whether a row has a time in the columns of the time."""
    if columns[-1] >= len(cells):
        return False
    shape = _STAMP if len(columns) == 1 else _DAY_ALONE
    return shape.fullmatch(cells[columns[0]].strip()) is not None


def read_stamps(texts: Iterable[tuple[int, str]], name: str, options: Options) -> Stamps:
    """Place every time of a log on one scale.

    Args:
        texts: line number and time of each row.
        name: of the file, for messages.
        options: what was said.

    Raises:
        CannotTell: order of the date or zone neither said nor proved.
        BadRecord: no order of the date fits every row.
    """
    matches = [(line, _STAMP.fullmatch(text)) for line, text in texts]
    days: dict[Day, int] = {}
    for line, match in matches:
        if match and not match["epoch"]:
            days.setdefault((match["a"], match["b"], match["c"]), line)
    order, how = _order(days, name, options) if days else ("", "seconds since 1970, UTC")
    if days and any(match and match["epoch"] for _, match in matches):
        raise BadRecord([f"{name}: dates and seconds since 1970 mixed in one column"])
    bare = any(match and not match["epoch"] and not match["offset"] for _, match in matches)
    if bare and options.zone is None:
        raise CannotTell(f"{name}: its times have no offset; say --zone, such as Europe/Vienna")
    placed = _Placed(order, options.zone or "UTC")
    seconds = tuple(placed.place(line, match) for line, match in matches)
    if days:
        how += f"; times in {options.zone}" if bare else "; offset from UTC in the text"
    return Stamps(seconds, how, tuple(placed.doubled), tuple(placed.skipped),
                  tuple(placed.impossible), _half_day(matches, len(days)))  # fmt: skip


def _half_day(matches: list[tuple[int, re.Match[str] | None]], days: int) -> bool:
    """Twelve-hour times that lost their AM and PM: several days, no hour past 12 and none of 0."""
    hours = [int(m["hour"]) for _, m in matches if m and m["hour"] and not m["half"]]
    return days > 1 and len(hours) > 24 and 1 <= min(hours) and max(hours) <= 12


def _order(days: dict[Day, int], name: str, options: Options) -> tuple[str, str]:
    """The one order of the date that fits every row, and what proved it."""
    if options.date_order:
        said = DATE_ORDERS[options.date_order]
        wrong = next((line for each, line in days.items() if _day(each, said) is None), None)
        if wrong:
            raise BadRecord([f"{name}:{wrong}: this date is not {options.date_order}"])
        return said, f"dates {options.date_order}, as said"
    readings = {}
    for word, order in DATE_ORDERS.items():
        found = [_day(each, order) for each in days]
        if None not in found:
            readings[word] = found
    if not readings:
        raise BadRecord([f"{name}: no order of day, month and year fits every date in it"])
    if len({tuple(map(str, found)) for found in readings.values()}) > 1:
        example = "/".join(next(iter(days)))
        raise CannotTell(
            f"{name}: dates such as {example} can be read as {' or '.join(readings)} and no date "
            "in it decides; say --date-order"
        )
    word = next(iter(readings))
    return DATE_ORDERS[word], f"dates {word}{_proof(days, word)}"


def _proof(days: dict[Day, int], word: str) -> str:
    """The line whose date allows one order only."""
    others = [order for each, order in DATE_ORDERS.items() if each != word]
    for each, line in days.items():
        if all(_day(each, order) is None for order in others):
            return f" (line {line} shows it)"
    return ""


@lru_cache(maxsize=4096)
def _day(day: Day, order: str) -> date | None:
    """A date read in one order; None where it cannot be."""
    parts = dict(zip(order, day, strict=True))
    year, month = parts["y"], parts["m"]
    if len(year) not in (2, 4) or len(parts["d"]) > 2 or len(month) > 3:
        return None
    if month.isalpha():
        number = _MONTHS.get(month.lower(), 0)
    elif len(month) > 2:
        return None
    else:
        number = int(month)
    if not parts["d"].isdigit() or not year.isdigit():
        return None
    try:
        return date(int(year) + (2000 if len(year) == 2 else 0), number, int(parts["d"]))
    except ValueError:
        return None


class _Placed:
    """Turns matches into seconds since 1970 and notes what cannot be placed."""

    def __init__(self, order: str, zone: str):
        self.order, self.zone = order, find_zone(zone)
        self.doubled: list[int] = []
        self.skipped: list[int] = []
        self.impossible: list[int] = []
        self.offsets: dict[datetime, timedelta | str] = {}

    def place(self, line: int, match: re.Match[str] | None) -> float | None:
        if match and match["epoch"]:
            number = float(match["epoch"])
            return number / 1000 if len(match["epoch"]) == 13 else number
        wall = self._wall(match) if match else None
        if match is None or wall is None:
            self.impossible.append(line)
            return None
        offset = _said_offset(match["offset"]) if match["offset"] else self._offset(wall)
        if isinstance(offset, str):
            (self.doubled if offset == "doubled" else self.skipped).append(line)
            return None
        return (wall.replace(tzinfo=UTC) - offset).timestamp()

    def _wall(self, match: re.Match[str]) -> datetime | None:
        day = _day((match["a"], match["b"], match["c"]), self.order)
        hour, half = int(match["hour"]), match["half"]
        if half:
            if not 1 <= hour <= 12:
                return None
            hour = hour % 12 + (12 if half in "Pp" else 0)
        try:
            clock = timedelta(
                hours=hour, minutes=int(match["minute"]), seconds=int(match["second"] or 0)
            )
            inside = hour < 24 and int(match["minute"]) < 60 and int(match["second"] or 0) < 60
            return datetime(day.year, day.month, day.day) + clock if day and inside else None
        except (ValueError, OverflowError):
            return None

    def _offset(self, wall: datetime) -> timedelta | str:
        """The zone's offset, or "doubled" or "skipped"; changes fall on whole quarters."""
        quarter = wall.replace(minute=wall.minute // 15 * 15, second=0)
        if quarter not in self.offsets:
            first = quarter.replace(tzinfo=self.zone).utcoffset() or timedelta()
            second = quarter.replace(tzinfo=self.zone, fold=1).utcoffset() or timedelta()
            change = "doubled" if first > second else "skipped"
            self.offsets[quarter] = first if first == second else change
        return self.offsets[quarter]


def _said_offset(text: str) -> timedelta:
    if text in "Zz":
        return timedelta()
    size = timedelta(hours=int(text[1:3]), minutes=int(text[-2:]))
    return -size if text[0] == "-" else size


def shown(seconds: float, zone: str) -> str:
    """A time in the site's zone, for print.

    >>> shown(1768375200, "UTC")
    '2026-01-14 07:20'
    """
    return f"{datetime.fromtimestamp(seconds, find_zone(zone)):%Y-%m-%d %H:%M}"
