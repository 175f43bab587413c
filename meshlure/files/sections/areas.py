"""[areas]: directions to see the bait from, beside side, top and front."""

from __future__ import annotations

from dataclasses import dataclass

from meshlure.files.keys import Keys
from meshlure.findings import Point


@dataclass(frozen=True)
class AreasSection:
    """Extra viewing directions.

    Attributes
    ----------
    axes : tuple of Point
        Unit vectors in mesh coordinates, in the order asked.
    """

    axes: tuple[Point, ...] = ()


def read_areas(keys: Keys) -> AreasSection:
    """Read [areas]."""
    section = AreasSection(keys.directions("axes"))
    keys.close()
    return section
