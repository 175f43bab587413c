"""Tow: the pull that a bait drawn nose first sets against the line, by its parts."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from meshlure.physics.passage import Passage
from meshlure.tolerances import GRAVITY


@dataclass(frozen=True)
class Tow:
    """Drag of a bait drawn straight, nose first, at one speed.

    Attributes
    ----------
    speed : float, m/s
    body, lip, hooks, eyes : float, N
        Each taken alone in the full speed.
    low, high : float, N
        Of the whole, at the ends of the body's band.
    """

    speed: float
    body: float
    lip: float
    hooks: float
    eyes: float
    low: float
    high: float

    @property
    def whole(self) -> float:
        """Drag of everything, N."""
        return self.body + self.lip + self.hooks + self.eyes

    @property
    def kilogram_force(self) -> float:
        """Mass whose weight equals the whole drag, kg: a spring balance shows it."""
        return self.whole / GRAVITY


def tow(way: Passage, speeds: Sequence[float], density: float, viscosity: float) -> tuple[Tow, ...]:
    """Return the tow drag at each speed.

    Parameters
    ----------
    way : Passage
    speeds : sequence of float, m/s
    density : float, kg/m3
    viscosity : float, m2/s
        Kinematic, of the water.

    Notes
    -----
    The headline drag, nose first, wholly under water. An order of size: a lip pulls the bait out of the straight and
    makes it wobble, which costs more, and the line's own drag is left out.
    """
    rows = []
    for speed in speeds:
        drag = way.drag("nose", speed, density, viscosity, None)
        pressure = density * speed**2 / 2
        parts = drag.parts
        fittings = parts.total - parts.body
        rows.append(
            Tow(
                speed=speed,
                body=pressure * parts.body,
                lip=pressure * parts.lip,
                hooks=pressure * parts.hooks,
                eyes=pressure * parts.eyes,
                low=pressure * (parts.body * drag.cd_low / drag.cd + fittings),
                high=pressure * (parts.body * drag.cd_high / drag.cd + fittings),
            )
        )
    return tuple(rows)
