"""Barriers: the least rise of the potential that takes a bait out of one resting posture into any other."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from itertools import combinations

import numpy as np

from meshlure.geometry.directions import DirectionGrid, direction_grid
from meshlure.geometry.flooding import first_meetings
from meshlure.geometry.surface import Floats
from meshlure.physics.landscape import Landscape
from meshlure.physics.oneness import among
from meshlure.physics.posture import Rest
from meshlure.physics.potential import Potential, State, tangents, turned

_STEPS = 30
_RADIUS = 0.15
"""rad. Longest step towards a pass."""

_ASTRAY = np.cos(0.6)
"""A search that ends farther from its start has found another place than the grid showed."""

_CLOSE = 1e-9
"""m. A search ends where the next step would change the height of the pass by less."""

_ASIDE = 0.05
"""rad. From a pass, descents to both sides start this far away."""

_SAME = np.cos(np.radians(1.0))
_BOWL = np.cos(np.radians(1.0))

_CANDIDATES = 24
"""Passes that are looked at, the lowest of the grid first."""

_LINKS = 6
"""Directions of the grid that a posture is taken as a neighbour of."""

_NEAR = np.cos(np.radians(30.0))
_SHARES = np.linspace(0.1, 0.9, 9)
"""Minima nearer than this are looked at for a pass between them, at these shares of the way."""

_MISSED, _UNSURE = 1.25, 0.05e-3
"""A settled pass higher than this many times the grid's and so many metres was not the lowest."""


@dataclass(frozen=True, eq=False)
class Barrier:
    """What keeps a bait in a resting posture.

    Attributes
    ----------
    rise : float, m
        Of the potential, from the posture to the lowest pass on any way to another one.
    over : (3,) array
        Up-direction at the pass.
    settled : bool
        Whether the pass is a critical point of the full hull's potential; else it is the lowest way that a grid
        of directions offers, and the rise is too high by what a few degrees make.
    """

    rise: float
    over: Floats
    settled: bool


def barriers(rough: Potential, full: Potential, rests: Sequence[Rest], nose: Floats) -> tuple[Barrier | None, ...]:
    """Return for each resting posture the least rise of the potential on a way to any other, m.

    Parameters
    ----------
    rough : Potential
        On a coarse copy of the hull, at the same submerged share.
    full : Potential
        Of the hull itself.
    rests : sequence of Rest
        Every stable posture, from `posture.resting`; directions only are taken from them.
    nose : (3,) array
        Direction out of the nose; the grid's lines follow it, as the valleys of a slender bait do.

    Returns
    -------
    tuple of Barrier or None
        None throughout where there is only one posture.

    Notes
    -----
    The lowest way between two minima leads over a critical point of index one. Saddles of the potential on a grid of
    directions are sharpened by Newton's method on the coarse copy; descents to both sides tell which postures each
    of them joins; the first in ascending order that joins a posture to another one is the way out of it, and is
    settled on the full hull. Where a flood of the grid's energies finds a much lower way, that one counts.
    Energies are those of slow tilting: a bait's swing and waves need less.

    References
    ----------
    J. Milnor (1963), Morse Theory, Annals of Mathematics Studies 51.
    """
    if len(rests) < 2:
        return (None,) * len(rests)
    grid = direction_grid(np.vstack([nose, tangents(nose).T]))
    landscape = Landscape.of(rough)
    energies = landscape.energies(grid.directions)
    minima = [rough.descended(rest.state.up, 0.1) for rest in rests]
    starts = [*_between(rough, minima), *grid.directions[grid.saddles(energies)[:_CANDIDATES]]]
    found: dict[int, Barrier] = {}
    for saddle in _saddles(rough, starts):
        ends = {_end(rough, saddle, side, minima) for side in (-1.0, 1.0)}
        open_ends = [end for end in ends if end is not None and end not in found]
        if len(ends) < 2 or None in ends or not open_ends:
            continue
        top = _pass(full, saddle.up)
        for end in open_ends:
            found[end] = _barrier(full, rests[end], top or full.at(saddle.up, saddle), top is not None)
        if len(found) == len(rests):
            break
    ups = np.array([rest.state.up for rest in rests])
    for number, (over, rise) in enumerate(_grid_ways(grid, energies, ups, landscape.energies(ups))):
        # A pass that the search has missed shows where the grid knows a much lower way.
        if number not in found or found[number].rise > _MISSED * rise + _UNSURE:
            by_grid = _barrier(full, rests[number], full.at(over), False)
            if number not in found or by_grid.rise < found[number].rise:
                found[number] = by_grid
    return tuple(found[number] for number in range(len(rests)))


def _barrier(full: Potential, rest: Rest, top: State, settled: bool) -> Barrier:
    # The posture may have been settled without hardware that is dry there; its height is taken where the pass's is.
    height = full.at(rest.state.up, rest.state).energy
    # A way starts at the posture itself, so that its highest point is nowhere below it.
    return Barrier(max(top.energy, height) - height, top.up, settled)


def _between(rough: Potential, minima: Sequence[State]) -> Iterator[Floats]:
    """Yield the highest of a few directions between each two minima that are too near for the grid to part."""
    for one, other in combinations(minima, 2):
        if one.up @ other.up < _NEAR:
            continue
        ways = [one.up + share * (other.up - one.up) for share in _SHARES]
        states = [rough.at(np.asarray(way / np.linalg.norm(way)), one) for way in ways]
        yield max(states, key=lambda state: state.energy).up


def _saddles(rough: Potential, starts: Sequence[Floats]) -> list[State]:
    """Return the saddles of the coarse copy's potential near some directions, the lowest first, each once."""
    found: list[State] = []
    for start in starts:
        saddle = _pass(rough, start)
        if saddle is not None and all(saddle.up @ other.up < _SAME for other in found):
            found.append(saddle)
    return sorted(found, key=lambda state: state.energy)


def _grid_ways(grid: DirectionGrid, energies: Floats, ups: Floats, heights: Floats) -> list[tuple[Floats, float]]:
    """Return the highest direction on the lowest way over the grid from each posture to any other, and its rise, m."""
    first = len(energies)
    nearest = np.argsort(grid.directions @ ups.T, axis=0)[-_LINKS:].T
    links = np.column_stack([nearest.reshape(-1), np.repeat(np.arange(first, first + len(ups)), _LINKS)])
    values, directions = np.concatenate([energies, heights]), np.vstack([grid.directions, ups])
    met = first_meetings(values, np.vstack([grid.edges, links]), np.arange(first, first + len(ups)))
    return [(directions[node], float(values[node] - height)) for node, height in zip(met, heights, strict=True)]


def _end(rough: Potential, saddle: State, side: float, minima: Sequence[State]) -> int | None:
    """Descend from a pass to one side; return the number of the posture that this comes to rest in."""
    soft = saddle.modes()[1][:, 0]
    start = turned(saddle.up, side * _ASIDE * soft)

    def arrived(state: State) -> bool:
        return any(state.up @ other.up >= _BOWL for other in minima) and bool(state.modes()[0][0] > 0)

    return among(rough, rough.descended(start, _ASIDE, arrived), minima, _BOWL)


def _pass(potential: Potential, up: Floats) -> State | None:
    """Return the saddle near a direction, by Newton's method up its softer mode and down the other; or None."""
    state = potential.at(up)
    for _ in range(_STEPS):
        heights, directions = state.modes()
        slope = directions.T @ state.lever
        floor = 1e-7 * max(float(np.abs(heights).max()), 1e-9)
        step = np.array(
            [
                -slope[0] / heights[0] if heights[0] < -floor else np.sign(slope[0]) * _RADIUS,
                -slope[1] / heights[1] if heights[1] > floor else -np.sign(slope[1]) * _RADIUS,
            ]
        )
        length = float(np.linalg.norm(step))
        if length > _RADIUS:
            step *= _RADIUS / length
        if np.abs(slope * step).sum() / 2 <= _CLOSE:
            return state if heights[0] < 0 else None
        state = potential.at(turned(state.up, directions @ step), state)
        if state.up @ up < _ASTRAY:
            return None
    return None
