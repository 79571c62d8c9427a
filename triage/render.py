"""Context -> HTML -> PDF: lays out, never computes, fetches nothing but the package's own files.

One file meets two standards: PDF/A-3 level A (ISO 19005-3) for the archive and PDF/UA-1
(ISO 14289-1) for reading aloud.
"""

import os
from collections.abc import Callable, Mapping
from dataclasses import dataclass
from datetime import UTC, datetime
from functools import cache
from typing import Any

from jinja2 import Environment, FileSystemBytecodeCache, FileSystemLoader, StrictUndefined
from markupsafe import Markup

from triage.paths import templates
from triage.typeset import (
    base_url,
    covered,
    finish,
    finish_form,
    fonts,
    guarded,
    own_files,
    weasyprint,
)
from triage.visible import code, visible

ATTACHED = datetime(2000, 1, 1, tzinfo=UTC)
"""Date written on every attachment: fixed, so that two renders are the same bytes."""


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
    return _pdf(
        html, title=title, variant="pdf/a-3a", finisher=finish, pdf_identifier=identifier,
        attachments=[_attached(each) for each in attachments],
    )  # fmt: skip


def render_form(html: str, *, title: str, identifier: bytes) -> RenderedPdf:
    """Turn a document with fields into a file that can be filled in on a screen (PDF/UA-1).

    Fields and the archive exclude each other: PDF/A wants a fixed appearance of every field.

    Args:
        html: what `render_html` gave; its `input` and `textarea` become fields.
        title: shown in the window's title bar, read out first.
        identifier: bytes of the file's /ID.

    Raises:
        InvalidValue: the document names a file or address that is not the package's own.
        MissingLibrary: pango is not installed.
    """
    return _pdf(
        html, title=title, variant="pdf/ua-1", finisher=finish_form, pdf_identifier=identifier,
        pdf_forms=True,
    )  # fmt: skip


def _pdf(
    html: str, *, title: str, variant: str, finisher: Callable[[Any, Any], None], **options: Any
) -> RenderedPdf:
    configuration, faces = fonts()
    printable, missing = _mark_uncovered(html)
    with guarded() as remarks:
        document = (
            weasyprint()
            .HTML(string=printable, base_url=base_url(), url_fetcher=own_files())
            .render(font_config=configuration, stylesheets=[faces], pdf_variant=variant, **options)
        )
        document.metadata.title = visible(title)
        content = document.write_pdf(finisher=finisher, pdf_variant=variant, **options)
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


def _compiled() -> FileSystemBytecodeCache | None:
    """Compiled templates beside the templates, where the place allows it."""
    folder = templates() / "__pycache__"
    try:
        folder.mkdir(exist_ok=True)
    except OSError:
        return None
    return FileSystemBytecodeCache(str(folder)) if os.access(folder, os.W_OK) else None


@cache
def _environment() -> Environment:
    return Environment(
        loader=FileSystemLoader(templates()),
        bytecode_cache=_compiled(),
        autoescape=True,
        undefined=StrictUndefined,
        finalize=_finalize,
        trim_blocks=True,
        lstrip_blocks=True,
    )


def _finalize(value: object) -> object:
    """Called on every value a template prints; what macros give back is already escaped."""
    if isinstance(value, Markup):
        return Markup(visible(value))
    return visible(value) if isinstance(value, str) else value


def _mark_uncovered(html: str) -> tuple[str, tuple[str, ...]]:
    """Print a character without a glyph as its code: PDF/A-3 forbids the empty box."""
    missing = tuple(sorted(set(html) - covered() - {"\n", "\t", "\r"}))
    return html.translate({ord(each): code(each) for each in missing}), missing
