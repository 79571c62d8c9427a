"""Devices that open a circuit on residual current: when, and where they do not act at all.

None of them limits the current before it opens, and none acts on an isolated supply.
"""

from triage.errors import InvalidValue
from triage.physics.figures import row, value

KINDS = ("general", "delayed")
"""Kinds of residual current device with published times."""


def gfci_time(current: float) -> float | None:
    """Longest time a class A ground-fault interrupter may take, T = (20 / I)^1.43 with I in mA.

    Args:
        current: residual current [A], 0 or more.

    Returns:
        T [s]; None where it need not open (below 6 mA); above 264 mA the time at 264 mA.

    Raises:
        InvalidValue: negative current.

    Source:
        UL 943 trip-time law, valid 6 to 264 mA, as quoted in two trade forums; NEC 2023
        article 100 note for the 6 mA.

    >>> round(gfci_time(6e-3), 3), round(gfci_time(264e-3), 5), gfci_time(5e-3)
    (5.594, 0.02498, None)
    """
    if not current >= 0:
        raise InvalidValue(f"a residual current cannot be {current!r} A")
    if current < value("interrupters", "gfci_must_trip"):
        return None
    return float((20 / (min(current, 0.264) * 1e3)) ** 1.43)


def rcd_time(current: float, rated: float, kind: str = "general") -> float | None:
    """Longest time a residual current device may take to open.

    Args:
        current: residual current [A], 0 or more.
        rated: rated residual current [A], above 0 (30 mA in use for people).
        kind: one of `KINDS`.

    Returns:
        Time [s] of the highest published multiple reached; None below the rated current.

    Raises:
        InvalidValue: negative current, rating not above 0 or another kind.

    Source:
        IEC 61008-1 and 61009-1 break times at 1, 2 and 5 times the rated current.

    >>> rcd_time(0.030, 0.030), rcd_time(0.150, 0.030), rcd_time(0.029, 0.030)
    (0.3, 0.04, None)
    """
    if not (current >= 0 and rated > 0) or kind not in KINDS:
        raise InvalidValue(f"no {kind!r} device of {rated!r} A at {current!r} A")
    # A current typed as 150 mA must count as 5 x 30 mA in spite of binary rounding.
    reached = current / rated * (1 + 1e-9)
    times: list[tuple[float, float]] = row("interrupters", "rcd_times")[kind]
    return max(
        ((multiple, time) for multiple, time in times if reached >= multiple),
        default=(0, None),
    )[1]


def rcd_band(rated: float) -> tuple[float, float]:
    """Currents between which a residual current device may open: half to full rating [A].

    >>> rcd_band(0.030)
    (0.015, 0.03)
    """
    if not rated > 0:
        raise InvalidValue(f"a rated current cannot be {rated!r} A")
    return rated / 2, rated


def acts(*, isolated: bool | None, line_to_line: bool | None) -> bool:
    """Whether a residual current device could act at all; unknown counts as no.

    Args:
        isolated: the contact was on an isolated supply.
        line_to_line: the person bridged two poles, so no residual current flows.

    >>> acts(isolated=None, line_to_line=False)
    False
    """
    return isolated is False and line_to_line is False
