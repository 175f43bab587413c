"""Registration keys: cones on one board and dimples in the other, which let the rubber halves meet in one way only."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Final

import numpy as np

from meshlure.geometry.solids import Solid
from meshlure.geometry.surface import Bools, Floats
from meshlure.making.mould.box import Box
from meshlure.making.mould.floor import Floor
from meshlure.making.mould.lathe import turned
from meshlure.making.mould.runners import Runner

DIAMETERS: Final = (8e-3, 7e-3, 6e-3, 5e-3)
"""m at the foot, the first that fits: keys of 6 to 10 mm are usual. Common practice, no source."""

TAPER: Final = np.radians(10.0)
"""rad between a key's side and the pull: 5 to 15 degrees are usual. Common practice, no source."""

HEIGHT_SHARE: Final = 0.5
"""Height over diameter: 3 to 6 mm high at 6 to 10 mm across. Common practice, no source."""

CLEARANCE: Final = 0.2e-3
"""m between a key and its counterpart, square to the skin: 0.15 to 0.25 mm are usual. Common practice, no source."""

FROM_CAVITY: Final = (5e-3, 3e-3, 2e-3)
"""m of rubber between key and cavity or runner, the first that can be had: 5 mm and more are usual. Common practice."""

FROM_EDGE: Final = 1.5e-3
"""m of rubber between key and box."""

BOTTOM: Final = 1e-3
"""m of board left under a dimple."""

_APART: Final = 2e-3
"""m between the feet of two keys."""

_STEP: Final = 1e-3
"""m between the places that are tried."""

_CORNER: Final = 0.25
"""Share of the box's sides by which a key may stand off its corner."""

_LOPSIDED: Final = 0.6
"""Diameters by which some key must miss every other, once the box is turned round by half a turn."""


@dataclass(frozen=True, eq=False)
class Keys:
    """Where the keys stand, and their shape.

    Attributes
    ----------
    places : (n, 2) array, m
    diameter, height : float, m
        Of the cone on board A, at its foot.
    """

    places: Floats
    diameter: float
    height: float

    def bump(self, number: int, sink: float) -> Solid:
        """Return a key's cone above the plane, continued downwards by ``sink``, m."""
        return self._cone(number, self.diameter / 2, self.height, sink)

    def dimple(self, number: int, sink: float) -> Solid:
        """Return what is cut from board B for a key's counterpart, continued below the plane by ``sink``, m."""
        radius = self.diameter / 2 - CLEARANCE / np.cos(TAPER)
        return self._cone(number, float(radius), self.height - CLEARANCE, sink)

    def _cone(self, number: int, radius: float, height: float, sink: float) -> Solid:
        slope = float(np.tan(TAPER))
        profile = ((-sink, radius + sink * slope), (height, radius - height * slope))
        return Solid.of(turned(profile, np.append(self.places[number], 0.0), np.array([0.0, 0.0, 1.0])))


def lay_keys(
    floor: Floor, box: Box, runners: tuple[Runner, ...], count: int, board: float, spread: bool
) -> Keys | None:
    """Return the keys in a box; None where there is no room for so many.

    Parameters
    ----------
    floor : Floor
    box : Box
    runners : tuple of Runner
        Sprue, vents and pins.
    count : int
    board : float, m
        Thickness of a board, which the dimples must not break through.
    spread : bool
        Whether the first four must stand near the corners, as they should to hold the halves straight.

    Notes
    -----
    One goes near each corner of the box, one of these pushed aside so that the pattern does not fit once it is turned
    round by half a turn; further ones go where they are farthest from all others.
    """
    if count == 0:
        return Keys(np.empty((0, 2)), DIAMETERS[0], HEIGHT_SHARE * DIAMETERS[0])
    steps = [np.arange(low, high + _STEP / 2, _STEP) for low, high in zip(box.low, box.high, strict=True)]
    places = np.stack(np.meshgrid(*steps, indexing="ij"), axis=-1).reshape(-1, 2)
    free = floor.ground.away(places)
    for runner in runners:
        line = runner.line(0.0, _STEP / 2)
        way = np.linspace(0.0, runner.length, len(line))
        radius = np.interp(way, *np.array(runner.profile).T)
        free = np.minimum(free, (np.linalg.norm(places[:, None] - line[None], axis=-1) - radius).min(axis=1))
    edge = np.minimum(places - box.low, box.high - places).min(axis=1)
    for diameter in DIAMETERS:
        height = min(HEIGHT_SHARE * diameter, board - BOTTOM + CLEARANCE)
        for rubber in FROM_CAVITY:
            room = (free >= diameter / 2 + rubber) & (edge >= diameter / 2 + FROM_EDGE)
            chosen = _chosen(places, room, box, count, diameter, spread)
            if chosen is not None:
                return Keys(chosen, diameter, height)
    return None


def _chosen(places: Floats, room: Bools, box: Box, count: int, diameter: float, spread: bool) -> Floats | None:
    some = places[room]
    found: list[Floats] = []

    def take(target: Floats | None) -> bool:
        apart = np.full(len(some), np.inf)
        for other in found:
            apart = np.minimum(apart, np.linalg.norm(some - other, axis=1))
        good = apart >= diameter + _APART
        if target is not None and spread:
            good &= (np.abs(some - target) <= _CORNER * box.size).all(axis=1)
        if not good.any():
            return False
        score = apart if target is None else -np.linalg.norm(some - target, axis=1)
        found.append(some[np.where(good, score, -np.inf).argmax()])
        return True

    inset = diameter / 2 + FROM_EDGE
    low, high = box.low + inset, box.high - inset
    aside = np.array([max(2 * diameter, 0.2 * (high[0] - low[0])), 0.0])
    corners = [low, high, np.array([high[0], low[1]]), np.array([low[0], high[1]]) + aside]
    for number in range(count):
        if not take(corners[number] if number < len(corners) else None):
            return None
    chosen = np.array(found)
    if _lopsided(chosen, box, diameter):
        return chosen
    # The last one is moved as little as tells the pattern from its half-turned self.
    if spread and count <= len(corners):
        some = some[(np.abs(some - corners[count - 1]) <= _CORNER * box.size).all(axis=1)]
    for candidate in some[np.linalg.norm(some - chosen[-1], axis=1).argsort(kind="stable")]:
        trial = np.vstack([chosen[:-1], candidate])
        apart = np.linalg.norm(chosen[:-1] - candidate, axis=1)
        if (apart >= diameter + _APART).all() and _lopsided(trial, box, diameter):
            return trial
    return None


def _lopsided(places: Floats, box: Box, diameter: float) -> bool:
    """Whether some key misses every other by far once the box is turned round by half a turn about its middle."""
    turned_round = 2 * box.middle - places
    apart = np.linalg.norm(turned_round[:, None] - places[None], axis=-1).min(axis=1)
    return bool(apart.max() >= _LOPSIDED * diameter)
