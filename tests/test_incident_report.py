"""The finished report of every example: valid, whole, closed to typed text, and re-assessable."""

import copy
import io
import json
import os
import re
import shutil
import subprocess
from collections.abc import Iterator
from functools import cache
from pathlib import Path
from typing import Any

import page
import pikepdf
import pytest
from printed_texts import NAMES, RAW, drawn, example, report, report_context
from pypdf import PdfReader
from sample_records import text

from triage.assessment import Assessment, assess
from triage.documents.as_data import as_data
from triage.documents.incident_report import write_report
from triage.documents.summary import summarise
from triage.documents.whole_file import write_whole
from triage.errors import CannotWrite
from triage.fields import table
from triage.incident import Incident
from triage.record import loads
from triage.render import RenderedPdf
from triage.site import no_site

HOSTILE = (
    '<script>alert(1)</script><img src="http://192.0.2.1/a.png"><style>*{display:none}</style>'
    '<svg onload="x()"><image href="file:///etc/passwd"/></svg> {{ 7*7 }} {% raw %} ${x} %s %(a)s '
    "@import url(//192.0.2.1) \u202eright to left\u202c \u2066 \\x07 \\u0000 漢字 عربي 🙂 e"
    + "\u0301"
    * 40
)
LONG = "W" * 6000


@cache
def made(name: str) -> RenderedPdf:
    """The report of an example."""
    return report(example(name))


def written(name: str) -> bytes:
    """The bytes of the report of an example."""
    return made(name).content


def hostile_tree(base: dict[str, Any], words: str) -> dict[str, Any]:
    """A record with the same words in every field of free text, as long as each may be."""
    tree = copy.deepcopy(base)
    for holder, name, most in _texts(tree, Incident):
        holder[name] = words[:most]
    return tree


def _texts(tree: dict[str, Any], part: type) -> Iterator[tuple[dict[str, Any], str, int]]:
    for name, row in table(part):
        if row.kind == "part" and row.of:
            yield from _texts(tree.setdefault(name, {}), row.of)
        elif row.kind == "parts" and row.of:
            if not tree.get(name):
                tree[name] = [{"id": "zz"} if "id" in dict(table(row.of)) else {}]
            for each in tree[name]:
                yield from _texts(each, row.of)
        elif row.kind == "text":
            yield tree, name, row.most


def pages_of(content: bytes) -> list[str]:
    """The text layer, page by page."""
    return [each.extract_text() for each in PdfReader(io.BytesIO(content)).pages]


# --- every example --------------------------------------------------------------------------------


@pytest.mark.parametrize("name", NAMES)
def test_a_report_is_valid_for_archive_and_reading_aloud_and_no_character_lacks_a_glyph(
    name: str, tmp_path: Path
) -> None:
    file = tmp_path / "r.pdf"
    file.write_bytes(written(name))

    assert page.validate_pdf(str(file), profile="3a").failures == []
    assert page.validate_pdf(str(file), profile="ua1").failures == []
    assert made(name).missing_glyphs == () and made(name).warnings == ()


@pytest.mark.parametrize("name", NAMES)
def test_record_and_assessment_come_out_whole_and_assess_to_the_same(
    name: str, tmp_path: Path
) -> None:
    a = example(name)
    write_report(a, tmp_path / "r.pdf", page_one_only=True)
    carried = {n: b[0] for n, b in PdfReader(tmp_path / "r.pdf").attachments.items()}

    assert sorted(carried) == ["assessment.json", "record.json"]
    again = assess(loads(text(json.loads(carried["record.json"]))), a.site)
    assert again.record.digest == a.record.digest
    said = json.loads(carried["assessment.json"])
    assert said == json.loads(json.dumps(as_data(again, summarise(again))))


@pytest.mark.parametrize("name", NAMES[::4])
def test_only_our_own_faces_are_embedded(name: str) -> None:
    with pikepdf.open(io.BytesIO(written(name))) as file:
        names = {
            str(each.FontName).partition("+")[2]
            for each in file.objects
            if isinstance(each, pikepdf.Dictionary) and each.get("/Type") == "/FontDescriptor"
        }

    assert names == {"Report-Sans", "Report-Sans-Bold"}


@pytest.mark.parametrize("name", NAMES[::4])
def test_every_page_bears_case_state_digest_and_its_number(name: str) -> None:
    a, pages = example(name), pages_of(written(name))

    for number, shown in enumerate(pages, start=1):
        assert f"Incident {a.record.case} · issue 1" in shown
        assert a.record.digest[:12] in shown and f"Page {number} of {len(pages)}" in shown


@pytest.mark.parametrize("name", NAMES)
def test_facts_and_analysis_are_parts_of_their_own_with_their_own_marking(name: str) -> None:
    parts = {part["title"]: part for part in report_context(example(name))["parts"]}

    assert list(parts) == ["Facts", "Analysis", "Cautions, signatures, sources"]
    assert parts["Facts"]["marking"] != parts["Analysis"]["marking"]
    titles = [each["title"] for each in parts["Cautions, signatures, sources"]["sections"]]
    assert titles[-3:] == ["Signatures", "Departures and versions", "Sources of the numbers"]
    assert "The person" in titles and "Not known" in titles


def test_the_positions_that_differ_are_printed_for_the_person() -> None:
    a = example("or4-glove-sting-coagulation")
    shown = " ".join(" ".join(pages_of(written("or4-glove-sting-coagulation"))).split())

    for row in a.care.rows:
        assert " ".join(row.action.split()) in shown
        assert all(" ".join(each.split()) in shown for each in row.sources)
    assert "Watch for: chest pain" in shown


# --- written whole or not at all ------------------------------------------------------------------


def test_a_second_report_of_the_same_record_is_the_same_bytes(tmp_path: Path) -> None:
    a = drawn(4)
    for name in ("a", "b"):
        write_report(a, tmp_path / name)

    assert (tmp_path / "a").read_bytes() == (tmp_path / "b").read_bytes()


def test_a_write_that_breaks_off_leaves_the_earlier_file_and_nothing_else(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    def full(*_: object) -> None:
        raise OSError(28, "No space left on device")

    target = tmp_path / "r.pdf"
    target.write_bytes(b"earlier")
    monkeypatch.setattr(os, "fsync", full)

    with pytest.raises(CannotWrite, match="No space left on device; name another place"):
        write_whole(target, b"x" * 100)
    assert [each.name for each in tmp_path.iterdir()] == ["r.pdf"]
    assert target.read_bytes() == b"earlier"


# --- hostile text ---------------------------------------------------------------------------------


@cache
def attacked(words: str) -> Assessment:
    """A full record with the same words in every field of free text."""
    base = example("icu2-two-metals-two-witnesses").record.tree
    return assess(loads(text(hostile_tree(base, words))), no_site())


@pytest.fixture(scope="module", params=[HOSTILE, LONG], ids=["hostile", "long word"])
def attack(request: pytest.FixtureRequest, tmp_path_factory: pytest.TempPathFactory):
    """Words, the notes of the command, and the report as a file."""
    target = tmp_path_factory.mktemp("attack") / "r.pdf"
    notes = write_report(attacked(request.param), target)
    return request.param, notes, target


def test_hostile_text_is_printed_as_typed_or_marked_and_carries_nothing_in(attack) -> None:
    words, notes, target = attack
    content = target.read_bytes()
    shown = "".join("".join(pages_of(content)).split())

    assert sorted(PdfReader(target).attachments) == ["assessment.json", "record.json"]
    assert RAW.findall(shown) == []
    if words is HOSTILE:
        assert "<script>alert(1)</script><imgsrc=" in shown and "{{7*7}}{%raw%}${x}" in shown
        assert "[U+202E]" in shown and "[U+6F22]" in shown and "[U+1F642]" in shown
        assert len(notes) == 1 and "printed as codes" in notes[0]
    else:
        assert "W" * 3000 in re.sub("[^W]", "", shown) and notes == ()


def test_hostile_text_leaves_the_file_valid(attack) -> None:
    _, _, target = attack

    assert page.validate_pdf(str(target), profile="3a").failures == []
    assert page.validate_pdf(str(target), profile="ua1").failures == []


@pytest.mark.skipif(shutil.which("pdftotext") is None, reason="needs poppler-utils")
def test_no_word_leaves_the_page_or_its_margins(attack) -> None:
    boxes = subprocess.run(
        ["pdftotext", "-bbox", attack[2], "-"], capture_output=True, text=True, check=True
    ).stdout
    found = [
        tuple(map(float, each))
        for each in re.findall(
            r'word xMin="([\d.-]+)" yMin="([\d.-]+)" xMax="([\d.-]+)" yMax="([\d.-]+)"', boxes
        )
    ]

    millimetre = 72 / 25.4
    assert len(found) > 1000
    assert min(each[0] for each in found) >= 21 * millimetre - 0.5
    assert max(each[2] for each in found) <= (210 - 19) * millimetre + 0.5
    assert min(each[1] for each in found) >= 0 and max(each[3] for each in found) <= 842


def test_links_scripts_and_forms_are_in_no_report(attack) -> None:
    with pikepdf.open(attack[2]) as file:
        keys = {
            key
            for each in file.objects
            if isinstance(each, pikepdf.Dictionary)
            for key in each.keys()
        }

    assert not keys & {"/JS", "/JavaScript", "/URI", "/AA", "/OpenAction", "/AcroForm", "/Launch"}
