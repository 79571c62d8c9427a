"""A reading from a log in lines: value, doubt, trend, flags, and what to enter in the record."""

from collections.abc import Iterator

from triage.logs.into import as_typed, as_yaml, values_for
from triage.logs.options import EVENTS
from triage.logs.reading import LogReading, Trend


def log_lines(reading: LogReading) -> Iterator[str]:
    """Everything a log says about the time of an event."""
    log = reading.log
    yield f"{log.sheet.name}: {len(log.moments)} rows, read as"
    yield from (f"  {each}" for each in log.read_as)
    yield _clock(reading)
    yield ""
    if log.options.kind != EVENTS:
        yield from _value(reading)
    else:
        yield "The rows around the event are in the excerpt below. A missing row of an alarm does not"
        yield "mean that there was none: who knows the system can say whether this log would hold it."
    for each in (*reading.flags, *log.flags):
        yield f"Look: {each}."
    yield ""
    yield "To enter in the record:"
    yield from (f"  {line}" for line in as_yaml(values_for(reading)))
    yield from _to_answer(reading)


def _clock(reading: LogReading) -> str:
    ahead = reading.log.options.ahead
    if ahead:
        way = "ahead of" if ahead > 0 else "behind"
        return f"  the log's clock {abs(ahead):.0f} s {way} wall time, as said: times are put right"
    return "  no clock error said; compare the log's clock with wall time and say --clock-error"


def _value(reading: LogReading) -> Iterator[str]:
    kind = reading.log.options.kind
    if reading.value is None:
        yield f"At {reading.moment.text}: not known; {reading.reason}."
    else:
        shown = as_typed(reading.value, kind, reading.bound)
        worst = {"monitor-current": "highest", "monitor-resistance": "lowest"}.get(kind)
        how = f"{worst} of the rows around it" if worst else "between its neighbours"
        yield f"At {reading.moment.text}: {shown}, {how}, from '{reading.log.sensor}'."
    if reading.value is not None and reading.low is not None and reading.high is not None:
        yield f"Rows around it: {as_typed(reading.low, kind)} to {as_typed(reading.high, kind)}."
    if reading.doubt is not None:
        yield f"Doubt (one standard deviation): {_difference(reading.doubt, kind)}{_of(reading)}."
    if reading.before:
        yield _before(reading.before, kind)


def _of(reading: LogReading) -> str:
    known = "with the sensor's own from the site file" if reading.sensor_doubt else (
        "from the rows alone; the site file states none for the sensor itself")  # fmt: skip
    return f", {known}"


def _before(trend: Trend, kind: str) -> str:
    rows = f"{trend.rows} row{'s' if trend.rows > 1 else ''}"
    text = (f"Hour before ({rows}): {as_typed(trend.low, kind)} to {as_typed(trend.high, kind)}, "
            f"mean {as_typed(trend.mean, kind)}")  # fmt: skip
    if trend.slope is None:
        return f"{text}; too few rows for a trend."
    way = "rising" if trend.slope > 0 else "falling"
    return f"{text}; {way} by {_difference(abs(trend.slope), kind)} in an hour."


def _difference(size: float, kind: str) -> str:
    """A difference of two values, in points for humidity."""
    if kind == "humidity":
        return f"{size:.1f} points"
    return f"{size:.1f} K" if kind == "temperature" else as_typed(size, kind)


def _to_answer(reading: LogReading) -> Iterator[str]:
    """What the log cannot know."""
    kind = reading.log.options.kind
    yield ""
    if kind in ("humidity", "temperature"):
        yield "Add surroundings.humidity_where: at_place, same_room, same_air or elsewhere."
    elif kind == EVENTS:
        yield "If a row is the alarm or trip of that moment: supply.alarm or supply.trip yes,"
        yield "and supply.alarm_source or supply.trip_source log. Never 'no' from a missing row."
    else:
        yield "Add supply.changed_since: was anything plugged or unplugged before this reading?"
        yield "The value is the least favourable row, since a value between two rows hides a peak."
