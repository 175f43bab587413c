"""Meshes written as STL in mm, read back, and held against what was promised."""

from __future__ import annotations

from pathlib import Path

from meshlure.errors import Fault, InputError
from meshlure.files.reading import read_mesh
from meshlure.files.source import ALL
from meshlure.files.stl import write_stl
from meshlure.geometry.moments import solid_moments
from meshlure.geometry.solids import Solid
from meshlure.geometry.soundness import examine
from meshlure.geometry.surface import Surface

AGREES = 1e-4
"""Share of the volume promised within which what was written must come back."""

_SLACKS = (1e-6, 3e-6, 1e-5)
"""m. Vertices closer than this are merged before writing: an STL rounds a 100 mm part to some hundred-millionths of a
metre, and seams finer than that would come back open. The coarser ones are tried where the finer one does."""


def write_solid(
    solid: Solid,
    path: Path,
    next_step: str = "move the insert's skin a little off the body's, or draw the pocket in CAD",
) -> Surface:
    """Write a solid as STL in mm, check the file and return what it says.

    Parameters
    ----------
    solid : Solid
    path : Path
        In a folder that exists.
    next_step : str
        What to do where it cannot be written so that it keeps its shape.

    Returns
    -------
    Surface
        As read back, m.

    Raises
    ------
    InputError
        Where nothing is left of it, or it comes back open, or its volume is off by more than 0.01%.
    """
    promised = solid.volume
    if solid.empty:
        raise InputError(
            Fault(
                what="nothing is left of it once the pockets are cut",
                where=path.name,
                next_step="check that the inserts are smaller than what they lie in",
            )
        )
    trouble = ""
    for slack in _SLACKS:
        write_stl(path, solid.simplified(slack).surface())
        came_back = examine(read_mesh(path, "mm", largest=ALL).surface, path.name)
        if came_back.volume is None:
            trouble = came_back.findings[0].message
            continue
        volume = solid_moments(came_back.surface).amount
        if abs(volume - promised) <= AGREES * promised:
            return came_back.surface
        trouble = f"{volume * 1e9:.6g} mm3"
    raise InputError(
        Fault(
            what="the mesh written does not keep its promise once read back",
            where=path.name,
            found=trouble,
            allowed=f"closed, {promised * 1e9:.6g} mm3 within 0.01%",
            next_step=next_step,
        )
    )


def file_name(piece: str, used: set[str]) -> str:
    """Return a file name of letters, digits and dashes that no other piece has."""
    stem = "-".join("".join(c if c.isascii() and c.isalnum() else " " for c in piece.lower()).split()) or "insert"
    name, number = f"{stem}.stl", 2
    while name in used:
        name, number = f"{stem}-{number}.stl", number + 1
    used.add(name)
    return name
