"""Reader of brep.json: exact mass properties of solids by a B-rep kernel. Millimetres, unit density."""

from __future__ import annotations

import json
from dataclasses import dataclass
from functools import cache
from pathlib import Path
from typing import Any

import numpy as np
from numpy.typing import NDArray

HERE = Path(__file__).parent


@dataclass(frozen=True, eq=False)
class Exact:
    """A solid's exact volume (mm3), centroid (mm), inertia tensor about it (mm5, products negated) and area (mm2)."""

    volume: float
    centroid: NDArray[np.float64]
    inertia: NDArray[np.float64]
    area: float


@cache
def book() -> dict[str, Any]:
    """Return the whole of brep.json."""
    found: dict[str, Any] = json.loads((HERE / "brep.json").read_text(encoding="utf-8"))
    return found


def _exact(entry: dict[str, Any]) -> Exact:
    return Exact(entry["volume_mm3"], np.array(entry["centroid_mm"]), np.array(entry["inertia_mm5"]), entry["area_mm2"])


def sample(bait: str, solid: str) -> Exact:
    """Return a piece of a sample bait by its mesh's stem, or a composite such as "body less inserts"."""
    return _exact(book()["samples"][bait][solid])


def composite(name: str) -> tuple[Exact, dict[float, Path]]:
    """Return a composite solid and its stored facets by chord in mm."""
    entry = book()["composites"][name]
    return _exact(entry), {chord: HERE / "meshes" / file for file, chord in entry["meshes_chord_mm"].items()}


def prediction(bait: str) -> dict[str, Any]:
    """Return weight and buoyancy of a sample bait, summed from B-rep volumes."""
    found: dict[str, Any] = book()["baits"][bait]
    return found
