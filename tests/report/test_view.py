"""The scene that can be turned: how it stands, what the page is given of it, and the glTF file.

Authorities: trimesh reads the glTF file and measures meshes; shapes have closed forms; colours are judged by published
models of colour vision.
"""

from __future__ import annotations

import base64
import hashlib
import io
import json
import math
import re
from dataclasses import replace
from html.parser import HTMLParser
from itertools import combinations
from typing import Any

import invented_baits as baits
import numpy as np
import pytest
import trimesh
from hypothesis import given
from hypothesis import strategies as st
from studied import sample

from meshlure.geometry.surface import Surface
from meshlure.report.glb import glb
from meshlure.report.page import page
from meshlure.report.stand import stand
from meshlure.report.subject import subject
from meshlure.report.view import BALL, COLOURS, GLASS, turning
from meshlure.results import Scene, ScenePiece, Study
from meshlure.results.scene import allowances, within

FRAME = {"nose": [-1.0, 0.0, 0.0], "back": [0.0, 0.0, 1.0], "side": [0.0, -1.0, 0.0]}


def solid(name: str, role: str, low: list[float], high: list[float]) -> ScenePiece:
    """A box, mm, with vertices and normals for each of its sides."""
    made = trimesh.creation.box(bounds=[low, high])
    corners = made.triangles.reshape(-1, 3)
    return ScenePiece(name, role, corners, np.repeat(made.face_normals, 3, axis=0), np.arange(36).reshape(-1, 3))


def scene(up: list[float] | None = None, level: float | None = 2.0) -> Scene:
    pieces = (
        solid("body", "body", [0, -6, -8], [92, 6, 8]),
        solid("belly weight", "insert", [30, -2, -7], [40, 2, -4]),
        solid("rattle chamber", "void", [55, -2, -2], [70, 2, 2]),
    )
    return Scene(pieces, None if up is None else np.array(up), level)


def bait(up: list[float] | None = None, level: float | None = 2.0) -> Study:
    return Study(baits.minnow_results(), baits.minnow_views(), scene=scene(up, level))


def turned(nose_up: float, lean: float) -> list[float]:
    """Up for angles in degrees, by what README and DEVELOPERS.md say of them: sin(nose up) = nose.up, tan(lean)."""
    n, s = math.radians(nose_up), math.radians(lean)
    return [-math.sin(n), -math.cos(n) * math.sin(s), math.cos(n) * math.cos(s)]


@given(st.floats(-90, 90), st.floats(-180, 180))
def test_a_bait_stands_upright_on_level_water_seen_from_its_left(nose_up: float, lean: float) -> None:
    axes = stand(scene(turned(nose_up, lean)), FRAME).axes
    assert axes @ axes.T == pytest.approx(np.eye(3), abs=1e-12)
    assert np.linalg.det(axes) == pytest.approx(1)  # right, away, up are a right-handed three
    assert axes[2] == pytest.approx(turned(nose_up, lean))
    nose = axes @ FRAME["nose"]
    assert nose[2] == pytest.approx(math.sin(math.radians(nose_up)), abs=1e-12)
    if abs(nose_up) < 78:
        assert nose[0] < 0  # to the left
        assert nose[1] == pytest.approx(0, abs=1e-12)
    if abs(lean) < 80:
        assert (axes @ FRAME["side"])[1] < 0  # its left towards the eye


def test_without_an_attitude_of_its_own_it_stands_back_up_and_without_water() -> None:
    standing = stand(scene(None), FRAME)
    assert standing.axes[2] == pytest.approx(FRAME["back"])
    assert standing.water is None


class Scripts(HTMLParser):
    """The scripts of a page by their id, its policy, and everything that it would fetch."""

    def __init__(self, html: str) -> None:
        super().__init__()
        self.found: dict[str, str] = {}
        self.policy = ""
        self.fetched: list[str] = []
        self._in: str | None = None
        self.feed(html)

    def handle_starttag(self, tag: str, attrs: list[tuple[str, str | None]]) -> None:
        given_ = dict(attrs)
        if tag == "script":
            self._in = given_.get("id") or "script"
            self.found[self._in] = ""
            if given_.get("src"):
                self.fetched.append(given_["src"] or "")
        if given_.get("http-equiv") == "Content-Security-Policy":
            self.policy = given_["content"] or ""

    def handle_endtag(self, tag: str) -> None:
        if tag == "script":
            self._in = None

    def handle_data(self, data: str) -> None:
        if self._in:
            self.found[self._in] += data


@pytest.fixture(scope="module")
def html() -> str:
    """The page of a bait with a piece whose name tries to break it."""
    study = bait(turned(8, 3))
    assert study.scene is not None
    bad = solid(baits.HOSTILE, "insert", [80, -1, -1], [84, 1, 1])
    return page(replace(study, scene=replace(study.scene, pieces=(*study.scene.pieces, bad))))


def test_only_our_own_script_may_run_and_it_fetches_nothing(html: str) -> None:
    read = Scripts(html)
    assert set(read.found) == {"turn-data", "script"}
    assert read.fetched == []
    digest = base64.b64encode(hashlib.sha256(read.found["script"].encode()).digest()).decode()
    assert f"script-src 'sha256-{digest}'" in read.policy
    assert read.policy.startswith("default-src 'none'")
    assert not re.search(r"https?:|fetch\(|XMLHttpRequest|import\(|Worker\(", read.found["script"])


def test_the_view_waits_hidden_for_its_script(html: str) -> None:
    assert re.search(r'<section id="turn"[^>]* hidden>', html)
    assert re.search(r'<a href="#turn"[^>]* hidden>', html)


def test_the_same_scene_gives_the_same_data() -> None:
    results = baits.minnow_results()
    assert turning(scene(turned(8, 3)), results, subject(results)) == turning(
        scene(turned(8, 3)), results, subject(results)
    )


def test_the_data_tell_the_meshes_to_a_step(html: str) -> None:
    study = bait(turned(8, 3))
    assert study.scene is not None
    data = json.loads(Scripts(html).found["turn-data"])
    standing = stand(study.scene, FRAME)
    assert data["step"] < 100 / 65535  # the longest way through the scene is below 100 mm
    assert data["water"] == 2.0
    for told, piece in zip(data["pieces"], study.scene.pieces, strict=False):
        steps = np.frombuffer(base64.b64decode(told["places"]), "<u2").reshape(-1, 3)
        wanted = standing.place(piece.vertices)
        assert np.abs(np.array(data["low"]) + data["step"] * steps - wanted).max() < 0.51 * data["step"] + 1e-5
        normals = np.frombuffer(base64.b64decode(told["normals"]), "<i1").reshape(-1, 3) / 127
        assert np.abs(normals - piece.normals @ standing.axes.T).max() < 1 / 127
        faces = np.frombuffer(base64.b64decode(told["faces"]), "<u2").reshape(-1, 3)
        assert (faces == piece.faces).all()
    gravity = next(mark["at"] for mark in data["marks"] if mark["name"] == "G")
    assert gravity == pytest.approx(standing.place(np.array([42.85, 0.01, -1.62])), abs=1e-3)


def test_the_legend_names_every_piece_with_its_number() -> None:
    results = baits.minnow_results()
    found = turning(scene(turned(8, 3)), results, subject(results))
    assert found is not None
    assert [(entry.number, entry.name, entry.look) for entry in found.legend] == [
        (1, "body", "glass"),
        (3, "belly weight", "solid"),
        (4, "rattle chamber", "hollow"),
    ]
    assert found.posture == "As it floats, nose 4° down"


def test_names_from_outside_come_out_as_text(html: str) -> None:
    assert "<script>alert" not in html
    assert "&lt;script&gt;alert" in html
    assert "{{ 7*7 }}" in html


def test_large_pieces_give_way_to_small_ones() -> None:
    assert allowances([50_000, 100, 10_000], 30_000) == [19_900, 100, 10_000]
    assert allowances([50_000, 100, 40_000], 30_000) == [14_950, 100, 14_950]
    assert allowances([5, 6], 30_000) == [5, 6]


@given(st.lists(st.integers(0, 100_000), max_size=12))
def test_no_piece_gets_more_than_it_has_nor_all_more_than_there_are(counts: list[int]) -> None:
    allowed = allowances(counts, 30_000)
    assert all(0 <= a <= c for a, c in zip(allowed, counts, strict=True))
    assert sum(allowed) == min(sum(counts), 30_000) or sum(counts) > 30_000 >= sum(allowed) > 30_000 - len(counts)


def test_a_mesh_of_fewer_triangles_looks_the_same() -> None:
    # A ball of 81920 faces, radius 20 mm: volume and reach by closed form.
    fine = trimesh.creation.icosphere(subdivisions=6, radius=20e-3)
    seen = within(Surface(np.asarray(fine.vertices), np.asarray(fine.faces)), 20_000)
    made = trimesh.Trimesh(seen.vertices, seen.faces)
    assert 1000 < len(seen.faces) <= 20_000
    assert made.is_watertight
    assert made.volume == pytest.approx(4 / 3 * math.pi * 20e-3**3, rel=3e-3)
    assert np.abs(np.linalg.norm(seen.vertices, axis=1) - 20e-3).max() < 40e-3 / 4000


def linear(colour: str) -> np.ndarray:
    value = np.array([int(colour[at : at + 2], 16) / 255 for at in (1, 3, 5)])
    return np.asarray(np.where(value <= 0.04045, value / 12.92, ((value + 0.055) / 1.055) ** 2.4))


def lab(rgb: np.ndarray) -> np.ndarray:
    """CIE L*a*b* of linear sRGB, white D65 (CIE 15; matrix of IEC 61966-2-1)."""
    turn = np.array(
        [[0.4124564, 0.3575761, 0.1804375], [0.2126729, 0.7151522, 0.072175], [0.0193339, 0.119192, 0.9503041]]
    )
    share = turn @ np.clip(rgb, 0, 1) / [0.95047, 1, 1.08883]
    f = np.where(share > 216 / 24389, np.cbrt(share), (24389 / 27 * share + 16) / 116)
    return np.array([116 * f[1] - 16, 500 * (f[0] - f[1]), 200 * (f[1] - f[2])])


SIGHT = {
    "all three cones": np.eye(3),
    "no long": [[0.152286, 1.052583, -0.204868], [0.114503, 0.786281, 0.099216], [-0.003882, -0.048116, 1.051998]],
    "no middle": [[0.367322, 0.860646, -0.227968], [0.280085, 0.672501, 0.047413], [-0.01182, 0.04294, 0.968881]],
    "no short": [[1.255528, -0.076749, -0.178779], [-0.078411, 0.930809, 0.147602], [0.004733, 0.691367, 0.3039]],
}
"""G. M. Machado, M. M. Oliveira, L. A. F. Fernandes (2009), A physiologically-based model for simulation of color
vision deficiency, full severity; matrices from memory."""


@pytest.mark.parametrize("sight", SIGHT)
def test_colours_can_be_told_apart_with_any_colour_vision(sight: str) -> None:
    # 2.3 is just noticeable (Mahy, Van Eycken, Oosterlinck 1994); pieces lie apart, so several times that is asked.
    seen = {colour: lab(np.array(SIGHT[sight]) @ linear(colour)) for colour in (*COLOURS, BALL, GLASS)}
    assert min(np.linalg.norm(seen[a] - seen[b]) for a, b in combinations(seen, 2)) > 15


def read_back(study: Study) -> Any:
    return trimesh.load(io.BytesIO(glb(study)), file_type="glb", process=False)


def test_trimesh_reads_the_scene_back_in_metres_and_y_up() -> None:
    made = read_back(bait(turned(8, 3), 2.0))
    names = {"body", "belly weight", "rattle chamber", "water", "centre of gravity", "centre of buoyancy"}
    assert set(made.graph.nodes_geometry) == names
    body, weight = made.geometry["body"], made.geometry["belly weight"]
    assert weight.volume == pytest.approx(120e-9, rel=1e-4)  # 10 x 4 x 3 mm
    assert body.volume == pytest.approx(92 * 12 * 16 * 1e-9, rel=1e-4)
    # +Z leads (glTF 2.0, 3.4): from body's middle to its nose end, raised by the nose-up angle.
    ends = np.asarray(body.vertices)
    front = ends[ends[:, 2] > np.median(ends[:, 2])].mean(axis=0) - ends[ends[:, 2] < np.median(ends[:, 2])].mean(
        axis=0
    )
    assert front / np.linalg.norm(front) == pytest.approx(
        [0, math.sin(math.radians(8)), math.cos(math.radians(8))], abs=1e-5
    )
    # The water is level at its height over the mesh's origin along up; +X is the bait's left, whose side leans up.
    assert np.asarray(made.geometry["water"].vertices)[:, 1] == pytest.approx(np.full(4, 2e-3), abs=1e-9)
    assert np.asarray(made.geometry["water"].face_normals) == pytest.approx(np.array([[0, 1, 0], [0, 1, 0]]), abs=1e-6)
    for dot in ("centre of gravity", "centre of buoyancy"):
        assert made.geometry[dot].volume > 0  # outward
    axes = stand(scene(turned(8, 3)), FRAME).axes
    right, away, up = axes @ np.array([42.85, 0.01, -1.62])
    assert made.geometry["centre of gravity"].centroid == pytest.approx(np.array([-away, up, -right]) * 1e-3, abs=1e-7)


def test_body_and_water_are_see_through_and_inserts_are_not() -> None:
    made = read_back(bait(turned(0, 0)))
    modes = {name: mesh.visual.material.alphaMode for name, mesh in made.geometry.items()}
    assert {name for name, mode in modes.items() if mode == "BLEND"} == {"body", "rattle chamber", "water"}
    opacity = made.geometry["body"].visual.material.baseColorFactor[3]
    assert 0 < opacity < 128


def test_a_bait_that_hangs_has_no_water_in_its_scene() -> None:
    assert "water" not in read_back(bait(turned(-20, 0), None)).geometry


def test_a_study_without_meshes_has_no_scene_to_write() -> None:
    with pytest.raises(ValueError, match="no scene"):
        glb(baits.minnow())


def test_a_sample_keeps_its_pieces_and_their_volumes() -> None:
    study = sample("lipless/lipless.toml")
    assert study.scene is not None
    assert sum(len(piece.faces) for piece in study.scene.pieces) <= 30_000
    made = read_back(study)
    rows = {row["name"]: row for row in study.results["pieces"]}
    for piece in study.scene.pieces:
        row = rows[piece.name]
        found = made.geometry[piece.name]
        if piece.role == "body":
            whole = sum(r["volume_mm3"] for r in rows.values() if r["role"] in ("body", "insert", "void"))
            # Feet of the hangers stand out of the body by a few cubic millimetres.
            assert found.volume * 1e9 == pytest.approx(whole, rel=5e-3)
        elif piece.role in ("insert", "ball"):
            assert found.volume * 1e9 == pytest.approx(row["volume_mm3"], rel=5e-3), piece.name
