"""An invented incident, worded by hand: the shape `templates/incident_report.html` asks for."""

from typing import Any

from mock_charts import (
    causes_chart,
    charge_chart,
    current_chart,
    humidity_chart,
    weights_chart,
)

DIGEST = "record 3f9a 12bc 77d0 · knowledge 81e4 · program 0.1.0"


def context(**changes: Any) -> dict[str, Any]:
    """The whole report: page one, facts, analysis, closing part."""
    return {
        "language": "en",
        "paper": "A4",
        "title": "Incident report 26-7KQ4, issue 2, preliminary",
        "draft": False,
        "running": {
            "issue": "Incident 26-7KQ4 · issue 2 · preliminary · supersedes 90ab 4e11",
            "digest": DIGEST,
            "page": "Page",
            "of": "of",
        },
        "heading": {
            "name": "Incident report",
            "lines": [
                "Operating room 6, floor 2 · event 2026-01-14, 07:05 · reported 07:20",
                "Prepared by clinical engineering, 2026-01-14, 09:40",
            ],
        },
        "page_one": page_one(),
        "parts": [facts(), analysis(), closing()],
    } | changes


def page_one() -> dict[str, Any]:
    """Page one of a typical case."""
    return {
        "marking": "Internal, clinical engineering",
        "person": [
            "Medical review asked for today: tingling outlasted the contact.",
            "Occupational health, circulating nurse, sent 07:30. No glove or skin breach reported. "
            "Palpitations, weakness or a burn mark: emergency department at once.",
        ],
        "equipment": {
            "condition": "Before any of this: the clinician in charge agrees to the transfer.",
            "headline": "Hold the trolley and its cord until the named checks are done.",
            "rows": [
                {
                    "item": "Trolley A, cord C2",
                    "defect": "Earth continuity 4.1 Ω as found, limit 0.3 Ω",
                    "severity": 3,
                    "disposition": "After that: withdraw and quarantine with cord, as found.",
                },
                {
                    "item": "Preparation table",
                    "defect": "None found by tests 2 and 3",
                    "severity": 2,
                    "disposition": "Hold until resistance between metals is measured",
                },
                {
                    "item": "Outlet group W3",
                    "defect": "Not tested",
                    "severity": 2,
                    "disposition": "Hold until retention and earth impedance are measured",
                },
            ],
            "room": "Operating room 6 may be used with outlets W1 and W2. Decided by: head of "
            "clinical engineering with theatre lead.",
        },
        "happened": {
            "summary": "Left hand on the trolley shelf, right hand on the preparation table, dry, "
            "no gloves, isolated supply, no alarm. 24 %RH, read in the room at 07:15.",
            "quotes": [
                {
                    "heading": "Circulating nurse, 07:20, before talking with others, reported:",
                    "text": "A zap, then a buzzing in both arms until I let go.",
                    "language": "en",
                }
            ],
        },
        "causes": {
            "summary": "An electrical fault is more likely than static; which one is not settled.",
            "rows": [
                ["Lost protective earth, trolley or cord", "likely", "35 to 80 %"],
                ["Potential between two earthed metals", "possible", "5 to 30 %"],
                ["Static, charged trolley", "possible", "4 to 25 %"],
                ["Static, walking", "unlikely", "1 to 9 %"],
            ],
            "note": "Judged likelihoods, no measured frequencies behind them. Ranges: 9 in 10. "
            "Does not fit: no isolation alarm.",
        },
        "estimates": [
            ["Touch current, earth lost", "0.21 mA", "0.07 to 0.35 mA", "trolley class, 120 V"],
            ["Highest current the monitor allows", "1.4 mA", "ceiling", "reading at 07:25"],
            ["Body voltage after rolling", "3.1 kV", "0.8 to 9 kV", "24 %RH, vinyl, clogs"],
            ["Energy of such a discharge", "0.7 mJ", "0.04 to 6 mJ", "capacitance assumed"],
        ],
        "not_known": [
            "Whether cord C2 was the cord of the event, swapped before arrival",
            "state of outlet W3 and the load at 07:05",
            "resistance between preparation table and room earth",
        ],
        "next_checks": [
            {
                "who": "Biomedical, patient absent",
                "checks": [
                    "Earth continuity of trolley with cord C1, flexed at both ends, 10 min",
                    "Insulation resistance and touch current on an earthed supply, 15 min",
                    "Voltage between every pair of metals within reach, under load, 15 min",
                ],
            },
            {
                "who": "Licensed electrician, request",
                "checks": [
                    "Outlet W3: polarity, earth impedance, retention; neighbours too, 20 min"
                ],
            },
        ],
        "cautions": [
            "Supports, does not replace, the judgement of the responsible engineer.",
            "Only the listed tests were done; an untested item is not cleared. Nobody touches it "
            "again to check.",
            "Local codes, the maker's instructions and licensed practice take precedence.",
        ],
    }


READING_COLUMNS = [
    {"name": "Reading", "width": 25},
    {"name": "State", "width": 12},
    {"name": "Value", "width": 11, "figure": True},
    {"name": "Limit", "width": 11, "figure": True},
    {"name": "Verdict", "width": 15},
    {"name": "Limit from, how known", "width": 26},
]


def facts() -> dict[str, Any]:
    """Statements, scene, readings."""
    readings = [
        [
            "Earth continuity, trolley A with cord C2",
            "as found",
            "4.1 Ω",
            "0.3 Ω",
            "valid fail",
            "IEC 62353, memory",
        ],
        [
            "Touch current, normal condition",
            "as found",
            "38 µA",
            "100 µA",
            "valid pass",
            "IEC 60601-1, memory",
        ],
        [
            "Touch current, open earth",
            "as found",
            "212 µA",
            "500 µA",
            "valid pass",
            "IEC 60601-1, memory",
        ],
        [
            "Insulation resistance, mains to case",
            "disturbed",
            "≥ 200 MΩ",
            "2 MΩ",
            "invalid: cord swapped",
            "IEC 62353, memory",
        ],
        [
            "Total hazard current, isolated supply",
            "as found",
            "1.4 mA",
            "5 mA",
            "valid pass",
            "NFPA 99, memory",
        ],
        [
            "Earth continuity, trolley A with cord C3",
            "as left",
            "0.08 Ω",
            "0.3 Ω",
            "valid pass",
            "IEC 62353, memory",
        ],
        [
            "Resistance to ground, casters",
            "as found",
            "2 × 10¹² Ω",
            "1 × 10⁹ Ω",
            "valid fail",
            "site choice",
        ],
        ["Outlet W3, retention force", "not done", "unknown", "1.1 N", "not done", "site choice"],
    ]
    return {
        "title": "Facts",
        "marking": "Facts: reported, measured, done",
        "sections": [
            {
                "title": "Statements",
                "wide": False,
                "blocks": [
                    {
                        "kind": "quote",
                        "heading": "Circulating nurse, 07:20, before talking with others. "
                        "Reported. Mapped to: zap, then buzz (by the technician).",
                        "text": "A zap, then a buzzing in both arms until I let go.",
                        "language": "en",
                    },
                    {
                        "kind": "quote",
                        "heading": "Cleaner, 08:05, after talking with others. Reported.",
                        "text": "Es hat kurz gekribbelt, als ich den Wagen schob.",
                        "language": "de",
                    },
                ],
            },
            {
                "title": "Scene and custody",
                "wide": False,
                "blocks": [
                    {
                        "kind": "list",
                        "lines": [
                            "Before arrival: trolley unplugged and moved to the corridor; cord "
                            "swapped by a helper.",
                            "07:35 trolley, cords C1 and C2 tagged, locked in bay 3, technician.",
                            "Four photographs, digests on the last page.",
                        ],
                    }
                ],
            },
            {
                "title": "Readings against limits",
                "wide": True,
                "blocks": [{"kind": "table", "columns": READING_COLUMNS, "rows": readings}],
            },
        ],
    }


def analysis() -> dict[str, Any]:
    """Charts and weights."""
    return {
        "title": "Analysis",
        "marking": "Analysis: opinion, not finding",
        "sections": [
            _chart("Ranked causes", causes_chart(), "Ranges hold 9 in 10 of the judged cases."),
            _chart(
                "Voltage against humidity",
                humidity_chart(),
                "Vinyl floor, clogs. The tinted band holds 9 in 10 of persons and steps.",
            ),
            _chart("Weights", weights_chart(), "Ten decibans multiply the odds by ten."),
            _chart(
                "Charge and energy",
                charge_chart(),
                "Marks are published thresholds with their spread.",
            ),
            _chart(
                "Current and duration",
                current_chart(),
                "Boundaries: IEC 60479-1, hand to hand, memory; verify against the edition used.",
            ),
        ],
    }


def closing() -> dict[str, Any]:
    """Cautions, signatures, sources."""
    return {
        "title": "Cautions, signatures, sources",
        "marking": "",
        "sections": [
            {
                "title": "Cautions",
                "wide": False,
                "blocks": [{"kind": "list", "lines": page_one()["cautions"]}],
            },
            {
                "title": "Signatures",
                "wide": False,
                "blocks": [
                    {
                        "kind": "signatures",
                        "columns": [
                            {"name": "Role", "width": 34},
                            {"name": "Date and time", "width": 22},
                            {"name": "Signature", "width": 44},
                        ],
                        "rows": [[role, "", ""] for role in ("Author", "Reviewer", "Approver")],
                    }
                ],
            },
            {
                "title": "Sources",
                "wide": True,
                "blocks": [
                    {
                        "kind": "sources",
                        "lines": [
                            f"[{n}] Standard or paper number {n}, table {n}, value with "
                            "unit and validity (memory: verify against the edition in force)"
                            for n in range(1, 31)
                        ],
                    }
                ],
            },
        ],
    }


def _chart(title: str, svg: str, caption: str) -> dict[str, Any]:
    blocks = [{"kind": "chart", "svg": svg, "caption": caption}]
    return {"title": title, "wide": True, "blocks": blocks}
