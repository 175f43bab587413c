"""A PDF taken apart with pypdf: what stands on its pages, in mm."""

from __future__ import annotations

import io
import re
from collections.abc import Iterator
from dataclasses import dataclass
from functools import cached_property
from typing import Any

import numpy as np
from pypdf import PdfReader

MM = 25.4 / 72
"""mm of a point, 1/72 inch (ISO 32000)."""
PAINTING = (b"S", b"s", b"f", b"F", b"f*", b"B", b"B*", b"b", b"b*", b"n")


@dataclass
class Path:
    """A line as a page draws it: its points, mm from the lower left corner, and the width of its pen, points."""

    points: np.ndarray
    pen: float

    @property
    def size(self) -> np.ndarray:
        return np.asarray(np.ptp(self.points, axis=0))


@dataclass
class Page:
    """What stands on a page: its size in mm, its lines and its words."""

    size: tuple[float, float]
    paths: list[Path]
    _page: Any

    @cached_property
    def text(self) -> str:
        """Its words; taken out only where they are asked for, since that takes long."""
        return str(self._page.extract_text())


def pages(pdf: bytes) -> list[Page]:
    """Return what stands on each page."""
    found = []
    for page in PdfReader(io.BytesIO(pdf)).pages:
        size = (float(page.mediabox.width) * MM, float(page.mediabox.height) * MM)
        content = page.get_contents()
        paths = list(drawn(content.get_data())) if content is not None else []
        found.append(Page(size, paths, page))
    return found


STRING = re.compile(rb"\((?:\\.|[^\\()])*\)|<[0-9A-Fa-f\s]*>", re.DOTALL)


def drawn(content: bytes) -> Iterator[Path]:
    """Follow a page's operators (ISO 32000, 8.4 and 8.5): every stretch of a path that is painted, by itself."""
    matrix, pen, stack = (1.0, 0.0, 0.0, 1.0, 0.0, 0.0), 1.0, []
    points: list[tuple[float, float]] = []
    stretches: list[list[tuple[float, float]]] = []
    numbers: list[float] = []
    for token in STRING.sub(b"()", content).split():
        if token[0] in b"+-.0123456789":
            numbers.append(float(token))
            continue
        if token == b"q":
            stack.append((matrix, pen))
        elif token == b"Q":
            matrix, pen = stack.pop()
        elif token == b"cm":
            a, b, c, d, e, f = numbers[-6:]
            p, q, r, s, t, u = matrix
            matrix = (
                *(a * p + b * r, a * q + b * s, c * p + d * r, c * q + d * s),
                *(e * p + f * r + t, e * q + f * s + u),
            )
        elif token == b"w":
            pen = numbers[-1]
        elif token in (b"m", b"l", b"c", b"re"):
            ends = [numbers[-2:]] if token != b"re" else _corners(*numbers[-4:])
            if token in (b"m", b"re"):
                points = []
                stretches.append(points)
            p, q, r, s, t, u = matrix
            points += [((x * p + y * r + t) * MM, (x * q + y * s + u) * MM) for x, y in ends]
        elif token in PAINTING:
            yield from (Path(np.array(stretch), pen) for stretch in stretches if stretch and token != b"n")
            stretches = []
        numbers = []


def _corners(x: float, y: float, wide: float, high: float) -> list[list[float]]:
    return [[x, y], [x + wide, y], [x + wide, y + high], [x, y + high]]
