import math

import pytest
from hypothesis import given
from hypothesis import strategies as st

from triage.errors import InvalidValue
from triage.quantity import KINDS, parse, worded

# Exact by definition: 1 in = 25.4 mm, 1 ft = 304.8 mm (international yard and pound, 1959); standard
# gravity 9.80665 m/s2 (3rd CGPM, 1901); 0 degC = 273.15 K and degF = 1.8 degC + 32 (NIST SP 811, B.8).
SPELLINGS = [
    ("1.9 mA", "current", 1.9e-3), ("180 uA", "current", 180e-6), ("180uA", "current", 180e-6),
    ("180 \u00b5A", "current", 180e-6), ("180 \u03bcA", "current", 180e-6),
    ("1,9 mA", "current", 1.9e-3), ("0,180 mA", "current", 180e-6), ("1.9e-3 A", "current", 1.9e-3),
    ("\u22120.5 mA", "current", -0.5e-3), ("+2 mA", "current", 2e-3), (".5 mA", "current", 5e-4),
    ("1.9\u00a0mA", "current", 1.9e-3), ("1.9\u202fmA", "current", 1.9e-3),
    ("0.08 ohm", "resistance", 0.08), ("0,08 ohm", "resistance", 0.08),
    ("5 \u03a9", "resistance", 5), ("5 \u2126", "resistance", 5), ("5 M\u2126", "resistance", 5e6),
    ("5 m\u03a9", "resistance", 5e-3), ("1 Gohm", "resistance", 1e9), ("2 Tohm", "resistance", 2e12),
    ("3 kOhm", "resistance", 3e3), ("230 V", "voltage", 230), ("8 kV", "voltage", 8e3),
    ("130 pF", "capacitance", 130e-12), ("68 F", "temperature", 20), ("20 C", "temperature", 20),
    ("20 \u00b0C", "temperature", 20), ("68 \u00b0F", "temperature", 20), ("293.15 K", "temperature", 20),
    ("-40 F", "temperature", -40), ("212 degF", "temperature", 100),
    ("68 F", "capacitance", 68), ("20 C", "charge", 20), ("0.2 uC", "charge", 0.2e-6),
    ("2 K", "temperature_difference", 2), ("9 \u00b0F", "temperature_difference", 5),
    ("3 points", "humidity_points", 3), ("24 %", "relative_humidity", 24),
    ("24 %RH", "relative_humidity", 24), ("24% RH", "relative_humidity", 24),
    ("0.6 mJ", "energy", 0.6e-3), ("10 kVA", "power", 1e4), ("50 Hz", "frequency", 50),
    ("100 g", "force", 0.980665), ("1 in", "length", 0.0254), ("1 ft", "length", 0.3048),
    ("5 min", "duration", 300), ("2 h", "duration", 7200), ("7 ms", "duration", 7e-3),
]  # fmt: skip


@pytest.mark.parametrize(("text", "kind", "si"), SPELLINGS)
def test_a_quantity_is_read_in_every_usual_spelling(text: str, kind: str, si: float) -> None:
    assert parse(text, kind).value == pytest.approx(
        si, rel=1e-12, abs=1e-9 if kind == "temperature" else 0
    )


# SI prefixes: SI Brochure, 9th edition (2019), table 7; minute, hour, day: table 8; ounce-force
# 0.278 013 9 N: NIST SP 811, B.8 (pound-force 4.448 221 6 N, 16 ounces).
DECIMAL = {
    "p": 1e-12,
    "n": 1e-9,
    "u": 1e-6,
    "m": 1e-3,
    "": 1,
    "k": 1e3,
    "M": 1e6,
    "G": 1e9,
    "T": 1e12,
}
PREFIXED = {
    "current": ("A", "n u m k"), "voltage": ("V", "u m k"), "resistance": ("ohm", "u m k M G T"),
    "capacitance": ("F", "p n u m"), "charge": ("C", "p n u m"), "energy": ("J", "n u m"),
    "power": ("W", "m k"), "frequency": ("Hz", "k M"), "force": ("N", "m"),
}  # fmt: skip
OTHER = [
    ("length", "mm", 1e-3), ("length", "cm", 1e-2), ("length", "m", 1), ("duration", "us", 1e-6),
    ("duration", "ms", 1e-3), ("duration", "s", 1), ("duration", "min", 60), ("duration", "minutes", 60),
    ("duration", "h", 3600), ("duration", "hours", 3600), ("duration", "d", 86400), ("duration", "day", 86400),
    ("duration", "days", 86400), ("duration", "hour", 3600), ("duration", "sec", 1), ("force", "g", 9.80665e-3),
    ("force", "oz", 0.2780139), ("power", "VA", 1), ("resistance", "ohms", 1), ("resistance", "Ohm", 1),
    ("frequency", "hz", 1), ("voltage", "v", 1), ("current", "a", 1), ("humidity_points", "%RH", 1),
]  # fmt: skip
EVERY = OTHER + [
    (kind, prefix + unit, DECIMAL[prefix])
    for kind, (unit, prefixes) in PREFIXED.items()
    for prefix in ["", *prefixes.split(" ")]
]


@pytest.mark.parametrize(("kind", "unit", "factor"), EVERY)
def test_every_unit_has_the_size_that_the_standard_gives_it(
    kind: str, unit: str, factor: float
) -> None:
    assert parse(f"3 {unit}", kind).value == pytest.approx(3 * factor, rel=1e-6)


@pytest.mark.parametrize(("text", "kind", "si"), SPELLINGS)
def test_the_text_is_kept_as_typed(text: str, kind: str, si: float) -> None:
    assert parse(f"  {text} ", kind).text == text
    assert parse(text, kind).kind == kind


@pytest.mark.parametrize("kind", KINDS)
@pytest.mark.parametrize("text", ["5", "0.08", "1,9", "<10", " 7 "])
def test_a_bare_number_is_refused_and_told_how_to_write_it(text: str, kind: str) -> None:
    with pytest.raises(InvalidValue, match="no unit; write it like"):
        parse(text, kind)


@pytest.mark.parametrize("kind", KINDS)
@pytest.mark.parametrize(
    "text", ["nan V", "inf A", "-inf %", "Infinity ohm", "1e999 V", "", "V", "about 5 V", "5 to 6 V",
             "5 V 6 V", "0x10 V", "1e V", "--5 V", "5..2 V", "\u0665 V", "\u00b2 V", "5 V\nx"],
)  # fmt: skip
def test_what_is_no_finite_number_with_one_unit_is_refused(text: str, kind: str) -> None:
    with pytest.raises(InvalidValue):
        parse(text, kind)


@pytest.mark.parametrize(("text", "kind"), [("1e308 kV", "voltage"), ("1e300 Tohm", "resistance")])
def test_a_number_that_its_prefix_carries_beyond_all_numbers_is_refused(
    text: str, kind: str
) -> None:
    with pytest.raises(InvalidValue, match="not a finite number"):
        parse(text, kind)


@pytest.mark.parametrize("text", ["1,234 ohm", "12,345 ohm", "123,456 ohm", "-1,234 ohm"])
def test_a_comma_that_could_be_a_thousands_mark_is_refused(text: str) -> None:
    with pytest.raises(InvalidValue, match="thousands"):
        parse(text, "resistance")


@pytest.mark.parametrize(
    "text", ["1,234,567 ohm", "1.234,5 ohm", "1 000 ohm", "1'000 ohm", "1_000 ohm"]
)
def test_grouped_digits_are_refused(text: str) -> None:
    with pytest.raises(InvalidValue):
        parse(text, "resistance")


@pytest.mark.parametrize(
    ("text", "kind"),
    [("1.9 MA", "current"), ("1 mOhms", "resistance"), ("5 V", "current"), ("5 m", "duration"),
     ("2 C", "temperature_difference"), ("2 F", "temperature_difference"), ("5 %", "humidity_points"),
     ("20 K", "charge"), ("24 percent", "relative_humidity"), ("5 kPA", "power"), ("3 h", "length")],
)  # fmt: skip
def test_a_unit_of_another_kind_or_another_case_is_refused(text: str, kind: str) -> None:
    with pytest.raises(InvalidValue, match="is not a unit of"):
        parse(text, kind)


def test_the_case_of_a_prefix_is_worth_nine_decades() -> None:
    assert parse("5 Mohm", "resistance").value == pytest.approx(
        1e9 * parse("5 mohm", "resistance").value
    )


def test_a_temperature_difference_is_not_a_temperature() -> None:
    # 9 degF of difference are 5 K; a temperature of 9 degF is -12.8 degC (NIST SP 811, B.8.9).
    assert parse("9 degF", "temperature_difference").value == pytest.approx(5)
    assert parse("9 degF", "temperature").value == pytest.approx(-12.7778, abs=1e-4)


@pytest.mark.parametrize(
    ("text", "bound"), [("<10 \u00b5A", "<"), ("< 10 uA", "<"), (">10 uA", ">"), ("\u226410 uA", "<"),
                        ("\u226510 uA", ">"), ("10 uA", "")],
)  # fmt: skip
def test_a_reading_beyond_the_range_keeps_its_bound(text: str, bound: str) -> None:
    found = parse(text, "current")
    assert (found.bound, found.value) == (bound, pytest.approx(10e-6))


@pytest.mark.parametrize(
    ("value", "kind", "text"),
    [(0.00018, "current", "180 \u00b5A"), (2500, "voltage", "2.5 kV"), (None, "charge", "not known"),
     (999.6, "voltage", "1.0 kV"), (0.0999, "resistance", "100 m\u03a9"), (0, "current", "0 A"),
     (-0.0005, "current", "-500 \u00b5A"), (1e10, "resistance", "10 G\u03a9"), (24.4, "relative_humidity", "24 % RH"),
     (100, "relative_humidity", "100 % RH"), (21.04, "temperature", "21 \u00b0C"), (0, "temperature", "0 \u00b0C"),
     (90, "duration", "90 s"), (7200, "duration", "2.0 h"), (86400 * 3, "duration", "3.0 d"),
     (5e-13, "capacitance", "5.0e-13 F"), (120, "duration", "2.0 min"), (119, "duration", "120 s"),
     (7199, "duration", "120 min"), (172799, "duration", "48 h"), (3, "humidity_points", "3.0 points"),
     (2, "temperature_difference", "2.0 K"), (2e-12, "capacitance", "2.0 pF"), (2e-9, "charge", "2.0 nC"),
     (3e12, "resistance", "3.0 T\u03a9"), (99.7, "relative_humidity", "100 % RH"), (1e6, "frequency", "1.0 MHz")],
)  # fmt: skip
def test_a_value_is_printed_rounded_with_a_fitting_prefix(
    value: float | None, kind: str, text: str
) -> None:
    assert worded(value, kind) == text


@given(st.floats(1e-11, 1e13), st.sampled_from(["current", "voltage", "charge", "energy"]))
def test_what_is_printed_reads_back_within_its_rounding(value: float, kind: str) -> None:
    printed = worded(value, kind, 4)
    head, unit = printed.split(" ")
    prefix = {
        "T": 1e12,
        "G": 1e9,
        "M": 1e6,
        "k": 1e3,
        "m": 1e-3,
        "\u00b5": 1e-6,
        "n": 1e-9,
        "p": 1e-12,
    }
    scale = prefix.get(unit[0], 1.0) if len(unit) > 1 else 1.0
    assert float(head) * scale == pytest.approx(value, rel=6e-4)


@given(st.text(max_size=30), st.sampled_from(KINDS))
def test_any_text_is_a_finite_quantity_or_a_clear_refusal(text: str, kind: str) -> None:
    try:
        found = parse(text, kind)
    except InvalidValue:
        return
    assert math.isfinite(found.value) and found.text == text.strip()


@given(
    st.from_regex(r"\A[<>]?-?[0-9]{1,4}([.,][0-9]{1,3})? ?(u|m|k|M)?(A|V|ohm|F|C|%)\Z"),
    st.sampled_from(KINDS),
)
def test_a_text_that_looks_right_is_read_or_refused_but_never_crashes(text: str, kind: str) -> None:
    try:
        assert worded(parse(text, kind).value, kind)
    except InvalidValue as error:
        assert "'" in str(error)
