"""Loose triangles as a mesh file lists them, before equal corners are welded."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from meshlure.errors import Fault, InputError
from meshlure.findings import Finding
from meshlure.geometry.surface import Floats

_NAMED = 5


@dataclass(frozen=True, eq=False)
class Triangles:
    """What a mesh file holds.

    Attributes
    ----------
    corners : (n, 3, 3) array, m
        Face, corner, coordinate; finite; the faces in the file's order.
    findings : tuple of Finding
        What was odd in the file and yet readable.
    """

    corners: Floats
    findings: tuple[Finding, ...] = ()


def in_metres(corners: NDArray[np.floating], metres: float, where: str) -> Floats:
    """Corners in m from corners in the file's unit.

    Parameters
    ----------
    corners : (n, 3, 3) array, file's unit
    metres : float, m
        Length of the file's unit.
    where : str
        The file, for the message.

    Raises
    ------
    InputError
        A coordinate is not a number or infinite; the first faces that have one are named, counted from 1.
    """
    finite = np.isfinite(corners)
    if not finite.all():
        faces = np.flatnonzero(~finite.all(axis=(1, 2)))
        named = ", ".join(str(face + 1) for face in faces[:_NAMED])
        more = f" and {len(faces) - _NAMED} more" if len(faces) > _NAMED else ""
        first = corners[faces[0]][~finite[faces[0]]][0]
        raise InputError(
            Fault(
                f"{len(faces)} of {len(corners)} faces: a coordinate is no finite number",
                f"{where}, face {named}{more}",
                f"{first}",
                "finite numbers",
                "repair the part at these faces in the program that drew it and export again",
            )
        )
    scaled: Floats = np.multiply(corners, metres, dtype=np.float64)
    return scaled
