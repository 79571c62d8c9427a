"""Times as people know them: text as typed, its precision, and honest comparison.

A time is an interval: "morning" and a bare date are wide. Before and after between overlapping
intervals is unknown. This is the one place that reads the clock.
"""

import re
from dataclasses import dataclass
from datetime import UTC, date, datetime, timedelta, timezone
from functools import cache
from typing import TYPE_CHECKING

from triage.errors import InvalidValue

if TYPE_CHECKING:
    from zoneinfo import ZoneInfo

_PARTS = {"night": (0, 6), "morning": (6, 12), "afternoon": (12, 18), "evening": (18, 24)}
# Years 1900 to 2199 only: at the ends of the calendar an interval in UTC does not exist.
_SHAPE = re.compile(
    r"(?P<day>(?:19|2[01])\d{2}-\d{2}-\d{2})"
    r"(?:[ T](?P<hour>\d{2})(?:(?P<whole>h)|:(?P<minute>\d{2}))(?P<offset>Z|[-+]\d{2}:\d{2})?"
    r"|[ ](?P<part>night|morning|afternoon|evening))?",
    re.ASCII,
)
EXAMPLE = "2026-01-14 07:20, 2026-01-14 07h, 2026-01-14 morning or 2026-01-14"
"""How a time may be typed."""


@dataclass(frozen=True, slots=True)
class Moment:
    """One time as typed.

    Args:
        text: as typed.
        precision: "minute", "hour", "part of day" or "date".
        start: beginning of the interval, local wall time.
        length: length of the interval.
        offset: offset from UTC where one was typed, else None.
    """

    text: str
    precision: str
    start: datetime
    length: timedelta
    offset: timedelta | None = None

    def interval(self, zone: str) -> tuple[datetime, datetime]:
        """The interval in UTC.

        Args:
            zone: IANA zone of the site, used where no offset was typed.

        Raises:
            InvalidValue: a minute or hour that a clock change doubles or skips, with no offset.
        """
        if self.offset is not None:
            begin = self.start.replace(tzinfo=timezone(self.offset)).astimezone(UTC)
            return begin, begin + self.length
        local = self.start.replace(tzinfo=find_zone(zone))
        if self.precision in ("minute", "hour"):
            _refuse_clock_change(self.text, local)
        end = (self.start + self.length).replace(tzinfo=local.tzinfo)
        return local.astimezone(UTC), end.astimezone(UTC)


def _refuse_clock_change(text: str, local: datetime) -> None:
    first, second = local.utcoffset(), local.replace(fold=1).utcoffset()
    if first == second:
        return
    if first is not None and second is not None and first > second:
        raise InvalidValue(f"'{text}' happens twice that day; add the offset, like '{text}+01:00'")
    raise InvalidValue(f"'{text}' does not exist: the clock is put forward then")


@cache
def find_zone(name: str) -> "ZoneInfo":
    """The time zone of an IANA name such as "Europe/Vienna".

    Raises:
        InvalidValue: no such zone on this computer.
    """
    from zoneinfo import ZoneInfo, ZoneInfoNotFoundError

    try:
        return ZoneInfo(name)
    except (ZoneInfoNotFoundError, ValueError, OSError):
        raise InvalidValue(f"'{name}' is not a time zone known here; use an IANA name") from None


def parse(text: str) -> Moment:
    """Read a time as typed.

    Raises:
        InvalidValue: another shape, or a day or hour that does not exist.

    >>> parse("2026-01-14 morning").precision
    'part of day'
    """
    match = _SHAPE.fullmatch(text.strip())
    if not match:
        raise InvalidValue(f"'{text}' is not a time; write it like {EXAMPLE}")
    try:
        day = datetime.combine(date.fromisoformat(match["day"]), datetime.min.time())
        if match["part"]:
            first, last = _PARTS[match["part"]]
            begin, length = day + timedelta(hours=first), timedelta(hours=last - first)
            return Moment(text.strip(), "part of day", begin, length)
        if match["hour"] is None:
            return Moment(text.strip(), "date", day, timedelta(days=1))
        begin = day.replace(hour=int(match["hour"]), minute=int(match["minute"] or 0))
    except ValueError:
        raise InvalidValue(f"'{text}' names a day or hour that does not exist") from None
    whole = bool(match["whole"])
    length = timedelta(hours=1) if whole else timedelta(minutes=1)
    offset = _offset(match["offset"])
    return Moment(text.strip(), "hour" if whole else "minute", begin, length, offset)


def _offset(text: str | None) -> timedelta | None:
    if text is None:
        return None
    if text == "Z":
        return timedelta()
    size = timedelta(hours=int(text[1:3]), minutes=int(text[4:6]))
    if size >= timedelta(hours=15):
        raise InvalidValue(f"'{text}' is not an offset from UTC")
    return -size if text[0] == "-" else size


def before(first: Moment | None, second: Moment | None, zone: str) -> bool | None:
    """Whether the first time lies before the second; None where the intervals overlap.

    >>> a, b = parse("2026-01-14 07:20"), parse("2026-01-14 morning")
    >>> before(a, b, "UTC") is None
    True
    """
    if first is None or second is None:
        return None
    (begin1, end1), (begin2, end2) = first.interval(zone), second.interval(zone)
    if end1 <= begin2:
        return True
    return False if end2 <= begin1 else None


def hours_between(first: Moment | None, second: Moment | None, zone: str) -> float | None:
    """Largest distance in hours that the two intervals allow; None where a time is not known."""
    if first is None or second is None:
        return None
    (begin1, end1), (begin2, end2) = first.interval(zone), second.interval(zone)
    widest = max(end1 - begin2, end2 - begin1)
    return widest.total_seconds() / 3600


def now() -> Moment:
    """The present minute in UTC: the only reading of the clock in the program."""
    stamp = datetime.now(UTC).replace(second=0, microsecond=0)
    return parse(stamp.strftime("%Y-%m-%d %H:%MZ"))
