"""What was written, read back and held against what a mould must keep: halves, keys, one solid a board."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Final

import numpy as np

from meshlure.errors import Fault, InputError
from meshlure.geometry.clearance import nearest
from meshlure.geometry.shells import split
from meshlure.geometry.solids import Solid
from meshlure.geometry.surface import Floats, Surface
from meshlure.geometry.topology import paired
from meshlure.making.mould.boards import UP, Halves
from meshlure.making.mould.design import Mould
from meshlure.making.mould.keys import CLEARANCE
from meshlure.making.mould.lathe import turned
from meshlure.making.written import AGREES

_TOUCH: Final = 1e-12
"""m3. A key that overlaps its counterpart by less is rounding."""

_CLOSER: Final = 0.02e-3
"""m by which a key's gap may be less than its clearance, for cones are written as facets."""


@dataclass(frozen=True, eq=False)
class Checked:
    """What the files of a mould hold.

    Attributes
    ----------
    halves : tuple of float, m3
        What of the plug stands on each board.
    key_gaps : tuple of float, m
        Least distance of each key from its counterpart.
    """

    halves: tuple[float, ...]
    key_gaps: tuple[float, ...]


def check(mould: Mould, written: Mapping[str, Surface]) -> Checked:
    """Return what a mould's files hold.

    Parameters
    ----------
    mould : Mould
    written : mapping of Surface
        By the piece's name, as read back; each closed.

    Raises
    ------
    InputError
        Where a piece is not one connected solid, the halves do not add up to the plug within 0.01%, or a key does not
        mate.
    """
    if mould.halves is None:
        return Checked((), ())
    for piece in mould.pieces:
        _one_solid(piece.name, written[piece.name])
    boards = [
        Solid.of(piece.on_bench(written[piece.name])) for piece in mould.pieces if piece.name in mould.halves.names
    ]
    return Checked(_halves(mould, mould.halves, boards), _keys(mould.halves, boards))


def _one_solid(name: str, surface: Surface) -> None:
    shells = split(surface, paired(surface))
    if len(shells) != 1 or shells[0].volume <= 0:
        raise InputError(
            Fault(
                what="the piece is not one connected solid",
                where=name,
                found=f"{len(shells)} shells",
                allowed="one that looks outwards",
                next_step="a part of the body or of an insert floats off the parting plane, or closes off a hollow: "
                "join it to the rest in CAD, or name another pull",
            )
        )


def _halves(mould: Mould, halves: Halves, boards: list[Solid]) -> tuple[float, ...]:
    """What of the plug stands on each board, m3: what stands there less runners and keys."""
    runners = halves.proud.less(mould.plug.whole)
    found = []
    for number, board in enumerate(boards):
        way = 1.0 if number == 0 else -1.0
        stands = board.split(way * UP, 0.0)[0].volume
        others = runners.split(way * UP, 0.0)[0].volume
        if number == 0:
            others += sum(_above(halves, k) for k in range(len(halves.keys.places)))
        found.append(stands - others)
    promised = mould.plug.whole.volume
    if abs(sum(found) - promised) > AGREES * promised:
        raise InputError(
            Fault(
                what="the boards written do not carry the whole plug",
                where=" and ".join(halves.names),
                found=f"{sum(found) * 1e9:.6g} mm3",
                allowed=f"{promised * 1e9:.6g} mm3 within {AGREES:.2%}",
                next_step="move the inserts' skins a little off the body's, or draw the body's faces off the plane",
            )
        )
    return tuple(found)


def _above(halves: Halves, key: int) -> float:
    return halves.keys.bump(key, halves.board / 2).split(UP, 0.0)[0].volume


def _keys(halves: Halves, boards: list[Solid]) -> tuple[float, ...]:
    """Gap between each key on the first board and what the second's dimple makes, m."""
    keys = halves.keys
    gaps = []
    for key, place in enumerate(keys.places):
        bump = boards[0].met(_probe(place, keys.diameter, 2 * keys.height))
        # The rubber fills the dimple as far as the board leaves it room.
        room = _probe(place, keys.diameter, keys.height)
        counterpart = room.less(boards[1])
        over = counterpart.less(bump).volume
        gap = _gap(bump, counterpart, keys.height)
        if over > _TOUCH or gap < CLEARANCE - _CLOSER:
            raise InputError(
                Fault(
                    what="a key does not mate with its counterpart",
                    where=f"key {key + 1} of {halves.names[0]} and {halves.names[1]}",
                    found=f"{over * 1e9:.3g} mm3 of overlap, {gap * 1e3:.3g} mm of gap",
                    allowed=f"no overlap, a gap of {CLEARANCE * 1e3:g} mm",
                    next_step="ask for fewer keys or a thicker board",
                )
            )
        gaps.append(gap)
    return tuple(gaps)


def _probe(place: Floats, diameter: float, height: float) -> Solid:
    """Room round a key above the plane."""
    return Solid.of(turned(((0.0, diameter / 2 + 0.5e-3), (height, diameter / 2 + 0.5e-3)), np.append(place, 0.0), UP))


def _gap(bump: Solid, counterpart: Solid, height: float) -> float:
    """Least distance from the counterpart's upper rim to the key's skin, m."""
    if bump.empty or counterpart.empty:
        return 0.0
    rim = counterpart.surface().vertices
    rim = rim[rim[:, 2] > height / 2]
    return float(nearest(bump.surface(), rim).distance.min()) if len(rim) else 0.0
