"""Where everything of one drawing lies on its paper: scale, margins, names; all in mm of paper."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from meshlure.report.leaders import Placed
from meshlure.report.names import LINE, placed_names
from meshlure.report.subject import Subject
from meshlure.results import View

Floats = NDArray[np.float64]

SCALES = (10.0, 5.0, 2.0, 1.0, 0.5, 0.2, 0.1, 0.05)
"""Paper mm per mm of the bait: the preferred scales of ISO 5455."""
PAPER, TALL = 180.0, 90.0
"""mm between the margins of an A4 page, and what of its height a side view may take."""
LEFT, RIGHT = 11.0, 18.0
"""mm beside the outline: for its depth, and for the water's name and how the nose lies to it."""
NARROW = 11.0
"""mm at the right of the view from the front, which has the water's name alone."""
RAIL, SLANT = 2.5, 4.5
"""mm from the outline to the inner rail of the leaders, and on to the outer one."""
FOOT = {"top": 3.0}
"""mm under the lower names, where the length and the scale stand; the view from above shares those of the side."""
LEAST = {"front": 40.0}
"""mm that a drawing is wide at least."""


@dataclass(frozen=True, eq=False)
class Layout:
    """One drawing's paper.

    Attributes
    ----------
    origin : (2,) array
        Where the drawing's zero lies.
    floor, roof : float
        Lowest and highest of what is drawn.
    placed : tuple of Placed
        The names with their places.
    """

    view: View
    subject: Subject
    scale: float
    width: float
    height: float
    origin: Floats
    floor: float
    roof: float
    placed: tuple[Placed, ...]

    def at(self, x: float, y: float) -> tuple[float, float]:
        """Return where a point of the drawing, mm of the bait, lies on the paper."""
        return float(self.origin[0] + self.scale * x), float(self.origin[1] + self.scale * y)

    def spot(self, place: Floats) -> tuple[float, float]:
        """Return where a point in mesh coordinates, mm, lies on the paper."""
        return self.at(*self.view.place(place))

    def strip(self) -> tuple[float, float]:
        """Return the lower and the upper inner rail."""
        return self.floor - RAIL, self.roof + RAIL


def scale_for(length: float, depth: float) -> float:
    """Return the greatest preferred scale, paper mm per mm, at which a bait's side fits across a page."""
    for scale in SCALES:
        if scale * length <= PAPER - LEFT - RIGHT and scale * depth <= TALL:
            return scale
    return SCALES[-1]


def scale_words(scale: float) -> str:
    """Return a scale as drawings write it, 2:1 or 1:2."""
    return f"{scale:g}:1" if scale >= 1 else f"1:{1 / scale:g}"


def layout(view: View, subject: Subject, scale: float) -> Layout:
    """Return the paper of one view, as large as the outline, what stands beside it, and its names need."""
    spots = [np.array([view.place(place)]) for place in subject.spots()]
    corners = np.concatenate([*(ring for piece in view.pieces for ring in piece.rings), *spots])
    low, high = corners.min(axis=0), corners.max(axis=0)
    wide = scale * float(high[0] - low[0])
    right = NARROW if view.name == "front" else RIGHT
    width = max(wide + LEFT + right, LEAST.get(view.name, 118.0))
    across = LEFT + (width - LEFT - right - wide) / 2 - scale * float(low[0])
    placed = placed_names(view, subject, scale, across, scale * float(low[1] + high[1]) / 2, (2.0, width - 2.0))
    rows = {above: max((len(p.named.lines) for p in placed if p.above == above), default=0) for above in (True, False)}
    foot = FOOT.get(view.name, 12.5)
    floor = foot + RAIL + (SLANT + LINE * rows[False] + 1.0 if rows[False] else 1.5)
    roof = floor + scale * float(high[1] - low[1])
    height = roof + RAIL + (SLANT + LINE * rows[True] + 1.5 if rows[True] else 3.0)
    origin = np.array([across, floor - scale * float(low[1])])
    return Layout(view, subject, scale, width, height, origin, floor, roof, tuple(placed))
