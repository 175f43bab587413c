"""The samples' studies, each made once for all tests."""

from __future__ import annotations

import functools
from dataclasses import replace
from pathlib import Path

import meshlure
from meshlure.bait.loading import load
from meshlure.files.baitfile import read_baitfile
from meshlure.results import Study

FOLDER = Path(__file__).parents[1] / "samples"
SAMPLES = tuple(sorted(path.relative_to(FOLDER).as_posix() for path in FOLDER.glob("*/*.toml")))


@functools.cache
def sample(name: str) -> Study:
    """Study of a sample by its bait file's path below samples/."""
    return meshlure.study(meshlure.read_bait(FOLDER / name))


@functools.cache
def drawn(name: str) -> Study:
    """Study of a sample as it is drawn: no gap, and so no glue, round any insert."""
    plan = read_baitfile(FOLDER / name)
    if not any(insert.fit for insert in plan.inserts):
        return sample(name)
    tight = tuple(replace(insert, fit=0.0, glue=None) for insert in plan.inserts)
    return meshlure.study(load(replace(plan, inserts=tight)))
