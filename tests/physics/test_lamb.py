"""Lamb's factors against his own table, DATCOM's figure and the closed integrals of an ellipsoid with three axes."""

from __future__ import annotations

import math

import numpy as np
import pytest
from scipy.special import elliprd

from meshlure.physics.lamb import lamb_factors

LAMB = [
    (1.00, 0.5, 0.5, 0.0),
    (1.50, 0.305, 0.621, 0.094),
    (2.00, 0.209, 0.702, 0.240),
    (2.51, 0.156, 0.763, 0.367),
    (2.99, 0.122, 0.803, 0.465),
    (3.99, 0.082, 0.860, 0.608),
    (4.99, 0.059, 0.895, 0.701),
    (6.01, 0.045, 0.918, 0.764),
    (6.97, 0.036, 0.933, 0.805),
    (8.01, 0.029, 0.945, 0.840),
    (9.02, 0.024, 0.954, 0.865),
    (9.97, 0.021, 0.960, 0.883),
]
"""Length over diameter, k1, k2, k': H. Lamb (1932), Hydrodynamics, table of article 115, also in M. Munk (1924), NACA
Rep. 184; from memory."""


@pytest.mark.parametrize(("fineness", "along", "across", "turning"), LAMB)
def test_lambs_own_table(fineness: float, along: float, across: float, turning: float) -> None:
    # Three decimals: half of the last one is 2.4% of the least entry.
    found = lamb_factors(fineness)
    assert found.along == pytest.approx(along, rel=0.024)
    assert found.across == pytest.approx(across, rel=0.004)
    assert found.turning == pytest.approx(turning, rel=0.012, abs=0)


@pytest.mark.parametrize(("fineness", "couple"), [(4, 0.77), (5, 0.825), (6, 0.865), (8, 0.91), (10, 0.94)])
def test_the_couples_factor_agrees_with_datcom(fineness: float, couple: float) -> None:
    # USAF Stability and Control DATCOM, fig. 4.2.1.1-20a.
    assert lamb_factors(fineness).couple == pytest.approx(couple, rel=0.013)


def ellipsoid(axes: tuple[float, float, float]) -> list[float]:
    """Added-mass factors along the three axes: Lamb 1932, article 114, by Carlson's integral in scipy."""
    found = []
    for k, axis in enumerate(axes):
        others = [other for n, other in enumerate(axes) if n != k]
        alpha = 2 / 3 * math.prod(axes) * elliprd(others[0] ** 2, others[1] ** 2, axis**2)
        found.append(float(alpha / (2 - alpha)))
    return found


@pytest.mark.parametrize("fineness", [1.02, 1.7, 4.0, 12.0, 40.0])
def test_a_spheroid_is_an_ellipsoid_with_two_equal_axes(fineness: float) -> None:
    along, across, _ = ellipsoid((fineness, 1.0, 1.0))
    found = lamb_factors(fineness)
    assert found.along == pytest.approx(along, rel=1e-8)
    assert found.across == pytest.approx(across, rel=1e-8)


@pytest.mark.parametrize("axes", [(5.0, 1.0, 0.7), (6.8, 2.6, 1.2), (4.0, 1.5, 1.0)])
def test_deep_bodies_are_near_circles_on_their_widths(axes: tuple[float, float, float]) -> None:
    # What the loads and the sinking do with sections that are not round: the factor of the spheroid of equal greatest
    # section, times the volume of the circles on the width that the flow sees. Exact: ellipsoid with three axes.
    length, deep, thin = axes
    found = lamb_factors(length / math.sqrt(deep * thin))
    along, across_deep, across_thin = ellipsoid(axes)
    assert found.across * deep / thin == pytest.approx(across_thin, rel=0.04)
    assert found.across * thin / deep == pytest.approx(across_deep, rel=0.02)
    assert found.couple * deep / thin == pytest.approx(across_thin - along, rel=0.04)
    assert found.couple * thin / deep == pytest.approx(across_deep - along, rel=0.14)


def test_a_sphere_is_the_limit() -> None:
    steps = np.array([lamb_factors(1 + step).couple for step in (1e-6, 4e-3, 8e-3, 1.2e-2)])
    # From Lamb's formulas to first order in the eccentricity: (k2 - k1) = 0.9 (f - 1) near a sphere of 1/2 and 1/2.
    assert steps[0] == 0
    assert steps[2:] == pytest.approx([0.9 * 8e-3, 0.9 * 1.2e-2], rel=0.02)
    assert lamb_factors(0.7) == lamb_factors(1.0)


@pytest.mark.parametrize("fineness", [0.0, -1.0, math.inf, math.nan])
def test_a_fineness_is_positive_and_finite(fineness: float) -> None:
    with pytest.raises(ValueError, match="fineness"):
        lamb_factors(fineness)
