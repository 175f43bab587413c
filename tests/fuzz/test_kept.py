"""What the fuzz found, tried again: every file is answered or refused in words."""

from __future__ import annotations

import random
import struct
from pathlib import Path

import pytest
from fuzz.mutations import changed
from fuzz.seeds import baits, meshes
from fuzz.target import fed, prepared

KEPT = Path(__file__).parent / "kept"


@pytest.mark.parametrize("name", sorted(path.name for path in KEPT.iterdir()))
def test_a_kept_file(tmp_path: Path, name: str) -> None:
    """Its name ends in the number that its mending, or the command that works on it, was drawn by."""
    prepared(tmp_path)
    stem, _, kind = name.rpartition(".")
    kind = "bait" if kind == "toml" else kind
    assert fed(kind, (KEPT / name).read_bytes(), tmp_path, random.Random(int(stem.rpartition("-")[2])))


def test_a_signalling_not_a_number_is_refused_without_a_warning(tmp_path: Path) -> None:
    """IEEE 754: the highest bit of the fraction tells a quiet one from one that raises when it is used."""
    number = struct.pack("<I", 0x7FA00000)
    data = bytearray(meshes()["stl"][-1])
    data[96:100] = number
    assert "no finite number" in fed("stl", bytes(data), tmp_path, random.Random(1))


def test_some_files_of_every_kind(tmp_path: Path) -> None:
    """A few turns of the fuzz itself, so that it stays in order."""
    lot = random.Random(20)
    prepared(tmp_path)
    pool = meshes() | {"bait": list(baits())}
    outcomes = {
        fed(kind, changed(kind, lot.choice(files), files, lot), tmp_path, random.Random(3))
        for kind, files in pool.items()
        for _ in range(8)
    }
    assert len(outcomes) > 25
