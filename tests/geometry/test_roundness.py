"""Balls are told from what only looks like one."""

from __future__ import annotations

import numpy as np
import pytest
import shapes

from meshlure.geometry.roundness import ball_diameter
from meshlure.geometry.shells import Shell, split
from meshlure.geometry.surface import Surface
from meshlure.geometry.topology import paired


def shell(surface: Surface) -> Shell:
    (found,) = split(surface, paired(surface))
    return found


@pytest.mark.parametrize("level", [1, 2, 4])
@pytest.mark.parametrize("radius", [0.0015, 0.003])
def test_balls(radius: float, level: int) -> None:
    ball = shapes.sphere(radius, level).moved(shift=np.array([0.05, -0.01, 0.002]))
    assert ball_diameter(shell(ball)) == pytest.approx(2 * radius, rel=1e-9)
    assert ball_diameter(shell(ball.turned())) == pytest.approx(2 * radius, rel=1e-9)


@pytest.mark.parametrize(
    "surface",
    [
        shapes.box((0.01, 0.01, 0.01)),  # all corners at one distance
        shapes.ellipsoid((0.01, 0.01, 0.0094), 4),  # nearly as spherical as a ball
        shapes.cylinder(0.005, 0.009, 48),
        shapes.torus(0.01, 0.004, 24),
        shapes.lumpy(2),
    ],
)
def test_what_is_no_ball(surface: Surface) -> None:
    assert ball_diameter(shell(surface)) is None
