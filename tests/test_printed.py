"""Rules for everything printed: over every example and over random records."""

import io
import json
import re

import pytest
from printed_texts import (
    FULL_OR_NIL,
    NAMES,
    NOISE,
    RAW,
    UNDERSCORED,
    data,
    drawn,
    example,
    own_words,
    report,
    report_context,
    strings,
    terminal,
)
from pypdf import PdfReader
from wording_rules import power_off_imperatives

from triage.assessment import Assessment
from triage.cautions import never_say
from triage.documents.plain_text import plain_text
from triage.documents.wording import CONDITION

RANDOM = 1000
IN_FULL = 8
"""Of the random records, one in so many is printed in every form; all are on the terminal."""
PDFS = range(30)
CHUNKS = [range(start, start + 100) for start in range(0, RANDOM, 100)]


def all_forms(a: Assessment) -> list[str]:
    """Terminal, data and report, each as one text with a full stop between its lines."""
    lines = strings(json.loads(data(a)))
    return [
        terminal(a),
        " . ".join(each for each in lines if " " in each),  # one word alone is a name
        " . ".join(strings(report_context(a))),
    ]


def faults(text: str, a: Assessment) -> list[str]:
    """What a printed text says that it must not."""
    own = own_words(text, a)
    found = [f"never say: {m[0]}" for rule in never_say() for m in rule.finditer(own.lower())]
    found += [f"noise: {own[max(m.start() - 20, 0) : m.end() + 20]}" for m in NOISE.finditer(own)]
    found += [f"raw: {m[0]!r}" for m in RAW.finditer(text)]
    shown = own.replace(" ".join(a.exposure.conditions.humidity_text.split()), "")
    found += [
        f"certain: {shown[max(m.start() - 40, 0) : m.end()]}" for m in FULL_OR_NIL.finditer(shown)
    ]
    if a.incident.scene.dependence != "none":
        found += [f"order: {each}" for each in power_off_imperatives(own)]
    return found


@pytest.mark.parametrize("name", NAMES)
def test_nothing_printed_of_an_example_breaks_a_rule_of_wording(name: str) -> None:
    a = example(name)

    assert [each for text in all_forms(a) for each in faults(text, a)] == []


@pytest.mark.parametrize("chunk", CHUNKS, ids=lambda chunk: str(chunk.start))
def test_nothing_printed_of_a_random_record_breaks_a_rule_of_wording(chunk: range) -> None:
    for seed in chunk:
        a = drawn(seed)
        texts = all_forms(a) if seed % IN_FULL == 0 else [plain_text(a)]
        assert [each for text in texts for each in faults(text, a)] == [], seed


@pytest.mark.parametrize("seed", PDFS)
def test_nothing_in_the_text_layer_of_a_report_breaks_a_rule_of_wording(seed: int) -> None:
    a = drawn(seed)
    made = report(a)
    pages = [page.extract_text() for page in PdfReader(io.BytesIO(made.content)).pages]

    assert made.warnings == ()
    assert [each for text in pages for each in faults(text, a)] == []


@pytest.mark.parametrize("name", NAMES)
def test_no_word_of_the_closed_lists_is_printed_as_a_program_writes_it(name: str) -> None:
    a = example(name)
    page = report_context(a)
    ours = {
        t for text in strings(page["page_one"]) for t in UNDERSCORED.findall(own_words(text, a))
    }
    ours |= set(UNDERSCORED.findall(own_words(terminal(a), a)))

    assert ours == set()


@pytest.mark.parametrize("seed", range(0, RANDOM, 10))
def test_with_dependence_the_condition_stands_before_the_first_order(seed: int) -> None:
    a = drawn(seed)
    text = " ".join(plain_text(a).split())
    page = report_context(a)["page_one"]["equipment"]
    if a.incident.scene.dependence == "none":
        assert CONDITION not in text and page["condition"] == ""
        return

    orders = [m.start() for m in re.finditer(r"\bAfter that: ", text)]
    assert text.index(CONDITION) < min([text.index("DEFECTS FOUND"), *orders])
    assert page["condition"] == CONDITION
    assert list(page)[0] == "condition"


@pytest.mark.parametrize("seed", range(0, RANDOM, 10))
def test_the_person_comes_before_equipment_and_a_defect_above_the_ranking(seed: int) -> None:
    a = drawn(seed)
    text = plain_text(a)
    heads = ["PERSON", "DISPOSITION", "DEFECTS FOUND", "RANKED CAUSES OF THE SENSATION",
             "ESTIMATES (middle, 9 in 10)", "NOT KNOWN", "NEXT CHECKS", "CAUTIONS"]  # fmt: skip
    places = [text.index(f"\n{each}\n") for each in heads]
    page = list(report_context(a)["page_one"])

    assert places == sorted(places)
    assert page == ["marking", "person", "equipment", "happened", "causes", "estimates",
                    "not_known", "next_checks", "cautions"]  # fmt: skip
    between = text[places[2] : places[3]]
    for each in a.evidence.defects:
        assert " ".join(each.text.split()) in " ".join(between.split())


def test_the_rules_find_what_they_look_for() -> None:
    a = drawn(1)

    assert faults("The item is safe to use.", a)
    assert faults("reasons: None", a) and faults("frozenset({1})", a)
    assert faults("left\u202eright", a)
    assert FULL_OR_NIL.search("range 0 % to 100 %") and not FULL_OR_NIL.search("10 % to 90 %")
    assert UNDERSCORED.findall("touched: mains_device_on") == ["mains_device_on"]
