"""The hole that balls go in by: drilled on from an end of the bore, or up from the belly, and its plug."""

from __future__ import annotations

from dataclasses import dataclass, replace
from typing import Final

import numpy as np

from meshlure.geometry.cylinder import Cylinder
from meshlure.geometry.shells import winding_number
from meshlure.geometry.solids import Solid
from meshlure.geometry.standoff import TOLERANCE, cylinder_standoff
from meshlure.geometry.surface import Floats
from meshlure.making.chamber.ahead import ahead
from meshlure.making.chamber.barrel import barrel
from meshlure.making.chamber.bore import Bore, nearest_other
from meshlure.making.chamber.site import Site

TIGHT: Final = 10e-6
"""m by which a plug is drawn larger all round than its hole, so that the meshes close on each other however their
corners are rounded."""

_BEYOND: Final = 1e-3
"""m. How far the drill's way reaches beyond the body."""


@dataclass(frozen=True, eq=False)
class Opening:
    """A hole from the skin to the bore.

    Attributes
    ----------
    side : str
        nose, tail or belly.
    drill : Cylinder
        From the bore outward to beyond the body; its axis points outward.
    plug : float, m
        Body material that closes it at its thinnest: the plug's least length.
    """

    side: str
    drill: Cylinder
    plug: float


def at_end(site: Site, bore: Bore, side: str) -> Opening:
    """Return the hole drilled on straight from the bore's nose or tail end."""
    end = 0 if side == "nose" else 1
    outward = bore.cut.axis if side == "nose" else -bore.cut.axis
    return Opening(side, _drill(site, np.asarray(bore.cut.ends[end]), outward, bore.cut.radius), bore.ends[end])


def from_belly(site: Site, bore: Bore, wall: float, clear: float) -> Opening | None:
    """Return the hole from the belly into the bore, as near to an end of it as can be; None where none can be.

    Parameters
    ----------
    site : Site
    bore : Bore
    wall : float, m
        The plug's least length.
    clear : float, m
        The hole's least distance to other pieces.

    Notes
    -----
    As wide as the bore, against the back. Its side must stay in the body as far down as the plug has to be long.
    """
    down, radius = -site.bait.frame.back, bore.cut.radius
    for off in np.arange(radius, bore.length / 2 + radius, radius / 2):
        found = []
        for face, inward in ((bore.nose_end, -bore.cut.axis), (bore.tail_end, bore.cut.axis)):
            start = np.asarray(face + min(off, bore.length / 2) * inward)
            drill = _drill(site, start, down, radius)
            # From the underside of the bore on, where the plug begins.
            below = replace(drill, middle=start + down * (radius + wall / 2), length=wall)
            if not _hidden(site, below):
                continue
            plug = wall + ahead(site.boxes, below, 0).distance
            if plug < wall:
                continue
            if nearest_other(site, _stretch(drill, 0.0, min(plug + 2 * radius, drill.length))).distance >= clear:
                found.append(Opening("belly", drill, plug))
        if found:
            return min(found, key=lambda opening: opening.plug)
    return None


def hole(whole: Solid, bore: Cylinder, opening: Opening) -> tuple[Solid, Solid]:
    """Return what bore and opening take from a body together, and the plug that closes the opening.

    Parameters
    ----------
    whole : Solid
        The body without regard to hollows.
    bore : Cylinder
    opening : Opening

    Notes
    -----
    The drill goes as far as it must to be out of the skin; where it would come into the body again beyond, it stops
    before. The plug is what it takes from the body, a hundredth of a millimetre larger all round, flush with the skin.
    """
    drill = opening.drill
    first = _first(whole.met(Solid.of(barrel(drill))), drill)
    out = float(((first.surface().vertices - drill.middle) @ drill.axis).max()) + drill.length / 2 + _BEYOND / 20
    way = _stretch(drill, 0.0, min(out, drill.length))
    if opening.side != "belly":
        behind, before = (0.0, way.length) if opening.side == "nose" else (way.length, 0.0)
        plug = whole.met(Solid.of(barrel(replace(way, radius=way.radius + TIGHT))))
        return Solid.of(barrel(bore, behind, before)), _first(plug, drill)
    # Where the hole's side comes out of the bore's the plug would end in a knife's edge thinner than it is larger.
    edge = float(np.sqrt(4 * TIGHT * drill.radius))
    below = replace(_stretch(way, edge, way.length), radius=way.radius + TIGHT)
    room = Solid.of(barrel(bore))
    plug = whole.met(Solid.of(barrel(below))).less(room)
    return room.joined(Solid.of(barrel(way))), max(plug.parts(), key=lambda part: part.volume)


def _drill(site: Site, start: Floats, outward: Floats, radius: float) -> Cylinder:
    far = float((site.bait.body.surface.vertices @ outward).max()) - float(start @ outward) + _BEYOND
    # A slanting drill leaves the skin on its long side last.
    far += 2 * radius
    return Cylinder(start + outward * far / 2, outward, far, radius)


def _stretch(drill: Cylinder, start: float, end: float) -> Cylinder:
    middle = drill.middle + drill.axis * ((start + end) / 2 - drill.length / 2)
    return replace(drill, middle=middle, length=end - start)


def _first(solid: Solid, drill: Cylinder) -> Solid:
    """Of the parts of a solid, the one that the drill comes to first."""
    parts = [part for part in solid.parts() if part.volume > 0]
    return min(parts, key=lambda part: float((part.surface().vertices @ drill.axis).min()))


def _hidden(site: Site, cylinder: Cylinder) -> bool:
    """Whether a cylinder lies wholly under the body's skin."""
    if winding_number(site.bait.body.surface, cylinder.middle) < 0.5:
        return False
    return cylinder_standoff(site.boxes, cylinder).distance > 2 * TOLERANCE
