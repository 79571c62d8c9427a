"""Charts: well-formed, worded first, the same twice, right places on honest scales."""

import math
import re
from collections.abc import Callable
from xml.etree import ElementTree

import mock_charts
import pytest

from triage.documents.charts import (
    CauseRange,
    CurrentEstimate,
    HumidityCurve,
    Scale,
    ScaleRow,
    cause_ranges,
    charge_energy,
    time_current,
    voltage_against_humidity,
    weights,
)
from triage.documents.svg import EM, SIZE, WIDTH, Axis, decades, fit, hatch, powers, with_prefix
from triage.errors import InvalidValue

SVG = "{http://www.w3.org/2000/svg}"
CHARTS = {
    "causes": mock_charts.causes_chart,
    "humidity": mock_charts.humidity_chart,
    "weights": mock_charts.weights_chart,
    "charge": mock_charts.charge_chart,
    "current": mock_charts.current_chart,
}


def lettering(svg: str) -> list[str]:
    """What a chart says, in drawing order."""
    return [each.text or "" for each in ElementTree.fromstring(svg).iter(f"{SVG}text")]


def corners(svg: str) -> list[tuple[float, float]]:
    """Places of lettering and the absolute points of paths."""
    root = ElementTree.fromstring(svg)
    found = [(float(e.attrib["x"]), float(e.attrib["y"])) for e in root.iter(f"{SVG}text")]
    for each in root.iter(f"{SVG}path"):
        pairs = re.findall(r"[ML](-?[\d.]+) (-?[\d.]+)", each.attrib["d"])
        found += [(float(x), float(y)) for x, y in pairs]
    return found


@pytest.mark.parametrize("draw", CHARTS.values(), ids=CHARTS)
def test_the_first_child_is_the_text_read_aloud(draw: Callable[[], str]) -> None:
    first = ElementTree.fromstring(draw())[0]

    assert first.tag == f"{SVG}title"
    assert len(first.text or "") > 30


@pytest.mark.parametrize("draw", CHARTS.values(), ids=CHARTS)
def test_the_same_numbers_are_the_same_bytes(draw: Callable[[], str]) -> None:
    assert draw() == draw()


@pytest.mark.parametrize("draw", CHARTS.values(), ids=CHARTS)
def test_every_mark_lies_on_the_sheet(draw: Callable[[], str]) -> None:
    height = float(ElementTree.fromstring(draw()).attrib["viewBox"].split()[3])

    assert all(0 <= x <= WIDTH and 0 <= y <= height for x, y in corners(draw()))


@pytest.mark.parametrize("draw", CHARTS.values(), ids=CHARTS)
def test_a_chart_has_at_most_25_pieces_of_lettering(draw: Callable[[], str]) -> None:
    assert len(lettering(draw())) <= 25


@pytest.mark.parametrize("draw", CHARTS.values(), ids=CHARTS)
def test_nothing_is_told_by_colour(draw: Callable[[], str]) -> None:
    colours = set(re.findall(r'"(#[0-9a-f]+)"', draw()))

    assert colours
    assert all(
        len(set(re.findall("..", each[1:]))) == 1 or each in ("#000", "#fff") for each in colours
    )


def test_hostile_labels_stay_text() -> None:
    rows = [CauseRange('</text><script>"&', 0.1, 0.2, 0.3, True)]
    svg = cause_ranges(rows, alt='</title><image href="http://192.0.2.1/">')

    assert {each.tag for each in ElementTree.fromstring(svg).iter()} == {
        f"{SVG}{tag}" for tag in ("svg", "title", "path", "text", "circle")
    }
    assert '</text><script>"&' in lettering(svg)


def test_faults_and_other_causes_differ_by_shape() -> None:
    fault = cause_ranges([CauseRange("a", 0.1, 0.2, 0.3, True)], alt="x" * 40)
    other = cause_ranges([CauseRange("a", 0.1, 0.2, 0.3, False)], alt="x" * 40)

    assert fault.count("<circle") == 1 and other.count("<circle") == 2  # one stands in the key
    assert fault.count('stroke-width="2.6"') == 2 and other.count('stroke-width="2.6"') == 1


def test_probabilities_are_never_marked_nought_or_certain() -> None:
    said = lettering(mock_charts.causes_chart())

    assert [each for each in said if each.endswith("%")] == [
        "1 %",
        "5 %",
        "20 %",
        "50 %",
        "80 %",
        "95 %",
    ]


@pytest.mark.parametrize(("low", "high", "arrows"), [(0.01, 0.9, 0), (0, 0.9, 1), (0, 1, 2)])
def test_a_range_past_the_scale_goes_on_as_an_arrow(low: float, high: float, arrows: int) -> None:
    svg = cause_ranges([CauseRange("a", low, 0.5, high, True)], alt="x" * 40)

    assert len(re.findall(r"l-?4\.0 3l", svg)) + len(re.findall(r"l-?4\.0 3\.?0?l", svg)) >= arrows
    assert len(re.findall(r"M[\d.]+ [\d.]+l", svg)) == arrows


def test_odds_and_their_inverse_lie_equally_far_from_even() -> None:
    svg = cause_ranges([CauseRange("a", 0.2, 0.5, 0.8, True)], alt="x" * 40)
    left, right = re.findall(r'M([\d.]+) 14\.0L([\d.]+) 14\.0" fill="none"[^>]*2\.6', svg)[0]
    square = re.findall(r"M([\d.]+) 11\.0H([\d.]+)V17\.0", svg)[0]
    even = sum(map(float, square)) / 2

    assert even - float(left) == pytest.approx(float(right) - even, abs=0.2)


def test_weights_point_to_the_side_they_speak_for() -> None:
    svg = weights([("for", 6.0), ("against", -7.0)], sides=("left", "right"), alt="x" * 40)
    said = lettering(svg)

    assert said[:2] == ["← left", "right →"]
    assert "6" in said and "7" in said
    places = {e.text: float(e.attrib["x"]) for e in ElementTree.fromstring(svg).iter(f"{SVG}text")}
    assert places["7"] < places["← left"] < places["right →"] < places["6"]


def test_without_a_humidity_the_incident_is_not_marked() -> None:
    curve = HumidityCurve([10, 80], [1e4, 1e3], [3e3, 3e2], [3e4, 3e3])
    svg = voltage_against_humidity(curve, incident=None, felt=(1200, 3500), alt="x" * 40)

    assert not [each for each in lettering(svg) if "incident" in each]
    assert "begins to be felt" in lettering(svg)


def test_labels_at_the_ends_of_lines_never_touch() -> None:
    curve = HumidityCurve([10, 80], [2000, 2000], [1990, 1990], [2010, 2010])
    svg = voltage_against_humidity(curve, incident=None, felt=(1990, 2010), alt="x" * 40)
    ends = sorted(
        float(e.attrib["y"])
        for e in ElementTree.fromstring(svg).iter(f"{SVG}text")
        if float(e.attrib["x"]) == 378
    )

    assert len(ends) == 4
    assert min(b - a for a, b in zip(ends, ends[1:], strict=False)) >= 8.9


def test_the_ceiling_is_drawn_only_when_there_is_one() -> None:
    estimate = CurrentEstimate("a", (1e-4, 2e-4, 3e-4), (0.1, 1))
    with_, without = (
        time_current([estimate], ceiling=each, zones=[], alt="x" * 40) for each in (1e-3, None)
    )

    assert "ceiling" in lettering(with_) and "dasharray" in with_
    assert "ceiling" not in lettering(without) and "dasharray" not in without


def test_a_single_threshold_is_a_stroke_and_a_spread_is_hatched() -> None:
    one, spread = (
        charge_energy([Scale("E", "J", [ScaleRow("m", low, 1e-3, 5e-3, False)])], alt="x" * 40)
        for low in (5e-3, 1e-3)
    )

    assert "#6e6e6e" not in one and "#6e6e6e" in spread


def test_a_logarithmic_scale_refuses_nothing_and_less() -> None:
    with pytest.raises(InvalidValue, match="above 0"):
        charge_energy([Scale("E", "J", [ScaleRow("m", 0, 1e-3, 5e-3, True)])], alt="x")


@pytest.mark.parametrize(
    ("values", "reach"),
    [([0.3, 20], (0.1, 100)), ([1, 10], (1, 10)), ([1], (1, 10)), ([0.001, 1], (0.001, 1))],
)
def test_a_scale_runs_over_whole_decades(values: list[float], reach: tuple[float, float]) -> None:
    assert decades(values) == pytest.approx(reach)


def test_a_long_scale_bears_at_most_nine_numbers() -> None:
    assert len(powers((1e-9, 1e9))) <= 9


def test_a_decade_is_as_wide_as_the_next() -> None:
    axis = Axis(0, 300, (1, 1000), math.log10)

    assert [axis.at(each) for each in (1, 10, 100, 1000)] == pytest.approx([0, 100, 200, 300])
    assert axis.at(0.01) == 0 and axis.at(1e9) == 300


@pytest.mark.parametrize(
    ("value", "shown"),
    [
        (1e-9, "1 nC"),
        (1e-7, "100 nC"),
        (1e-6, "1 µC"),
        (1e-3, "1 mC"),
        (10, "10 C"),
        (1e4, "10 kC"),
    ],
)
def test_numbers_take_the_prefix_that_keeps_them_short(value: float, shown: str) -> None:
    assert with_prefix(value, "C") == shown


def test_a_label_too_long_for_its_place_ends_in_an_ellipsis() -> None:
    assert fit("short", 100) == "short"
    assert fit("x" * 100, 100).endswith("…") and len(fit("x" * 100, 100)) * EM * SIZE <= 100


def test_hatching_stays_inside_its_box() -> None:
    points = re.findall(r"[ML]([\d.]+) ([\d.]+)", hatch(10, 20, 47, 33))

    assert len(points) > 20
    assert all(10 <= float(x) <= 47 and 20 <= float(y) <= 33 for x, y in points)
