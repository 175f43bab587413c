"""The meshes of a chambered bait: the body with its bore, the hollow, the tube, the plug, the balls at either end."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

import numpy as np

from meshlure.bait.chambers import ENDS
from meshlure.bait.meshpiece import solid_of
from meshlure.bait.pieces import Bait
from meshlure.geometry.shapes import ball
from meshlure.geometry.solids import Solid
from meshlure.geometry.surface import Surface
from meshlure.making.chamber.barrel import barrel, pace, sleeve
from meshlure.making.chamber.opening import hole
from meshlure.making.chamber.option import Option


@dataclass(frozen=True, eq=False)
class Pieces:
    """What is made for a chamber.

    Attributes
    ----------
    body : Solid
        With bore and opening cut.
    hollow : Surface
        What the balls run in.
    tube : Surface or None
    plug : Solid or None
    balls : mapping of Surface
        All balls at either end.
    """

    body: Solid
    hollow: Surface
    tube: Surface | None
    plug: Solid | None
    balls: Mapping[str, Surface]


def pieces(bait: Bait, option: Option) -> Pieces:
    """Return the meshes for a chamber in a bait's body."""
    whole = solid_of(bait.body.surface, bait.body.name)
    cut = option.bore.cut
    if option.opening is None:
        taken, plug = Solid.of(barrel(cut)), None
    else:
        taken, plug = hole(whole, cut, option.opening)
    body = whole.less(*(Solid.of(cavity) for cavity in bait.body.cavities), taken)
    apart, hollow = pace(cut.radius), option.hollow
    tube = None if option.lining is None else sleeve(cut, hollow.radius, apart)
    return Pieces(body, barrel(hollow, apart=apart), tube, plug, {end: _balls(option, end) for end in ENDS})


def _balls(option: Option, end: str) -> Surface:
    meshes = [ball(centre, option.choice.diameter) for centre in option.row.places[end]]
    starts = np.cumsum([0, *(len(mesh.vertices) for mesh in meshes)])
    return Surface(
        np.concatenate([mesh.vertices for mesh in meshes]),
        np.concatenate([mesh.faces + start for mesh, start in zip(meshes, starts, strict=False)]),
    )
