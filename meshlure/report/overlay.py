"""Outlines of several baits laid over each other at the nose, to one scale on a millimetre grid."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from meshlure.report import figures as ink
from meshlure.report.drawings import TITLES, grid_step
from meshlure.report.figures import Picture, blank, picture
from meshlure.report.layout import scale_for, scale_words
from meshlure.report.lines import WORDS, look, sample
from meshlure.report.outlines import thinned
from meshlure.report.pen import strokes, white_ground
from meshlure.results import View

Floats = NDArray[np.float64]

EDGE = 6.0
FOOT = 9.0
"""mm of paper round the outlines, and below them for the scale."""
KEY = 5.0
"""mm of a line of the key."""


@dataclass(frozen=True, eq=False)
class Laid:
    """One bait's outline in one view, its nose tip at the origin.

    Attributes
    ----------
    number : int
        Of the bait, from 0.
    letter, name : str
    rings : tuple of (n, 2) arrays, mm
    """

    number: int
    letter: str
    name: str
    rings: tuple[Floats, ...]


def laid(views: Sequence[View], tip: Floats, name: str, number: int, letter: str, bait: str) -> Laid | None:
    """Return a bait's skin in a view with its nose tip at the origin, or None where the view holds none."""
    view = next((view for view in views if view.name == name), None)
    if view is None or not view.pieces or not view.pieces[0].rings:
        return None
    origin = np.array(view.place(tip))
    return Laid(number, letter, bait, tuple(ring - origin for ring in view.pieces[0].rings))


def common_scale(outlines: Sequence[Laid]) -> float:
    """Return the scale at which the longest and the deepest of side outlines fit across a page."""
    low, high = _bounds(outlines)
    return scale_for(float(high[0] - low[0]), float(high[1] - low[1]))


def overlay(name: str, outlines: Sequence[Laid], scale: float) -> Picture:
    """Return outlines in one view over each other.

    Parameters
    ----------
    name : str
        Of the view: side, top or front.
    outlines : sequence of Laid
    scale : float
        Paper mm per mm.
    """
    from matplotlib.patches import Rectangle

    low, high = _bounds(outlines)
    width = float(scale * (high[0] - low[0])) + 2 * EDGE
    height = float(scale * (high[1] - low[1])) + EDGE + FOOT
    origin = np.array([EDGE - scale * low[0], FOOT - scale * low[1]])
    width = max(width, 40.0)
    figure = blank(width, height)
    axes = figure.add_axes((0, 0, 1, 1))
    axes.set(xlim=(0, width), ylim=(0, height))
    axes.axis("off")
    axes.add_artist(Rectangle((0, 0), width, height, facecolor="white", linewidth=0, zorder=0))
    for multiple, colour in ((1, ink.GRID_FINE), (5, ink.GRID_FIVE), (10, ink.GRID_TEN)):
        step = grid_step(scale) * multiple * scale
        upright = [((x, 0.0), (x, height)) for x in np.arange(origin[0] % step, width, step)]
        level = [((0.0, y), (width, y)) for y in np.arange(origin[1] % step, height, step)]
        strokes(axes, upright + level, colour, 0.4, 0.5 + multiple / 100)
    for one in outlines:
        for ring in one.rings:
            closed = np.vstack([ring, ring[:1]])
            points = thinned(origin + scale * closed, 0.05)
            axes.plot(*np.vstack([points, points[:1]]).T, zorder=3 - one.number / 10, **look(one.number))
    axes.plot(*origin, marker="+", markersize=7, color=ink.INK, markeredgewidth=0.8, zorder=5)
    words = f"scale {scale_words(scale)} on A4   grid {grid_step(scale)} mm" if name != "front" else scale_words(scale)
    axes.text(width - 2, 2.8, words, fontsize=6.5, ha="right", va="center", zorder=6, bbox=white_ground())
    if name == "side":
        axes.text(2, 2.8, "laid together at the nose tip, +", fontsize=6.5, va="center", zorder=6, bbox=white_ground())
    each = "; ".join(f"{one.letter}, {one.name}, {WORDS[one.number]}" for one in outlines)
    return picture(figure, f"Outlines {TITLES[name].lower()} laid over each other at the nose tip: {each}.")


def key(names: Sequence[tuple[str, str]]) -> Picture:
    """Return the key to the lines: a letter and a name for each bait."""
    wide, tall = 100.0, KEY * len(names) + 2
    figure = blank(wide, tall)
    axes = figure.add_axes((0, 0, 1, 1))
    axes.set(xlim=(0, wide), ylim=(0, tall))
    axes.axis("off")
    for number, (letter, name) in enumerate(names):
        y = tall - 1 - KEY * (number + 0.5)
        sample(axes, 1, y, 14, number)
        axes.text(18, y, letter, fontsize=8, fontweight="bold", va="center")
        axes.text(23, y, name if len(name) <= 48 else f"{name[:47]}…", fontsize=7.5, va="center")
    each = "; ".join(f"{letter} {WORDS[number]}: {name}" for number, (letter, name) in enumerate(names))
    return picture(figure, f"Key to the lines: {each}.")


def _bounds(outlines: Sequence[Laid]) -> tuple[Floats, Floats]:
    corners = np.concatenate([ring for one in outlines for ring in one.rings])
    return corners.min(axis=0), corners.max(axis=0)
