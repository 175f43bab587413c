"""Inserts and voids among themselves: what is left to each once later pieces have taken their space."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from meshlure import tolerances
from meshlure.bait.pieces import MeshPiece, Role
from meshlure.findings import Finding, Level
from meshlure.geometry.moments import solid_moments
from meshlure.geometry.solids import Solid
from meshlure.geometry.surface import Floats


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


@dataclass(frozen=True, eq=False)
class Filling:
    """Everything inside a bait that is not the body's own material.

    Attributes
    ----------
    solids : dict of Solid
        By insert name: the space that is left to it.
    spaces : tuple of Space
        Voids and cavities, less all that is solid in them.
    findings : tuple of Finding
    """

    solids: dict[str, Solid]
    spaces: tuple[Space, ...]
    findings: tuple[Finding, ...]

    def everything(self) -> Solid | None:
        """Return the joined space of all inserts and hollows, None where there are none."""
        every = [*self.solids.values(), *(space.solid for space in self.spaces)]
        return every[0].joined(*every[1:]) if every else None

    def flooded(self) -> Solid | None:
        """Return the joined flooded hollows, None where nothing floods."""
        wet = [space.solid for space in self.spaces if space.flooded and not space.solid.empty]
        return wet[0].joined(*wet[1:]) if wet else None


def place(solid: Solid) -> tuple[float, float, float]:
    """Return the centroid of a solid, m."""
    x, y, z = (float(value) for value in solid_moments(solid.surface()).centre)
    return (x, y, z)


def millimetres(point: Sequence[float] | Floats) -> str:
    """Return a mesh point in mm as text for a message."""
    return ", ".join(f"{value * 1e3:.1f}" for value in point)


def cubic(volume: float) -> str:
    """Return a volume as text for a message: cm3, or mm3 where it is small."""
    return f"{volume * 1e6:.2f} cm3" if volume >= 1e-7 else f"{volume * 1e9:.3g} mm3"


def fill(body: MeshPiece, pieces: Sequence[MeshPiece]) -> Filling:
    """Return what is left to each insert and hollow of a bait.

    Parameters
    ----------
    body : MeshPiece
        For its own cavities.
    pieces : sequence of MeshPiece
        Inserts and voids in the bait file's order.

    Notes
    -----
    Two solid inserts may share space only where the later one says so. A solid in a hollow is solid whatever the
    order; of two hollows the later one takes the shared space, and a flooded one floods a sealed one it opens into.
    """
    findings: list[Finding] = []
    drawn = {piece.name: _solid(piece) for piece in pieces}
    inserts = [piece for piece in pieces if piece.role is Role.INSERT]
    left = {piece.name: drawn[piece.name] for piece in inserts}
    for number, later in enumerate(inserts):
        for earlier in inserts[:number]:
            shared = _shared(earlier, later, drawn)
            if shared is None:
                continue
            if earlier.name in later.replaces:
                left[earlier.name] = left[earlier.name].less(drawn[later.name])
            else:
                findings.append(_unsaid(earlier, later, shared))
    hollows = [
        Space(f"{owner.name} cavity{'' if len(owner.cavities) == 1 else f' {number + 1}'}", owner.name, Solid.of(cavity),
              owner.cavities_flooded, 0.0)
        for owner in (body, *pieces) for number, cavity in enumerate(owner.cavities)
    ]
    hollows += [Space(p.name, None, drawn[p.name], p.flooded, 0.0) for p in pieces if p.role is Role.VOID]
    spaces = []
    for number, space in enumerate(hollows):
        later_spaces = [other.solid for other in hollows[number + 1 :]]
        solid = space.solid.less(*left.values(), *later_spaces)
        spaces.append(Space(space.name, space.owner, solid, space.flooded, space.solid.volume))
        findings += [_opens(space, other) for other in hollows if space.flooded and not other.flooded and _open(space, other)]
    return Filling(left, tuple(spaces), tuple(findings))


def _solid(piece: MeshPiece) -> Solid:
    solid = Solid.of(piece.surface)
    return solid.less(*(Solid.of(cavity) for cavity in piece.cavities)) if piece.cavities else solid


def _shared(earlier: MeshPiece, later: MeshPiece, drawn: dict[str, Solid]) -> Solid | None:
    a, b = earlier.surface.bounds, later.surface.bounds
    if (np.maximum(a[0], b[0]) > np.minimum(a[1], b[1])).any():
        return None
    shared = drawn[earlier.name].met(drawn[later.name])
    least = min(drawn[earlier.name].volume, drawn[later.name].volume)
    return shared if shared.volume > tolerances.VOLUME_SHARE * least else None


def _unsaid(earlier: MeshPiece, later: MeshPiece, shared: Solid) -> Finding:
    where = place(shared)
    return Finding(
        code="inserts-overlap",
        level=Level.FAULT,
        piece=later.name,
        message=f"'{later.name}' and '{earlier.name}' share {cubic(shared.volume)} at {millimetres(where)} mm, "
        "so it is undefined which of them weighs there",
        where=(where,),
        advice=f"move them apart in CAD, or say replaces = [\"{earlier.name}\"] beside '{later.name}' if it takes that space",
        stops=True,
    )


def _open(flooded: Space, sealed: Space) -> bool:
    return flooded.solid.met(sealed.solid).volume > tolerances.VOLUME_SHARE * min(flooded.solid.volume, sealed.solid.volume)


def _opens(flooded: Space, sealed: Space) -> Finding:
    where = place(flooded.solid.met(sealed.solid))
    return Finding(
        code="sealed-void-floods",
        level=Level.FAULT,
        piece=sealed.name,
        message=f"'{sealed.name}' is called sealed, but opens into the flooded '{flooded.name}' at {millimetres(where)} mm",
        where=(where,),
        advice="draw a wall between them, or call both flooded",
    )
