"""A mesh drawn from three sides, with what was found about it marked: for whoever has to find the place in CAD."""

from __future__ import annotations

import io
from collections.abc import Sequence
from dataclasses import dataclass
from pathlib import Path
from typing import TYPE_CHECKING, Any, Final

import numpy as np
from numpy.typing import NDArray

from meshlure.findings import Finding, Level
from meshlure.geometry.columns import crossings
from meshlure.geometry.surface import Surface
from meshlure.report.figures import PENCIL, blank, drawing_style

if TYPE_CHECKING:
    from matplotlib.axes import Axes

Floats = NDArray[np.float64]

SUFFIXES: Final = (".png", ".svg")

_WIDTH: Final = 210.0
"""mm. Of the sheet."""
_PIXELS: Final = 700
"""Across the longest side of the mesh."""
_EDGES: Final = 20_000
"""Open edges drawn, at most: more would make one blot."""
_MARKED: Final = 12
"""Findings with numbers of their own."""

_RED: Final = "#b3261e"
_OUTSIDE: Final = np.array([0.86, 0.88, 0.87])
_INSIDE: Final = np.array([0.93, 0.66, 0.55])
"""Faces seen from their back: through an opening, or because they look inwards."""

_SIGNS: Final = {Level.FAULT: ("o", _RED), Level.WARNING: ("s", "#9a6a00"), Level.NOTE: ("D", PENCIL)}


@dataclass(frozen=True)
class _Side:
    """A way to look at the mesh: axes to the right and up, the axis along the look, and the side that the eye is on."""

    words: str
    right: int
    up: int
    along: int
    eye: int


_SIDES: Final = (
    _Side("from -y", 0, 2, 1, -1),
    _Side("from +z", 0, 1, 2, 1),
    _Side("from +x", 1, 2, 0, 1),
)


def three_sides(path: Path, surface: Surface, open_edges: Floats, findings: Sequence[Finding], title: str) -> bytes:
    """Return a picture of a mesh as the bytes of a file.

    Parameters
    ----------
    path : Path
        Its suffix says the format: .png or .svg.
    surface : Surface
        Closed or not, m.
    open_edges : (k, 2, 3) array, m
        Drawn in red.
    findings : sequence of Finding
        Marked at their places with the number under which they are told below.
    title : str

    Notes
    -----
    What is nearest the eye is found along a grid of lines through the faces, so that a mesh of a million faces takes
    as long as one of a thousand. Faces seen from their back are in another tone.
    """
    marked = [finding for finding in findings if finding.where][:_MARKED]
    others = [finding for finding in findings if not finding.where and finding.level is not Level.NOTE][:_MARKED]
    low, high = surface.bounds * 1e3
    size = np.maximum(high - low, 1e-6 * float((high - low).max()))
    scale = (_WIDTH - 34.0) / float(size[0] + size[1])
    scale = min(scale, 110.0 / float(size[2] + size[1]))
    lines = [line for number, finding in enumerate(marked, 1) for line in _words(finding, str(number))]
    lines += [line for finding in others for line in _words(finding, "-")]
    height = float(size[2] + size[1]) * scale + 40.0 + 4.2 * len(lines)
    with drawing_style():
        figure = blank(_WIDTH, height)
        top = height - 12.0
        figure.text(8 / _WIDTH, (height - 7) / height, _plain(title)[:110], fontsize=9, va="center")
        corners = (
            (16.0, top - size[2] * scale),
            (16.0, top - size[2] * scale - 14.0 - size[1] * scale),
            (26.0 + size[0] * scale, top - size[2] * scale),
        )
        for side, (x, y) in zip(_SIDES, corners, strict=True):
            box = (x / _WIDTH, y / height, size[side.right] * scale / _WIDTH, size[side.up] * scale / height)
            axes = figure.add_axes(box)
            _draw(axes, side, surface, open_edges, marked, scale)
        y = top - (size[2] + size[1]) * scale - 24.0
        for number, line in enumerate(lines):
            figure.text(8 / _WIDTH, (y - 4.2 * number) / height, line, fontsize=7, va="center")
        return _bytes(figure, path)


def _draw(
    axes: Axes, side: _Side, surface: Surface, open_edges: Floats, marked: Sequence[Finding], scale: float
) -> None:
    from matplotlib.collections import LineCollection

    low, high = surface.bounds * 1e3
    image, extent = _shaded(surface, side)
    axes.imshow(image, extent=extent, origin="lower", interpolation="nearest", aspect="auto", zorder=1)
    segments = open_edges[:: max(1, len(open_edges) // _EDGES)][..., [side.right, side.up]] * 1e3
    axes.add_collection(LineCollection(list(segments), colors=_RED, linewidths=0.9, zorder=3))
    for number, finding in enumerate(marked, 1):
        sign, colour = _SIGNS[finding.level]
        places = np.array(finding.where)[:, [side.right, side.up]] * 1e3
        look: dict[str, Any] = {"markerfacecolor": "none", "markeredgecolor": colour, "markeredgewidth": 1.0}
        axes.plot(
            places[:, 0], places[:, 1], linestyle="none", marker=sign, markersize=6, zorder=5, clip_on=False, **look
        )
        ground: dict[str, Any] = {"facecolor": (1, 1, 1, 0.75), "edgecolor": "none", "pad": 0.3}
        axes.annotate(
            str(number),
            tuple(places[0]),
            xytext=(4, 4),
            textcoords="offset points",
            fontsize=7,
            color=colour,
            zorder=6,
            bbox=ground,
            annotation_clip=False,
        )
    axes.set(xlim=(low[side.right], high[side.right]), ylim=(low[side.up], high[side.up]))
    axes.set_xlabel(f"{'xyz'[side.right]}, mm ({side.words})", fontsize=7, labelpad=1)
    axes.set_ylabel(f"{'xyz'[side.up]}, mm", fontsize=7, labelpad=1)
    axes.tick_params(labelsize=6, length=2, pad=1)
    axes.locator_params(nbins=max(2, int(min(high - low) * scale / 12)))
    axes.grid(visible=False)


def _shaded(surface: Surface, side: _Side) -> tuple[Floats, tuple[float, float, float, float]]:
    """Colours of what is nearest to the eye, (rows, columns, 4), and the picture's extent in mm."""
    order = ((side.along + 2) % 3, (side.along + 1) % 3, side.along)
    low, high = surface.bounds
    pitch = float((high - low).max()) / _PIXELS
    shape = [int(np.ceil((high[axis] - low[axis]) / pitch)) + 1 for axis in order[:2]]
    origin = low + pitch * 0.5
    met = crossings(surface, origin, pitch, order)
    within = (met.row >= 0) & (met.row < shape[0]) & (met.column >= 0) & (met.column < shape[1])
    row, column, height, face = (values[within] for values in (met.row, met.column, met.height, met.face))
    # Written in the order from far to near, so that what is nearest stays.
    nearest = np.argsort(side.eye * height, kind="stable")
    seen = np.full(shape, -1, dtype=np.intp)
    seen[row[nearest], column[nearest]] = face[nearest]
    normals = surface.double_areas
    length = np.linalg.norm(normals, axis=1)
    unit = normals / np.where(length > 0, length, 1.0)[:, None]
    light = np.zeros(3)
    light[side.along], light[side.up], light[side.right] = 0.8 * side.eye, 0.5, -0.33
    facing = side.eye * unit[:, side.along]
    turned = np.where(facing < 0, -1.0, 1.0)
    bright = 0.45 + 0.55 * np.clip(turned * (unit @ light), 0.0, 1.0)
    colours = np.where((facing < 0)[:, None], _INSIDE, _OUTSIDE) * bright[:, None]
    image = np.zeros((*shape, 4))
    hit = seen >= 0
    image[hit, :3] = colours[seen[hit]]
    image[hit, 3] = 1.0
    start = low[list(order[:2])] * 1e3
    stop = start + np.array(shape) * pitch * 1e3
    if order[1] == side.right:
        return image, (float(start[1]), float(stop[1]), float(start[0]), float(stop[0]))
    return image.transpose(1, 0, 2), (float(start[0]), float(stop[0]), float(start[1]), float(stop[1]))


def _words(finding: Finding, number: str) -> list[str]:
    import textwrap

    text = _plain(f"{number}  {finding.level}: {finding.message}")
    return textwrap.wrap(text, 135, subsequent_indent="     ", max_lines=3, placeholder=" ...")


def _plain(text: str) -> str:
    """Return text as it may stand in a picture: nothing that steers, and no letters that the type lacks."""
    return "".join(c if c.isprintable() and ord(c) < 0x2500 else "?" for c in text)


def _bytes(figure: Any, path: Path) -> bytes:
    paper = io.BytesIO()
    if path.suffix.lower() == ".svg":
        from matplotlib.backends.backend_svg import FigureCanvasSVG

        svg: Any = FigureCanvasSVG(figure)
        svg.print_svg(paper, metadata={"Date": None, "Creator": MARK, "Format": None, "Type": None})
    else:
        from matplotlib.backends.backend_agg import FigureCanvasAgg

        png: Any = FigureCanvasAgg(figure)
        figure.set_dpi(150)
        png.print_png(paper, metadata={"Software": MARK})
    return paper.getvalue()


MARK: Final = "meshlure inspection"
"""Stands in every picture, so that a later run knows it for one that may be replaced."""
