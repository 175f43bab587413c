"""The result tree's account of one mesh that was inspected."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from typing import Any

import numpy as np

from meshlure.errors import Fault
from meshlure.files.reading import MeshFile
from meshlure.findings import Finding, Level
from meshlure.geometry.mending.mend import Done, Mended
from meshlure.geometry.mending.steps import Left
from meshlure.geometry.roundness import ball_diameter
from meshlure.geometry.shells import Shell, extent
from meshlure.geometry.soundness import Soundness
from meshlure.geometry.surface import Surface
from meshlure.results.numbers import MM, MM2, MM3, plain
from meshlure.results.pieces import findings as finding_rows

Tree = dict[str, Any]

SOUND, FOUND, UNREADABLE = "sound", "findings", "unreadable"
"""What an inspection comes to."""


@dataclass(frozen=True)
class Volume:
    """What a closed mesh encloses.

    Attributes
    ----------
    volume : float, m3
        Overlapping shells joined, cavities left out: what the report counts.
    summed : float, m3
        Sum over the faces: space that two shells share counts twice.
    deficit : float, m3
        What the facets leave out of the smooth part.
    """

    volume: float
    summed: float
    deficit: float


def mesh(file: MeshFile, sound: Soundness, volume: Volume | None, found: Sequence[Finding]) -> Tree:
    """Return the account of a mesh that was read.

    Parameters
    ----------
    file : MeshFile
    sound : Soundness
        Of its surface.
    volume : Volume or None
        None where the mesh is not closed.
    found : sequence of Finding
        Of reading, soundness and all else.
    """
    low, high = file.surface.bounds
    graver = any(finding.level is not Level.NOTE for finding in found)
    return {
        "file": str(file.path),
        "verdict": FOUND if graver else SOUND,
        "format": file.format,
        "bytes": file.size,
        "sha256": file.sha256,
        "length_unit": file.unit,
        "triangles": file.triangles,
        "vertices": len(file.surface.vertices),
        "low_mm": plain(low, MM),
        "high_mm": plain(high, MM),
        "size_mm": plain(high - low, MM),
        "area_mm2": file.surface.area * MM2,
        "closed": sound.pairs.closed and sound.volume is not None,
        "volume_mm3": None if volume is None else volume.volume * MM3,
        "summed_volume_mm3": None if volume is None else volume.summed * MM3,
        "deficit_mm3": None if volume is None else volume.deficit * MM3,
        "exact_volume_mm3": None if file.exact_volume is None else file.exact_volume * MM3,
        "parts": [{"name": part.name, "triangles": len(part.faces)} for part in file.parts],
        "shells": shells(file, sound),
        "findings": finding_rows(found),
        "faults": [],
        "mending": None,
    }


def unreadable(path: str, faults: Sequence[Fault]) -> Tree:
    """Return the account of a file that could not be read as a mesh."""
    empty = dict.fromkeys(
        (
            *("format", "bytes", "sha256", "length_unit", "triangles", "vertices", "low_mm", "high_mm", "size_mm"),
            *("area_mm2", "closed", "volume_mm3", "summed_volume_mm3", "deficit_mm3", "exact_volume_mm3"),
        )
    )
    told = [
        {"what": f.what, "where": f.where, "found": f.found, "allowed": f.allowed, "next_step": f.next_step}
        for f in faults
    ]
    return {
        "file": path,
        "verdict": UNREADABLE,
        **empty,
        "parts": [],
        "shells": [],
        "findings": [],
        "faults": told,
        "mending": None,
    }


def shells(file: MeshFile, sound: Soundness) -> list[Tree]:
    """Return the shells of a closed mesh, the largest first."""
    names = _names(file, sound)
    rows = []
    for number, shell in enumerate(sound.shells):
        ball = ball_diameter(shell)
        rows.append(
            {
                "kind": "cavity" if shell.reversed else "shell",
                "part": names[number],
                "volume_mm3": abs(shell.volume) * MM3,
                "area_mm2": shell.area * MM2,
                "size_mm": plain(shell.bounds[1] - shell.bounds[0], MM),
                "centre_mm": plain(shell.centre, MM),
                "triangles": len(shell.faces),
                "inside": shell.parent,
                "meets": sorted({one + other - number for one, other in sound.joins if number in (one, other)}),
                "ball_mm": None if ball is None else ball * MM,
            }
        )
    return rows


def _names(file: MeshFile, sound: Soundness) -> list[str | None]:
    """Name of the part that each shell belongs to, None where it belongs to none or to several."""
    count = len(file.surface.faces)
    if not file.parts or len(sound.surface.faces) != count:
        return [None] * len(sound.shells)
    owner = np.full(count, -1)
    for number, part in enumerate(file.parts):
        owner[part.faces] = number
    return [_only(owner, shell, [part.name for part in file.parts]) for shell in sound.shells]


def _only(owner: Any, shell: Shell, names: Sequence[str]) -> str | None:
    own = np.unique(owner[shell.faces])
    return names[int(own[0])] or None if len(own) == 1 and own[0] >= 0 else None


def mending(made: Mended, volume: Volume | None, found: Sequence[Finding], offers: Mapping[str, float]) -> Tree:
    """Return the account of a mending, done or only tried.

    Parameters
    ----------
    made : Mended
    volume : Volume or None
        Of what came out; None where that is not closed.
    found : sequence of Finding
        What there still is to say of it.
    offers : mapping of float, m3
        By option: what the volume would be with it.
    """
    surface: Surface = made.after.surface
    low, high = extent(surface.vertices) if len(surface.faces) else np.zeros((2, 3))
    return {
        "steps": [_step(done) for done in made.done],
        "left": [_left(left) for left in made.left],
        "offers": [{"option": option, "volume_mm3": amount * MM3} for option, amount in offers.items()],
        "triangles": len(surface.faces),
        "size_mm": plain(high - low, MM),
        "closed": volume is not None,
        "volume_mm3": None if volume is None else volume.volume * MM3,
        "findings": finding_rows(found),
        "file": None,
        "merged_mm": None,
    }


def _step(done: Done) -> Tree:
    step = done.step
    return {
        "code": step.code,
        "did": step.did,
        "count": step.count,
        "moved_mm": step.moved * MM,
        "before_mm3": None if done.before is None else done.before * MM3,
        "after_mm3": None if done.after is None else done.after * MM3,
        "where_mm": [plain(point, MM) for point in step.where],
    }


def _left(left: Left) -> Tree:
    return {"what": left.what, "where_mm": [plain(point, MM) for point in left.where], "advice": left.advice}
