"""Charts of the invented incident of `mock_report`."""

from triage.documents.charts import (
    CauseRange,
    CurrentEstimate,
    HumidityCurve,
    HumidityMark,
    Scale,
    ScaleRow,
    cause_ranges,
    charge_energy,
    time_current,
    voltage_against_humidity,
    weights,
)


def causes_chart() -> str:
    """Eight causes."""
    rows = [
        CauseRange("Lost protective earth, trolley or cord", 0.35, 0.61, 0.80, True),
        CauseRange("Potential between two earthed metals", 0.05, 0.14, 0.30, True),
        CauseRange("Static, charged trolley", 0.04, 0.11, 0.25, False),
        CauseRange("Static, walking", 0.01, 0.03, 0.09, False),
        CauseRange("Second fault on the isolated supply", 0.008, 0.025, 0.07, True),
        CauseRange("Liquid path", 0.004, 0.012, 0.04, True),
        CauseRange("Static, rising from a chair", 0.001, 0.006, 0.02, False),
        CauseRange("Nerve or muscle, not electrical", 0.001, 0.006, 0.02, False),
    ]
    return cause_ranges(rows, alt="Ranked causes. Lost protective earth: 35 to 80 percent.")


def humidity_chart() -> str:
    """Body voltage falls with humidity."""
    humidity = list(range(10, 81, 5))
    median = [12_000 * 0.956 ** (each - 10) for each in humidity]
    return voltage_against_humidity(
        HumidityCurve(humidity, median, [v / 3.5 for v in median], [v * 3 for v in median]),
        incident=HumidityMark("this incident, 24 %RH", 24, 3100, 800, 9000),
        felt=(1200, 3500),
        alt="Body voltage against humidity. At 24 percent: 3.1 kV, range 0.8 to 9 kV.",
    )


def weights_chart() -> str:
    """Seven weights."""
    rows = [
        ("Before any finding", 2.0),
        ("Physics of this place", -6.0),
        ("Buzz while holding", 14.0),
        ("Let go and it stopped", 7.0),
        ("No alarm", -4.0),
        ("Dry air", -5.0),
        ("Earth continuity failed as found", 11.0),
    ]
    sides = ("static, charged trolley", "lost protective earth")
    return weights(rows, sides=sides, alt="Weights of evidence. Buzz while holding: plus 14.")


def charge_chart() -> str:
    """Charge and energy with marks."""
    return charge_energy(
        [
            Scale(
                "Charge",
                "C",
                [
                    ScaleRow("This incident, charged trolley", 0.3e-6, 0.9e-6, 2.5e-6, True),
                    ScaleRow("Begins to be felt", 0.1e-6, 0.2e-6, 0.4e-6, False),
                ],
            ),
            Scale(
                "Energy",
                "J",
                [
                    ScaleRow("This incident, charged trolley", 0.04e-3, 0.7e-3, 6e-3, True),
                    ScaleRow("Ignites alcohol vapour in air", 0.14e-3, 0.2e-3, 0.65e-3, False),
                    ScaleRow("Device immunity test, 8 kV contact", 4.8e-3, 4.8e-3, 4.8e-3, False),
                ],
            ),
        ],
        alt="Charge and energy. Charge 0.3 to 2.5 microcoulomb, above the felt threshold.",
    )


def current_chart() -> str:
    """Two estimates below the boundaries."""
    return time_current(
        [
            CurrentEstimate("earth lost", (0.07e-3, 0.21e-3, 0.35e-3), (0.5, 3)),
            CurrentEstimate("second fault", (0.4e-3, 0.9e-3, 1.4e-3), (0.5, 3)),
        ],
        ceiling=1.4e-3,
        zones=[
            ("felt", [(0.5e-3, 0.01), (0.5e-3, 10)]),
            ("cannot let go", [(0.2, 0.01), (0.05, 0.1), (0.01, 0.7), (0.005, 2), (0.005, 10)]),
            ("heart", [(0.5, 0.01), (0.4, 0.1), (0.05, 1), (0.04, 3), (0.04, 10)]),
        ],
        alt="Current and duration. Both estimates lie left of the let-go boundary.",
    )
