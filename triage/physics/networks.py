"""Measuring networks: what a meter that imitates the body reads, and how frequency weighs."""

from math import pi

from triage.errors import OutOfRange
from triage.physics.figures import row


def weight(frequency: float, network: str) -> float:
    """Reading over true current of a measuring network, driven by a stiff current.

    Args:
        frequency: f [Hz], 0 to 1e6.
        network: `medical` (IEC 60601-1), or `unweighted`, `reaction`, `let_go` (IEC 60990).

    Returns:
        |reading| / |current|, 1 at low frequency.

    Raises:
        OutOfRange: frequency beyond 1 MHz, where the parts are not specified.

    Source:
        IEC 60601-1 figure 12; IEC 60990 figures 3 to 5. Ladder computed stage by stage.

    >>> round(weight(1000, "medical"), 5), round(weight(1000, "reaction"), 3)
    (0.69424, 0.567)
    """
    _check(frequency)
    parts = row("networks", network)
    resistance = float(parts["body"]["r"])
    # 1 V at the meter needs `voltage` over the body resistor and `current` into the stages.
    voltage, current = _ladder(complex(1), parts["stages"], frequency)
    return 1 / abs(voltage + current * resistance)


def network_impedance(frequency: float, network: str) -> complex:
    """Impedance of the body model in the network, weighting stages left out.

    Args:
        frequency: f [Hz], 0 to 1e6.
        network: as `weight`.

    Returns:
        Z [ohm].

    >>> round(abs(network_impedance(50, "unweighted")), 1)
    1990.0
    """
    _check(frequency)
    body = row("networks", network)["body"]
    if "rs" not in body:
        return complex(body["r"])
    skin = 1 / (1 / body["rs"] + 2j * pi * frequency * body["cs"])
    return complex(body["r"] + skin)


def _ladder(
    meter: complex, stages: list[dict[str, float]], frequency: float
) -> tuple[complex, complex]:
    """Voltage and current at the head of an RC ladder that leaves `meter` volts at its end."""
    voltage, current = meter, complex(0)
    for stage in reversed(stages):
        current += voltage * 2j * pi * frequency * stage["c"]
        voltage += current * stage["r"]
    return voltage, current


def _check(frequency: float) -> None:
    if not 0 <= frequency <= 1e6:
        raise OutOfRange("frequency", frequency, 0, 1e6, "Hz", "IEC 60990 measuring networks")
