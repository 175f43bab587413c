"""A zoo of meshes, each with one thing wrong, and what is to be found about it."""

from __future__ import annotations

from collections.abc import Callable

import numpy as np
import pytest
import trimesh

from meshlure.findings import Finding, Level
from meshlure.geometry import soundness
from meshlure.geometry.soundness import Soundness, examine
from meshlure.geometry.surface import Surface
from meshlure.geometry.welding import weld

MM = 1e-3


def ball(radius: float, at: tuple[float, float, float] = (0, 0, 0), *, inwards: bool = False) -> trimesh.Trimesh:
    mesh: trimesh.Trimesh = trimesh.creation.icosphere(subdivisions=3, radius=radius)
    mesh.apply_translation(at)
    if inwards:
        mesh.invert()
    return mesh


def surface_of(*meshes: trimesh.Trimesh) -> Surface:
    """Meshes drawn in mm."""
    return weld(MM * np.concatenate([np.asarray(mesh.triangles, dtype=np.float64) for mesh in meshes])).surface


def box_of_squares() -> Surface:
    return surface_of(trimesh.creation.box(bounds=[[-10, -5, -5], [10, 5, 5]]).subdivide().subdivide())


def without(surface: Surface, faces: np.ndarray) -> Surface:
    return Surface(surface.vertices, np.delete(surface.faces, faces, axis=0))


def only(found: Soundness, code: str) -> Finding:
    (finding,) = (f for f in found.findings if f.code == code)
    return finding


def test_a_sound_body_has_nothing_to_say() -> None:
    mesh = ball(10)
    found = examine(surface_of(mesh), "body")
    assert found.findings == ()
    assert not found.stops
    assert found.volume == pytest.approx(mesh.volume * 1e-9, rel=1e-12)
    assert len(found.shells) == 1
    assert found.shells[0].surface is found.surface


def half_body() -> Surface:
    box = box_of_squares()
    return without(box, np.flatnonzero(box.corners[:, :, 0].min(axis=1) < -1e-9))


def unsewn() -> Surface:
    """Halves of a box, 0.1 um apart."""
    box = box_of_squares()
    corners = box.corners.copy()
    corners[box.corners[:, :, 0].max(axis=1) < 1e-9] -= [1e-7, 0, 0]
    return weld(corners).surface


def cracked() -> Surface:
    """A box with one line of vertices, across its top, that differ by 0.1 um between the faces on both sides."""
    box = box_of_squares()
    corners = box.corners.copy()
    left = corners[:, :, 0].mean(axis=1) < 0
    x, y, z = np.moveaxis(corners, 2, 0)
    x[left[:, None] & (np.abs(x) < 1e-9) & (z > 4.9e-3) & (np.abs(y) < 4e-3)] -= 1e-7
    return weld(corners).surface


def turned_patch() -> Surface:
    whole = surface_of(ball(10))
    faces = whole.faces.copy()
    faces[5:8] = faces[5:8, ::-1]
    return Surface(whole.vertices, faces)


def copied(count: int) -> Surface:
    whole = surface_of(ball(10))
    return Surface(whole.vertices, np.concatenate([whole.faces, whole.faces[:count]]))


def finned() -> Surface:
    whole = surface_of(ball(10))
    a, b = whole.faces[0, :2]
    fin = len(whole.vertices)
    return Surface(np.vstack([whole.vertices, [[0.0, 0.0, 0.02]]]), np.vstack([whole.faces, [[a, b, fin]]]))


def lost_vertex() -> Surface:
    whole = surface_of(ball(10))
    vertices = whole.vertices.copy()
    vertices[3] = np.nan
    return Surface(vertices, whole.faces)


@pytest.mark.parametrize(
    ("make", "code", "count", "words"),
    [
        (lambda: without(surface_of(ball(10)), np.array([17])), "open-edges", 3, "3 open edges in 1 rim"),
        (lambda: without(surface_of(ball(10)), np.array([17, 900])), "open-edges", 6, "6 open edges in 2 rims"),
        (half_body, "open-edges", 16, "flat hole at x = 0 mm"),
        (unsewn, "open-edges", 32, "32 open edges in 2 rims"),
        (cracked, "open-edges", 8, "crack of 8 edges, 20 mm round"),
        (turned_patch, "mixed-winding", 5, "(-7.03, 6.546, 2.665) mm"),
        (lambda: copied(1), "duplicate-faces", 1, "corners of another face"),
        (finned, "crowded-edges", 1, "more than two faces"),
        (lost_vertex, "non-finite-vertices", 1, "1 vertex"),
        (lambda: Surface(np.empty((0, 3)), np.empty((0, 3), dtype=np.intp)), "no-faces", 0, "no faces"),
        (lambda: surface_of(ball(10), ball(5, (8, 0, 0), inwards=True)), "cavity-crossing", 1, "519.1 mm3"),
    ],
)
def test_what_leaves_the_volume_undefined_stops(make: Callable[[], Surface], code: str, count: int, words: str) -> None:
    found = examine(make(), "keel")
    finding = only(found, code)
    assert finding.level is Level.FAULT
    assert finding.stops
    assert finding.piece == "keel"
    assert finding.count == count
    assert words in finding.message
    assert finding.advice
    assert found.stops
    assert found.volume is None or code == "cavity-crossing"


def test_a_flat_opening_at_the_end_of_the_body_asks_for_the_other_half() -> None:
    finding = only(examine(half_body(), "body"), "open-edges")
    assert "half a body" in finding.advice
    # The rim of the 10 x 10 mm section.
    assert "40 mm round" in finding.message
    np.testing.assert_allclose(finding.where, [[0, 0, 0]], atol=1e-12)


def test_a_crack_and_a_seam_ask_for_sewing() -> None:
    assert "two sides of a crack nearly meet" in only(examine(cracked(), "body"), "open-edges").advice
    assert "Two rims lie on each other, 0.0001 mm apart" in only(examine(unsewn(), "body"), "open-edges").advice


def test_rims_are_listed_longest_first_and_no_more_than_ten() -> None:
    whole = surface_of(ball(10))
    taken: set[int] = set()
    lone = []
    for number, face in enumerate(whole.faces.tolist()):
        if taken.isdisjoint(face) and number % 7 == 0:
            lone.append(number)
            taken.update(face)
    found = only(examine(without(whole, np.array(lone)), "body"), "open-edges")
    assert len(found.where) == 10
    assert f"in {len(lone)} rims" in found.message
    assert f"and {len(lone) - 10} more" in found.message


def test_an_inside_out_body_is_turned_and_said_so() -> None:
    right = surface_of(ball(10))
    found = examine(right.turned(), "body")
    assert only(found, "inside-out").level is Level.WARNING
    assert not found.stops
    assert found.volume == pytest.approx(examine(right, "body").volume, rel=1e-14)
    np.testing.assert_array_equal(found.surface.faces, right.faces)
    assert (found.surface.faces[found.pairs.forward_face, found.pairs.forward % 3] == found.pairs.start).all()


def test_a_body_apart_that_looks_inwards_is_turned_alone() -> None:
    a, b = ball(10), ball(5, (30, 0, 0), inwards=True)
    found = examine(surface_of(a, b), "body")
    assert found.volume == pytest.approx((a.volume - b.volume) * 1e-9, rel=1e-12)
    assert only(found, "inside-out-shell").where[0] == pytest.approx((0.03, 0, 0))
    assert only(found, "shells-apart").count == 2
    for shell in found.shells:
        np.testing.assert_array_equal(shell.surface.corners, found.surface.corners[shell.faces])


def test_a_reversed_shell_inside_is_a_cavity() -> None:
    a, b = ball(10), ball(5, (1, 2, 3), inwards=True)
    found = examine(surface_of(a, b), "body")
    assert [f.code for f in found.findings] == ["several-shells"]
    assert "cavity of 519.1 mm3 about (1, 2, 3) mm" in found.findings[0].message
    assert found.volume == pytest.approx((a.volume + b.volume) * 1e-9, rel=1e-12)


def test_bodies_that_overlap_are_named_for_joining() -> None:
    found = examine(surface_of(ball(10), ball(3, (9, 0, 0)), ball(2, (-30, 0, 0))), "body")
    assert found.joins == ((0, 1),)
    assert only(found, "shells-apart").count == 2


def test_a_solid_within_a_solid_is_a_warning() -> None:
    found = examine(surface_of(ball(10), ball(4)), "body")
    assert only(found, "shell-in-solid").level is Level.WARNING
    assert found.joins == ((0, 1),)


def test_a_cavity_that_touches_the_skin_does_not_stop() -> None:
    outer = trimesh.creation.box(bounds=[[-10, -10, -10], [10, 10, 10]])
    inner = trimesh.creation.box(bounds=[[-5, -5, 5], [5, 5, 10]])
    inner.invert()
    found = examine(surface_of(outer, inner), "body")
    assert not found.stops
    assert found.volume == pytest.approx((8000 - 500) * 1e-9, rel=1e-12)


def test_a_second_copy_of_the_whole_skin_is_said_and_joined() -> None:
    found = examine(copied(1280), "body")
    assert only(found, "duplicate-faces").level is Level.WARNING
    assert only(found, "duplicate-faces").count == 1280
    assert not found.stops
    assert found.joins == ((0, 1),)


def test_two_skins_on_each_other_are_left_out_or_stop() -> None:
    whole = surface_of(ball(10))
    sheet = Surface(whole.vertices * 0.1, np.concatenate([whole.faces[:1], whole.faces[:1, ::-1]]))
    both = Surface(
        np.concatenate([whole.vertices, sheet.vertices]),
        np.concatenate([whole.faces, sheet.faces + len(whole.vertices)]),
    )
    found = examine(both, "body")
    assert only(found, "flat-shells").level is Level.WARNING
    assert found.volume == pytest.approx(examine(whole, "body").volume, rel=1e-12)
    assert len(found.surface.faces) == len(whole.faces)
    alone = examine(sheet, "body")
    assert alone.stops
    assert alone.volume is None


def test_a_face_of_no_area_is_a_note() -> None:
    # A corner moved onto the opposite edge of its face.
    mesh = trimesh.creation.box(bounds=[[0, 0, 0], [10, 10, 10]]).subdivide()
    surface = surface_of(mesh)
    split = surface.faces[0]
    middle = surface.vertices[split[:2]].mean(axis=0)
    new = len(surface.vertices)
    faces = np.vstack(
        [surface.faces[1:], [[split[0], new, split[2]], [new, split[1], split[2]], [split[0], split[1], new]]]
    )
    found = examine(Surface(np.vstack([surface.vertices, middle]), faces), "body")
    assert only(found, "zero-area-faces").count == 1
    assert only(found, "zero-area-faces").level is Level.NOTE
    assert found.volume == pytest.approx(1e-6, rel=1e-12)


def twisted() -> Surface:
    """A tube bent round so far that its end runs through its own side."""
    t = np.linspace(0, 1.15 * 2 * np.pi, 80)
    path = np.column_stack([10 * np.cos(t), 10 * np.sin(t), 0.5 * t])
    circle = np.linspace(0, 2 * np.pi, 17)[:-1]
    tangent = np.gradient(path, axis=0)
    tangent /= np.linalg.norm(tangent, axis=1)[:, None]
    out = path * [1, 1, 0] / 10
    up = np.cross(tangent, out)
    rings = path[:, None] + 2 * (np.cos(circle)[:, None] * out[:, None] + np.sin(circle)[:, None] * up[:, None])
    i, j = np.meshgrid(np.arange(79), np.arange(16), indexing="ij")
    a, b, c, d = (16 * (i + p) + (j + q) % 16 for p, q in ((0, 0), (1, 0), (1, 1), (0, 1)))
    ends = [[16 * k, 16 * k + j, 16 * k + j + 1][:: 1 if k else -1] for k in (0, 79) for j in range(1, 15)]
    faces = np.concatenate([np.stack([a, d, b], -1).reshape(-1, 3), np.stack([d, c, b], -1).reshape(-1, 3), ends])
    return Surface(rings.reshape(-1, 3) * MM, faces)


def test_a_skin_that_runs_through_itself_is_a_warning() -> None:
    surface = twisted()
    found = examine(surface, "body")
    finding = only(found, "self-crossing")
    assert finding.level is Level.WARNING
    assert not found.stops
    assert finding.count is not None
    assert finding.count > 50
    # The tube meets itself where its ends overlap, beside the x axis.
    assert all(x > 0 for x, _, _ in finding.where)


def test_too_many_faces_for_the_search_are_said(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(soundness, "SEARCHED", 500)
    found = examine(surface_of(ball(10)), "body")
    assert only(found, "self-crossing-unsearched").level is Level.NOTE
