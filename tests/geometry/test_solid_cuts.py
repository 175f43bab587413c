"""Solids split by a plane, their sections and handles, against closed forms."""

from __future__ import annotations

import numpy as np
import pytest
import shapes

from meshlure.geometry.solids import Solid

UP = np.array([0.0, 0.0, 1.0])


@pytest.mark.parametrize("height", [-0.5, 0.0, 0.3, 0.9])
def test_a_ball_s_cap_and_circle(height: float) -> None:
    # Facets of level 5 lie within 0.04% of the unit ball's skin.
    ball = Solid.of(shapes.sphere(1.0, 5))
    above, below = ball.split(UP, height)
    cap = np.pi / 3 * (2 + height) * (1 - height) ** 2
    assert above.volume == pytest.approx(cap, rel=5e-3)
    assert above.volume + below.volume == pytest.approx(ball.volume, rel=1e-12)
    assert ball.level(height).area == pytest.approx(np.pi * (1 - height**2), rel=4e-3)


def test_a_slanted_plane_halves_a_box() -> None:
    box = Solid.of(shapes.box((0.02, 0.01, 0.006)))
    way = np.array([1.0, 2.0, -3.0]) / np.sqrt(14)
    above, below = box.split(way, 0.0)
    assert above.volume == pytest.approx(below.volume, rel=1e-12)
    assert (above.surface().vertices @ way).min() == pytest.approx(0.0, abs=1e-12)


def test_a_section_s_rings_keep_the_drawing_s_size() -> None:
    # A section of a tenth of a millimetre is drawn as exactly as one of ten.
    for scale in (1e-4, 1e-2):
        torus = Solid.of(shapes.torus(3.0, 1.0, 48)).surface().moved(scale=scale)
        found = Solid.of(torus).level(0.0)
        assert len(found.rings) == 2
        assert found.area == pytest.approx(np.pi * (16 - 4) * scale**2, rel=2e-3)


def test_handles() -> None:
    torus = Solid.of(shapes.torus(3.0, 1.0, 24))
    assert (Solid.of(shapes.sphere(1.0, 2)).genus, torus.genus) == (0, 1)
    assert torus.joined(torus.shifted(np.array([0.0, 0.0, 5.0]))).parts()[0].genus == 1
    assert torus.shifted(np.array([1.0, 2.0, 3.0])).bounds == pytest.approx(
        np.array([[-3, -2, 2], [5, 6, 4]]), abs=0.01
    )
