"""The rows of a PLY file that is text."""

from __future__ import annotations

from collections.abc import Callable
from typing import Final

import numpy as np

from meshlure.files.plyheader import Element, Header, corner_list
from meshlure.files.polygons import MOST_CORNERS, Polygons
from meshlure.files.rows import Rows, whole
from meshlure.geometry.surface import Floats

_MOST_WORDS: Final = 2 * MOST_CORNERS
"""Of one row."""


def read_text(data: bytes, header: Header, where: str) -> tuple[Floats, Polygons, Callable[[int], str]]:
    """Vertices, file's unit, faces, and what says in which line a face stands.

    Raises
    ------
    InputError
        The file ends early, or a row cannot be read (with its line).
    """
    rows = Rows.of(data[header.start :], where, header.lines + 1)
    start = 0
    points: Floats | None = None
    for element in header.elements:
        if element.name == "vertex" and points is None:
            points = _points(rows, start, element)
        elif element.name == "face":
            first = start
            polygons = _polygons(rows, start, element)
        start += element.count
    assert points is not None
    return points, polygons, lambda face: rows.place(first + face).rpartition(", ")[2]


def _points(rows: Rows, start: int, element: Element) -> Floats:
    names = [each.name for each in element.properties]
    table = rows.numbers_of(start, element.count, len(names), "a vertex")
    return table[:, [names.index(axis) for axis in "xyz"]]


def _polygons(rows: Rows, start: int, element: Element) -> Polygons:
    corners: list[int] = []
    counts: list[int] = []
    wanted = corner_list(element)
    for number, row in enumerate(rows.some(start, element.count, "a face")):
        words, at, named = row.split(None, _MOST_WORDS), 0, 0
        try:
            for each in element.properties:
                held = whole(words[at]) if each.length else 1
                if held > MOST_CORNERS:
                    raise rows.unread(start + number, f"a list has more than {MOST_CORNERS:,} entries")
                at += bool(each.length)
                if each is wanted:
                    named = held
                    corners += [whole(word) for word in words[at : at + held]]
                at += held
        except (ValueError, IndexError):
            raise rows.unread(start + number, "a face cannot be read") from None
        if named < 3 or at > len(words):
            raise rows.unread(start + number, "a face has fewer corners than three, or than it says")
        counts.append(named)
    return Polygons(np.array(corners, dtype=np.intp), np.array(counts, dtype=np.intp))
