"""The annotated drawings: the bait from the side, from above and from the front, to one scale on a millimetre grid."""

from __future__ import annotations

import textwrap
from dataclasses import dataclass
from itertools import pairwise
from typing import TYPE_CHECKING, Any

import numpy as np
from numpy.typing import NDArray

from meshlure.report import figures as ink
from meshlure.report.centres import draw_centres
from meshlure.report.figures import Picture, blank, picture
from meshlure.report.layout import SLANT, Layout, layout, scale_words
from meshlure.report.names import LINE, POINTS, UNNAMED
from meshlure.report.outlines import thinned
from meshlure.report.pen import fill, fills, path, strokes, white_ground
from meshlure.report.subject import Subject
from meshlure.report.waterline import draw_water
from meshlure.report.wording import fixed, millimetres
from meshlure.results import View

if TYPE_CHECKING:
    from matplotlib.axes import Axes

Floats = NDArray[np.float64]
Place = tuple[float, float]

TITLES = {"side": "From the side", "top": "From above", "front": "From the front"}
PEN = 0.05
"""mm of paper that a pen can set apart."""


DOTTED = (0, (1, 1))
BALL: dict[str, Any] = {
    "marker": "h",
    "markersize": 5.5,
    "markerfacecolor": ink.PENCIL,
    "markeredgecolor": ink.INK,
    "markeredgewidth": 0.7,
}
"""The sign for balls whose outline was not handed on; hollow at the other end of their run."""


@dataclass(frozen=True)
class Drawing:
    """One annotated view."""

    name: str
    title: str
    picture: Picture


def drawing(view: View, subject: Subject, scale: float) -> Drawing | None:
    """Return one view with its names, centres, water and measures, or None where it holds no outline."""
    if not view.pieces or not view.pieces[0].rings:
        return None
    paper = layout(view, subject, scale)
    figure = blank(paper.width, paper.height)
    axes = figure.add_axes((0, 0, 1, 1))
    axes.set(xlim=(0, paper.width), ylim=(0, paper.height))
    axes.axis("off")
    draw_grid(axes, paper)
    draw_outlines(axes, paper)
    draw_leaders(axes, paper)
    draw_water(axes, paper)
    draw_marks(axes, paper)
    draw_centres(axes, paper)
    draw_measures(axes, paper)
    return Drawing(view.name, title(paper), picture(figure, alt(paper)))


def title(paper: Layout) -> str:
    """Return what is seen, and in the views that show both of the bait's sides, which is which."""
    words = TITLES.get(paper.view.name, paper.view.name)
    if paper.view.name == "side":
        return words
    front = paper.view.name == "front"
    ahead = float(paper.subject.left @ (paper.view.right if front else paper.view.up))
    return f"{words} (its {'left' if ahead > 0 else 'right'} is {'on the right' if front else 'uppermost'})"


def alt(paper: Layout) -> str:
    """Return what the drawing shows, in words."""
    skin = np.concatenate(paper.view.pieces[0].rings)
    wide, high = skin.max(axis=0) - skin.min(axis=0)
    words = TITLES.get(paper.view.name, paper.view.name).lower()
    size = f"{millimetres(float(wide))} by {millimetres(float(high))}"
    parts = [f"Drawing {words} at {scale_words(paper.scale)}: outline {size}"]
    inside = [piece.name for piece in paper.view.pieces if piece.role not in UNNAMED]
    inside += [spot.name for spot in paper.subject.hardware]
    if inside:
        names = ", ".join(textwrap.shorten(name, 40, placeholder="…") for name in inside[:12])
        parts.append(f"shows {names}" + (f" and {len(inside) - 12} more" if len(inside) > 12 else ""))
    rest = paper.subject.rest
    if rest is not None and rest.waterline is not None and paper.view.name == "side":
        parts.append(f"water level drawn as it rests, {rest.words}")
    return "; ".join(parts) + "."


def grid_step(scale: float) -> int:
    """Return the mm of the bait from one fine line of the grid to the next."""
    return next((step for step in (1, 2, 5, 10, 20) if step * scale >= 0.9), 50)


def draw_grid(axes: Axes, paper: Layout) -> None:
    """Draw the millimetre grid, a line of the ten through the nose tip."""
    from matplotlib.patches import Rectangle

    axes.add_artist(Rectangle((0, 0), paper.width, paper.height, facecolor="white", linewidth=0, zorder=0))
    for multiple, colour, weight in ((1, ink.GRID_FINE, 0.35), (5, ink.GRID_FIVE, 0.45), (10, ink.GRID_TEN, 0.5)):
        step = grid_step(paper.scale) * multiple * paper.scale
        xs = np.arange(paper.origin[0] % step, paper.width, step)
        ys = np.arange(paper.origin[1] % step, paper.height, step)
        upright = [((x, 0.0), (x, paper.height)) for x in xs]
        level = [((0.0, y), (paper.width, y)) for y in ys]
        strokes(axes, upright + level, colour, weight, 0.5 + multiple / 100)


def draw_outlines(axes: Axes, paper: Layout) -> None:
    """Draw the skin and what is inside, and dotted the balls at the other end of their run."""
    for number, piece in enumerate(paper.view.pieces):
        shape = path([_on_paper(paper, ring) for ring in piece.rings])
        if shape is None or piece.role == "coat":
            continue
        if piece.role in ("skin", "body"):
            fill(axes, shape, 2.0, facecolor=(1, 1, 1, 0.62), edgecolor="none")
            fill(axes, shape, 4.5, facecolor="none", edgecolor=ink.INK, linewidth=1.1)
            continue
        fill(axes, shape, 3.0 + number / 1000, **fills(piece.role, paper.subject.densities.get(piece.name)))
    for row in paper.subject.balls:
        for piece in paper.view.pieces:
            if piece.name != row.name or piece.role != "ball":
                continue
            for place in row.elsewhere:
                shift = np.subtract(paper.spot(place), paper.spot(row.at))
                shape = path([_on_paper(paper, ring) + shift for ring in piece.rings])
                if shape is not None:
                    fill(axes, shape, 3.9, facecolor="none", edgecolor=ink.INK, linewidth=0.6, linestyle=DOTTED)


def _on_paper(paper: Layout, ring: Floats) -> Floats:
    return thinned(paper.origin + paper.scale * np.asarray(ring), PEN)


def draw_leaders(axes: Axes, paper: Layout) -> None:
    """Draw the names and the leaders from them to what they name."""
    from matplotlib.patches import Rectangle

    low, high = paper.strip()
    for number, mark in enumerate(paper.placed):
        rail = high if mark.above else low
        turn = rail + SLANT if mark.above else rail - SLANT
        end = (mark.drop_x, float(paper.origin[1] + mark.named.y))
        segments = list(pairwise([(mark.text_x, turn), (mark.drop_x, rail), end]))
        strokes(axes, segments, "white", 1.6, 5.0)
        strokes(axes, segments, ink.INK, 0.5, 5.1, name=f"leader-{number}")
        dot: dict[str, Any] = {"color": ink.INK, "markeredgecolor": "white", "markeredgewidth": 0.3}
        axes.plot(*end, marker="o", markersize=2.0, zorder=5.2, **dot)
        depth, wide = LINE * len(mark.named.lines), mark.named.width + 1
        top = turn + depth if mark.above else turn
        corner = (mark.text_x - wide / 2, top - depth)
        axes.add_artist(Rectangle(corner, wide, depth, facecolor="white", linewidth=0, zorder=6))
        for row, line in enumerate(mark.named.lines):
            y = top - LINE * (row + 0.5)
            look: dict[str, Any] = {"fontsize": POINTS, "ha": "center", "va": "center_baseline"}
            axes.text(mark.text_x, y, line, zorder=7, gid=f"name-{number}-{row}", **look)


def draw_marks(axes: Axes, paper: Layout) -> None:
    """Draw a cross where hardware acts, a lozenge for the line tie, and a sign for balls without an outline."""
    drawn = {piece.name for piece in paper.view.pieces}
    for row in paper.subject.balls:
        if row.name in drawn:
            continue
        axes.plot(*paper.spot(row.at), zorder=4.8, **BALL)
        for place in row.elsewhere:
            axes.plot(*paper.spot(place), zorder=4.8, **(BALL | {"markerfacecolor": "none"}))
    for spot in paper.subject.hardware:
        axes.plot(*paper.spot(spot.at), marker="+", markersize=6, color=ink.INK, markeredgewidth=1.0, zorder=8)
    if paper.subject.tie is not None:
        look: dict[str, Any] = {"markerfacecolor": "white", "markeredgecolor": ink.INK, "markeredgewidth": 0.9}
        axes.plot(*paper.spot(paper.subject.tie), marker="D", markersize=3.6, zorder=8, **look)


def draw_measures(axes: Axes, paper: Layout) -> None:
    """Draw depth, length from the nose, scale and scale bar."""
    skin = np.concatenate(paper.view.pieces[0].rings)
    low, high = skin.min(axis=0), skin.max(axis=0)
    x = paper.at(low[0], 0)[0] - 6.0
    _dimension(axes, (x, paper.at(0, low[1])[1]), (x, paper.at(0, high[1])[1]), fixed(float(high[1] - low[1]), 1))
    if paper.view.name == "top":
        return
    start = 0.0 if paper.view.name == "side" else float(low[0])
    y = 9.6
    _dimension(axes, (paper.at(start, 0)[0], y), (paper.at(high[0], 0)[0], y), fixed(float(high[0]) - start, 1))
    step = next((s for s in (1, 2, 5, 10, 20, 50) if s * paper.scale >= 10), 100)
    bar = (paper.width - 3.0 - step * paper.scale, 2.6)
    strokes(axes, [(bar, (bar[0] + step * paper.scale, bar[1]))], ink.INK, 2.0, 8)
    words = f"{step} mm"
    if paper.view.name == "side":
        words = f"scale {scale_words(paper.scale)} on A4   grid {grid_step(paper.scale)} mm   bar {step} mm"
        _small(axes, (2.0, bar[1]), "numbers under names: mm from the nose", "left")
    _small(axes, (bar[0] - 1.5, bar[1]), words, "right")


def _small(axes: Axes, place: Place, words: str, align: str) -> None:
    axes.text(*place, words, fontsize=POINTS - 0.3, ha=align, va="center", zorder=8, bbox=white_ground())


def _dimension(axes: Axes, start: Place, end: Place, words: str) -> None:
    upright = start[0] == end[0]
    cross = np.array((0.9, 0.0) if upright else (0.0, 0.9))
    ticks = [(tuple(p - cross), tuple(p + cross)) for p in (np.array(start), np.array(end))]
    strokes(axes, [(start, end), *ticks], ink.PENCIL, 0.6, 7)
    middle = ((start[0] + end[0]) / 2, (start[1] + end[1]) / 2)
    ground: dict[str, Any] = {"facecolor": "white", "edgecolor": "none", "pad": 1.0}
    look: dict[str, Any] = {"fontsize": POINTS, "ha": "center", "va": "center", "rotation": 90 if upright else 0}
    axes.text(*middle, words, zorder=8, bbox=ground, **look)
