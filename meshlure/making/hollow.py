"""The body as a shell: its hollow by a true inward offset, drained where the maker wants holes."""

from __future__ import annotations

import re
from collections.abc import Sequence
from dataclasses import dataclass, replace
from typing import Final

import numpy as np

from meshlure import tolerances
from meshlure.bait.meshpiece import shape, solid_of
from meshlure.bait.pieces import Bait, MeshPiece, Role
from meshlure.bait.refusals import refuse
from meshlure.errors import Fault, InputError
from meshlure.geometry.clearance import nearest
from meshlure.geometry.cylinder import Cylinder
from meshlure.geometry.field import Field, pitch_for
from meshlure.geometry.inset import inset
from meshlure.geometry.shapes import rod
from meshlure.geometry.shells import winding_number
from meshlure.geometry.solids import Solid
from meshlure.geometry.soundness import examine
from meshlure.geometry.surface import Floats, Surface
from meshlure.geometry.topology import paired
from meshlure.units import quantity

WHERE: Final = "--hollow"
SUCH_AS: Final = "'wall 1.6 mm', or 'wall 1.6 mm, drain 3 mm at 12,0,-4 and 80,0,-3'"

WALLS: Final = (0.1e-3, 50e-3)
"""m. A wall outside of this is a slip of the unit."""

DRAINS: Final = (0.2e-3, 50e-3)
"""m. A hole outside of this is a slip of the unit."""

OFF_SKIN: Final = 5e-3
"""m. A drain's place farther than this off the skin is a slip of a coordinate."""

_FORM = re.compile(
    r"wall\s+(?P<wall>[^,]+?)(?:\s*,\s*drains?\s+(?P<drain>[^,]+?)\s+at\s+(?P<at>.+))?", re.IGNORECASE | re.DOTALL
)
_BEYOND = 1e-3
"""m. How far a drill begins outside the skin."""

_STEPS = np.linspace(1.0, 6.0, 51)
"""Walls that a drill goes in at most, in the steps in which its depth is found."""

_VOXELS = 400_000


@dataclass(frozen=True)
class Wish:
    """What --hollow asks for.

    Attributes
    ----------
    wall : float, m
    drain : float or None, m
        Diameter.
    places : tuple of (x, y, z), m
    """

    wall: float
    drain: float | None
    places: tuple[tuple[float, float, float], ...]


@dataclass(frozen=True, eq=False)
class Drain:
    """A hole through the shell.

    Attributes
    ----------
    hole : Cylinder
        From outside the skin into the hollow; its axis points inward.
    at : (3,) array, m
        Where it goes through the skin.
    """

    hole: Cylinder
    at: Floats


@dataclass(frozen=True, eq=False)
class Hollow:
    """A body made a shell.

    Attributes
    ----------
    wall : float, m
    whole : Solid
        The body as it was.
    inside : tuple of Solid
        Its hollows, the largest first.
    drains : tuple of Drain
    """

    wall: float
    whole: Solid
    inside: tuple[Solid, ...]
    drains: tuple[Drain, ...]

    @property
    def sealed(self) -> Solid:
        """The shell without drains."""
        return self.whole.less(*self.inside)

    @property
    def body(self) -> Solid:
        """The shell as it is made."""
        holes = [Solid.of(rod(drain.hole)) for drain in self.drains]
        return self.whole.less(*self.inside, *holes)


def read_wish(text: str, metres: float) -> Wish:
    """Return what the words of --hollow ask for.

    Parameters
    ----------
    text : str
    metres : float
        The bait file's unit of coordinates.

    Raises
    ------
    InputError
        Where they cannot be read.
    """
    found = _FORM.fullmatch(text.strip())
    if found is None:
        raise InputError(Fault("the hollow cannot be read", WHERE, text[:80], SUCH_AS, "write it like that"))
    wall = quantity(found["wall"], "length", f"{WHERE} wall", positive=True, least=WALLS[0], most=WALLS[1])
    if found["drain"] is None:
        return Wish(wall, None, ())
    drain = quantity(found["drain"], "length", f"{WHERE} drain", positive=True, least=DRAINS[0], most=DRAINS[1])
    words = re.split(r"\s+and\s+", found["at"].strip(), flags=re.IGNORECASE)
    return Wish(wall, drain, tuple(_point(word, metres) for word in words))


def hollow(bait: Bait, wish: Wish) -> Hollow:
    """Return a bait's body as a shell.

    Raises
    ------
    InputError
        Where the wall leaves nothing hollow, where it would take the walls of a chamber or void, or where a drain
        does not lead through it.
    """
    if bait.plan.body.printed is not None:
        raise InputError(
            Fault(
                "a body that is printed with walls and infill is not hollowed a second time",
                "body.printed",
                "",
                "density or material",
                "state the density of the printed wall itself, and leave the infill to --hollow",
            )
        )
    whole = solid_of(bait.body.surface, bait.body.name)
    if bait.body.cavities:
        whole = whole.less(*(Solid.of(cavity) for cavity in bait.body.cavities))
    skin = whole.surface()
    inside = tuple(Solid.of(part) for part in inset(skin, wish.wall))
    if not inside:
        depth = Field.of(skin, pitch_for(skin, _VOXELS)).values.max()
        raise InputError(
            Fault(
                "with this wall nothing of the body is hollow",
                WHERE,
                f"wall {wish.wall * 1e3:g} mm",
                f"less than about {depth * 1e3:.2g} mm, the half of its greatest thickness",
                "take a thinner wall",
            )
        )
    _check_voids(bait, inside)
    drains = _drains(bait.body.surface, inside, wish)
    return Hollow(wish.wall, whole, inside, drains)


def _point(text: str, metres: float) -> tuple[float, float, float]:
    try:
        x, y, z = (float(number) * metres for number in text.split(","))
    except ValueError:
        x = y = z = np.nan
    if not np.isfinite([x, y, z]).all():
        raise InputError(
            Fault("the drain's place is no point", WHERE, text[:60], "three numbers such as 12,0,-4", "correct it")
        )
    return x, y, z


def _check_voids(bait: Bait, inside: Sequence[Solid]) -> None:
    """Refuse to hollow out what lies round a void: a chamber would have no walls left."""
    faults = []
    for piece in bait.pieces:
        if piece.role is not Role.VOID:
            continue
        own = solid_of(piece.surface, piece.name)
        if any(own.met(part).volume > tolerances.VOLUME_SHARE * own.volume for part in inside):
            faults.append(
                Fault(
                    f"hollowing the body would take the walls of '{piece.name}'",
                    f"insert '{piece.name}'",
                    "a void inside the hollow",
                    "voids that lie in the shell",
                    "leave the void out, or the hollow",
                )
            )
    if faults:
        raise InputError(faults)


def _drains(skin: Surface, inside: Sequence[Solid], wish: Wish) -> tuple[Drain, ...]:
    found, faults = [], []
    hollows = [part.surface() for part in inside]
    for place in wish.places:
        assert wish.drain is not None
        drain = _drain(skin, hollows, np.array(place), wish)
        if isinstance(drain, Fault):
            faults.append(drain)
        else:
            found.append(drain)
    if faults:
        raise InputError(faults)
    return tuple(found)


def _drain(skin: Surface, hollows: Sequence[Surface], place: Floats, wish: Wish) -> Drain | Fault:
    """A hole from the place of the skin nearest to a point, along the skin's normal there, into a hollow."""
    assert wish.drain is not None
    shown = f"drain at {', '.join(f'{value * 1e3:g}' for value in place)} mm"
    on = nearest(skin, place[None])
    at, off = on.place[0], float(on.distance[0])
    if off > OFF_SKIN:
        allowed = f"within {OFF_SKIN * 1e3:g} mm of it"
        return Fault(f"the drain's place lies {off * 1e3:.1f} mm off the skin", WHERE, shown, allowed, "correct it")
    inward = -_normal(skin, at)
    radius = wish.drain / 2
    across = Cylinder(at, inward, wish.wall, radius).across
    rim = np.concatenate([np.zeros((1, 3)), across, -across]) * radius
    for share in _STEPS:
        deep = at + share * wish.wall * inward
        if all(any(winding_number(part, deep + off_axis) > 0.5 for part in hollows) for off_axis in rim):
            length = share * wish.wall + _BEYOND
            return Drain(Cylinder(at + inward * (length / 2 - _BEYOND), inward, length, radius), at)
    return Fault(
        "the drain does not come out in the hollow",
        WHERE,
        shown,
        "a place under which the body is hollow, as wide as the drain",
        "move it to where the body is thicker, or take a smaller drain or a thinner wall",
    )


def _normal(skin: Surface, at: Floats) -> Floats:
    """Outward unit normal of the skin about a place: of all faces that reach to it, by their areas."""
    corners = skin.corners
    middle = corners.mean(axis=1)
    reach = np.linalg.norm(corners - middle[:, None], axis=2).max(axis=1)
    near = np.flatnonzero(np.linalg.norm(middle - at, axis=1) <= reach * (1 + 1e-9))
    touching = [int(n) for n in near if nearest(_one(skin, int(n)), at[None]).distance[0] < 1e-9]
    total = skin.double_areas[touching].sum(axis=0)
    return np.asarray(total / np.linalg.norm(total))


def _one(skin: Surface, number: int) -> Surface:
    return Surface(skin.vertices[skin.faces[number]], np.array([[0, 1, 2]]))


def closed(bait: Bait, made: Hollow) -> Bait:
    """Return the bait with its hollow full of air, whatever drains it has: a void piece for each part of it."""
    names = {piece.name for piece in bait.pieces}
    hollows = []
    for number, part in enumerate(made.inside, 1):
        surface = part.surface()
        name = f"hollow {number}"
        while name in names:
            name += "'"
        hollows.append(MeshPiece(name, Role.VOID, surface, paired(surface), (surface,)))
    return replace(bait, pieces=(*bait.pieces, *hollows))


def shelled(bait: Bait, made: Hollow) -> Bait:
    """Return the bait with the shell for its body as it is made, drains and all.

    Raises
    ------
    InputError
        Where the shell is no sound solid.
    """
    sound = examine(made.body.surface(), bait.body.name)
    refuse(sound.findings, {})
    own = shape(sound, bait.body.name)
    body = replace(
        bait.body,
        surface=own.outer,
        pairs=own.pairs,
        shells=own.shells,
        cavities=own.cavities,
        deficit=own.deficit,
        skin_deficit=own.skin_deficit,
    )
    return replace(bait, body=body)
