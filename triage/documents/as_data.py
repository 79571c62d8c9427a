"""The assessment as plain data: for other programs, and attached to the report."""

import json
from typing import Any

from triage.assessment import Assessment
from triage.documents.sources import sources
from triage.documents.summary import Summary
from triage.estimate import Estimate
from triage.exposure import CauseExposure
from triage.history import History


def as_data(a: Assessment, s: Summary, earlier: History | None = None) -> dict[str, Any]:
    """Conclusions with full digits beside the words; the same order as the printed page.

    Args:
        a: the assessment. s: its summary. earlier: reports on the same things, if looked up.
    """
    return {
        "schema": a.schema,
        "case": a.record.case,
        "record": a.incident.id,
        "digests": {"record": a.record.digest, "site": a.site.digest, "knowledge": a.knowledge},
        "program": a.version,
        "at": a.at.text if a.at else None,
        "person": {"urgency": a.care.urgency, "actions": list(s.person),
                   "reviews": list(s.reviews)},
        "condition": s.condition,
        "headline": a.headline.name.lower(),
        "items": [
            {"item": i.item, "disposition": i.level.name.lower(), "reasons": list(i.reasons),
             "would_change": list(i.would_change), "missing": list(i.missing)}
            for i in a.items
        ],
        "room": {"disposition": a.room.level.name.lower(), "reasons": list(a.room.reasons)},
        "defects": [
            {"item": d.item, "check": d.check, "text": d.text} for d in a.evidence.defects
        ],
        "causes": _causes(a),
        "undetermined": 1 - sum(a.posterior.of(each) for each in a.posterior.ranked),
        "firmness": a.sensitivity.firmness,
        "mains": {"low": a.sensitivity.mains.low, "point": a.sensitivity.mains.point,
                  "high": a.sensitivity.mains.high},
        "weights": {"pair": list(a.posterior.pair),
                    "decibans": [[each.label, each.decibans] for each in a.posterior.weights]},
        "conflicts": dict(sorted(a.posterior.conflicts.items())),
        "findings": {
            name: {"state": o.state, "measured": o.measured}
            for name, o in sorted(a.evidence.observed.items())
        },
        "disagreements": {f: dict(said) for f, said in sorted(a.evidence.disagreements.items())},
        "testimony": {
            "matters": a.testimony.matters,
            "each": [{"statement": b.statement, "first": b.first, "probability": b.probability,
                      "mains": b.mains} for b in a.testimony.each],
        },
        "look_back": [
            {"question": each.question.id, "answer": each.answer, "by": each.by}
            for each in a.look_back
        ],
        "earlier": _earlier(earlier),
        **_judged(a),
        "next_checks": [
            {"check": n.kind.id, "item": n.item, "mandatory": n.mandatory, "bits": n.bits,
             "performer": n.kind.performer, "after": list(n.after)}
            for n in a.next_checks
        ],
        "unknown": list(s.unknown),
        "questions": list(s.questions),
        "cautions": list(s.cautions),
        "sources": [
            {"what": name, "source": c.source, "place": c.place, "known": c.known}
            for name, c in dict.fromkeys(sources(a))
        ],
    }  # fmt: skip


def as_json(data: Any) -> str:
    """Data as JSON text; a character that could act on a terminal is written as its escape."""
    text = json.dumps(data, ensure_ascii=False, indent=1)
    if text.replace("\n", "").isprintable():
        return text
    return "".join(c if c.isprintable() or c == "\n" else json.dumps(c)[1:-1] for c in text)


def _judged(a: Assessment) -> dict[str, Any]:
    """Red flags, gate and checks."""
    return {
        "red_flags": [
            {"flag": f.flag.id, "because": f.because, "items": list(f.items),
             "cleared": f.cleared, "clearing": f.missing}
            for f in a.flags
        ],
        "gate": {"open": a.gate.open, "shut_by": list(a.gate.shut_by), "upper": a.gate.upper,
                 "threshold": a.gate.threshold},
        "checks": [
            {"check": v.check.id, "kind": v.check.kind, "of": v.check.of, "state": v.state,
             "as_left": v.as_left, "reasons": list(v.reasons),
             "limit": v.limit.id if v.limit else None}
            for v in a.verdicts
        ],
    }  # fmt: skip


def _earlier(found: History | None) -> dict[str, Any] | None:
    if found is None:
        return None
    return {
        "looked_at": found.looked_at,
        "surveys": [{"kind": mark.kind, "name": mark.name, "cases": list(cases)}
                    for mark, cases in found.surveys],
        "reports": [{"case": r.case, "when": r.when, "ended": r.ended, "says": r.says,
                     "shared": [[mark.kind, mark.name] for mark in r.shared]}
                    for r in found.reports],
    }  # fmt: skip


def _causes(a: Assessment) -> list[dict[str, Any]]:
    rows = []
    for cause in a.posterior.ranked:
        found = a.sensitivity.ranges[cause]
        rows.append({
            "cause": cause, "prior": a.posterior.prior[a.posterior.causes.index(cause)],
            "low": found.low, "point": found.point, "high": found.high,
            "physics": _physics(a.exposure.causes[cause]),
        })  # fmt: skip
    return rows


def _physics(each: CauseExposure) -> dict[str, Any]:
    found: dict[str, Any] = {"factor": each.factor}
    if each.unknown:
        found["unknown"] = each.unknown
    if each.felt is not None:
        found["felt"] = {"low": each.felt.low, "point": each.felt.value, "high": each.felt.high}
    if each.static is not None:
        found["voltage"] = _estimate(each.static.voltage)
        found["charge"] = _estimate(each.static.charge)
        found["energy"] = _estimate(each.static.energy)
    if each.electrical is not None:
        found["current"] = _estimate(each.electrical.current) | {"zone": each.electrical.zone}
    return found


def _estimate(each: Estimate) -> dict[str, Any]:
    low, high = each.interval()
    return {"unit": each.unit, "low": low, "middle": each.median, "high": high}
