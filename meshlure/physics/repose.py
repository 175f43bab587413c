"""Where a whole bait comes to rest: with its balls at the lower end, and hooks that leave the water counted dry."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, replace
from itertools import product

import numpy as np

from meshlure.bait.chambers import ENDS, BallRow
from meshlure.bait.composition import Composition
from meshlure.bait.pieces import Frame, Hardware
from meshlure.geometry.blocks import BlockIndex
from meshlure.geometry.surface import Floats
from meshlure.physics.immersion import Hull
from meshlure.physics.posture import Hanging, Rest, hanging, landed, resting
from meshlure.physics.potential import Potential

Ends = dict[str, str]
"""Which end the balls of each chamber lie at."""

_LEVEL = 1e-9

_ALIKE = float(np.cos(np.radians(0.05)))


@dataclass(frozen=True, eq=False)
class Repose:
    """One posture of the whole bait.

    Attributes
    ----------
    ends : dict
        Where the balls lie, by chamber.
    potential : Potential
        Of the bait as it floats there: balls at those ends, dry hooks left out of the displacement.
    rest : Rest
    dry : tuple of str
        Names of hardware whose eye is above the water.
    held : bool
        Whether the balls would stay at those ends by themselves.
    """

    ends: Ends
    potential: Potential
    rest: Rest
    dry: tuple[str, ...]
    held: bool


@dataclass(frozen=True, eq=False)
class Dangle:
    """How the bait hangs wholly under water with its balls at given ends."""

    ends: Ends
    hang: Hanging
    centre: Floats
    buoyancy_centre: Floats
    held: bool


@dataclass(frozen=True, eq=False)
class Vessel:
    """A bait ready to be put into water.

    Attributes
    ----------
    composition : Composition
    index : BlockIndex
        Of the composition's skin, with its coat.
    hardware : sequence of Hardware
    frame : Frame
    water : float, kg/m3
    """

    composition: Composition
    index: BlockIndex
    hardware: Sequence[Hardware]
    frame: Frame
    water: float

    def settings(self) -> list[Ends]:
        """Return every combination of ends at which the balls can lie; one, empty, without balls."""
        rows = self.composition.rows
        choices = [ENDS if row.balls.at is None else (row.balls.at,) for row in rows]
        return [dict(zip((row.balls.chamber for row in rows), ends, strict=True)) for ends in product(*choices)]

    def hull(self, ends: Mapping[str, str], dry: Sequence[str] = ()) -> Hull:
        """Return what displaces water, with some hardware left dry."""
        volume, moment = 0.0, np.zeros(3)
        for item in self.hardware:
            if item.name not in dry:
                volume += item.volume
                moment = moment + item.volume * item.at
        for row in self.composition.rows:
            if row.flooded:
                balls = row.volume(ends[row.balls.chamber])
                volume += balls.amount
                moment = moment + balls.first
        return Hull(self.index, volume, moment)

    def potential(self, ends: Mapping[str, str], dry: Sequence[str] = ()) -> Potential:
        """Return the floating bait's potential."""
        mass = self.composition.mass(ends)
        return Potential(self.hull(ends, dry), mass.centre, mass.amount / self.water)

    def stays(self, row: BallRow, end: str, up: Floats | None) -> bool:
        """Whether balls at an end stay there: held by the bait file, or the end is the lower one."""
        if row.balls.at is not None or up is None:
            return True
        rise = float(row.axis @ up)
        return rise <= _LEVEL if end == "nose" else rise >= -_LEVEL

    def all_stay(self, ends: Mapping[str, str], up: Floats | None) -> bool:
        """Whether the balls of every chamber stay where they are."""
        return all(self.stays(row, ends[row.balls.chamber], up) for row in self.composition.rows)

    def reposes(self, ends: Ends) -> tuple[Repose, ...]:
        """Return every resting posture with the balls at given ends, the lowest energy first; none where it sinks."""
        potential = self.potential(ends)
        if not self._floats(potential):
            return ()
        rests = resting(
            potential.hull, self.composition.skin.surface, potential.centre, potential.volume, self.frame.back
        )
        found: list[Repose] = []
        for rest in rests:
            dried = self._dried(ends, potential, rest)
            twin = next((number for number, other in enumerate(found) if _same(dried, other)), None)
            if twin is None:
                found.append(dried)
            else:
                found[twin] = _both(found[twin], dried)
        return tuple(sorted(found, key=lambda repose: repose.rest.state.energy))

    def reposed(self, ends: Ends, up: Floats) -> Repose | None:
        """Return the one resting posture that a descent from an up-direction reaches; None where it does not float."""
        potential = self.potential(ends)
        if not self._floats(potential):
            return None
        return self._dried(ends, potential, Rest(potential.descended(up, 0.1), 1.0, upright=False))

    def landed(self, ends: Ends) -> Repose | None:
        """Return the posture that it comes to rest in from back up; None where it does not float."""
        potential = self.potential(ends)
        if not self._floats(potential):
            return None
        skin = self.composition.skin.surface
        state = landed(potential.hull, skin, potential.centre, potential.volume, self.frame.back)
        return self._dried(ends, potential, Rest(state, 1.0, upright=True))

    @staticmethod
    def _floats(potential: Potential) -> bool:
        return potential.hull.point_volume < potential.volume < potential.hull.volume

    def dangle(self, ends: Ends) -> Dangle:
        """Return how the bait hangs under water with the balls at given ends."""
        hull, centre = self.hull(ends), self.composition.mass(ends).centre
        hang = hanging(hull, centre)
        return Dangle(ends, hang, centre, hull.centre, self.all_stay(ends, hang.up))

    def _dried(self, ends: Ends, potential: Potential, rest: Rest) -> Repose:
        """Solve a posture again without the hardware that hangs above the water, until no more leaves it."""
        dry: set[str] = set()
        state = rest.state
        while True:
            height = state.immersed.cut.height
            emerged = {h.name for h in self.hardware if h.volume > 0 and h.at @ state.up > height} - dry
            if not emerged:
                break
            less = self.potential(ends, sorted(dry | emerged))
            if less.volume >= less.hull.volume:
                break
            dry |= emerged
            potential = less
            state = potential.descended(state.up, 0.1)
        settled = Rest(state, rest.share, rest.upright)
        return Repose(ends, potential, settled, tuple(sorted(dry)), self.all_stay(ends, state.up))


def _same(one: Repose, other: Repose) -> bool:
    """Whether two postures came together once their dry hooks no longer hold them up."""
    return one.dry == other.dry and bool(one.dry) and bool(one.rest.state.up @ other.rest.state.up > _ALIKE)


def _both(one: Repose, other: Repose) -> Repose:
    a, b = one.rest, other.rest
    return replace(one, rest=Rest(a.state, a.share + b.share, a.upright or b.upright))
