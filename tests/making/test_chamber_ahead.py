"""Material straight ahead of a bore's end, against spheres, cones, slopes and rays cast one by one."""

from __future__ import annotations

import numpy as np
import pytest
import shapes

from meshlure.geometry.clearance import Boxes
from meshlure.geometry.cylinder import Cylinder
from meshlure.geometry.surface import Surface
from meshlure.making.chamber.ahead import ahead

X = np.array([1.0, 0.0, 0.0])


def bore(length: float, radius: float, middle: float = 0.0) -> Cylinder:
    return Cylinder(np.array([middle, 0.0, 0.0]), X, length, radius)


def test_in_a_sphere_the_rim_decides() -> None:
    found = ahead(Boxes.of(shapes.sphere(0.02, 5)), bore(0.02, 0.004), 0)
    # Over the rim the sphere stands at sqrt(R^2 - r^2); its facets lie within 7 micrometres of it.
    assert found.distance == pytest.approx(np.sqrt(0.02**2 - 0.004**2) - 0.01, abs=8e-6)
    assert np.hypot(*found.place[1:]) == pytest.approx(0.004, abs=1e-5)


def test_on_a_slope_the_rim_that_is_nearest_decides() -> None:
    # A wedge whose far face x = 30 mm - z/2 is one plane: its height over the disc is least at z = r.
    box = shapes.box((0.06, 0.03, 0.03))
    slanted = box.vertices.copy()
    right = slanted[:, 0] > 0
    slanted[right, 0] -= slanted[right, 2] / 2
    found = ahead(Boxes.of(Surface(slanted, box.faces)), bore(0.02, 0.004), 0)
    assert found.distance == pytest.approx(0.03 - 0.004 / 2 - 0.01, abs=1e-12)
    np.testing.assert_allclose(found.place, [0.028, 0, 0.004], atol=1e-12)
    assert ahead(Boxes.of(Surface(slanted, box.faces)), bore(0.02, 0.004), 1).distance == pytest.approx(0.02, abs=1e-12)


def test_a_tip_in_the_shadow_decides() -> None:
    # A notch's tip on the axis, seen by no point of the rim.
    cone = shapes.cone(0.002, 0.01, 24).moved(np.array([[0.0, 0, 1], [0, 1, 0], [-1, 0, 0]]), np.array([0.015, 0, 0]))
    found = ahead(Boxes.of(cone), bore(0.02, 0.004), 0)
    assert found.distance == pytest.approx(0.005, abs=1e-12)


@pytest.mark.parametrize("seed", range(3))
def test_no_ray_of_the_disc_is_shorter(seed: int) -> None:
    body = shapes.lumpy(seed, 4)
    middle = body.vertices.mean(axis=0)
    axis = shapes.direction(seed + 10)
    cylinder = Cylinder(middle, axis, 0.006, 0.002)
    found = ahead(Boxes.of(body), cylinder, 0)
    random = np.random.default_rng(seed)
    reach, angle = 0.002 * np.sqrt(random.uniform(0, 1, 400)), random.uniform(0, 2 * np.pi, 400)
    starts = cylinder.ends[0] + reach[:, None] * (
        np.cos(angle)[:, None] * cylinder.across[0] + np.sin(angle)[:, None] * cylinder.across[1]
    )
    hits, rays, _ = shapes.as_trimesh(body).ray.intersects_location(
        starts, np.tile(axis, (400, 1)), multiple_hits=False
    )
    assert len(rays) == 400
    far = ((hits - starts[rays]) @ axis).min()
    assert found.distance <= far + 1e-9
    # The disc's own nearest place is no farther from some ray than the rays are apart.
    assert found.distance == pytest.approx(far, abs=0.3e-3)
