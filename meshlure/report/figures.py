"""The paper that all pictures are drawn on: their size, type, ink, and how they go into the page."""

from __future__ import annotations

import base64
import io
from collections.abc import Iterator
from contextlib import contextmanager
from dataclasses import dataclass
from functools import lru_cache
from typing import TYPE_CHECKING, Any

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from matplotlib.figure import Figure

MM_PER_INCH = 25.4
POINTS_PER_MM = 72 / MM_PER_INCH

INK = "#1c2a30"
PENCIL = "#5b6b72"
WATER = "#155e86"
SHALLOW = "#dcecf4"
CLAY = "#9a4a16"
MOSS = "#3d6b35"
GRID_FINE, GRID_FIVE, GRID_TEN = "#eaf0f1", "#dbe5e7", "#c3d1d5"

TYPE = 7.5
"""Size of the type in pictures, points."""

STYLE = {
    # Outlined glyphs look and measure the same on every machine; the same words are in the page's text and alt texts.
    "svg.fonttype": "path",
    "svg.hashsalt": "meshlure",
    "font.family": "DejaVu Sans",
    "font.size": TYPE,
    "axes.edgecolor": PENCIL,
    "axes.labelcolor": INK,
    "axes.linewidth": 0.6,
    "axes.spines.top": False,
    "axes.spines.right": False,
    # Numbers stand as they are: an offset or a power of ten in a corner is overlooked.
    "axes.formatter.useoffset": False,
    "axes.formatter.limits": (-9, 9),
    # Where a title stands is said, not found: finding it lays out every tick.
    "axes.titley": 1.0,
    "axes.unicode_minus": True,
    "text.color": INK,
    "lines.linewidth": 1.3,
    "legend.frameon": False,
    "legend.handlelength": 3.2,
    "hatch.linewidth": 0.45,
    "text.parse_math": False,
    "figure.facecolor": "white",
}


@dataclass(frozen=True)
class Picture:
    """A finished picture for the page.

    Attributes
    ----------
    uri : str
        The SVG as a data address.
    alt : str
        What the picture shows, in words.
    width_mm, height_mm : float
        Its size on paper, at which drawings are to their stated scale.
    """

    uri: str
    alt: str
    width_mm: float
    height_mm: float


@contextmanager
def drawing_style() -> Iterator[None]:
    """Draw in the page's style and none of the user's own settings, so that the same study gives the same bytes."""
    import matplotlib as mpl

    ours: dict[Any, Any] = {key: value for key, value in mpl.rcParamsDefault.items() if not key.startswith("backend")}
    with mpl.rc_context(ours | STYLE):
        yield


def blank(width_mm: float, height_mm: float) -> Figure:
    """Return an empty sheet of a size in mm."""
    from matplotlib.figure import Figure

    return Figure(figsize=(width_mm / MM_PER_INCH, height_mm / MM_PER_INCH))


def blank_axes(figure: Figure, box: tuple[float, float, float, float] = (0, 0, 1, 1)) -> Axes:
    """Return room to draw in on a sheet, its ground left to the sheet; a box in shares of the sheet."""
    axes = figure.add_axes(box)
    axes.patch.set_visible(False)
    return axes


def picture(figure: Figure, alt: str) -> Picture:
    """Return a finished sheet as a data address; call inside `drawing_style`."""
    from matplotlib.backends.backend_svg import FigureCanvasSVG

    paper = io.BytesIO()
    canvas: Any = FigureCanvasSVG(figure)
    canvas.print_svg(paper, metadata={"Date": None, "Creator": None, "Format": None, "Type": None})
    width, height = figure.get_size_inches() * MM_PER_INCH
    uri = "data:image/svg+xml;base64," + base64.b64encode(paper.getvalue()).decode("ascii")
    return Picture(uri, alt, float(width), float(height))


@lru_cache(maxsize=4096)
def text_width(text: str, points: float) -> float:
    """Return the width in mm that a line of text takes at a type size in points."""
    from matplotlib.font_manager import FontProperties
    from matplotlib.textpath import text_to_path

    width, _, _ = text_to_path.get_text_width_height_descent(
        text, FontProperties(family="DejaVu Sans", size=points), ismath=False
    )
    return float(width) / POINTS_PER_MM


@lru_cache(maxsize=4096)
def drawable(text: str) -> bool:
    """Return whether the drawing type has every letter of a text."""
    from matplotlib.font_manager import FontProperties, findfont, get_font

    letters = get_font(findfont(FontProperties(family="DejaVu Sans"))).get_charmap()
    return all(ord(letter) in letters for letter in text)
