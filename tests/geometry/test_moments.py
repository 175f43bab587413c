"""Mass properties against closed forms (any table of solids; Meriam and Kraige, Dynamics, appendix D, from memory).

Vertices lie on the exact skin, so that the error falls with the square of the facets' size: the order is asserted too.
"""

from __future__ import annotations

from collections.abc import Callable

import numpy as np
import pytest
import shapes

from meshlure.geometry.moments import NOTHING, Moments, ball_moments, point_moments, skin_moments, solid_moments
from meshlure.geometry.surface import Floats, Surface

Exact = tuple[float, Floats, Floats]


def diagonal(x: float, y: float, z: float) -> Floats:
    return np.diag([x, y, z])


def ball_of(radius: float) -> Exact:
    volume = 4 / 3 * np.pi * radius**3
    return volume, np.zeros(3), 0.4 * volume * radius**2 * np.eye(3)


def ellipsoid_of(a: float, b: float, c: float) -> Exact:
    volume = 4 / 3 * np.pi * a * b * c
    return volume, np.zeros(3), volume / 5 * diagonal(b * b + c * c, a * a + c * c, a * a + b * b)


def cylinder_of(r: float, length: float) -> Exact:
    volume = np.pi * r * r * length
    across = volume * (3 * r * r + length**2) / 12
    return volume, np.zeros(3), diagonal(across, across, volume * r * r / 2)


def cone_of(r: float, h: float) -> Exact:
    """Apex at the origin, base at z = h."""
    volume = np.pi * r * r * h / 3
    across = volume * (3 / 20 * r * r + 3 / 80 * h * h)
    return volume, np.array([0, 0, 3 * h / 4]), diagonal(across, across, 0.3 * volume * r * r)


def paraboloid_of(p: float, h: float) -> Exact:
    """r^2 = p z to z = h; derived in closed form: discs of area pi p z."""
    volume = np.pi * p * h * h / 2
    across = volume * (p * h / 6 + h * h / 18)
    return volume, np.array([0, 0, 2 * h / 3]), diagonal(across, across, volume * p * h / 3)


def torus_of(ring: float, tube: float) -> Exact:
    volume = 2 * np.pi**2 * ring * tube**2
    across = volume * (ring**2 / 2 + 5 / 8 * tube**2)
    return volume, np.zeros(3), diagonal(across, across, volume * (ring**2 + 3 / 4 * tube**2))


CURVED: dict[str, tuple[Callable[[int], Surface], Exact]] = {
    "sphere": (lambda k: shapes.sphere(0.02, k + 2), ball_of(0.02)),
    "ellipsoid": (lambda k: shapes.ellipsoid((0.05, 0.008, 0.011), k + 2), ellipsoid_of(0.05, 0.008, 0.011)),
    "cylinder": (lambda k: shapes.cylinder(0.01, 0.06, 24 * 2**k), cylinder_of(0.01, 0.06)),
    "cone": (lambda k: shapes.cone(0.02, 0.05, 24 * 2**k), cone_of(0.02, 0.05)),
    "paraboloid": (lambda k: shapes.paraboloid(0.01, 0.04, 8 * 2**k), paraboloid_of(0.01, 0.04)),
    "torus": (lambda k: shapes.torus(0.03, 0.01, 16 * 2**k), torus_of(0.03, 0.01)),
}


def relative(found: Floats, exact: Floats) -> float:
    return float(np.abs(found - exact).max() / np.abs(exact).max())


@pytest.mark.parametrize("name", CURVED)
def test_curved_solids_converge_with_the_square_of_the_facets_size(name: str) -> None:
    build, (volume, centre, inertia) = CURVED[name]
    found = [solid_moments(build(k)) for k in range(3)]
    assert shapes.order([m.amount - volume for m in found]) == pytest.approx([2, 2], abs=0.12)
    errors = [relative(m.inertia, inertia) for m in found]
    assert shapes.order(errors) == pytest.approx([2, 2], abs=0.12)
    assert errors[-1] < 0.02
    assert found[-1].amount == pytest.approx(volume, rel=0.01)
    if centre.any() and name == "paraboloid":
        assert shapes.order([m.centre[2] - centre[2] for m in found]) == pytest.approx([2, 2], abs=0.12)
    # Where symmetry alone, or the base's shape alone, fixes the centre it is exact at any fineness.
    assert found[-1].centre == pytest.approx(centre, abs=1e-3 * np.cbrt(volume) if name == "paraboloid" else 1e-15)


def test_box_is_exact_wherever_it_stands_and_however_it_is_turned() -> None:
    # m/12 (b^2 + c^2, ...), turned as R I R^T.
    a, b, c = 0.1, 0.016, 0.022
    volume = a * b * c
    own = volume / 12 * diagonal(b * b + c * c, a * a + c * c, a * a + b * b)
    for seed in range(5):
        turn, shift = shapes.turn(seed), np.random.default_rng(seed).normal(size=3) * 0.1
        found = solid_moments(shapes.box((a, b, c), level=1).moved(turn, shift))
        assert found.amount == pytest.approx(volume, rel=1e-12)
        np.testing.assert_allclose(found.centre, shift, rtol=0, atol=1e-15)
        np.testing.assert_allclose(found.inertia, turn @ own @ turn.T, rtol=0, atol=1e-12 * own.max())


def test_a_body_a_kilometre_off_keeps_its_inertia() -> None:
    # Coordinates of 1 km carry 1.1e-13 m: over a 0.1 m body 1e-12, and inertia about the own centre no worse.
    near = solid_moments(shapes.lumpy(3))
    shift = np.array([1000.0, -1000.0, 500.0])
    far = solid_moments(shapes.lumpy(3).moved(shift=shift))
    assert far.amount == pytest.approx(near.amount, rel=1e-10)
    np.testing.assert_allclose(far.centre - shift, near.centre, rtol=0, atol=1e-12)
    np.testing.assert_allclose(far.inertia, near.inertia, rtol=0, atol=1e-10 * near.inertia.max())


def test_against_the_general_mesh_library() -> None:
    # trimesh.Trimesh.mass_properties: an independent code, on a body with no symmetry.
    surface = shapes.lumpy(7, level=2)
    found, mesh = solid_moments(surface), shapes.as_trimesh(surface)
    assert found.amount == pytest.approx(float(mesh.volume), rel=1e-12)
    np.testing.assert_allclose(found.centre, mesh.center_mass, rtol=0, atol=1e-14)
    exact = mesh.moment_inertia
    np.testing.assert_allclose(found.inertia, exact, rtol=0, atol=1e-10 * np.abs(exact).max())


def test_products_of_inertia_are_negated() -> None:
    # By hand: unit cubes about (0.5, 0.5), (1.5, 0.5), (0.5, 1.5) have their centroid at (5/6, 5/6), and their offsets'
    # products sum to (-1/3)(-1/3) + (2/3)(-1/3) + (-1/3)(2/3) = -1/3.
    cubes = [shapes.box((1, 1, 1), (x, y, 0.5)) for x, y in ((0.5, 0.5), (1.5, 0.5), (0.5, 1.5))]
    whole = sum((solid_moments(cube) for cube in cubes), NOTHING)
    assert whole.inertia[0, 1] == pytest.approx(1 / 3, rel=1e-12)
    assert whole.centre == pytest.approx([5 / 6, 5 / 6, 0.5])


def test_pieces_add_to_the_whole_and_take_away_again() -> None:
    whole = solid_moments(shapes.box((3, 2, 1)))
    left, right = solid_moments(shapes.box((1, 2, 1), (-1, 0, 0))), solid_moments(shapes.box((2, 2, 1), (0.5, 0, 0)))
    for found, exact in ((left + right, whole), (whole - left, right), (2.5 * left, left * 2.5)):
        assert found.amount == pytest.approx(exact.amount, rel=1e-14)
        np.testing.assert_allclose(found.first, exact.first, rtol=0, atol=1e-14)
        np.testing.assert_allclose(found.second, exact.second, rtol=0, atol=1e-14)


def test_nothing_has_no_centre_and_taking_all_away_leaves_nothing() -> None:
    body = ball_moments(0.02, np.array([1.0, 2.0, 3.0]))
    assert NOTHING.centre == pytest.approx(np.zeros(3))
    assert (body - body).amount == 0
    assert (body - body).centre == pytest.approx(np.zeros(3))
    sum_up: Moments = NOTHING + body
    assert sum_up.inertia == pytest.approx(body.inertia, rel=1e-14)


def test_ball_and_point() -> None:
    # 2/5 m r^2 of a ball; m d^2 of a point about another (Steiner).
    ball = ball_moments(0.006, np.array([0.1, 0, 0]))
    volume, _, inertia = ball_of(0.003)
    assert ball.amount == pytest.approx(volume, rel=1e-14)
    np.testing.assert_allclose(ball.inertia, inertia, rtol=1e-14)
    pair = point_moments(2.0, np.array([0.0, 0, 0])) + point_moments(3.0, np.array([0, 5.0, 0]))
    assert pair.inertia[0, 0] == pytest.approx(2 * 3 / 5 * 25, rel=1e-14)
    assert pair.centre == pytest.approx([0, 3, 0])


def test_radii_of_gyration_of_a_rod_like_box() -> None:
    # sqrt((b^2 + c^2)/12), ascending.
    radii = solid_moments(shapes.box((0.1, 0.02, 0.01))).gyration()
    exact = np.sqrt(np.array([0.02**2 + 0.01**2, 0.1**2 + 0.01**2, 0.1**2 + 0.02**2]) / 12)
    np.testing.assert_allclose(radii, exact, rtol=1e-12)


def test_coat_of_a_sphere_is_a_thin_shell() -> None:
    # Area 4 pi r^2, inertia of a thin spherical shell 2/3 m r^2.
    radius, thickness = 0.02, 0.1e-3
    found = []
    for level in (2, 3, 4):
        surface = shapes.sphere(radius, level).moved(shift=np.array([0.3, 0, 0]))
        found.append(skin_moments(surface, np.full(len(surface.faces), thickness)))
    volume = 4 * np.pi * radius**2 * thickness
    assert shapes.order([m.amount - volume for m in found]) == pytest.approx([2, 2], abs=0.1)
    errors = [relative(m.inertia, 2 / 3 * volume * radius**2 * np.eye(3)) for m in found]
    assert shapes.order(errors) == pytest.approx([2, 2], abs=0.1)
    assert errors[-1] < 0.01
    assert found[-1].centre == pytest.approx([0.3, 0, 0], abs=1e-12)


def test_coat_on_one_face_of_a_box_is_a_plate() -> None:
    # A plate's second moments m a^2/12, m b^2/12 about its own middle.
    surface = shapes.box((0.1, 0.02, 0.03))
    top = surface.double_areas[:, 2] > 0
    found = skin_moments(surface, np.where(top, 0.2e-3, 0.0))
    volume = 0.1 * 0.02 * 0.2e-3
    assert found.amount == pytest.approx(volume, rel=1e-12)
    assert found.centre == pytest.approx([0, 0, 0.015], abs=1e-15)
    plate = diagonal(volume * 0.1**2 / 12, volume * 0.02**2 / 12, 0)
    np.testing.assert_allclose(found.second, plate, rtol=1e-12, atol=1e-25)
