"""Whether the mould would part more easily along a pull that leans from the one asked for."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from typing import Final

import numpy as np

from meshlure.geometry.surface import Floats, Surface
from meshlure.making.mould.shadow import ALIKE, Shadow

CONE: Final = np.radians(15.0)
"""rad. Half-angle of the cone of pulls about the one asked for that are tried."""

_RINGS: Final = 4
_TURNS: Final = 6
_WAYS: Final = 8
_PATIENCE: Final = 2
_ROUNDS: Final = 12
_STARTS: Final = 3
_PHASE: Final = 2.399963
"""rad. The golden angle."""
_FINEST: Final = np.radians(0.1)
_ASKEW: Final = np.array([[0.921061, -0.389418, 0.0], [0.389418, 0.921061, 0.0], [0.0, 0.0, 1.0]])
"""Turns the grid by 0.4 rad about the pull."""

_NOTHING: Final = 1e-6
"""Share of the volume below which nothing is left to be gained."""

_COLUMNS: Final = 100
"""Columns along the solid's greatest extent in the search."""


@dataclass(frozen=True, eq=False)
class Pull:
    """A pull with its best parting height.

    Attributes
    ----------
    direction : (3,) array
        Unit vector, in the coordinates of the solid.
    height : float, m
        Of the parting plane along it.
    trapped : float, m3
        What the two halves hold, by columns `pitch` apart.
    pitch : float, m
    """

    direction: Floats
    height: float
    trapped: float
    pitch: float


def best_pull(solid: Surface, volume: float, cone: float = CONE) -> Pull:
    """Return the pull within a cone about z that traps least, each at its best parting height.

    Parameters
    ----------
    solid : Surface
        On the bench.
    volume : float, m3
        It encloses.
    cone : float, rad

    Notes
    -----
    Pulls on rings about z, then walks downhill from z and from the best of them, in steps that are halved where none
    leads on. z itself is kept where nothing beats it by more than `shadow.ALIKE` of the volume. The columns' grid
    stands askew to the bench, so that a wall of the bait meets columns at all distances and an overhang narrower than
    their pitch counts for as much as it holds.
    """
    reach = float(np.ptp(solid.bounds, axis=0).max())

    def ask(direction: Floats) -> Pull:
        turned = solid.moved(rotation=_ASKEW @ _frame(direction))
        shadow = Shadow.of(turned, reach / _COLUMNS)
        height = shadow.best_height(float(turned.bounds[:, 2].mean()), volume)
        return Pull(direction, height, shadow.trapped(height), shadow.pitch)

    up = np.array([0.0, 0.0, 1.0])
    asked = ask(up)
    if asked.trapped <= ALIKE * volume:
        return asked
    places = [(ring, step) for ring in range(1, _RINGS + 1) for step in range(_TURNS * ring)]
    leant = [_leant(up, cone * ring / _RINGS, 2 * np.pi * step / (_TURNS * ring)) for ring, step in places]
    tried = [asked, *map(ask, leant)]
    best = asked
    for start in _lowest(tried, cone):
        best = min(best, _walked(start, ask, cone, volume), key=lambda each: each.trapped)
        if best.trapped <= _NOTHING * volume:
            break
    return asked if asked.trapped - best.trapped <= ALIKE * volume else best


def _lowest(tried: list[Pull], cone: float) -> list[Pull]:
    """The first pull, and those that trap least, no two of them close to each other."""
    found = tried[:1]
    for pull in sorted(tried, key=lambda each: each.trapped):
        if all(pull.direction @ other.direction < np.cos(0.4 * cone) for other in found):
            found.append(pull)
    return found[:_STARTS]


def _walked(start: Pull, ask: Callable[[Floats], Pull], cone: float, volume: float) -> Pull:
    """Pull that a walk downhill ends at, in steps that are halved where none leads on."""
    best, tilt, phase, failed = start, cone / _RINGS / 2, 0.0, 0
    for _ in range(_ROUNDS):
        if tilt < _FINEST or best.trapped <= _NOTHING * volume:
            break
        # Another phase every time: what traps has creases, and a walk along one of them needs its direction.
        phase += _PHASE
        leant = (_leant(best.direction, tilt, phase + 2 * np.pi * step / _WAYS) for step in range(_WAYS))
        found = min((ask(way) for way in leant if way[2] >= np.cos(cone) - 1e-9), key=lambda each: each.trapped)
        failed = 0 if found.trapped < best.trapped else failed + 1
        if failed == 0:
            best = found
        elif failed == _PATIENCE:
            tilt, failed = tilt / 2, 0
    return best


def _frame(direction: Floats) -> Floats:
    """Rows: x and y square to a direction, and the direction."""
    x = np.array([1.0, 0.0, 0.0]) - direction[0] * direction
    x = x / np.linalg.norm(x)
    return np.stack([x, np.cross(direction, x), direction])


def _leant(direction: Floats, tilt: float, turn: float) -> Floats:
    """Return a direction leant by an angle towards another angle round it."""
    x, y, z = _frame(direction)
    return np.asarray(np.cos(tilt) * z + np.sin(tilt) * (np.cos(turn) * x + np.sin(turn) * y))
