"""A reading held against limits: pass, fail or undecided, edition by edition."""

import math
from collections.abc import Iterator

from triage.errors import InvalidValue
from triage.frozen import frozen
from triage.limits import Edition, Limit


@frozen
class Comparison:
    """A reading held against one limit.

    Args:
        limit: the row. verdict: `pass`, `fail` or `undecided`.
        margin: room left as share of the limit, negative beyond it; None when undecided.
    """

    limit: Limit
    verdict: str
    margin: float | None


@frozen
class Judgement:
    """A reading held against every applicable row of one edition.

    Args:
        edition: all rows are of this edition. verdict: `fail` if any row fails, `pass` only if
            every row passes. comparisons: one a row. disputed: rows that disagree in verdict
            stem from sources that disagree, so the edition must be read.
    """

    edition: Edition
    verdict: str
    comparisons: tuple[Comparison, ...]
    disputed: bool


def compare(reading: float, bound: str, limit: Limit) -> Comparison:
    """Hold one reading against one limit.

    Args:
        reading: in SI of the limit's kind; 0 or more.
        bound: empty for a value; `<`, `≤`, `>` or `≥` for a reading beyond the range.
        limit: the row.

    Returns:
        Verdict and margin; a bound that leaves both outcomes open is `undecided`.

    Raises:
        InvalidValue: reading negative or not a number, or another bound sign.
    """
    if not 0 <= reading < math.inf or bound not in ("", "<", "≤", ">", "≥"):
        raise InvalidValue(f"cannot hold '{bound}{reading!r}' against a limit")
    room = limit.value - reading if limit.sense == "max" else reading - limit.value
    if math.isclose(reading, limit.value, rel_tol=1e-9):
        room = 0.0  # 0.1 mA and 100 uA differ in binary
    towards_pass = (bound in ("<", "≤")) == (limit.sense == "max")
    if bound in ("<", ">") and room == 0:
        good = towards_pass  # the reading itself is excluded
    else:
        good = room > 0 or (room == 0 and not limit.strict)
    if bound and good != towards_pass:
        return Comparison(limit, "undecided", None)
    return Comparison(limit, "pass" if good else "fail", room / limit.value)


def judge(reading: float, bound: str, rows: tuple[Limit, ...]) -> tuple[Judgement, ...]:
    """Hold a reading against rows, edition by edition; reference rows give no verdict.

    Args:
        reading: in SI. bound: as `compare`. rows: from `Limits.find`; all of one kind.

    Returns:
        One judgement an edition in the order of the rows; none for no rows, which is no pass.

    Raises:
        InvalidValue: rows of different kinds of quantity.
    """
    used = [row for row in rows if row.check != "reference"]
    if len({row.kind for row in used}) > 1:
        raise InvalidValue("rows of different kinds of quantity cannot share one reading")
    return tuple(_judgements(reading, bound, used))


def _judgements(reading: float, bound: str, rows: list[Limit]) -> Iterator[Judgement]:
    for edition in dict.fromkeys(row.edition for row in rows):
        found = tuple(compare(reading, bound, row) for row in rows if row.edition == edition)
        verdicts = {each.verdict for each in found}
        disputed = {each.verdict for each in found if each.limit.disputed}
        worst = next(word for word in ("fail", "undecided", "pass") if word in verdicts)
        yield Judgement(edition, worst, found, len(disputed) > 1)
