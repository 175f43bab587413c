"""The posture that a bait is known by, and where it would come to rest were it a little heavier, larger or shifted."""

from __future__ import annotations

from dataclasses import dataclass, replace

import numpy as np

from meshlure import tolerances
from meshlure.bait.pieces import Frame
from meshlure.geometry.surface import Bools, Floats
from meshlure.physics.changes import Changes
from meshlure.physics.immersion import Hull
from meshlure.physics.locus import Locus
from meshlure.physics.repose import Dangle, Repose, Vessel

LOOKS = 6
"""Places at which the hull is cut anew before what is known of it is judged."""

ROUNDS = 3

ENOUGH = float(np.radians(0.1))
"""rad. Places of rest that were off by less than this need no further look."""

_DESCENTS = 2
"""Changes whose place of rest the locus does not find and that are put to rest on the full mesh, a round."""

_CHECKED = 4
"""Copies whose place of rest is checked in the end."""

_CANDIDATES = 400
"""Draws among which the places to look at are chosen."""


@dataclass(frozen=True, eq=False)
class Stance:
    """A bait in one posture.

    Attributes
    ----------
    mass : (4,) array, kg and kg m
        With its first moment about the mesh origin.
    skin : (4,) array, m3 and m4
        What the skin displaces with its coat, wholly under water.
    points : (4,) array, m3 and m4
        What hardware and wet balls displace beside it.
    wet_points : (4,) array, m3 and m4
        Those of them that are under water at rest.
    water : float, kg/m3
    frame : Frame
    locus : Locus or None
        Round the posture afloat; None where the bait hangs.
    height : float or None, m
        Of the water's surface afloat.
    miss : float, rad
        By how much the farthest off of some copies was, checked by cutting the hull where it rests.
    """

    mass: Floats
    skin: Floats
    points: Floats
    wet_points: Floats
    water: float
    frame: Frame
    locus: Locus | None
    height: float | None
    miss: float = 0.0

    @classmethod
    def of(cls, vessel: Vessel, main: Repose | Dangle) -> Stance:
        """Return the stance of a bait in one of its postures.

        Parameters
        ----------
        vessel : Vessel
        main : Repose or Dangle
        """
        weight = vessel.composition.mass(main.ends)
        whole = vessel.hull(main.ends)
        index = vessel.index
        mass = np.concatenate([[weight.amount], weight.first])
        skin = np.concatenate([[index.volume + index.coat_volume], index.moment + index.coat_moment])
        points = np.concatenate([[whole.point_volume], whole.point_moment])
        if isinstance(main, Dangle):
            return cls(mass, skin, points, points, vessel.water, vessel.frame, None, None)
        hull = main.potential.hull
        wet = np.concatenate([[hull.point_volume], hull.point_moment])
        state = main.rest.state
        locus = Locus.at(Hull(index, 0.0, np.zeros(3)), state.up, main.potential.volume - hull.point_volume)
        return cls(mass, skin, points, wet, vessel.water, vessel.frame, locus, state.immersed.cut.height)

    def still(self) -> Changes:
        """Return the change that changes nothing."""
        return Changes.one(self.water)

    def reserve(self, changes: Changes) -> Floats:
        """Return the reserve after each change, (n,) array, kg."""
        displaced = self.skin[0] * changes.scale**3 + self.points[0] + changes.volume[:, 0]
        return np.asarray(changes.water * displaced - self.mass[0] - changes.mass[:, 0])

    def ups(self, changes: Changes) -> Floats:
        """Return the up-direction after each change, (n, 3) array; nan where the bait leaves its posture or has none.

        Notes
        -----
        Afloat by the locus of its centres of buoyancy; hanging, and where it sinks after the change, the line from the
        centre of gravity to that of buoyancy, exactly. What hangs is taken to hang after a change that would lift
        it to the surface. Balls stay at their ends, hooks stay wet or dry.
        """
        found = self._hanging(changes)
        if self.locus is not None:
            afloat = np.flatnonzero(self.reserve(changes) > 0)
            places, held = self._settled(changes.taken(afloat))
            found[afloat] = np.where(held[:, None], self.locus.ups(places), np.nan)
        return found

    def learned(self, changes: Changes, draws: Changes) -> Stance:
        """Return the stance with its hull looked at wherever these changes and draws lead it.

        Parameters
        ----------
        changes : Changes
            Single ones, each of which counts.
        draws : Changes
            Many, of which the outermost count.
        """
        if self.locus is None:
            return self
        asked = Changes.joined([changes, draws.taken(slice(0, _CANDIDATES))])
        gravity, volume = self._sought(asked)
        fits = (self.reserve(asked) > 0) & self._fits(volume)
        gravity, volume = gravity[fits], volume[fits]
        locus = self.locus
        for _ in range(ROUNDS if len(volume) else 0):
            places, held = locus.rests(gravity, volume)
            for lost in np.flatnonzero(~held)[:_DESCENTS]:
                places[lost], held[lost] = locus.descended(gravity[lost], float(volume[lost])), True
            where, pull = places[held], gravity[held]
            scale = np.maximum(where.std(axis=0), 1e-6)
            chosen = _farthest(where / scale, np.array([look.place for look in locus.looks]) / scale)
            locus, off = locus.looked(where[chosen], pull[chosen], scale)
            if off < ENOUGH:
                break
        places, held = locus.rests(gravity, volume)
        checked = np.flatnonzero(held)[-_CHECKED:]
        _, miss = locus.looked(places[checked], gravity[checked], locus.scale)
        return replace(self, locus=locus, miss=miss)

    def angles(self, ups: Floats) -> tuple[Floats, Floats]:
        """Return nose_up and lean of up-directions, two (n,) arrays, rad; nan where they have no meaning."""
        frame = self.frame
        along = np.clip(ups @ frame.nose, -1.0, 1.0)
        lean = np.arctan2(ups @ frame.side, ups @ frame.back)
        upright = np.abs(along) <= np.cos(np.radians(tolerances.NOSE_VERTICAL))
        return np.arcsin(along), np.where(upright, lean, np.nan)

    def _hanging(self, changes: Changes) -> Floats:
        shrunk = changes.scale[:, None] ** -3
        displaced = self.skin + (self.points + changes.volume) * shrunk
        weight = self.mass + changes.mass
        apart = displaced[:, 1:] / displaced[:, :1] - weight[:, 1:] / weight[:, :1]
        length = np.linalg.norm(apart, axis=1)[:, None]
        return np.where(length < tolerances.CENTRES_MEET, np.nan, apart / np.maximum(length, 1e-30))

    def _sought(self, changes: Changes) -> tuple[Floats, Floats]:
        """Centre of gravity and volume that the skin alone has to balance, (n, 3), m, and (n,), m3.

        What is always under water pulls up at fixed places: V G - sum of v x over V - sum of v is where a body of the
        skin alone would have its centre of gravity. A grown bait is the bait before in a smaller measure.
        """
        shrunk = changes.scale[:, None] ** -3
        weight = self.mass + changes.mass
        lifted = weight / changes.water[:, None] * shrunk - (self.wet_points + changes.wet) * shrunk
        return lifted[:, 1:] / lifted[:, :1], lifted[:, 0]

    def _fits(self, volume: Floats) -> Bools:
        """Whether the skin can displace what is asked of it; with a hook above the water not all that floats does."""
        assert self.locus is not None
        return np.asarray((volume > 0) & (volume < self.locus.capacity))

    def descended(self, change: Changes) -> Floats:
        """Return the up-direction after one change by a descent on the full mesh, (3,) array; nan where it cannot."""
        gravity, volume = self._sought(change)
        if self.locus is None or not self._fits(volume)[0]:
            return np.full(3, np.nan)
        place = self.locus.descended(gravity[0], float(volume[0]))
        return np.asarray(self.locus.ups(place[None])[0])

    def _settled(self, changes: Changes) -> tuple[Floats, Bools]:
        assert self.locus is not None
        gravity, volume = self._sought(changes)
        places, held = np.zeros((len(changes), 3)), np.zeros(len(changes), dtype=np.bool_)
        fits = np.flatnonzero(self._fits(volume))
        places[fits], held[fits] = self.locus.rests(gravity[fits], volume[fits])
        return places, held


def _farthest(points: Floats, known: Floats) -> list[int]:
    """Numbers of the points that lie farthest from the known ones and from each other, one after the other."""
    apart = np.linalg.norm(points[:, None] - known[None], axis=2).min(axis=1)
    chosen: list[int] = []
    for _ in range(min(LOOKS, len(points))):
        chosen.append(int(apart.argmax()))
        apart = np.minimum(apart, np.linalg.norm(points - points[chosen[-1]], axis=1))
    return chosen
