"""Bodies put afloat for tests: a surface with its centre of gravity and the share of it that is under water."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from functools import cached_property

import numpy as np

from meshlure.geometry.blocks import BlockIndex
from meshlure.geometry.surface import Floats, Surface
from meshlure.physics.immersion import Hull
from meshlure.physics.posture import Rest, coarse_potential, resting
from meshlure.physics.potential import Potential, State

UP = np.array([0.0, 0.0, 1.0])


@dataclass(frozen=True, eq=False)
class Afloat:
    """A floating body; about the volume's own centre of gravity where none is given."""

    surface: Surface
    share: float
    gravity: Floats | None = None
    coat: float = 0.0
    hook: float = 0.0
    hook_at: Sequence[float] = (0.0, 0.0, 0.0)

    @cached_property
    def hull(self) -> Hull:
        index = BlockIndex.build(self.surface, np.full(len(self.surface.faces), self.coat))
        return Hull(index, self.hook, self.hook * np.asarray(self.hook_at))

    @property
    def centre(self) -> Floats:
        return self.hull.index.moment / self.hull.index.volume if self.gravity is None else np.asarray(self.gravity)

    @property
    def potential(self) -> Potential:
        return Potential(self.hull, self.centre, self.share * self.hull.volume)

    @property
    def rough(self) -> Potential:
        return coarse_potential(self.hull, self.surface, self.centre, self.share * self.hull.volume)

    def at(self, up: Floats) -> State:
        return self.potential.at(np.asarray(up) / np.linalg.norm(up))

    def rests(self, back: Floats = UP) -> tuple[Rest, ...]:
        return resting(self.hull, self.surface, self.centre, self.share * self.hull.volume, back)


def angle_between(one: Floats, other: Floats) -> float:
    """Angle between two directions, rad, exact for small ones too."""
    return float(2 * np.arctan2(np.linalg.norm(one - other), np.linalg.norm(one + other)))
