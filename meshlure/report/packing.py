"""Which drawing goes where on which sheet: side over top, joined from sheet to sheet where they are long; in mm."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass, field
from typing import TYPE_CHECKING

from meshlure.report.figures import text_width
from meshlure.report.tiles import Window, windows

if TYPE_CHECKING:
    from matplotlib.axes import Axes

GAP = 5.0
"""mm between two blocks."""
TITLE = 8.0
"""Type size of a block's title."""
BOLD = 1.15
"""Times that bold type is wider than plain, at the most."""


@dataclass(frozen=True, eq=False)
class Block:
    """A drawing, a key or a table.

    Attributes
    ----------
    title : str
        Written over it; empty for none.
    width, height : float
    draw : callable
        Draws it on axes in mm of paper from its lower left corner.
    zero : float
        Where the nose lies across it; blocks that stand over each other have their noses over each other.
    """

    title: str
    width: float
    height: float
    draw: Callable[[Axes], None]
    zero: float = 0.0

    @property
    def wide(self) -> float:
        """Width that it takes with its title, mm."""
        return max(self.width, text_width(self.title, TITLE) * BOLD)


@dataclass(frozen=True, eq=False)
class Placed:
    """A block, or what a sheet shows of it, with its lower left corner from that of the room for drawings."""

    sheet: int
    x: float
    y: float
    block: Block
    across: Window
    upright: Window


@dataclass(frozen=True)
class Room:
    """What a sheet has for drawings."""

    width: float
    height: float


@dataclass
class _Shelf:
    sheet: int
    top: float
    height: float
    used: float


@dataclass
class _Sheets:
    """Shelves on sheets, filled from the left and from above."""

    room: Room
    title: float
    shelves: list[_Shelf] = field(default_factory=list)
    placed: list[Placed] = field(default_factory=list)
    count: int = 0

    def open(self) -> int:
        self.count += 1
        return self.count - 1

    def free(self, sheet: int) -> float:
        """Height that is left under the shelves of a sheet."""
        ends = [s.top - s.height - GAP for s in self.shelves if s.sheet == sheet]
        return min([self.room.height, *ends])

    def tall(self, block: Block, upright: Window | None = None) -> float:
        shown = block.height if upright is None else upright.high - upright.low
        return shown + (self.title if block.title else 0.0)

    def shelve(self, sheet: int, block: Block, across: Window, upright: Window, x: float) -> None:
        """Put a block on a new shelf of a sheet."""
        top, height = self.free(sheet), self.tall(block, upright)
        wide = block.wide if across.high == block.width else across.high
        self.shelves.append(_Shelf(sheet, top, height, x + wide - across.low + GAP))
        self.placed.append(Placed(sheet, x, top - height, block, across, upright))

    def fit(self, shapes: Sequence[Block]) -> None:
        """Put a block, in the first of its shapes that fits, beside others, under them, or on a new sheet."""
        if not any(self._beside(block) or self._under(block) for block in shapes):
            self.shelve(self.open(), shapes[0], *_whole(shapes[0]), 0.0)

    def _beside(self, block: Block) -> bool:
        height = self.tall(block)
        for shelf in self.shelves:
            last = min(s.top for s in self.shelves if s.sheet == shelf.sheet) == shelf.top
            if shelf.used + block.wide <= self.room.width and height <= (shelf.top if last else shelf.height):
                self.placed.append(Placed(shelf.sheet, shelf.used, shelf.top - height, block, *_whole(block)))
                shelf.used += block.wide + GAP
                shelf.height = max(shelf.height, height)
                return True
        return False

    def _under(self, block: Block) -> bool:
        for sheet in range(self.count):
            if self.tall(block) <= self.free(sheet):
                self.shelve(sheet, block, *_whole(block), 0.0)
                return True
        return False


def _whole(block: Block) -> tuple[Window, Window]:
    return Window(0, block.width, 0, block.width), Window(0, block.height, 0, block.height)


def pack(
    long: Sequence[Block],
    others: Sequence[Sequence[Block]],
    room: Room,
    title: float,
    words: Callable[[Block], Sequence[tuple[float, float, float, float]]],
) -> tuple[list[Placed], int]:
    """Return every block with its place, and how many sheets there are.

    Parameters
    ----------
    long : sequence of Block
        The views along the bait: under each other on one sheet where the room is high enough, cut at the same places.
    others : sequence of sequences of Block
        Put where there is room, each in the first of its shapes for which there is some.
    room : Room
    title : float
        mm that a title takes over its block.
    words : callable
        Where words stand in a block, (left, right, low, high) each; asked only of blocks that must be cut.
    """
    sheets = _Sheets(room, title)
    stacked = sum(sheets.tall(block) for block in long) + GAP * (len(long) - 1) <= room.height
    for group in [list(long)] if stacked and long else [[block] for block in long]:
        _lay(sheets, group, words)
    for shapes in others:
        fitting = [b for b in shapes if b.width <= room.width and sheets.tall(b) <= room.height]
        if fitting:
            sheets.fit(fitting)
        else:
            _lay(sheets, [shapes[0]], words)
    return sheets.placed, sheets.count


def _lay(
    sheets: _Sheets, group: list[Block], words: Callable[[Block], Sequence[tuple[float, float, float, float]]]
) -> None:
    """Put blocks under each other, nose over nose, on as many sheets as they are long and, for one alone, high."""
    left = max(block.zero for block in group)
    shifts = [left - block.zero for block in group]
    length = max(block.width + shift for block, shift in zip(group, shifts, strict=True))
    # Several are put under each other only where they fit so; one alone may be higher than a sheet.
    height, room = group[0].height, sheets.room.height - (sheets.title if group[0].title else 0.0)
    deep = len(group) == 1 and height > room
    texts = [words(block) if deep or length > sheets.room.width else () for block in group]
    beside = [(a + shift, b + shift) for rows, shift in zip(texts, shifts, strict=True) for a, b, _, _ in rows]
    rising = windows(height, room, [row[2:] for row in texts[0]]) if deep else [None]
    for upright in reversed(rising):
        for across in windows(length, sheets.room.width, beside):
            sheet = sheets.open()
            for block, shift in zip(group, shifts, strict=True):
                seen = _seen(across, shift, block.width)
                if seen is not None:
                    sheets.shelve(sheet, block, seen, upright or _whole(block)[1], max(shift - across.low, 0.0))


def _seen(window: Window, shift: float, width: float) -> Window | None:
    """What a window over a group shows of a block that begins at a shift; None where that is nothing."""
    low, high = max(window.low - shift, 0.0), min(window.high - shift, width)
    seen = Window(low, high, window.first - shift, window.last - shift, window.number)
    return seen if low < high else None
