"""A table for the page: every cell already in words."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass


@dataclass(frozen=True)
class Saved:
    """A table's numbers as a file: its name, and itself as a data address."""

    file: str
    address: str


@dataclass(frozen=True)
class Table:
    """Rows under a head; the first column names the row.

    Attributes
    ----------
    caption : str
        What the table holds.
    head : tuple of str
        Column titles with their units; empty where a list of facts needs none.
    rows : tuple of tuples of str
    words : frozenset of int
        Columns that hold words, which run from the left; numbers stand at the right.
    last_is_sum : bool
        Whether the last row sums those above it.
    saved : Saved or None
        The same numbers to be saved, with all their digits.
    """

    caption: str
    head: tuple[str, ...]
    rows: tuple[tuple[str, ...], ...]
    words: frozenset[int] = frozenset({0})
    last_is_sum: bool = False
    saved: Saved | None = None


def table(
    caption: str,
    head: Iterable[str],
    rows: Iterable[Iterable[str]],
    words: Iterable[int] = (0,),
    *,
    last_is_sum: bool = False,
) -> Table | None:
    """Return a table, or None where it has no row."""
    lines = tuple(tuple(row) for row in rows)
    return Table(caption, tuple(head), lines, frozenset(words), last_is_sum) if lines else None
