"""Whether a hand could let go, and what a device that opens on residual current does about it."""

from collections.abc import Iterator

from triage.assessment import Assessment
from triage.citation import Citation
from triage.documents.wording import amount, percent
from triage.electrical_contacts import ContactExposure
from triage.physics.figures import cited, row, value
from triage.physics.interrupters import rcd_time
from triage.physics.perception import cannot_let_go

_SIXTY = 55.0
"""Above this frequency [Hz] the supply is taken for one of 60 Hz and its usual interrupter."""


def held_lines(a: Assessment, found: tuple[ContactExposure, ...]) -> Iterator[str]:
    """Let-go and interrupters at the largest worst credible current of all contacts and causes.

    Args:
        a: the assessment. found: its contacts.
    """
    worst = max((cause.worst for each in found for cause in each.causes), default=None)
    if worst is None:
        return
    held = cannot_let_go(worst)
    sure = amount(row("let_go", "everybody")["sure_release"], "current")
    yield (
        f"Largest worst credible case {amount(worst, 'current')}: a gripping hand could not let "
        f"go in {percent(held)} of people; below {sure} nearly everybody can."
    )
    if a.exposure.conditions.isolated:
        yield "No residual-current device or ground-fault interrupter acts on an isolated supply."
        return
    yield (
        f"{_opens(worst, a.exposure.conditions.frequency)} It shortens the contact and limits "
        "neither the current nor what is felt, and does not act from line to line."
    )


def _opens(worst: float, frequency: float) -> str:
    if frequency > _SIXTY:
        trips = amount(value("interrupters", "gfci_must_trip"), "current")
        return f"If a class A ground-fault interrupter is there, it must open from {trips}."
    rated = value("interrupters", "rcd_rating")
    time, name = rcd_time(worst, rated), f"a residual-current device of {amount(rated, 'current')}"
    if time is None:
        return f"If {name} is there, it need not open at that current."
    return f"If {name} is there, it must open within {amount(time, 'duration')}."


def held_sources() -> Iterator[tuple[str, Citation]]:
    """Where these numbers come from."""
    yield "letting go", cited("let_go", "everybody")
    yield "residual-current device: rating", cited("interrupters", "rcd_rating")
    yield "residual-current device: times", cited("interrupters", "rcd_times")
    yield "ground-fault interrupter", cited("interrupters", "gfci_must_trip")
