"""A walking test in lines: its peaks, and what to enter in the record."""

from collections.abc import Iterator, Sequence

from triage.check_table import check_kinds
from triage.documents.wording import amount
from triage.physics.walking_test import COUNT, evaluated
from triage.quantity import worded

CHECK = "static_reenactment"
"""The check whose value a walking test gives."""


def walking_lines(samples: Sequence[tuple[float, float]]) -> Iterator[str]:
    """The peaks of a walking test and the value to enter.

    Args:
        samples: (time [s], voltage [V]).

    Raises:
        InvalidValue: times do not rise, or too few peaks.
    """
    found, kind = evaluated(samples), check_kinds()[CHECK]
    high, low = found.mean_peak, found.mean_valley
    yield f"{len(samples)} samples over {amount(samples[-1][0] - samples[0][0], 'duration')}."
    yield f"Mean of the {COUNT} highest peaks: {_signed(high)} ({_each(found.peaks)})."
    yield f"Mean of the {COUNT} lowest valleys: {_signed(low)} ({_each(found.valleys)})."
    yield f"Largest of either sign: {_signed(found.largest)}."
    value = max(abs(high), abs(low))
    yield f"Enter: kind: {CHECK}, method: hand_held_electrode, value: {worded(value, 'voltage', 3)}"
    yield (
        "It is the larger of the two means without its sign. Between the steps, with both feet "
        "down, the voltage is nearer to the other mean."
    )
    yield f"It counts for the event only as the check says: {kind.accepts[0].note}"
    yield from (f"- {step}" for step in kind.how)
    yield f"Source of the rule: {kind.citation.text()}."


def _each(volts: Sequence[float]) -> str:
    return ", ".join(_signed(v) for v in volts)


def _signed(volts: float) -> str:
    return f"{'-' if volts < 0 else ''}{amount(abs(volts), 'voltage', 3)}"
