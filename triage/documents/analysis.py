"""The analysis part of the report: ranking, physics, what it hangs on, checks still open."""

from collections.abc import Iterator, Sequence
from dataclasses import replace
from functools import lru_cache
from typing import Any

from triage import words as w
from triage.assessment import Assessment
from triage.conditions import Conditions
from triage.disposition import NOT_VALID
from triage.documents.charts import (
    CauseRange,
    HumidityCurve,
    HumidityMark,
    cause_ranges,
    voltage_against_humidity,
    weights,
)
from triage.documents.check_guide import open_check_blocks
from triage.documents.electrical import electrical_blocks, other_source_blocks
from triage.documents.look_back import look_back_blocks
from triage.documents.readings import reading_lines
from triage.documents.static_detail import static_lines
from triage.documents.summary import best_of, rests_on
from triage.documents.witnesses import witness_lines
from triage.documents.wording import (
    LEVEL_NAME,
    amount,
    amount_range,
    item_name,
    likelihood,
    meaning,
    percent,
    percent_range,
    spoken,
)
from triage.electrical_exposure import ELECTRICAL_CAUSES
from triage.errors import InvalidValue
from triage.exposure import widest_conditions
from triage.knowledge import knowledge
from triage.materials import load
from triage.physics.humidity import Humidity
from triage.static_exposure import Measured, static_exposure, story

Block = dict[str, Any]
_CURVE_HUMIDITY = (10, 20, 30, 40, 50, 60, 70, 80)


def analysis_sections(a: Assessment) -> list[dict[str, Any]]:
    """Every section of the analysis part."""
    found = [
        ("Ranked causes", True, _ranking(a)),
        ("What speaks for and against", True, _weights(a)),
        ("What does not fit", False, _misfits(a)),
        ("Voltage and humidity", True, _humidity(a)),
        ("What was physically possible", True, _physics(a)),
        ("Mains current, contact by contact", True, electrical_blocks(a)),
        ("What the readings mean", False, [_list(list(reading_lines(a)))]),
        ("Sources besides mains leakage", True, other_source_blocks(a)),
        ("Red flags", False, [_list(list(_flags(a)))]),
        ("Why this disposition", False, _why(a)),
        ("Checks still open", False, open_check_blocks(a)),
        ("Look-back after the defect", False, look_back_blocks(a)),
        ("Actions", False, [_list(list(_actions(a)))]),
    ]
    return [
        {"title": title, "wide": wide, "blocks": [b for b in blocks if b]}
        for title, wide, blocks in found
        if any(blocks)
    ]


def _list(lines: list[str]) -> Block:
    return {"kind": "list", "lines": lines} if lines else {}


def _note(text: str) -> Block:
    return {"kind": "text", "text": text, "class": "note"}


def _ranking(a: Assessment) -> list[Block]:
    k = knowledge()
    shown = [c for c in a.posterior.ranked if a.sensitivity.ranges[c].high >= 0.02][:9]
    rows = [
        CauseRange(k.causes[c].name, r.low, r.point, r.high, k.causes[c].mechanism == "mains")
        for c in shown
        if (r := a.sensitivity.ranges[c])
    ]
    said = "; ".join(
        f"{row.label} about {percent(row.middle)}, range {percent(row.low)} to {percent(row.high)}"
        for row in rows
    )
    chart = cause_ranges(rows, alt=f"Ranked causes with their ranges: {said}.")
    table = {
        "kind": "table",
        "columns": [{"name": n, "width": x} for n, x in
                    (("Cause", 46), ("In words", 18), ("About", 14), ("Range", 22))],
        "rows": [[k.causes[c].name, likelihood(a.posterior.of(c)), percent(a.posterior.of(c)),
                  percent_range(a.sensitivity.ranges[c])] for c in shown],
    }  # fmt: skip
    caption = "Causes of the sensation, with the range that the judged numbers leave (9 in 10)."
    firm = {"stable": "stable", "leaning": "leaning only", "open": "open"}[a.sensitivity.firmness]
    hangs_on = "; ".join(spoken(each) for each in a.sensitivity.hangs_on)
    return [
        {"kind": "chart", "svg": chart, "caption": caption}, table,
        _note(f"First rank: {firm}. It hangs most on: {hangs_on}."),
    ]  # fmt: skip


def _weights(a: Assessment) -> list[Block]:
    k = knowledge()
    first, second = (k.causes[c].name for c in a.posterior.pair)
    lines = [(spoken(x.label), -x.decibans) for x in a.posterior.weights if abs(x.decibans) >= 0.05]
    total = sum(x.decibans for x in a.posterior.weights)
    if not lines:
        return []
    said = "; ".join(f"{spoken(x.label)} {x.decibans:+.1f}" for x in a.posterior.weights)
    chart = weights(lines, sides=(first, second), alt=f"Weights in decibans for {first}: {said}.")
    return [
        {"kind": "chart", "svg": chart,
         "caption": f"Weights in decibans (10 log of the odds) for {first.lower()} against "
                    f"{second.lower()}: each bar points to the cause it speaks for; together "
                    f"{abs(total):.1f} for {(first if total >= 0 else second).lower()}."},
    ]  # fmt: skip


def _misfits(a: Assessment) -> list[Block]:
    k = knowledge()
    lines = [
        f"{o.finding.name}, {o.state.replace('_', ' ')}: the first cause almost never gives this."
        for o in a.misfits
    ]
    for finding, value in sorted(a.posterior.conflicts.items(), key=lambda p: -p[1]):
        if value >= 0.7:
            lines.append(f"All other facts speak against: {k.findings[finding].name}.")
    return [_list(lines + witness_lines(a))]


def _humidity(a: Assessment) -> list[Block]:
    """Voltage of the leading static story against humidity, with this incident on it."""
    cause = best_of(a, "static")
    if cause is None:
        return []
    try:
        curve = _curve(cause, replace(a.exposure.conditions, humidity=None, humidity_text=""))
    except InvalidValue as error:
        return [_note(f"No curve: {error}")]
    mark = _mark(a, cause)
    felt = _felt_band(cause, a)
    name = knowledge().causes[cause].name
    alt = (
        f"{name}: middle voltage {amount(curve.median[0], 'voltage')} at {curve.humidity[0]} % and "
        f"{amount(curve.median[-1], 'voltage')} at {curve.humidity[-1]} % relative humidity."
    )
    if mark is not None:
        alt += f" This incident: {mark.humidity:.0f} %, {amount(mark.voltage, 'voltage')}."
    svg = voltage_against_humidity(curve, incident=mark, felt=felt, alt=alt)
    caption = f"{name}, on {rests_on(a)}; band: 9 in 10. The felt band is for this capacitance."
    return [{"kind": "chart", "svg": svg, "caption": caption}]


@lru_cache(maxsize=64)
def _curve(cause: str, conditions: Conditions) -> HumidityCurve:
    middles, lows, highs = [], [], []
    for percent_rh in _CURVE_HUMIDITY:
        here = replace(conditions, humidity=Humidity(percent_rh / 100, 0.0))
        volts = static_exposure(story(cause, here, Measured(), widest_conditions())).voltage
        low, high = volts.interval()
        middles.append(volts.median)
        lows.append(low)
        highs.append(high)
    return HumidityCurve(_CURVE_HUMIDITY, middles, lows, highs)


def _mark(a: Assessment, cause: str) -> HumidityMark | None:
    exposure, humidity = a.exposure.causes[cause].static, a.exposure.conditions.humidity
    if exposure is None or humidity is None:
        return None
    low, high = exposure.voltage.interval()
    return HumidityMark(
        "This incident", humidity.fraction * 100, exposure.voltage.median, low, high
    )


def _felt_band(cause: str, a: Assessment) -> tuple[float, float]:
    """Voltage at which one in ten and nine in ten would feel it, for this capacitance."""
    exposure = a.exposure.causes[cause].static
    threshold = exposure.threshold if exposure else load().threshold("felt")
    # Two floating bodies pass less than C V: the charge that passes decides.
    farads = exposure.charge.median / exposure.voltage.median if exposure else 1.3e-10
    return threshold.quantile(0.1) / farads, threshold.quantile(0.9) / farads


def _physics(a: Assessment) -> list[Block]:
    k, rows = knowledge(), []
    for cause in a.posterior.ranked:
        each = a.exposure.causes[cause]
        if each.static is not None:
            s = each.static
            rows.append([k.causes[cause].name, amount(s.voltage.median, "voltage"),
                         amount_range(s.voltage.interval(), "voltage"),
                         f"{percent(s.felt.value)} ({percent_range(s.felt)})",
                         f"charge {amount(s.charge.median, 'charge')}, "
                         f"energy {amount(s.energy.median, 'energy')}"])  # fmt: skip
        elif each.unknown and cause not in ELECTRICAL_CAUSES:
            rows.append([k.causes[cause].name, "not known", "", "", each.unknown])
    columns = (("If it was", 30), ("Middle", 11), ("Range, 9 in 10", 19),
               ("Felt", 20), ("With it", 20))  # fmt: skip
    table = {
        "kind": "table",
        "columns": [{"name": n, "width": x} for n, x in columns],
        "rows": rows,
    }
    taken = "; ".join(a.exposure.notes)
    return [
        table, _list(list(static_lines(a))),
        _note(f"Taken for granted: {taken}. These estimates do not clear any item."),
    ]  # fmt: skip


def _flags(a: Assessment) -> Iterator[str]:
    for each in a.flags:
        state = "cleared" if each.cleared else "stands"
        where = ", ".join(item_name(a.incident, i) for i in each.items) or "the place"
        clearing = each.missing[0].upper() + each.missing[1:]
        yield f"{each.flag.name}, {state}: {each.because}; {where}. {clearing.rstrip('.')}."


def _why(a: Assessment) -> list[Block]:
    lines = [
        f"{item_name(a.incident, each.item)}: {LEVEL_NAME[each.level].lower()}, because "
        f"{'; '.join(each.reasons)}."
        for each in a.items
    ]
    blocks: list[Block] = [_list(lines)]
    if a.gate.open:
        upper = percent(a.gate.upper or 0.0)
        blocks.append(_note(
            "Static may be the disposition: every condition holds, and a mains fault is at most "
            f"{upper} probable at the upper limit."
        ))  # fmt: skip
    else:
        blocks.append(_note("Static is not the disposition, and this would have to change:"))
        blocks.append(_list(list(_shut(a.gate.shut_by))))
    return blocks


def _shut(reasons: Sequence[str]) -> Iterator[str]:
    """What keeps the gate shut; the open checks of one item share a line."""
    open_checks: dict[str, list[str]] = {}
    rest = []
    for reason in reasons:
        item, colon, check = reason.partition(": ")
        if colon and check.endswith(NOT_VALID):
            open_checks.setdefault(item, []).append(check.removesuffix(NOT_VALID).lower())
        else:
            rest.append(reason[0].upper() + reason[1:] + ".")
    for item, checks in open_checks.items():
        yield f"{item}, not done and valid: {'; '.join(checks)}."
    yield from rest


def _actions(a: Assessment) -> Iterator[str]:
    for each in a.incident.outcome.actions:
        parts = [each.what or "not named", f"owner {each.owner}" if each.owner else "no owner",
                 f"due {each.due.text}" if each.due else "no date",
                 f"done {each.done.text}" if each.done else "open",
                 f"verified: {each.verified}" if each.verified else ""]  # fmt: skip
        yield "; ".join(p for p in parts if p) + "."
    outcome = a.incident.outcome
    if outcome.risk_accepted_by:
        until = f" until {outcome.risk_accepted_until.text}" if outcome.risk_accepted_until else ""
        plan = f"; watch plan: {outcome.watch_plan}" if outcome.watch_plan else ""
        yield f"Undetermined; residual risk accepted by {outcome.risk_accepted_by}{until}{plan}."
    if outcome.confirmed_cause:
        cause = knowledge().causes.get(outcome.confirmed_cause)
        name = cause.name if cause else outcome.confirmed_cause
        how = meaning(w.HOW_CONFIRMED, outcome.how_confirmed)
        yield f"Confirmed cause: {name}, {how}."
