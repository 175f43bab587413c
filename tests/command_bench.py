"""A bench for the command line: a folder with a body and a weight, and the command run in this process."""

from __future__ import annotations

import re
import runpy
import subprocess
import sys
from collections.abc import Sequence
from dataclasses import dataclass
from pathlib import Path
from typing import Any

import pytest

from meshlure.cli import main

BAD_MESHES = Path(__file__).parent / "bad_meshes"
BUILD: dict[str, Any] = runpy.run_path(str(BAD_MESHES / "build.py"))
SCRIPT = Path(sys.executable).with_name("meshlure")
"""The command as pip installed it."""

BAIT = """\
format = 1
[bait]
name = "Alder pool minnow"
length_unit = "mm"
nose = "-x"
back = "+z"
[body]
mesh = "body.stl"
density = "1.2 g/cm3"
"""
"""It sinks, which takes less time than finding the postures of a bait that floats."""

QUICK = ("--density", "1.2 g/cm3", "--unit", "mm", "--nose", "-x", "--back", "+z")


@dataclass(frozen=True)
class Ran:
    """What a command came to."""

    code: int
    out: str
    err: str


def box(low: Sequence[float], size: Sequence[float]) -> bytes:
    """Binary STL of a box, written byte by byte after the format."""
    data: bytes = BUILD["binary"](BUILD["box"](tuple(low), tuple(size)))
    return data


class Bench:
    """A folder with body.stl, 40 x 10 x 16 mm from the origin on, and weight.stl, 5 x 4 x 4 mm inside it."""

    def __init__(self, folder: Path, monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]) -> None:
        self.folder = folder
        self.out = folder / "out"
        self._monkeypatch = monkeypatch
        self._capsys = capsys
        self.put("body.stl", box((0, 0, 0), (40, 10, 16)))
        self.put("weight.stl", box((10, 3, 3), (5, 4, 4)))
        monkeypatch.chdir(folder)

    def put(self, name: str, content: bytes | str) -> Path:
        path = self.folder / name
        path.parent.mkdir(parents=True, exist_ok=True)
        path.write_bytes(content.encode() if isinstance(content, str) else content)
        return path

    def run(self, *words: str | Path) -> Ran:
        """Run the command in this process."""
        self._monkeypatch.setattr(sys, "argv", ["meshlure", *map(str, words)])
        self._capsys.readouterr()
        with pytest.raises(SystemExit) as ended:
            main.main()
        said = self._capsys.readouterr()
        assert isinstance(ended.value.code, int)
        return Ran(ended.value.code, said.out, said.err)

    def launch(self, *words: str | Path, **more: Any) -> Ran:
        """Run the installed command in a process of its own."""
        done = subprocess.run([SCRIPT, *words], cwd=self.folder, capture_output=True, text=True, timeout=120, **more)
        return Ran(done.returncode, done.stdout, done.stderr)

    def report(self, bait: str | Path, *words: str | Path) -> Ran:
        """Report on a mesh in the quick form, or on a bait file's text, without a page."""
        if isinstance(bait, str) and bait.startswith("format"):
            self.put("minnow.toml", bait)
            return self.run("report", "minnow.toml", "--no-page", "--out", self.out, *words)
        return self.run("report", bait, *QUICK, "--no-page", "--out", self.out, *words)

    def contents(self) -> dict[str, bytes]:
        """Every file below the folder, hidden ones too."""
        files = (path for path in self.folder.rglob("*") if path.is_file())
        return {path.relative_to(self.folder).as_posix(): path.read_bytes() for path in files}


def fault(ran: Ran) -> str:
    """The one fault that a run was refused with: nothing on stdout, no traceback, a place and a next step."""
    assert ran.code == 2, ran
    assert ran.out == ""
    assert "Traceback" not in ran.err
    head, _, rest = ran.err.partition("\n")
    assert head == "meshlure cannot go on:", ran.err
    lines = rest.splitlines()
    assert len([line for line in lines if line.startswith("- ")]) == 1, ran.err
    assert all(re.match(r"- |  (found|allowed|next): \S", line) for line in lines), ran.err
    assert lines[-1].startswith("  next: "), ran.err
    return rest
