"""3MF packages, read back by readers that are not ours and held against the core specification's own wording."""

from __future__ import annotations

import re
import xml.etree.ElementTree as ET
import zipfile
from pathlib import Path

import lib3mf
import numpy as np
import pytest
import shapes
import trimesh
from hypothesis import example, given
from hypothesis import strategies as st

from meshlure.files.threemf import write_3mf
from meshlure.geometry.surface import Surface

CORE = "{http://schemas.microsoft.com/3dmanufacturing/core/2015/02}"
# ST_Number, 3MF Core Specification 1.2, schema.
NUMBER = re.compile(r"((\-|\+)?(([0-9]+(\.[0-9]+)?)|(\.[0-9]+))((e|E)(\-|\+)?[0-9]+)?)")


def model(path: Path) -> ET.Element:
    with zipfile.ZipFile(path) as package:
        assert package.testzip() is None
        return ET.fromstring(package.read("3D/3dmodel.model"))


def parts(path: Path) -> dict[str, Surface]:
    """Objects by name, read as the specification describes them."""
    root = model(path)
    assert (root.tag, root.get("unit")) == (f"{CORE}model", "millimeter")
    objects = root.findall(f"{CORE}resources/{CORE}object")
    assert [each.get("objectid") for each in root.findall(f"{CORE}build/{CORE}item")] == [o.get("id") for o in objects]
    found = {}
    for each in objects:
        vertices = [[v.get(c, "") for c in "xyz"] for v in each.findall(f"{CORE}mesh/{CORE}vertices/{CORE}vertex")]
        assert all(NUMBER.fullmatch(number) for row in vertices for number in row)
        faces = [
            [int(t.get(c, "")) for c in ("v1", "v2", "v3")]
            for t in each.findall(f"{CORE}mesh/{CORE}triangles/{CORE}triangle")
        ]
        found[each.get("name", "")] = Surface(np.array(vertices, dtype=np.float64), np.array(faces))
    assert len(found) == len(objects)
    return found


def pieces() -> list[tuple[str, Surface]]:
    ball = shapes.sphere(4e-3, 2).moved(shift=np.array([0.1 / 3, -2e-3, 1e-9]))
    return [("body", shapes.box((0.08, 0.02, 0.03))), ("ballast 1", ball)]


def test_the_general_mesh_library_reads_what_was_written(tmp_path: Path) -> None:
    path = tmp_path / "bait.3mf"
    write_3mf(path, pieces())
    scene = trimesh.load_scene(path)
    assert scene.units == "millimeter"
    assert set(scene.geometry) == {"body", "ballast 1"}
    for name, surface in pieces():
        mesh = scene.geometry[name]
        assert mesh.is_watertight
        assert len(mesh.faces) == len(surface.faces)
        assert mesh.bounds == pytest.approx(surface.bounds * 1e3, rel=1e-12)
    # A box's volume is the product of its sides.
    assert scene.geometry["body"].volume == pytest.approx(80 * 20 * 30, rel=1e-12)
    assert len(scene.graph.nodes_geometry) == 2


def test_the_consortiums_own_library_finds_nothing_to_warn_of(tmp_path: Path) -> None:
    wrapper = lib3mf.get_wrapper()
    path = tmp_path / "bait.3mf"
    named = [('wire <&"é', shapes.sphere(1e-3, 3)), *pieces()]
    write_3mf(path, named)
    read = wrapper.CreateModel()
    reader = read.QueryReader("3mf")
    reader.SetStrictModeActive(True)
    reader.ReadFromFile(str(path))
    assert reader.GetWarningCount() == 0
    assert read.GetUnit() == lib3mf.ModelUnit.MilliMeter
    objects, items = read.GetMeshObjects(), read.GetBuildItems()
    for name, surface in named:
        assert objects.MoveNext()
        assert items.MoveNext()
        found = objects.GetCurrentMeshObject()
        assert found.GetName() == name
        assert (found.GetVertexCount(), found.GetTriangleCount()) == (len(surface.vertices), len(surface.faces))
        assert found.IsManifoldAndOriented()
        assert items.GetCurrent().GetObjectResource().GetResourceID() == found.GetResourceID()
        last = found.GetVertex(len(surface.vertices) - 1).Coordinates
        assert list(last) == pytest.approx(surface.vertices[-1] * 1e3, rel=1e-6)  # it keeps 32-bit numbers
    assert not objects.MoveNext()


def test_every_digit_of_a_millimetre_comes_back(tmp_path: Path) -> None:
    path = tmp_path / "bait.3mf"
    write_3mf(path, pieces())
    read = parts(path)
    assert list(read) == ["body", "ballast 1"]
    for name, surface in pieces():
        assert np.array_equal(read[name].vertices, surface.vertices * 1e3)
        assert np.array_equal(read[name].faces, surface.faces)


def test_more_rows_than_are_written_at_once(tmp_path: Path) -> None:
    ball = shapes.sphere(1e-2, 6)
    assert len(ball.vertices) > 2 * 16384
    write_3mf(tmp_path / "ball.3mf", [("ball", ball)])
    read = parts(tmp_path / "ball.3mf")["ball"]
    assert np.array_equal(read.vertices, ball.vertices * 1e3)
    assert np.array_equal(read.faces, ball.faces)


def test_the_package_is_as_open_packaging_asks(tmp_path: Path) -> None:
    path = tmp_path / "bait.3mf"
    write_3mf(path, pieces())
    with zipfile.ZipFile(path) as package:
        # ECMA-376 Part 2: the content types say what each suffix is, the root's relation where the model stands.
        assert package.namelist() == ["[Content_Types].xml", "_rels/.rels", "3D/3dmodel.model"]
        types = ET.fromstring(package.read("[Content_Types].xml"))
        relations = ET.fromstring(package.read("_rels/.rels"))
    assert {each.get("Extension"): each.get("ContentType") for each in types} == {
        "rels": "application/vnd.openxmlformats-package.relationships+xml",
        "model": "application/vnd.ms-package.3dmanufacturing-3dmodel+xml",
    }
    (relation,) = relations
    assert relation.get("Target") == "/3D/3dmodel.model"
    assert relation.get("Type") == "http://schemas.microsoft.com/3dmanufacturing/2013/01/3dmodel"


def test_the_same_pieces_make_the_same_bytes(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    write_3mf(tmp_path / "one.3mf", pieces())
    monkeypatch.setattr("time.time", lambda: 2e9)
    write_3mf(tmp_path / "two.3mf", pieces())
    assert (tmp_path / "one.3mf").read_bytes() == (tmp_path / "two.3mf").read_bytes()
    with zipfile.ZipFile(tmp_path / "one.3mf") as package:
        assert {info.date_time for info in package.infolist()} == {(1980, 1, 1, 0, 0, 0)}


@given(st.text(max_size=20))
@example("a<b> & \"c\" 'd'")
@example("\x00\x1b[31m\ud800\ufffe\U0001fffe \n\t")
def test_any_name_makes_a_readable_file(tmp_path_factory: pytest.TempPathFactory, name: str) -> None:
    path = tmp_path_factory.mktemp("names") / "bait.3mf"
    write_3mf(path, [("first", shapes.box((1.0, 1.0, 1.0))), (f"{name}2", shapes.box((1.0, 1.0, 1.0)))])
    found = list(parts(path))
    assert found[0] == "first"
    # Printable text comes back letter by letter.
    if name.isprintable():
        assert found[1] == f"{name}2".strip()
    assert found[1].endswith("2")


def test_a_name_of_which_nothing_is_left(tmp_path: Path) -> None:
    write_3mf(tmp_path / "bait.3mf", [("\n", shapes.box((1.0, 1.0, 1.0))), ("", shapes.box((1.0, 1.0, 1.0)))])
    assert list(parts(tmp_path / "bait.3mf")) == ["piece 1", "piece 2"]


CORNERS = np.array([[0.0, 0.0, 0.0], [1.0, 0.0, 0.0], [0.0, 1.0, 0.0]])


@pytest.mark.parametrize(
    ("surfaces", "said"),
    [
        ([], "at least one piece"),
        ([Surface(CORNERS, np.empty((0, 3), dtype=np.intp))], "'x' has no faces"),
        ([Surface(CORNERS, np.array([[0, 1, 3]]))], "not there"),
        ([Surface(CORNERS, np.array([[0, 1, -1]]))], "not there"),
        ([Surface(CORNERS, np.array([[0, 1, 2], [2, 1, 2]]))], "one vertex twice"),
        ([Surface(CORNERS * np.nan, np.array([[0, 1, 2]]))], "no finite number"),
    ],
)
def test_what_is_no_solid_is_refused_before_anything_is_written(
    tmp_path: Path, surfaces: list[Surface], said: str
) -> None:
    with pytest.raises(ValueError, match=said):
        write_3mf(tmp_path / "bait.3mf", [("x", surface) for surface in surfaces])
    assert not list(tmp_path.iterdir())


def test_a_package_beyond_2_gigabytes_is_marked_so(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr("meshlure.files.threemf._WITHOUT_ZIP64", 0)
    write_3mf(tmp_path / "bait.3mf", pieces())
    assert set(trimesh.load_scene(tmp_path / "bait.3mf").geometry) == {"body", "ballast 1"}
    # The model's own header asks for version 4.5 of the format, which brings the larger sizes (APPNOTE, 4.4.3.2).
    with zipfile.ZipFile(tmp_path / "bait.3mf") as package:
        assert package.getinfo("3D/3dmodel.model").extract_version == 45
