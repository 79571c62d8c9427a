"""The papers that are carried: what stands on each, what must not, and that they are drawn."""

import io
import re
from collections.abc import Callable, Iterator
from functools import cache
from pathlib import Path
from typing import Any

import page
import pytest
from printed_texts import NAMES, NOISE, SITE, UNDERSCORED, example, strings
from pypdf import PdfReader, PdfWriter
from sample_records import spoiled, text, tree
from typer.testing import CliRunner
from wording_rules import power_off_imperatives

from triage import clock
from triage.assessment import Assessment, assess
from triage.canonical import is_case_number
from triage.cautions import never_say
from triage.check_table import check_kinds
from triage.cli import app
from triage.disposition import Level
from triage.documents.brief import brief
from triage.documents.card import card, first_minute, weights
from triage.documents.care_slip import care_slip, worst_current
from triage.documents.limit_words import limit_text
from triage.documents.paper import Paper, drawn
from triage.documents.sheet import sheet
from triage.documents.slip import slip
from triage.documents.staff_slip import staff_slip
from triage.documents.tag import tag
from triage.documents.work_request import work_request
from triage.errors import InvalidValue
from triage.knowledge import knowledge
from triage.record import loads
from triage.site import Site, no_site
from triage.site import loads as site_from_text
from triage.site_check import site_faults

CASE_PAPERS: dict[str, Callable[[Assessment], Paper]] = {
    "tag": tag, "work request": work_request, "care slip": care_slip, "staff slip": staff_slip,
}  # fmt: skip
NO_CAUSE = ("tag", "work request", "care slip", "staff slip")
EVENING = clock.parse("2026-03-20 07:00")


@cache
def site(paper: str = "A4", more: str = "") -> Site:
    return site_from_text(SITE.read_text("utf-8").replace("paper: A4", f"paper: {paper}") + more)


@cache
def case_paper(kind: str, name: str) -> Paper:
    return CASE_PAPERS[kind](example(name))


def site_papers(which: Site) -> dict[str, Paper]:
    return {"card": card(which), "slip": slip(which), "sheet": sheet(which, "or-6")}


def all_examples() -> list[Assessment]:
    return [example(name) for name in NAMES]


def pages(paper: Paper) -> list[str]:
    reader = PdfReader(io.BytesIO(drawn(paper).content))
    return [" ".join(page.extract_text().split()) for page in reader.pages]


def words(paper: Paper) -> str:
    return "\n".join(strings(paper.context))


def every_paper() -> Iterator[Paper]:
    yield from site_papers(site()).values()
    for kind in CASE_PAPERS:
        yield from (case_paper(kind, name) for name in NAMES)
    yield brief(all_examples(), site(), at=EVENING, unread=["x.yaml"])


def of(changes: dict[str, Any]) -> Assessment:
    return assess(loads(text(spoiled(changes))), no_site())


# --- drawn --------------------------------------------------------------------------------------


@pytest.mark.parametrize("name", NAMES)
def test_each_paper_of_a_case_has_its_pages(name: str) -> None:
    assert len(pages(case_paper("tag", name))) == max(len(example(name).items), 1)
    for kind in ("care slip", "staff slip"):
        assert len(pages(case_paper(kind, name))) == 1
    request = pages(case_paper("work request", name))
    assert len(request) == 1


@pytest.mark.parametrize("paper", ["A4", "Letter"])
def test_card_and_slip_fill_one_page_and_the_sheet_two(paper: str) -> None:
    made = site_papers(site(paper))

    assert {name: len(pages(each)) for name, each in made.items()} == {
        "card": 1, "slip": 1, "sheet": 2,
    }  # fmt: skip


def test_a_paper_without_a_site_file_leaves_room_to_write_a_number() -> None:
    found = pages(card(no_site()))

    assert len(found) == 1
    assert "Blood exposure: ____" in found[0]


@pytest.mark.parametrize("kind", ["card", "slip", "sheet"])
def test_a_paper_of_the_site_is_the_same_bytes_twice(kind: str) -> None:
    first, second = (drawn(site_papers(site())[kind]).content for _ in range(2))

    assert first == second


@pytest.mark.parametrize("kind", CASE_PAPERS)
def test_a_paper_of_a_case_is_the_same_bytes_twice(kind: str) -> None:
    a = example("or6-isolated-first-fault")

    assert drawn(CASE_PAPERS[kind](a)).content == drawn(CASE_PAPERS[kind](a)).content


@pytest.mark.parametrize("profile", ["3a", "ua1"])
@pytest.mark.parametrize("kind", ["card", "slip", *CASE_PAPERS])
def test_a_validator_finds_no_failure_in_a_paper(kind: str, profile: str, tmp_path: Path) -> None:
    made = tmp_path / "paper.pdf"
    papers = site_papers(site()) | {kind: case_paper(kind, NAMES[0]) for kind in CASE_PAPERS}
    made.write_bytes(drawn(papers[kind]).content)

    assert page.validate_pdf(str(made), profile=profile).failures == []


def test_a_validator_finds_no_failure_in_the_sheet_for_reading_aloud(tmp_path: Path) -> None:
    """Fields and the archival profile exclude each other; the sheet keeps PDF/UA-1."""
    made = tmp_path / "sheet.pdf"
    made.write_bytes(drawn(sheet(site(), "or-6")).content)

    assert page.validate_pdf(str(made), profile="ua1").failures == []


# --- what must not stand there ------------------------------------------------------------------


def test_no_paper_bids_to_cut_power_without_its_condition() -> None:
    for paper in every_paper():
        for line in strings(paper.context):
            assert power_off_imperatives(line) == [], paper.template


def test_no_paper_says_what_no_text_may_say_or_shows_the_program_itself() -> None:
    for paper in every_paper():
        for line in strings(paper.context):
            assert not [p.pattern for p in never_say() if p.search(line.lower())], line
            assert not NOISE.search(line), line


@pytest.mark.parametrize("kind", CASE_PAPERS)
def test_no_word_of_the_record_lists_is_printed_as_a_program_writes_it(kind: str) -> None:
    for name in NAMES:
        matter = case_paper(kind, name).context
        assert not UNDERSCORED.findall("\n".join(strings(matter))), (kind, name)


@pytest.mark.parametrize("kind", NO_CAUSE)
def test_no_cause_and_no_ranking_stands_on_a_paper_before_the_tests(kind: str) -> None:
    causes = [each.name.lower() for each in knowledge().causes.values()]
    ranking = re.compile(r"probab|likely|likelihood|ranking")
    for name in NAMES:
        found = words(case_paper(kind, name)).lower()
        assert not [cause for cause in causes if cause in found], (kind, name)
        assert not ranking.search(found), (kind, name, ranking.search(found))


@pytest.mark.parametrize("kind", ["care slip", "staff slip"])
def test_the_slips_never_say_static(kind: str) -> None:
    typed = re.compile(r"\bstatic\b")
    for name in NAMES:
        assert not typed.search(words(case_paper(kind, name)).lower()), name


def test_no_role_and_no_words_of_a_witness_stand_on_the_work_request() -> None:
    canary = "quokka"
    base = tree() | {"event": {"summary": canary}, "recorded_by": canary}
    base["persons"][0]["role"] = canary
    base["statements"][0] |= {"words": canary, "by": canary, "mapped_by": canary}
    base["scene"]["changed_by"] = canary
    a = assess(loads(text(base)), no_site())

    assert canary not in words(work_request(a))
    assert canary in words(care_slip(a)), "the canary would be seen"


# --- what must stand there ----------------------------------------------------------------------


@pytest.mark.parametrize("depends", ["none", "procedure", "life_support", None])
def test_a_tag_asks_first_wherever_somebody_may_depend_on_it(depends: str | None) -> None:
    shown = pages(tag(of({"scene.dependence": depends})))[0]

    if depends == "none":
        assert "clinician in charge" not in shown
        return
    assert shown.index("clinician in charge agrees") < shown.index("Do not use")


def test_every_tag_carries_the_number_made_offline_and_the_item() -> None:
    a = example("hired-ultrasound-cart-as-left")
    found = pages(tag(a))

    assert is_case_number(a.record.case)
    assert all(a.record.case in each for each in found)
    assert any("Not given back to its owner" in each for each in found)


def test_tags_come_most_severe_first() -> None:
    marks = "■◆▲○"
    for a in all_examples():
        places = [marks.index(each["mark"]) for each in tag(a).context["tags"]]
        assert places == sorted(places)


def test_the_work_request_has_evidence_before_tests_and_a_place_to_answer() -> None:
    shown = pages(case_paper("work request", "ward5-outlet-two-devices"))[0]

    order = [shown.index(each) for each in ("Where", "Record before anything is reset",
                                           "Tests wanted", "Return to")]  # fmt: skip
    assert order == sorted(order)
    for needed in ("Panel A5-W", "Outlet on earthed supply", "As found", "As left",
                   "licence number", "extension 2222", "transfer switch"):  # fmt: skip
        assert needed in shown


@pytest.mark.parametrize(("supply", "wanted"), [
    ("earthed", {"outlet_test"}), ("isolated", {"isolated_line_voltages", "isolated_alarm_test"}),
    (None, {"outlet_test", "isolated_line_voltages", "isolated_alarm_test"})])  # fmt: skip
def test_tests_of_a_supply_not_known_are_those_of_both(
    supply: str | None, wanted: set[str]
) -> None:
    shown = words(work_request(of({"supply": {"kind": supply} if supply else None,
                                  "items.0.supply": supply})))  # fmt: skip
    of_supply = {"outlet_test", "isolated_line_voltages", "isolated_alarm_test"}

    assert {each for each in of_supply if check_kinds()[each].name in shown} == wanted


def test_the_blood_exposure_route_is_the_first_line_of_both_slips_after_a_pinhole() -> None:
    a = example("or4-glove-sting-coagulation")

    assert (
        "Blood-exposure route now" in care_slip(a).context["sections"][0]["blocks"][0]["lines"][0]
    )
    assert "pierced" in staff_slip(a).context["sections"][0]["blocks"][0]["lines"][0]


def test_what_the_team_does_for_a_patient_does_not_send_the_reporter_to_a_clinician() -> None:
    a = of({"persons": [{"id": "p1", "who": "staff", "signs": ["none"]},
                        {"id": "p2", "who": "patient", "signs": ["none"]}]})  # fmt: skip

    assert a.care.urgency == "now"
    assert "You are seen by a clinician now" not in words(staff_slip(a))


@pytest.mark.parametrize("settled", [False, True])
def test_the_staff_slip_says_whether_it_is_settled_and_never_what(settled: bool) -> None:
    known = {"confirmed_cause": next(iter(knowledge().causes))} if settled else None
    shown = words(staff_slip(of({"outcome": known})))

    assert ("has come to a result" in shown) == settled
    assert ("Nobody has settled" in shown) != settled


def test_the_current_of_the_care_slip_is_no_less_than_any_estimate() -> None:
    for a in all_examples():
        worst = worst_current(a)
        assert worst is not None
        for each in a.exposure.causes.values():
            if each.electrical is not None:
                assert worst >= each.electrical.current.interval()[1]


def test_the_card_holds_the_eight_questions_and_their_marks() -> None:
    shown = pages(card(site()))[0]

    assert len(first_minute()) == 8
    assert all(question.ask in shown for question in first_minute())
    assert "extension 2599" in shown
    assert "burn\u00a0◆●" in words(card(site())) or "◆●" in shown


def test_an_answer_weighs_in_a_full_record_no_less_than_on_the_card() -> None:
    """The card's marks are floors: other answers never take one away."""
    for question in first_minute():
        for option in question.options:
            changes: dict[str, Any] = {}
            for path, value in option.sets:
                place = path.replace("[]", ".0")
                changes[place] = list(value) if isinstance(value, tuple) else value
            if {p.split(".")[-1] for p in changes} & {"kind", "power"}:
                continue
            base = tree() | {"supply": {"kind": "earthed"}, "event": {}}
            a = assess(loads(text(spoiled(changes, base))), no_site())
            assert a.headline >= weights()[question.id, option.word].level, option


def test_adverse_answers_of_the_first_minute_are_marked() -> None:
    expected = {("first_danger", "hot"): Level.ISOLATE, ("first_hurt", "burn"): Level.WITHDRAW,
                ("first_hurt", "nobody"): Level.HOLD}  # fmt: skip

    assert {key: weights()[key].level for key in expected} == expected
    assert weights()["first_hurt", "fainted"].medical
    assert not weights()["first_hurt", "nobody"].medical


# --- limits -------------------------------------------------------------------------------------


def test_the_sheet_prints_the_limits_of_the_edition_in_force() -> None:
    """GOST R IEC 60601-1-2010 8.6.4: 0.2 ohm with cord. NEC 2017 517.160(B)(1): 5 mA."""
    chosen = site_from_text("schema: 1\neditions:\n"
                            "- {check: earth_continuity, edition: iec60601-1-ed3}\n"
                            "- {check: isolated_alarm_test, edition: nec-2017}\n")  # fmt: skip
    rows = {row["name"]: row["limit"] for row in sheet(chosen).context["checks"]}

    assert rows["earth_continuity"] == "≤\u00a00.2\u00a0Ω"
    assert rows["monitor_log"] == "<\u00a05.0\u00a0mA"


def test_a_limit_that_the_site_made_stricter_is_the_one_printed() -> None:
    stricter = site_from_text("schema: 1\neditions:\n"
                              "- {check: earth_continuity, edition: iec62353-2014}\n"
                              "tightened: [{limit: t62353-2014-pe, value: 0.15 ohm}]\n")  # fmt: skip

    assert (
        limit_text(check_kinds()["earth_continuity"], stricter)
        == "≤\u00a00.15\u00a0Ω set by the site"
    )


def test_a_limit_that_nobody_read_in_a_standard_is_starred_and_the_star_explained() -> None:
    rows = {row["name"]: row["limit"] for row in sheet(site()).context["checks"]}

    assert "*" in rows["metal_voltage_loaded"]
    assert "verify against the edition in force" in words(sheet(site()))


# --- the fields ---------------------------------------------------------------------------------


def test_every_field_of_the_sheet_has_a_name_of_its_own_and_something_to_read_aloud() -> None:
    reader = PdfReader(io.BytesIO(drawn(sheet(site(), "or-6")).content))
    annotations: list[Any] = [
        a.get_object() for leaf in reader.pages for a in leaf.annotations or []
    ]
    named = [str(each["/T"]) for each in annotations]
    spoken = [str(each.get("/TU", "")) for each in annotations]

    assert len(named) == len(set(named)) > 150
    assert all(spoken)
    assert not [name for name in named if "." in name], "a point would split a name in two"
    assert {"role", "review", "current_reading", "humidity_at", "floor"} <= set(named)
    assert {f"{q.id}:{o.word}" for q in first_minute() for o in q.options} <= set(named)


def test_what_is_typed_into_the_sheet_can_be_read_back() -> None:
    writer = PdfWriter(clone_from=io.BytesIO(drawn(sheet(site(), "or-6")).content))
    typed = {
        "words": "Es hat gekribbelt, 2×",
        "humidity": "24 %",
        "earth_continuity:value": "0.08 ohm",
    }
    writer.update_page_form_field_values(None, typed)
    filled = io.BytesIO()
    writer.write(filled)
    fields = PdfReader(filled).get_fields() or {}

    assert {name: fields[name]["/V"] for name in typed} == typed
    assert fields["room"]["/V"] == "Operating room 6 (or-6)"


def test_the_sheet_carries_the_room_to_be_confirmed_and_refuses_an_unknown_one() -> None:
    assert "supply: isolated supply with a monitor" in words(sheet(site(), "or-6"))
    with pytest.raises(InvalidValue, match="no room 'or-66'; rooms: or-1, or-4"):
        sheet(site(), "or-66")


# --- the brief ----------------------------------------------------------------------------------


def test_the_brief_puts_the_worst_first_and_names_what_was_not_read() -> None:
    made = brief(all_examples(), site(), at=EVENING, unread=["torn.yaml"])
    numbers = [row[0].split()[0] for row in made.context["sections"][0]["blocks"][0]["rows"]]
    level = {a.record.case: a.headline for a in all_examples()}

    assert sorted(numbers) == sorted(level)
    assert [level[n] for n in numbers] == sorted((level[n] for n in numbers), reverse=True)
    assert "torn.yaml" in words(made)


def test_an_action_is_overdue_from_its_minute_on_and_not_when_done() -> None:
    actions = [{"what": "old", "due": "2026-03-19 12:00"}, {"what": "later", "due": "2026-03-21"},
               {"what": "settled", "due": "2026-03-01", "done": "2026-03-02"},
               {"what": "undated"}]  # fmt: skip
    row = brief([of({"outcome": {"actions": actions}})], no_site(), at=EVENING, unread=[])
    due = row.context["sections"][0]["blocks"][0]["rows"][0][-1]

    assert due.split("; ") == ["OVERDUE 2026-03-19 12:00 : old", "2026-03-21 : later",
                               "open, no date : undated"]  # fmt: skip


# --- language and hostile text ------------------------------------------------------------------


def test_a_site_in_another_language_brings_sentences_and_sees_what_is_missing() -> None:
    german = site_from_text("schema: 1\nlanguage: de\npapers:\n"
                            "- {id: slip.title, text: Was mir aufgefallen ist}\n")  # fmt: skip
    made = slip(german)

    assert site_faults(german) == []
    assert made.context["title"] == "Was mir aufgefallen ist"
    assert made.context["words"].startswith("[en] Say what happened")
    assert "slip.words" in made.missing
    assert "slip.title" not in made.missing


@pytest.mark.parametrize(("file", "said"), [
    ("papers: [{id: slip.title, text: Boo}]", "in English already"),
    ("language: de\npapers: [{id: slip.titel, text: Boo}]", "no sentence of the papers"),
    ("language: de\npapers: [{id: slip.title}]", "is empty")])  # fmt: skip
def test_a_sentence_that_cannot_be_used_is_a_fault_of_the_site_file(file: str, said: str) -> None:
    faults = site_faults(site_from_text(f"schema: 1\n{file}\n"))

    assert len(faults) == 1
    assert said in faults[0]


def test_hostile_text_is_printed_as_typed_on_every_paper() -> None:
    name = '<img src="file:///etc/hosts"> \u202egnp'
    a = of({"items.0.name": name, "contacts": [{"id": "c1", "person": "p1", "items": ["pump"]}]})

    for kind in ("tag", "work request", "care slip"):
        shown = " ".join(pages(CASE_PAPERS[kind](a)))
        assert '<img src="file:///etc/hosts"> [U+202E]gnp' in shown, kind


# --- the commands -------------------------------------------------------------------------------


def test_a_record_that_cannot_be_read_gives_no_tag(tmp_path: Path) -> None:
    torn = tmp_path / "torn.yaml"
    torn.write_text("schema: 1\nid: nonsense\n")
    done = CliRunner().invoke(app, ["tag", str(torn), "-o", str(tmp_path / "tag.pdf")])

    assert done.exit_code == 1
    assert not (tmp_path / "tag.pdf").exists()


def test_a_brief_with_a_torn_record_is_written_and_says_so(tmp_path: Path) -> None:
    torn, good = tmp_path / "torn.yaml", tmp_path / "good.yaml"
    torn.write_text("schema: 1\nid: nonsense\n")
    good.write_text(text(tree()))
    out = tmp_path / "brief.pdf"
    args = ["brief", str(torn), str(good), "-o", str(out), "--at", "2026-03-20"]
    done = CliRunner().invoke(app, args)

    assert done.exit_code == 1
    assert "torn.yaml" in PdfReader(out).pages[0].extract_text()
