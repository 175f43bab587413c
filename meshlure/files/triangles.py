"""Loose triangles as a mesh file lists them, before equal corners are welded."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Final

import numpy as np
from numpy.typing import NDArray

from meshlure.errors import Fault, InputError
from meshlure.findings import Finding
from meshlure.geometry.surface import Floats

FARTHEST: Final = 1e5
"""m. Coordinates beyond it are slips: there the millimetre has lost its digits to four-byte numbers long since."""

_NAMED = 5


@dataclass(frozen=True)
class Part:
    """A run of triangles that the file keeps together: a solid, an object, a group.

    Attributes
    ----------
    name : str
        As the file says it; empty where it has none.
    triangles : int
    """

    name: str
    triangles: int


@dataclass(frozen=True, eq=False)
class Triangles:
    """What a mesh file holds.

    Attributes
    ----------
    corners : (n, 3, 3) array, m
        Face, corner, coordinate; finite; the faces in the file's order.
    findings : tuple of Finding
        What was odd in the file and yet readable.
    parts : tuple of Part
        In the file's order, together all triangles; empty where the file does not part them.
    unit : str
        mm, cm, m, in, ft or um where the file itself says so, else empty.
    exact_volume : float or None
        m3. Of the solid that the triangles were made from, where the file holds one.
    """

    corners: Floats
    findings: tuple[Finding, ...] = ()
    parts: tuple[Part, ...] = ()
    unit: str = ""
    exact_volume: float | None = None


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
        A coordinate is not a number, infinite, or beyond what lengths are computed with; the first faces that have one
        are named, counted from 1.
    """
    with np.errstate(invalid="ignore"):  # a signalling "not a number", which is refused below
        scaled: Floats = np.multiply(corners, metres, dtype=np.float64)
    check_within(scaled.reshape(-1, 3), corners.reshape(-1, 3), len(corners), where)
    return scaled


def check_within(
    scaled: Floats, points: NDArray[np.floating], count: int, where: str, owners: NDArray[np.intp] | None = None
) -> None:
    """Refuse corners of faces that are no places a bait can have.

    Parameters
    ----------
    scaled : (k, 3) array, m
    points : (k, 3) array
        The same in the file's unit, for the message.
    count : int
        Of faces.
    where : str
        The file, for the message.
    owners : (k,) array, optional
        Face of each corner, counted from 0; three corners each where it is left out.

    Raises
    ------
    InputError
        As `in_metres`.
    """
    # Not a number compares as false, too.
    within = np.abs(scaled) <= FARTHEST
    if within.all():
        return
    lost = np.flatnonzero(~within.all(axis=1))
    faces = np.unique(lost // 3 if owners is None else owners[lost])
    named = ", ".join(str(face + 1) for face in faces[:_NAMED])
    more = f" and {len(faces) - _NAMED} more" if len(faces) > _NAMED else ""
    first = points[lost[0]][~within[lost[0]]][0]
    place, these = f"{where}, face {named}{more}", f"{len(faces)} of {count} faces"
    if np.isfinite(first):
        raise InputError(
            Fault(
                f"{these}: a coordinate is farther out than any bait",
                place,
                f"{first:.6g} in the file's unit",
                f"within {FARTHEST / 1e3:g} km of the origin",
                "repair the part at these faces and export it again; if all are so far out, check the unit",
            )
        )
    raise InputError(
        Fault(
            f"{these}: a coordinate is no finite number",
            place,
            f"{first}",
            "finite numbers",
            "repair the part at these faces in the program that drew it and export again",
        )
    )
