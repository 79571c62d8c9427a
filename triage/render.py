"""Context -> HTML -> PDF: lays out, never computes, fetches nothing but the package's own files.

One file meets two standards: PDF/A-3 level A (ISO 19005-3) for the archive and PDF/UA-1
(ISO 14289-1) for reading aloud.
"""

import re
import unicodedata
from collections.abc import Mapping
from dataclasses import dataclass
from datetime import UTC, datetime
from functools import cache
from typing import Any

from jinja2 import Environment, FileSystemLoader, StrictUndefined
from markupsafe import Markup

from triage.paths import templates
from triage.typeset import (
    base_url,
    covered,
    finish,
    fonts,
    guarded,
    own_files,
    weasyprint,
)

ATTACHED = datetime(2000, 1, 1, tzinfo=UTC)
"""Date written on every attachment: fixed, so that two renders are the same bytes."""

MARKS_IN_A_ROW = 3
"""Combining marks left on one letter; judgement: no orthography needs more, a stack of forty
paints over the lines above."""


@dataclass(frozen=True, slots=True)
class Attachment:
    """A file carried inside the PDF as an associated file (ISO 19005-3, 6.8).

    Args:
        name: file name shown to the reader.
        content: its bytes.
        description: one line on what it is.
    """

    name: str
    content: bytes
    description: str


@dataclass(frozen=True, slots=True)
class RenderedPdf:
    """A finished PDF and what the reader should be told about it.

    Args:
        content: the bytes of the file.
        missing_glyphs: characters the package's fonts lack, sorted; each is printed as its
            code, [U+6F22].
        warnings: other remarks of the renderer; empty for a sound template.
    """

    content: bytes
    missing_glyphs: tuple[str, ...]
    warnings: tuple[str, ...]


def render_html(template: str, context: Mapping[str, Any]) -> str:
    """Fill a template with already worded text.

    Args:
        template: file name in the templates folder.
        context: what the template may name; a name it lacks is an error, never a blank.

    Returns:
        One HTML document. Typed text is escaped; control and direction characters and piles of
        combining marks show as their code, so that they cannot act.
    """
    return _environment().get_template(template).render(context)


def render_pdf(
    html: str, *, title: str, attachments: list[Attachment], identifier: bytes
) -> RenderedPdf:
    """Turn a document into one file for the archive (PDF/A-3a) and for reading aloud (PDF/UA-1).

    Args:
        html: what `render_html` gave.
        title: shown in the window's title bar, read out first.
        attachments: files carried inside.
        identifier: bytes of the file's /ID, for instance the record's digest.

    Returns:
        The same bytes for the same input, on one machine.

    Raises:
        InvalidValue: the document names a file or address that is not the package's own.
        MissingLibrary: pango is not installed.
    """
    configuration, faces = fonts()
    printable, missing = _mark_uncovered(html)
    with guarded() as remarks:
        document = (
            weasyprint()
            .HTML(string=printable, base_url=base_url(), url_fetcher=own_files())
            .render(font_config=configuration, stylesheets=[faces], pdf_variant="pdf/a-3a")
        )
        document.metadata.title = visible(title)
        content = document.write_pdf(
            finisher=finish,
            pdf_variant="pdf/a-3a",
            pdf_identifier=identifier,
            attachments=[_attached(each) for each in attachments],
        )
    return RenderedPdf(content, missing, tuple(remarks))


def _attached(each: Attachment) -> Any:
    return weasyprint().Attachment(
        string=each.content,
        name=visible(each.name),
        description=visible(each.description),
        created=ATTACHED,
        modified=ATTACHED,
        relationship="Source",
    )


# --- text ---------------------------------------------------------------------------------------


@cache
def _environment() -> Environment:
    return Environment(
        loader=FileSystemLoader(templates()),
        autoescape=True,
        undefined=StrictUndefined,
        finalize=_finalize,
        trim_blocks=True,
        lstrip_blocks=True,
    )


_PILE = re.compile(f"(?<=[\u0300-\u036f]{{{MARKS_IN_A_ROW}}})[\u0300-\u036f]+")
_QUIET = re.compile("[\n\t\u00a0\u2009\u202f]")  # common, harmless, yet not "printable"
_ACTS = frozenset({"Cc", "Cf", "Cs", "Co", "Cn", "Zl", "Zp"})
_ALLOWED = frozenset("\n\t\u200c\u200d")  # the joiners shape Persian and Indic words


def visible(typed: str) -> str:
    """Typed text with everything that could act, instead of being read, shown as its code.

    Args:
        typed: any text; line ends of any system.

    Returns:
        The text with control, direction and private characters as [U+202E], and a pile of
        combining marks cut after three, its first cut mark and their number in its place.

    >>> visible("no fault\u202e")
    'no fault[U+202E]'
    """
    text = _PILE.sub(_pile, typed.replace("\r\n", "\n"))
    if _QUIET.sub("", text).isprintable():
        return text
    return "".join(_code(each) if _may_act(each) else each for each in text)


def _finalize(value: object) -> object:
    """Called on every value a template prints; what macros give back is already escaped."""
    if isinstance(value, Markup):
        return Markup(visible(value))
    return visible(value) if isinstance(value, str) else value


def _pile(found: re.Match[str]) -> str:
    return f"{_code(found[0][0])}×{len(found[0])}"


def _may_act(character: str) -> bool:
    return character not in _ALLOWED and unicodedata.category(character) in _ACTS


def _code(character: str) -> str:
    return f"[U+{ord(character):04X}]"


def _mark_uncovered(html: str) -> tuple[str, tuple[str, ...]]:
    """Print a character without a glyph as its code: PDF/A-3 forbids the empty box."""
    missing = tuple(sorted(set(html) - covered() - {"\n", "\t", "\r"}))
    return html.translate({ord(each): _code(each) for each in missing}), missing
