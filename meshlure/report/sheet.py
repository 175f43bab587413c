"""The drawing to scale 1:1 that can be laid under the part: A4 sheets as one PDF, and the whole as one SVG."""

from __future__ import annotations

import io
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from typing import TYPE_CHECKING, Any

from meshlure.errors import Fault, InputError
from meshlure.report import drawings, sheetparts
from meshlure.report.centres import draw_centres
from meshlure.report.figures import INK, MM_PER_INCH, blank, drawing_style
from meshlure.report.layout import Layout, layout
from meshlure.report.packing import TITLE, Block, Placed, Room, pack
from meshlure.report.pen import strokes, white_ground
from meshlure.report.subject import Subject, readable, subject
from meshlure.report.waterline import draw_water
from meshlure.report.wording import cleaned
from meshlure.results import Study, View

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from matplotlib.figure import Figure

A4 = (297.0, 210.0)
"""mm, lying (ISO 216)."""
MARGIN = 10.0
"""mm that a printer may leave white."""
FOOT = 16.0
"""mm over the lower margin that the title takes."""
CAPTION = 5.0
"""mm over a drawing for its title."""
MOST = 40
"""Sheets beyond which a drawing is no longer worth its paper."""


@dataclass(frozen=True)
class Sheet:
    """The finished drawing: the A4 sheets as one PDF, the whole as one SVG, and how many sheets there are."""

    pdf: bytes
    svg: bytes
    count: int


def sheet(study: Study) -> Sheet:
    """Return a study's drawing to scale 1:1.

    Parameters
    ----------
    study : Study
        Its views are drawn with names, hardware, centres, water, balls and measures; its results give the list.

    Returns
    -------
    Sheet
        The same study gives the same bytes.

    Raises
    ------
    InputError
        Where the bait is so large that it would take more than `MOST` sheets.

    Notes
    -----
    A view longer or higher than a sheet runs over several; neighbours share a strip on either side of the join, which
    both mark with one letter. The join is put where it cuts no words, if there is such a place.
    """
    results = cleaned(study.results)
    shown = subject(results)
    views = {view.name: readable(view) for view in study.views if view.pieces and view.pieces[0].rings}
    long = [_drawn(views[name], shown) for name in ("side", "top") if name in views]
    others: list[Sequence[Block]] = [[_drawn(views[name], shown)] for name in ("front",) if name in views]
    others += [*([block] for block in sheetparts.lists(results)), sheetparts.key(shown.buoyancy_of)]
    with drawing_style():
        pdf, count = _pdf(long, others, results)
        return Sheet(pdf, _svg(long, others, results), count)


def _drawn(view: View, shown: Subject) -> Block:
    paper = layout(view, shown, 1.0)

    def draw(axes: Axes) -> None:
        drawings.draw_grid(axes, paper)
        drawings.draw_outlines(axes, paper)
        drawings.draw_leaders(axes, paper)
        draw_water(axes, paper)
        drawings.draw_marks(axes, paper)
        draw_centres(axes, paper)
        drawings.draw_measures(axes, paper)

    return Block(drawings.title(paper), paper.width, paper.height, draw, _zero(paper))


def _zero(paper: Layout) -> float:
    return float(paper.origin[0])


def _pdf(long: Sequence[Block], others: Sequence[Sequence[Block]], results: Mapping[str, Any]) -> tuple[bytes, int]:
    from matplotlib.backends.backend_pdf import PdfPages

    placed, count = pack(long, others, Room(A4[0] - 2 * MARGIN, A4[1] - 2 * MARGIN - FOOT), CAPTION, _words)
    if count > MOST:
        raise InputError(
            Fault(
                what="the bait is too large to be drawn 1:1 on A4",
                where="length x depth x width, mm",
                found=" x ".join(f"{results['size'][key]:.0f}" for key in ("length_mm", "depth_mm", "width_mm")),
                allowed=f"what goes on {MOST} sheets; this would take {count}",
                next_step="check the unit of its meshes; meshlure report draws it to a smaller scale",
            )
        )
    paper = io.BytesIO()
    title = f"{results['name'] or 'Bait'}, drawing 1:1"
    told: dict[str, Any] = {"Title": title, "Creator": "meshlure", "Producer": None, "CreationDate": None}
    with PdfPages(paper, metadata=told) as pages:
        for number in range(count):
            figure = blank(*A4)
            for at in (p for p in placed if p.sheet == number):
                _put(figure, at, (MARGIN + at.x, MARGIN + FOOT + at.y), A4)
            _title(figure, A4, results, number + 1, count)
            pages.savefig(figure)
    return paper.getvalue(), count


def _svg(long: Sequence[Block], others: Sequence[Sequence[Block]], results: Mapping[str, Any]) -> bytes:
    from matplotlib.backends.backend_svg import FigureCanvasSVG

    # One sheet as large as it must be: as wide as the longest view, and as high as what then stands under it.
    left = max((block.zero for block in long), default=0.0)
    wide = max([A4[0] - 2 * MARGIN, *(block.width + left - block.zero for block in long)])
    high = sum(block.height + 2 * CAPTION for block in [*long, *(shapes[0] for shapes in others)])
    placed, _ = pack(long, others, Room(wide, high), CAPTION, _words)
    foot = min(at.y for at in placed)
    size = (wide + 2 * MARGIN, high - foot + 2 * MARGIN + FOOT)
    figure = blank(*size)
    for at in placed:
        _put(figure, at, (MARGIN + at.x, MARGIN + FOOT + at.y - foot), size)
    _title(figure, size, results, 1, 1)
    paper = io.BytesIO()
    canvas: Any = FigureCanvasSVG(figure)
    canvas.print_svg(paper, metadata={"Date": None, "Creator": None, "Format": None, "Type": None})
    return paper.getvalue()


def _put(figure: Figure, at: Placed, corner: tuple[float, float], size: tuple[float, float]) -> None:
    """Draw what a sheet shows of a block at a place on the paper, and its title over it."""
    block, across, upright = at.block, at.across, at.upright
    axes = _axes(figure, corner, (across.high - across.low, upright.high - upright.low), size)
    axes.set(xlim=(across.low, across.high), ylim=(upright.low, upright.high))
    block.draw(axes)
    if (across.low, across.high, upright.low, upright.high) != (0, block.width, 0, block.height):
        for text in axes.texts:
            x, y = text.get_position()
            text.set_visible(across.first <= x < across.last and upright.first <= y < upright.last)
        _joins(axes, at)
    if block.title:
        over = (corner[0], corner[1] + upright.high - upright.low)
        caption = _axes(figure, over, (across.high - across.low, CAPTION), size)
        caption.set(xlim=(0, across.high - across.low), ylim=(0, CAPTION))
        words = block.title if across.number == 0 and upright.high == block.height else f"{block.title}, goes on"
        caption.text(0, 1.6, words, fontsize=TITLE, fontweight="bold")


def _axes(figure: Figure, corner: tuple[float, float], extent: tuple[float, float], size: tuple[float, float]) -> Axes:
    axes = figure.add_axes((corner[0] / size[0], corner[1] / size[1], extent[0] / size[0], extent[1] / size[1]))
    axes.axis("off")
    return axes


def _joins(axes: Axes, at: Placed) -> None:
    """Mark where the neighbouring sheets go on: a line with the join's name at both ends."""
    for level, window, other, length in (
        (False, at.across, at.upright, at.block.width),
        (True, at.upright, at.across, at.block.height),
    ):
        for place, number in ((window.first, window.number), (window.last, window.number + 1)):
            if not (window.low < place < window.high and 0 < place < length):
                continue
            ends, seats = (
                ((place, other.low), (place, other.high)),
                ((place, other.low + 2.5), (place, other.high - 2.5)),
            )
            if level:
                ends, seats = _swapped(ends), ((other.low + 8, place), (other.high - 8, place))
            strokes(axes, [ends], INK, 0.8, 9, dash="dashed")
            for seat in seats:
                words = f"join {chr(96 + number) if level else number}"
                look: dict[str, Any] = {"ha": "center", "va": "center", "fontsize": 7.5, "fontweight": "bold"}
                axes.text(*seat, words, zorder=10, bbox=white_ground(), **look)


def _swapped(ends: Any) -> Any:
    return tuple((b, a) for a, b in ends)


def _title(figure: Figure, size: tuple[float, float], results: Mapping[str, Any], number: int, count: int) -> None:
    width = size[0] - 2 * MARGIN
    axes = _axes(figure, (MARGIN, MARGIN), (width, 14.0), size)
    axes.set(xlim=(0, width), ylim=(0, 14.0))
    sheetparts.draw_title(axes, width, results, number, count)


def _words(block: Block) -> list[tuple[float, float, float, float]]:
    """Return where words stand in a block: (left, right, low, high) each, mm."""
    from matplotlib.backends.backend_agg import FigureCanvasAgg

    figure = blank(block.width, block.height)
    axes = _axes(figure, (0, 0), (block.width, block.height), (block.width, block.height))
    axes.set(xlim=(0, block.width), ylim=(0, block.height))
    block.draw(axes)
    pixel = MM_PER_INCH / figure.dpi
    canvas: Any = FigureCanvasAgg(figure)
    boxes = [text.get_window_extent(canvas.get_renderer()) for text in axes.texts]
    return [(box.x0 * pixel, box.x1 * pixel, box.y0 * pixel, box.y1 * pixel) for box in boxes]
