"""Maps of a half, seen along its pull: how much draft where, and under what the rubber is held."""

from __future__ import annotations

from dataclasses import dataclass
from itertools import pairwise
from typing import Final

import numpy as np

from meshlure.geometry.columns import crossings
from meshlure.geometry.solids import filled
from meshlure.geometry.surface import Bools, Floats, Ints, Surface
from meshlure.making.mould.bench import FLIP
from meshlure.making.mould.draft import VERTICAL
from meshlure.making.mould.halves import HALVES

COLUMNS: Final = 240
"""Cells of the map along the half's greatest extent."""

STEPS: Final = (0.0, 1.0, 3.0, 10.0, 30.0, 90.0)
"""degrees of draft between which the map tells apart; the least that was asked for is put among them."""

_BORDER: Final = 2


@dataclass(frozen=True, eq=False)
class Region:
    """A part of a map.

    Attributes
    ----------
    low, high : float or None, rad
        Draft there; None where it is held: rubber under something that the pull would have to break off.
    rings : tuple of (n, 2) arrays, m
        Outer ones anticlockwise, holes clockwise; they follow the cells of the map.
    """

    low: float | None
    high: float | None
    rings: tuple[Floats, ...]


@dataclass(frozen=True, eq=False)
class DraftMap:
    """A half seen from the side that it is pulled to.

    Attributes
    ----------
    half : str
        A or B.
    regions : tuple of Region
        By draft, together all that the half covers; what is held comes last and lies over them.
    pitch : float, m
        Side of a cell.

    Notes
    -----
    Coordinates are x and y of the half as it lies on its board: those of the bench for A, with y turned over for B.
    """

    half: str
    regions: tuple[Region, ...]
    pitch: float


def draft_map(solid: Surface, name: str, least: float) -> DraftMap:
    """Return the map of a half.

    Parameters
    ----------
    solid : Surface
        The whole plug on the bench.
    name : str
        A or B.
    least : float, rad
        Draft that was asked for.
    """
    own = solid if name == HALVES[0] else solid.moved(rotation=FLIP)
    low, high = own.bounds[:, :2]
    pitch = float((high - low).max()) / COLUMNS
    count = np.ceil((high - low) / pitch).astype(np.intp) + 2 * _BORDER
    # Off the bounds' own lines, so that no column runs along a wall.
    origin = (low + high) / 2 - (count - 1) * (pitch / 2) + pitch * np.array([0.0137, 0.0085])
    met = crossings(own, np.append(origin, 0.0), pitch, (1, 0, 2))
    above = met.height > 0
    cell, height, face = (met.column * count[1] + met.row)[above], met.height[above], met.face[above]
    sign = met.sign[above]
    order = np.lexsort((height, cell))
    cell, face, sign = cell[order], face[order], sign[order]
    last = np.flatnonzero(np.append(cell[1:] != cell[:-1], True)) if len(cell) else np.empty(0, dtype=np.intp)
    normals = own.double_areas[face[last]]
    angle = np.arcsin(np.clip(normals[:, 2] / np.linalg.norm(normals, axis=1), -1.0, 1.0))
    covers, top = cell[last], np.clip(angle, 0.0, np.pi / 2)
    steps = np.unique(np.radians([*STEPS, np.degrees(least)]))
    regions = []
    for start, end in pairwise(steps):
        # The first step takes walls that rounding leans over.
        inside = (top > start) | (start == 0.0)
        rings = _rings(_mask(covers[inside & (top <= max(end, VERTICAL))], count), origin, pitch)
        if rings:
            regions.append(Region(float(start), float(end), rings))
    # A column holds rubber where it goes into the solid above the plane.
    held = _rings(_mask(np.unique(cell[sign > 0]), count), origin, pitch)
    if held:
        regions.append(Region(None, None, held))
    return DraftMap(name, tuple(regions), pitch)


def _mask(cells: Ints, count: Ints) -> Bools:
    mask = np.zeros(int(np.prod(count)), dtype=np.bool_)
    mask[cells] = True
    return mask.reshape(tuple(count))


def _rings(mask: Bools, origin: Floats, pitch: float) -> tuple[Floats, ...]:
    """Outlines of the cells that a mask names."""
    padded = np.pad(mask, ((0, 0), (1, 1)))
    change = np.diff(padded.astype(np.int8), axis=1)
    column, start = np.nonzero(change == 1)
    _, stop = np.nonzero(change == -1)
    x = origin[0] + (column - 0.5) * pitch
    low, high = origin[1] + (start - 0.5) * pitch, origin[1] + (stop - 0.5) * pitch
    strips = [
        np.array([[left, bottom], [left + pitch, bottom], [left + pitch, top], [left, top]])
        for left, bottom, top in zip(x, low, high, strict=True)
    ]
    return filled(strips).rings
