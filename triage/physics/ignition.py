"""Can a body spark light a vapour: its energy against the minimum ignition energy."""

from math import exp, log

from triage.bounds import Probability
from triage.errors import InvalidValue, OutOfRange
from triage.estimate import Estimate
from triage.physics.sensation import EPISTEMIC

AIR = 0.21
"""Volume fraction of oxygen in air."""


def checked_solvent_energy(joules: float) -> float:
    """Minimum ignition energy of a solvent vapour in air, refused where units were mixed up.

    Args:
        joules: as entered [J].

    Raises:
        OutOfRange: outside 0.1 to 2 mJ: tables that print units of 0.01 mJ beside mJ exist.

    >>> checked_solvent_energy(0.28e-3)
    0.00028
    """
    if not 0.1e-3 <= joules <= 2e-3:
        raise OutOfRange(
            "minimum ignition energy", joules, 1e-4, 2e-3, "J", "solvent vapours in air"
        )
    return joules


def with_oxygen(in_air: float, in_oxygen: float, fraction: float) -> float:
    """Minimum ignition energy in oxygen-enriched air [J].

    Args:
        in_air: at 21 % oxygen [J].
        in_oxygen: in pure oxygen [J], at most `in_air`.
        fraction: volume fraction of oxygen, 0.21 to 1.

    Raises:
        OutOfRange: less oxygen than air.

    Source:
        ln of the energy in a straight line between air and oxygen; judgement.

    >>> round(with_oxygen(0.19e-3, 0.0012e-3, 1.0) * 1e3, 4)
    0.0012
    """
    if not AIR <= fraction <= 1:
        raise OutOfRange("oxygen", fraction, AIR, 1, "", "interpolation between air and oxygen")
    if not 0 < in_oxygen <= in_air:
        raise InvalidValue(f"oxygen never makes ignition harder: {in_air!r} J, {in_oxygen!r} J")
    return exp(log(in_air) + (fraction - AIR) / (1 - AIR) * log(in_oxygen / in_air))


def can_ignite(energy: Estimate, minimum: float) -> Probability:
    """Probability that the energy of the spark exceeds a minimum ignition energy.

    Args:
        energy: of the discharge [J].
        minimum: ignition energy of the best mixture [J], above 0.

    Source:
        The best mixture at the spark is assumed, so this is an upper bound; judgement.
    """
    if not minimum > 0:
        raise InvalidValue(f"a minimum ignition energy is above 0 J, got {minimum!r}")
    return energy.chance_above(minimum, EPISTEMIC)


def is_priority(felt: bool | None, wet_alcohol: bool | None, oxygen: bool | None) -> bool:
    """True if a shock must be handled as an ignition hazard, whatever caused it.

    Args:
        felt: a shock was felt; None if not known.
        wet_alcohol: alcohol or another solvent still wet within arm's reach.
        oxygen: an oxygen or nitrous oxide source within arm's reach.

    Source:
        Judgement: unknown counts as present once a shock is reported.
    """
    return felt is not False and (wet_alcohol is not False or oxygen is not False)
