"""Baits made in memory from shapes, through the same lookup and examination as those from files."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from pathlib import Path
from typing import Any

import numpy as np

from meshlure.bait.loading import assemble
from meshlure.bait.pieces import Bait
from meshlure.files.baitfile import bait_of
from meshlure.files.reading import MeshFile
from meshlure.findings import Finding
from meshlure.geometry.surface import Floats, Surface

MM, G, MM3, G_MM3 = 1e-3, 1e-3, 1e-9, 1e6
"""Metres, kilograms, cubic metres; and kg/m3 of a density in g/mm3."""

Table = dict[str, Any]


@dataclass(frozen=True, eq=False)
class Insert:
    """An insert or void: its surface, m, and its keys in the bait file."""

    name: str
    surface: Surface
    keys: Table


def insert(name: str, surface: Surface, density: float, **keys: Any) -> Insert:
    """A solid insert of a density in g/cm3."""
    return Insert(name, surface, {"density": f"{density!r} g/cm3", **keys})


def void(name: str, surface: Surface, kind: str = "sealed", **keys: Any) -> Insert:
    """A hollow."""
    return Insert(name, surface, {"void": kind, **keys})


def hardware(name: str, grams: float, at: Sequence[float] | Floats, density: float | None = None, **keys: Any) -> Table:
    """A hanging mass, g, at a place in m; with a density, g/cm3, it displaces."""
    stated = {} if density is None else {"density": f"{density!r} g/cm3"}
    place = [float(value) * 1e3 for value in at]
    return {"name": name, "mass": f"{grams!r} g", "at": place, "hangs": True, **stated, **keys}


def balls(chamber: str, diameter: float, count: int, density: float, at: str | None = None) -> Table:
    """Balls of a diameter in m and a density in g/cm3."""
    end = {} if at is None else {"at": at}
    stated = f"{density!r} g/cm3"
    return {"chamber": chamber, "diameter": f"{diameter * 1e3!r} mm", "count": count, "density": stated, **end}


def coat(thickness: float, density: float) -> Table:
    """A coat of a thickness in m and a density in g/cm3."""
    return {"thickness": f"{thickness * 1e3!r} mm", "density": f"{density!r} g/cm3"}


def bait(
    body: Surface,
    *inserts: Insert,
    density: float = 0.6,
    water: float = 1000.0,
    nose: Any = "-x",
    back: Any = "+z",
    cavities: str = "sealed",
    within: float | None = None,
    printed: Table | None = None,
    **sections: Any,
) -> Bait:
    """A bait of a body, m, of a density in g/cm3 or printed, in water of kg/m3; further sections as in a bait file."""
    head: Table = {"name": "bench bait", "length_unit": "mm", "nose": nose, "back": back, "size_checked": True}
    if within is not None:
        head["suspends_within"] = f"{within!r} g"
    table: Table = {
        "format": 1,
        "bait": head,
        "water": {"density": f"{water!r} kg/m3"},
        "body": {"mesh": "body.stl", **_made_of(density, printed), "cavities": cavities},
        "insert": [{"name": piece.name, "mesh": f"{piece.name}.stl", **piece.keys} for piece in inserts],
        **sections,
    }
    surfaces = {"body": body, **{piece.name: piece.surface for piece in inserts}}
    files = {
        name: MeshFile(Path(f"{name}.stl"), "0" * 64, len(surface.faces), "mm", surface)
        for name, surface in surfaces.items()
    }
    return assemble(bait_of(table, Path(), "bench bait"), files)


def _made_of(density: float, printed: Table | None) -> Table:
    return {"density": f"{density!r} g/cm3"} if printed is None else {"printed": printed}


def codes(findings: Sequence[Finding]) -> set[str]:
    """What was found."""
    return {finding.code for finding in findings}


def only(findings: Sequence[Finding], code: str) -> Finding:
    """The one finding of a code."""
    found = [finding for finding in findings if finding.code == code]
    assert len(found) == 1, [finding.message for finding in findings]
    return found[0]


def vector(*values: float) -> Floats:
    """A point given in mm, m."""
    return np.array(values) * MM
