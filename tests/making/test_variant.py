"""The meshes to make a bait from, read back by the general mesh library (trimesh) and held against geometry."""

from __future__ import annotations

from pathlib import Path

import numpy as np
import pytest
import shapes
import trimesh
from workbench import Insert, bait, insert, vector, void

import meshlure
from meshlure.errors import InputError
from meshlure.geometry.clearance import nearest
from meshlure.geometry.solids import Solid
from meshlure.geometry.surface import Surface
from meshlure.making import written as writing
from meshlure.making.variant import write_cuttings

SAMPLES = Path(__file__).parents[2] / "samples"
BODY = shapes.box((0.08, 0.016, 0.02))
WHOLE = 25600.0


def block(size: tuple[float, float, float], centre: tuple[float, float, float] = (0, 0, 0)) -> Surface:
    return shapes.box(tuple(vector(*size)), tuple(vector(*centre)))


def read(path: Path) -> trimesh.Trimesh:
    """An STL as the general library reads it, welded; mm."""
    mesh = trimesh.load_mesh(path, file_type="stl")
    assert mesh.is_watertight
    assert mesh.is_winding_consistent
    return mesh


def written(folder: Path, *pieces: Insert, body: Surface = BODY) -> dict[str, trimesh.Trimesh]:
    return {name: read(folder / name) for name in write_cuttings(bait(body, *pieces), folder)}


@pytest.mark.parametrize("gap", [0.0, 0.1, 0.2, 0.5])
def test_a_box_gets_a_pocket_wider_by_the_gap_on_every_side(tmp_path: Path, gap: float) -> None:
    size = np.array([10.0, 4.0, 6.0])
    made = written(tmp_path, insert("slug", block((10, 4, 6), (-20, 2, -3)), 11.34, fit=f"{gap} mm"))
    assert set(made) == {"body.stl", "slug.stl"}
    assert made["slug.stl"].volume == pytest.approx(240, rel=1e-6)
    assert made["body.stl"].volume == pytest.approx(WHOLE - np.prod(size + 2 * gap), rel=1e-6)
    # In CAD's own place: the slug where it was drawn, the body's outside untouched.
    np.testing.assert_allclose(made["slug.stl"].bounds, [[-25, 0, -6], [-15, 4, 0]], atol=1e-5)
    np.testing.assert_allclose(made["body.stl"].bounds, [[-40, -8, -10], [40, 8, 10]], atol=1e-5)
    pocket = made["body.stl"].vertices[np.abs(made["body.stl"].vertices[:, 0]) < 39]
    low, high = np.array([-25, 0, -6]) - gap, np.array([-15, 4, 0]) + gap
    np.testing.assert_allclose([pocket.min(axis=0), pocket.max(axis=0)], [low, high], atol=1e-5)


def test_an_angle_gets_a_pocket_with_mitred_corners(tmp_path: Path) -> None:
    # L of 10 x 10 with arms 4 wide, 6 thick: area 64, outline 40, five corners out and one in, so A + P g + 4 g^2.
    angle = Solid.of(block((10, 6, 10))).less(Solid.of(block((6, 8, 6), (2, 0, 2)))).surface()
    made = written(tmp_path, insert("angle", angle, 7.9, fit="0.3 mm"))
    assert made["angle.stl"].volume == pytest.approx(64 * 6, rel=1e-6)
    pocket = (64 + 40 * 0.3 + 4 * 0.09) * 6.6
    assert WHOLE - made["body.stl"].volume == pytest.approx(pocket, rel=1e-5)


@pytest.mark.parametrize("shape", ["cylinder", "ball", "lumpy"])
def test_round_inserts_get_their_gap_everywhere(tmp_path: Path, shape: str) -> None:
    surface = {
        "cylinder": shapes.cylinder(3e-3, 12e-3, 48).moved(shapes.turn(1)),
        "ball": shapes.sphere(5e-3, 3),
        "lumpy": shapes.lumpy(3, 3, size=0.003),
    }[shape]
    surface = surface.moved(shift=-surface.bounds.mean(axis=0))
    made = written(tmp_path, insert("slug", surface, 11.34, fit="0.2 mm"), body=shapes.box((0.08, 0.03, 0.03)))
    body = made["body.stl"]
    room = nearest(Surface(np.asarray(body.vertices) * 1e-3, np.asarray(body.faces)), surface.vertices).distance
    assert room.min() > 0.2e-3 * (1 - 1e-3)
    assert room.max() < 0.2e-3 * 1.15
    # Steiner's formula for a convex body: V + A g + at least 4 pi g^3 / 3; mitred edges take a little more.
    grown = 72e3 - body.volume
    least = (shapes.as_trimesh(surface).volume * 1e9) + surface.area * 1e6 * 0.2
    assert least < grown < least + surface.area * 1e6 * 0.2 * 0.15


def test_voids_are_cut_as_drawn_and_cavities_stay(tmp_path: Path) -> None:
    shell = shapes.together(BODY, block((10, 4, 4), (20, 0, 0)).turned())
    made = written(tmp_path, void("chamber", block((20, 6, 6), (-10, 0, 0))), body=shell)
    assert set(made) == {"body.stl"}
    assert made["body.stl"].volume == pytest.approx(WHOLE - 720 - 160, rel=1e-6)


def test_what_sticks_out_leaves_an_open_slot(tmp_path: Path) -> None:
    made = written(tmp_path, insert("lip", block((20, 10, 2), (-45, 0, -6)), 1.2, lip=True, fit="0.1 mm"))
    # The slot is 5.1 mm deep from the nose, 10.2 wide, 2.2 high.
    assert made["body.stl"].volume == pytest.approx(WHOLE - 5.1 * 10.2 * 2.2, rel=1e-6)
    assert made["lip.stl"].volume == pytest.approx(400, rel=1e-6)


def test_a_replaced_insert_gets_the_later_one_s_pocket(tmp_path: Path) -> None:
    slug = insert("slug", block((10, 6, 6)), 11.34)
    made = written(tmp_path, slug, insert("wire", block((40, 1, 1)), 7.9, replaces=["slug"], fit="0.1 mm"))
    assert made["slug.stl"].volume == pytest.approx(360 - 10 * 1.2 * 1.2, rel=1e-6)
    assert made["wire.stl"].volume == pytest.approx(40, rel=1e-6)
    assert made["body.stl"].volume == pytest.approx(WHOLE - 360 - 30.2 * 1.44, rel=1e-6)


def test_a_solid_in_a_chamber_and_a_void_in_a_slug(tmp_path: Path) -> None:
    pieces = [
        insert("barrel", block((12, 6, 6), (-20, 0, 0)), 8.5),
        void("bore", block((10, 4, 4), (-20, 0, 0))),
        void("chamber", block((20, 6, 6), (15, 0, 0))),
        insert("pin", block((1, 10, 1), (15, 0, 0)), 7.9),
    ]
    made = written(tmp_path, *pieces)
    assert made["barrel.stl"].volume == pytest.approx(432 - 160, rel=1e-6)
    assert made["pin.stl"].volume == pytest.approx(10, rel=1e-6)
    assert made["body.stl"].volume == pytest.approx(WHOLE - 432 - 720 - 4, rel=1e-6)


def test_names_of_files_are_plain_and_no_two_alike(tmp_path: Path) -> None:
    names = ["Belly weight #1", "belly/weight: 1", "öse", "wire"]
    pieces = [insert(name, block((4, 4, 4), (10.0 * k - 20, 0, 0)), 7.9) for k, name in enumerate(names)]
    assert set(written(tmp_path, *pieces)) == {
        "body.stl",
        "belly-weight-1.stl",
        "belly-weight-1-2.stl",
        "se.stl",
        "wire.stl",
    }


def test_nothing_left_is_refused(tmp_path: Path) -> None:
    pieces = [insert("bead", block((2, 2, 2)), 2.5), insert("slug", block((6, 6, 6)), 11.34, replaces=["bead"])]
    with pytest.raises(InputError, match=r"bead\.stl: nothing is left of it"):
        write_cuttings(bait(BODY, *pieces), tmp_path)


def test_a_broken_promise_is_refused(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    from meshlure.files.stl import write_stl as honest

    def lossy(path: Path, surface: Surface) -> None:
        honest(path, surface.moved(scale=1.0001))

    monkeypatch.setattr(writing, "write_stl", lossy)
    with pytest.raises(InputError, match=r"body\.stl: the mesh written does not keep its promise(.|\n)*within 0\.01%"):
        write_cuttings(bait(BODY), tmp_path)
    monkeypatch.setattr(writing, "write_stl", lambda path, s: honest(path, Surface(s.vertices, s.faces[1:])))
    with pytest.raises(InputError, match=r"body\.stl: the mesh written does not keep its promise(.|\n)*open"):
        write_cuttings(bait(BODY), tmp_path)


@pytest.mark.parametrize(("name", "gap"), [("minnow", "lip"), ("lipless", None), ("stick", None)])
def test_the_samples(tmp_path: Path, name: str, gap: str | None) -> None:
    given = meshlure.read_bait(SAMPLES / name / f"{name}.toml")
    made = {file: read(tmp_path / file) for file in write_cuttings(given, tmp_path)}
    solids = {piece.name: piece for piece in given.pieces if piece.substance is not None}
    for piece in solids.values():
        mesh = made[f"{piece.name.replace(' ', '-')}.stl"]
        assert mesh.volume == pytest.approx(shapes.as_trimesh(piece.surface).volume * 1e9, rel=1e-4)
        low, high = mesh.bounds
        np.testing.assert_allclose([low, high], piece.surface.bounds * 1e3, atol=0.02)
    # Every pocket is its piece's inside part; the lip's is wider by 0.1 mm on every side.
    whole = shapes.as_trimesh(given.body.surface).volume * 1e9
    inside = trimesh.boolean.difference(
        [
            shapes.as_trimesh(given.body.surface.moved(scale=1e3)),
            *(shapes.as_trimesh(piece.surface.moved(scale=1e3)) for piece in given.pieces),
        ]
    )
    if gap is None:
        assert made["body.stl"].volume == pytest.approx(inside.volume, rel=1e-4)
    else:
        lip = solids[gap]
        assert lip.fit == pytest.approx(1e-4)
        assert 5 < inside.volume - made["body.stl"].volume < lip.surface.area * 1e6 * 0.1
    assert made["body.stl"].volume < whole
