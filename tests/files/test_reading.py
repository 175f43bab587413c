"""Mesh files as they are named: suffixes, units, and the ways of not being there."""

from __future__ import annotations

import hashlib
import os
from pathlib import Path

import numpy as np
import pytest

from meshlure.errors import InputError
from meshlure.files.reading import read_mesh

FOLDER = Path(__file__).parents[1] / "bad_meshes"


@pytest.fixture
def body(tmp_path: Path) -> Path:
    path = tmp_path / "body.stl"
    path.write_bytes((FOLDER / "solid_but_binary.stl").read_bytes())
    return path


@pytest.mark.parametrize(("unit", "length"), [("mm", 0.04), ("cm", 0.4), ("m", 40.0), ("in", 1.016)])
def test_units(body: Path, unit: str, length: float) -> None:
    """The box is 40 units long; the inch is 25.4 mm."""
    mesh = read_mesh(body, unit)
    assert np.ptp(mesh.surface.vertices[:, 0]) == pytest.approx(length, rel=1e-15)
    assert mesh.unit == unit
    assert len(mesh.surface.vertices) == 8


def test_the_hash_is_of_the_bytes(body: Path) -> None:
    assert read_mesh(body, "mm").sha256 == hashlib.sha256(body.read_bytes()).hexdigest()


def test_suffix_in_capitals(body: Path) -> None:
    assert read_mesh(body.rename(body.with_name("BODY.STL")), "mm").triangles == 12


@pytest.mark.parametrize(
    ("name", "said"),
    [
        ("body.stll", "format is not read.*'.stll'.*allowed: .stl, .obj, .3mf, .*did you mean '.stl'"),
        ("body.gltf", "format is not read.*'.gltf'.*export it as GLB"),
        ("body.zip", "format is not read.*'.zip'.*unpack it"),
        ("body", "format is not read.*'body'.*with its suffix"),
        ("boddy.stl", "is not there.*did you mean 'body.stl'"),
        ("Body.obj", "is not there.*did you mean 'body.stl'"),
        ("x.obj", "is not there.*did you mean 'x.stl'"),
        ("else.stl", "is not there.*check the name"),
        ("gone/body.stl", "is not there.*gone is no folder"),
        ("body.stl/body.stl", "is not there.*body.stl is no folder"),
        ("folder.stl", "is a folder"),
        ("body\0.stl", "cannot be read.*null"),
    ],
)
def test_not_there(body: Path, name: str, said: str) -> None:
    (body.parent / "folder.stl").mkdir()
    (body.parent / "x.stl").touch()
    with pytest.raises(InputError, match=f"(?s)^bait.toml: body.mesh: .*{said}"):
        read_mesh(body.parent / name, "mm", where="bait.toml: body.mesh")


def test_unit_unknown(body: Path) -> None:
    with pytest.raises(InputError, match=r"(?s)body\.stl.*furlong.*mm, cm, m, in"):
        read_mesh(body, "furlong")


def test_not_allowed_to_be_read(body: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    if os.geteuid() == 0:  # the rights of a file do not bind root

        def refuse(_: Path, mode: str) -> None:
            raise PermissionError(13, "Permission denied", str(body))

        monkeypatch.setattr(Path, "open", refuse)
    else:
        body.chmod(0)
    with pytest.raises(InputError, match=r"(?s)body\.stl: the mesh may not be read.*right to read"):
        read_mesh(body, "mm")


def test_a_pipe_is_not_waited_for(tmp_path: Path) -> None:
    os.mkfifo(tmp_path / "pipe.stl")
    with pytest.raises(InputError, match="a device or a pipe"):
        read_mesh(tmp_path / "pipe.stl", "mm")
