"""What a changed file is fed to, and what may come of it: an answer, or a refusal in words; nothing else."""

from __future__ import annotations

import json
import random
import re
import traceback
import warnings
from collections.abc import Callable, Mapping
from pathlib import Path
from typing import Final

from fuzz.seeds import MESHES, QUICK

from meshlure.bait.loading import load
from meshlure.bait.pieces import Bait
from meshlure.balancing.finding import balance
from meshlure.chambering.finding import chamber
from meshlure.chambering.hollowing import hollowed
from meshlure.cli.soundings import lines
from meshlure.cli.writing import write, write_bench, write_made
from meshlure.errors import Fault, InputError
from meshlure.examine import study
from meshlure.files.baitfile import read_baitfile
from meshlure.files.quickbait import quick_bait
from meshlure.geometry.mending.steps import Wishes
from meshlure.inspecting import account, inspect
from meshlure.moulding import mould
from meshlure.moulding import write as write_mould
from meshlure.pouring.study import pour
from meshlure.report.sheet import sheet
from meshlure.results.study import Study

LARGEST: Final = 2_000_000
"""Bytes that may be read or unpacked here, so that a bomb costs little."""
_LONGEST: Final = 4000
"""Characters of a fault. It names what it found, and does not repeat the file."""
_STUDIED: Final = 0.15
"""Share of the baits that a command works on to the end: that takes a hundred times as long as the reading."""


def prepared(folder: Path) -> None:
    """Put the meshes that the bait files name into a folder."""
    for name, content in MESHES.items():
        (folder / name).write_bytes(content)


def fed(kind: str, data: bytes, folder: Path, lot: random.Random) -> str:
    """What came of a file, in so few words that the same outcome has the same words.

    Raises
    ------
    Exception
        What must not come of any file: whatever is no InputError, a warning of a library, an answer that is no JSON, or
        a fault that says too much or nothing.
    """
    with warnings.catch_warnings():
        warnings.simplefilter("error")
        try:
            return _FED.get(kind, _mesh)(kind, data, folder, lot)
        except InputError as error:
            for fault in error.faults:
                held(fault)
            *_, place = traceback.extract_tb(error.__traceback__)
            return f"{place.filename}:{place.lineno} " + " ".join(sorted({_short(each.what) for each in error.faults}))


def held(fault: Fault) -> None:
    """Hold a fault to what it must say."""
    text = str(fault)
    if not fault.what or not (fault.where or fault.found):
        raise AssertionError(f"a fault without a place: {text!r}")
    if not fault.next_step:
        raise AssertionError(f"a fault without a next step: {text!r}")
    if len(text) > _LONGEST:
        raise AssertionError(f"a fault of {len(text)} characters: {text[:200]!r}")


def _mesh(kind: str, data: bytes, folder: Path, lot: random.Random) -> str:
    path = folder / f"case.{kind}"
    path.write_bytes(data)
    wishes = Wishes(mirror=lot.random() < 0.5, cap=lot.choice((0.01, 1.0))) if lot.random() < 0.3 else None
    found = inspect(path, "mm", wishes, (), LARGEST)
    tree = account([found])
    json.dumps(tree, allow_nan=False).encode()
    for row in tree["meshes"]:
        "\n".join(map(str, lines(row)))
        for fault in row.get("faults") or ():
            held(Fault(**fault))
    if found.surface is None:
        return " ".join(sorted({_short(fault["what"]) for fault in tree["meshes"][0]["faults"]}))
    return "read " + " ".join(sorted({finding.code for finding in found.findings})) + (" mended" if wishes else "")


def _bait(kind: str, data: bytes, folder: Path, lot: random.Random) -> str:
    path = folder / f"case.{kind}.toml"
    path.write_bytes(data)
    return _studied(load(read_baitfile(path), largest=LARGEST), lot, folder)


def _quick(kind: str, data: bytes, folder: Path, lot: random.Random) -> str:
    options = json.loads(data)
    given = {option[2:]: value for option, value in options.items() if option != "--insert"}
    inserts = [options["--insert"].replace("weight.stl", str(folder / "weight.stl"))] if "--insert" in options else []
    for needed in ("unit", "nose", "back"):  # the command asks for them first
        given.setdefault(needed, QUICK[f"--{needed}"])
    return _studied(load(quick_bait(folder / "body.stl", inserts=inserts, **given), largest=LARGEST), lot, folder)


def _studied(bait: Bait, lot: random.Random, folder: Path) -> str:
    if lot.random() >= _STUDIED:
        return "loaded " + " ".join(sorted({finding.code for finding in bait.findings}))
    name = lot.choice(list(_JOBS))
    found = _JOBS[name](bait, folder)
    json.loads(found.to_json())
    return f"{name} " + " ".join(sorted({finding["code"] for finding in found.results["findings"]}))


def _report(bait: Bait, folder: Path) -> Study:
    return write(study(bait), folder / "out", page=True, variant=bait, glb=True)


def _sheet(bait: Bait, folder: Path) -> Study:
    found = study(bait)
    assert sheet(found).count
    return found


def _balance(bait: Bait, folder: Path) -> Study:
    found = balance(bait)
    return write_made(folder / "out", page=False, make=lambda place: found.make(place, folder / "out", True))


def _chamber(bait: Bait, folder: Path) -> Study:
    found = chamber(bait)
    return write_made(folder / "out", page=False, make=lambda place: found.make(place, folder / "out"))


def _hollow(bait: Bait, folder: Path) -> Study:
    found = hollowed(bait, "wall 1.5 mm")
    return write_made(folder / "out", page=False, make=lambda place: found.make(place, folder / "out"))


def _mould(bait: Bait, folder: Path) -> Study:
    made = mould(bait)
    return write_made(folder / "out", page=False, make=lambda place: write_mould(made, place))


def _pour(bait: Bait, folder: Path) -> Study:
    return write_bench(pour(bait), folder / "out")


_JOBS: Final[Mapping[str, Callable[[Bait, Path], Study]]] = {
    "study": lambda bait, _: study(bait),
    "report": _report,
    "sheet": _sheet,
    "balance": _balance,
    "chamber": _chamber,
    "hollow": _hollow,
    "mould": _mould,
    "pour": _pour,
}
"""What commands do with a bait."""

_FED: Final[Mapping[str, Callable[[str, bytes, Path, random.Random], str]]] = {"bait": _bait, "quick": _quick}


def _short(text: str) -> str:
    return re.sub(r"'[^']*'|\d+", "#", text)[:60]
