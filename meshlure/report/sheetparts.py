"""What stands on a sheet beside its drawings: the list of pieces, the key, the ruler and the title."""

from __future__ import annotations

import textwrap
from collections.abc import Mapping, Sequence
from typing import TYPE_CHECKING, Any

from meshlure.report import substance
from meshlure.report.figures import INK, PENCIL, drawable, text_width
from meshlure.report.packing import Block
from meshlure.report.pen import SWATCHES_TALL, SWATCHES_WIDE, draw_swatches, strokes
from meshlure.report.subject import main_posture, touchy
from meshlure.report.wording import fixed, headline_grams, lean_words, nose_words

if TYPE_CHECKING:
    from matplotlib.axes import Axes

TYPE, LINE = 6.8, 3.7
"""Type size of a list, and mm from one of its lines to the next."""
COLUMNS = ((0, 40.0), (2, 36.0), (5, 12.0), (6, 16.0), (7, 34.0))
"""Columns of the table of pieces that the list takes, with the mm that each has."""
HEADS = ("piece", "material", "g", "from nose", "centre x, y, z in CAD")
ROWS = 36
"""Pieces that one list holds."""
LETTERS_WIDE, STEP = 66.0, 4.2
"""mm that the key's letters take, and from one to the next."""
RULER = 100
"""mm of the ruler on every sheet."""


def lists(results: Mapping[str, Any]) -> list[Block]:
    """Return the pieces with material, mass and place, as lists of at most `ROWS`."""
    table = substance.pieces(results)
    if table is None:
        return []
    chunks = [table.rows[at : at + ROWS] for at in range(0, len(table.rows), ROWS)]
    width = sum(wide for _, wide in COLUMNS)
    return [
        Block(
            "Pieces, numbered as in the drawings; g and mm",
            width,
            LINE * (len(rows) + 1) + 2,
            _lister(rows, last=table.last_is_sum and rows is chunks[-1]),
        )
        for rows in chunks
    ]


def _lister(rows: Sequence[tuple[str, ...]], *, last: bool) -> Any:
    def draw(axes: Axes) -> None:
        height, width = LINE * (len(rows) + 1) + 2, sum(wide for _, wide in COLUMNS)
        for number, row in enumerate([HEADS, *([row[column] for column, _ in COLUMNS] for row in rows)]):
            y, x = height - LINE * (number + 0.6), 0.0
            for place, (cell, (_, wide)) in enumerate(zip(row, COLUMNS, strict=True)):
                words = place < 2
                look: dict[str, Any] = {"fontsize": TYPE, "va": "center_baseline", "ha": "left" if words else "right"}
                if number == 0:
                    look["color"] = PENCIL
                axes.text(x if words else x + wide, y, _fitting(cell, wide - 1.5), **look)
                x += wide
        lines = [1.15, len(rows) + 0.15] if last else [1.15]
        strokes(axes, [((0.0, height - LINE * y), (width, height - LINE * y)) for y in lines], INK, 0.6, 3)

    return draw


def _fitting(text: str, wide: float) -> str:
    """Return a text cut until it is no wider than so many mm; a dash where the type has not all its letters."""
    if not drawable(text):
        number = text.partition(" ")[0]
        return number if number.isdigit() else "–"
    letters = len(text)
    short = text
    while letters > 3 and text_width(short, TYPE) > wide:
        letters -= 1
        short = textwrap.shorten(text, letters, placeholder="…") if " " in text[:letters] else text[: letters - 1] + "…"
    return short


def key(buoyancy_of: str) -> tuple[Block, Block]:
    """Return what fills, letters and lines stand for, in two shapes: a high one and a wide one."""
    rows = (
        ("G", "centre of gravity"),
        ("B", f"centre of buoyancy {buoyancy_of}"),
        ("A", "centre of the outline's area in that view"),
        ("+", "hardware, where it acts"),
        ("◇", "line tie"),
        ("▽", "water as it rests"),
    )
    under = STEP * len(rows) + 1

    def letters(axes: Axes, left: float, top: float) -> None:
        for number, (sign, words) in enumerate(rows):
            y = top - STEP * (number + 0.5)
            axes.text(left + 5.5, y, sign, fontsize=8, fontweight="bold", ha="center", va="center")
            axes.text(left + 12, y, words, fontsize=7.5, va="center")

    def high(axes: Axes) -> None:
        draw_swatches(axes, 0.0, under)
        letters(axes, 0.0, under)

    def wide(axes: Axes) -> None:
        draw_swatches(axes, 0.0, 0.0)
        letters(axes, SWATCHES_WIDE, SWATCHES_TALL)

    return (
        Block("Key", LETTERS_WIDE, SWATCHES_TALL + under, high),
        Block("Key", SWATCHES_WIDE + LETTERS_WIDE, SWATCHES_TALL, wide),
    )


def draw_title(axes: Axes, width: float, results: Mapping[str, Any], sheet: int, count: int) -> None:
    """Draw the foot of a sheet, 14 mm high: name, facts, number of the sheet, and a ruler to hold a ruler to."""
    strokes(axes, [((0.0, 14.0), (width, 14.0))], INK, 0.9, 3)
    name = str(results["name"] or "Bait without a name")
    name = name if drawable(name) else "Bait, by a name that this type cannot write"
    room = width - RULER - 12.0
    size = 11.0
    while size > 6 and text_width(name, size) * 1.12 > room:
        size -= 1
    if text_width(name, size) * 1.12 > room:
        name = textwrap.shorten(name, int(room / 1.8), placeholder="…")
    axes.text(0, 10.4, name, fontsize=size, fontweight="bold", va="center")
    axes.text(0, 5.7, facts(results), fontsize=TYPE, va="center")
    tool = results["tool"]
    words = f"sheet {sheet} of {count} · {tool['name']} {tool['version']}, run {str(results['run'])[:8]}"
    axes.text(0, 1.9, words, fontsize=TYPE, va="center", color=PENCIL)
    left = width - RULER
    ticks = [((left + at, 2.2), (left + at, 2.2 + (3.4 if at % 50 == 0 else 2.2))) for at in range(0, RULER + 1, 10)]
    strokes(axes, [((left, 2.2), (width, 2.2)), *ticks], INK, 0.7, 3)
    axes.text(left, 9.8, "Scale 1:1. Print at 100 %, not fitted to the page:", fontsize=TYPE, va="center")
    axes.text(left, 6.9, f"by a ruler, this one is {RULER} mm long.", fontsize=TYPE, va="center")


def facts(results: Mapping[str, Any]) -> str:
    """Return size, mass, reserve and posture in one line."""
    size, found, posture = results["size"], results["buoyancy"], main_posture(results)
    sides = " × ".join(fixed(size[key], 1) for key in ("length_mm", "depth_mm", "width_mm"))
    parts = [f"{sides} mm", f"{headline_grams(results['weight']['mass_g'])} ready to fish"]
    parts.append(f"{found['state']}, reserve {fixed(found['reserve_g'], 2, signed=True)} g")
    if posture is not None and posture["up"] is not None:
        parts.append(nose_words(posture["nose_up_deg"], rounded=touchy(posture, "nose_up_deg")))
        lean = lean_words(posture["lean_deg"], rounded=touchy(posture, "lean_deg"), free=posture["free"] is not None)
        parts += [lean] if lean else []
    return " · ".join(parts)
