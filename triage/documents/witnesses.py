"""Statements that differ, and what the ranking becomes with each of them."""

from triage.assessment import Assessment
from triage.documents.wording import likelihood, spoken
from triage.knowledge import knowledge


def witness_lines(a: Assessment) -> list[str]:
    """Where statements differ, then the ranking with each one believed alone."""
    k, lines = knowledge(), []
    for finding, said in sorted(a.evidence.disagreements.items()):
        each = ", ".join(f"{s} says {spoken(state)}" for s, state in sorted(said.items()))
        lines.append(f"Statements differ on {k.findings[finding].name}: {each}.")
    for one in a.testimony.each:
        lines.append(
            f"If {one.statement} alone is believed: {k.causes[one.first].name.lower()} first, "
            f"{likelihood(one.probability)}; any mains fault {likelihood(one.mains)}."
        )
    if a.testimony.each:
        lines.append(witness_verdict(a))
    return lines


def witness_verdict(a: Assessment) -> str:
    """Whether the ranking depends on whom one believes; empty where nobody disagrees."""
    if not a.testimony.each:
        return ""
    if a.testimony.matters:
        return "The first cause depends on which witness is believed: ask again, apart."
    return "The first cause is the same whichever witness is believed."
