"""What an examination found: notes, warnings and faults, each with its place and advice."""

from __future__ import annotations

from dataclasses import dataclass
from enum import StrEnum

Point = tuple[float, float, float]


class Level(StrEnum):
    """How much a finding matters; a fault means that the answer is no."""

    NOTE = "note"
    WARNING = "warning"
    FAULT = "fault"


@dataclass(frozen=True)
class Finding:
    """One thing found in a mesh or in the bait.

    Attributes
    ----------
    code : str
        A short stable word pair for scripts, such as ``open-edges``.
    level : Level
        note, warning or fault.
    message : str
        What was found, with its numbers (mm, g) and place, as one sentence.
    piece : str or None
        The piece's name, None where the bait as a whole is meant.
    count : int or None
        How many (edges, faces, shells), where counting makes sense.
    where : tuple of Point
        Up to ten places, mesh coordinates in m.
    advice : str
        The next step.
    stops : bool
        True where a mass or a volume is left undefined, so that the run must stop.
    """

    code: str
    level: Level
    message: str
    piece: str | None = None
    count: int | None = None
    where: tuple[Point, ...] = ()
    advice: str = ""
    stops: bool = False
