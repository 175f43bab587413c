"""An independent account of baits made of boxes along the axes: space cut into cells by all their faces.

Every cell belongs to one piece, so masses and moments are plain sums over cells; what water reaches is found by
spreading from outside from cell to cell (scipy's labelling).
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
import shapes
from numpy.typing import NDArray
from scipy.ndimage import label

from meshlure.geometry.surface import Floats, Surface

Bools = NDArray[np.bool_]


@dataclass(frozen=True)
class Block:
    """A box between two corners, in mm; density in g/cm3, None for a void."""

    low: tuple[int, int, int]
    high: tuple[int, int, int]
    density: float | None = None
    flooded: bool = False

    @property
    def surface(self) -> Surface:
        """Its skin, m."""
        low, high = np.array(self.low) * 1e-3, np.array(self.high) * 1e-3
        return shapes.box(tuple(high - low), tuple((low + high) / 2))


@dataclass(frozen=True, eq=False)
class Account:
    """Mass, kg, and displaced volume, m3, each with its first moment about the origin; volumes of the pieces, m3."""

    mass: float
    moment: Floats
    displaced: float
    lift: Floats
    volumes: list[float]
    body: float


def account(body: Block, blocks: Sequence[Block]) -> Account:
    """Sum over cells; a later solid replaces an earlier one, a void is hollow where nothing solid is in it."""
    every = [body, *blocks]
    edges = [np.unique([(b.low[k], b.high[k]) for b in every]).astype(float) for k in range(3)]
    edges = [np.concatenate([[e[0] - 1], e, [e[-1] + 1]]) for e in edges]
    middles = [(e[:-1] + e[1:]) / 2 * 1e-3 for e in edges]
    sizes = [np.diff(e) * 1e-3 for e in edges]
    volume = sizes[0][:, None, None] * sizes[1][:, None] * sizes[2]
    place = np.stack(np.meshgrid(*middles, indexing="ij"), axis=-1)

    def holds(block: Block) -> Bools:
        low, high = np.array(block.low) * 1e-3, np.array(block.high) * 1e-3
        return np.asarray(((place > low) & (place < high)).all(axis=-1))

    owner = np.where(holds(body), 0, -1)
    solid = np.zeros(owner.shape, dtype=np.bool_)
    for number, block in enumerate(blocks, 1):
        if block.density is not None:
            owner[holds(block)] = number
            solid |= holds(block)
    flooded = _flooded([holds(b) & ~solid for b in blocks], [b.density is None for b in blocks], blocks)
    for number, block in enumerate(blocks, 1):
        if block.density is None:
            owner[holds(block) & ~solid] = number
    density = np.array([body.density, *(b.density or 0.0 for b in blocks), 0.0], dtype=float) * 1e3
    hollow = [False, *(b.density is None for b in blocks), True]
    dense = np.asarray(hollow)[owner]
    water = _reached(dense)
    displacing = ~water & ~flooded
    mass = density[owner] * volume
    return Account(
        float(mass.sum()),
        np.tensordot(mass, place, 3),
        float(volume[displacing].sum()),
        np.asarray((volume[displacing][:, None] * place[displacing]).sum(axis=0)),
        [float(volume[owner == number].sum()) for number in range(1, len(every))],
        float(volume[owner == 0].sum()),
    )


def _reached(hollow: Bools) -> Bools:
    """Cells that water reaches from outside through hollow ones."""
    labels, _ = label(hollow)
    return np.asarray(hollow & (labels == labels[0, 0, 0]))


def _flooded(free: Sequence[Bools], void: Sequence[bool], blocks: Sequence[Block]) -> Bools:
    """Cells of voids that flood: those called so, and those that share a cell or a face with one that floods."""
    wet = [is_void and block.flooded for is_void, block in zip(void, blocks, strict=True)]
    cells = np.zeros(free[0].shape if free else (1,), dtype=np.bool_)
    while True:
        spread = False
        for number, (mine, is_void) in enumerate(zip(free, void, strict=True)):
            if (
                is_void
                and not wet[number]
                and any(w and _meet(mine, other) for w, other in zip(wet, free, strict=True))
            ):
                wet[number] = spread = True
        if not spread:
            break
    for w, mine in zip(wet, free, strict=True):
        if w:
            cells = cells | mine
    return cells


def _meet(one: Bools, other: Bools) -> bool:
    grown = one.copy()
    for axis in range(one.ndim):
        for step in (-1, 1):
            grown |= np.roll(one, step, axis=axis)
    return bool((grown & other).any())
