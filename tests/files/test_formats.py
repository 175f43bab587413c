"""Each format's small files are read as what they hold: volumes by closed forms, and by readers that are not ours."""

from __future__ import annotations

import importlib.util
import math
import runpy
from pathlib import Path
from typing import Any

import lib3mf
import numpy as np
import pytest
import shapes
import trimesh

from meshlure.errors import InputError
from meshlure.files.formats import FORMATS
from meshlure.files.glb import read_glb
from meshlure.files.reading import MeshFile, read_mesh
from meshlure.files.threemf import write_3mf
from meshlure.geometry.moments import solid_moments
from meshlure.geometry.soundness import examine

FOLDER = Path(__file__).parents[1] / "formats"
BUILD: dict[str, Any] = runpy.run_path(str(FOLDER / "build.py"))
CAD = importlib.util.find_spec("OCP") is not None

BOX = 40.0 * 10.0 * 16.0
TETRA = 10.0 * 9.0 * 5.0 / 6.0

VOLUMES = {
    # name: volume in mm3, unit that counts, triangles, names of parts
    "box.3mf": (BOX, "mm", 12, ["body"]),
    "inch.3mf": (BOX * 25.4**3, "in", 12, ["body"]),
    "turned.3mf": (8 * BOX, "mm", 12, ["body"]),
    "mirrored.3mf": (BOX, "mm", 12, ["body"]),
    "two_objects.3mf": (BOX + TETRA, "mm", 16, ["body", "belly weight"]),
    "components.3mf": (2 * (BOX + TETRA), "mm", 32, ["body", "weight"] * 2),
    "other_part.3mf": (BOX, "mm", 12, ["body"]),
    "nothing_to_build.3mf": (BOX, "mm", 12, ["body"]),
    "supported.3mf": (BOX, "mm", 12, ["body"]),
    "ascii.ply": (BOX, "mm", 12, []),
    "little.ply": (BOX, "mm", 12, []),
    "big_double.ply": (BOX, "mm", 12, []),
    "triangles.ply": (BOX, "mm", 12, []),
    "mixed.ply": (BOX, "mm", 12, []),
    "more.ply": (BOX, "mm", 12, []),
    "more_ascii.ply": (BOX, "mm", 12, []),
    "box.off": (BOX, "mm", 12, []),
    "colours.off": (BOX, "mm", 12, []),
    "remarks.off": (BOX, "mm", 12, []),
    # 216 mm2 by the shoelace formula, 10 mm high.
    "concave.off": (2160.0, "mm", 20, []),
    "box.glb": (BOX, "m", 12, ["box"]),
    "placed.glb": (2 * BOX + BOX, "m", 24, ["stretched", "mirrored"]),
    "loose.glb": (BOX, "m", 12, ["box"]),
    "strip.glb": (BOX, "m", 12, [""]),
    "quantized.glb": (BOX, "m", 12, ["box"]),
}


def read(name: str) -> MeshFile:
    return read_mesh(FOLDER / name, None if FORMATS[Path(name).suffix].says_unit else "mm")


def test_the_folder_is_what_its_script_makes() -> None:
    made = {name: BUILD["content"](name) for name in BUILD["FILES"]}
    there = {path.name: path.read_bytes() for path in FOLDER.iterdir() if path.is_file() and path.name != "build.py"}
    assert {name: data for name, data in there.items() if name not in BUILD["STEPS"]} == made
    assert set(BUILD["STEPS"]) <= set(there)
    assert set(VOLUMES) == set(made)


@pytest.mark.parametrize("name", VOLUMES)
def test_a_file_holds_what_it_was_made_of(name: str) -> None:
    volume, unit, triangles, parts = VOLUMES[name]
    mesh = read(name)
    found = examine(mesh.surface, "part")
    assert not found.stops, found.findings
    # Outward as it stands: nothing was turned.
    assert not {"inside-out", "inside-out-shell"} & {finding.code for finding in found.findings}
    assert found.volume is not None
    # A GLB's 32-bit metres hold 0.04 to eight digits.
    assert found.volume * 1e9 == pytest.approx(volume, rel=1e-7)
    assert (mesh.unit, mesh.triangles, [part.name for part in mesh.parts]) == (unit, triangles, parts)


NOT_READ_THERE = {
    "quantized.glb": "leaves shares of 32,767 as they are",
    "strip.glb": "knows no strips",
    "mixed.ply": "wants faces of one length in a binary PLY",
    "more.ply": "wants no lists before the faces in a binary PLY",
    "concave.off": "fails where polygons have different lengths",
    "nothing_to_build.3mf": "fails where nothing is to be built",
    "supported.3mf": "takes supports for the part",
}
"""What the general mesh library does with files that are right by their formats."""


@pytest.mark.parametrize("name", [name for name in VOLUMES if name not in NOT_READ_THERE])
def test_the_general_mesh_library_finds_the_same(name: str) -> None:
    """Volume, centroid and inertia."""
    theirs: Any = trimesh.load(FOLDER / name, process=False, force="mesh")
    mesh = read(name)
    unit = {"mm": 1.0, "in": 25.4, "m": 1000.0}[mesh.unit]
    ours = solid_moments(mesh.surface)
    # It leaves faces as they are where a transform mirrors them.
    sign = np.sign(theirs.volume)
    assert ours.amount * 1e9 == pytest.approx(abs(theirs.volume) * unit**3, rel=1e-6)
    np.testing.assert_allclose(ours.centre * 1e3, theirs.center_mass * unit, rtol=1e-6, atol=1e-6 * unit)
    inertia = sign * theirs.moment_inertia * unit**5
    np.testing.assert_allclose(ours.inertia * 1e15, inertia, rtol=1e-6, atol=1e-7 * np.abs(inertia).max())


@pytest.mark.parametrize("name", [name for name in VOLUMES if name.endswith(".3mf")])
def test_the_consortiums_library_reads_the_packages(name: str) -> None:
    """So that what is read here is 3MF, and not what our reader takes for it."""
    model = lib3mf.get_wrapper().CreateModel()
    reader = model.QueryReader("3mf")
    reader.ReadFromFile(str(FOLDER / name))
    assert reader.GetWarningCount() == 0
    meshes = model.GetMeshObjects()
    count = 0
    while meshes.MoveNext():
        count += 1
    assert count >= 1


def test_a_package_of_ours_comes_back_to_the_last_digit(tmp_path: Path) -> None:
    body, ballast = shapes.lumpy(3), shapes.sphere(4e-3, 2).moved(shift=np.array([0.1 / 3, -2e-3, 1e-9]))
    write_3mf(tmp_path / "bait.3mf", [("body", body), ("ballast 1", ballast)])
    mesh = read_mesh(tmp_path / "bait.3mf", None)
    assert [part.name for part in mesh.parts] == ["body", "ballast 1"]
    for part, surface in zip(mesh.parts, (body, ballast), strict=True):
        # mm as text and back to m: the last bit may turn.
        np.testing.assert_allclose(mesh.surface.corners[part.faces], surface.corners, rtol=3e-16, atol=0)


def test_a_unit_stated_beside_a_file_that_says_its_own() -> None:
    mesh = read_mesh(FOLDER / "inch.3mf", "mm", piece="body")
    (note,) = (finding for finding in mesh.findings if finding.code == "unit-of-file")
    assert "its unit is in: that is believed, and not the mm" in note.message
    assert np.ptp(mesh.surface.vertices[:, 0]) == pytest.approx(1.016, rel=1e-15)


@pytest.mark.parametrize("name", ["ascii.ply", "box.off"])
def test_a_format_without_a_unit_is_not_guessed(name: str) -> None:
    with pytest.raises(InputError, match="does not say its unit"):
        read_mesh(FOLDER / name, None)


def test_what_a_glb_leaves_is_said() -> None:
    made = BUILD["scene"](
        [{"mesh": 0, "skin": 0}, {"mesh": 0, "translation": [1, 0, 0]}],
        BUILD["floats"](BUILD["METRES"]),
        8,
        BUILD["shorts"](BUILD["TRIANGLES"]),
        {"targets": [{}]},
    )
    found = read_glb(made, "bait.glb", 10**6)
    assert [f.message for f in found.findings if f.code == "not-read"] == [
        "Passed over: 1 skins, left at rest.",
        "Passed over: 2 morph targets, left at rest.",
    ]
    lines = BUILD["scene"]([{"mesh": 0}], BUILD["floats"](BUILD["METRES"]), 8, BUILD["shorts"]([(0, 1)]), {"mode": 1})
    with pytest.raises(InputError, match="holds no triangles"):
        read_glb(lines, "bait.glb", 10**6)


BALL = 4 / 3 * math.pi * 125
BORED = 10.0 * 10.0 * 30.0 - math.pi * 4 * 30.0 + 4 / 3 * math.pi * 27


@pytest.mark.skipif(not CAD, reason="the B-rep kernel is an optional extra")
@pytest.mark.parametrize(("name", "unit", "volume"), [("ball.step", "mm", BALL), ("two_inch.step", "in", BORED)])
def test_a_step_file_has_its_exact_volume_beside_its_facets(name: str, unit: str, volume: float) -> None:
    mesh = read(name)
    assert mesh.unit == unit
    assert mesh.exact_volume is not None
    assert mesh.exact_volume * 1e9 == pytest.approx(volume, rel=1e-9)
    found = examine(mesh.surface, "part")
    assert found.volume is not None
    # Facets 0.02 mm off at most, over the whole area; inscribed in balls, round a bore.
    assert abs(found.volume - mesh.exact_volume) < 0.02e-3 * found.surface.area


@pytest.mark.skipif(CAD, reason="the B-rep kernel is there")
def test_without_a_kernel_a_step_file_says_what_is_missing() -> None:
    with pytest.raises(InputError, match=r"not installed[\s\S]*meshlure\[brep\][\s\S]*3MF"):
        read("ball.step")


@pytest.mark.skipif(not CAD, reason="the B-rep kernel is an optional extra")
def test_a_step_file_that_the_kernel_cannot_take(tmp_path: Path) -> None:
    whole = (FOLDER / "ball.step").read_bytes()
    for number, data in enumerate([whole[:700], b"ISO-10303-21;\n" + b"#1=" * 5000, whole.replace(b"SPHERICAL", b"S")]):
        path = tmp_path / f"{number}.step"
        path.write_bytes(data)
        with pytest.raises(InputError, match=r"kernel|no solid"):
            read_mesh(path, None)


def test_objects_and_groups_of_an_obj_are_named(tmp_path: Path) -> None:
    path = tmp_path / "pair.obj"
    tetra = "v 0 0 0\nv 10 0 0\nv 0 9 0\nv 0 0 5\n"
    faces = ["f {0} {2} {1}\n", "f {0} {1} {3}\n", "f {0} {3} {2}\n", "f {1} {2} {3}\n"]

    def written(first: int) -> str:
        return "".join(face.format(*range(first, first + 4)) for face in faces)

    path.write_text(f"o body\n{tetra}{written(1)}o belly weight # lead\n{tetra.replace('v ', 'v 1')}{written(5)}")
    mesh = read_mesh(path, "mm")
    assert [(part.name, len(part.faces)) for part in mesh.parts] == [("body", 4), ("belly weight", 4)]
    path.write_text(f"g a\n{tetra}{written(1)}g b\ng b\n{tetra.replace('v ', 'v 1')}{written(5)}")
    assert [(part.name, len(part.faces)) for part in read_mesh(path, "mm").parts] == [("a", 4), ("b", 4)]
    path.write_text(f"o alone\n{tetra}{written(1)}")
    assert read_mesh(path, "mm").parts == ()


def test_parts_keep_their_faces_when_others_collapse(tmp_path: Path) -> None:
    path = tmp_path / "pair.stl"
    facet = "facet normal 0 0 0\nouter loop\nvertex {}\nvertex {}\nvertex {}\nendloop\nendfacet\n"
    flat = facet.format("0 0 0", "0 0 0", "1 0 0")
    real = facet.format("0 0 0", "1 0 0", "0 1 0")
    path.write_text(
        f"solid one\n{flat}{real}endsolid\nsolid two\n{flat}{flat}endsolid\nsolid three\n{real}{real}endsolid\n"
    )
    mesh = read_mesh(path, "mm")
    assert [(part.name, part.faces.tolist()) for part in mesh.parts] == [("one", [0]), ("three", [1, 2])]
