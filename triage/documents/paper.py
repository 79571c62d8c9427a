"""What every paper that is carried shares: frame, versions in the margin, one way to the file."""

from pathlib import Path
from typing import Any

from triage import __version__
from triage.assessment import Assessment
from triage.documents.whole_file import write_whole
from triage.frozen import frozen
from triage.paper_texts import PaperTexts
from triage.render import RenderedPdf, render_form, render_html, render_pdf
from triage.site import Site
from triage.tables import knowledge_digest

CONTACTS = ("biomedical", "facilities", "occupational_health", "blood_exposure", "risk_office")


@frozen
class Paper:
    """One paper, worded and ready to be drawn.

    Args:
        template: file in the templates folder.
        context: everything the template may name.
        identifier: bytes of the file's /ID.
        missing: ids of sentences that the site's language lacks.
        fillable: whether it has fields for a screen.
    """

    template: str
    context: dict[str, Any]
    identifier: bytes
    missing: tuple[str, ...]
    fillable: bool = False


def site_paper(
    template: str, texts: PaperTexts, *, site: Site, title: str, matter: dict[str, Any]
) -> Paper:
    """A paper that belongs to no incident."""
    facility = site.file.facility or ""
    issue = f"{title} · {facility}" if facility else title
    digest = f"site file {site.digest[:12]} · knowledge {knowledge_digest()[:8]}"
    context = _frame(texts, site, title=title, issue=issue, digest=digest) | matter
    return Paper(template, context, _identifier(site.digest, template), tuple(texts.missing))


def case_paper(
    template: str, texts: PaperTexts, *, a: Assessment, title: str, matter: dict[str, Any]
) -> Paper:
    """A paper about one incident."""
    facility = a.site.file.facility
    issue = f"{title} · {a.record.case}" + (f" · {facility}" if facility else "")
    digest = f"record {a.record.digest[:12]} · knowledge {a.knowledge[:8]}"
    context = _frame(texts, a.site, title=title, issue=issue, digest=digest) | matter
    return Paper(template, context, _identifier(a.record.digest, template), tuple(texts.missing))


def _frame(texts: PaperTexts, site: Site, *, title: str, issue: str, digest: str) -> dict[str, Any]:
    return {
        "language": texts.language,
        "paper": site.file.paper or "A4",
        "title": title,
        "draft": False,
        "running": {"issue": issue, "digest": f"{digest} · program {__version__}",
                    "page": texts("frame.page"), "of": texts("frame.of")},
    }  # fmt: skip


def _identifier(digest: str, template: str) -> bytes:
    """A paper of one record differs from another paper of it."""
    return (template.encode() + bytes.fromhex(digest))[:16]


def contact_lines(texts: PaperTexts, site: Site, names: tuple[str, ...] = CONTACTS) -> list[str]:
    """Whom to call, as the site file names them; a blank to write on where it does not."""
    lines = []
    for name in names:
        known = getattr(site.file.contacts, name)
        lines.append(known or f"{texts(f'contact.{name}')}: ______________")
    return lines


def drawn(paper: Paper) -> RenderedPdf:
    """The paper as a file.

    Raises:
        MissingLibrary: a system library for rendering is absent.
    """
    html = render_html(paper.template, paper.context)
    title = paper.context["title"]
    if paper.fillable:
        return render_form(html, title=title, identifier=paper.identifier)
    return render_pdf(html, title=title, attachments=[], identifier=paper.identifier)


def write_paper(paper: Paper, target: Path) -> tuple[str, ...]:
    """Write one paper.

    Args:
        paper: what to draw.
        target: the file; it appears whole or not at all.

    Returns:
        Notes for the person who asked.

    Raises:
        CannotWrite: the place cannot be written.
        MissingLibrary: a system library for rendering is absent.
    """
    made = drawn(paper)
    write_whole(target, made.content)
    notes = []
    if made.missing_glyphs:
        count = len(made.missing_glyphs)
        notes.append(f"{count} characters have no glyph here and are printed as codes")
    if paper.missing:
        language, count = paper.context["language"], len(paper.missing)
        notes.append(f"{count} sentences have no entry in '{language}' and are printed in English "
                     f"behind [en], first: {', '.join(paper.missing[:3])}")  # fmt: skip
    return tuple(notes)
