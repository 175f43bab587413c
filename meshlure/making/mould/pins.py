"""Pins: seats in the rubber for wires that hold ballast in the cavity while the resin is poured."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Final

import numpy as np

from meshlure.bait.wording import place_text
from meshlure.findings import Finding, Level, Point
from meshlure.geometry.surface import Floats
from meshlure.making.mould.box import Box
from meshlure.making.mould.contour import Contour
from meshlure.making.mould.fittings import Fitting, Holding
from meshlure.making.mould.floor import Floor
from meshlure.making.mould.runners import Runner, plain

DIAMETER: Final = 1.2e-3
"""m. Ballast sits on pins of 1.0 to 1.5 mm: common practice, no source."""

_LENGTH: Final = 8e-3
"""m of a pin in the rubber."""

_LEFT: Final = 2e-3
"""m of rubber left between a pin's end and the box."""

_TWO: Final = 8e-3
"""m. Ballast longer than this is held by two pins, so that it does not tip."""

_INSIDE: Final = 1e-3


@dataclass(frozen=True, eq=False)
class Pins:
    """Seats for pins.

    Attributes
    ----------
    runners : tuple of Runner
    held : tuple of str
        For each, the piece that the pin holds.
    findings : tuple of Finding
    """

    runners: tuple[Runner, ...]
    held: tuple[str, ...]
    findings: tuple[Finding, ...]


def lay_pins(floor: Floor, box: Box, others: tuple[Runner, ...]) -> Pins:
    """Return the seats of pins for every pinned piece inside the body.

    Parameters
    ----------
    floor : Floor
    box : Box
    others : tuple of Runner
        Already laid.

    Notes
    -----
    A pin lies in the parting plane, from the piece to the nearest skin and on into the rubber. Its seat has the pin's
    own size, not the resin's, and the clearance of a seat.
    """
    made: list[Runner] = []
    held: list[str] = []
    findings: list[Finding] = []
    for fitting in floor.plug.fittings:
        if fitting.holding is not Holding.PINNED:
            continue
        own = _pins(floor, fitting, box, (*others, *made))
        if isinstance(own, Finding):
            findings.append(own)
            continue
        made += own
        held += [fitting.piece.name] * len(own)
        findings.append(_told(floor, fitting, own))
    return Pins(tuple(made), tuple(held), tuple(findings))


def _pins(floor: Floor, fitting: Fitting, box: Box, others: tuple[Runner, ...]) -> list[Runner] | Finding:
    low, high = fitting.drawn.bounds
    rings = fitting.drawn.level(0.0)
    if low[2] > 0 or high[2] < 0 or rings.area == 0:
        return _off_plane(floor, fitting)
    centre = rings.centre
    contour = floor.contour
    skin = contour.nearest(centre)
    way = skin - centre
    way = way / np.linalg.norm(way)
    across = np.array([-way[1], way[0]])
    reach = Contour(rings.rings).points @ across
    span = float(np.ptp(reach))
    steps = (-span / 4, span / 4) if span > _TWO else (0.0,)
    diameter = DIAMETER * float(np.mean(floor.plug.bench.scale.seat)) + 2 * fitting.clearance
    found: list[Runner] = []
    for step in steps:
        start = centre + step * across
        at = start + contour.way_out(start, way) * way
        length = min(_LENGTH, box.way_out(at, way) - _LEFT)
        pin = plain("pin", at, way, diameter, length, _INSIDE)
        if not floor.free(pin, (*others, *found)):
            return _no_way(floor, fitting, at)
        found.append(pin)
    return found


def _at(floor: Floor, place: Floats) -> Point:
    x, y, z = floor.plug.bench.drawn(place).tolist()
    return x, y, z


def _told(floor: Floor, fitting: Fitting, pins: list[Runner]) -> Finding:
    places = tuple(_at(floor, np.append(pin.at, 0.0)) for pin in pins)
    count = "a pin" if len(pins) == 1 else f"{len(pins)} pins"
    return Finding(
        code="pinned",
        level=Level.NOTE,
        piece=fitting.piece.name,
        message=f"'{fitting.piece.name}' is held by {count} of {DIAMETER * 1e3:g} mm, through the skin at "
        f"{' and '.join(place_text(each) for each in places)}",
        count=len(pins),
        where=places,
        advice="drill the piece for the pins, lay these into their seats in the rubber, fill the holes after casting",
    )


def _off_plane(floor: Floor, fitting: Fitting) -> Finding:
    middle = fitting.drawn.bounds.mean(axis=0)
    at = _at(floor, middle)
    return Finding(
        code="pin-off-plane",
        level=Level.WARNING,
        piece=fitting.piece.name,
        message=f"'{fitting.piece.name}' is called pinned, but lies {abs(float(middle[2])) * 1e3:.1f} mm off the "
        f"parting plane at {place_text(at)}: no pin in that plane reaches it",
        where=(at,),
        advice="draw its pin into the mesh, so that it reaches out of the body, or hold it on another piece",
    )


def _no_way(floor: Floor, fitting: Fitting, place: Floats) -> Finding:
    at = _at(floor, np.append(place, 0.0))
    return Finding(
        code="pin-blocked",
        level=Level.WARNING,
        piece=fitting.piece.name,
        message=f"no pin finds its way out from '{fitting.piece.name}' at {place_text(at)}: a seat, a runner or the "
        "body itself is in its way",
        where=(at,),
        advice="draw its pin into the mesh, so that it reaches out of the body, or move the sprue",
    )
