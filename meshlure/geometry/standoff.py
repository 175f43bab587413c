"""Standoff: the least distance between a mesh and the skin of a cylinder or a ball, to a tolerance that is proved."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Final, Protocol

import numpy as np

from meshlure.geometry.clearance import Boxes, closest_places
from meshlure.geometry.cylinder import Cylinder
from meshlure.geometry.surface import Floats

TOLERANCE: Final = 2e-6
"""m. A standoff is found to this: a tenth of what a good printer resolves."""

_AT_ONCE: Final = 20_000
"""Triangles looked at together: more would only take more memory."""

_POLISHES = 4
"""Times in every round that the best place is carried to and fro between its triangle and the round skin."""


@dataclass(frozen=True, eq=False)
class Standoff:
    """The least distance found between a mesh and a round skin.

    Attributes
    ----------
    distance : float, m
        Between the two places; above the true least one by at most the tolerance. Without a sign: 0 where the two
        cross, and positive as well where the round solid lies outside.
    place, on : (3,) arrays, m
        Where it is least: on the mesh, and on the round skin.
    """

    distance: float
    place: Floats
    on: Floats


def cylinder_standoff(boxes: Boxes, cylinder: Cylinder, tolerance: float = TOLERANCE) -> Standoff:
    """Return the least distance between a mesh and a cylinder's whole skin, side and both ends.

    Parameters
    ----------
    boxes : Boxes
        Of the mesh, closed or not.
    cylinder : Cylinder
    tolerance : float, m
        Positive.

    Raises
    ------
    ValueError
        A tolerance that is not positive.

    Notes
    -----
    Branch and bound over the mesh's triangles, the nearest place on the skin being known as a formula. The distance f
    to the skin changes by no more than the way gone, so that no point within R of a triangle's middle is nearer than
    f - R. Where f is convex, or nearly, a tangent bounds it from below: f + g.(q - p) - K R^2/2, g its gradient, K the
    most that f curves downward: 0 outside a convex solid, 1/rho at the least radius rho within a round one.
    Triangles whose bound is below the least found less the tolerance are halved twice, across their longest side.

    References
    ----------
    A. H. Land, A. G. Doig (1960), An automatic method of solving discrete programming problems, Econometrica 28(3):
    branch and bound. M.-C. Rivara (1984), Algorithms for refining triangular grids suitable for adaptive and multigrid
    techniques, Int. J. Numer. Meth. Eng. 20(4): the halving. Both from memory.
    """
    head, foot = (_Disc(end, cylinder.axis, cylinder.radius) for end in cylinder.ends)
    found = _least(boxes, _Tube(cylinder), tolerance)
    for face in (head, foot):
        other = _least(boxes, face, tolerance, found.distance)
        found = other if other.distance < found.distance else found
    return found


def solid_standoff(boxes: Boxes, cylinder: Cylinder, tolerance: float = TOLERANCE) -> Standoff:
    """Return the least distance between a mesh and a solid cylinder; 0 where some of the mesh lies in it.

    Parameters
    ----------
    boxes : Boxes
    cylinder : Cylinder
    tolerance : float, m

    Notes
    -----
    As `cylinder_standoff`; the distance from a convex solid is convex, so that tangents bound it everywhere.
    """
    return _least(boxes, _Within(cylinder), tolerance)


def clears(boxes: Boxes, cylinder: Cylinder, distance: float, tolerance: float = TOLERANCE) -> bool:
    """Tell whether no place of a mesh is nearer to a solid cylinder than a distance, m, or lies in it.

    Parameters
    ----------
    boxes : Boxes
    cylinder : Cylinder
    distance : float, m
    tolerance : float, m
        Positive; what is nearer by less than this may pass, and what is as near as this is too near for any distance.

    Notes
    -----
    As `solid_standoff`, but quicker: it ends with the first place that is too near. What clears is proved to be no
    nearer than the distance less the tolerance, and what does not to be nearer than the distance less half of it; in
    between either answer may come, so that a skin which runs along the threshold is not halved without end. A tangent
    misses the distance by less than R^2/2 over the distance itself: of triangles of a radius R below the root of
    distance times tolerance none is halved but those on whose corner it depends.
    """
    skin, bar = _Within(cylinder), max(distance - tolerance, tolerance)
    near = bar + tolerance / 2
    middle, reach = (boxes.low + boxes.high) / 2, _length(boxes.high - boxes.low) / 2
    kept = _length(middle - skin.nearest(middle)) - reach < bar
    middle, reach = boxes.middle[kept].reshape(-1, 3), boxes.radius[kept].reshape(-1)
    triangles = boxes.corners[kept].reshape(-1, 3, 3)[_length(middle - skin.nearest(middle)) - reach < bar]
    waiting = [triangles]
    while waiting:
        triangles = waiting.pop()
        waiting += [triangles[at : at + _AT_ONCE] for at in range(_AT_ONCE, len(triangles), _AT_ONCE)]
        triangles = triangles[:_AT_ONCE]
        middle = triangles.mean(axis=1)
        away = middle - skin.nearest(middle)
        apart = _length(away)
        if (apart < near).any():
            return False
        toward = triangles - middle[:, None]
        gradient = away / apart[:, None]
        low = apart + np.einsum("nki,ni->nk", toward, gradient).min(axis=1)
        open_still = low < bar
        if open_still.any():
            waiting.append(_halved(_halved(triangles[open_still])))
    return True


def side_standoff(boxes: Boxes, cylinder: Cylinder, tolerance: float = TOLERANCE) -> Standoff:
    """Return the least distance between a mesh and a cylinder's side without its ends; as `cylinder_standoff`."""
    return _least(boxes, _Tube(cylinder), tolerance)


def end_standoff(boxes: Boxes, cylinder: Cylinder, end: int, tolerance: float = TOLERANCE) -> Standoff:
    """Return the least distance between a mesh and one flat end of a cylinder; as `cylinder_standoff`.

    Parameters
    ----------
    boxes : Boxes
    cylinder : Cylinder
    end : int
        Which of `Cylinder.ends`: 0 the one that the axis points to, 1 the other.
    tolerance : float, m
    """
    return _least(boxes, _Disc(cylinder.ends[end], cylinder.axis, cylinder.radius), tolerance)


def ball_standoff(boxes: Boxes, centre: Floats, radius: float, tolerance: float = TOLERANCE) -> Standoff:
    """Return the least distance between a mesh and a ball's skin; as `cylinder_standoff`.

    Parameters
    ----------
    boxes : Boxes
    centre : (3,) array, m
    radius : float, m
    tolerance : float, m
    """
    return _least(boxes, _Sphere(np.asarray(centre, dtype=np.float64), radius), tolerance)


class _Skin(Protocol):
    def nearest(self, points: Floats) -> Floats:
        """Nearest place on the skin to each of (n, 3) points, m."""

    def sag(self, points: Floats, reach: Floats) -> Floats:
        """Most that the distance drops below its tangent within a reach of points, (n,), m; infinite at a fold."""

    def meeting(self, start: Floats, way: Floats) -> Floats:
        """Shares, (2, n), of ways, (n, 3), m, at which their lines meet the skin; not a number where they do not."""


@dataclass(frozen=True, eq=False)
class _Tube:
    """A cylinder's side."""

    cylinder: Cylinder

    def nearest(self, points: Floats) -> Floats:
        height, out, away = self._parts(points)
        # On the axis every direction is as near.
        spoke = np.where(away[:, None] > 0, out / np.where(away > 0, away, 1.0)[:, None], self.cylinder.across[0])
        half = self.cylinder.length / 2
        rise = np.clip(height, -half, half)
        return np.asarray(self.cylinder.middle + rise[:, None] * self.cylinder.axis + self.cylinder.radius * spoke)

    def sag(self, points: Floats, reach: Floats) -> Floats:
        return _round_sag(self._parts(points)[2], reach, self.cylinder.radius)

    def meeting(self, start: Floats, way: Floats) -> Floats:
        height, out, _ = self._parts(start)
        rise = way @ self.cylinder.axis
        share = _round_meeting(out, way - rise[:, None] * self.cylinder.axis, self.cylinder.radius)
        return np.where(np.abs(height + share * rise) <= self.cylinder.length / 2, share, np.nan)

    def _parts(self, points: Floats) -> tuple[Floats, Floats, Floats]:
        """Height along the axis, (n,); way out from the axis, (n, 3), and its length, (n,)."""
        off = points - self.cylinder.middle
        height = off @ self.cylinder.axis
        out = off - height[:, None] * self.cylinder.axis
        return height, out, _length(out)


@dataclass(frozen=True, eq=False)
class _Within:
    """A solid cylinder: what lies in it is its own nearest place."""

    cylinder: Cylinder

    def nearest(self, points: Floats) -> Floats:
        off = points - self.cylinder.middle
        height = off @ self.cylinder.axis
        out = off - height[:, None] * self.cylinder.axis
        away, half = _length(out), self.cylinder.length / 2
        held = np.minimum(self.cylinder.radius / np.where(away > 0, away, 1.0), 1.0)
        within = (held == 1.0) & (np.abs(height) <= half)
        near = self.cylinder.middle + np.clip(height, -half, half)[:, None] * self.cylinder.axis + held[:, None] * out
        return np.asarray(np.where(within[:, None], points, near))

    def sag(self, points: Floats, reach: Floats) -> Floats:
        return np.zeros(len(points))

    def meeting(self, start: Floats, way: Floats) -> Floats:
        # Halving comes upon what is within by itself.
        return np.full((2, len(start)), np.nan)


@dataclass(frozen=True, eq=False)
class _Disc:
    """A flat round end."""

    centre: Floats
    normal: Floats
    radius: float

    def nearest(self, points: Floats) -> Floats:
        off = points - self.centre
        out = off - (off @ self.normal)[:, None] * self.normal
        away = _length(out)
        return np.asarray(self.centre + out * np.minimum(self.radius / np.where(away > 0, away, 1.0), 1.0)[:, None])

    def sag(self, points: Floats, reach: Floats) -> Floats:
        return np.zeros(len(points))

    def meeting(self, start: Floats, way: Floats) -> Floats:
        off, rise = start - self.centre, way @ self.normal
        share = -(off @ self.normal) / np.where(rise == 0, np.nan, rise)
        share[~(_length(off + share[:, None] * way) <= self.radius)] = np.nan
        return np.stack([share, share])


@dataclass(frozen=True, eq=False)
class _Sphere:
    """A ball's skin."""

    centre: Floats
    radius: float

    def nearest(self, points: Floats) -> Floats:
        off = points - self.centre
        away = _length(off)
        spoke = np.where(away[:, None] > 0, off / np.where(away > 0, away, 1.0)[:, None], np.array([1.0, 0, 0]))
        return np.asarray(self.centre + self.radius * spoke)

    def sag(self, points: Floats, reach: Floats) -> Floats:
        return _round_sag(_length(points - self.centre), reach, self.radius)

    def meeting(self, start: Floats, way: Floats) -> Floats:
        return _round_meeting(start - self.centre, way, self.radius)


def _round_sag(away: Floats, reach: Floats, radius: float) -> Floats:
    """Sag of the distance to a round skin: none outside it, R^2/(2 rho) within, a fold in its middle."""
    least = away - reach
    within = np.where(least > 0, reach**2 / (2 * np.where(least > 0, least, 1.0)), np.inf)
    return np.where(least >= radius, 0.0, within)


def _round_meeting(off: Floats, way: Floats, radius: float) -> Floats:
    """Shares of ways, (2, n), at which lines that start off a middle come to a radius."""
    square, mixed = np.einsum("ni,ni->n", way, way), np.einsum("ni,ni->n", off, way)
    root = mixed**2 - square * (np.einsum("ni,ni->n", off, off) - radius**2)
    meets = (root >= 0) & (square > 0)
    root, square = np.sqrt(np.where(meets, root, np.nan)), np.where(meets, square, np.nan)
    return np.stack([(-mixed - root) / square, (-mixed + root) / square])


def _least(boxes: Boxes, skin: _Skin, tolerance: float, below: float = np.inf) -> Standoff:
    """Least distance to a skin; only what is below a distance is looked for."""
    if not tolerance > 0:
        raise ValueError(f"a standoff takes a positive tolerance, not {tolerance}")
    start = boxes.corners[:, 0, 0]
    best = _nearer(None, start, skin)
    bar = min(best.distance, below)
    middle, reach = (boxes.low + boxes.high) / 2, _length(boxes.high - boxes.low) / 2
    kept = _length(middle - skin.nearest(middle)) - reach < bar
    middle, reach = boxes.middle[kept].reshape(-1, 3), boxes.radius[kept].reshape(-1)
    apart = _length(middle - skin.nearest(middle))
    bar = min(bar, float(apart.min(initial=np.inf)))
    triangles = boxes.corners[kept].reshape(-1, 3, 3)[apart - reach < bar - tolerance]
    while len(triangles):
        middle = triangles.mean(axis=1)
        toward = triangles - middle[:, None]
        reach = np.sqrt(np.einsum("nki,nki->nk", toward, toward).max(axis=1))
        on = skin.nearest(middle)
        away = middle - on
        apart = _length(away)
        best = _nearer(best, _polished(triangles[apart.argmin()], on[apart.argmin()], skin), skin)
        best = _nearer(best, _crossed(triangles[apart <= reach], skin), skin)
        gradient = away / np.where(apart > 0, apart, 1.0)[:, None]
        tangent = np.einsum("nki,ni->nk", toward, gradient).min(axis=1) - skin.sag(middle, reach)
        low = np.maximum(apart + np.maximum(-reach, np.where(apart > 0, tangent, -np.inf)), 0.0)
        triangles = _halved(_halved(triangles[low < min(best.distance, below) - tolerance]))
    return best


def _polished(triangle: Floats, on: Floats, skin: _Skin) -> Floats:
    """Places of a triangle, (n, 3), each the nearest to the skin's place nearest to the one before."""
    places = []
    for _ in range(_POLISHES):
        place = closest_places(on, triangle)
        on = skin.nearest(place[None])[0]
        places.append(place)
    return np.array(places)


def _crossed(triangles: Floats, skin: _Skin) -> Floats:
    """Where sides of triangles go through the skin, (n, 3)."""
    start = triangles.reshape(-1, 3)
    way = triangles[:, [1, 2, 0]].reshape(-1, 3) - start
    share = skin.meeting(start, way)
    which, side = np.nonzero((share >= 0) & (share <= 1))
    return np.asarray(start[side] + share[which, side][:, None] * way[side])


def _nearer(best: Standoff | None, places: Floats, skin: _Skin) -> Standoff:
    """The best of what was found and of some places of the mesh."""
    if best is not None and not len(places):
        return best
    on = skin.nearest(places)
    apart = _length(places - on)
    least = int(apart.argmin())
    if best is not None and best.distance <= apart[least]:
        return best
    return Standoff(float(apart[least]), places[least], on[least])


def _halved(triangles: Floats) -> Floats:
    """Triangles cut in two across their longest side, which makes slivers fat."""
    sides = triangles[:, [1, 2, 0]] - triangles
    longest = np.einsum("nki,nki->nk", sides, sides).argmax(axis=1)
    each = np.arange(len(triangles))
    start, end, across = (triangles[each, (longest + turn) % 3] for turn in range(3))
    middle = (start + end) / 2
    return np.concatenate([np.stack([across, start, middle], axis=1), np.stack([end, across, middle], axis=1)])


def _length(vectors: Floats) -> Floats:
    return np.asarray(np.sqrt(np.einsum("...i,...i->...", vectors, vectors)))
