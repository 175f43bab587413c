"""A body in two halves, left and right, with holes for the pins that hold them in line: so its ballast can be set."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Final

import numpy as np

from meshlure.bait.pieces import Frame
from meshlure.errors import Fault, InputError
from meshlure.geometry.clearance import Boxes
from meshlure.geometry.cylinder import Cylinder
from meshlure.geometry.field import Field, pitch_for
from meshlure.geometry.shapes import rod
from meshlure.geometry.solids import Solid
from meshlure.geometry.standoff import cylinder_standoff
from meshlure.geometry.surface import Floats, Surface

PIN_DIAMETERS: Final = (3e-3, 2.5e-3, 2e-3, 1.5e-3)
"""m. Pins that are tried, the thickest first; ours."""
PIN_DEPTH: Final = 2.5e-3
"""m. How deep a pin reaches into either half; ours."""
PIN_WALL: Final = 1.0e-3
"""m. Least wall left round a pin's hole; ours."""
PINS: Final = 3
_VOXELS: Final = 200_000
_STEP: Final = 0.5e-3
"""m. Between places that are tried for a pin."""
_WITHIN: Final = 0.12
"""Share of the body's length by which a pin may stray from its place."""
_TRIED: Final = 16
_LOST: Final = 1e-7
"""Share of the body that the two halves and the holes may miss together."""


@dataclass(frozen=True, eq=False)
class Halves:
    """The two halves of a body.

    Attributes
    ----------
    left, right : Solid
        Parted along the plane through the middle of the body's width.
    pins : tuple of Cylinder
        Holes across the plane, half in either half; a pin of the body's own material fills each.
    """

    left: Solid
    right: Solid
    pins: tuple[Cylinder, ...]


def halves(body: Solid, frame: Frame, others: Sequence[Surface]) -> Halves:
    """Return a body in two halves.

    Parameters
    ----------
    body : Solid
        With its pockets.
    frame : Frame
    others : sequence of Surface
        Pieces whose room the pins must leave alone.

    Raises
    ------
    InputError
        Where no two pins have room.
    """
    skin = body.surface()
    low, high = (float(value) for value in _span(skin.vertices @ frame.side))
    plane = (low + high) / 2
    pins = _pins(skin, frame, plane, others)
    if len(pins) < 2:
        raise InputError(
            Fault(
                what="no two pins have room across the middle plane",
                where="--halves",
                found=f"{len(pins)} with a wall of {PIN_WALL * 1e3:g} mm round {PIN_DIAMETERS[-1] * 1e3:g} mm",
                allowed="two or more",
                next_step="leave --halves out and part the body in CAD, or make the body thicker",
            )
        )
    bored = body.less(*(Solid.of(rod(pin)) for pin in pins))
    reach = 2 * float(np.ptp(skin.vertices, axis=0).max())
    middle = skin.bounds.mean(axis=0)
    start = middle + (plane - float(middle @ frame.side)) * frame.side
    wide = Solid.of(_block(start, frame, reach))
    left, right = bored.met(wide), bored.less(wide)
    if abs(left.volume + right.volume - bored.volume) > _LOST * bored.volume:
        raise InputError(
            Fault("the two halves do not add up to the body", "--halves", next_step="part the body in CAD")
        )
    return Halves(left, right, tuple(pins))


def _span(values: Floats) -> tuple[float, float]:
    return float(values.min()), float(values.max())


def _block(start: Floats, frame: Frame, reach: float) -> Surface:
    """A box that holds everything on the left of the plane through a point of it."""
    axes = np.stack([frame.nose, frame.back, frame.side])
    corners = np.array([[x, y, z] for x in (-1, 1) for y in (-1, 1) for z in (0, 1)], dtype=np.float64) * reach
    faces = np.array(
        [
            *((0, 1, 3), (0, 3, 2), (4, 6, 7), (4, 7, 5)),
            *((0, 4, 5), (0, 5, 1), (2, 3, 7), (2, 7, 6)),
            *((0, 2, 6), (0, 6, 4), (1, 5, 7), (1, 7, 3)),
        ]
    )
    surface = Surface(start + corners @ axes, faces)
    handed = float(np.linalg.det(axes))
    return surface if handed > 0 else surface.turned()


def _pins(skin: Surface, frame: Frame, plane: float, others: Sequence[Surface]) -> list[Cylinder]:
    """Pins spread along the body, as thick as there is room for."""
    turn = np.stack([frame.nose, frame.side, frame.back])
    walls = Boxes.of(_together([skin, *others]))
    low, high = skin.moved(rotation=turn).bounds
    depths = Field.of(skin.moved(rotation=turn), pitch_for(skin, _VOXELS))
    nose, back = (np.arange(low[axis], high[axis], _STEP) for axis in (0, 2))
    grid = np.stack(np.meshgrid(nose, [plane], back, indexing="ij"), axis=-1).reshape(-1, 3)
    grid = grid[depths.at(grid) > 0]
    wide = walls.nearest(grid @ turn).distance
    for diameter in PIN_DIAMETERS:
        found = []
        for share in np.linspace(0.2, 0.8, PINS):
            centre = low[0] + share * (high[0] - low[0])
            near = np.abs(grid[:, 0] - centre) <= _WITHIN * (high[0] - low[0])
            pin = _pin(grid[near][np.argsort(-wide[near])] @ turn, walls, turn[1], diameter)
            found += [] if pin is None else [pin]
        if len(found) >= 2:
            return found
    return found


def _pin(places: Floats, walls: Boxes, across: Floats, diameter: float) -> Cylinder | None:
    """The pin at the first of some places that leaves wall enough all round, None where none does."""
    for place in places[:: max(1, len(places) // _TRIED)][:_TRIED]:
        pin = Cylinder(place, across, 2 * PIN_DEPTH, diameter / 2)
        if cylinder_standoff(walls, pin, 2e-5).distance >= PIN_WALL:
            return pin
    return None


def _together(surfaces: Sequence[Surface]) -> Surface:
    starts = np.cumsum([0, *(len(surface.vertices) for surface in surfaces)])
    faces = [surface.faces + start for surface, start in zip(surfaces, starts, strict=False)]
    return Surface(np.concatenate([surface.vertices for surface in surfaces]), np.concatenate(faces))
