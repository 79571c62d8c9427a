"""Page one: the fullest form that stays on one page, and nothing needed now ever left out."""

import copy
import io
import random

import pytest
import random_records
from printed_texts import NAMES, drawn, example, report_context
from pypdf import PdfReader

from triage.assessment import Assessment, assess
from triage.documents.page_one import PAGE_HEIGHT, SIZES, height, item_rows
from triage.documents.summary import summarise
from triage.render import render_html, render_pdf
from triage.site import no_site


def pages_of(a: Assessment, paper: str = "A4") -> list[str]:
    """The text layer of page one alone, page by page."""
    made = report_context(a) | {"parts": [], "paper": paper}
    html = render_html("incident_report.html", made)
    pdf = render_pdf(html, title="t", attachments=[], identifier=b"0" * 16)
    return [page.extract_text() for page in PdfReader(io.BytesIO(pdf.content)).pages]


@pytest.mark.parametrize("name", NAMES)
def test_page_one_of_every_example_is_one_page(name: str) -> None:
    assert len(pages_of(example(name))) == 1


@pytest.mark.parametrize("name", NAMES)
def test_page_one_answers_the_questions_in_order(name: str) -> None:
    a = example(name)
    text = " ".join(pages_of(a)[0].split())
    s, page = summarise(a), report_context(a)["page_one"]
    answers = [
        page["person"][0], page["equipment"]["headline"], page["equipment"]["rows"][0]["defect"],
        s.happened, page["causes"]["summary"], page["causes"]["rows"][0][2],
        page["estimates"][0][0], page["not_known"][0], page["next_checks"][0]["checks"][0],
        page["cautions"][0],
    ]  # fmt: skip
    found, after = [], 0
    for each in answers:
        after = text.find(" ".join(each.replace("\u00a0", " ").split()), after)
        found.append(after)

    assert -1 not in found


@pytest.mark.parametrize("seed", range(40))
def test_page_one_of_a_random_record_is_one_page(seed: int) -> None:
    assert len(pages_of(drawn(seed))) == 1


@pytest.mark.parametrize("name", NAMES[::3])
def test_the_height_is_reckoned_a_little_too_high_and_never_too_low(name: str) -> None:
    a = example(name)
    made = report_context(a)
    reckoned = height(made["page_one"], made["heading"]["lines"])

    assert reckoned <= PAGE_HEIGHT["A4"]
    assert len(pages_of(a)) == 1


def test_forms_of_the_page_are_ordered_from_full_to_terse() -> None:
    a = example("or6-unit-slip-on-monitor")
    s = summarise(a)
    from triage.documents.page_one import _built

    heights = [height(_built(a, s, size), ["x"]) for size in SIZES]

    assert heights == sorted(heights, reverse=True)
    assert heights[0] > heights[-1] + 60


def test_every_item_stands_on_page_one_with_its_own_outcome() -> None:
    for name in NAMES:
        s = summarise(example(name))
        rows = item_rows(s)
        for each in s.items:
            held = [r for r in rows if each.item in r["item"]]
            assert [(r["defect"], r["severity"], r["disposition"]) for r in held] == [
                (each.defect, each.severity, each.disposition)
            ]


def test_no_action_that_is_needed_now_is_left_off_page_one() -> None:
    tree = random_records.clean_tree(random.Random(5), "device")
    tree["persons"][0] |= {"breach": "yes", "signs": ["lost_consciousness", "burn",
                                                       "chest_symptoms", "palpitations",
                                                       "weakness", "could_not_let_go"]}  # fmt: skip
    tree["scene"]["heart_conductor"] = "yes"
    tree["persons"].append({"id": "p2", "who": "patient"})
    a = assess(random_records.record(tree), no_site())
    text = " ".join(pages_of(a)[0].split())

    now = [row.action for row in a.care.rows if row.urgency == "now"]
    assert len(now) >= 8
    assert [each for each in now if " ".join(each.split()) not in text] == []
    assert "medical assessment and blood-exposure route now" in text
    assert "Watch for: chest pain" in text


def test_a_witness_is_quoted_in_full_where_there_is_room() -> None:
    a = example("nicu-wet-keypad")
    quotes = report_context(a)["page_one"]["happened"]["quotes"]
    tree = copy.deepcopy(a.record.tree)
    tree["statements"][0]["words"] = "word " * 300
    long = assess(random_records.record(tree), no_site())
    cut = report_context(long)["page_one"]["happened"]["quotes"]

    assert "until I pulled away" in quotes[0]["text"] or quotes[0]["text"].endswith(" …")
    assert cut[0]["text"].endswith("word …")
    assert len(pages_of(long)) == 1
