"""[line]: where the line is tied."""

from __future__ import annotations

from dataclasses import dataclass

from meshlure.files.keys import Keys
from meshlure.findings import Point


@dataclass(frozen=True)
class LineSection:
    """The line's end on the bait.

    Attributes
    ----------
    tie : Point, m
        Mesh coordinates.
    """

    tie: Point


def read_line(keys: Keys, metres: float) -> LineSection:
    """Read [line], its place in units of ``metres``."""
    section = LineSection(keys.point("tie", metres))
    keys.close()
    return section
