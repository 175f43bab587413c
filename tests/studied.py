"""The samples' studies, each made once for all tests."""

from __future__ import annotations

import functools
from pathlib import Path

import meshlure
from meshlure.results import Study

FOLDER = Path(__file__).parents[1] / "samples"
SAMPLES = tuple(sorted(path.relative_to(FOLDER).as_posix() for path in FOLDER.glob("*/*.toml")))


@functools.cache
def sample(name: str) -> Study:
    """Study of a sample by its bait file's path below samples/."""
    return meshlure.study(meshlure.read_bait(FOLDER / name))
