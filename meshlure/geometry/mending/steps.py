"""What a mending step did, and what was asked of a mending."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Final

from meshlure.findings import Point
from meshlure.geometry.surface import Surface

WELD: Final = 10e-6
"""m. Corners on open edges closer than this are taken for one unless told otherwise: a tenth of a printer's layer, and
well above the cracks that exports leave."""

CAP: Final = 0.01
"""Share of the whole area up to which a flat hole is closed without being asked for by itself."""


@dataclass(frozen=True)
class Wishes:
    """What a mending may do.

    Attributes
    ----------
    weld : float, m
        How far apart corners on open edges may be to become one.
    cap : float
        Greatest share of the surface's area that a flat hole may have to be closed.
    mirror : bool
        Whether a flat opening at the body's end makes it half a body, to be completed by its mirror image.
    smallest : float, m
        Shells that are nowhere longer than this are decoration, and go.
    remake : float or None, m
        Step of a lattice on which a new closed skin is drawn where all else leaves the surface open; None for never.
    """

    weld: float = WELD
    cap: float = CAP
    mirror: bool = False
    smallest: float = 0.0
    remake: float | None = None


@dataclass(frozen=True, eq=False)
class Step:
    """One thing that was done.

    Attributes
    ----------
    code : str
        Stable name, for scripts.
    did : str
        What was done, as one sentence with its numbers.
    surface : Surface
        As it is after it.
    count : int
        How many corners, faces, holes or shells.
    moved : float, m
        The farthest that any place of the skin moved.
    where : tuple of Point
        Up to ten places, m.
    """

    code: str
    did: str
    surface: Surface
    count: int
    moved: float = 0.0
    where: tuple[Point, ...] = ()


@dataclass(frozen=True)
class Left:
    """One thing that could not be put right.

    Attributes
    ----------
    what : str
        What it is and why it stays, as one sentence with its numbers and place.
    where : tuple of Point
        m.
    advice : str
        The next step.
    """

    what: str
    where: tuple[Point, ...] = ()
    advice: str = ""
