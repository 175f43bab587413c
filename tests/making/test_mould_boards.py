"""A mould's pieces as files, read by the general mesh library (trimesh) and held against closed forms."""

from __future__ import annotations

from pathlib import Path

import numpy as np
import pytest
import shapes
import trimesh
from moulds import above, moulded, read, written
from workbench import bait, insert, vector

import meshlure
from meshlure.errors import InputError
from meshlure.files.sections.mould import MouldSection
from meshlure.geometry.clearance import nearest
from meshlure.geometry.solids import Solid
from meshlure.geometry.surface import Surface
from meshlure.making.mould import check as checking
from meshlure.making.mould.boards import Printed
from meshlure.making.mould.design import Kind, design, resin_outside
from meshlure.moulding import mould, write

SAMPLES = Path(__file__).parents[2] / "samples"
BODY = shapes.ellipsoid((0.03, 0.007, 0.01), 3)
VOLUME = float(shapes.as_trimesh(BODY).volume) * 1e9
SHRINK = {"print": "0.2 %", "silicone": "0.3 %", "resin": "0.4 %"}
K3 = (0.998 * 0.997 * 0.996) ** -3


def test_the_halves_of_a_body_stand_on_two_boards(tmp_path: Path) -> None:
    made = moulded(BODY, shrink=SHRINK, keys=0, vents=["nose"], sprue={"at": "tail", "diameter": "6 mm"})
    files = written(made, tmp_path)
    assert set(files.meshes) == {"board A", "board B", "frame"}
    assert sum(files.checked.halves) * 1e9 == pytest.approx(VOLUME * K3, rel=1e-4)
    assert files.checked.halves == pytest.approx([sum(files.checked.halves) / 2] * 2, rel=1e-4)
    # Without keys the boards are alike: the slab, less the groove, with what stands on it.
    for name in ("board A", "board B"):
        mesh = files.meshes[name]
        assert mesh.body_count == 1
        assert mesh.bounds[0][2] == pytest.approx(0, abs=1e-4)
        stands = above(mesh, 6.0)
        assert stands == pytest.approx(VOLUME * K3 / 2 + resin_outside(made) * 1e9 / 2, rel=2e-4)
    # Shrunk bounds: half as thick as the body, over a board of 6 mm.
    assert files.meshes["board A"].bounds[1][2] == pytest.approx(6 + 7 * K3 ** (1 / 3), abs=1e-3)


def test_rubber_is_the_box_less_what_stands_in_it() -> None:
    made = moulded(BODY, keys=0, vents=["nose"], sprue={"at": "tail", "diameter": "6 mm"}, wall="12 mm")
    halves = made.halves
    assert halves is not None
    # By hand: the body's 60 x 20 mm with 12 mm round it and 0.2 mm to slide, 7 + 12 mm deep.
    assert halves.box.size * 1e3 == pytest.approx([84, 44], rel=1e-6)
    room = 84.4 * 44.4 * 19
    stands = VOLUME / 2 + resin_outside(made) * 1e9 / 2
    assert np.array(halves.rubber) * 1e9 == pytest.approx([room - stands] * 2, rel=1e-5)


def test_sprue_and_vents_are_round_channels() -> None:
    # Of the sprue, 6 mm across, what lies outside the body: gate, cylinder and funnel; the vent is a plain cylinder.
    made = moulded(BODY, keys=0, vents=["nose"], sprue={"at": "tail", "diameter": "6 mm"})
    assert made.sprue is not None
    (vent,) = made.vents
    outside = 0.0
    for (a, r), (b, q) in zip(made.sprue.profile[1:], made.sprue.profile[2:], strict=False):
        outside += np.pi * (b - a) * (r * r + r * q + q * q) / 3
    outside += np.pi * 1e-3**2 * vent.length
    assert made.sprue.profile[1] == (0.0, made.sprue.gate / 2)
    assert made.sprue.length * 1e3 == pytest.approx(10)
    # Within the gate's own height over the body's rounded end, a disc of some mm3.
    over = resin_outside(made) * 1e9 - outside * 1e9
    assert 0 < over < np.pi * (made.sprue.gate * 1e3 / 2) ** 2 * 1.2


def test_keys_mate_in_one_way_only(tmp_path: Path) -> None:
    made = moulded(BODY, keys=5)
    files = written(made, tmp_path)
    assert made.halves is not None
    keys, box = made.halves.keys, made.halves.box
    assert len(keys.places) == len(files.checked.key_gaps) == 5
    assert files.checked.key_gaps == pytest.approx([0.2e-3] * 5, rel=5e-3)
    a, b = files.meshes["board A"], files.meshes["board B"]
    middle = box.middle * 1e3
    for place in keys.places * 1e3:
        # On A a cone above the board's face at 6 mm; on B, turned over about x, a dimple below it.
        bump = a.vertices[np.hypot(*(a.vertices[:, :2] - place).T) < keys.diameter * 1e3 / 2 + 0.1]
        dimple = b.vertices[np.hypot(*(b.vertices[:, :2] - place * [1, -1]).T) < keys.diameter * 1e3 / 2 + 0.1]
        assert bump[:, 2].max() == pytest.approx(6 + keys.height * 1e3, abs=1e-4)
        assert dimple[:, 2].min() == pytest.approx(6 - keys.height * 1e3 + 0.2, abs=1e-4)
    # Turned by half a turn about the pull, some key meets none.
    spun = 2 * middle - keys.places * 1e3
    apart = np.linalg.norm(spun[:, None] - keys.places[None] * 1e3, axis=-1).min(axis=1)
    assert apart.max() > keys.diameter * 1e3 / 2
    # Keys leave rubber to the cavity: the ellipse of the parting plane, the box and each other.
    for place in keys.places:
        way = np.linspace(0, 2 * np.pi, 400)
        rim = np.column_stack([0.03 * np.cos(way), 0.01 * np.sin(way)])
        assert np.linalg.norm(rim - place, axis=1).min() > keys.diameter / 2 + 1.9e-3
        assert np.minimum(place - box.low, box.high - place).min() > keys.diameter / 2 + 1.4e-3


@pytest.mark.parametrize("count", [0, 1, 2, 3, 20])
def test_any_count_of_keys_fits_in_one_way(count: int) -> None:
    made = moulded(BODY, keys=count, wall="14 mm")
    assert made.halves is not None
    keys, box = made.halves.keys, made.halves.box
    assert len(keys.places) == count
    # Turned by half a turn about the pull, some key meets none.
    apart = np.linalg.norm((2 * box.middle - keys.places)[:, None] - keys.places[None], axis=-1)
    assert count == 0 or apart.min(axis=1).max() > keys.diameter / 2


def test_a_flat_back_is_moulded_in_one_piece(tmp_path: Path) -> None:
    back, _ = Solid.of(shapes.ellipsoid((0.03, 0.014, 0.01), 3)).split(np.array([0.0, 1.0, 0.0]), 0.0)
    for turn in (np.eye(3), np.diag([1.0, -1.0, -1.0])):
        off = back.surface().moved(rotation=turn, shift=vector(1, 7, -3))
        made = moulded(off, kind=Kind.ONE_PIECE, shrink=SHRINK)
        files = written(made, tmp_path)
        assert set(files.meshes) == {"board", "frame"}
        volume = back.volume * 1e9 * K3
        assert files.checked.halves[0] * 1e9 == pytest.approx(volume, rel=1e-4)
        assert above(files.meshes["board"], 6.0) == pytest.approx(volume, rel=1e-4)
        assert files.meshes["board"].body_count == 1
        assert made.halves is not None
        k = K3 ** (1 / 3)
        room = (60 * k + 20.4) * (20 * k + 20.4) * (14 * k + 10)
        assert made.halves.rubber[0] * 1e9 == pytest.approx(room - volume, rel=1e-5)
        assert (made.sprue, made.vents, made.study.trapped) == (None, (), 0.0)


def test_a_back_as_flat_as_a_print_is_stands_on_its_board(tmp_path: Path) -> None:
    # Corners of the back up to 8 um off its plane: no gap is left between it and the board.
    back, _ = Solid.of(shapes.ellipsoid((0.03, 0.014, 0.01), 3)).split(np.array([0.0, 1.0, 0.0]), 0.0)
    skin = back.surface()
    rough = skin.vertices.copy()
    flat = rough[:, 1] < 1e-9
    rough[flat, 1] += np.random.default_rng(2).uniform(0, 8e-6, np.count_nonzero(flat))
    files = written(moulded(Surface(rough, skin.faces), kind=Kind.ONE_PIECE), tmp_path)
    board = files.meshes["board"]
    assert (board.body_count, board.euler_number) == (1, 2)
    assert above(board, 6.0) == pytest.approx(back.volume * 1e9, rel=2e-3)


@pytest.mark.parametrize("body", [BODY, shapes.sphere(0.01, 3)])
def test_a_round_part_has_no_flat_back(body: Surface) -> None:
    with pytest.raises(InputError, match=r"mould\.pull: the part has no flat back(.|\n)*next: state the pull"):
        moulded(body, kind=Kind.ONE_PIECE)


def test_a_part_that_reaches_beyond_its_back_does_not_stand() -> None:
    back, _ = Solid.of(shapes.ellipsoid((0.03, 0.014, 0.01), 3)).split(np.array([0.0, 1.0, 0.0]), 0.0)
    foot = Solid.of(shapes.box(tuple(vector(3, 3, 3))))
    with pytest.raises(InputError, match=r"beyond its flat back(.|\n)*1\.50 mm"):
        moulded(back.joined(foot).surface(), kind=Kind.ONE_PIECE)


def test_a_master_lies_in_the_drawing_s_place(tmp_path: Path) -> None:
    lip = insert("lip", shapes.box(tuple(vector(20, 8, 2)), tuple(vector(-30, 0, -2))), 1.2, lip=True)
    away = BODY.moved(shift=vector(100, 50, -20))
    whole = written(moulded(away, kind=Kind.MASTER, shrink=SHRINK), tmp_path).meshes["master"]
    assert whole.bounds == pytest.approx(away.bounds * 1e3 * K3 ** (1 / 3), abs=1e-3)
    assert whole.volume == pytest.approx(VOLUME * K3, rel=1e-5)
    slotted = written(moulded(BODY, lip, kind=Kind.MASTER), tmp_path).meshes["master"]
    slot = trimesh.boolean.intersection(
        [shapes.as_trimesh(piece.moved(scale=1e3)) for piece in (BODY, lip.surface)]
    ).volume
    assert slotted.volume == pytest.approx(VOLUME - slot, rel=1e-5)


def test_a_tab_to_hang_a_master_by(tmp_path: Path) -> None:
    sizes = {"length": "15 mm", "width": "8 mm", "thickness": "3 mm", "hole": "3 mm"}
    plain = written(moulded(BODY, kind=Kind.MASTER), tmp_path).meshes["master"]
    hung = written(moulded(BODY, kind=Kind.MASTER, hung=True, tab={"at": "tail", **sizes}), tmp_path).meshes["master"]
    # 15 x 8 x 3 mm with a hole of 3 mm, and the wedges to the rounded end of the body, 2 mm deep at most.
    added = hung.volume - plain.volume
    assert 0 < added - (15 * 8 * 3 - np.pi * 1.5**2 * 3) < 2 * 8 * 3
    assert hung.bounds[1][0] == pytest.approx(45, abs=1e-3)
    # One handle: the hole.
    assert hung.euler_number == 0


def test_a_bridge_across_the_pull_is_told() -> None:
    # A ring that stands across the pull: the rubber closes through it. One that lies in the parting plane does not.
    ring = shapes.torus(0.003, 0.0005, 12)
    across = insert("eye", ring.moved(shift=vector(-32, 0, 0)), 7.9)
    told = [f for f in moulded(BODY, across).findings if f.code == "rubber-loop"]
    assert [(f.piece, f.count) for f in told] == [("eye", 1)] * 2
    lying = ring.moved(rotation=np.array([[1.0, 0, 0], [0, 0, -1.0], [0, 1.0, 0]]), shift=vector(-32, 0, 0))
    assert not [f for f in moulded(BODY, insert("eye", lying, 7.9)).findings if f.code == "rubber-loop"]


def test_a_part_that_floats_is_refused(tmp_path: Path) -> None:
    # A second ball of the body's own mesh, off the parting plane: nothing would hold it on a board.
    body = shapes.together(BODY, shapes.sphere(0.002, 2).moved(shift=vector(0, 10, 0)))
    made = moulded(body, pull=[0, 1, 0])
    with pytest.raises(InputError, match=r"not one connected solid(.|\n)*shells"):
        written(made, tmp_path)


def test_what_does_not_fit_the_bed_is_told_with_the_turn_that_helps() -> None:
    # Boards of 60 + 20 + 12.8 by 20 + 20 + 12.8 mm: too long for 90, not for 90 across its corner.
    def told(bed: list[str]) -> list[tuple[str, str]]:
        return [(f.code, f.level.value) for f in moulded(BODY, bed=bed).findings if f.code.startswith("bed")]

    assert told(["100 mm", "60 mm", "60 mm"]) == []
    assert told(["60 mm", "100 mm", "60 mm"]) == [("bed", "warning")] * 3
    assert told(["70 mm", "60 mm", "60 mm"]) == [("bed-too-small", "fault")] * 3
    (finding, *_) = [f for f in moulded(BODY, bed=["60 mm", "100 mm", "60 mm"]).findings if f.code == "bed"]
    assert "turned by 90 degrees" in finding.message or "turned by 8" in finding.message
    assert finding.piece == "board A"


def test_boards_that_lose_a_piece_of_the_plug_are_refused(tmp_path: Path) -> None:
    made = moulded(BODY)
    back = {piece.name: piece.solid.surface() for piece in made.pieces}
    assert checking.check(made, back).halves
    board = made.pieces[0]
    hole = Solid.of(shapes.box(tuple(vector(4, 4, 4)), tuple(vector(0, 0, 12))))
    back["board A"] = board.solid.less(hole).surface()
    with pytest.raises(InputError, match=r"do not carry the whole plug(.|\n)*within 0\.01%"):
        checking.check(made, back)


def test_a_key_that_does_not_mate_is_refused() -> None:
    made = moulded(BODY)
    assert made.halves is not None
    place = made.halves.keys.places[0]
    wider = Solid.of(shapes.box(tuple(vector(3, 3, 2)), (place[0] + 3.5e-3, -place[1], 5e-3)))
    back = {piece.name: piece.solid.surface() for piece in made.pieces}
    board: Printed = made.pieces[1]
    back["board B"] = board.solid.less(wider).surface()
    with pytest.raises(InputError, match=r"key 1 of board A and board B: a key does not mate"):
        checking.check(made, back)


def test_the_boards_of_a_sample(tmp_path: Path) -> None:
    given = meshlure.read_bait(SAMPLES / "lipless" / "lipless.toml")
    made = design(given, MouldSection(), Kind.HALVES, False, "mould", lambda _: None)
    files = written(made, tmp_path)
    assert sum(files.checked.halves) == pytest.approx(made.plug.whole.volume, rel=1e-4)
    assert {mesh.body_count for mesh in files.meshes.values()} == {1}
    # The eyes of the wires lie in the parting plane: no rubber closes through them.
    assert [files.meshes[board].euler_number for board in ("board A", "board B")] == [2, 2]


def test_from_a_bait_to_its_files(tmp_path: Path) -> None:
    # Off the origin, so that a turn without its shift would show.
    slug = insert("slug", shapes.sphere(0.002, 2).moved(shift=vector(85, 0, 1)), 11.3)
    given = bait(BODY.moved(shift=vector(80, 3, 5)), slug, density=1.2, mould={"shrink": SHRINK})
    made = mould(given)
    found, names = write(made, tmp_path)
    assert sorted(path.name for path in tmp_path.iterdir()) == sorted(names)
    account = found.results["mould"]
    assert sum(account["halves_mm3"]) == pytest.approx(made.design.plug.whole.volume * 1e9, rel=1e-4)
    for piece in account["pieces"]:
        mesh = read(tmp_path / piece["file"])
        assert mesh.volume == pytest.approx(piece["volume_mm3"], rel=1e-4)
        # A place of the drawing lies in the file where the account says: the body's own corners, on a board.
        if piece["name"] != "frame":
            corners = made.bait.body.surface.vertices[::41] * 1e3 * account["scale_axes"]
            lying = corners @ np.array(piece["turn"]).T + piece["shift_mm"]
            high = lying[lying[:, 2] > 7.0]
            assert len(high) > 3
            skin = Surface(np.asarray(mesh.vertices), np.asarray(mesh.faces))
            assert nearest(skin, high).distance.max() < 0.02
    # Resin is what the bait's own account says the body has, and sprue and vents.
    body = next(row for row in found.results["pieces"] if row["role"] == "body")
    assert (account["resin_cm3"] - account["resin_outside_cm3"]) * 1e3 == pytest.approx(body["volume_mm3"], rel=1e-6)
    assert account["resin_g"] == pytest.approx(account["resin_cm3"] * body["density_g_cm3"], rel=1e-9)
    # Both planes in the drawing go through the body's middle, 3 mm off the mesh's origin.
    for plane, way in ((account, account["pull"]), (account["best_pull"], account["best_pull"]["direction"])):
        assert plane["plane_mm"] == pytest.approx(np.dot(way, [80, 3, 5]), abs=1e-3)
    # 1.15 g/cm3 and 15% to spare, as the account says.
    assert account["rubber_g"] == pytest.approx(np.array(account["rubber_cm3"]) * 1.15 * 1.15, rel=1e-9)
    package = trimesh.load(tmp_path / "mould.3mf")
    assert isinstance(package, trimesh.Scene)
    assert len(package.geometry) == 3
