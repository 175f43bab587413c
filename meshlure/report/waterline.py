"""The water's surface in a drawing, or the way up where the bait hangs under it."""

from __future__ import annotations

import textwrap
from typing import TYPE_CHECKING, Any

import numpy as np
from numpy.typing import NDArray

from meshlure.report.figures import SHALLOW, WATER
from meshlure.report.layout import NARROW, RIGHT, Layout
from meshlure.report.names import LINE, POINTS
from meshlure.report.outlines import below, within
from meshlure.report.pen import fill, path, strokes, white_ground
from meshlure.report.subject import water_in

if TYPE_CHECKING:
    from matplotlib.axes import Axes

Floats = NDArray[np.float64]

STEEP = 0.7
"""Cosine of the slope from which a level sign would no longer stand on the line."""


def draw_water(axes: Axes, paper: Layout) -> None:
    """Draw the surface through the bait as it rests, the water under it, and how the nose lies to it."""
    rest = paper.subject.rest
    if rest is None:
        return
    edge = water_in(paper.view, rest, paper.subject.gravity)
    if edge is None:
        if rest.waterline is None and paper.view.name == "side":
            _plumb(axes, paper, rest.up)
        return
    normal, offset = edge
    along = np.array([normal[1], -normal[0]])
    level = float(paper.scale * offset + paper.origin @ normal)
    low, high = paper.strip()
    ends = within(level * normal, along, ((1.0, paper.width - 1.0), (low + 0.3, high - 0.3)))
    if ends is None:
        return
    left, right = sorted(ends, key=lambda p: (p[0], p[1]))
    strip = np.array([[0, low], [paper.width, low], [paper.width, high], [0, high]])
    under = below(strip, normal, level)
    shape = path([under]) if len(under) > 2 else None
    if shape is not None:
        fill(axes, shape, 1.0, facecolor=SHALLOW, edgecolor="none", alpha=0.75)
    strokes(axes, [(tuple(left), tuple(right))], "white", 2.4, 4.55)
    strokes(axes, [(tuple(left), tuple(right))], WATER, 1.0, 4.6, dash="dashdot")
    foot = right - 5.0 * (right - left) / max(float(np.hypot(*(right - left))), 1e-9)
    steep = abs(float(normal[1])) < STEEP or foot[0] < paper.width - (NARROW if paper.view.name == "front" else RIGHT)
    if not steep:
        level_sign(axes, float(foot[0]), float(foot[1]) + 1.15)
    _words(axes, paper, None if steep else float(foot[1]), rest.words)


def level_sign(axes: Axes, x: float, y: float) -> None:
    """Draw the triangle that stands on a water level in engineering drawings."""
    look: dict[str, Any] = {"markerfacecolor": "white", "markeredgecolor": WATER, "markeredgewidth": 0.8}
    axes.plot([x], [y], marker="v", markersize=5.5, zorder=8, **look)


def _words(axes: Axes, paper: Layout, surface: float | None, words: str) -> None:
    """Write in the margin at the right, under the surface where it comes out there, else half way up."""
    lines = ("water", *(textwrap.wrap(words, 14) if paper.view.name == "side" else ()))
    depth = LINE * len(lines)
    if surface is None:
        top = (paper.floor + paper.roof + depth) / 2
    elif surface - paper.floor > depth:
        top = surface - 1.6
    else:
        top = surface + 3.4 + depth
    for row, line in enumerate(lines):
        look: dict[str, Any] = {"fontsize": POINTS - 0.3, "color": WATER, "ha": "right", "va": "center_baseline"}
        axes.text(paper.width - 1.0, top - LINE * (row + 0.5), line, zorder=8, bbox=white_ground(), **look)


def _plumb(axes: Axes, paper: Layout, up: Floats) -> None:
    """Draw an arrow for the way up: under water there is no edge."""
    way = np.array([up @ paper.view.right, up @ paper.view.up])
    foot = np.array([paper.width - 10.0, (paper.floor + paper.roof) / 2]) - 4.5 * way
    tip = foot + 9.0 * way
    arrow: dict[str, Any] = {"arrowstyle": "-|>", "color": WATER, "linewidth": 1.0, "shrinkA": 0, "shrinkB": 0}
    axes.annotate("", xy=tuple(tip), xytext=tuple(foot), arrowprops=arrow, zorder=8)
    y = min(foot[1], tip[1]) - 2.4
    look: dict[str, Any] = {"fontsize": POINTS - 0.3, "color": WATER, "ha": "center", "va": "center"}
    axes.text(paper.width - 10.0, y, "up, as it hangs", zorder=8, bbox=white_ground(), **look)
