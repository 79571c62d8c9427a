"""Readings on record in words: what they mean, what they do not, how far from which limit."""

from collections.abc import Iterator

from triage.assessment import Assessment
from triage.documents.wording import NBSP, amount, item_name
from triage.limits import Limit
from triage.physics.touch_current import Mains
from triage.quantity import worded
from triage.reading_guide import (
    MONITOR_CHECKS,
    IsolatedTest,
    Lines,
    Loaded,
    OutletExample,
    Step,
    Threshold,
    alarm_thresholds,
    example_limits,
    isolated_tests,
    line_voltages,
    loaded_metal,
    other_editions,
    plug_steps,
)
from triage.validity import CheckVerdict
from triage.verdict import Comparison, Judgement

_DEFAULT = "the program's default"
_VERDICT = {"pass": "kept", "fail": "not kept", "undecided": "left open by the reading"}


def reading_lines(a: Assessment) -> tuple[str, ...]:
    """Every reading that needs explaining, once."""
    c = a.exposure.conditions
    mains = Mains(c.voltage, c.frequency)
    found = [
        *(_lines(each, a) for each in line_voltages(a.incident, a.verdicts)),
        *(_loaded(each, a) for each in loaded_metal(a.verdicts, c.frequency)),
        *(_step(each, a) for each in plug_steps(a.verdicts, mains)),
        *_isolated(list(isolated_tests(a.verdicts, mains)), a),
        *_thresholds(alarm_thresholds(a.incident, a.site)),
    ]
    return tuple(dict.fromkeys(found))


def _lines(found: object, a: Assessment) -> str:
    if not isinstance(found, Lines):
        where = item_name(a.incident, getattr(found, "of", None))
        return (
            f"Line voltages at {where}: both values to earth and the one between the lines, in "
            "that order in the remark, are needed to read them."
        )
    total = found.first + found.second
    advice = {
        "balanced": "A healthy supply looks like this; so does one with a device whose earth is "
        "open, and one with equal faults on both lines.",
        "first_fault": "A small supply that the meter loads looks the same: it is compared with "
        "the monitor. With a first fault the other line is fully live to earth.",
        "mixed_leakage": "That is no fault by itself.",
        "unbalanced": "Which item does it, the plug test shows, once nobody depends on the supply.",
        "not_this_supply": "The values are read again with the list of what was plugged in.",
    }[found.read.picture]
    return (
        f"Line voltages at {item_name(a.incident, found.check.of)}: "
        f"{amount(found.first, 'voltage', 3)} and {amount(found.second, 'voltage', 3)} to earth, "
        f"together {amount(total, 'voltage', 3)}, {amount(found.between, 'voltage', 3)} between "
        f"the lines. {found.read.means} {advice} Volts say nothing about current."
    )


def _loaded(found: Loaded, a: Assessment) -> str:
    where = item_name(a.incident, found.check.of)
    text = (
        f"Metal of {where}: {amount(found.loaded, 'voltage')} across "
        f"{amount(found.meter, 'resistance')} is {amount(found.current, 'current')} at that "
        f"moment, and at most {amount(found.most, 'current')} through a person."
    )
    if found.open_voltage is None:
        return text + " The reading of the meter alone is missing: it tells a source from a ghost."
    text += f" The meter alone showed {amount(found.open_voltage, 'voltage')}:"
    if found.capacitance is None:
        return text + " it stays up under load, so a source is able to deliver current."
    return (
        f"{text} it collapses under load, so it comes through a capacitance of about "
        f"{amount(found.capacitance, 'capacitance')}, a phantom voltage. A filter behind an open "
        "earth does that, and its current can be felt; the earth decides, not the volts."
    )


def _step(found: Step, a: Assessment) -> str:
    times = found.step / found.ordinary
    size = (
        f"{times:.0f} times that of a device with an ordinary filter"
        if times >= 3 else "of the size of a device with an ordinary filter"
    )  # fmt: skip
    return (
        f"Plug test at {item_name(a.incident, found.check.of)}: the largest step, "
        f"{amount(found.step, 'current')}, is {size} "
        f"({amount(found.ordinary, 'current')} at this supply). A device that gives no step "
        "while its sisters do may have an open earth; panels that show tenths of a milliampere "
        "make that a hint only."
    )


def _isolated(found: list[IsolatedTest], a: Assessment) -> Iterator[str]:
    """Each test with its retest, then the numbers once."""
    for each in found:
        v = each.verdict
        name = v.kind.name if v.kind else ""
        supply = "an isolated outlet" if v.check.supply else "an outlet whose supply is not known"
        failed = v.state == "invalid_fail"
        worth = ("a fail from there proves no fault, and the item stays on hold" if failed
                 else "a pass from there clears nothing")  # fmt: skip
        yield (
            f"{name} of {item_name(a.incident, v.check.of)}, made from {supply}: {worth}; "
            f"{each.row.why}. Instead: {each.row.instead}."
        )
    examples = next((each.examples for each in found if each.examples), ())
    if examples:
        yield _examples(examples)


def _examples(examples: tuple[OutletExample, ...]) -> str:
    open_limit, intact_limit = (amount(x, "current") for x in example_limits())
    rows = "; ".join(
        f"{e.name} reads {amount(e.earthed, 'current')} on an earthed supply, "
        f"{amount(e.quiet, 'current')} on a quiet isolated one and {amount(e.loaded, 'current')} "
        "on one with much plugged in"
        for e in examples
    )
    return (
        "Computed for this supply, earth open, through 1 kΩ: " + rows + ". Held against "
        f"{intact_limit} the good one can fail, and held against {open_limit} the deadly one can "
        "pass: the current returns only through what else is plugged in. The same value in both "
        "polarities is a sign of a sheet taken on isolated power."
    )


def _thresholds(found: tuple[Threshold, ...]) -> Iterator[str]:
    """The monitor's reading beside the alarm value of each edition, each edition by itself."""
    for kind, unit in (("current", "milliamperes"), ("resistance", "ohms")):
        rows = [_threshold(each) for each in found if each.limit.kind == kind]
        if rows:
            yield f"Alarm of a monitor in {unit}: {'; '.join(rows)}."


def _threshold(found: Threshold) -> str:
    row = found.limit
    side = {"pass": "not reached", "fail": "reached", "undecided": "left open by the reading"}
    standing = {"named": "in force here", "taken": _DEFAULT, "other": "not in force here"}
    warning = f", {row.warning}" if row.warning else ""
    return (
        f"{row.edition.text()}, {standing[found.standing]}, {row.text.replace(' ', NBSP)}: "
        f"{side[found.comparison.verdict]}{_room(found.comparison)}{warning}"
    )


def limit_lines(a: Assessment) -> tuple[str, ...]:
    """Each reading with its limit and the room left; an edition never shares a sentence.

    After them the editions not in force that decide otherwise, and the last good values.
    """
    judged = [v for v in a.verdicts if v.value is not None and v.judgements]
    found = [_limit_line(v, j, a) for v in judged for j in v.judgements]
    for v in judged:
        others = [j for j in other_editions(v, a.incident) if j.verdict != v.judgements[0].verdict]
        found += [_other_line(v, j, a) for j in others]
    found += _last_good(judged, a)
    return tuple(dict.fromkeys(found))


def _limit_line(v: CheckVerdict, judged: Judgement, a: Assessment) -> str:
    rows = "; ".join(f"{_side(c.limit)}: {_VERDICT[c.verdict]}{_room(c)}"
                     for c in judged.comparisons)  # fmt: skip
    text = f"{_what(v, a)}, by {judged.edition.text()}, {_force(v, a)}: {rows}."
    if v.state.startswith("invalid"):
        text += " This result does not count."
    if judged.disputed:
        text += " Sources print both values and they disagree here: the edition must be read."
    return text


def _force(v: CheckVerdict, a: Assessment) -> str:
    kind = v.kind.id if v.kind else ""
    checks = MONITOR_CHECKS if kind in MONITOR_CHECKS else (kind,)
    named = any(e.check in checks and e.edition for e in a.site.file.editions)
    return "in force here" if named else _DEFAULT


def _other_line(v: CheckVerdict, judged: Judgement, a: Assessment) -> str:
    rows = "; ".join(f"{_side(c.limit)}: {_VERDICT[c.verdict]}" for c in judged.comparisons)
    return f"{_what(v, a)}, {judged.edition.text()} decides otherwise, not in force here: {rows}."


def _what(v: CheckVerdict, a: Assessment) -> str:
    name = v.kind.name if v.kind else ""
    value = v.value.text if v.value else ""
    return f"{name} of {item_name(a.incident, v.check.of)}, {value.replace(' ', NBSP)}"


def _side(limit: Limit) -> str:
    side = "at most" if limit.sense == "max" else "at least"
    known = "" if limit.citation.known == "published" else f" ({limit.citation.known})"
    return f"{side} {limit.text.replace(' ', NBSP)}{known}"


def _room(found: Comparison) -> str:
    """Room left as a share of the limit, or how many times the limit it is."""
    margin, most = found.margin, found.limit.sense == "max"
    if margin is None:
        return ""
    if margin == 0:
        return ", exactly at it"
    if abs(margin) < 1:
        beyond = "over" if most else "under"
        share = f"{_digits(abs(margin) * 100)}{NBSP}%"
        return f", {share} of it left" if margin > 0 else f", {share} {beyond} it"
    return f", {_digits(1 - margin if most else 1 + margin)} times it"


def _digits(value: float) -> str:
    """Two significant digits without an exponent."""
    return worded(value, "humidity_points").split(" ")[0]


def _last_good(judged: list[CheckVerdict], a: Assessment) -> list[str]:
    """The last good values of every item with a reading: what it is compared with."""
    read = {v.check.of for v in judged}
    return [
        f"{item_name(a.incident, i.id)}, last good test"
        f"{f' of {i.last_good.text}' if i.last_good else ''}: {i.last_good_value}."
        for i in a.incident.items if i.id in read and i.last_good_value
    ]  # fmt: skip
