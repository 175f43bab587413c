"""The bench that a mould is laid out on: x along the bait, z along the pull, the parting plane at z = 0."""

from __future__ import annotations

from dataclasses import dataclass, replace

import numpy as np

from meshlure.bait.pieces import Frame
from meshlure.files.sections.mould import MouldSection
from meshlure.geometry.surface import Floats, Surface
from meshlure.making.mould.scale import Scale

FLIP = np.diag([1.0, -1.0, -1.0])
"""Turns the other half up: half a turn about x."""


@dataclass(frozen=True, eq=False)
class Bench:
    """How places of the drawing come to lie on the bench.

    Attributes
    ----------
    turn : (3, 3) array
        Rows: unit vectors of the bench's x, y, z in mesh coordinates. x runs from nose to tail as far as the pull lets
        it, z is the pull.
    height : float, m
        Of the parting plane along the pull, in the master's size.
    scale : Scale
    """

    turn: Floats
    height: float
    scale: Scale

    @classmethod
    def of(cls, section: MouldSection, frame: Frame) -> Bench:
        """Return the bench of a pull, its parting plane through the mesh's origin."""
        named = {"side": frame.side, "back": frame.back}
        pull = named[section.pull] if isinstance(section.pull, str) else np.array(section.pull)
        return cls(axes(pull, frame), 0.0, Scale.of(section))

    @property
    def pull(self) -> Floats:
        """Unit vector of the pull in mesh coordinates."""
        return np.asarray(self.turn[2])

    def at(self, height: float) -> Bench:
        """Return the bench with the parting plane moved up by ``height``, m."""
        return replace(self, height=self.height + height)

    def part(self, surface: Surface) -> Surface:
        """Return a drawn surface as the resin is to form it, in the master's size, on the bench."""
        scaled = Surface(surface.vertices * self.scale.part, surface.faces)
        return scaled.moved(rotation=self.turn, shift=np.array([0.0, 0.0, -self.height]))

    def seat(self, surface: Surface) -> Surface:
        """Return a real piece's drawn surface on the bench: it keeps its own size in the rubber.

        Notes
        -----
        Its middle goes where the resin's goes, so that the two part ways by equal amounts at both ends.
        """
        middle = surface.bounds.mean(axis=0)
        kept = (surface.vertices - middle) * self.scale.seat + middle * self.scale.part
        return Surface(kept, surface.faces).moved(rotation=self.turn, shift=np.array([0.0, 0.0, -self.height]))

    def place(self, points: Floats) -> Floats:
        """Return drawn points, (..., 3) array, m, on the bench."""
        scaled = np.asarray(points, dtype=np.float64) * self.scale.part
        return np.asarray(scaled @ self.turn.T - np.array([0.0, 0.0, self.height]))

    def drawn(self, points: Floats) -> Floats:
        """Return points on the bench, (..., 3) array, m, as places of the drawing."""
        lifted = np.asarray(points, dtype=np.float64) + np.array([0.0, 0.0, self.height])
        return np.asarray(lifted @ self.turn / self.scale.part)


def axes(pull: Floats, frame: Frame) -> Floats:
    """Return the bench's x, y and z as unit vectors in mesh coordinates, rows of a (3, 3) array."""
    z = pull / np.linalg.norm(pull)
    aft = -frame.nose
    # A pull along the nose leaves the belly to say where x runs.
    wish = aft if abs(float(aft @ z)) < 0.9 else -frame.back
    x = wish - (wish @ z) * z
    x = x / np.linalg.norm(x)
    return np.stack([x, np.cross(z, x), z])
