"""Standoffs against closed forms, and against trimesh's nearest places from densely spread points."""

from __future__ import annotations

import numpy as np
import pytest
import shapes
import trimesh
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy.optimize import minimize_scalar

from meshlure.geometry import standoff
from meshlure.geometry.clearance import Boxes
from meshlure.geometry.cylinder import Cylinder
from meshlure.geometry.standoff import (
    TOLERANCE,
    Standoff,
    ball_standoff,
    clears,
    cylinder_standoff,
    end_standoff,
    side_standoff,
)
from meshlure.geometry.surface import Floats, Surface

Z = np.array([0.0, 0, 1])
SIZE = np.array([0.095, 0.018, 0.024])


def within(found: Standoff, exact: float) -> bool:
    """Not less than the exact distance, and above it by no more than the tolerance."""
    return -1e-15 <= found.distance - exact <= TOLERANCE


def to_planes(cylinder: Cylinder, end: int | None = None) -> float:
    """Least distance of a cylinder, or of one end, inside a box about the origin: by its support along each normal."""
    half = 0.0 if end is not None else cylinder.length / 2
    centre = cylinder.middle if end is None else cylinder.ends[end]
    distances: list[float] = []
    for normal in (*np.eye(3), *-np.eye(3)):
        along = abs(float(cylinder.axis @ normal))
        reach = float(centre @ normal) + along * half + cylinder.radius * np.sqrt(max(1 - along**2, 0.0))
        distances.append(float(np.abs(normal) @ SIZE) / 2 - reach)
    return min(distances)


@pytest.mark.parametrize("level", [0, 3])
@pytest.mark.parametrize("axis", [(1, 0, 0), (0, 0, 1), (0.8, 0, 0.6), (0.6, 0.48, -0.64)])
def test_cylinder_in_a_box(level: int, axis: tuple[float, float, float]) -> None:
    # Flat sides and ends that lie parallel to a wall are as near all over.
    boxes = Boxes.of(shapes.box(list(SIZE), level=level))
    slug = Cylinder(np.array([0.011, -0.0013, 0.0007]), np.array(axis), 0.008, 0.0025)
    assert within(cylinder_standoff(boxes, slug), to_planes(slug))
    assert within(side_standoff(boxes, slug), to_planes(slug))  # the side's rims reach as far as the ends
    for end in (0, 1):
        assert within(end_standoff(boxes, slug, end), to_planes(slug, end))


def test_ball_in_a_ball() -> None:
    # R - |c| - r for round skins; the facets lie within by at most their sag.
    ball, centre = shapes.sphere(0.02, 5), np.array([0.003, -0.002, 0.004])
    found = ball_standoff(Boxes.of(ball), centre, 0.005)
    exact = 0.02 - float(np.linalg.norm(centre)) - 0.005
    sag = 0.02 - float(np.linalg.norm(ball.corners.mean(axis=1), axis=1).min())
    assert exact - sag <= found.distance <= exact + TOLERANCE
    assert np.linalg.norm(found.on - centre) == pytest.approx(0.005, rel=1e-12)
    assert np.linalg.norm(found.place) == pytest.approx(0.02, rel=1e-3)


def test_cylinder_along_a_spheroid() -> None:
    # The rim at (L/2, r) to the meridian (a cos t, b sin t), minimised over t.
    a, b = 0.0475, 0.009
    slug = Cylinder(np.zeros(3), np.array([1.0, 0, 0]), 0.04, 0.003)
    exact = minimize_scalar(
        lambda t: np.hypot(a * np.cos(t) - 0.02, b * np.sin(t) - 0.003), bounds=(0, 1.5708), method="bounded"
    ).fun
    errors = []
    for level in (4, 5, 6):
        boxes = Boxes.of(shapes.ellipsoid((a, b, b), level))
        errors.append(cylinder_standoff(boxes, slug, 1e-9).distance - exact)
    assert abs(errors[-1]) < 1e-3 * exact
    assert shapes.order(errors) == pytest.approx([2, 2], abs=0.8)  # of the facets


def test_side_and_end_differ_before_a_spike() -> None:
    # A cone's tip on the axis, 1 mm before an end: the end is 1 mm off, the side's rim hypot(1, 3) mm.
    spike = shapes.cone(0.002, 0.01, 40).moved(shift=np.array([0, 0, 0.011]))
    boxes, slug = Boxes.of(spike), Cylinder(np.zeros(3), Z, 0.02, 0.003)
    assert within(end_standoff(boxes, slug, 0), 1e-3)
    assert within(end_standoff(boxes, slug, 1), 21e-3)
    for axis in (Z, -Z):
        assert within(cylinder_standoff(boxes, Cylinder(np.zeros(3), axis, 0.02, 0.003)), 1e-3)
    # The nearest to the rim is the flank: half angle s, distance of (0.003, -0.001) to its line through the tip.
    flank = np.array([0.002, 0.01]) / np.hypot(0.002, 0.01)
    rim = np.array([0.003, -0.001])
    exact = float(np.linalg.norm(rim)) if rim @ flank <= 0 else float(np.linalg.norm(rim - (rim @ flank) * flank))
    assert side_standoff(boxes, slug).distance == pytest.approx(exact, abs=TOLERANCE)


def test_a_mesh_within_the_round_skin() -> None:
    # Where distances curve downward: a small ball or needle inside, off the axis.
    boxes = Boxes.of(shapes.sphere(0.002, 4).moved(shift=np.array([0.004, 0, 0.001])))
    assert ball_standoff(boxes, np.zeros(3), 0.01).distance == pytest.approx(
        0.01 - np.hypot(0.004, 0.001) - 0.002, rel=2e-3
    )
    slug = Cylinder(np.zeros(3), Z, 0.04, 0.01)
    assert side_standoff(boxes, slug).distance == pytest.approx(0.01 - 0.006, rel=2e-3)
    assert end_standoff(boxes, slug, 0).distance == pytest.approx(0.02 - 0.003, rel=2e-3)
    assert cylinder_standoff(boxes, slug).distance == pytest.approx(0.004, rel=2e-3)


def test_a_triangle_whose_corner_is_nearest_to_the_skin_round_it() -> None:
    # From over its middle the distance seems the same all over; it falls to R - hypot(0.7, 0.5) at the last corner.
    plate = Boxes.of(Surface(np.array([[0.7, -0.25, -0.3], [0.7, -0.25, 0.3], [0.7, 0.5, 0]]), np.array([[0, 1, 2]])))
    exact = 1 - np.hypot(0.7, 0.5)
    assert within(ball_standoff(plate, np.zeros(3), 1.0), exact)
    assert within(cylinder_standoff(plate, Cylinder(np.zeros(3), Z, 4.0, 1.0)), exact)


def test_as_near_all_round() -> None:
    # A prism of n sides round a coaxial cylinder: R cos(pi/n) - r along n whole lines.
    boxes = Boxes.of(shapes.cylinder(0.006, 0.05, 64, along=3))
    slug = Cylinder(np.zeros(3), Z, 0.03, 0.0025)
    assert within(cylinder_standoff(boxes, slug), 0.006 * np.cos(np.pi / 64) - 0.0025)


@pytest.mark.parametrize("axis", [(0, 1, 0), (0, 0.6, 0.8)])
def test_what_crosses_has_no_distance(axis: tuple[float, float, float]) -> None:
    boxes = Boxes.of(shapes.ellipsoid((0.05, 0.008, 0.012), 4))
    found = cylinder_standoff(boxes, Cylinder(np.zeros(3), np.array(axis), 0.05, 0.002))
    assert found.distance == pytest.approx(0, abs=1e-12)
    assert boxes.nearest(found.on[None]).distance[0] == pytest.approx(0, abs=1e-12)
    assert ball_standoff(boxes, np.zeros(3), 0.01).distance == pytest.approx(0, abs=1e-12)
    # A wall of two triangles, run through by a cylinder that none of their sides meets.
    wall = Surface(np.array([[-1.0, -1, 0], [1, -1, 0], [1, 1, 0], [-1, 1, 0]]), np.array([[0, 1, 2], [0, 2, 3]]))
    slant = Cylinder(np.array([0.3, -0.1, 0]), np.array([0, 0.6, 0.8]), 0.05, 0.002)
    assert cylinder_standoff(Boxes.of(wall), slant).distance < TOLERANCE


def spread(cylinder: Cylinder, step: float) -> Floats:
    """Points all over a cylinder's skin."""
    around = np.arange(0, 2 * np.pi, step / cylinder.radius)
    spokes = np.column_stack([np.cos(around), np.sin(around)]) @ cylinder.across
    heights = np.append(np.arange(-cylinder.length / 2, cylinder.length / 2, step), cylinder.length / 2)
    side = cylinder.middle + cylinder.radius * spokes[:, None] + heights[:, None] * cylinder.axis
    radii = np.append(np.arange(0, cylinder.radius, step), cylinder.radius)
    discs = [end + radii[:, None, None] * spokes for end in cylinder.ends]
    return np.concatenate([part.reshape(-1, 3) for part in (side, *discs)])


@given(st.integers(0, 1000))
@settings(max_examples=6)
def test_against_points_spread_over_the_cylinder(seed: int) -> None:
    # Inside, outside and across a knobbly body; trimesh.proximity finds each point's distance. Sizes are of the order
    # of 1: the library's tolerances are lengths without a unit.
    random = np.random.default_rng(seed)
    body = shapes.lumpy(seed, level=2, size=1.0)
    slug = Cylinder(body.vertices.mean(axis=0) + 0.6 * random.normal(size=3), shapes.direction(seed), 0.4, 0.1)
    step = 0.04
    near = trimesh.proximity.closest_point(shapes.as_trimesh(body), spread(slug, step))[1].min()  # type: ignore[no-untyped-call]
    found = cylinder_standoff(Boxes.of(body), slug, 1e-5)
    assert found.distance <= near + 1e-5
    assert near <= found.distance + step
    if found.distance > step:
        assert near <= found.distance + step**2 / found.distance
    assert np.linalg.norm(found.place - found.on) == pytest.approx(found.distance, abs=1e-14)
    assert Boxes.of(body).nearest(found.place[None]).distance[0] < 1e-12


def test_the_tolerance_is_kept() -> None:
    boxes = Boxes.of(shapes.lumpy(5, 3, size=0.02))
    slug = Cylinder(shapes.lumpy(5, 3, size=0.02).vertices.mean(axis=0), shapes.direction(1), 0.008, 0.002)
    fine = cylinder_standoff(boxes, slug, 1e-10).distance
    for tolerance in (1e-3, 1e-4, 1e-6):
        assert -1e-10 <= cylinder_standoff(boxes, slug, tolerance).distance - fine <= tolerance


@pytest.mark.parametrize("tolerance", [0.0, -1e-6, np.nan])
def test_a_tolerance_that_is_none_is_refused(tolerance: float) -> None:
    with pytest.raises(ValueError, match="positive tolerance"):
        ball_standoff(Boxes.of(shapes.sphere(1.0, 1)), np.zeros(3), 0.5, tolerance)


def told(boxes: Boxes, cylinder: Cylinder, distance: float, monkeypatch: pytest.MonkeyPatch) -> bool:
    """Whether a mesh clears, with no more than so many triangles halved for it."""
    halved = []

    def counted(triangles: Floats) -> Floats:
        halved.append(len(triangles))
        assert sum(halved) < 100_000, "halved without end"
        return halve(triangles)

    halve = standoff._halved
    with monkeypatch.context() as patch:
        patch.setattr(standoff, "_halved", counted)
        return clears(boxes, cylinder, distance)


NEAR = (
    -1e-5,
    -3e-6,
    -1e-15,
    0.0,
    1e-15,
    1e-9,
    0.5e-6,
    1e-6 - 1e-14,
    1e-6,
    1.5e-6,
    2e-6 - 1e-15,
    2e-6,
    2e-6 + 1e-15,
    1e-5,
)
"""m. Distances asked for less the true one: about it, about half the tolerance beyond, and about the tolerance."""


@pytest.mark.parametrize("off", NEAR)
@pytest.mark.parametrize("kind", ["wall", "tube", "ball"])
def test_what_clears_is_told_whatever_the_threshold(kind: str, off: float, monkeypatch: pytest.MonkeyPatch) -> None:
    """A wall 5 mm from the axis of a cylinder of 3 mm; a tube of 24 sides round it, the middle of a side as far as 5 mm
    times cos(pi/24); a ball whose lowest corner lies on the axis, 2 mm from an end."""
    along = Cylinder(np.zeros(3), np.array([0.0, 0.0, 1.0]), 0.02, 0.003)
    ball = shapes.sphere(0.004, 2)
    lowest = ball.vertices[:, 2].argmin()
    surface, true = {
        "wall": (shapes.box((0.001, 0.02, 0.04), (0.0055, 0.0, 0.0), level=1), 0.002),
        "tube": (shapes.cylinder(0.005, 0.03, 24, along=8), 0.005 * np.cos(np.pi / 24) - 0.003),
        "ball": (ball.moved(shift=np.array([0.0, 0.0, 0.012]) - ball.vertices[lowest]), 0.002),
    }[kind]
    answer = told(Boxes.of(surface), along, true + off, monkeypatch)
    if off <= TOLERANCE / 2 - 1e-12:
        assert answer
    if off >= TOLERANCE:
        assert answer is False or off == pytest.approx(TOLERANCE, rel=1e-6)


@given(st.integers(0, 1000))
@settings(max_examples=8)
def test_what_clears_against_points_spread_over_the_cylinder(seed: int) -> None:
    """Sizes are of the order of 1, as the general mesh library's tolerances are lengths without a unit."""
    random = np.random.default_rng(seed)
    body = shapes.lumpy(seed, level=2, size=1.0)
    slug = Cylinder(body.vertices.mean(axis=0) + 1.5 * shapes.direction(seed + 1), shapes.direction(seed), 0.4, 0.1)
    step = 0.04
    near = trimesh.proximity.closest_point(shapes.as_trimesh(body), spread(slug, step))[1].min()  # type: ignore[no-untyped-call]
    boxes = Boxes.of(body)
    wanted = near + float(random.uniform(0.001, 0.1))
    assert not clears(boxes, slug, wanted)
    if near > 2 * step:
        assert clears(boxes, slug, near - step)
