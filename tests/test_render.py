"""Documents: the same bytes twice, valid for archive and reading aloud, closed to typed text."""

import importlib
import io
import os
import re
import shutil
import subprocess
import sys
from pathlib import Path

import jinja2
import page
import pikepdf
import pytest
from fontTools.ttLib import TTFont
from mock_charts import causes_chart
from mock_report import context
from pypdf import PdfReader

from triage import typeset
from triage.errors import InvalidValue, MissingLibrary
from triage.paths import templates
from triage.render import Attachment, RenderedPdf, render_html, render_pdf
from triage.visible import visible

RECORD = Attachment("incident.yaml", b"schema: 1\n", "the record")
HOSTILE = (
    '<script>alert(1)</script><img src="http://192.0.2.1/a.png"><style>*{display:none}</style>'
    '<link rel=attachment href="file:///etc/passwd">{{ 7*7 }}{% raw %}</body> url(http://192.0.2.1)'
    " @import \u202eright to left\u202c \x07 \x00 漢字 عربي Кириллица e" + "\u0301" * 40
)


def pdf(html: str, **changes: object) -> RenderedPdf:
    """Render with the record attached."""
    given = {"title": "Report", "attachments": [RECORD], "identifier": b"0" * 16} | changes
    return render_pdf(html, **given)  # type: ignore[arg-type]


def report(**changes: object) -> str:
    """The mock report as HTML."""
    return render_html("incident_report.html", context(**changes))


def hostile() -> str:
    """A report with hostile text wherever a person may type, and words without a space."""
    filled = context()
    first = filled["page_one"]
    filled["title"] = filled["running"]["issue"] = first["marking"] = HOSTILE
    first["person"] = [HOSTILE, "x" * 3000]
    first["happened"]["quotes"] = [{"heading": HOSTILE, "text": HOSTILE, "language": HOSTILE}]
    row = {"item": "x" * 200, "defect": HOSTILE, "severity": 4, "disposition": HOSTILE}
    first["equipment"]["rows"].append(row)
    return render_html("incident_report.html", filled)


def paragraph(body: str) -> str:
    """The smallest document around some HTML."""
    face = "<style>html{font-family:Report Sans}</style>"
    return f'<html lang="en"><title>t</title>{face}<p>{body}</p></html>'


def texts(content: bytes) -> list[str]:
    """The text layer, page by page."""
    return [each.extract_text() for each in PdfReader(io.BytesIO(content)).pages]


@pytest.fixture(scope="module")
def full() -> RenderedPdf:
    """The full mock report, rendered once."""
    return pdf(report())


@pytest.mark.parametrize("profile", ["3a", "ua1"])
@pytest.mark.parametrize(
    "html",
    [report(), report(parts=[]), report(page_one=None), report(draft=True), hostile()],
    ids=["full", "short", "no page one", "draft", "hostile"],
)
def test_a_validator_finds_no_failure_for_archive_or_reading_aloud(
    html: str, profile: str, tmp_path: Path
) -> None:
    made = tmp_path / "report.pdf"
    made.write_bytes(pdf(html).content)

    assert page.validate_pdf(str(made), profile=profile).failures == []


def test_the_same_document_is_the_same_bytes_twice(full: RenderedPdf) -> None:
    assert pdf(report()).content == full.content


@pytest.mark.parametrize("seed", ["1", "2"])
def test_another_process_writes_the_same_bytes(full: RenderedPdf, seed: str) -> None:
    code = "import sys, test_render as t; sys.stdout.buffer.write(t.pdf(t.report()).content)"
    path = os.pathsep.join([str(Path(__file__).parent), str(Path(__file__).parent.parent)])
    there = subprocess.run(
        [sys.executable, "-c", code],
        env=os.environ | {"PYTHONHASHSEED": seed, "PYTHONPATH": path},
        capture_output=True,
        check=True,
    )

    assert there.stdout == full.content


def test_only_the_carried_faces_are_embedded_and_each_as_a_subset(full: RenderedPdf) -> None:
    with pikepdf.open(io.BytesIO(full.content)) as file:
        descriptors = [
            each
            for each in file.objects
            if isinstance(each, pikepdf.Dictionary) and each.get("/Type") == "/FontDescriptor"
        ]
        names = {str(each.FontName).partition("+")[2] for each in descriptors}
        embedded = ["/FontFile2" in each for each in descriptors]

    assert names == {"Report-Sans", "Report-Sans-Bold"}
    assert all(embedded)


def test_a_document_without_a_named_face_still_uses_no_font_of_the_machine() -> None:
    content = pdf('<html lang="en"><title>t</title><p style="font-family: serif">x</p>').content

    with pikepdf.open(io.BytesIO(content)) as file:
        fonts = [str(each.BaseFont) for each in file.pages[0].Resources.Font.values()]

    assert all(each.endswith(("Report-Sans", "DejaVu-Sans-Condensed")) for each in fonts)


def test_both_faces_cover_the_same_characters() -> None:
    folder = templates() / "fonts"
    covers = [
        set(TTFont(folder / f"DejaVuSansCondensed{weight}.ttf").getBestCmap())
        for weight in ("", "-Bold")
    ]

    assert covers[0] == covers[1]
    assert set(map(ord, "ΩµμΔ≥≤≈±−×→←☐☑▲■◆○“”…\u00a0\u2009\u202f²³⁹°")) <= covers[0]


@pytest.mark.parametrize(
    "body",
    [
        '<img src="http://192.0.2.1/a.png">',
        '<img src="file:///etc/hostname">',
        '<img src="data:image/png;base64,iVBORw0KGgo=">',
        '<link rel="attachment" href="file:///etc/passwd">',
        '<link rel="attachment" href="layout.html">',
        '<link rel="stylesheet" href="../triage/site.css">',
        '<link rel="stylesheet" href="//192.0.2.1/document.css">',
        '<style>@import "https://192.0.2.1/a.css";</style>',
        '<style>@font-face{font-family:x;src:url("file:///etc/passwd")}</style>',
    ],
)
def test_an_address_in_a_document_stops_it(body: str) -> None:
    with pytest.raises(InvalidValue, match="own files"):
        pdf(paragraph(body))


def test_a_picture_that_cannot_be_drawn_is_an_error_and_never_a_gap() -> None:
    with pytest.raises(InvalidValue, match="drawn whole"):
        pdf(paragraph('<svg width="9" height="9"><image href="http://192.0.2.1/a.png"/></svg>'))


def test_hostile_text_is_printed_as_typed_and_carries_no_file_in() -> None:
    content = pdf(hostile()).content

    shown = "".join("".join(texts(content)).split())
    assert "".join('<script>alert(1)</script><img src="http://'.split()) in shown
    assert "{{7*7}}{%raw%}</body>" in shown
    assert "[U+202E]" in shown and "[U+0007]" in shown and "\u202e" not in shown
    assert list(PdfReader(io.BytesIO(content)).attachments) == ["incident.yaml"]


@pytest.mark.skipif(shutil.which("pdftotext") is None, reason="needs poppler-utils")
def test_long_words_stay_between_the_margins(tmp_path: Path) -> None:
    made = tmp_path / "report.pdf"
    made.write_bytes(pdf(hostile()).content)

    boxes = subprocess.run(
        ["pdftotext", "-bbox", made, "-"], capture_output=True, text=True, check=True
    ).stdout
    right = [float(each) for each in re.findall(r'xMax="([\d.]+)"', boxes)]

    assert len(right) > 300
    assert max(right) <= (210 - 19) / 25.4 * 72 + 0.5


@pytest.mark.parametrize("number", range(40))
def test_no_stream_ends_where_a_reader_could_miscount_it(number: int, tmp_path: Path) -> None:
    made = tmp_path / "report.pdf"
    made.write_bytes(pdf(paragraph(f"x{number}")).content)

    assert page.validate_pdf(str(made), profile="3a").failures == []


@pytest.mark.parametrize(
    ("typed", "shown"),
    [
        ("line\r\nline", "line\nline"),
        ("1.9\u00a0mA, ≥ 2\u202fMΩ, سلام", "1.9\u00a0mA, ≥ 2\u202fMΩ, سلام"),
        ("می\u200cخواهم", "می\u200cخواهم"),
        ("\u202egnp.exe", "[U+202E]gnp.exe"),
        ("a\u200bb\ufeff\x1b[31m", "a[U+200B]b[U+FEFF][U+001B][31m"),
        ("lone \ud800", "lone [U+D800]"),
        ("e\u0301\u0323 ok", "e\u0301\u0323 ok"),
        ("e" + "\u0301" * 9, "e\u0301\u0301\u0301[U+0301]×6"),
    ],
)
def test_what_could_act_is_shown_as_its_code(typed: str, shown: str) -> None:
    assert visible(typed) == shown


def test_typed_text_is_marked_in_html_too() -> None:
    html = hostile()

    assert "[U+202E]right to left[U+202C]" in html and "\u202e" not in html and "\x07" not in html


def test_a_character_without_a_glyph_is_told_and_printed_as_its_code() -> None:
    made = pdf(paragraph("Frau 漢字 said µ, Ω, ≥"))

    assert made.missing_glyphs == ("字", "漢")
    assert made.warnings == ()
    assert "Frau [U+6F22][U+5B57] said µ, Ω, ≥" in texts(made.content)[0]


def test_attachments_come_back_whole_as_associated_files_with_a_fixed_date() -> None:
    content = pdf(paragraph("x"), attachments=[RECORD, Attachment("a.json", b"{}", "more")]).content

    with pikepdf.open(io.BytesIO(content)) as file:
        found = {name: each.get_file() for name, each in file.attachments.items()}
        carried = {name: each.read_bytes() for name, each in found.items()}
        dates = {str(each.mod_date)[:10] for each in found.values()}
        associated = {str(each.UF): str(each.AFRelationship) for each in file.Root.AF}

    assert carried == {"incident.yaml": b"schema: 1\n", "a.json": b"{}"}
    assert associated == {"incident.yaml": "/Source", "a.json": "/Source"}
    assert dates == {"2000-01-01"}


def test_header_cells_say_which_cells_they_head(full: RenderedPdf) -> None:
    with pikepdf.open(io.BytesIO(full.content)) as file:
        headers = [
            str(each.A.Scope)
            for each in file.objects
            if isinstance(each, pikepdf.Dictionary) and each.get("/S") == "/TH"
        ]

    assert headers.count("/Column") >= 16 and headers.count("/Row") >= 18


def test_charts_have_words_for_those_who_cannot_see_them(full: RenderedPdf) -> None:
    with pikepdf.open(io.BytesIO(full.content)) as file:
        figures = [
            str(each.Alt)
            for each in file.objects
            if isinstance(each, pikepdf.Dictionary) and each.get("/S") == "/Figure"
        ]

    assert len(figures) == 5
    assert "Ranked causes. Lost protective earth: 35 to 80 percent." in figures


def test_lettering_in_charts_is_whole_words_in_the_text_layer(full: RenderedPdf) -> None:
    text = "\n".join(texts(full.content))

    assert "Second fault on the isolated supply" in text
    assert "relative humidity, %" in text and "100 µA" in text


def test_each_piece_of_lettering_is_drawn_in_one_run() -> None:
    svg = causes_chart()
    content = PdfReader(io.BytesIO(pdf(paragraph(svg)).content)).pages[0].get_contents()

    assert content is not None
    assert content.get_data().count(b"TJ") == svg.count("<text") > 10


def test_page_one_answers_in_order_on_one_page(full: RenderedPdf) -> None:
    first = " ".join(texts(full.content)[0].split())
    marks = [
        "The person",
        "Medical review asked for",
        "Before any of this: the clinician",
        "Hold the trolley",
        "Earth continuity 4.1 Ω",
        "What happened",
        "Left hand on the trolley",
        "An electrical fault is more likely",
        "0.21 mA",
        "Whether cord C2",
        "Licensed electrician",
        "Nobody touches it",
    ]
    places = [first.find(each) for each in marks]

    assert places == sorted(places) and places[0] >= 0


def test_checks_are_numbered_through_all_groups(full: RenderedPdf) -> None:
    numbers = re.findall(r"^(\d)\. *$", texts(full.content)[0], re.MULTILINE)

    assert numbers == ["1", "2", "3", "4"]


def test_every_page_bears_number_issue_digest_and_its_own_marking(full: RenderedPdf) -> None:
    pages = texts(full.content)

    assert len(pages) == 5
    for number, text in enumerate(pages, start=1):
        assert "Incident 26-7KQ4 · issue 2 · preliminary" in text
        assert "record 3f9a 12bc" in text and f"Page {number} of 5" in text
    assert "Internal, clinical engineering" in pages[0]
    assert "Facts: reported" in pages[1] and "Analysis: opinion" not in pages[1]
    assert "Analysis: opinion" in pages[2] and "Facts: reported" not in pages[2]


@pytest.mark.parametrize(("paper", "size"), [("A4", (595, 842)), ("Letter", (612, 792))])
def test_paper_may_be_a4_or_letter(paper: str, size: tuple[int, int]) -> None:
    pages = PdfReader(io.BytesIO(pdf(report(paper=paper)).content)).pages

    assert {(round(each.mediabox.width), round(each.mediabox.height)) for each in pages} == {size}
    assert len(pages) == 5 and "take precedence" in pages[0].extract_text()


def test_a_draft_says_so_under_every_page() -> None:
    drawn = {
        draft: [
            bytes(each.get_contents().get_data()).count(b" Do")  # type: ignore[union-attr]
            for each in PdfReader(io.BytesIO(pdf(report(draft=draft)).content)).pages
        ]
        for draft in (False, True)
    }

    assert all(with_ > without for with_, without in zip(drawn[True], drawn[False], strict=True))


def test_a_name_the_context_lacks_is_an_error_and_never_a_blank() -> None:
    lacking = context()
    del lacking["page_one"]["not_known"]

    with pytest.raises(jinja2.UndefinedError, match="not_known"):
        render_html("incident_report.html", lacking)


def test_an_unknown_kind_of_matter_is_an_error_and_never_a_blank() -> None:
    odd = {"title": "t", "marking": "", "sections": [{"title": "t", "wide": True}]}
    odd["sections"][0]["blocks"] = [{"kind": "pie"}]  # type: ignore[index]

    with pytest.raises(jinja2.UndefinedError, match="pie"):
        report(parts=[odd])


def test_a_missing_system_library_is_told_with_what_to_install(
    monkeypatch: pytest.MonkeyPatch,
) -> None:
    def absent(name: str) -> None:
        raise OSError(f"cannot load library of {name}")

    monkeypatch.setattr(typeset, "import_module", absent)
    typeset.weasyprint.cache_clear()
    with pytest.raises(MissingLibrary, match="libpango-1.0-0"):
        typeset.weasyprint()
    monkeypatch.setattr(typeset, "import_module", importlib.import_module)


def test_the_renderer_is_imported_only_when_a_pdf_is_made() -> None:
    code = "import sys, triage.render; print('weasyprint' in sys.modules)"
    said = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, check=True)

    assert said.stdout.strip() == "False"
