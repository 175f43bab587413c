"""Strokes, fills and grounds for text: how a pen is put to the paper of a drawing."""

from __future__ import annotations

from collections.abc import Sequence
from typing import TYPE_CHECKING, Any

import numpy as np
from numpy.typing import NDArray

from meshlure.report.figures import INK, Picture, blank, picture

if TYPE_CHECKING:
    from matplotlib.axes import Axes

Floats = NDArray[np.float64]


def fills(role: str, density: float | None) -> dict[str, Any]:
    """Return how a piece is filled: heavy metal, lighter metal, near water, ball, hollow; told apart without colour."""
    if role == "void":
        return {"facecolor": "white", "edgecolor": INK, "linestyle": (0, (3, 1.5)), "linewidth": 0.6}
    if role == "ball":
        return {"facecolor": "#c7d0d3", "edgecolor": INK, "hatch": "xxxxxx", "linewidth": 0.6}
    if density is None or density < 2:
        return {"facecolor": "#f3efe4", "edgecolor": INK, "hatch": "---", "linewidth": 0.5}
    if density < 9:
        return {"facecolor": "#dfe5e6", "edgecolor": INK, "hatch": "\\\\\\\\\\", "linewidth": 0.5}
    return {"facecolor": "#b9c4c8", "edgecolor": INK, "hatch": "//////", "linewidth": 0.6}


def path(rings: Sequence[Floats]) -> Any:
    """Return rings as one shape, holes open, or None where no ring has an inside."""
    from matplotlib.path import Path

    shapes = [Path(np.vstack([ring, ring[:1]]), closed=True) for ring in rings if len(ring) > 2]
    return Path.make_compound_path(*shapes) if shapes else None


def fill(axes: Axes, shape: Any, zorder: float, **look: Any) -> None:
    """Put a shape on the paper."""
    from matplotlib.patches import PathPatch

    axes.add_artist(PathPatch(shape, zorder=zorder, **look))


def strokes(
    axes: Axes,
    segments: Sequence[Any],
    colour: str,
    weight: float,
    zorder: float,
    dash: str = "solid",
    name: str | None = None,
) -> None:
    """Draw many straight strokes as one path, which keeps the page small; it may have a name in the SVG."""
    from matplotlib.patches import PathPatch
    from matplotlib.path import Path

    points = np.asarray(segments, dtype=float).reshape(-1, 2)
    codes = np.tile([Path.MOVETO, Path.LINETO], len(points) // 2)
    axes.add_artist(
        PathPatch(
            Path(points, codes),
            facecolor="none",
            edgecolor=colour,
            linewidth=weight,
            linestyle=dash,
            capstyle="butt",
            zorder=zorder,
            gid=name,
        )
    )


def white_ground() -> dict[str, Any]:
    """Return the ground that keeps words legible over a grid."""
    return {"facecolor": (1, 1, 1, 0.8), "edgecolor": "none", "pad": 0.8}


def halo() -> list[Any]:
    """Return the white edge that keeps a letter legible over anything."""
    from matplotlib.patheffects import withStroke

    return [withStroke(linewidth=2.2, foreground="white")]


SWATCHES = (
    ("insert", 11.0, "heavy metal, 9 g/cm³ and up"),
    ("insert", 5.0, "lighter metal"),
    ("insert", 1.2, "plastic, wood, foam"),
    ("void", None, "hollow"),
    ("ball", 7.8, "ball; dotted: other end"),
)
"""The fills with what they stand for: role, a density of its kind in g/cm3, words."""
SWATCHES_WIDE, SWATCHES_TALL = 58.0, 28.0
"""mm that they take."""


def draw_swatches(axes: Axes, left: float = 0.0, foot: float = 0.0) -> None:
    """Draw the fills with what they stand for, from a lower left corner in mm on."""
    from matplotlib.patches import Rectangle

    for number, (role, density, words) in enumerate(SWATCHES):
        y = foot + 23.6 - 5.5 * number
        axes.add_artist(Rectangle((left + 1, y), 9, 3.6, **fills(role, density)))
        axes.text(left + 12, y + 1.8, words, va="center", fontsize=7.5)


def swatches() -> Picture:
    """Return the fills with what they stand for, for the key beside the drawings."""
    figure = blank(SWATCHES_WIDE, SWATCHES_TALL)
    axes = figure.add_axes((0, 0, 1, 1))
    axes.set(xlim=(0, SWATCHES_WIDE), ylim=(0, SWATCHES_TALL))
    axes.axis("off")
    draw_swatches(axes)
    return picture(figure, "Key to the fills: " + "; ".join(words for _, _, words in SWATCHES) + ".")
