"""Capacitance against textbook bodies and an independent boundary-element solution."""

from math import pi, sqrt

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy.constants import epsilon_0

from triage.errors import InvalidValue, OutOfRange
from triage.physics.capacitance import (
    disc,
    plate_over_floor,
    plates,
    sphere,
    standing_person,
    upright_cylinder,
)


def boundary_elements(width: float, length: float, height: float | None, n: int = 12) -> float:
    """Capacitance of a thin oblong plate, alone or over a conducting floor, by moments.

    Square patches of even charge; exact potential of a patch (Durand, Electrostatique); the floor
    as an image at twice the height.
    """
    m = round(n * length / width)
    dx, dy = width / n, length / m
    x, y = np.meshgrid((np.arange(n) + 0.5) * dx, (np.arange(m) + 0.5) * dy, indexing="ij")
    u, v = np.subtract.outer(x.ravel(), x.ravel()), np.subtract.outer(y.ravel(), y.ravel())

    def potential(z: float) -> np.ndarray:
        total = np.zeros_like(u)
        for i, a in ((1, dx / 2), (-1, -dx / 2)):
            for j, b in ((1, dy / 2), (-1, -dy / 2)):
                p, q = u + a, v + b
                r = np.sqrt(p * p + q * q + z * z)
                part = p * np.log(q + r) + q * np.log(p + r)
                part -= z * np.arctan(p * q / (z * r)) if z else 0
                total += i * j * part
        return total / (4 * pi * epsilon_0)

    matrix = potential(0.0) - (potential(2 * height) if height else 0)
    return float(np.linalg.solve(matrix, np.ones(n * m)).sum() * dx * dy)


# A unit square alone: 0.3667 of 4 pi eps0, 40.8 pF (Read, J. Comput. Phys. 133 (1997); memory).
def test_the_boundary_elements_find_the_known_capacitance_of_a_square():
    assert boundary_elements(1, 1, None, 16) == pytest.approx(40.8e-12, rel=0.025)


# Cart shelf at 0.15 and 0.30 m, bed frame, stretcher, table top, instrument stand (assumed sizes).
@pytest.mark.parametrize(
    ("width", "length", "height"),
    [(0.45, 0.75, 0.15), (0.45, 0.75, 0.30), (0.9, 2.0, 0.40), (0.65, 1.9, 0.30),
     (0.5, 2.0, 0.90), (0.32, 0.48, 1.0)],
)  # fmt: skip
def test_a_shelf_over_a_floor_is_within_an_eighth_of_the_boundary_elements(width, length, height):
    expected = boundary_elements(width, length, height)
    assert plate_over_floor(width * length, height) == pytest.approx(expected, rel=0.12)


def test_the_pair_formula_with_the_height_for_the_distance_is_far_too_low():
    # Kirchhoff for two discs at the distance 0.15 m: 30.7 pF against 44.6 pF over a floor.
    radius = sqrt(0.45 * 0.75 / pi)
    pair = plates(0.45 * 0.75, 0.15) + epsilon_0 * radius * (np.log(16 * pi * radius / 0.15) - 1)
    assert pair == pytest.approx(30.7e-12, rel=0.01)
    assert pair < 0.75 * boundary_elements(0.45, 0.75, 0.15)


# Textbook bodies (Smythe; Halliday, Resnick, Walker): 111.3 and 70.8 pF for each metre.
def test_textbook_bodies():
    assert sphere(1) == pytest.approx(4 * pi * epsilon_0)
    assert disc(1) == pytest.approx(8 * epsilon_0)
    assert sphere(0.384) == pytest.approx(42.7e-12, rel=0.01)  # person, 1.85 m2 of skin
    assert plates(0.3375, 0.15) == pytest.approx(19.9e-12, rel=0.01)
    assert upright_cylinder(1.75, 0.14, 0.01) == pytest.approx(49.1e-12, rel=0.01)
    # h / r = 12.5 at a height of 1 m: 2 pi eps0 h / ln(12.5 sqrt(5.75 / 9.25)).
    assert upright_cylinder(1.75, 0.14, 1.0) == pytest.approx(42.6e-12, rel=0.01)


# Saito 1963: 90 pF on one foot, 110 pF on two, highly insulating shoes; surface-charge study:
# 120 to 130 pF for soles of 10 mm. The formula is a judgement, good to a quarter.
def test_a_person_on_ten_millimetre_soles_has_the_published_capacitance():
    assert standing_person(0.010) == pytest.approx(125e-12, rel=0.15)
    assert standing_person(0.010) == pytest.approx(110e-12, rel=0.27)
    assert standing_person(0.010, feet=1) == pytest.approx(90e-12, rel=0.1)


# Published range of people: 60 to 200 pF (Talebzadeh 2016, Jonassen 1998), 300 pF on thin soles
# over a steel plate (Japanese guidance 1999).
def test_foam_soles_and_thin_soles_span_the_published_range():
    assert 55e-12 < standing_person(0.030, relative_permittivity=1.6) < 75e-12
    assert standing_person(0.003) == pytest.approx(300e-12, rel=0.2)


@given(st.floats(0.001, 0.1), st.floats(1.0, 2.0))
def test_thicker_soles_never_raise_the_capacitance(thickness, factor):
    assert standing_person(thickness * factor) <= standing_person(thickness)


@pytest.mark.parametrize(
    "attempt",
    [
        lambda: sphere(0),
        lambda: plates(1, 0.1, 0.5),
        lambda: plate_over_floor(-1, 0.1),
        lambda: plate_over_floor(1, float("nan")),
        lambda: standing_person(0.01, feet=3),
    ],
)
def test_what_cannot_be_is_refused(attempt):
    with pytest.raises(InvalidValue):
        attempt()


def test_a_squat_cylinder_is_outside_the_formula():
    with pytest.raises(OutOfRange):
        upright_cylinder(0.1, 0.2, 0.01)
