"""The reading of a log at the time of an event, with its doubt, the hour before and the trend."""

from bisect import bisect_left, bisect_right
from collections.abc import Iterator
from math import sqrt
from statistics import fmean, linear_regression

from triage.clock import Moment
from triage.frozen import frozen
from triage.logs.log import Log
from triage.logs.options import EVENTS, QUANTITY
from triage.logs.samples import HOUR, Sample, gaps, resolution, stuck
from triage.logs.stamps import shown
from triage.quantity import worded
from triage.visible import visible

MOST_EXCERPT = 5500
"""Characters of the excerpt; the record's field keeps 6000."""
_WORSE = 1.2
"""Times worse than the reading from which another row within the hour is named; judgement: more
than a monitor's own scatter."""
_USUAL = {"humidity": (5.0, 90.0), "temperature": (10.0, 35.0)}
"""Room air that raises no question; judgement, the same as for the fields of the record."""


@frozen
class Trend:
    """The hour before the event.

    Args:
        low: least value [SI; % RH, °C].
        high: greatest value.
        mean: mean of the rows.
        slope: change per hour by least squares; None for fewer than three rows.
        rows: number of rows.
    """

    low: float
    high: float
    mean: float
    slope: float | None
    rows: int


@frozen
class LogReading:
    """What a log says about the time of an event.

    Args:
        log: the log.
        moment: the time of the event.
        window: its interval [s since 1970 UTC].
        value: SI (% RH, °C); None where the log does not cover the time.
        bound: "<" or ">" where the value is the end of the instrument's range.
        low: least value of the rows in and next to the interval.
        high: greatest of them.
        doubt: standard uncertainty of the value; None without a value.
        sensor_doubt: the part of it that the sensor has of its own; 0 where none was stated.
        reason: why there is no value; "" with one.
        before: the hour before; None without rows.
        flags: what is odd near the event.
        excerpt: the rows used, as text for the record.
    """

    log: Log
    moment: Moment
    window: tuple[float, float]
    value: float | None
    bound: str
    low: float | None
    high: float | None
    doubt: float | None
    sensor_doubt: float
    reason: str
    before: Trend | None
    flags: tuple[str, ...]
    excerpt: str


def reading_at(log: Log, moment: Moment, zone: str, *, sensor_doubt: float = 0.0) -> LogReading:
    """The reading at the time of an event.

    Between two rows the value is interpolated over time; of a monitor it is the least favourable
    of the rows in and next to the interval, since a value between two rows hides a peak.

    Args:
        log: the log.
        moment: the time of the event.
        zone: IANA zone of the site, for a time without offset.
        sensor_doubt: standard uncertainty of the sensor, unit of the value.

    Raises:
        InvalidValue: a time of the event that a clock change doubles or skips.

    Source:
        JCGM 100:2008, 4.3.7: a value known to lie between two limits has the variance
        (difference)^2 / 12; F.2.2.1: a resolution has that of its step; 5.1.2: variances add.
    """
    begin, end = (each.timestamp() for each in moment.interval(zone))
    near = _near(log.samples, begin, end)
    reason = _reason(log, near, begin, end)
    value, bound = (None, "") if reason or not near else _value(log, near, (begin + end) / 2)
    low = min((each.low for each in near), default=None)
    high = max((each.high for each in near), default=None)
    doubt = None
    if value is not None and low is not None and high is not None:
        doubt = sqrt(((high - low) ** 2 + resolution(log.samples) ** 2) / 12 + sensor_doubt**2)
    return LogReading(
        log, moment, (begin, end), value, bound, low, high, doubt, sensor_doubt, reason,
        _trend(log.samples, begin), _odd(log, begin, end, value), _excerpt(log, begin, end),
    )  # fmt: skip


def _near(samples: tuple[Sample, ...], begin: float, end: float) -> tuple[Sample, ...]:
    """Rows in the interval with one on either side."""
    first = bisect_right(samples, begin, key=lambda each: each.at) - 1
    last = bisect_left(samples, end, key=lambda each: each.at)
    return samples[max(first, 0) : last + 1]


def _reason(log: Log, near: tuple[Sample, ...], begin: float, end: float) -> str:
    """Why the log gives no value for the interval."""
    if log.options.kind == EVENTS:
        return "a log of events has rows, not values"
    if not log.samples:
        return "no row of it holds a value"
    zone = log.options.zone or "UTC"
    if near[0].at > begin or near[-1].at < end:
        span = f"{shown(log.samples[0].at, zone)} to {shown(log.samples[-1].at, zone)}"
        return f"the log covers {span} ({zone}), not the whole time of the event"
    if end - begin > HOUR:
        return "the time of the event is not known to the hour"
    hole = max(b.at - a.at for a, b in zip(near, near[1:], strict=False))
    if hole > HOUR:
        return f"no row for {hole / 60:.0f} min around the event; more than an hour is not bridged"
    if any(each.bound for each in near) and not log.options.kind.startswith("monitor"):
        return "a row near the event is beyond the sensor's range"
    return ""


def _value(log: Log, near: tuple[Sample, ...], at: float) -> tuple[float, str]:
    if log.options.kind == "monitor-current":
        worst = max(near, key=lambda each: (each.value, each.bound == ">"))
        return worst.value, worst.bound
    if log.options.kind == "monitor-resistance":
        worst = min(near, key=lambda each: (each.value, each.bound != "<"))
        return worst.value, worst.bound
    after = max(bisect_left(near, at, key=lambda each: each.at), 1)
    a, b = near[after - 1], near[after]
    return a.value + (b.value - a.value) * (at - a.at) / (b.at - a.at), ""


def _trend(samples: tuple[Sample, ...], begin: float) -> Trend | None:
    """The rows of the hour before."""
    first = bisect_left(samples, begin - HOUR, key=lambda each: each.at)
    last = bisect_right(samples, begin, key=lambda each: each.at)
    hour = samples[first:last]
    if not hour:
        return None
    values = [each.value for each in hour]
    slope = None
    if len(hour) >= 3:
        slope = linear_regression([(each.at - begin) / HOUR for each in hour], values).slope
    return Trend(min(values), max(values), fmean(values), slope, len(hour))


def _odd(log: Log, begin: float, end: float, value: float | None) -> tuple[str, ...]:
    """What touches the hour before the event or the event itself."""
    found = []
    zone = log.options.zone or "UTC"
    for first, last, rows in stuck(log.samples) if log.options.kind in _USUAL else ():
        if first.at <= end and last.at >= begin - HOUR:
            found.append(f"the same value in {rows} rows from {shown(first.at, zone)}: a stuck "
                         "sensor, or one that shows whole steps")  # fmt: skip
    usual = _USUAL.get(log.options.kind)
    near = _near(log.samples, begin, end)
    if usual and any(not usual[0] <= each.value <= usual[1] for each in near):
        found.append("a value next to the event is unusual for a room: a failed sensor?")
    found += _worse(log, begin, end, value)
    times = [each.at for each in log.samples]
    holes = [(a, b) for a, b in gaps(times) if a < end and b > begin - HOUR]
    if holes:
        found.append(f"a gap of {max(b - a for a, b in holes) / 60:.0f} min in the hour before "
                     "or at the event")  # fmt: skip
    return tuple(found)


def _worse(log: Log, begin: float, end: float, value: float | None) -> Iterator[str]:
    """A monitor that shows worse within the hour: a clock that is wrong would hide it."""
    if value is None or not log.options.kind.startswith("monitor"):
        return
    near = [each for each in log.samples if begin - HOUR <= each.at <= end + HOUR]
    sign = 1 if log.options.kind == "monitor-current" else -1
    worst = max(near, key=lambda each: sign * each.value)
    if sign * worst.value > sign * value * _WORSE**sign:
        at = shown(worst.at, log.options.zone or "UTC")
        quantity = worded(worst.value, QUANTITY[log.options.kind], 3)
        yield f"it shows {quantity} at {at}, within an hour: is the log's clock right?"


def _excerpt(log: Log, begin: float, end: float) -> str:
    """The rows of the hour before, of the event and one after it, as lines of text."""
    hour_after = HOUR if log.options.kind == EVENTS else 0.0
    first = bisect_left(log.moments, (begin - HOUR, 0))
    last = bisect_right(log.moments, (end + hour_after, 0))
    used = log.moments[max(first - 1, 0) : last + 1]
    cells = dict(log.sheet.rows)
    head = [f"{visible(log.sheet.name)[:120]}, SHA-256 {log.sheet.digest}", "; ".join(log.read_as)]
    if log.options.ahead:
        head.append(f"log's clock {log.options.ahead:+.0f} s against wall time, as said")
    if log.sheet.header:
        head.append(f"{log.sheet.header_line}: {_flat(log, log.sheet.header)}")
    rows = [(abs(at - begin), n, f"{line}: {_flat(log, cells[line])}")
            for n, (at, line) in enumerate(used)]  # fmt: skip
    return "\n".join([*head, *_shortened(rows, MOST_EXCERPT - sum(map(len, head)))])


def _flat(log: Log, cells: tuple[str, ...] | list[str]) -> str:
    return visible(" ".join(log.sheet.line(cells).split("\n"))).strip()


def _shortened(rows: list[tuple[float, int, str]], most: int) -> list[str]:
    """The rows nearest to the event that fit, in order; what is left out is said."""
    kept: list[tuple[int, str]] = []
    for _, number, row in sorted(rows):
        most -= len(row) + 1
        if most < 0:
            break
        kept.append((number, row))
    left = len(rows) - len(kept)
    found = [row for _, row in sorted(kept)]
    return [f"({left} rows further from the event left out)", *found] if left else found
