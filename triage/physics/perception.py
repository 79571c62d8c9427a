"""Chance that a current was felt, and that the hand could not let go."""

from math import erfc, log, sqrt

from triage.citation import Citation
from triage.errors import InvalidValue
from triage.physics.figures import cited, row, value
from triage.physics.networks import weight


def normal_cdf(z: float) -> float:
    """Standard normal distribution function."""
    return erfc(-z / sqrt(2)) / 2


def felt(current: float, curve: str, *, frequency: float = 50.0) -> float:
    """Chance that a person feels this current, Phi(ln(I / m) / s).

    Args:
        current: rms through the body [A], 0 or more.
        curve: a row of `perception` in data/body.yaml: `touch`, `grip`, `sensitive` ...
        frequency: f [Hz]; above 100 Hz the current is weighted by the reaction network.

    Returns:
        Probability 0 to 1.

    Raises:
        InvalidValue: negative current.
        OutOfRange: frequency outside the range of the network.

    >>> round(felt(0.2e-3, "touch"), 3), round(felt(1e-3, "grip"), 3)
    (0.281, 0.618)
    """
    if not current >= 0:
        raise InvalidValue(f"a current cannot be {current!r} A")
    if current == 0:
        return 0.0
    if current == float("inf"):
        return 1.0
    found = row("perception", curve)
    weighted = current * (weight(frequency, "reaction") if frequency > 100 else 1.0)
    return normal_cdf(log(weighted / float(found["median"])) / float(found["sigma"]))


def could_be_felt(current: float, *, frequency: float = 50.0) -> float:
    """Chance by whichever of the touch and sensitive curves is higher: *could* it be felt?

    Args:
        current: rms [A].
        frequency: f [Hz].

    >>> round(could_be_felt(0.05e-3), 3)
    0.016
    """
    return max(felt(current, each, frequency=frequency) for each in ("touch", "sensitive"))


def must_be_felt(current: float, *, frequency: float = 50.0) -> float:
    """Chance by the grip curve: would it *have to* be felt?

    Args:
        current: rms [A].
        frequency: f [Hz].

    >>> round(must_be_felt(2e-3), 3)
    0.989
    """
    return felt(current, "grip", frequency=frequency)


def threshold(curve: str) -> tuple[float, float, Citation]:
    """Median [A], spread of the natural log and citation of a perception curve."""
    found = row("perception", curve)
    return float(found["median"]), float(found["sigma"]), cited("perception", curve)


def friction_felt(voltage: float | None, current: float | None, *, dry_sliding: bool) -> bool:
    """Whether light sliding of a dry finger over unearthed metal can be felt as a buzz.

    Args:
        voltage: metal against earth, rms [V]; None if unknown.
        current: through the finger, rms [A]; None if unknown.
        dry_sliding: dry skin moved lightly; pressing firmly or wetting ends it.

    Returns:
        True when either reaches the smallest figure published, or neither is known.

    Source:
        Grimnes 1983: 1.5 V or 0.15 uA at 50 Hz.
    """
    if not dry_sliding:
        return False
    if voltage is None and current is None:
        return True
    return (voltage or 0) >= value("friction", "voltage") or (current or 0) >= value(
        "friction", "current"
    )


def cannot_let_go(current: float, group: str = "everybody") -> float:
    """Chance that the muscles of the hand keep hold of a gripped conductor, 60 Hz.

    Args:
        current: rms through the forearm [A], 0 or more.
        group: `men`, `women` or `everybody`; everybody is the most sensitive group.

    Returns:
        Probability 0 to 1, from a normal threshold.

    Raises:
        InvalidValue: negative current.

    Source:
        Dalziel and Lee; the spread follows from the printed 0.5 % points.

    >>> round(cannot_let_go(9e-3, "women"), 3)
    0.195
    """
    if not current >= 0:
        raise InvalidValue(f"a current cannot be {current!r} A")
    found = row("let_go", group)
    return normal_cdf((current - float(found["mean"])) / float(found["sd"]))
