"""The assessment as data: everything concluded, in full digits, and safe on a terminal."""

import json

import pytest
from printed_texts import NAMES, RAW, drawn, example

from triage.documents.as_data import as_data, as_json
from triage.documents.summary import summarise


@pytest.mark.parametrize("name", NAMES)
def test_the_data_are_the_conclusions_with_full_digits(name: str) -> None:
    a = example(name)
    found = json.loads(as_json(as_data(a, summarise(a))))

    assert found["headline"] == a.headline.name.lower()
    assert {i["item"]: i["disposition"] for i in found["items"]} == {
        i.item: i.level.name.lower() for i in a.items
    }
    assert [c["cause"] for c in found["causes"]] == list(a.posterior.ranked)
    total = sum(c["point"] for c in found["causes"]) + found["undetermined"]
    assert total == pytest.approx(1, abs=1e-9) and 0 <= found["undetermined"] < 1
    assert all(c["low"] <= c["point"] <= c["high"] for c in found["causes"])
    assert found["digests"] == {"record": a.record.digest, "site": a.site.digest,
                                "knowledge": a.knowledge}  # fmt: skip
    assert len(found["checks"]) == len(a.incident.checks)
    assert found["gate"]["open"] is a.gate.open


@pytest.mark.parametrize("seed", range(0, 100, 5))
def test_data_of_any_record_are_finite_numbers_and_texts(seed: int) -> None:
    a = drawn(seed)
    made = as_data(a, summarise(a))

    again = json.loads(json.dumps(made, allow_nan=False))
    assert again == json.loads(as_json(made))
    assert list(again)[6:11] == ["person", "condition", "headline", "items", "room"]


@pytest.mark.parametrize("seed", range(0, 50, 5))
def test_every_source_in_the_data_says_how_it_is_known(seed: int) -> None:
    a = drawn(seed)

    rows = as_data(a, summarise(a))["sources"]
    assert rows and all(row["known"] in ("published", "memory", "judgement") for row in rows)
    assert all(row["source"].strip() and row["what"].strip() for row in rows)


@pytest.mark.parametrize(
    "typed", ["\u202e", "\x1b[31m", "\u2066x", "\ufeff", "\x00", "\u2028", "a\tb"]
)
def test_characters_that_could_act_are_escapes_that_read_back_the_same(typed: str) -> None:
    shown = as_json({"x": [typed, "µ Ω 漢"]})

    assert RAW.findall(shown) == [] and "\u2028" not in shown
    assert json.loads(shown) == {"x": [typed, "µ Ω 漢"]}
    assert "µ Ω 漢" in shown
