"""The longest bores of one width that a body can carry."""

from __future__ import annotations

from dataclasses import dataclass, replace
from typing import Final

import numpy as np

from meshlure.geometry.cylinder import Cylinder
from meshlure.geometry.samples import spread
from meshlure.geometry.surface import Floats
from meshlure.making.chamber.barrel import barrel
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

_GAIN = 4.0
"""By how much a bore is shortened at first for what it is too near: right where the skin slopes by 15 degrees."""

_LEAST_GAIN = 0.2
"""Least share of what was missing that a step is taken to have gained."""

_ENOUGH = 1e-6
"""m by which a distance may be less than asked for: what an exact one is found to."""

_SHORT = 3.0
"""Voxels by which a stretch of the grid may be shorter than it is."""

_ROUNDS = 5
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
    # A stretch of whole voxels may be shorter than it is by one at either end, and by what half a voxel's depth hides.
    looks = [look for look in grid.looks(rules) if look.length > least - _SHORT * grid.field.pitch]
    cloud = Cloud(site.points, site.way.points)
    found: list[Bore] = []
    for _ in range(most + 1):
        bore = _best(site, rules, looks, cloud)
        if bore is None:
            # What the grid promised does not hold.
            looks = looks[_STARTS:]
            continue
        if bore.length < least:
            break
        if not any(_meet(site, rules, bore, other) for other in found):
            found.append(bore)
        if len(found) == most:
            break
        keeps = replace(rules, radius=rules.radius + rules.clear / 2)
        looks = [look for look in looks if not _covers(site, keeps, bore, look.place, look.start, look.end)]
        cloud = cloud.joined(Cloud(cloud.skin[:0], site.axes.local(spread(barrel(bore.cut), site.spacing))))
    return found


def _best(site: Site, rules: Rules, looks: list[Look], cloud: Cloud) -> Bore | None:
    if not looks:
        return None
    nearest = min(abs(float(look.place[0])) for look in looks)
    middle = [look for look in looks if abs(float(look.place[0])) <= max(nearest + 1e-6, _BESIDE)]
    central = [replace(look, place=look.place * (0, 1)) for look in middle]
    found = _found(site, rules, central, cloud, free=False)
    # The grid's lengths, right to about two of its voxels, tell whether it is worth while to look beside the middle.
    if found is None or found.length < OFF_MIDDLE * looks[0].length:
        beside = _found(site, rules, looks, cloud, free=True)
        if beside is not None and (found is None or found.length < OFF_MIDDLE * beside.length):
            return beside
    return found


def _found(site: Site, rules: Rules, looks: list[Look], cloud: Cloud, *, free: bool) -> Bore | None:
    """The best bore near lines of the grid; where it is not free it stays in the mid-plane."""
    trials: list[_Trial] = []
    fair = _asked(rules, -_ENOUGH / 2)
    for look in looks[:_STARTS]:
        near = cloud.near(look.place, rules.reach)
        trials.append(_tried(near, fair, look.place, (look.start + look.end) / 2))
    trials.sort(key=lambda t: -t.worth)
    best: list[_Trial] = []
    for trial in trials:
        if trial.run.length > 0 and all(np.abs(trial.place - other.place).max() > _ROOM for other in best):
            best.append(trial)
    # A fit to the last micrometre is looked for only where there is none with a margin.
    for margin in (_CLOSE, -_ENOUGH / 2):
        bores = [
            _settled(site, rules, cloud.near(t.place, rules.reach + 2 * _ROOM), t, margin, free=free)
            for t in best[:_FOLLOWED]
        ]
        if any(bores):
            break
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


def _settled(site: Site, rules: Rules, cloud: Cloud, trial: _Trial, margin: float, *, free: bool) -> Bore | None:
    """The bore of a line, moved and shortened until its exact distances are what was asked for."""
    asked = _asked(rules, margin)
    trial = _moved(cloud, asked, trial, _ROOM / 2, _ROOM / 16, free=free)
    for rounds in range(_ROUNDS):
        if trial.run.length <= 0:
            return None
        before = trial
        trial = _moved(cloud.joined(_closer(site, rules, trial)), asked, trial, _ROOM / 16, _FINEST, free=free)
        if rounds < _ROUNDS - 2 and _far(before, trial) > _ROOM / 8:
            continue  # its ends have left what was looked at closely
        bore = _trimmed(site, rules, trial)
        if isinstance(bore, Bore):
            return bore
        # The points left a thin place beside the bore unseen: what is missing there is asked for on top.
        asked = replace(asked, wall=asked.wall + bore[0], clear=asked.clear + bore[1])
    return None


def _far(before: _Trial, after: _Trial) -> float:
    """By how much the farther end of a line's stretch has moved, m; nothing where nothing is left of it."""
    if after.run.length <= 0:
        return 0.0
    ends = (after.run.start - before.run.start, after.run.end - before.run.end)
    return max(float(np.hypot(end, np.linalg.norm(after.place - before.place))) for end in ends)


def _closer(site: Site, rules: Rules, trial: _Trial) -> Cloud:
    """Points so close together round both ends of a line's stretch that what they leave unseen does not count."""
    beyond, spacing = rules.reach - rules.radius + _ROOM / 4, site.spacing / 4
    tail, nose = (np.array([along, *trial.place]) for along in (trial.run.start, trial.run.end))
    skin = [site.skin_faces.points(end, end, rules.radius, beyond, spacing) for end in (tail, nose)]
    # A wire may run beside the bore all along.
    others = site.other_faces.points(tail, nose, rules.radius, rules.clear + _ROOM / 4, spacing)
    return Cloud(np.concatenate(skin), others)


def _trimmed(site: Site, rules: Rules, trial: _Trial) -> Bore | tuple[float, float]:
    """The bore of a line, shortened where the exact distances at its ends ask for it; or what it lacks beside."""
    if trial.run.length <= 0:
        return 0.0, 0.0
    ends = site.axes.mesh(np.array([[trial.run.start, *trial.place], [trial.run.end, *trial.place]]))
    cut = Cylinder(ends.mean(axis=0), site.axes.along, trial.run.length, rules.radius)
    lacks, gain, missed = (0.0, 0.0), _GAIN, np.inf
    for _ in range(_TRIMS):
        bore = measured(site, cut)
        nose, tail = (_lack(rules.end_wall, end) for end in bore.ends)
        lacks = _lack(rules.wall, bore.wall), _lack(rules.clear, bore.clear)
        for lack, at, keeps in zip(lacks, (bore.wall_at, bore.nearest_at), (rules.wall, rules.clear), strict=True):
            along = float((at - cut.middle) @ cut.axis)
            if lack > 0 and abs(along) < cut.length / 2 - keeps / 2:
                return lacks
            less = gain * (lack + _CLOSE / 2) if lack > 0 else 0.0
            nose, tail = (max(nose, less), tail) if along > 0 else (nose, max(tail, less))
        if max(nose, tail) <= 0:
            return bore
        if nose + tail >= cut.length:
            break
        # By what the last step gained the next is made to gain the rest.
        gain *= 1 / max(1 - max(lacks) / missed, _LEAST_GAIN) if missed < np.inf and max(lacks) > 0 else 1.0
        missed = max(lacks) if max(lacks) > 0 else np.inf
        cut = shortened(cut, nose, tail)
    return lacks


def _asked(rules: Rules, margin: float) -> Rules:
    """Every distance greater by a margin, m."""
    return replace(rules, wall=rules.wall + margin, end_wall=rules.end_wall + margin, clear=rules.clear + margin)


def _lack(asked: float, found: float) -> float:
    """By how much a distance falls short, m."""
    return asked - found if asked - found > _ENOUGH else 0.0


def _covers(site: Site, rules: Rules, bore: Bore, place: Floats, start: float, end: float) -> bool:
    """Whether a bore of the radius along a stretch of a line shares room with a bore."""
    low, high = sorted(site.axes.local(np.stack([bore.nose_end, bore.tail_end]))[:, 0])
    apart = float(np.hypot(*(place - site.axes.local(bore.cut.middle[None])[0, 1:])))
    return apart < 2 * rules.radius and start < high and end > low


def _meet(site: Site, rules: Rules, one: Bore, other: Bore) -> bool:
    tail, nose = site.axes.local(np.stack([one.tail_end, one.nose_end]))
    return _covers(site, rules, other, tail[1:], float(tail[0]), float(nose[0]))
