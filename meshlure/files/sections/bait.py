"""[bait]: its name, the unit and the directions of its meshes."""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import Final

from meshlure.errors import InputError
from meshlure.files.keys import Keys
from meshlure.findings import Point
from meshlure.units import length_unit

SQUARE_WITHIN: Final = 0.1
"""degrees by which back may miss a right angle to nose: typed directions are rounded, swapped ones are far off."""


@dataclass(frozen=True)
class BaitSection:
    """The bait as a whole.

    Attributes
    ----------
    name : str
        The bait file's own name where none is stated.
    length_unit : str
        mm, cm, m or in: what one unit of the meshes' and the file's coordinates is.
    metres : float, m
        Length of that unit.
    nose, back : Point
        Unit vectors out of the nose and out of the back in mesh coordinates, at an exact right angle: back is turned in
        their plane by what it missed.
    suspends_within : float or None, kg
        Reserve up to which the bait counts as suspending.
    size_checked : bool
        The maker has seen that the bait is of unusual size.
    """

    name: str
    length_unit: str
    metres: float
    nose: Point
    back: Point
    suspends_within: float | None
    size_checked: bool


def read_bait(keys: Keys, default_name: str) -> BaitSection:
    """Read [bait]."""
    name = keys.text("name")
    unit = keys.asked_text("length_unit", "mm")
    metres = math.nan
    if unit:
        try:
            metres = length_unit(unit, keys.where("length_unit"))
        except InputError as error:
            keys.take(error)
    nose, back = keys.direction("nose"), keys.direction("back")
    section = BaitSection(
        default_name if name is None else name,
        unit,
        metres,
        nose,
        _squared(keys, nose, back),
        keys.quantity("suspends_within", "mass"),
        keys.flag("size_checked"),
    )
    keys.close()
    return section


def _squared(keys: Keys, nose: Point, back: Point) -> Point:
    """Return the unit vector at a right angle to the nose, in the plane of both and on back's side."""
    along = sum(n * b for n, b in zip(nose, back, strict=True))
    if math.isnan(along):
        return back
    off = 90.0 - math.degrees(math.acos(max(-1.0, min(1.0, along))))
    if abs(off) > SQUARE_WITHIN:
        keys.fault(
            "back",
            "back is not at a right angle to nose",
            f"{90.0 - off:.4g} degrees between them",
            f"{90.0 - SQUARE_WITHIN:g} to {90.0 + SQUARE_WITHIN:g} degrees",
            "nose points out of the bait's front, back straight up out of it as it swims",
        )
        return back
    rest = [b - along * n for n, b in zip(nose, back, strict=True)]
    length = math.hypot(*rest)
    x, y, z = (number / length for number in rest)
    return x, y, z
