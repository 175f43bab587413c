"""Resistance: what a drag estimate consists of, its parts as areas and its coefficient with a band."""

from __future__ import annotations

import math
from dataclasses import dataclass, fields
from typing import Final


@dataclass(frozen=True)
class DragParts:
    """Drag coefficient times area of each part, m2; they add to the whole.

    Attributes
    ----------
    friction, forebody, base, tail : float, m2
        Of the body: rubbing along the flank, pressure on the leading end, suction on what is open to the wake, or
        pressure on a closing tail (straight on, one of the last two is zero).
    lip, hooks, eyes : float, m2
        Each taken alone in the full speed, without sheltering one another.
    induced : float, m2
        What the side force of a body at an angle to the flow adds.
    """

    friction: float
    forebody: float
    base: float
    tail: float
    lip: float = 0.0
    hooks: float = 0.0
    eyes: float = 0.0
    induced: float = 0.0

    @property
    def body(self) -> float:
        """Drag area of the body alone, m2."""
        return self.friction + self.forebody + self.base + self.tail + self.induced

    @property
    def total(self) -> float:
        """Drag area of everything, m2."""
        return self.body + self.lip + self.hooks + self.eyes

    def __add__(self, other: DragParts) -> DragParts:
        return DragParts(*(getattr(self, name) + getattr(other, name) for name in _NAMES))

    def __mul__(self, factor: float) -> DragParts:
        return DragParts(*(getattr(self, name) * factor for name in _NAMES))

    __rmul__ = __mul__


_NAMES: Final = tuple(field.name for field in fields(DragParts))


@dataclass(frozen=True)
class Fittings:
    """Drag areas of what is fixed to the body, m2 (`plate.lip_drag_area`, `wire.wire_drag_area`)."""

    lip: float = 0.0
    hooks: float = 0.0
    eyes: float = 0.0

    def __post_init__(self) -> None:
        if not all(0 <= value < math.inf for value in (self.lip, self.hooks, self.eyes)):
            raise ValueError(f"drag areas of fittings are not negative and finite: {self}")


BARE: Final = Fittings()


@dataclass(frozen=True)
class Drag:
    """Drag of a body along its axis at one speed.

    Attributes
    ----------
    layer : str
        laminar, tripped, or between (the headline, part way between both).
    tripped_share : float
        0 where the parts are all laminar, 1 where all tripped.
    speed : float, m/s
    density : float, kg/m3
    reynolds_length, reynolds_diameter : float
        On the body's length, and on the equivalent diameter of its largest section.
    cd, cd_low, cd_high : float
        Drag coefficient of the body alone on `frontal_area`, and its band.
    frontal_area : float, m2
        Silhouette along the flow.
    parts : DragParts
    trailing_bluffness : float
        Share of the largest section left open to the wake.
    laminar_cd, tripped_cd : float
        Coefficient with the layer all laminar (behind a smooth front) and with it tripped, for comparison.
    words : str
        What the numbers rest on, in a sentence or two.
    """

    layer: str
    tripped_share: float
    speed: float
    density: float
    reynolds_length: float
    reynolds_diameter: float
    cd: float
    cd_low: float
    cd_high: float
    frontal_area: float
    parts: DragParts
    trailing_bluffness: float
    laminar_cd: float
    tripped_cd: float
    words: str

    @property
    def drag_area(self) -> float:
        """Drag coefficient times area of body and fittings, m2."""
        return self.parts.total

    @property
    def force(self) -> float:
        """Drag of body and fittings, N."""
        return self.density * self.speed**2 / 2 * self.parts.total
