"""The meshes of a balanced bait: the body with the room cut out of it, the ballast, the plug, the two halves."""

from __future__ import annotations

from dataclasses import dataclass

from meshlure.bait.meshpiece import solid_of
from meshlure.errors import Fault, InputError
from meshlure.geometry.cylinder import Cylinder
from meshlure.geometry.shapes import rod
from meshlure.geometry.solids import Solid
from meshlure.geometry.surface import Surface
from meshlure.making.balance.ballast import UNCUT, Ballast
from meshlure.making.balance.ground import Ground
from meshlure.making.chamber.opening import TIGHT


@dataclass(frozen=True, eq=False)
class Cut:
    """What is made of a body for its ballast.

    Attributes
    ----------
    body : Solid
        Cavities and the room cut out.
    ballast : tuple of Surface
    plug : Solid or None
        Closes a hole drilled from the belly, flush with the skin, and a hair larger than the hole.
    drilled : float, m3
        What the hole below the room takes from the body.
    """

    body: Solid
    ballast: tuple[Surface, ...]
    plug: Solid | None = None
    drilled: float = 0.0


def cut(ground: Ground, ballast: Ballast | None) -> Cut:
    """Return the meshes for ballast in its place; without any, the body as it is drawn.

    Raises
    ------
    InputError
        Where the hole from the belly goes through the skin more than once.
    """
    body = ground.bait.body
    whole = solid_of(body.surface, body.name)
    taken = [Solid.of(cavity) for cavity in body.cavities]
    if ballast is None:
        return Cut(whole.less(*taken) if taken else whole, ())
    hole = ballast.drill(ground.lowest)
    if hole is None:
        taken += [Solid.of(surface) for surface in ballast.rooms() if ballast.kind.pocket != UNCUT]
        return Cut(whole.less(*taken) if taken else whole, ballast.surfaces())
    drilled = whole.met(Solid.of(rod(hole))).volume
    # As for a chamber the plug is a hair larger than its hole: else the two would leave a slit between them.
    plug = _plug(whole.met(Solid.of(rod(hole.grown(TIGHT, 0.0)))))
    return Cut(whole.less(*taken, Solid.of(rod(_bore(ballast, hole)))), ballast.surfaces(), plug, drilled)


def _bore(ballast: Ballast, hole: Cylinder) -> Cylinder:
    """Room and hole as one: two that meet face to face could leave a skin between them."""
    (room,) = ballast.room()
    assert isinstance(room, Cylinder)
    return Cylinder((room.ends[0] + hole.ends[1]) / 2, hole.axis, room.length + hole.length, hole.radius)


def _plug(made: Solid) -> Solid:
    count = len(made.parts())
    if count != 1:
        raise InputError(
            Fault(
                "the hole from the belly goes through the skin more than once",
                "ballast.pocket",
                f"{count} pieces of body below the ballast",
                "one",
                "choose pocket = 'embedded', or another stretch with between",
            )
        )
    return made
