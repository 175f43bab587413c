"""The bodies of the rows written down from memory, as meshes with the direction that leads; greatest width 1 m."""

from __future__ import annotations

import csv
import math
from collections.abc import Callable, Iterator, Sequence
from pathlib import Path

import numpy as np
from mapbox_earcut import triangulate_float64
from numpy.typing import NDArray
from published_bodies import (
    R,
    Row,
    boxed,
    cone,
    cup,
    cylinder,
    dome,
    flipped,
    respaced,
    revolved,
    spheroid,
    teardrop,
)

from meshlure.geometry.surface import Surface

Floats = NDArray[np.float64]
Body = tuple[Surface, tuple[float, float, float]]
TABLE = Path(__file__).parent.parent / "authorities" / "drag_from_memory.csv"

LONG = 200.0
"""Length of an endless body, in widths."""

AHEAD, BROADSIDE = (-1.0, 0.0, 0.0), (0.0, -1.0, 0.0)


def remembered() -> Iterator[Row]:
    """Yield the rows of the table."""
    with TABLE.open(encoding="utf-8", newline="") as lines:
        for row in csv.DictReader(line for line in lines if not line.startswith("#")):
            shape, _, orientation = row["shape"].partition("; ")
            reynolds, source = float(row["reynolds_on_diameter"]), f"{row['source']} (memory)"
            yield Row(
                row["case"], row["family"], shape, orientation, reynolds, row["layer"], float(row["cd"]), source, False
            )


def prism(corners: Sequence[tuple[float, float]] | Floats, length: float = LONG) -> Surface:
    """Mesh of a prism along z from its section's corners (x, y), anticlockwise."""
    flat = np.asarray(corners, dtype=np.float64)
    count = len(flat)
    cap = np.asarray(triangulate_float64(flat, np.array([count], dtype=np.uint32)), dtype=np.intp).reshape(-1, 3)
    a, b, c = flat[cap].transpose(1, 0, 2)
    turned = (b - a)[:, 0] * (c - a)[:, 1] < (b - a)[:, 1] * (c - a)[:, 0]
    cap[turned] = cap[turned, ::-1]
    low, high = (np.column_stack([flat, np.full(count, z)]) for z in (0.0, length))
    here = np.arange(count)
    there = (here + 1) % count
    sides = [np.column_stack([here, there, there + count]), np.column_stack([here, there + count, here + count])]
    return Surface(np.concatenate([low, high]), np.concatenate([cap[:, ::-1], cap + count, *sides]))


def ellipse(depth: float) -> Floats:
    turn = 2 * math.pi * np.arange(128) / 128
    return np.column_stack([depth * R * np.cos(turn), R * np.sin(turn)])


def half(inner: float = 0.0) -> list[tuple[float, float]]:
    """Half a disc with its round side at x = 0, or with an inner radius half a ring."""
    turn = np.linspace(-math.pi / 2, math.pi / 2, 49)
    arcs = [[(R - r * math.cos(t), -r * math.sin(t)) for t in turn] for r in (R, inner)]
    return arcs[0] + (arcs[1][::-1] if inner else [])


def turned(surface: Surface, degrees: float) -> Surface:
    """The mesh turned about z."""
    c, s = math.cos(math.radians(degrees)), math.sin(math.radians(degrees))
    return surface.moved(np.array([[c, -s, 0], [s, c, 0], [0, 0, 1]]))


SQUARE = [(0.0, -R), (1.0, -R), (1.0, R), (0.0, R)]
TRIANGLE = [(0.0, 0.0), (math.sqrt(0.75), -R), (math.sqrt(0.75), R)]


def spun(line: tuple[Floats, Floats], leads: tuple[float, float, float] = AHEAD) -> Callable[[], Body]:
    return lambda: (revolved(respaced(line, 60)), leads)


def drawn(
    corners: Sequence[tuple[float, float]] | Floats, leads: tuple[float, float, float] = AHEAD, degrees: float = 0
) -> Callable[[], Body]:
    return lambda: (turned(prism(corners), degrees), leads)


BODIES: dict[str, Callable[[], Body]] = {
    "sphere_turb": spun(spheroid(1)),
    "pro2_turb": spun(spheroid(2)),
    "pro4_lam": spun(spheroid(4)),
    "pro8_turb": spun(spheroid(8)),
    "teardrop_rev": spun(flipped(teardrop())),
    "hemi_rev": spun(flipped(dome())),
    "cup_open": spun(flipped(cup())),
    "cup_dome": spun(cup()),
    "cone60": spun(cone(60)),
    "cylax_8": spun(cylinder(8)),
    "cube_face": lambda: (boxed(1, 1, 1), AHEAD),
    "cube_edge": lambda: (turned(boxed(1, 1, 1), 45), AHEAD),
    "plate5": lambda: (boxed(0.02, 1, 5), AHEAD),
    "cylx_3": spun(cylinder(3), BROADSIDE),
    "cylx_5": spun(cylinder(5), BROADSIDE),
    "cylx_20": spun(cylinder(20), BROADSIDE),
    **{f"circle_{layer}": drawn(ellipse(1)) for layer in ("lam", "turb")},
    **{f"ellipse{depth}_{layer}": drawn(ellipse(depth)) for depth in (2, 4, 8) for layer in ("lam", "turb")},
    "square": drawn(SQUARE),
    "square_edge": drawn(SQUARE, degrees=45),
    "strip": lambda: (boxed(0.02, 1, LONG), AHEAD),
    "half_round": drawn(half()),
    "half_flat": drawn(half(), (1.0, 0.0, 0.0)),
    "shell_round": drawn(half(R - 0.03)),
    "shell_open": drawn(half(R - 0.03), (1.0, 0.0, 0.0)),
    "wedge_apex": drawn(TRIANGLE),
    "wedge_base": drawn(TRIANGLE, (1.0, 0.0, 0.0)),
}
