"""The staff slip: what is being done, what to watch for, whom to call. No cause is named."""

from triage.assessment import Assessment
from triage.documents.paper import Paper, case_paper, contact_lines
from triage.paper_texts import PaperTexts
from triage.tables import table

_OF_PATIENT = ("patient_affected", "heart_conductor")
"""Care that somebody else gives to somebody else."""
_BREACH = "skin_or_glove_breach"


def staff_slip(a: Assessment) -> Paper:
    """One page for the person who felt it.

    Args:
        a: the assessment; only its number, the urgency and whether it is settled are used.
    """
    t = PaperTexts(a.site)
    watch = [t(f"watch.{n}", each) for n, each in enumerate(table("care")["watch_for"], 1)]
    standing = "settled" if a.incident.outcome.confirmed_cause else "open"
    sections = [
        ("care", _care(a, t)),
        ("watch", watch),
        ("again", t.several("staff_slip.again_lines")),
        ("done", [t("staff_slip.checked"), t(f"staff_slip.{standing}")]),
        ("call", contact_lines(t, a.site, ("occupational_health", "blood_exposure",
                                           "biomedical"))),
        ("case", [a.record.case]),
    ]  # fmt: skip
    matter = {
        "form": "plain",
        "heading": t("staff_slip.title"),
        "lead": t("staff_slip.lead"),
        "sections": [
            {"title": t(f"staff_slip.{name}"), "blocks": [{"kind": "list", "lines": lines}]}
            for name, lines in sections
        ],
    }
    return case_paper("paper.html", t, a=a, title=t("staff_slip.title"), matter=matter)


def _care(a: Assessment, t: PaperTexts) -> list[str]:
    """What is urgent comes before what is open to choice."""
    mine = [row for row in a.care.rows if row.when not in _OF_PATIENT]
    exposed = [t("staff_slip.urgent.breach") for row in mine if row.when == _BREACH]
    found = {row.urgency for row in mine if row.when != _BREACH}
    first = next((each for each in ("now", "same_day") if each in found), None)
    urgent = [t(f"staff_slip.urgent.{first}")] if first else []
    return [*exposed, *urgent, *t.several("staff_slip.care_lines")]
