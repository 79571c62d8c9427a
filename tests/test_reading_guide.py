"""Readings explained: line voltages, loaded volts, plug steps, isolated outlets, alarm values."""

from typing import Any

import pytest
from random_records import record
from sample_records import spoiled

from triage.assessment import Assessment, assess
from triage.physics.touch_current import Mains
from triage.reading_guide import (
    Lines,
    alarm_thresholds,
    example_limits,
    isolated_tests,
    line_voltages,
    loaded_metal,
    other_editions,
    outlet_examples,
    plug_steps,
)
from triage.site import Site, no_site
from triage.site import loads as load_site

CHECK = {"id": "k1", "of": "pump", "supply": "isolated", "stage": "as_found", "same_cord": "yes",
         "state": ["on"], "instrument": "meter 1", "calibration_due": "2026-09-01",
         "by": "technician", "at": "2026-01-14 09:00"}  # fmt: skip


def judged(*checks: dict[str, Any], site: Site | None = None, **supply: str) -> Assessment:
    named = {f"supply.{name}": value for name, value in supply.items()}
    return assess(record(spoiled({"checks": [CHECK | c for c in checks]} | named)),
                  site or no_site())  # fmt: skip


@pytest.mark.parametrize(("remark", "picture"), [
    ("60 V and 60 V to earth, 120 V between", "balanced"),
    ("119 V, 1.4 V, 120 V line to line", "first_fault"),
    ("84.85 V, 84.85 V; 120 V", "mixed_leakage"),
    ("90 V and 30 V; 120 V between the lines", "unbalanced"),
    ("12 V, 20 V, 120 V", "not_this_supply"),
])  # fmt: skip
def test_two_line_voltages_and_the_one_between_them_give_a_picture(
    remark: str, picture: str
) -> None:
    a = judged({"kind": "isolated_line_voltages", "method": "high_impedance_meter",
                "value": "90 V", "reason": remark})  # fmt: skip
    found = list(line_voltages(a.incident, a.verdicts))
    assert isinstance(found[0], Lines) and found[0].read.picture == picture


@pytest.mark.parametrize("remark", ["", "both fine", "119 V only", "1 V, 2 V, 3 V, 4 V"])
def test_line_voltages_that_cannot_be_told_apart_are_asked_for(remark: str) -> None:
    a = judged({"kind": "isolated_line_voltages", "method": "high_impedance_meter",
                "value": "119 V"} | ({"reason": remark} if remark else {}))  # fmt: skip
    assert not any(isinstance(each, Lines) for each in line_voltages(a.incident, a.verdicts))


def test_a_voltage_that_collapses_under_load_comes_through_a_capacitance() -> None:
    """115 V behind 2 x 2.2 nF at 50 Hz gives 0.159 V across 1 kohm."""
    a = judged({"kind": "metal_voltage_loaded", "method": "loaded_1kohm", "value": "159 mV",
                "reason": "115 V with the meter alone"})  # fmt: skip
    found = next(loaded_metal(a.verdicts, 50.0))
    assert found.capacitance == pytest.approx(4.4e-9, rel=0.01)
    assert found.current == pytest.approx(159e-6)
    assert found.most == pytest.approx(318e-6)


def test_a_voltage_that_stays_up_under_load_is_a_source() -> None:
    a = judged({"kind": "metal_voltage_loaded", "method": "loaded_3kohm", "value": "90 V",
                "reason": "115 V open"})  # fmt: skip
    found = next(loaded_metal(a.verdicts, 50.0))
    assert found.capacitance is None and found.current == pytest.approx(0.03)


def test_a_plug_step_is_held_against_the_step_of_an_ordinary_filter() -> None:
    a = judged({"kind": "plug_step_test", "method": "one_plug_at_a_time", "value": "2.1 mA"})
    found = next(plug_steps(a.verdicts, Mains(120, 60)))
    assert found.ordinary == pytest.approx(99.5e-6, rel=1e-3)
    assert found.step == pytest.approx(2.1e-3)


def test_the_example_devices_read_as_solved_on_every_supply() -> None:
    """120 V 60 Hz, earth open, 1 kohm, uA; ngspice agrees with the nodal solution."""
    good, bad, deadly = outlet_examples(Mains(120, 60))
    solved = {good: (0, 72.3, 100.9), bad: (1188, 211, 570), deadly: (60000, 226, 1996)}
    for device, microamps in solved.items():
        read = (device.earthed, device.quiet, device.loaded)
        assert [1e6 * each for each in read] == pytest.approx(microamps, rel=3e-3, abs=0.05)


@pytest.mark.parametrize("mains", [Mains(120, 60), Mains(230, 50)])
def test_the_examples_show_one_false_fail_and_one_false_pass(mains: Mains) -> None:
    good, _, deadly = outlet_examples(mains)
    open_limit, intact_limit = example_limits()
    assert good.earthed < intact_limit < good.loaded
    assert deadly.quiet < open_limit < deadly.earthed


@pytest.mark.parametrize(("supply", "recognised"), [("isolated", True), ("earthed", False),
                                                    (None, True)])  # fmt: skip
def test_a_leakage_test_from_an_isolated_outlet_is_recognised(
    supply: str | None, recognised: bool
) -> None:
    given = {"kind": "touch_current", "method": "direct_earthed", "value": "40 uA"}
    a = judged(given | ({"supply": supply} if supply else {"supply": "unknown"}))
    found = list(isolated_tests(a.verdicts, Mains(230, 50)))
    assert bool(found) == recognised
    if found:
        assert found[0].row.worth == "invalid" and found[0].examples


def test_the_alternative_method_is_valid_from_any_outlet() -> None:
    a = judged({"kind": "touch_current", "method": "alternative", "value": "40 uA"})
    assert list(isolated_tests(a.verdicts, Mains(230, 50))) == []
    assert a.verdicts[0].state == "valid_pass"


@pytest.mark.parametrize(("reading", "name", "edition", "verdict"), [
    ("current_reading", "4.9 mA", "nec-2017", "pass"),
    ("current_reading", "5.0 mA", "nec-2017", "fail"),
    ("current_reading", "3 mA", "csa204-old", "fail"),
    ("current_reading", "3 mA", "csa204-2017", "pass"),
    ("resistance_reading", "60 kohm", "iec60364-7-710", "pass"),
    ("resistance_reading", "50 kohm", "iec60364-7-710", "fail"),
])  # fmt: skip
def test_a_reading_is_held_against_the_alarm_value_of_each_edition(
    reading: str, name: str, edition: str, verdict: str
) -> None:
    a = judged(kind="isolated", **{reading: name})
    found = {t.limit.edition.id: t for t in alarm_thresholds(a.incident, a.site)}
    assert found[edition].comparison.verdict == verdict
    assert {t.limit.kind for t in found.values()} == {
        "current" if reading == "current_reading" else "resistance"
    }


def test_the_edition_of_the_alarm_test_is_the_edition_of_the_monitor() -> None:
    old = load_site("schema: 1\neditions: [{check: isolated_alarm_test, edition: csa204-old}]\n")
    a = judged({"kind": "monitor_log", "of": "w3-1", "method": "log_exported", "value": "3 mA",
                "result": "pass"}, site=old, kind="isolated", current_reading="3 mA")  # fmt: skip
    first = alarm_thresholds(a.incident, a.site)[0]
    assert (first.limit.edition.id, first.standing) == ("csa204-old", "named")
    assert a.verdicts[0].judgements[0].edition.id == "csa204-old"


@pytest.mark.parametrize(("value", "state"), [("1.7 mA", "valid_pass"), ("6 mA", "valid_fail")])
def test_a_log_over_the_alarm_value_fails_whatever_was_written_beside_it(
    value: str, state: str
) -> None:
    a = judged({"kind": "monitor_log", "of": "w3-1", "method": "log_exported", "value": value,
                "result": "pass"}, kind="isolated")  # fmt: skip
    assert a.verdicts[0].state == state


def test_a_log_of_a_monitor_in_ohms_needs_no_current() -> None:
    a = judged({"kind": "monitor_log", "of": "w3-1", "method": "insulation_monitor_log",
                "result": "pass"}, kind="isolated", monitor="insulation_resistance",
               resistance_reading="800 kohm")  # fmt: skip
    assert a.verdicts[0].state == "valid_pass"


@pytest.mark.parametrize("method", ["alternative", "differential_earthed"])
def test_a_leakage_is_held_against_limits_of_its_own_method_only(method: str) -> None:
    a = judged({"kind": "touch_current", "method": method, "supply": "earthed",
                "value": "175 uA"})  # fmt: skip
    others = other_editions(a.verdicts[0], a.incident)
    word = method.removesuffix("_earthed")
    assert others
    assert all({word, "any"} & set(c.limit.methods) for j in others for c in j.comparisons)


def test_editions_for_offices_and_laboratories_are_left_out() -> None:
    a = judged({"kind": "touch_current", "method": "direct_earthed", "supply": "earthed",
                "value": "175 uA"})  # fmt: skip
    scopes = {j.edition.scope for j in other_editions(a.verdicts[0], a.incident)}
    assert scopes <= {"medical", "installation"}


def test_other_editions_never_share_a_judgement_or_another_method() -> None:
    a = judged({"kind": "touch_current", "method": "direct_earthed", "supply": "earthed",
                "value": "175 uA"})  # fmt: skip
    verdict = a.verdicts[0]
    used = {j.edition.id for j in verdict.judgements}
    others = other_editions(verdict, a.incident)
    assert others and not used & {j.edition.id for j in others}
    for judgement in (*verdict.judgements, *others):
        rows = [c.limit for c in judgement.comparisons]
        assert {row.edition.id for row in rows} == {judgement.edition.id}
        assert all({"touch", "any"} & set(row.methods) for row in rows)
