"""Closed: the mesh that a script hands over, read where it is a file, and found to enclose a volume."""

from __future__ import annotations

from os import PathLike
from pathlib import Path

import numpy as np

from meshlure.bait.meshpiece import shape
from meshlure.bait.refusals import refuse
from meshlure.errors import Fault, InputError
from meshlure.files.reading import read_mesh
from meshlure.findings import Finding
from meshlure.geometry.shells import split
from meshlure.geometry.soundness import examine
from meshlure.geometry.surface import Surface
from meshlure.geometry.topology import EdgePairs, paired

_PIECE = "mesh"


def closed(mesh: Surface | str | PathLike[str], where: str) -> tuple[Surface, EdgePairs, tuple[Finding, ...]]:
    """Return the outer skin of a mesh in its own unit, its edges, and what was found.

    Parameters
    ----------
    mesh : Surface or path
        A path is read as STL or OBJ and examined; a surface of one closed outward shell is taken as it is, any other
        is examined too. An object with ``vertices`` and ``faces`` counts as a surface.
    where : str
        Name of the argument, for the messages.

    Raises
    ------
    InputError
        Where it cannot be read or encloses no volume.
    """
    if isinstance(mesh, str | PathLike):
        # The unit is of no account: numbers are taken as they stand.
        file = read_mesh(Path(mesh), "m")
        return _examined(file.surface, str(mesh), file.findings)
    if not isinstance(mesh, Surface):
        mesh = _surface(mesh, where)
    if np.isfinite(mesh.vertices).all() and len(mesh.faces):
        pairs = paired(mesh)
        if pairs.closed:
            shells = split(mesh, pairs)
            if len(shells) == 1 and shells[0].volume > 0 and not shells[0].flat:
                return mesh, pairs, ()
    return _examined(mesh, where, ())


def _examined(
    surface: Surface, where: str, findings: tuple[Finding, ...]
) -> tuple[Surface, EdgePairs, tuple[Finding, ...]]:
    sound = examine(surface, _PIECE)
    refuse(sound.findings, {_PIECE: where})
    made = shape(sound, _PIECE)
    return made.outer, made.pairs, (*findings, *sound.findings)


def _surface(mesh: object, where: str) -> Surface:
    try:
        return Surface(np.asarray(mesh.vertices), np.asarray(mesh.faces))  # type: ignore[attr-defined]
    except (AttributeError, ValueError, TypeError) as error:
        raise InputError(
            Fault(
                "this is no mesh",
                where,
                type(mesh).__name__,
                "a path of an STL or OBJ file, or a surface with vertices (n, 3) and faces (m, 3)",
                "give the path of the exported mesh",
            )
        ) from error
