"""Rows of numbers in the text of a mesh file, each with its line."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Final

import numpy as np

from meshlure.errors import Fault, InputError
from meshlure.files.polygons import MOST_CORNERS, Polygons, batches
from meshlure.geometry.surface import Floats

_SHOWN: Final = 60
_DIGITS: Final = 18
"""Of a whole number: what fits in eight bytes."""
_LONG: Final = 10_000
"""Bytes. Rows of a longer one among them are cut off behind the numbers that are wanted."""


@dataclass(frozen=True, eq=False)
class Rows:
    """Lines that hold something, and which lines of the file they are.

    Attributes
    ----------
    lines : list of bytes
    numbers : sequence of int
        Of the file's lines, counted from 1.
    where : str
        The file, for messages.
    """

    lines: list[bytes]
    numbers: Sequence[int]
    where: str

    @classmethod
    def of(cls, text: bytes, where: str, first: int = 1, comment: bytes = b"") -> Rows:
        """Return the rows of a text.

        Parameters
        ----------
        text : bytes
        where : str
        first : int
            Line at which the text begins.
        comment : bytes
            What a remark to the end of a line begins with; empty where there are none.
        """
        plain = text.replace(b"\r\n", b"\n").replace(b"\r", b"\n")
        lines = plain.split(b"\n")
        if comment and comment in plain:
            lines = [line.partition(comment)[0] for line in lines]
        held = [number for number, line in enumerate(lines) if line and not line.isspace()]
        if held == list(range(len(held))):
            return cls(lines[: len(held)], range(first, first + len(held)), where)
        return cls([lines[number] for number in held], [first + number for number in held], where)

    def __len__(self) -> int:
        return len(self.lines)

    def place(self, row: int) -> str:
        """Return where a row stands, for a message."""
        return f"{self.where}, line {self.numbers[row]}"

    def shown(self, row: int) -> str:
        """Return the beginning of a row, as it may stand in a message."""
        text = self.lines[row][: 4 * _SHOWN].decode("utf-8", "replace").strip()
        words = "".join(c if c.isprintable() else " " for c in text)
        return f"'{words[:_SHOWN]}{'...' if len(words) > _SHOWN else ''}'"

    def numbers_of(self, start: int, count: int, columns: int, noun: str) -> Floats:
        """(count, columns) array of the first numbers of some rows; what stands behind them in a row is left.

        Raises
        ------
        InputError
            There are fewer rows, or one holds fewer numbers or something else (with the line).
        """
        rows = self.some(start, count, noun)
        found = [
            self._numbers(rows[batch], start + batch.start, columns, noun)
            for batch in batches(np.full(len(rows), columns))
        ]
        return np.concatenate([*found, np.empty((0, columns))])

    def _numbers(self, rows: list[bytes], start: int, columns: int, noun: str) -> Floats:
        longest = max(map(len, rows))
        words = b" ".join(rows).split() if longest < _LONG else []
        if len(words) != columns * len(rows):
            cut = [row.split(None, columns)[:columns] for row in rows]
            short = next((number for number, row in enumerate(cut) if len(row) < columns), None)
            if short is not None:
                raise self.unread(start + short, f"{noun} holds fewer than {columns} numbers")
            words = [word for row in cut for word in row]
        try:
            return np.array(list(map(number_of, words)), dtype=np.float64).reshape(-1, columns)
        except ValueError:
            wrong = next(number for number, word in enumerate(words) if not _is_number(word)) // columns
            raise self.unread(start + wrong, f"{noun} cannot be read") from None

    def polygons(self, start: int, count: int, most: int) -> Polygons:
        """Polygons of rows that say how many corners follow, and then which.

        Parameters
        ----------
        start, count : int
            Which rows.
        most : int
            Vertices that there are.

        Raises
        ------
        InputError
            A row cannot be read, has fewer corners than three or than it says, or names a vertex that is not there.
        """
        corners: list[int] = []
        counts: list[int] = []
        for number, row in enumerate(self.some(start, count, "a face")):
            words = row.split(None, MOST_CORNERS + 1)
            try:
                held = whole(words[0])
                if held > MOST_CORNERS:
                    raise self.unread(start + number, f"a face has more than {MOST_CORNERS:,} corners")
                named = [whole(word) for word in words[1 : 1 + held]]
            except (ValueError, IndexError):
                raise self.unread(start + number, "a face cannot be read") from None
            if held < 3 or len(named) < held:
                raise self.unread(start + number, "a face has fewer corners than three, or than it says")
            if max(named) >= most:
                raise self.lost(start + number, most)
            corners += named
            counts.append(held)
        return Polygons(np.array(corners, dtype=np.intp), np.array(counts, dtype=np.intp))

    def lost(self, row: int, most: int) -> InputError:
        """Return the fault of a face that names a vertex which is not there."""
        step = "the file is cut off or damaged: export it again"
        return InputError(
            Fault("a face names a vertex that is not there", self.place(row), self.shown(row), f"0 to {most - 1}", step)
        )

    def unread(self, row: int, what: str) -> InputError:
        """Return the fault of a row that cannot be read."""
        step = "export the part again; numbers take a decimal point"
        return InputError(Fault(what, self.place(row), self.shown(row), next_step=step))

    def some(self, start: int, count: int, noun: str) -> list[bytes]:
        """Return some rows' bytes; raises InputError where there are fewer."""
        rows = self.lines[start : start + count]
        if len(rows) < count:
            last = f"{self.where}, line {self.numbers[-1]}" if len(self) else self.where
            raise InputError(
                Fault(
                    f"the file ends before its last {noun.partition(' ')[2]}",
                    last,
                    f"{len(rows):,} of {count:,}",
                    next_step="the file was cut off: export or copy it again",
                )
            )
        return rows


def number_of(word: bytes) -> float:
    """Return a number as mesh files write it.

    Raises
    ------
    ValueError
        It is none; Python would pass over underscores within it.
    """
    if b"_" in word:
        raise ValueError(word)
    return float(word)


def _is_number(word: bytes) -> bool:
    try:
        number_of(word)
    except ValueError:
        return False
    return True


def whole(word: bytes) -> int:
    """Return a word as a whole number from 0 on.

    Raises
    ------
    ValueError
        It is none, or beyond what anything can be counted with.
    """
    if not word.isdigit() or len(word) > _DIGITS:
        raise ValueError(word)
    return int(word)
