"""The statement slip: a witness's own words, before anybody offers others."""

from triage.documents.paper import Paper, contact_lines, site_paper
from triage.paper_texts import PaperTexts
from triage.site import Site

_SMALL = (("when", "role"), ("language", "interpreter"), ("taken", "case"))


def slip(site: Site) -> Paper:
    """Two slips on a page, to be cut apart.

    Args:
        site: gives contacts, language and paper.
    """
    t = PaperTexts(site)
    matter = {
        "heading": t("slip.title"), "lead": t("slip.lead"), "words": t("slip.words"),
        "where": t("slip.where"), "again": t("slip.again"),
        "small": [[t(f"slip.{each}") for each in row] for row in _SMALL],
        "talked": {"ask": t("slip.talked"), "yes": t("slip.answer_yes"),
                   "no": t("slip.answer_no")},
        "returned": {"label": t("slip.returned"),
                     "to": contact_lines(t, site, ("biomedical",))[0]},
        "care": t("slip.care"),
    }  # fmt: skip
    return site_paper("slip.html", t, site=site, title=t("slip.title"), matter=matter)
