"""STL: what is written is read back by others, and what others wrote is read."""

from __future__ import annotations

import struct
from pathlib import Path

import numpy as np
import pytest
import trimesh
from stl import Mode
from stl.mesh import Mesh

from meshlure.errors import InputError
from meshlure.files.stl import read_stl, stl_bytes, write_stl
from meshlure.geometry.surface import Surface
from meshlure.geometry.welding import weld


def ball() -> trimesh.Trimesh:
    """Sphere of 642 vertices, 9 mm in radius, off the origin; its numbers in mm."""
    made: trimesh.Trimesh = trimesh.creation.icosphere(subdivisions=3, radius=9.0)
    made.apply_translation([31.0, -4.0, 2.5])
    return made


def surface(mesh: trimesh.Trimesh) -> Surface:
    return Surface(mesh.vertices * 1e-3, mesh.faces)


def test_written_is_read_by_trimesh_with_the_same_volume(tmp_path: Path) -> None:
    write_stl(tmp_path / "ball.stl", surface(ball()))
    seen = trimesh.load_mesh(tmp_path / "ball.stl")
    assert seen.is_watertight
    assert seen.volume == pytest.approx(ball().volume, rel=1e-6)
    assert seen.center_mass == pytest.approx(ball().center_mass, rel=1e-6)
    assert seen.face_normals == pytest.approx(ball().face_normals, abs=1e-5)


def test_layout_of_what_is_written() -> None:
    """The published layout: 80 bytes of header, a 32-bit count, 50 bytes a face beginning with its unit normal."""
    data = stl_bytes(Surface(np.array([[0, 0, 0], [0.01, 0, 0], [0, 0.02, 0]], dtype=float), np.array([[0, 1, 2]])))
    assert len(data) == 84 + 50
    assert data[:12] == b"meshlure mm,"
    assert struct.unpack("<I", data[80:84]) == (1,)
    numbers = struct.unpack("<12fH", data[84:])
    assert numbers == pytest.approx((0, 0, 1, 0, 0, 0, 10, 0, 0, 0, 20, 0, 0))


def test_written_and_read_back_is_the_same_surface() -> None:
    # Numbers that 32 bits hold exactly, so that equality is the check.
    exact = Surface(np.round(ball().vertices * 64) / 64 * 1e-3, ball().faces)
    read = read_stl(stl_bytes(exact), 1e-3, "ball.stl")
    assert np.abs(read.corners - exact.corners).max() <= 1e-17
    assert len(weld(read.corners).surface.vertices) == 642


def test_a_face_without_area_is_written_with_a_zero_normal() -> None:
    flat = Surface(np.array([[0, 0, 0], [0.01, 0, 0], [0.02, 0, 0]], dtype=float), np.array([[0, 1, 2]]))
    assert struct.unpack("<3f", stl_bytes(flat)[84:96]) == (0.0, 0.0, 0.0)


def test_a_coordinate_too_large_for_the_format_is_no_infinity() -> None:
    huge = Surface(np.array([[0, 0, 0], [1e37, 0, 0], [0, 1, 0]], dtype=float), np.array([[0, 1, 2]]))
    with pytest.raises(ValueError, match="32-bit"):
        stl_bytes(huge)


@pytest.mark.parametrize("mode", [Mode.ASCII, Mode.BINARY])
def test_written_by_numpy_stl(tmp_path: Path, mode: Mode) -> None:
    data = np.zeros(len(ball().faces), dtype=Mesh.dtype)
    data["vectors"] = ball().triangles
    Mesh(data).save(str(tmp_path / "ball.stl"), mode=mode)
    read = read_stl((tmp_path / "ball.stl").read_bytes(), 1e-3, "ball.stl")
    assert read.corners * 1e3 == pytest.approx(ball().triangles, rel=1e-6)


@pytest.mark.parametrize("kind", ["stl", "stl_ascii"])
def test_written_by_trimesh(kind: str) -> None:
    exported = ball().export(file_type=kind)
    data = exported if isinstance(exported, bytes) else str(exported).encode()
    read = read_stl(data, 25.4e-3, "ball.stl")
    # The inch is 25.4 mm exactly.
    assert read.corners == pytest.approx(ball().triangles * 25.4e-3, rel=1e-5)


def test_ascii_solids_of_any_spelling() -> None:
    text = (
        "\ufeff\n  SOLID\nFACET NORMAL nan nan nan\nOUTER LOOP\n\tVERTEX 0 0 0\nVERTEX\t1 0 0\nVERTEX 0 1E0 0\n"
        "ENDLOOP\n\nENDFACET\nENDSOLID\n\n\nsolid é ü\nendsolid é ü\n"
    )
    read = read_stl(text.encode(), 1.0, "mixed.stl")
    assert read.corners.tolist() == [[[0, 0, 0], [1, 0, 0], [0, 1, 0]]]
    assert [finding.code for finding in read.findings] == ["several-solids"]


def test_many_faces_that_are_no_numbers_are_counted_and_five_named() -> None:
    data = np.zeros(20, dtype=Mesh.dtype)
    data["vectors"][3:15, 1, 2] = np.nan
    with pytest.raises(InputError, match="face 4, 5, 6, 7, 8 and 7 more: 12 of 20 faces"):
        read_stl(b"x".ljust(80) + struct.pack("<I", 20) + data.tobytes(), 1e-3, "x.stl")
