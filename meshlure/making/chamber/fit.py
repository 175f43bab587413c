"""The longest bores of one width that a body can carry."""

from __future__ import annotations

from dataclasses import dataclass, replace
from typing import Final

import numpy as np

from meshlure.geometry.cylinder import Cylinder
from meshlure.geometry.surface import Floats
from meshlure.making.chamber.bore import Bore, measured, shortened
from meshlure.making.chamber.grid import Grid, Look
from meshlure.making.chamber.line import Cloud, Rules, Run, longest
from meshlure.making.chamber.site import Site

OFF_MIDDLE: Final = 0.85
"""Of the longest bore anywhere, the share that one in the mid-plane must reach to be taken instead: ours."""

_WALL_WORTH: Final = 0.02
"""Lengths that a thicker wall is worth: it decides only between bores of one length, as in a box."""

_STARTS = 8
"""Lines of the grid that are looked at more closely."""

_FOLLOWED = 2
"""Of these, how many are followed to the end."""

_BESIDE = 0.4e-3
"""m from the mid-plane within which a line of the grid stands for one in it."""

_ROOM = 1.0e-3
"""m by which a line may move in one search."""

_FINEST = 4e-6
"""m. Steps of a line's place shorter than this end its search."""

_CLOSE = 4e-6
"""m by which every distance is made greater than asked for: what the points still miss."""

_ROUNDS = 4
_TRIMS = 8

_WAYS = np.array([[0, 1], [0, -1], [1, 0], [-1, 0], [1, 1], [1, -1], [-1, 1], [-1, -1]], dtype=np.float64)


@dataclass(frozen=True, eq=False)
class _Trial:
    """A line with what it carries."""

    place: Floats
    run: Run
    worth: float


def bores(site: Site, grid: Grid, rules: Rules, least: float, most: int = 1) -> list[Bore]:
    """Return the longest bores of a width, the longest first.

    Parameters
    ----------
    site : Site
    grid : Grid
    rules : Rules
    least : float, m
        Length below which a bore is of no use.
    most : int
        How many places to offer; no two of them share room.

    Notes
    -----
    Lines of the grid are ranked by the longest stretch that it allows, the best are looked at with the points that
    stand for the skin, and moved across until no step lengthens them. What comes out is held against exact distances
    to the mesh, and shortened where those are less than asked for. A bore in the mid-plane is preferred.
    """
    looks = [look for look in grid.looks(rules) if look.length > 0.7 * least]
    found: list[Bore] = []
    for _ in range(most):
        bore = _best(site, rules, [look for look in looks if not _taken(look, site, rules, found)])
        if bore is None or bore.length < least:
            break
        found.append(bore)
    return found


def _best(site: Site, rules: Rules, looks: list[Look]) -> Bore | None:
    if not looks:
        return None
    nearest = min(abs(float(look.place[0])) for look in looks)
    middle = [look for look in looks if abs(float(look.place[0])) <= max(nearest + 1e-6, _BESIDE)]
    central = [replace(look, place=look.place * (0, 1)) for look in middle]
    found = _found(site, rules, central, free=False)
    # The grid's lengths, right to about two of its voxels, tell whether it is worth while to look beside the middle.
    if found is None or found.length < OFF_MIDDLE * looks[0].length:
        beside = _found(site, rules, looks, free=True)
        if beside is not None and (found is None or found.length < OFF_MIDDLE * beside.length):
            return beside
    return found


def _found(site: Site, rules: Rules, looks: list[Look], *, free: bool) -> Bore | None:
    """The best bore near lines of the grid; where it is not free it stays in the mid-plane."""
    cloud = Cloud(site.points, site.way.points)
    trials: list[_Trial] = []
    for look in looks[:_STARTS]:
        near = cloud.near(look.place, rules.reach)
        trials.append(_tried(near, rules, look.place, (look.start + look.end) / 2))
    trials.sort(key=lambda t: -t.worth)
    best: list[_Trial] = []
    for trial in trials:
        if trial.run.length > 0 and all(np.abs(trial.place - other.place).max() > _ROOM for other in best):
            best.append(trial)
    bores = [
        _settled(site, rules, cloud.near(t.place, rules.reach + 2 * _ROOM), t, free=free) for t in best[:_FOLLOWED]
    ]
    return max((bore for bore in bores if bore is not None), key=lambda bore: bore.length, default=None)


def _tried(cloud: Cloud, rules: Rules, place: Floats, seed: float) -> _Trial:
    run = longest(cloud, rules, place, seed)
    if run.length <= 0:
        return _Trial(place, run, run.length)
    x = cloud.skin[:, 0]
    beside = cloud.skin[(x >= run.start) & (x <= run.end), 1:] - place
    wall = float(np.sqrt((beside**2).sum(axis=1).min(initial=np.inf))) - rules.radius
    return _Trial(place, run, run.length + _WALL_WORTH * min(wall, rules.reach - rules.radius + _ROOM / 2))


def _moved(cloud: Cloud, rules: Rules, trial: _Trial, first: float, last: float, *, free: bool) -> _Trial:
    """A line moved across by steps, as long as it gains; they grow shorter, from first to last, where none does."""
    best, step = _tried(cloud, rules, trial.place, (trial.run.start + trial.run.end) / 2), first
    ways = _WAYS if free else _WAYS[:2]
    while step >= last:
        seed = (best.run.start + best.run.end) / 2
        steps = [place for way in ways if np.abs((place := best.place + step * way) - trial.place).max() <= _ROOM]
        better = max((_tried(cloud, rules, place, seed) for place in steps), key=lambda t: t.worth, default=best)
        if better.worth > best.worth + 1e-9:
            best = better
        else:
            step /= 2
    return best


def _settled(site: Site, rules: Rules, cloud: Cloud, trial: _Trial, *, free: bool) -> Bore | None:
    """The bore of a line, moved and shortened until its exact distances are what was asked for."""
    asked = replace(rules, wall=rules.wall + _CLOSE, end_wall=rules.end_wall + _CLOSE, clear=rules.clear + _CLOSE)
    trial = _moved(cloud, asked, trial, _ROOM / 2, _ROOM / 16, free=free)
    for _ in range(_ROUNDS):
        if trial.run.length <= 0:
            return None
        trial = _moved(cloud.joined(_closer(site, rules, trial)), asked, trial, _ROOM / 16, _FINEST, free=free)
        bore = _trimmed(site, rules, trial)
        if isinstance(bore, Bore):
            return bore
        # The points left a thin place beside the bore unseen: what is missing there is asked for on top.
        asked = replace(asked, wall=asked.wall + bore[0], clear=asked.clear + bore[1])
    return None


def _closer(site: Site, rules: Rules, trial: _Trial) -> Cloud:
    """Points so close together round both ends of a line's stretch that what they leave unseen does not count."""
    reach = rules.reach - rules.radius + _ROOM / 4
    ends = [np.array([along, *trial.place]) for along in (trial.run.start, trial.run.end)]
    skin, others = (
        np.concatenate([faces.points(end, rules.radius, reach, site.spacing / 4) for end in ends])
        for faces in (site.skin_faces, site.other_faces)
    )
    return Cloud(skin, others)


def _trimmed(site: Site, rules: Rules, trial: _Trial) -> Bore | tuple[float, float]:
    """The bore of a line, shortened where the exact distances at its ends ask for it; or what it lacks beside."""
    if trial.run.length <= 0:
        return 0.0, 0.0
    ends = site.axes.mesh(np.array([[trial.run.start, *trial.place], [trial.run.end, *trial.place]]))
    cut = Cylinder(ends.mean(axis=0), site.axes.along, trial.run.length, rules.radius)
    for _ in range(_TRIMS):
        bore = measured(site, cut)
        thin, near = rules.wall - bore.wall, rules.clear - bore.clear
        along = float((bore.wall_at - cut.middle) @ cut.axis)
        if max(thin, near) > 0 and abs(along) < cut.length / 2 - rules.wall / 2:
            return max(thin, 0.0), max(near, 0.0)
        nose, tail = (max(rules.end_wall - end, 0.0) for end in bore.ends)
        # Shortening gains about a third of itself where the skin slopes by 20 degrees; the next round gains the rest.
        short = 3 * max(thin, near, 0.0)
        nose, tail = (max(nose, short), tail) if along > 0 else (nose, max(tail, short))
        if max(nose, tail) <= 0:
            return bore
        if nose + tail >= cut.length:
            break
        cut = shortened(cut, nose, tail)
    return max(thin, 0.0), max(near, 0.0)


def _taken(look: Look, site: Site, rules: Rules, found: list[Bore]) -> bool:
    """Whether a line's stretch shares room with a bore found before."""
    for bore in found:
        low, high = sorted(site.axes.local(np.stack([bore.nose_end, bore.tail_end]))[:, 0])
        place = site.axes.local(bore.cut.middle[None])[0, 1:]
        apart = float(np.hypot(*(look.place - place)))
        if apart < 2 * rules.radius + rules.clear and look.start < high + rules.clear and look.end > low - rules.clear:
            return True
    return False
