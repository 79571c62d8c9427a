"""Letting go and interrupters: what is printed, and what never acts.

Times: IEC 61008-1 and 61009-1 at 30 mA, 0.3 s at the rating and 0.04 s at five times it.
"""

import pytest
import sample_records
from random_records import record

from triage.assessment import assess
from triage.documents import held_fast
from triage.documents.held_fast import held_lines, held_sources
from triage.electrical_contacts import contact_exposures
from triage.site import no_site


def printed(kind="earthed", frequency="50 Hz", voltage="230 V"):
    supply = {"kind": kind, "voltage": voltage, "frequency": frequency}
    tree = sample_records.tree() | {"supply": supply}
    tree["items"][0]["supply"] = kind
    tree["contacts"] = [{"id": "c1", "items": ["pump"]}]
    a = assess(record(tree), no_site())
    found = contact_exposures(a.incident, a.site, a.exposure.conditions, a.verdicts)
    assert found
    return [plain(line) for line in held_lines(a, found)]


def plain(text):
    return text.replace("\u00a0", " ")


def test_at_mains_voltage_through_wet_hands_hardly_anybody_could_let_go():
    assert "could not let go in over 95 % of people" in printed()[0]


def test_an_earthed_supply_names_the_time_of_the_device_and_what_it_does_not_do():
    last = printed()[-1]
    assert "30 mA is there, it must open within 40 ms" in last
    assert "neither the current nor what is felt" in last


def test_at_60_hz_the_interrupter_of_that_practice_is_named():
    assert "must open from 6.0 mA" in printed(frequency="60 Hz", voltage="120 V")[-1]


def test_on_an_isolated_supply_nothing_is_said_to_act():
    lines = printed(kind="isolated")
    assert any("acts on an isolated supply" in line for line in lines)
    assert not any("must open" in line for line in lines)


@pytest.mark.parametrize(("current", "says"), [
    (0.029, "need not open"), (0.030, "within 300 ms"), (0.150, "within 40 ms"),
])  # fmt: skip
def test_the_time_follows_the_multiple_of_the_rating(current, says):
    assert says in plain(held_fast._opens(current, 50.0))


def test_without_any_contact_nothing_is_printed():
    a = assess(record({"schema": "1", "id": "0" * 32}), no_site())
    assert list(held_lines(a, ())) == []


def test_every_number_has_its_source():
    assert {c.known for _, c in held_sources()} <= {"published", "memory"}
    assert len(list(held_sources())) == 4
