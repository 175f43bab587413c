"""The rulings of a chart: ticks, their numbers, the grid and what is measured along both ways, as strokes and words.

A chart has a few dozen ticks. As objects of the drawing library each of them costs as much as a curve; as strokes of
one path they cost next to nothing, and most of a page's pictures are charts.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import TYPE_CHECKING, Any

import numpy as np
from numpy.typing import NDArray

from meshlure.report.figures import GRID_FIVE, INK, MM_PER_INCH, PENCIL, POINTS_PER_MM, TYPE, blank_axes, text_width

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from matplotlib.figure import Figure

Floats = NDArray[np.float64]

MARK = 1.2
"""mm that a tick is long."""
GAP = 1.2
"""mm from a tick to its number."""
LINE = 1.15
"""Height of a line of type over its size."""


@dataclass(frozen=True)
class Ticks:
    """Where one way of a chart is ruled.

    Attributes
    ----------
    at : sequence of float or None
        The places; None where they are round numbers of the drawing library's choice.
    words : sequence of str or None
        What stands at each; None for the numbers themselves.
    marked, written, gridded : bool
        Whether there are ticks, words and grid lines.
    """

    at: Sequence[float] | None = None
    words: Sequence[str] | None = None
    marked: bool = True
    written: bool = True
    gridded: bool = True


ROUND = Ticks()


def margins(figure: Figure, left: float, bottom: float, right: float, top: float) -> Axes:
    """Return the room for curves on a sheet, with margins in mm."""
    width, height = figure.get_size_inches() * MM_PER_INCH
    box = (left / width, bottom / height, 1 - (left + right) / width, 1 - (bottom + top) / height)
    return blank_axes(figure, box)


def ruled(axes: Axes, x: Ticks = ROUND, y: Ticks = ROUND) -> None:
    """Draw the rulings of a chart in place of the library's own; call once its curves and limits stand."""
    for name, ticks in (("x", x), ("y", y)):
        axis: Any = axes.xaxis if name == "x" else axes.yaxis
        _rule(axes, axis, ticks, upright=name == "x")
        axis.set_visible(False)


def _rule(axes: Axes, axis: Any, ticks: Ticks, *, upright: bool) -> None:
    """Rule one way; ``upright`` lines for x."""
    figure: Any = axes.figure
    paper = figure.get_size_inches() * MM_PER_INCH
    low, high = axes.get_position().min * paper, axes.get_position().max * paper
    places, words = _places(axis, ticks)
    along = _on_paper(axes, places, paper, upright=upright)
    base = low[1] if upright else low[0]
    far = high[1] if upright else high[0]
    if ticks.gridded:
        _strokes(figure, paper, along, (base, far), GRID_FIVE, 0.5, -1, upright=upright)
    if ticks.marked:
        _strokes(figure, paper, along, (base - MARK, base), PENCIL, 0.6, 1, upright=upright)
    size = TYPE
    foot = base - (MARK + GAP if ticks.marked else GAP)
    if ticks.written:
        for place, word in zip(along, words, strict=True):
            at = (place, foot) if upright else (foot, place)
            how = {"ha": "center", "va": "top"} if upright else {"ha": "right", "va": "center_baseline"}
            figure.text(*(at / paper), word, fontsize=size, color=INK, **how)
        lines = [line for word in words for line in word.split("\n")]
        deep = size / POINTS_PER_MM * LINE
        foot -= deep if upright else max((text_width(line, size) for line in lines), default=0.0)
    title = axis.label.get_text()
    if title:
        middle = (low[0] + high[0]) / 2 if upright else (low[1] + high[1]) / 2
        foot -= axis.labelpad / POINTS_PER_MM
        at = (middle, foot) if upright else (foot, middle)
        figure.text(
            *(at / paper),
            title,
            color=INK,
            fontsize=axis.label.get_fontsize(),
            ha="center",
            va="top" if upright else "bottom",
            rotation=0 if upright else 90,
            rotation_mode="anchor",
        )


def _places(axis: Any, ticks: Ticks) -> tuple[Floats, list[str]]:
    """Return where an axis is ruled within its limits, and what is written there."""
    low, high = sorted(axis.get_view_interval())
    at = np.asarray(axis.get_majorticklocs() if ticks.at is None else ticks.at, dtype=float)
    words = axis.get_major_formatter().format_ticks(at) if ticks.words is None else list(ticks.words)
    slack = 1e-6 * (high - low)
    kept = [(place, word) for place, word in zip(at, words, strict=True) if low - slack <= place <= high + slack]
    return np.array([place for place, _ in kept]), [word for _, word in kept]


def _on_paper(axes: Axes, places: Floats, paper: Floats, *, upright: bool) -> Floats:
    """Return where places along one way lie on the paper, mm; the other way is the middle of the limits."""
    other = np.mean(axes.get_ylim() if upright else axes.get_xlim())
    points = np.column_stack([places, np.full(len(places), other)][:: 1 if upright else -1])
    turned = axes.transData + axes.figure.transFigure.inverted()
    return np.asarray(turned.transform(points)[:, 0 if upright else 1] * paper[0 if upright else 1])


def _strokes(
    figure: Any, paper: Floats, along: Floats, ends: Sequence[float], colour: str, weight: float, zorder: float, *,
    upright: bool,
) -> None:  # fmt: skip
    from matplotlib.patches import PathPatch
    from matplotlib.path import Path

    if not len(along):
        return
    points = np.column_stack([np.repeat(along, 2), np.tile(ends, len(along))][:: 1 if upright else -1]) / paper
    codes = np.tile([Path.MOVETO, Path.LINETO], len(along))
    shape = Path(points, codes)
    look: dict[str, Any] = {"facecolor": "none", "edgecolor": colour, "linewidth": weight, "capstyle": "butt"}
    figure.add_artist(PathPatch(shape, transform=figure.transFigure, zorder=zorder, **look))
