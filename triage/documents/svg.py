"""The few pieces of SVG that charts are made of: axes, lettering, marks that differ in grey.

The style sheet of a page does not reach inside an SVG, so all looks are attributes. Lengths are
points. Numbers have a fixed format, so that the same chart is the same bytes.
"""

import math
from collections.abc import Callable, Iterable
from dataclasses import dataclass
from html import escape

from triage.errors import InvalidValue

WIDTH = 476.0
"""Points; the width of the text on A4 (168 mm)."""

SIZE = 7.0
"""Points; size of lettering."""

EM = 0.51
"""Mean width of a letter of the carried face, in its size; rounded up from English text."""

INK, GREY, RULE, TINT = "#000", "#6e6e6e", "#c8c8c8", "#e6e6e6"
PREFIXES = ((1e3, "k"), (1.0, ""), (1e-3, "m"), (1e-6, "µ"), (1e-9, "n"))


@dataclass(frozen=True, slots=True)
class Axis:
    """Maps a value to a place; a value past an end is put at that end.

    Args:
        start: place of the low end [pt].
        end: place of the high end [pt].
        reach: lowest and highest value.
        bend: the scale, `float` for a linear one, `math.log10` for a logarithmic one.

    >>> Axis(0, 100, (1, 100), math.log10).at(10)
    50.0
    """

    start: float
    end: float
    reach: tuple[float, float]
    bend: Callable[[float], float]

    def at(self, value: float) -> float:
        """The place of a value [pt]."""
        low, high = map(self.bend, self.reach)
        inside = min(max(value, self.reach[0]), self.reach[1])
        return self.start + (self.bend(inside) - low) / (high - low) * (self.end - self.start)


def decades(values: Iterable[float]) -> tuple[float, float]:
    """The whole powers of ten around some values, at least one decade apart.

    Raises:
        InvalidValue: a value is not above 0.

    >>> decades([0.3, 20])
    (0.1, 100.0)
    """
    found = [*values]
    if not all(each > 0 for each in found):
        raise InvalidValue(f"a logarithmic scale shows values above 0, not {min(found):g}")
    logs = [math.log10(each) for each in found]
    low = math.floor(min(logs) + 1e-9)
    return 10.0**low, 10.0 ** max(low + 1, math.ceil(max(logs) - 1e-9))


def powers(reach: tuple[float, float]) -> list[float]:
    """Powers of ten from end to end, thinned until at most eight bear a number.

    >>> powers((0.1, 100))
    [0.1, 1.0, 10.0, 100.0]
    """
    low, high = (round(math.log10(each)) for each in reach)
    step = 1 + (high - low) // 8
    return [10.0**exponent for exponent in range(low, high + 1, step)]


def with_prefix(value: float, unit: str) -> str:
    """A value with the prefix that keeps it short.

    >>> with_prefix(0.001, "A")
    '1 mA'
    """
    size, prefix = next((each for each in PREFIXES if value >= each[0] * 0.999), PREFIXES[-1])
    return f"{value / size:.3g} {prefix}{unit}"


def ticks_across(
    axis: Axis, values: Iterable[float], span: tuple[float, float], word: Callable[[float], str]
) -> str:
    """A horizontal axis at the lower end of `span` [pt], with a worded rule at each value."""
    places = [(axis.at(each), word(each)) for each in values]
    rules = "".join(f"M{_n(x)} {_n(span[0])}V{_n(span[1])}" for x, _ in places)
    words = [text(x, span[1] + 10, label, anchor="middle") for x, label in places]
    foot = line(axis.start, span[1], axis.end, span[1])
    return path(rules, stroke=RULE, width=0.6) + foot + "".join(words)


def ticks_up(axis: Axis, span: tuple[float, float], unit: str) -> str:
    """An upright logarithmic axis at the left end of `span` [pt], with a rule at each decade."""
    places = [(axis.at(each), with_prefix(each, unit)) for each in powers(axis.reach)]
    rules = "".join(f"M{_n(span[0])} {_n(y)}H{_n(span[1])}" for y, _ in places)
    words = [text(span[0] - 4, y + 2.5, label, anchor="end") for y, label in places]
    stem = line(span[0], axis.start, span[0], axis.end)
    return path(rules, stroke=RULE, width=0.6) + stem + "".join(words)


def figure(height: float, alt: str, parts: Iterable[str]) -> str:
    """The whole picture, `alt` first: that is what is read aloud."""
    size = f'width="{_n(WIDTH)}pt" height="{_n(height)}pt" viewBox="0 0 {_n(WIDTH)} {_n(height)}"'
    face = f'font-family="Report Sans, sans-serif" font-size="{_n(SIZE)}"'
    head = f'<svg xmlns="http://www.w3.org/2000/svg" role="img" {size} {face}>'
    return f"{head}<title>{escape(alt)}</title>{''.join(parts)}</svg>"


def fit(words: str, width: float) -> str:
    """Shorten a label to a width [pt]; the table beside a chart holds it whole.

    >>> fit("Potential between two metals", 60)
    'Potential betwe…'
    """
    room = int(width / (EM * SIZE))
    return words if len(words) <= room else words[: room - 1].rstrip() + "…"


def text(x: float, y: float, words: str, *, anchor: str = "start", bold: bool = False) -> str:
    """Lettering with its baseline at y."""
    where = "" if anchor == "start" else f' text-anchor="{anchor}"'
    weight = ' font-weight="700"' if bold else ""
    return f'<text x="{_n(x)}" y="{_n(y)}"{where}{weight}>{escape(words)}</text>'


def tag(x: float, y: float, words: str, *, anchor: str = "start") -> str:
    """Lettering on white, for use upon lines."""
    width = len(words) * EM * SIZE
    left = {"start": x, "end": x - width, "middle": x - width / 2}[anchor]
    white = box(left - 1.5, y - SIZE, left + width + 1.5, y + 2, fill="#fff")
    return white + text(x, y, words, anchor=anchor)


def line(
    x1: float, y1: float, x2: float, y2: float, *, stroke: str = INK, width: float = 0.6
) -> str:
    """A straight line."""
    return path(f"M{_n(x1)} {_n(y1)}L{_n(x2)} {_n(y2)}", stroke=stroke, width=width)


def dashed(x1: float, y1: float, x2: float, y2: float) -> str:
    """A dashed line, thicker than a plain one."""
    return line(x1, y1, x2, y2, width=1.2).replace("/>", ' stroke-dasharray="4 2.5"/>')


def whisker(x: float, low: float, high: float) -> str:
    """An upright range with a short bar at both ends."""
    bars = "".join(f"M{_n(x - 4)} {_n(y)}h8" for y in (low, high))
    return path(f"M{_n(x)} {_n(low)}V{_n(high)}{bars}", stroke=INK, width=1.6)


def box(x1: float, y1: float, x2: float, y2: float, *, fill: str = INK) -> str:
    """A filled rectangle."""
    return path(f"M{_n(x1)} {_n(y1)}H{_n(x2)}V{_n(y2)}H{_n(x1)}Z", fill=fill)


def square(x: float, y: float) -> str:
    """A filled square, the mark of an estimate or a fault."""
    return box(x - 3, y - 3, x + 3, y + 3)


def ring(x: float, y: float) -> str:
    """An open ring, the mark of anything that is not a fault."""
    place = f'cx="{_n(x)}" cy="{_n(y)}" r="3.0"'
    return f'<circle {place} fill="#fff" stroke="{INK}" stroke-width="1.1"/>'


def arrow(x: float, y: float, *, length: float) -> str:
    """A head at the end of a range that goes on; a negative length points left."""
    return path(f"M{_n(x)} {_n(y - 3)}l{_n(length)} 3l{_n(-length)} 3Z", fill=INK)


def hatch(x1: float, y1: float, x2: float, y2: float) -> str:
    """An outlined box of slanting strokes, drawn one by one: no pattern can fail to print."""
    left, right, top, bottom = min(x1, x2), max(x1, x2), min(y1, y2), max(y1, y2)
    width, height = right - left, bottom - top
    strokes = [f"M{_n(left)} {_n(top)}H{_n(right)}V{_n(bottom)}H{_n(left)}Z"]
    for step in range(1, math.ceil((width + height) / 4)):
        start, end = max(0.0, step * 4 - width), min(height, step * 4)
        strokes.append(
            f"M{_n(left + step * 4 - start)} {_n(top + start)}"
            f"L{_n(left + step * 4 - end)} {_n(top + end)}"
        )
    return path("".join(strokes), stroke=GREY, width=0.6)


def track(points: Iterable[tuple[float, float]], across: Axis, up: Axis) -> str:
    """Path data through points in the units of two axes."""
    return "M" + "L".join(f"{_n(across.at(x))} {_n(up.at(y))}" for x, y in points)


def path(data: str, *, fill: str = "none", stroke: str = "", width: float = 0) -> str:
    """A path, filled or stroked."""
    edge = f' stroke="{stroke}" stroke-width="{_n(width)}"' if stroke else ""
    return f'<path d="{data}" fill="{fill}"{edge}/>'


def _n(value: float) -> str:
    return f"{value:.1f}"
