"""Tables for the terminal: fitted to its width there, plain columns where the output goes elsewhere."""

from __future__ import annotations

import io
from collections.abc import Sequence
from dataclasses import dataclass, field
from typing import Final

from meshlure.cli.terminal import shown

_GAP: Final = 2
"""Blanks between columns."""
_WORDS: Final = 16
"""Columns of the terminal that a column of words is left at least."""


@dataclass(frozen=True)
class Column:
    """One column.

    Attributes
    ----------
    head : str
    number : bool
        Whether it is set to the right.
    words : bool
        Whether its cells may be broken over lines where the terminal is narrow.
    """

    head: str
    number: bool = False
    words: bool = False


@dataclass(frozen=True)
class Table:
    """Rows under heads.

    Attributes
    ----------
    columns : sequence of Column
    rows : sequence of sequence of str
        A cell for each column.
    strong : frozenset of int
        Rows that are set off in colour; what sets them off must stand in their words too.
    """

    columns: Sequence[Column]
    rows: Sequence[Sequence[str]]
    strong: frozenset[int] = field(default_factory=frozenset)

    @classmethod
    def numbered(cls, columns: Sequence[Column], rows: Sequence[Sequence[str]], taken: int | None) -> Table:
        """Return rows with their numbers in a first column; the one that was taken, from 1, carries an arrow."""
        made = [(f"{number}{'>' if number == taken else ''}", *row) for number, row in enumerate(rows, 1)]
        return cls(columns, made, frozenset() if taken is None else frozenset({taken - 1}))

    def lines(self, wide: int | None, encoding: str, colour: bool) -> list[str]:
        """Return the table's lines, without the blanks at their ends.

        Parameters
        ----------
        wide : int or None
            Columns of the terminal; None leaves every row on one line.
        encoding : str
            Of the stream that they go to.
        colour : bool
            Whether the stream can be coloured.
        """
        rows = [[shown(cell, encoding) for cell in row] for row in self.rows]
        heads = [shown(column.head, encoding) for column in self.columns]
        if wide is None:
            return self._plain(heads, rows)
        if self._least(heads, rows) > wide:
            return self._records(heads, rows)
        return self._fitted(heads, rows, wide, _can_draw(encoding), colour)

    def _plain(self, heads: list[str], rows: list[list[str]]) -> list[str]:
        sizes = [max(map(len, cells)) for cells in zip(heads, *rows, strict=True)]
        return [
            (" " * _GAP)
            .join(
                cell.rjust(size) if column.number else cell.ljust(size)
                for cell, size, column in zip(row, sizes, self.columns, strict=True)
            )
            .rstrip()
            for row in (heads, *rows)
        ]

    def _least(self, heads: list[str], rows: list[list[str]]) -> int:
        """How wide a terminal must be for the columns to stand side by side."""
        return sum(self._narrowest(heads, rows)) + _GAP * (len(heads) - 1)

    def _narrowest(self, heads: list[str], rows: list[list[str]]) -> list[int]:
        """How narrow each column may become: heads are broken between words, cells only where they hold words."""
        longest = [max(map(len, cells), default=0) for cells in zip(*rows, strict=True)] or [0] * len(heads)
        held = [min(size, _WORDS) if c.words else size for size, c in zip(longest, self.columns, strict=True)]
        return [max(size, *map(len, head.split() or [""])) for size, head in zip(held, heads, strict=True)]

    def _widths(self, heads: list[str], rows: list[list[str]], wide: int) -> list[int]:
        """How wide each column is made: what is to spare goes to the columns of words, then to the heads."""
        sizes = self._narrowest(heads, rows)
        spare = wide - sum(sizes) - _GAP * (len(heads) - 1)
        longest = [max(map(len, cells), default=0) for cells in zip(*rows, strict=True)] or [0] * len(heads)
        for wanted in (longest, list(map(len, heads))):
            for place, size in enumerate(wanted):
                more = min(max(size - sizes[place], 0), spare)
                sizes[place] += more
                spare -= more
        return sizes

    def _records(self, heads: list[str], rows: list[list[str]]) -> list[str]:
        """Every row as a block of its own, a line a cell, where the columns have no room."""
        size = max(map(len, heads))
        lines = []
        for first, *rest in rows:
            lines.append(first)
            lines += [f"  {head.ljust(size)}  {cell}" for head, cell in zip(heads[1:], rest, strict=True) if cell]
        return lines

    def _fitted(self, heads: list[str], rows: list[list[str]], wide: int, ruled: bool, colour: bool) -> list[str]:
        from rich import box
        from rich.console import Console
        from rich.table import Table as Rich
        from rich.text import Text

        made = Rich(
            box=box.SIMPLE_HEAD if ruled else None,
            show_edge=False,
            pad_edge=False,
            padding=(0, _GAP - ruled, 0, 0),  # the rule takes a blank of its own
            header_style="bold" if colour else "",
        )
        for head, column, size in zip(heads, self.columns, self._widths(heads, rows, wide), strict=True):
            made.add_column(
                Text(head),
                justify="right" if column.number else "left",
                overflow="fold",
                width=size,
                vertical="top",
            )
        for number, row in enumerate(rows):
            style = "bold" if colour and number in self.strong else None
            made.add_row(*(Text(cell) for cell in row), style=style)
        paper = io.StringIO()
        console = Console(
            file=paper,
            width=wide,
            force_terminal=colour,
            color_system="standard" if colour else None,
            no_color=not colour,
            legacy_windows=False,
            highlight=False,
            emoji=False,
            markup=False,
        )
        console.print(made)
        return [line.rstrip() for line in paper.getvalue().splitlines()]


def _can_draw(encoding: str) -> bool:
    """Tell whether an encoding has the line that is drawn under the heads."""
    try:
        "─".encode(encoding)
    except (UnicodeEncodeError, LookupError):
        return False
    return True
