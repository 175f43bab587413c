"""The pieces to print: boards that carry half of the plug each, and the frame that is put on them for the pour."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from functools import cached_property
from typing import Final

import numpy as np

from meshlure.geometry.solids import Solid
from meshlure.geometry.surface import Floats, Surface
from meshlure.making.mould.bench import FLIP
from meshlure.making.mould.box import Box
from meshlure.making.mould.keys import Keys
from meshlure.making.mould.lathe import block

FRAME_WALL: Final = 3e-3
"""m. A printed wall that holds the rubber's weight without bulging: common practice, no source."""

GROOVE: Final = 2e-3
"""m deep, in the boards, for the frame to stand in; half of a thinner board."""

SLIDING: Final = 0.2e-3
"""m on each side between frame and groove, which print 0.2 to 0.3 mm apart to slide: common practice, no source."""

RIM: Final = 3e-3
"""m of board outside the frame."""

FREEBOARD: Final = 2e-3
"""m of frame above the rubber."""

UP: Final = np.array([0.0, 0.0, 1.0])


FRAME: Final = "frame"
"""Name of the walls of the box."""


@dataclass(frozen=True, eq=False)
class Printed:
    """One piece to print, lying on the printer's bed.

    Attributes
    ----------
    name : str
        Of the piece; its file's, without the suffix.
    solid : Solid
        In the file's own coordinates, the bed at z = 0.
    turn : (3, 3) array, shift : (3,) array, m
        A place p of the bench lies at ``turn p + shift`` in the file.
    """

    name: str
    solid: Solid
    turn: Floats
    shift: Floats

    @property
    def size(self) -> Floats:
        """Extent along x, y and z, (3,) array, m."""
        return np.asarray(np.ptp(self.solid.bounds, axis=0))

    def on_bench(self, surface: Surface) -> Surface:
        """Return a surface of the file's coordinates on the bench."""
        return surface.moved(shift=-self.shift).moved(rotation=self.turn.T)


@dataclass(frozen=True, eq=False)
class Halves:
    """What stands on the boards, before it is joined to them, all on the bench.

    Attributes
    ----------
    proud : Solid
        The plug with all runners, whole.
    keys : Keys
    box : Box
    board : float, m
        Thickness.
    wall : float, m
        Rubber over the plug.
    names : tuple of str
        Of the boards: two, or one for a mould in one piece.
    """

    proud: Solid
    keys: Keys
    box: Box
    board: float
    wall: float
    names: tuple[str, ...]

    @property
    def groove(self) -> float:
        """Depth of the groove, m."""
        return min(GROOVE, self.board / 2)

    @cached_property
    def standing(self) -> tuple[Solid, ...]:
        """What stands above each board's face, keys left out."""
        above, below = self.proud.split(UP, 0.0)
        return (above, below)[: len(self.names)]

    @property
    def fill(self) -> tuple[float, ...]:
        """Height of the rubber over each board's face, m."""
        low, high = self.proud.bounds[:, 2]
        return tuple(float(reach) + self.wall for reach in (high, -low))[: len(self.names)]

    @property
    def rubber(self) -> tuple[float, ...]:
        """Volume of rubber over each board, m3: the frame's inside up to the fill, less what stands in it."""
        inside = float(np.prod(self.box.size + 2 * SLIDING))
        bumps = sum(_above(self.keys.bump(number, 0.5e-3)) for number in range(len(self.keys.places)))
        dimples = sum(_above(self.keys.dimple(number, 0.5e-3)) for number in range(len(self.keys.places)))
        added = (-bumps, dimples)
        return tuple(
            inside * fill - standing.volume + own
            for fill, standing, own in zip(self.fill, self.standing, added, strict=False)
        )

    def printed(self) -> tuple[Printed, ...]:
        """Return the boards and the frame."""
        boards = [self._board(number) for number in range(len(self.names))]
        return (*boards, self._frame())

    def _board(self, number: int) -> Printed:
        way = 1.0 if number == 0 else -1.0
        outer = FRAME_WALL + 2 * SLIDING + RIM
        low, high = self.box.low - outer, self.box.high + outer
        ends = sorted((0.0, -way * self.board))
        slab = Solid.of(block((*low, ends[0]), (*high, ends[1])))
        # What stands on the board reaches half-way into it, so that no two faces lie in each other.
        sink = self.board / 2
        kept = self.proud.split(way * UP, -sink)[0]
        bumps = [self.keys.bump(k, sink) for k in range(len(self.keys.places))] if number == 0 else []
        cut = [self._channel(way)]
        if number == 1:
            cut += [self.keys.dimple(k, 0.5e-3) for k in range(len(self.keys.places))]
        whole = slab.joined(kept, *bumps).less(*cut)
        turn = np.eye(3) if number == 0 else FLIP
        shift = np.array([0.0, 0.0, self.board])
        return Printed(self.names[number], _moved(whole, turn, shift), turn, shift)

    def _channel(self, way: float) -> Solid:
        deep = sorted((way * FREEBOARD, -way * self.groove))
        outer = FRAME_WALL + 2 * SLIDING
        ring = Solid.of(block((*(self.box.low - outer), deep[0]), (*(self.box.high + outer), deep[1])))
        inner = Solid.of(block((*self.box.low, deep[0] - GROOVE), (*self.box.high, deep[1] + GROOVE)))
        return ring.less(inner)

    def _frame(self) -> Printed:
        height = self.groove + max(self.fill) + FREEBOARD
        low, high = self.box.low - SLIDING, self.box.high + SLIDING
        outer = Solid.of(block((*(low - FRAME_WALL), 0.0), (*(high + FRAME_WALL), height)))
        inner = Solid.of(block((*low, -GROOVE), (*high, height + GROOVE)))
        shift = np.array([0.0, 0.0, self.groove])
        return Printed(FRAME, outer.less(inner), np.eye(3), shift)


def beside(pieces: Sequence[tuple[str, Surface]], gap: float = 10e-3) -> list[tuple[str, Surface]]:
    """Return pieces in a row along y, ``gap`` (m) apart, so that a package shows them side by side."""
    placed, at = [], 0.0
    for name, surface in pieces:
        low, high = surface.bounds
        placed.append((name, surface.moved(shift=np.array([-low[0], at - low[1], -low[2]]))))
        at += float(high[1] - low[1]) + gap
    return placed


def _moved(solid: Solid, turn: Floats, shift: Floats) -> Solid:
    return Solid.of(solid.surface().moved(rotation=turn, shift=shift))


def _above(solid: Solid) -> float:
    return solid.split(UP, 0.0)[0].volume
