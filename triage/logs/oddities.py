"""What is odd in a log, in words: rows left out, order, duplicates, gaps, stuck values, drift."""

from collections.abc import Iterator, Sequence
from itertools import accumulate, pairwise

from triage.logs.options import EVENTS, Options
from triage.logs.samples import gaps, usual_step
from triage.logs.sheet import Sheet
from triage.logs.stamps import Stamps, shown
from triage.logs.values import Values

_DRIFT = 30.0
"""Seconds by which rows may wander against their step before it is said; judgement: half of the
minute to which an event is known."""
_STEADY = 0.8
"""Share of rows at the step from which a log counts as written at a step; judgement."""


def flags_of(
    sheet: Sheet, stamps: Stamps, values: Values | None, options: Options
) -> tuple[str, ...]:
    """Everything odd in the whole of a log."""
    found = [*_left_out(sheet, stamps, values, options), *_order(stamps.seconds)]
    if values:
        found += _same_time(stamps, values)
    if options.kind != EVENTS:
        found += _spacing(stamps.seconds, options.zone or "UTC")
    return tuple(found)


def lines(numbers: Sequence[int]) -> str:
    """Line numbers in words, the first three of them.

    >>> lines([4]), lines([4, 5, 6, 7])
    ('line 4', 'lines 4, 5, 6 and 1 more')
    """
    few = ", ".join(map(str, numbers[:3]))
    more = f" and {len(numbers) - 3} more" if len(numbers) > 3 else ""
    return f"line{'s' if len(numbers) > 1 else ''} {few}{more}"


def _left_out(
    sheet: Sheet, stamps: Stamps, values: Values | None, options: Options
) -> Iterator[str]:
    zone = options.zone or "UTC"
    for numbers, what in (
        (sheet.others, "left out, no time in it"),
        (stamps.impossible, "left out, a time that does not exist"),
        (stamps.doubled, f"left out, the clock change doubles this hour in {zone}; export with "
                         "the offset or in UTC"),
        (stamps.skipped, f"left out, the clock change skips this hour in {zone}: the log's clock "
                         "does not follow it; say --zone"),
        (values.empty if values else (), "left out, no number in it"),
        (values.outside if values else (), "left out, a value that cannot be"),
    ):  # fmt: skip
        if numbers:
            yield f"{lines(numbers)}: {what}"
    if stamps.half_day:
        yield "no hour after 12 in several days: a twelve-hour clock without AM and PM?"


def _order(seconds: Sequence[float | None]) -> Iterator[str]:
    known = [each for each in seconds if each is not None]
    back = sum(b < a for a, b in pairwise(known))
    if back and all(b <= a for a, b in pairwise(known)):
        yield "rows stand newest first"
    elif back:
        yield f"rows out of order in {back} place{'s' if back > 1 else ''}; was the clock set back?"


def _same_time(stamps: Stamps, values: Values) -> Iterator[str]:
    by_time: dict[float, list[float]] = {}
    for at, value in zip(stamps.seconds, values.numbers, strict=True):
        if at is not None and value is not None:
            by_time.setdefault(at, []).append(value)
    several = [each for each in by_time.values() if len(each) > 1]
    differ = sum(len(set(each)) > 1 for each in several)
    if several:
        yield f"{len(several)} times stand more than once, {differ} of them with different values"


def _spacing(seconds: Sequence[float | None], zone: str) -> Iterator[str]:
    times = sorted({each for each in seconds if each is not None})
    pauses = gaps(times)
    if pauses:
        a, b = max(pauses, key=lambda each: each[1] - each[0])
        yield (f"{len(pauses)} gap{'s' if len(pauses) > 1 else ''}, the longest "
               f"{(b - a) / 60:.0f} min from {shown(a, zone)}")  # fmt: skip
    wander = _wander(times)
    if abs(wander) > _DRIFT:
        yield f"rows wander {wander:+.0f} s against their step: the log's clock or its step drifts"


def _wander(times: Sequence[float]) -> float:
    """Seconds by which rows have moved against whole minutes of their step since the first."""
    step = usual_step(times)
    whole = round(step / 60) * 60 if step else 0
    if not whole:
        return 0.0
    beside = [(b - a + whole / 2) % whole - whole / 2 for a, b in pairwise(times)]
    if sum(abs(each) < whole / 10 for each in beside) < _STEADY * len(beside):
        return 0.0  # written when the value changes: there is no step to wander against
    return max(accumulate(beside), key=abs)
