"""Ballast as it can be bought and cut: a rod, or balls in a row, in the room that it takes from the body."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Final

import numpy as np

from meshlure.bait.composition import Part
from meshlure.bait.pieces import Role, Substance
from meshlure.geometry.cylinder import Cylinder
from meshlure.geometry.moments import NOTHING, Moments, ball_moments
from meshlure.geometry.shapes import ball, rod
from meshlure.geometry.surface import Floats, Surface

EMBEDDED: Final = "embedded"
FROM_BELLY: Final = "from belly"
UNCUT: Final = "none"

ROD: Final = "rod"
BALL: Final = "ball"

BETWEEN_BALLS: Final = 0.5e-3
"""m. Wall left between the pockets of neighbouring balls: it keeps each in its place and the pockets apart; ours."""


@dataclass(frozen=True)
class Ball:
    """A ball as a formula.

    Attributes
    ----------
    middle : (3,) array, m
    radius : float, m
    """

    middle: Floats
    radius: float

    @property
    def volume(self) -> float:
        """Volume, m3."""
        return float(4 / 3 * np.pi * self.radius**3)

    def moments(self) -> Moments:
        """Return the volume, m3, with its moments."""
        return ball_moments(2 * self.radius, self.middle)


Solid = Cylinder | Ball


@dataclass(frozen=True)
class Kind:
    """What is bought, and how it is put in.

    Attributes
    ----------
    substance : Substance
    shape : str
        rod or ball.
    diameter : float, m
    count : int
        1 for a rod.
    pocket : str
        embedded, from belly or none.
    fit : float, m
        Gap per side.
    glue : Substance or None
        What fills the gap; None leaves sealed air.
    """

    substance: Substance
    shape: str
    diameter: float
    count: int
    pocket: str
    fit: float
    glue: Substance | None

    @property
    def spacing(self) -> float:
        """Distance between the middles of neighbouring balls, m; they touch in a drilled hole."""
        return self.diameter + (0.0 if self.pocket == FROM_BELLY else 2 * self.fit + BETWEEN_BALLS)

    def net(self, length: float, body: float) -> float:
        """Return what it adds to the bait's mass, kg: itself and its glue, less body material, of a density."""
        placed = Ballast(self, length, np.zeros(3), np.array([1.0, 0.0, 0.0]))
        return placed.mass().amount - placed.taken().amount * body

    def length_for(self, net: float, body: float) -> float:
        """Return the length of a rod that adds a net mass, m; not positive where even none adds more."""
        start, end = self.net(1e-3, body), self.net(2e-3, body)
        return 1e-3 + (net - start) / (end - start) * 1e-3


@dataclass(frozen=True, eq=False)
class Ballast:
    """Ballast in its place.

    Attributes
    ----------
    kind : Kind
    length : float, m
        Of a rod; of a row of balls from end to end.
    middle : (3,) array, m
    axis : (3,) array
        Unit vector that the rod or the row lies along.
    """

    kind: Kind
    length: float
    middle: Floats
    axis: Floats

    @classmethod
    def balls(cls, kind: Kind, middle: Floats, axis: Floats) -> Ballast:
        """Return a row of balls about a middle."""
        return cls(kind, (kind.count - 1) * kind.spacing + kind.diameter, middle, axis)

    def at(self, middle: Floats) -> Ballast:
        """Return the same ballast about another middle."""
        return Ballast(self.kind, self.length, middle, self.axis)

    def pieces(self) -> tuple[Solid, ...]:
        """Return what is bought, piece by piece, along the axis."""
        kind = self.kind
        if kind.shape == ROD:
            return (Cylinder(self.middle, self.axis, self.length, kind.diameter / 2),)
        steps = (np.arange(kind.count) - (kind.count - 1) / 2) * kind.spacing
        return tuple(Ball(self.middle + step * self.axis, kind.diameter / 2) for step in steps)

    def room(self) -> tuple[Solid, ...]:
        """Return what it takes from the body: the pieces with their gap, or one hole round a drilled-in row."""
        fit = self.kind.fit
        if self.kind.shape == BALL and self.kind.pocket == FROM_BELLY:
            return (Cylinder(self.middle, self.axis, self.length + 2 * fit, self.kind.diameter / 2 + fit),)
        return tuple(_grown(piece, fit) for piece in self.pieces())

    def drill(self, lowest: float) -> Cylinder | None:
        """Return the hole through which it is put in, from its room down to a height along its axis, m; None in others.

        Raises
        ------
        ValueError
            Where its room does not end above that height.
        """
        if self.kind.pocket != FROM_BELLY:
            return None
        (room,) = self.room()
        assert isinstance(room, Cylinder)
        length = float(room.ends[1] @ self.axis) - lowest
        return Cylinder(room.ends[1] - length / 2 * self.axis, self.axis, length, room.radius)

    def volume(self) -> Moments:
        """Return the ballast's own volume, m3, with its moments."""
        return _sum(self.pieces())

    def taken(self) -> Moments:
        """Return the room's volume, m3, with its moments."""
        return _sum(self.room())

    def mass(self) -> Moments:
        """Return the mass of ballast and glue, kg, with its moments."""
        own = self.volume()
        glue = 0.0 if self.kind.glue is None else self.kind.glue.density
        return own * self.kind.substance.density + (self.taken() - own) * glue

    def parts(self) -> tuple[Part, ...]:
        """Return what lies in the room, as a bait counts it."""
        own, kind = self.volume(), self.kind
        weight = own * kind.substance.density
        parts = [Part("ballast", Role.INSERT, kind.substance, own.amount, weight, own.centre)]
        gap = self.taken() - own
        if kind.glue is not None and gap.amount > 0:
            parts.append(
                Part("glue round ballast", Role.INSERT, kind.glue, gap.amount, gap * kind.glue.density, gap.centre)
            )
        return tuple(parts)

    def surfaces(self) -> tuple[Surface, ...]:
        """Return the meshes of what is bought, each of the true piece's volume."""
        return tuple(_mesh(piece) for piece in self.pieces())

    def rooms(self) -> tuple[Surface, ...]:
        """Return the meshes of the room, each of its true volume."""
        return tuple(_mesh(piece) for piece in self.room())


def _grown(piece: Solid, fit: float) -> Solid:
    return piece.grown(fit, fit) if isinstance(piece, Cylinder) else Ball(piece.middle, piece.radius + fit)


def _sum(pieces: Sequence[Solid]) -> Moments:
    return sum((piece.moments() for piece in pieces), NOTHING)


def _mesh(piece: Solid) -> Surface:
    return rod(piece) if isinstance(piece, Cylinder) else ball(piece.middle, 2 * piece.radius)
