"""Every command that writes, set to work on a bait small enough that hundreds of runs of it can be cut off."""

from __future__ import annotations

import io
import json
import os
import re
import shutil
import subprocess
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from pathlib import Path
from typing import Any, Final
from xml.etree import ElementTree as ET

import shapes
from command_bench import BAD_MESHES, BAIT, SCRIPT, box
from pypdf import PdfReader

from meshlure.files.stl import stl_bytes

OUT: Final = "out"
"""The folder that a job writes, within the one that it runs in."""

ENVIRONMENT: Final = os.environ | {"OMP_NUM_THREADS": "1", "OPENBLAS_NUM_THREADS": "1"}

_INSERT: Final = '[[insert]]\nname = "belly weight"\nmesh = "weight.stl"\nmaterial = "lead"\nfit = "0.1 mm"\n'
_TARGET: Final = '[target]\nbehaviour = "sinks"\nreserve = "-3 g"\n[ballast]\nmaterials = ["lead"]\nshapes = ["rod"]\n'
_CHAMBER: Final = '[chamber]\nballs = [{ diameter = "4 mm", count = 1, material = "bearing steel" }]\nslope = "4 deg"\n'
_MOULD: Final = (
    '[mould]\nshrink = { print = "0.2 %", silicone = "0.3 %", resin = "0.4 %" }\nsprue = { diameter = "6 mm" }\n'
)
_POUR: Final = '[pour]\nresin = "1.05 g/cm3"\nballoons = "0.15 g/cm3"\n[water]\ndensity = "990 kg/m3"\n'

AGES: Final = ("first", "second")
"""An older run's bait and the one that takes its place: the second is a hundredth larger, and named otherwise."""


@dataclass(frozen=True)
class Job:
    """A command that writes.

    Attributes
    ----------
    name : str
    words : sequence of str
        Of the command line; AGE stands for the bait's age.
    sections : str
        What its bait file has beyond the body.
    file : str
        The single file that it writes, where it writes no folder.
    over : bool
        Whether that file takes an older one's place.
    codes : sequence of int
        Exit codes of a run that comes to its end.
    program : sequence of str
        What is run.
    """

    name: str
    words: Sequence[str]
    sections: str = ""
    file: str = ""
    over: bool = False
    codes: Sequence[int] = (0,)
    program: Sequence[str] = (str(SCRIPT),)

    @property
    def written(self) -> str:
        """Folder or file that it writes."""
        return self.file or OUT

    def command(self, age: str) -> list[str]:
        """Words of the command line for the older or the newer bait."""
        return [*self.program, *(word.replace("AGE", age) for word in self.words)]


def _folder(command: str, *words: str, sections: str = "", name: str = "") -> Job:
    return Job(name or command, (command, "AGE.toml", *words, "--out", OUT), sections)


JOBS: Final[Mapping[str, Job]] = {
    job.name: job
    for job in (
        _folder("report", "--cut", "--glb", sections=_INSERT),
        _folder("balance", "--halves", sections=_TARGET),
        _folder("chamber", sections=_CHAMBER),
        _folder("chamber", "--hollow", "wall 1.6 mm", name="hollow"),
        _folder("mould", sections=_MOULD),
        Job("pour", ("pour", "AGE.toml", "--out", OUT), _POUR, codes=(1,)),
        _folder("sheet"),
        Job("compare", ("compare", "AGE.toml", "other.toml", "--out", OUT)),
        Job(
            "new",
            ("new", "AGE.stl", "--unit", "mm", "--density", "1.2 g/cm3", "--yes", "--out", "new.toml"),
            file="new.toml",
        ),
        Job(
            "mend",
            ("inspect", "cracked.obj", "--unit", "mm", "--mend", "--cap", "10%", "--out", "mended.3mf"),
            file="mended.3mf",
        ),
        Job(
            "picture",
            ("inspect", "AGE.stl", "--unit", "mm", "--picture", "picture.png"),
            file="picture.png",
            over=True,
        ),
    )
}


def ready(folder: Path, job: Job) -> None:
    """Put a job's meshes and bait files of both ages into an empty folder."""
    for age, size in zip(AGES, (1.0, 1.01), strict=True):
        body = stl_bytes(shapes.ellipsoid((0.03 * size, 0.007, 0.01), 2))
        whole = body if job.name == "mould" else box((0, 0, 0), (40 * size, 10, 16))
        (folder / f"{age}.stl").write_bytes(whole)
        text = BAIT.replace("body.stl", f"{age}.stl").replace("Alder pool minnow", age) + job.sections
        (folder / f"{age}.toml").write_text(text, encoding="utf-8")
    (folder / "other.toml").write_text(BAIT.replace("body.stl", "first.stl"), encoding="utf-8")
    (folder / "weight.stl").write_bytes(box((10, 3, 3), (5, 4, 4)))
    shutil.copy(BAD_MESHES / "cracked.obj", folder)


def begun(job: Job, age: str, folder: Path, **more: Any) -> subprocess.Popen[str]:
    """A process at the job."""
    return subprocess.Popen(
        job.command(age), cwd=folder, env=ENVIRONMENT, stdout=subprocess.PIPE, stderr=subprocess.PIPE,
        stdin=subprocess.DEVNULL, text=True, **more,
    )  # fmt: skip


Contents = Mapping[str, bytes]
"""Files by their paths in what a job writes."""


def contents(folder: Path, job: Job) -> Contents | None:
    """What a job wrote; None where nothing is there."""
    place = folder / job.written
    if place.is_dir():
        return {file.relative_to(place).as_posix(): file.read_bytes() for file in place.rglob("*") if file.is_file()}
    return {job.file: place.read_bytes()} if place.exists() else None


def put_back(folder: Path, job: Job, what: Contents | None) -> None:
    """Have a job's place hold just these files."""
    place = folder / job.written
    if place.is_dir():
        shutil.rmtree(place)
    else:
        place.unlink(missing_ok=True)
    for name, content in (what or {}).items():
        file = folder / name if job.file else place / name
        file.parent.mkdir(parents=True, exist_ok=True)
        file.write_bytes(content)


def strays(folder: Path) -> list[str]:
    """Hidden entries beside what a job writes."""
    return sorted(entry.name for entry in folder.iterdir() if entry.name.startswith("."))


_NUMBERS: Final = re.compile(rb"-?\d[\d.,]*(?:e-?\d+)?")


def whole(found: Contents, reference: Contents) -> str:
    """What keeps a result from being one run's and complete, as the reference run's is; empty where nothing does.

    Notes
    -----
    Meshes, bait files and pictures are the reference's to the byte. What tells how long it took, or is stamped with the
    run's own mark, is held against it without numbers and mark; a drawing, which writes the mark in outlines of
    letters, by its end and extent.
    """
    if found.keys() != reference.keys():
        return f"holds {sorted(found)}"
    try:
        own, theirs = (_mark(one) for one in (found, reference))
    except ValueError as error:
        return f"results.json: {error}"
    for name, content in found.items():
        expected = reference[name]
        if content == expected:
            continue
        if name.endswith((".pdf", ".svg")):
            good = _drawn(name, content, expected)
        elif name.endswith((".json", ".html")):
            good = own.encode() in content and _plain(content, own) == _plain(expected, theirs)
        else:
            good = False
        if not good:
            return f"{name} is not that of the run"
    return ""


def _mark(result: Contents) -> str:
    """Mark of the run that wrote a folder; none for a single file."""
    return str(json.loads(result["results.json"])["run"]) if "results.json" in result else ""


def _drawn(name: str, content: bytes, expected: bytes) -> bool:
    """Whether a drawing comes to its end, and is as large as another but for some letters."""
    if name.endswith(".svg"):
        try:
            ET.fromstring(content)
        except ET.ParseError:
            return False
        return abs(len(content) - len(expected)) < 0.01 * len(expected)
    if not content.startswith(b"%PDF") or not content.rstrip().endswith(b"%%EOF"):
        return False
    own, theirs = _operators(content), _operators(expected)
    return len(own) == len(theirs) and all(abs(a - b) < 0.02 * b for a, b in zip(own, theirs, strict=True))


def _operators(content: bytes) -> list[int]:
    """Count on each page of a PDF, which is unpacked whole for it."""
    pages = PdfReader(io.BytesIO(content)).pages
    return [len(page.get_contents().operations) for page in pages]  # type: ignore[union-attr]


def _plain(content: bytes, mark: str) -> bytes:
    return _NUMBERS.sub(b"#", content.replace(mark.encode(), b""))
