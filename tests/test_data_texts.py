"""The words shipped in triage/data: nothing forbidden, everything cited, care never talked away."""

import re
from collections.abc import Iterator
from importlib.resources import files
from typing import Any

import pytest

from triage.citation import Citation
from triage.tables import table

TABLES = sorted(each.name[:-5] for each in (files("triage") / "data").iterdir()
                if each.name.endswith(".yaml"))  # fmt: skip
NEVER = [re.compile(pattern) for pattern in table("cautions")["never_say"]]

# One sentence for each phrase a report must never hold: forbidden wording of the trade's
# incident-reporting advice (blame, verdicts, medical advice, claims beyond the tests).
FORBIDDEN = (
    "the device is safe to use",
    "the pump is safe",
    "there is no risk",
    "a harmless discharge",
    "it was just static",
    "it was only static",
    "no fault found.",
    "result: no fault",
    "no electrical fault was found in the pump",
    "cleared by the monitor",
    "the monitor excludes an electrical cause",
    "the pump may return to service",
    "the person imagined it",
    "the nurse misused the device",
    "the technician is to blame",
    "static is 100 % certain",
    "the probability is 0 %",
    "no need to see a doctor",
    "no medical review is needed",
    "touch it again to check",
    "touch the rail again",
    "compliant with the standard",
    "this report is privileged",
    "a nuisance alarm",
)
ALLOWED = (
    "no fault found by tests 1 to 6",
    "make the place safe first",
    "static is the best explanation of this sensation",
    "tell the person in charge of the room",
    "only static depends on the humidity",
    "no fault is needed to feel it",
)


def texts(node: Any, path: str = "") -> Iterator[tuple[str, str]]:
    """Every text of a table with its path, the patterns themselves left out."""
    if isinstance(node, dict):
        for key, below in node.items():
            if key != "never_say":
                yield from texts(below, f"{path}.{key}")
    elif isinstance(node, list):
        for number, below in enumerate(node):
            yield from texts(below, f"{path}[{number}]")
    elif isinstance(node, str):
        yield path, node


def citations(node: Any) -> Iterator[dict[str, Any]]:
    """Every citation of a table."""
    if isinstance(node, dict):
        for key, below in node.items():
            if key == "citation":
                yield below
            else:
                yield from citations(below)
    elif isinstance(node, list):
        for below in node:
            yield from citations(below)


@pytest.mark.parametrize("sentence", FORBIDDEN)
def test_a_forbidden_sentence_is_caught(sentence: str) -> None:
    assert any(pattern.search(sentence) for pattern in NEVER)


@pytest.mark.parametrize("sentence", ALLOWED)
def test_an_honest_sentence_is_not_caught(sentence: str) -> None:
    assert not any(pattern.search(sentence) for pattern in NEVER)


@pytest.mark.parametrize("name", TABLES)
def test_no_shipped_text_says_what_must_never_be_said(name: str) -> None:
    found = [
        (path, pattern.pattern)
        for path, text in texts(table(name))
        if not path.endswith("never_conclude")
        for pattern in NEVER
        if pattern.search(text.lower())
    ]
    assert found == []


@pytest.mark.parametrize("name", ["checks", "care", "duties"])
def test_every_row_says_where_it_comes_from(name: str) -> None:
    rows = table(name)[name]
    assert rows
    for row in rows:
        assert Citation(**row["citation"]).source, row["id"]


def test_a_caution_with_a_figure_of_a_standard_is_cited() -> None:
    for row in table("cautions")["cautions"]:
        if re.search(r"\d", row["text"]):
            assert "citation" in row, row["id"]
    assert all(Citation(**each).source for each in citations(table("cautions")))


def test_care_knows_three_urgencies_and_never_sends_anyone_away() -> None:
    rows = table("care")["care"]
    assert {row["urgency"] for row in rows} == {"now", "same_day", "route"}
    for row in rows:
        assert not re.search(r"\b(stay away|stay home|not necessary|not needed)\b", row["action"])


@pytest.mark.parametrize(
    "finding",
    ["loss_of_consciousness", "chest_symptoms", "palpitations", "burn", "grip", "over_1000_v"],
)
def test_the_signs_of_the_published_monitoring_lists_are_urgent(finding: str) -> None:
    # Med Klin Intensivmed Notfmed 2016;111:708 (loss of consciousness, symptoms, burns, high
    # voltage); Dalziel and Lee for muscles held on.
    urgency = {row["when"]: row["urgency"] for row in table("care")["care"]}
    assert urgency[finding] == "now"


def test_the_terms_of_reporting_are_those_of_the_regulations() -> None:
    # 21 CFR 803.30: 10 work days; 29 CFR 1904.39: 8 h and 24 h; RIDDOR 2013: 15 days for over seven
    # days off; Regulation (EU) 2017/745 art. 87: 15, 10 and 2 days.
    due = {row["id"]: row["when_due"] for row in table("duties")["duties"]}
    assert due["us_device_death"] == {"amount": 10, "kind": "work_days"}
    assert due["us_device_serious_injury"] == {"amount": 10, "kind": "work_days"}
    assert due["us_work_fatality"] == {"amount": 8, "kind": "hours"}
    assert due["us_work_hospitalisation"] == {"amount": 24, "kind": "hours"}
    assert due["uk_over_seven_days"] == {"amount": 15, "kind": "calendar_days"}
    assert due["eu_maker_serious_incident"] == {"amount": 15, "kind": "calendar_days"}
    assert due["eu_maker_death"] == {"amount": 10, "kind": "calendar_days"}
    assert due["eu_maker_public_threat"] == {"amount": 2, "kind": "calendar_days"}
