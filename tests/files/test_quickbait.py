"""A bait stated on the command line is checked as one stated in a file, and its faults name the options."""

from __future__ import annotations

import re
import shutil
from dataclasses import replace
from pathlib import Path
from typing import Any

import pytest

from meshlure.errors import InputError
from meshlure.files.baitfile import read_baitfile
from meshlure.files.meshes import read_meshes
from meshlure.files.quickbait import quick_bait

FOLDER = Path(__file__).parents[1] / "bad_meshes"
STATED: dict[str, Any] = {"density": "0.72 g/cm3", "unit": "mm", "nose": "-x", "back": "+z"}


def test_the_same_bait_as_from_a_file(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.chdir(tmp_path)
    Path("body.toml").write_text(
        'format = 1\n[bait]\nlength_unit = "mm"\nnose = "-x"\nback = [0, 0.001, 1]\n'
        '[water]\ntemperature = "10 degC"\n[body]\nmesh = "body.stl"\ndensity = "0.72 g/cm3"\n'
        '[[insert]]\nname = "belly"\nmesh = "in/belly.stl"\nmaterial = "tungsten heavy alloy 90% W"\n'
        '[[insert]]\nname = "chamber"\nmesh = "chamber.obj"\nvoid = "sealed"\n'
        '[[insert]]\nname = "a=b"\nmesh = "a=b.stl"\ndensity = ".9 g/cm3"\n'
    )
    inserts = ["in/belly.stl=tungsten heavy alloy 90% W", "chamber.obj = Sealed", "a=b.stl=.9 g/cm3"]
    quick = quick_bait(Path("body.stl"), **STATED | {"back": "0, 0.001, 1"}, inserts=inserts, temperature="10 degC")
    assert replace(quick, path=Path("body.toml")) == read_baitfile(Path("body.toml"))


@pytest.mark.parametrize(
    ("changed", "said"),
    [
        ({"density": "0.72"}, "--density: .*no unit.*'0.72 g/cm3' or '720 kg/m3'"),
        ({"density": None}, "--density: .*density or a material.*neither"),
        ({"material": "balsa"}, "--density: .*one of them.*--material balsa"),
        ({"unit": "furlong"}, "--unit: .*furlong"),
        ({"nose": "forward"}, "--nose: no such direction.*'forward'"),
        ({"back": "1,0"}, r"--back: three finite numbers.*\[1.0, 0.0\]"),
        ({"back": "-x"}, "--back: .*right angle"),
        ({"temperature": "18"}, "--temperature: .*no unit"),
        ({"salinity": "99 g/kg"}, "--salinity: .*99 g/kg"),
        ({"inserts": ["belly.stl"]}, "--insert belly.stl: .*a file and what it is.*FILE=sealed"),
        ({"inserts": ["=lead"]}, "--insert =lead: .*a file and what it is"),
        ({"inserts": ["belly.stl=11"]}, "--insert belly.stl=11: .*no unit.*'11 g/cm3' or '11000 kg/m3'"),
        ({"inserts": ["belly.stl=-1 g/cm3"]}, "--insert belly.stl=-1 g/cm3: .*above zero"),
        ({"inserts": ["a/eye.stl=brass", "b/eye.stl=brass"]}, "--insert b/eye.stl=brass: two pieces have one name"),
        ({"inserts": ["body.stl=brass"]}, "--insert body.stl=brass: two pieces have one name.*the body"),
    ],
)
def test_one_fault_one_message(changed: dict[str, Any], said: str) -> None:
    with pytest.raises(InputError) as caught:
        quick_bait(Path("minnow.stl"), **STATED | changed)
    assert re.match(said, str(caught.value), re.DOTALL), str(caught.value)
    assert len(caught.value.faults) == 1


def test_all_faults_at_once() -> None:
    with pytest.raises(InputError) as caught:
        quick_bait(Path("minnow.stl"), unit="x", nose="x", back="x", inserts=["belly.stl", "a.stl=3"])
    assert [fault.where for fault in caught.value.faults] == [
        "--density",
        "--insert belly.stl",
        "--unit",
        "--back",
        "--insert a.stl=3",
    ]


def test_all_meshes_that_cannot_be_read_are_told(tmp_path: Path) -> None:
    for name in ("solid_but_binary.stl", "concave.obj"):
        shutil.copy(FOLDER / name, tmp_path)
    inserts = [f"{tmp_path}/concave.obj=lead", f"{tmp_path}/gone.stl=sealed", f"{FOLDER}/empty.stl=lead"]
    with pytest.raises(InputError) as caught:
        read_meshes(quick_bait(tmp_path / "solid_but_binary.stl", **STATED, inserts=inserts))
    assert [fault.what for fault in caught.value.faults] == ["the mesh is not there", "the mesh is empty"]
    read = read_meshes(quick_bait(tmp_path / "solid_but_binary.stl", **STATED, inserts=inserts[:1]))
    assert {name: mesh.triangles for name, mesh in read.items()} == {"body": 12, "concave": 20}


def test_meshes_may_have_long_and_odd_paths() -> None:
    deep = Path("/".join(["far"] * 80)) / "body\udcff.stl"
    made = quick_bait(deep, **STATED, inserts=[f"{'a/' * 150}belly.stl=lead"])
    assert made.body.mesh == deep
    assert made.inserts[0].mesh == Path("a/" * 150) / "belly.stl"
    assert [mesh.path for mesh in made.meshes()] == [deep, made.inserts[0].mesh]
