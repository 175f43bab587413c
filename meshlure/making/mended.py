"""A mended surface as a mesh file: written, read back, and held against what was made."""

from __future__ import annotations

import io
from pathlib import Path
from typing import Final

from meshlure.errors import Fault, InputError
from meshlure.files.reading import mesh_of
from meshlure.files.stl import stl_bytes
from meshlure.files.threemf import write_3mf
from meshlure.geometry.shells import enclosed_volume
from meshlure.geometry.solids import Solid, SolidError
from meshlure.geometry.soundness import examine
from meshlure.geometry.surface import Surface

SUFFIXES: Final = (".stl", ".3mf")

_AGREES: Final = 1e-6
"""Share of the volume that four-byte numbers may move."""

_SLACKS: Final = (0.0, 1e-6, 3e-6, 1e-5)
"""m. Corners closer than this are merged where the rounding of an STL would open a seam: not at all at first."""


def mesh_bytes(surface: Surface, path: Path, name: str) -> tuple[bytes, float]:
    """Return a closed surface as the bytes of a mesh file, and how far corners were merged for it, m.

    Parameters
    ----------
    surface : Surface
        Closed, outward.
    path : Path
        Its suffix says the format: .stl or .3mf.
    name : str
        Of the object, in a 3MF.

    Raises
    ------
    InputError
        What is written does not come back closed and of its volume.
    """
    promised = enclosed_volume(surface)
    trouble = ""
    for slack in _SLACKS:
        try:
            merged = surface if slack == 0 else Solid.of(surface).simplified(slack).surface()
        except SolidError as error:
            trouble = str(error)
            break
        made = stl_bytes(merged) if path.suffix.lower() == ".stl" else _3mf_bytes(name, merged)
        came_back = examine(mesh_of(made, path, "mm").surface, path.name)
        if came_back.volume is None:
            trouble = came_back.findings[0].message
        elif abs(came_back.volume - promised) <= (_AGREES if slack == 0 else 100 * _AGREES) * abs(promised):
            return made, slack
        else:
            trouble = f"{came_back.volume * 1e9:.6g} mm3 instead of {promised * 1e9:.6g}"
    raise InputError(
        Fault(
            "the mended mesh does not keep its shape once it is written and read back",
            str(path),
            trouble,
            next_step="write it as 3MF, which keeps more digits" if path.suffix.lower() == ".stl" else "mend it in CAD",
        )
    )


def _3mf_bytes(name: str, surface: Surface) -> bytes:
    paper = io.BytesIO()
    write_3mf(paper, [(name, surface)])
    return paper.getvalue()
