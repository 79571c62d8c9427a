"""Static readings as estimates: values with their doubt, bounds used as bounds."""

from functools import cache
from math import exp, log, sqrt

from triage.bounds import Basis, Reading
from triage.citation import Citation
from triage.errors import BadTable
from triage.estimate import Estimate, through
from triage.quadrature import normal_cdf, normal_quantile
from triage.quantity import parse
from triage.tables import citation, table

CONTRADICTED = 0.01
"""A bound that a material reaches with less than this probability contradicts it (judgement)."""


@cache
def _row(name: str) -> dict[str, object]:
    row = next((each for each in table("static_readings")["readings"] if each["id"] == name), None)
    if row is None:
        raise BadTable(f"data/static_readings.yaml has no row '{name}'")
    return dict(row)


def taken(name: str, kind: str) -> float:
    """A value that is taken as it stands, in SI.

    Args:
        name: id of the row.
        kind: of quantity, such as "duration".

    >>> taken("pause", "duration")
    1.0
    """
    return parse(str(_row(name)["value"]), kind).value


def spread(name: str) -> float:
    """Ln of the geometric standard deviation of a reading.

    >>> round(spread("voltage"), 3)
    0.199
    """
    return log(float(str(_row(name)["gsd"])))


def cited(name: str) -> Citation:
    """Where a row comes from."""
    return citation(_row(name), name)


def name_of(name: str) -> str:
    """What a row is, in words."""
    return str(_row(name)["name"])


def measured(value: float, unit: str, *, source: str, row: str, what: str) -> Estimate:
    """A value that was read, with the doubt of such a reading.

    Args:
        value: as read, SI, above 0.
        unit: SI symbol.
        source: name of the source of doubt.
        row: of the table of readings.
        what: what was read, for the list of inputs.
    """
    basis = {source: Basis(what, "measured", f"read as {value:g} {unit}", cited(row))}
    return Estimate.lognormal(value, {source: spread(row)}, unit, basis)


def beyond(reading: Reading, *priors: Estimate, source: str, row: str, what: str) -> Estimate:
    """What a bound leaves of an assumption: the assumption given that the instrument showed it.

    Args:
        reading: with a bound.
        priors: assumptions, the first that does not contradict the bound is used; without any
            such the value is placed beyond the bound.
        source: name of the source of doubt.
        row: of the table of readings, for its origin.
        what: what was read, for the list of inputs.

    >>> wide = Estimate.lognormal(1e11, {"r": 3.0}, "ohm")
    >>> after = beyond(Reading(1e9, "ohm", ">"), wide, source="r", row="resistance", what="floor")
    >>> after.median > wide.median and after.quantile(0.01) >= 1e9
    True
    """
    more = reading.bound == ">"
    sign = "above" if more else "below"
    note = f"read as {sign} {reading.value:g} {reading.unit}"
    basis = {source: Basis(what, "measured", note, cited(row))}
    for prior in priors:
        middle, width = prior.mean_log, sqrt(prior.variance_log)
        edge = normal_cdf((log(reading.value) - middle) / width)
        if (1 - edge if more else edge) >= CONTRADICTED:
            return _cut_off(middle, width, edge=edge, more=more, like=(source, reading, basis))
    step = spread("bound")
    middle = exp(log(reading.value) + (step if more else -step))
    return Estimate.lognormal(middle, {source: step}, reading.unit, basis)


def _cut_off(
    middle: float,
    width: float,
    *,
    edge: float,
    more: bool,
    like: tuple[str, Reading, dict[str, Basis]],
) -> Estimate:
    """A lognormal of which only the part on one side of a bound is left."""
    source, reading, basis = like

    def log_value(score: float) -> float:
        share = normal_cdf(score)
        kept = edge + (1 - edge) * share if more else edge * share
        return middle + width * normal_quantile(min(max(kept, 1e-12), 1 - 1e-12))

    score = Estimate.lognormal(1.0, {source: 1.0}, "", basis)
    return through(log_value, score, unit=reading.unit, order=10)
