"""The electrical lines in words: nothing left out, nothing reassuring that the numbers do not say."""

from typing import Any

import pytest
from random_records import record
from sample_records import spoiled

from triage.assessment import Assessment, assess
from triage.documents.analysis import analysis_sections
from triage.documents.check_guide import check_lines, open_check_blocks
from triage.documents.electrical import electrical_lines, not_excluded, other_source_lines
from triage.documents.electrical_sources import electrical_sources
from triage.documents.facts import facts_sections
from triage.documents.plain_text import plain_text
from triage.documents.readings import limit_lines, reading_lines
from triage.electrical_exposure import ELECTRICAL_CAUSES
from triage.knowledge import knowledge
from triage.site import no_site

ISOLATED = {
    "supply.kind": "isolated", "supply.changed_since": "no", "supply.read_at": "2026-01-14 08:00",
    "supply.alarm": "no", "items.0.supply": "isolated", "supply.current_reading": "2.0 mA",
    "supply.monitor": "total_hazard_current",
}  # fmt: skip
CHECK = {"id": "k1", "of": "pump", "supply": "earthed", "stage": "as_found", "same_cord": "yes",
         "state": ["on"], "instrument": "meter 1", "calibration_due": "2026-09-01",
         "by": "technician", "at": "2026-01-14 09:00"}  # fmt: skip


def judged(changes: dict[str, Any]) -> Assessment:
    return assess(record(spoiled(changes)), no_site())


def lines(changes: dict[str, Any]) -> str:
    return "\n".join(electrical_lines(judged(changes))).replace("\u00a0", " ")


@pytest.mark.parametrize("changes", [{}, ISOLATED, {"contacts": []}, {"supply": {}}, {"items": []}])
def test_every_mains_cause_is_named_in_print(changes: dict[str, Any]) -> None:
    changes = changes | ({"contacts": [], "checks": []} if changes == {"items": []} else {})
    text = lines(changes)
    assert all(knowledge().causes[cause].name in text for cause in ELECTRICAL_CAUSES)


def test_a_reading_that_binds_and_one_that_does_not_are_said_in_words() -> None:
    assert "By the monitor (2.0 mA; a tenth is added for the instrument): at most 2.2 mA" in lines(
        ISOLATED
    )
    void = lines(ISOLATED | {"supply.changed_since": "yes"})
    assert "binds nothing: something was plugged or unplugged" in void
    assert "by the monitor" not in void


def test_the_spark_of_an_open_earth_is_said_to_be_like_static() -> None:
    text = lines({})
    assert "720 nC" in text and "58 µJ" in text and "like static" in text


def test_a_quiet_monitor_is_never_said_to_remove_a_cause() -> None:
    text = lines(ISOLATED)
    assert "A quiet monitor removes no cause." in text
    assert "does not see: earth of a device open" in text


@pytest.mark.parametrize(("monitor", "named"), [
    ("total_hazard_current", ["milliamperes"]), ("insulation_resistance", ["ohms"]),
    (None, ["milliamperes", "ohms"]),
])  # fmt: skip
def test_only_the_kind_of_monitor_on_record_is_spoken_of(
    monitor: str | None, named: list[str]
) -> None:
    text = lines(ISOLATED | {"supply.monitor": monitor})
    for unit in ("milliamperes", "ohms"):
        assert (f"A monitor in {unit} " in text) == (unit in named)


def test_a_voltage_between_lines_is_taken_in_full_and_said_so() -> None:
    assert "one line to earth then has 230 V. The whole voltage is taken." in lines(
        {"supply.voltage": "400 V"}
    )
    assert "between two lines" not in lines({})


def test_an_earth_that_read_off_the_scale_is_never_turned_into_a_current() -> None:
    check = CHECK | {"kind": "earth_continuity", "method": "low_current_flexed",
                     "state": ["on", "flexed"], "result": "fail"}  # fmt: skip
    assert "Through an earth of 900" in lines({"checks": [check | {"value": "900 ohm"}]})
    assert "Through an earth" not in lines({"checks": [check | {"value": ">900 ohm"}]})


def test_a_test_from_an_isolated_outlet_is_explained_with_numbers_and_a_retest() -> None:
    check = CHECK | {"kind": "touch_current", "method": "direct_earthed", "value": "40 uA",
                     "result": "pass", "supply": "isolated"}  # fmt: skip
    text = " ".join(reading_lines(judged(ISOLATED | {"checks": [check]}))).replace("\u00a0", " ")
    assert "a pass from there clears nothing" in text
    assert "Instead: earthed outlet" in text
    assert "the deadly one can pass" in text and "120 mA on an earthed supply" in text


def test_a_phantom_voltage_is_explained_and_not_talked_away() -> None:
    check = CHECK | {"kind": "metal_voltage_loaded", "method": "loaded_1kohm", "value": "159 mV",
                     "reason": "115 V with the meter alone"}  # fmt: skip
    text = " ".join(reading_lines(judged({"checks": [check]})))
    assert "phantom voltage" in text and "its current can be felt" in text


def test_a_limit_is_printed_with_edition_room_and_last_good_value() -> None:
    text = "\n".join(
        limit_lines(
            judged(
                {
                    "items.0.last_good": "2025-03-12",
                    "items.0.last_good_value": "touch current 38 uA",
                }
            )
        )
    )
    text = text.replace("\u00a0", " ")
    assert "at most 100 uA: kept, 60 % of it left" in text
    assert "IEC 60601-1 (2005+A1:2012+A2:2020), the program's default" in text
    assert "last good test of 2025-03-12: touch current 38 uA" in text


def test_a_limit_line_names_one_edition_only() -> None:
    from triage.limits import load_limits

    names = {each.text() for each in load_limits().editions.values()}
    found = judged({"checks.0.value": "250 uA"})
    for line in limit_lines(found):
        named = {name for name in names if f" {name}" in line.replace("by ", " ")}
        assert len(named) <= 1


def test_editions_that_decide_otherwise_are_shown() -> None:
    text = "\n".join(limit_lines(judged({"checks.0.value": "175 uA"})))
    assert "NFPA 99 (2005) decides otherwise, not in force here" in text


@pytest.mark.parametrize(("answer", "cause"), [
    ("electrosurgery_active", "electrosurgery"), ("pulse_delivered", "stimulator_pulse"),
    ("line_event", "line_surge"), ("pins_touched", "stored_charge"),
])  # fmt: skip
def test_another_source_is_printed_until_its_answer_excludes_it(answer: str, cause: str) -> None:
    def shown(a: Assessment) -> set[str]:
        return {each for source in not_excluded(a) for each in source.causes}

    assert cause in shown(judged({}))
    assert cause in shown(judged({f"event.{answer}": "yes"}))
    rest = {"electrosurgery": "stimulator_pulse", "stimulator_pulse": "electrosurgery"}
    gone = judged({f"event.{answer}": "no", "contacts.0.covering": "bare"})
    assert cause not in shown(gone)
    assert rest.get(cause, "electrosurgery") in shown(gone)


def test_each_other_source_is_asked_about_shown_and_excluded() -> None:
    for line in other_source_lines(judged({})):
        assert all(word in line for word in ("felt as", "Ask:", "?", "Shown by:", "Excluded by:"))


def test_every_open_check_has_its_readings_and_its_terms() -> None:
    a = judged({})
    names = {n.kind.name for n in a.next_checks}
    full, blocks = list(check_lines(a)), open_check_blocks(a)
    steps = [line for block in blocks if block["kind"] == "steps" for line in block["lines"]]
    assert names == {line.split(". ")[0] for line in full}
    assert names == {line.split(": ")[0] for line in steps}
    for line in full:
        assert all(word in line for word in (
            "How:", "A valid pass says:", "A valid fail says:", "It does not show:", "Accepted:",
            "If it does not count:", "It is done by",
        ))  # fmt: skip
    assert all(" min each" in line.replace("\u00a0", " ") for line in steps)
    assert blocks[-1]["text"].startswith("Live: Stop")


def test_open_checks_are_numbered_on_through_who_may_do_them() -> None:
    blocks = [b for b in open_check_blocks(judged(ISOLATED)) if b["kind"] == "steps"]
    start = 1
    for block in blocks:
        assert block["start"] == start
        start += len(block["lines"])


def test_report_and_terminal_hold_the_electrical_parts() -> None:
    a = judged(ISOLATED)
    titles = {section["title"] for section in analysis_sections(a)}
    assert {"Mains current, contact by contact", "What the readings mean",
            "Sources besides mains leakage", "Checks still open"} <= titles  # fmt: skip
    assert any(s["title"] == "Readings against limits" for s in facts_sections(judged({})))
    long, short = plain_text(a, why=True), plain_text(a)
    for title in ("MAINS CURRENT, CONTACT BY CONTACT", "WHAT EACH OPEN CHECK PROVES"):
        assert title in long and title not in short


def test_the_numbers_of_the_analysis_have_their_sources() -> None:
    named = " ".join(name for name, _ in electrical_sources(judged(ISOLATED)))
    for each in ("heart-current factors", "zone line c1", "grip", "what a line monitor sees",
                 "error of a monitor reading", "alarm value 5.0 mA", "duration of a contact"):  # fmt: skip
        assert each in named
