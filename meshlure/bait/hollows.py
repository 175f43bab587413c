"""Hollows: voids and cavities, what of them stays hollow, and what fills or floods them."""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass

from meshlure import tolerances
from meshlure.bait.pieces import MeshPiece
from meshlure.bait.wording import middle, place_text, volume_text
from meshlure.findings import Finding, Level
from meshlure.geometry.solids import Solid


@dataclass(frozen=True, eq=False)
class Space:
    """A hollow in the bait: a void piece, or a cavity that a mesh closes off itself.

    Attributes
    ----------
    name : str
    owner : str or None
        Name of the piece whose cavity it is; None for a void piece.
    solid : Solid
        What of it is left hollow.
    flooded : bool
    drawn : float, m3
        Its volume as drawn.
    """

    name: str
    owner: str | None
    solid: Solid
    flooded: bool
    drawn: float


def cavities(pieces: Sequence[MeshPiece]) -> Iterator[Space]:
    """Yield the cavities that meshes close off themselves, as drawn."""
    for owner in pieces:
        for number, cavity in enumerate(owner.cavities, 1):
            name = f"{owner.name} cavity{'' if len(owner.cavities) == 1 else f' {number}'}"
            solid = Solid.of(cavity)
            yield Space(name, owner.name, solid, owner.cavities_flooded, solid.volume)


def left_hollow(hollows: Sequence[Space], solids: Sequence[Solid]) -> tuple[tuple[Space, ...], list[Finding]]:
    """Return hollows less the solids in them, and the faults of sealed ones that flood.

    Notes
    -----
    Of two hollows the later one takes the shared space. A sealed hollow that shares space or a stretch of wall with a
    flooded one fills with water as well.
    """
    free = [space.solid.less(*solids) if solids else space.solid for space in hollows]
    flooded, findings = [space.flooded for space in hollows], []
    reached = [number for number, wet in enumerate(flooded) if wet]
    for source in reached:
        for number, wet in enumerate(flooded):
            if not wet and _open(free[source], free[number]):
                flooded[number] = True
                reached.append(number)
                findings.append(_opens(hollows[source], hollows[number], free[source], free[number]))
    spaces = []
    for number, space in enumerate(hollows):
        later = free[number + 1 :]
        solid = free[number].less(*later) if later else free[number]
        spaces.append(Space(space.name, space.owner, solid, flooded[number], space.drawn))
    return tuple(spaces), findings


def hollow_findings(hollows: Sequence[Space], spaces: Sequence[Space], inserts: Mapping[str, Solid]) -> list[Finding]:
    """Return what is to be said of solids that lie in hollows.

    Parameters
    ----------
    hollows : sequence of Space
        As drawn.
    spaces : sequence of Space
        The same, less what is solid in them.
    inserts : mapping of Solid
        By name, what is left to each.
    """
    findings = []
    for drawn, left in zip(hollows, spaces, strict=True):
        held = {name: solid.met(drawn.solid) for name, solid in inserts.items()}
        held = {
            name: shared
            for name, shared in held.items()
            if shared.volume > tolerances.VOLUME_SHARE * min(inserts[name].volume, drawn.drawn)
        }
        if held and left.solid.volume <= tolerances.VOLUME_SHARE * drawn.drawn:
            findings.append(_filled(left, held))
        elif held and left.owner is not None:
            findings.append(_in_cavity(left, held))
    return findings


def _filled(space: Space, held: Mapping[str, Solid]) -> Finding:
    takes = "takes" if len(held) == 1 else "take"
    return Finding(
        code="hollow-filled",
        level=Level.NOTE if space.owner is not None else Level.WARNING,
        piece=space.owner or space.name,
        message=f"'{space.name}' is filled: {_names(held)} {takes} all of its {volume_text(space.drawn)}",
        where=(middle(next(iter(held.values()))),),
        advice="right where a pocket was drawn for it; a void inside an insert must come after it",
    )


def _in_cavity(space: Space, held: Mapping[str, Solid]) -> Finding:
    inside = sum(solid.volume for solid in held.values())
    does = "lies in '{}' and fills" if len(held) == 1 else "lie in '{}' and fill"
    return Finding(
        code="insert-in-cavity",
        level=Level.NOTE,
        piece=space.owner,
        message=f"{_names(held)} {does.format(space.name)} {volume_text(inside)} of its {volume_text(space.drawn)}; "
        f"{volume_text(space.solid.volume)} of {'water' if space.flooded else 'air'} stay around",
        where=tuple(middle(solid) for solid in held.values()),
        advice="where glue or resin fills the gap, draw the cavity no larger than what lies in it",
    )


def _names(held: Mapping[str, Solid]) -> str:
    return " and ".join(f"'{name}'" for name in held)


def _open(one: Solid, other: Solid) -> bool:
    """Whether two hollows share space, or a stretch of wall so that nothing is between them."""
    if one.empty or other.empty:
        return False
    if one.met(other).volume > tolerances.VOLUME_SHARE * min(one.volume, other.volume):
        return True
    return len(one.joined(other).parts()) < len(one.parts()) + len(other.parts())


def _opens(flooded: Space, sealed: Space, wet: Solid, dry: Solid) -> Finding:
    shared = wet.met(dry)
    where = middle(dry if shared.empty else shared)
    return Finding(
        code="sealed-void-floods",
        level=Level.FAULT,
        piece=sealed.name,
        message=f"'{sealed.name}' is called sealed, but opens into the flooded '{flooded.name}' at "
        f"{place_text(where)}: it is counted as full of water",
        where=(where,),
        advice="draw a wall between them, or call both flooded",
    )
