"""A body in two halves, left and right, with holes for the pins that hold them in line: so its ballast can be set."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Final

import numpy as np

from meshlure.bait.pieces import Frame
from meshlure.errors import Fault, InputError
from meshlure.geometry.clearance import Boxes
from meshlure.geometry.containment import inside
from meshlure.geometry.cylinder import Cylinder
from meshlure.geometry.field import Field, pitch_for
from meshlure.geometry.shapes import rod
from meshlure.geometry.solids import Solid
from meshlure.geometry.standoff import clears
from meshlure.geometry.surface import Floats, Surface
from meshlure.making.balance.ground import together

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
    across = skin.vertices @ frame.side
    plane = float(across.min() + across.max()) / 2
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
    left, right = body.less(*(Solid.of(rod(pin)) for pin in pins)).split(frame.side, plane)
    return Halves(left, right, tuple(pins))


def _pins(skin: Surface, frame: Frame, plane: float, others: Sequence[Surface]) -> list[Cylinder]:
    """Pins spread along the body, as thick as there is room for."""
    turn = np.stack([frame.nose, frame.side, frame.back])
    walls = Boxes.of(together((skin, *others)))
    turned = skin.moved(rotation=turn)
    low, high = turned.bounds
    depths = Field.of(turned, pitch_for(skin, _VOXELS))
    nose, back = (np.arange(low[axis], high[axis], _STEP) for axis in (0, 2))
    grid = np.stack(np.meshgrid(nose, [plane], back, indexing="ij"), axis=-1).reshape(-1, 3)
    grid = grid[depths.at(grid) > 0]
    if others:
        grid = grid[~inside(Boxes.of(together(others)), grid @ turn)]
    wide = walls.nearest(grid @ turn).distance
    found: list[Cylinder] = []
    for diameter in PIN_DIAMETERS:
        found = []
        for share in np.linspace(0.2, 0.8, PINS):
            centre = low[0] + share * (high[0] - low[0])
            near = np.abs(grid[:, 0] - centre) <= _WITHIN * (high[0] - low[0])
            pin = _pin(grid[near][np.argsort(-wide[near])] @ turn, walls, turn[1], diameter)
            found += [] if pin is None else [pin]
        if len(found) >= 2:
            break
    return found


def _pin(places: Floats, walls: Boxes, across: Floats, diameter: float) -> Cylinder | None:
    """The pin at the first of some places that leaves wall enough all round, None where none does."""
    for place in places[:: max(1, len(places) // _TRIED)][:_TRIED]:
        pin = Cylinder(place, across, 2 * PIN_DEPTH, diameter / 2)
        if clears(walls, pin, PIN_WALL):
            return pin
    return None
