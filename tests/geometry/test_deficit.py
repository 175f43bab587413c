"""Facet deficits against closed forms: the volume of the smooth body less that of its mesh.

Volumes of ball, spheroid, ring, cylinder, cone, capsule and prisms from elementary geometry; that of a disc with round
fillets from Pappus (centroid of a quarter disc 4 r / 3 pi from its corner).
"""

from __future__ import annotations

import json
from collections.abc import Callable
from pathlib import Path

import numpy as np
import pytest
import stl
import trimesh

from meshlure.geometry.deficit import facet_deficit
from meshlure.geometry.shells import enclosed_volume
from meshlure.geometry.surface import Floats, Surface
from meshlure.geometry.topology import paired
from meshlure.geometry.welding import weld

PI = float(np.pi)


def surface_of(mesh: trimesh.Trimesh, stretch: tuple[float, float, float] = (1, 1, 1)) -> Surface:
    return weld(np.asarray(mesh.triangles, dtype=np.float64) * stretch).surface


def revolved(profile: Floats, sections: int) -> Surface:
    """Body of revolution about z of a profile (radius, z) with its ends on the axis."""
    mesh = trimesh.creation.revolve(profile, sections=sections)
    surface = surface_of(mesh)
    return surface if enclosed_volume(surface) > 0 else surface.turned()


def prism(outline: Floats, height: float) -> Surface:
    """Straight prism over a convex outline that runs anticlockwise."""
    n = len(outline)
    i = np.arange(n)
    j = (i + 1) % n
    fan = np.column_stack([np.zeros(n - 2, dtype=np.intp), i[1:-1], i[2:]])
    faces = [np.column_stack([i, j, j + n]), np.column_stack([i, j + n, i + n]), fan[:, ::-1], fan + n]
    vertices = np.concatenate([np.column_stack([outline, np.full(n, z)]) for z in (0.0, height)])
    return Surface(vertices, np.concatenate(faces))


def arc(centre: tuple[float, float], radius: float, start: float, stop: float, pieces: int) -> Floats:
    t = np.radians(np.linspace(start, stop, pieces + 1))
    return np.column_stack([centre[0] + radius * np.cos(t), centre[1] + radius * np.sin(t)])


def rounded_outline(length: float, width: float, radius: float, pieces: int) -> Floats:
    x, y = length / 2 - radius, width / 2 - radius
    corners = ((x, y), (-x, y), (-x, -y), (x, -y))
    return np.concatenate([arc(c, radius, 90.0 * q, 90.0 * (q + 1), pieces) for q, c in enumerate(corners)])


def latitude_ball(bands: int) -> Surface:
    return revolved(arc((0, 0), 1.0, -90, 90, bands), 2 * bands)


def scattered_ball(count: int) -> Surface:
    """Convex hull of points on a golden spiral: no rows, no symmetry."""
    i = np.arange(count) + 0.5
    z, turn = 1 - 2 * i / count, i * PI * (3 - 5**0.5)
    ring = np.sqrt(1 - z * z)
    return surface_of(trimesh.convex.convex_hull(np.column_stack([ring * np.cos(turn), ring * np.sin(turn), z])))


def stretched(surface: Surface, *by: float) -> Surface:
    return Surface(surface.vertices * by, surface.faces)


def capsule(pieces: int) -> Surface:
    """Stick with round ends whose side is one facet long."""
    ends = arc((0, 0), 1.0, -90, 0, pieces), arc((0, 8.0), 1.0, 0, 90, pieces)
    return revolved(np.concatenate(ends), 4 * pieces)


def filleted_disc(pieces: int, radius: float = 6.0, height: float = 4.0, fillet: float = 1.0) -> Surface:
    inner = radius - fillet
    rims = arc((inner, fillet), fillet, -90, 0, pieces), arc((inner, height - fillet), fillet, 0, 90, pieces)
    return revolved(np.concatenate([[[0, 0]], *rims, [[0, height]]]), 8 * pieces)


def filleted_disc_volume(radius: float = 6.0, height: float = 4.0, fillet: float = 1.0) -> float:
    inner = radius - fillet
    rim = PI / 2 * fillet**2 * 2 * PI * (inner + 4 * fillet / (3 * PI))
    return PI * inner**2 * height + (height - 2 * fillet) * PI * (radius**2 - inner**2) + rim


BALL = 4 / 3 * PI
SMOOTH: dict[str, tuple[Callable[[int], Surface], float]] = {
    "ball by halving": (lambda n: surface_of(trimesh.creation.icosphere(subdivisions=n + 1)), BALL),
    "ball by latitude": (lambda n: latitude_ball(6 * 2**n), BALL),
    "ball by spiral": (lambda n: scattered_ball(100 * 4**n), BALL),
    "spheroid by halving": (
        lambda n: surface_of(trimesh.creation.icosphere(subdivisions=n + 1), (4, 1, 1)),
        BALL * 4,
    ),
    "spheroid by latitude": (lambda n: stretched(latitude_ball(6 * 2**n), 1, 1, 4), BALL * 4),
    "ellipsoid by spiral": (lambda n: stretched(scattered_ball(50 * 4**n), 3, 1, 0.7), BALL * 2.1),
    "ring": (
        lambda n: surface_of(trimesh.creation.torus(3.0, 1.0, major_sections=16 * 2**n, minor_sections=8 * 2**n)),
        2 * PI**2 * 3,
    ),
    "capped cylinder": (lambda n: surface_of(trimesh.creation.cylinder(1.0, 5.0, sections=8 * 2**n)), 5 * PI),
    "half ball": (lambda n: revolved(np.vstack([[[0, 0]], arc((0, 0), 1.0, 0, 90, 4 * 2**n)]), 16 * 2**n), BALL / 2),
    "stick with round ends": (lambda n: capsule(3 * 2**n), BALL + 8 * PI),
    "filleted disc": (lambda n: filleted_disc(3 * 2**n), filleted_disc_volume()),
    "plate with round corners": (
        lambda n: prism(rounded_outline(40, 10, 2, 3 * 2**n), 5.0),
        (400 - 16 + 4 * PI) * 5,
    ),
}


def shortfalls(name: str) -> tuple[Floats, Floats]:
    """True and estimated deficits at three finenesses, each facet about half as long as the last."""
    make, volume = SMOOTH[name]
    surfaces = [make(n) for n in (1, 2, 3)]
    true = np.array([volume - enclosed_volume(surface) for surface in surfaces])
    return true, np.array([facet_deficit(surface, paired(surface)) for surface in surfaces])


@pytest.mark.parametrize("name", SMOOTH)
def test_within_a_tenth_of_the_true_deficit_at_three_finenesses(name: str) -> None:
    true, found = shortfalls(name)
    assert (true > 0).all()
    np.testing.assert_allclose(found, true, rtol=0.10)


@pytest.mark.parametrize("name", SMOOTH)
def test_corrected_volume_converges_at_a_higher_order_than_the_facets(name: str) -> None:
    true, found = shortfalls(name)
    order = np.log2(true[0] / true[2]) / 2
    corrected = np.log2(abs(true[0] - found[0]) / abs(true[2] - found[2])) / 2
    assert order == pytest.approx(2.0, abs=0.15)
    assert corrected > order + 0.5


@pytest.mark.parametrize(
    "surface",
    [
        surface_of(trimesh.creation.box((1, 2, 3))),
        surface_of(trimesh.creation.box((1, 2, 3)).subdivide().subdivide()),
        surface_of(trimesh.creation.icosahedron()),
        prism(np.array([[0, 0], [3, 0], [4, 2], [1, 3]], dtype=np.float64), 2.0),
    ],
)
def test_bodies_of_plane_faces_leave_nothing_out(surface: Surface) -> None:
    assert facet_deficit(surface, paired(surface)) == pytest.approx(0, abs=1e-12)


def test_a_hollow_takes_away_what_the_same_body_adds() -> None:
    ball = surface_of(trimesh.creation.icosphere(subdivisions=3))
    hollow = ball.turned()
    assert facet_deficit(hollow, paired(hollow)) == pytest.approx(-facet_deficit(ball, paired(ball)), rel=1e-12)


def test_a_cone_in_single_facets_gets_three_quarters() -> None:
    # The skin's height over a facet grows in proportion from apex to rim: 4/9 of facet area times sagitta, of which
    # three mid-side heights see 1/3.
    cone = surface_of(trimesh.creation.cone(1.0, 5.0, sections=64))
    true = 5 / 3 * PI - enclosed_volume(cone)
    assert facet_deficit(cone, paired(cone)) == pytest.approx(0.75 * true, rel=0.01)


def test_a_chamfer_does_not_make_a_long_side_bulge() -> None:
    chamfer = float(np.tan(np.radians(15)))
    profile = np.array([[0, 0], [1 - chamfer, 0], [1, 1], [1, 50], [0, 50]])
    stick = revolved(profile, 32)
    a = 1 - chamfer
    true = 49 * PI + PI / 3 * (1 + a + a * a) - enclosed_volume(stick)
    assert facet_deficit(stick, paired(stick)) == pytest.approx(true, rel=0.25)


@pytest.mark.parametrize("pieces", [4, 8])
def test_a_flat_of_one_polygon_beside_a_fillet_stays_flat(pieces: int) -> None:
    # As CAD meshes it: the flat's triangles run from rim to rim, without a vertex inside.
    surface = filleted_disc(pieces)
    on_flat = np.isin(surface.vertices[:, 2].round(9), (0.0, 4.0)) & (np.hypot(*surface.vertices[:, :2].T) > 1)
    middle = np.flatnonzero(np.hypot(*surface.vertices[:, :2].T) < 1e-9)
    kept = surface.faces[~np.isin(surface.faces, middle).any(axis=1)]
    flats = []
    for z in (0.0, 4.0):
        rim = np.flatnonzero(on_flat & (np.abs(surface.vertices[:, 2] - z) < 1e-9))
        rim = rim[np.argsort(np.arctan2(surface.vertices[rim, 1], surface.vertices[rim, 0]))]
        fan = np.column_stack([np.full(len(rim) - 2, rim[0]), rim[1:-1], rim[2:]])
        flats.append(fan if z else fan[:, ::-1])
    drawn = Surface(surface.vertices, np.concatenate([kept, *flats]))
    assert paired(drawn).closed
    true = filleted_disc_volume() - enclosed_volume(drawn)
    assert facet_deficit(drawn, paired(drawn)) == pytest.approx(true, rel=0.10)


def test_four_byte_coordinates_and_a_needle_change_little() -> None:
    ball = surface_of(trimesh.creation.icosphere(subdivisions=3, radius=0.02))
    exact = facet_deficit(ball, paired(ball))
    # One face split at a point a millionth of a side away from its first corner's opposite side.
    vertices = np.vstack([ball.vertices, ball.vertices[ball.faces[0, 1:]].mean(axis=0)]).astype(np.float32)
    a, b, c = ball.faces[0].tolist()
    new = len(ball.vertices)
    faces = np.vstack([ball.faces[1:], [[a, b, new], [a, new, c], [b, c, new]]])
    needle = Surface(vertices.astype(np.float64), faces)
    assert paired(needle).closed
    assert facet_deficit(needle, paired(needle)) == pytest.approx(exact, rel=0.005)


SAMPLES = Path(__file__).parents[2] / "samples"
KERNEL = json.loads((Path(__file__).parents[1] / "authorities" / "brep.json").read_text())


@pytest.mark.parametrize(
    ("bait", "piece", "mesh", "share"),
    [
        ("minnow", "body", "minnow/body", 0.02),
        ("minnow", "body", "minnow/coarse/body", 0.02),
        ("minnow", "wire", "minnow/wire", 0.05),
        ("minnow", "belly_weight", "minnow/belly_weight", 0.10),
        ("stick", "body", "stick/body", 0.05),
        ("stick", "slug", "stick/slug", 0.05),
        # Flat-sided, with curvature that changes in steps where the straight share of the flank begins.
        ("lipless", "body", "lipless/body", 0.25),
        ("lipless", "chamber", "lipless/chamber", 0.05),
        ("lipless", "line_tie", "lipless/line_tie", 0.10),
    ],
)
def test_solids_of_a_brep_kernel_are_short_by_what_is_said(bait: str, piece: str, mesh: str, share: float) -> None:
    # Exact volumes by Open CASCADE, stored with version and date under tests/authorities.
    corners = stl.mesh.Mesh.from_file(str(SAMPLES / f"{mesh}.stl")).vectors.astype(np.float64)
    surface = weld(corners).surface
    true = KERNEL["samples"][bait][piece]["volume_mm3"] - enclosed_volume(surface)
    assert facet_deficit(surface, paired(surface)) == pytest.approx(true, rel=share)
