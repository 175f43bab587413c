"""The meshes of a balanced bait: the body with the room cut out of it, the ballast, the plug, the two halves."""

from __future__ import annotations

from dataclasses import dataclass

from meshlure.bait.meshpiece import solid_of
from meshlure.bait.pieces import Bait
from meshlure.errors import Fault, InputError
from meshlure.geometry.cylinder import Cylinder
from meshlure.geometry.shapes import rod
from meshlure.geometry.solids import Solid
from meshlure.geometry.surface import Surface
from meshlure.making.balance.ballast import FROM_BELLY, UNCUT, Ballast

_BEYOND = 1e-3
"""m. How far a drill's way reaches beyond the body."""


@dataclass(frozen=True, eq=False)
class Cut:
    """What is made of a body for its ballast.

    Attributes
    ----------
    body : Solid
        Cavities and the room cut out.
    ballast : tuple of Surface
    plug : Solid or None
        Closes a hole drilled from the belly, flush with the skin.
    """

    body: Solid
    ballast: tuple[Surface, ...]
    plug: Solid | None


def cut(bait: Bait, ballast: Ballast | None) -> Cut:
    """Return the meshes for ballast in its place; without any, the body as it is drawn.

    Raises
    ------
    InputError
        Where a hole from the belly meets no skin below the ballast.
    """
    whole = solid_of(bait.body.surface, bait.body.name)
    cavities = [Solid.of(cavity) for cavity in bait.body.cavities]
    body = whole.less(*cavities) if cavities else whole
    if ballast is None:
        return Cut(body, (), None)
    if ballast.kind.pocket == UNCUT:
        return Cut(body, ballast.surfaces(), None)
    rooms = [Solid.of(surface) for surface in ballast.rooms()]
    if ballast.kind.pocket != FROM_BELLY:
        return Cut(body.less(*rooms), ballast.surfaces(), None)
    drill = _drilled(bait, ballast)
    plug = whole.met(drill)
    if plug.empty:
        raise InputError(
            Fault("the hole from the belly meets no skin", "ballast.pocket", "", "", "choose pocket = 'embedded'")
        )
    return Cut(body.less(*rooms, drill), ballast.surfaces(), plug)


def _drilled(bait: Bait, ballast: Ballast) -> Solid:
    """The hole below the room, down to beyond the belly."""
    (room,) = ballast.room()
    assert isinstance(room, Cylinder)
    back = bait.frame.back
    bottom = room.middle - back * room.length / 2
    lowest = float((bait.body.surface.vertices @ back).min()) - _BEYOND
    length = float(bottom @ back) - lowest
    if length <= _BEYOND:
        raise InputError(
            Fault("the ballast reaches below the belly", "ballast.pocket", "", "", "choose pocket = 'embedded'")
        )
    return Solid.of(rod(Cylinder(bottom - back * length / 2, back, length, room.radius)))
