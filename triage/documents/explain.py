"""One estimate unfolded: value, formula, each source, its share, what measuring would save."""

from collections.abc import Callable, Iterator, Mapping
from dataclasses import dataclass
from difflib import get_close_matches

from triage.assessment import Assessment
from triage.bounds import Basis, Probability
from triage.documents.static_detail import MEASURED_BY, reenactment, source_name
from triage.documents.wording import amount, amount_range, percent, percent_range
from triage.errors import InvalidValue
from triage.estimate import Estimate
from triage.exposure import CauseExposure
from triage.knowledge import knowledge
from triage.materials import load
from triage.static_consequences import (
    READ_AT_ONCE,
    current,
    decay,
    lasting,
    noticed,
    saved_by_voltage,
    shares,
)
from triage.static_exposure import StaticExposure

KIND_NAME = {"measured": "measured", "default": "assumed", "derived": "derived"}
"""How a source came about, in words."""
_CHARGING = {
    "person_walking": "charging current into the resistance to earth of shoes and floor, at most "
    "the voltage of the materials without a leak: I R V0 / (I R + V0); less while walking was "
    "short (1 - exp(-t / R C)) and after a pause (exp(-t / R C))",
    "person_rising": "charge separated by the act over the capacitance, held under the corona "
    "limit, less what leaks away in the pause (exp(-t / R C))",
    "charged_object": "charging current of rolling into the resistance to earth of wheels and "
    "floor, at most the voltage without a leak: I R V0 / (I R + V0); less after a pause",
    "induction": "voltage of the plastic surface times Cc / (Cc + C), the divider of the "
    "capacitances from plastic to person and from person to earth",
}


@dataclass(frozen=True, slots=True)
class Quantity:
    """One estimate that can be explained.

    Args:
        title: what it is. kind: of quantity, empty for a probability.
        estimate: the value, or for a probability stimulus over threshold.
        formula: how it is made from its inputs.
        chance: the probability, None for a quantity.
    """

    title: str
    kind: str
    estimate: Estimate
    formula: str
    chance: Probability | None = None


def names(a: Assessment) -> tuple[str, ...]:
    """The names of everything this assessment can explain."""
    found = []
    for cause, each in a.exposure.causes.items():
        if each.static is not None:
            found += [f"{cause}.{name}" for name in _static(cause, each.static)]
        if each.electrical is not None:
            found += [f"{cause}.{name}" for name in _electrical(each)]
    return (*found, *(["ceiling"] if a.exposure.ceiling is not None else []))


def explain(a: Assessment, name: str) -> tuple[str, ...]:
    """One estimate unfolded, as lines.

    Args:
        a: the assessment.
        name: one of `names`.

    Raises:
        InvalidValue: no such name; the text lists those there are.
    """
    known = names(a)
    if name not in known:
        raise InvalidValue(_unknown(a, name, known))
    if name == "ceiling":
        return tuple(_ceiling(a))
    cause, _, quantity = name.partition(".")
    each = a.exposure.causes[cause]
    makers = _static(cause, each.static) if each.static is not None else _electrical(each)
    found = makers[quantity]()
    title = f"{name}: {found.title}, if it was {knowledge().causes[cause].name.lower()}"
    return (title, *_lines(found, cause, each))


def _unknown(a: Assessment, name: str, known: tuple[str, ...]) -> str:
    cause = name.partition(".")[0]
    each = a.exposure.causes.get(cause)
    if each is not None and each.felt is None:
        return f"'{cause}' has no estimate: {each.unknown or 'there is no model of it'}"
    near = get_close_matches(name, known, n=1)
    hint = f"; did you mean '{near[0]}'" if near else ""
    return f"no estimate '{name}'{hint}; known: {', '.join(known)}"


def _static(cause: str, spark: StaticExposure) -> Mapping[str, Callable[[], Quantity]]:
    """What can be explained of a static cause, computed when asked for."""
    wiped = spark.told.wiped
    charging = "read with a meter after the same act" if "measured_voltage" in (
        spark.voltage.basis
    ) else "voltage of the wiped surface" if wiped else _CHARGING[cause]  # fmt: skip
    passing = "capacitance times voltage" if spark.other is None else (
        "voltage times the capacitance that two floating bodies share, C1 C2 / (C1 + C2)"
    )  # fmt: skip
    if wiped:
        passing = "charge that one spark takes from an insulating surface, not C V of a body"
    found: dict[str, Callable[[], Quantity]] = {
        "voltage": lambda: Quantity("voltage before the touch", "voltage", spark.voltage, charging),
        "capacitance": lambda: Quantity(
            "capacitance to earth", "capacitance", spark.capacitance, "table, size or reading"
        ),
        "charge": lambda: Quantity("charge that passes", "charge", spark.charge, passing),
        "energy": lambda: Quantity(
            "energy of the spark", "energy", spark.energy, "half the charge times the voltage"
        ),
        "current": lambda: Quantity(
            "peak current", "current", current(spark), "0.8 V / (body path + arc)"
        ),
        "duration": lambda: Quantity(
            "duration of the spark", "duration", lasting(spark), "3 R C of the body path"
        ),
        "felt": lambda: _chance("felt", spark),
    }
    found |= {n: _maker(n, spark) for n in ("unpleasant", "painful", "heard", "seen")}
    gone, left = decay(spark), spark.remaining
    if gone is not None:
        words = "R C ln(V / 100 V), from the middle voltage"
        found["decay"] = lambda: Quantity("time to fall under 100 V", "duration", gone, words)
    if left is not None:
        words_left = "C1 V / (C1 + C2): what two floating bodies keep after the spark"
        found["remaining"] = lambda: Quantity("voltage left on both", "voltage", left, words_left)
    return found


def _maker(name: str, spark: StaticExposure) -> Callable[[], Quantity]:
    return lambda: _chance(name, spark)


def _chance(name: str, spark: StaticExposure) -> Quantity:
    """P(noticed) as the distance of the stimulus from the threshold of people."""
    by_charge = name not in ("heard", "seen")
    stimulus = spark.charge if by_charge else spark.voltage
    threshold = load().threshold(name, held_metal=by_charge and spark.told.touch.held_metal)
    chance = spark.felt if name == "felt" else noticed(spark)[name]
    what = "charge" if by_charge else "voltage"
    formula = (
        f"share of cases in which the {what} exceeds the threshold of the person, lognormal over "
        f"people around {amount(threshold.median, what)}; the range is left by what is not known "
        "about model and threshold"
    )
    return Quantity(f"chance that it is {name}", "", stimulus.over(threshold, ""), formula, chance)


def _electrical(each: CauseExposure) -> Mapping[str, Callable[[], Quantity]]:
    found = each.electrical
    if found is None:
        return {}
    how = "voltage of the source over its impedance and that of the body, shoes and floor"
    felt = "share of cases in which the current exceeds the more sensitive perception curve"
    return {
        "current": lambda: Quantity("current through the person", "current", found.current, how),
        "felt": lambda: Quantity(
            "chance that it could be felt", "", found.current, felt, found.felt
        ),
    }


def _lines(found: Quantity, cause: str, each: CauseExposure) -> Iterator[str]:
    if found.chance is not None:
        yield f"  {percent(found.chance.value)}, range {percent_range(found.chance)}."
    else:
        middle = amount(found.estimate.median, found.kind)
        span = amount_range(found.estimate.interval(), found.kind)
        yield f"  Middle {middle}; 9 in 10: {span}."
    yield f"  How: {found.formula}."
    if found.kind in ("voltage", "") and each.factor != 1:
        yield (
            f"  In the ranking: P(felt) here over P(felt) under reference conditions, with what is "
            f"not known neutral and bounded by the table: {each.factor:.2g}."
        )
    yield "  Inputs, by their share of the spread (variance of the logarithm):"
    yield from (f"  - {line}" for line in _inputs(found.estimate, cause))


def _inputs(estimate: Estimate, cause: str) -> Iterator[str]:
    """Each named source, the largest share first; then those without a share of their own."""
    found = {each.source: each for each in shares(estimate)}
    joint = sum(share.share for source, share in found.items() if source.startswith("interaction"))
    for source, each in found.items():
        if source.startswith("interaction"):
            continue
        basis = estimate.basis.get(source)
        line = f"{_input(source, basis)} Share {percent(each.share)}."
        if source in MEASURED_BY and basis is not None and basis.kind != "measured":
            saved = percent(each.saved)
            line += f" Measuring it ({MEASURED_BY[source]}) would narrow the range by {saved}."
        yield line
    if joint > 0:
        yield f"Several of these together. Share {percent(joint)}."
    yield from (
        f"{_input(source, basis)} No share of its own."
        for source, basis in estimate.basis.items()
        if source not in found
    )
    if any(source in found for source in READ_AT_ONCE):
        saved = percent(saved_by_voltage(estimate))
        yield (
            f"Reading the voltage ({reenactment(cause)}) replaces charging, materials, path and "
            f"the doubt about the model at once and would narrow the range by {saved}."
        )


def _input(source: str, basis: Basis | None) -> str:
    name = source_name(source)
    if basis is None:
        return f"{name[0].upper()}{name[1:]}."
    note = f", {basis.note}" if basis.note else ""
    cited = f" {basis.citation.text()}." if basis.citation is not None else ""
    kind = KIND_NAME[basis.kind]
    return f"{name[0].upper()}{name[1:]}, {kind}: {basis.source}{note}.{cited}"


def _ceiling(a: Assessment) -> Iterator[str]:
    found = a.exposure.ceiling
    yield "ceiling: the most that one line of an isolated supply could drive to earth"
    if found is None:
        return
    if found.value is not None:
        yield f"  {amount(found.value, 'current')} by the monitor's reading and its tolerance."
    yield (
        "  It holds for one line to earth only."
        if found.holds
        else (f"  It binds nothing: {'; '.join(found.void)}.")
    )
