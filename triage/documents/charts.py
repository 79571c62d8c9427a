"""Numbers -> SVG text, for print in grey and for reading aloud.

Every chart is one string. Its first child is `<title>`: the text read instead of the picture,
worded by the caller. Marks differ by shape and pattern, never by colour alone; lines are labelled
directly.
"""

import math
from collections.abc import Sequence
from dataclasses import dataclass
from functools import partial
from typing import NamedTuple

from triage.documents.svg import (
    GREY,
    INK,
    SIZE,
    TINT,
    WIDTH,
    Axis,
    arrow,
    box,
    dashed,
    decades,
    figure,
    fit,
    hatch,
    line,
    path,
    powers,
    ring,
    square,
    tag,
    text,
    ticks_across,
    ticks_up,
    track,
    whisker,
    with_prefix,
)

LABELS = 196.0
"""Points; the column of row labels, at the left of a chart of rows."""


class CauseRange(NamedTuple):
    """One row of `cause_ranges`: probabilities 0 to 1, and whether the cause is a mains fault."""

    label: str
    low: float
    middle: float
    high: float
    is_fault: bool


@dataclass(frozen=True, slots=True)
class HumidityCurve:
    """Body voltage over humidity: humidity [%RH], the others [V], all of one length."""

    humidity: Sequence[float]
    median: Sequence[float]
    low: Sequence[float]
    high: Sequence[float]


class HumidityMark(NamedTuple):
    """This incident in `voltage_against_humidity`: humidity [%RH], voltage and range [V]."""

    label: str
    humidity: float
    voltage: float
    low: float
    high: float


class CurrentEstimate(NamedTuple):
    """One estimate in `time_current`: current (low, middle, high) [A], duration (low, high) [s]."""

    label: str
    current: tuple[float, float, float]
    duration: tuple[float, float]


class ScaleRow(NamedTuple):
    """One row of a `Scale`, in its unit; an estimate of this incident, or a published mark."""

    label: str
    low: float
    middle: float
    high: float
    is_estimate: bool


class Scale(NamedTuple):
    """One logarithmic scale of `charge_energy`: its name, SI unit and rows."""

    name: str
    unit: str
    rows: Sequence[ScaleRow]


def cause_ranges(rows: Sequence[CauseRange], *, alt: str) -> str:
    """Ranked causes as ranges on a log-odds scale, which shows small probabilities honestly.

    Args:
        rows: in the order to print; a range past an end of the scale is drawn with an arrow.
        alt: text read instead of the picture.

    Returns:
        SVG text. Faults have a thick bar and a filled square, others a thin bar and a ring.
    """
    bottom = 12 + 15.0 * len(rows)
    axis = Axis(LABELS, WIDTH - 12, (0.005, 0.97), _log_odds)
    parts = [ticks_across(axis, (0.01, 0.05, 0.2, 0.5, 0.8, 0.95), (6, bottom), _percent)]
    for number, row in enumerate(rows):
        y = 14 + 15.0 * number
        parts += [text(0, y + 2.5, fit(row.label, LABELS - 10)), _range(axis, y, row)]
    parts += _cause_key(bottom + 25)
    return figure(bottom + 30, alt, parts)


def voltage_against_humidity(
    curve: HumidityCurve, *, incident: HumidityMark | None, felt: tuple[float, float], alt: str
) -> str:
    """Body voltage over relative humidity for one floor and footwear.

    Args:
        curve: median and range [V] over humidity [%RH].
        incident: where this incident lies; None when its humidity is not known.
        felt: voltages [V] between which a discharge begins to be felt.
        alt: text read instead of the picture.

    Returns:
        SVG text: tinted range, median line, hatched threshold band, a marked point.
    """
    across = Axis(40, 372, (curve.humidity[0], curve.humidity[-1]), float)
    marked = [] if incident is None else [incident.low, incident.high]
    up = Axis(172, 8, decades([*curve.low, *curve.high, *felt, *marked]), math.log10)
    parts = [
        _band(curve, across, up),
        hatch(across.start, up.at(felt[1]), across.end, up.at(felt[0])),
        ticks_across(across, _steps(curve.humidity), (8, 172), lambda each: f"{each:.0f}"),
        ticks_up(up, (40, 372), "V"),
        _median(curve, across, up),
        text((across.start + across.end) / 2, 194, "relative humidity, %", anchor="middle"),
        *_end_labels(across.end + 6, _ends(curve, felt, up)),
    ]
    if incident is not None:
        parts.append(_incident(incident, across, up))
    return figure(198, alt, parts)


def weights(rows: Sequence[tuple[str, float]], *, sides: tuple[str, str], alt: str) -> str:
    """Weights of evidence as bars to both sides of nothing.

    Args:
        rows: label and weight [decibans]; positive speaks for the right-hand side.
        sides: what the left and the right stand for.
        alt: text read instead of the picture.

    Returns:
        SVG text; bars to the right are solid, to the left hatched; each bears its weight,
        without a sign: the side says for whom.
    """
    reach = max([10.0, *(abs(weight) for _, weight in rows)])
    axis = Axis(LABELS + 24, WIDTH - 34, (-reach, reach), float)
    middle, bottom = axis.at(0), 18 + 14.0 * len(rows)
    parts = [
        text(middle - 6, 8, f"← {fit(sides[0], 300)}", anchor="end"),
        text(middle + 6, 8, f"{fit(sides[1], 135)} →"),
        line(middle, 13, middle, bottom),
    ]
    for number, (label, weight) in enumerate(rows):
        y, x = 18 + 14.0 * number, axis.at(weight)
        bar = box(middle, y, x, y + 8) if weight >= 0 else hatch(x, y, middle, y + 8)
        beside = (x + 3, "start") if weight >= 0 else (x - 3, "end")
        parts += [bar, text(0, y + 6.5, fit(label, LABELS - 10))]
        parts.append(text(beside[0], y + 6.5, f"{abs(weight):.0f}", anchor=beside[1]))
    return figure(bottom + 3, alt, parts)


def time_current(
    estimates: Sequence[CurrentEstimate],
    *,
    ceiling: float | None,
    zones: Sequence[tuple[str, Sequence[tuple[float, float]]]],
    alt: str,
) -> str:
    """Current through the body against its duration, both logarithmic.

    Args:
        estimates: of this incident.
        ceiling: the most a monitor's reading allows [A], None without one.
        zones: label and points (current [A], duration [s]) of each published boundary.
        alt: text read instead of the picture.

    Returns:
        SVG text: boundaries as lines, estimates as crosses of their ranges, ceiling dashed.
    """
    drawn = [point for _, points in zones for point in points]
    currents = [x for x, _ in drawn] + [x for each in estimates for x in each.current]
    times = [y for _, y in drawn] + [y for each in estimates for y in each.duration]
    limit = [] if ceiling is None else [ceiling]
    across = Axis(44, WIDTH - 12, decades([*currents, *limit, 1e-4, 1.0]), math.log10)
    up = Axis(206, 20, decades([*times, 0.01, 10.0]), math.log10)
    parts = [
        ticks_across(across, powers(across.reach), (20, 206), partial(with_prefix, unit="A")),
        ticks_up(up, (44, WIDTH - 12), "s"),
        text(WIDTH / 2, 230, "current through the body", anchor="middle"),
    ]
    for label, points in zones:
        x, y = max(points, key=lambda point: point[1])
        parts.append(path(track(points, across, up), stroke=GREY, width=1.1))
        parts.append(text(across.at(x), up.at(y) - 4, label, anchor="middle"))
    if ceiling is not None:
        x = across.at(ceiling)
        parts += [dashed(x, 20, x, 206), tag(x + 4, 201, "ceiling")]
    parts += [_cross(each, across, up) for each in estimates]
    return figure(234, alt, parts)


def charge_energy(scales: Sequence[Scale], *, alt: str) -> str:
    """This incident's charge, energy and the like beside published marks, on log scales.

    Args:
        scales: one under the other, each with its own axis.
        alt: text read instead of the picture.

    Returns:
        SVG text: estimates as thick bars with a square, marks as hatched bars or a single stroke.
    """
    parts: list[str] = []
    top = 0.0
    for scale in scales:
        bottom = top + 18 + 14.0 * len(scale.rows)
        reach = decades([x for row in scale.rows for x in (row.low, row.high)])
        axis = Axis(LABELS, WIDTH - 14, reach, math.log10)
        parts.append(text(0, top + 8, scale.name, bold=True))
        word = partial(with_prefix, unit=scale.unit)
        parts.append(ticks_across(axis, powers(reach), (top + 12, bottom), word))
        for number, row in enumerate(scale.rows):
            y = top + 20 + 14.0 * number
            parts += [text(0, y + 2.5, fit(row.label, LABELS - 10)), _scale_row(axis, y, row)]
        top = bottom + 22
    return figure(top - 6, alt, parts)


# --- composed marks -------------------------------------------------------------------------------


def _range(axis: Axis, y: float, row: CauseRange) -> str:
    left, right = axis.at(row.low), axis.at(row.high)
    parts = [line(left, y, right, y, width=2.6 if row.is_fault else 0.9)]
    if row.low < axis.reach[0]:
        parts.append(arrow(left, y, length=-4))
    if row.high > axis.reach[1]:
        parts.append(arrow(right, y, length=4))
    parts.append(square(axis.at(row.middle), y) if row.is_fault else ring(axis.at(row.middle), y))
    return "".join(parts)


def _cause_key(y: float) -> list[str]:
    left, right = LABELS, LABELS + 100
    return [
        line(left, y - 2.5, left + 20, y - 2.5, width=2.6),
        square(left + 10, y - 2.5),
        text(left + 26, y, "electrical fault"),
        line(right, y - 2.5, right + 20, y - 2.5, width=0.9),
        ring(right + 10, y - 2.5),
        text(right + 26, y, "other cause"),
    ]


def _band(curve: HumidityCurve, across: Axis, up: Axis) -> str:
    there = [*zip(curve.humidity, curve.high, strict=True)]
    back = reversed([*zip(curve.humidity, curve.low, strict=True)])
    return path(track([*there, *back], across, up) + "Z", fill=TINT)


def _median(curve: HumidityCurve, across: Axis, up: Axis) -> str:
    points = zip(curve.humidity, curve.median, strict=True)
    return path(track(points, across, up), stroke=INK, width=1.4)


def _ends(curve: HumidityCurve, felt: tuple[float, float], up: Axis) -> list[tuple[float, str]]:
    return [
        (up.at(math.sqrt(felt[0] * felt[1])), "begins to be felt"),
        (up.at(curve.median[-1]), "middle estimate"),
        (up.at(curve.high[-1]), "upper end, 9 in 10"),
        (up.at(curve.low[-1]), "lower end, 9 in 10"),
    ]


def _incident(mark: HumidityMark, across: Axis, up: Axis) -> str:
    x, y = across.at(mark.humidity), up.at(mark.voltage)
    right = x < (across.start + across.end) / 2
    return "".join(
        [
            whisker(x, up.at(mark.low), up.at(mark.high)),
            square(x, y),
            tag(x + 8 if right else x - 8, y + 2.5, mark.label, anchor="start" if right else "end"),
        ]
    )


def _cross(each: CurrentEstimate, across: Axis, up: Axis) -> str:
    low, middle, high = map(across.at, each.current)
    short, long = map(up.at, each.duration)
    y = (short + long) / 2
    return "".join(
        [
            line(low, y, high, y, width=2.2),
            line(middle, short, middle, long, width=1.2),
            square(middle, y),
            tag(middle, min(short, long) - 5, each.label, anchor="middle"),
        ]
    )


def _scale_row(axis: Axis, y: float, row: ScaleRow) -> str:
    left, right = axis.at(row.low), axis.at(row.high)
    if row.is_estimate:
        return line(left, y, right, y, width=2.6) + square(axis.at(row.middle), y)
    if right - left < 2:
        return line(left, y - 5, left, y + 5, width=1.6)
    return hatch(left, y - 4, right, y + 4)


def _end_labels(x: float, labels: list[tuple[float, str]]) -> list[str]:
    """Labels at the right-hand ends of lines, moved apart where they would touch."""
    parts: list[str] = []
    last = -math.inf
    for y, label in sorted(labels):
        last = max(y + 2.5, last + SIZE + 2)
        parts.append(text(x, last, label))
    return parts


def _log_odds(probability: float) -> float:
    return math.log(probability / (1 - probability))


def _steps(values: Sequence[float]) -> list[float]:
    """Tens from the first value to the last."""
    return [float(x) for x in range(math.ceil(values[0] / 10) * 10, int(values[-1]) + 1, 10)]


def _percent(probability: float) -> str:
    return f"{100 * probability:.0f} %"
