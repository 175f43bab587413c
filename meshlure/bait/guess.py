"""Which way a body's nose and back are likely to be: from its symmetry, its length, its bulk and what lies in it."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from enum import StrEnum
from typing import Final

import numpy as np

from meshlure.geometry.blocks import BlockIndex
from meshlure.geometry.clearance import Boxes
from meshlure.geometry.moments import Moments, solid_moments
from meshlure.geometry.surface import Floats, Surface

MIRRORED: Final = 2e-3
"""Share of the length by which a body may differ from its mirror image and still count as symmetric: what coarse facets
do to it; our choice."""
DECISIVE: Final = 4.0
"""Times by which one plane of symmetry must be better than another to be the only one; our choice."""
NEAR_AXIS: Final = np.radians(20.0)
"""A direction within this of an axis of the mesh is taken for that axis: a deep belly turns the principal axis that far
from the line that the body was drawn along; our choice."""
SLENDER: Final = 1.15
"""Length over the next extent under which a body does not show which way it is long; our choice."""
BULKY: Final = 0.02
"""Share of the length by which the centroid must lie off the middle to tell the nose; our choice."""
BLUNT: Final = 0.2
"""Share of the greatest section that an end shows at once where it is flat; our choice."""
LOW: Final = 0.01
"""Share of the length by which weights must lie off the centroid to tell the belly; our choice."""
_SAMPLES: Final = 500
"""Vertices, and middles of faces, whose mirror images are held against the skin."""
_PLANES: Final = 61
_FACE: Final = 5e-3
"""Share of the length behind an end at which its face is looked at."""


class Sureness(StrEnum):
    """How much a guess can be relied on."""

    SURE = "sure"
    LIKELY = "likely"
    OPEN = "open"
    STATED = "stated"


@dataclass(frozen=True, eq=False)
class Guess:
    """A direction that a body suggests.

    Attributes
    ----------
    direction : (3,) array
        Unit vector, mesh coordinates.
    sureness : Sureness
    why : str
        What it rests on, in words.
    """

    direction: Floats
    sureness: Sureness
    why: str


@dataclass(frozen=True, eq=False)
class Pose:
    """How a body is likely to lie.

    Attributes
    ----------
    nose, back : Guess
        At a right angle to each other.
    extents : (3,) array, m
        Along nose, back and side.
    """

    nose: Guess
    back: Guess
    extents: Floats


@dataclass(frozen=True, eq=False)
class Clue:
    """A piece in or on the body that tells something of its directions.

    Attributes
    ----------
    name : str
    centre : (3,) array, m
    amount : float, kg
        What it weighs more than the body that it takes the place of.
    """

    name: str
    centre: Floats
    amount: float = 1.0


@dataclass(frozen=True, eq=False)
class _Body:
    surface: Surface
    moments: Moments
    boxes: Boxes
    points: Floats
    length: float

    @classmethod
    def of(cls, surface: Surface) -> _Body:
        moments = solid_moments(surface)
        step = max(1, len(surface.vertices) // _SAMPLES)
        middles = surface.corners.mean(axis=1)
        points = np.concatenate([surface.vertices[::step], middles[:: max(1, len(middles) // _SAMPLES)]])
        return cls(surface, moments, Boxes.of(surface), points, float(np.ptp(surface.vertices @ _axes(moments)[0])))

    def unlike(self, normal: Floats) -> float:
        """How far the body lies from its mirror image, as a share of its length: root mean square over its skin."""
        away = (self.points - self.moments.centre) @ normal
        mirrored = self.points - 2 * away[:, None] * normal
        return float(np.sqrt(np.mean(self.boxes.nearest(mirrored).distance ** 2))) / self.length

    def mirrors(self, normal: Floats) -> bool:
        return self.unlike(normal) < MIRRORED


def guess(
    surface: Surface,
    weights: Sequence[Clue] = (),
    lips: Sequence[Clue] = (),
    nose: Floats | None = None,
    back: Floats | None = None,
) -> Pose:
    """Return which way a body's nose and back are likely to be.

    Parameters
    ----------
    surface : Surface
        The body's, closed.
    weights : sequence of Clue
        Pieces of heavy metal in it.
    lips : sequence of Clue
        Pieces that are its lip.
    nose, back : (3,) array or None
        Unit vectors where they are known; the other is then guessed at a right angle to it.

    Notes
    -----
    The long axis is the principal axis of the greatest second moment of volume. A bait's left mirrors its right: of the
    planes through the centroid and along the length, the one that the surface mirrors itself in is taken, and the back
    lies in it; where two do, the body is taken to be deeper than wide. Along the length, a lip stands at the nose, and
    else the end is taken for the nose that is nearer to the centroid, as bait fish are thickest ahead of their middle.
    Weights lie at the belly. What none of these tells is left to habit, up for the back, and called open.
    """
    body = _Body.of(surface)
    ahead = _nose(body, lips, nose, back)
    above = _back(body, weights, lips, ahead.direction, back)
    side = np.cross(above.direction, ahead.direction)
    extents = np.array([np.ptp(surface.vertices @ way) for way in (ahead.direction, above.direction, side)])
    return Pose(ahead, above, extents)


def _axes(moments: Moments) -> Floats:
    """Principal axes in rows, the long one first."""
    _, vectors = np.linalg.eigh(moments.inertia)
    return np.asarray(vectors.T)


def _snapped(axis: Floats, within: float) -> tuple[Floats, float]:
    """Return the axis of the mesh that an axis lies near, and the angle between them, rad; itself where none is."""
    place = int(np.argmax(np.abs(axis)))
    near = np.zeros(3)
    near[place] = np.sign(axis[place])
    angle = float(np.arccos(np.clip(axis @ near, -1.0, 1.0)))
    return (near, angle) if angle <= within else (axis, 0.0)


def direction_words(direction: Floats) -> str:
    """Return a direction as a bait file or an option takes it: a signed axis, or three numbers."""
    place = int(np.argmax(np.abs(direction)))
    if abs(direction[place]) > 1 - 1e-12:
        return ("+" if direction[place] > 0 else "-") + "xyz"[place]
    return ",".join(f"{value + 0.0:.4g}" for value in direction)


def _nose(body: _Body, lips: Sequence[Clue], nose: Floats | None, back: Floats | None) -> Guess:
    if nose is not None:
        return Guess(nose, Sureness.STATED, "as stated")
    axis, long, slender = _length(body, back)
    index = BlockIndex.build(body.surface)
    low, high = index.reach(axis)
    shares = (np.arange(_PLANES) + 0.5) / _PLANES
    areas = np.array([index.cut(axis, low + share * (high - low)).section.area for share in shares])
    bulk = float(areas @ shares / areas.sum()) - 0.5
    faces = [index.cut(axis, at).section.area / areas.max() for at in _face_heights(low, high)]
    flat = [face > BLUNT for face in faces]
    if lips:
        where = np.average([lip.centre for lip in lips], axis=0)
        ahead = float(where @ axis) - (low + high) / 2
        if abs(ahead) > BULKY * (high - low):
            names = " and ".join(f"'{lip.name}'" for lip in lips)
            return Guess(
                axis * np.sign(ahead),
                Sureness.SURE if slender else Sureness.LIKELY,
                f"{long}; {names} stands at that end",
            )
    if abs(bulk) >= BULKY and flat[0] == flat[1]:
        why = f"{long}; its bulk lies {0.5 - abs(bulk):.0%} of the length behind that end, as a fish's does"
        return Guess(axis * np.sign(bulk), Sureness.LIKELY if slender else Sureness.OPEN, why)
    if flat[0] != flat[1]:
        end = 1.0 if flat[1] else -1.0
        agrees = bulk * end > -BULKY
        why = f"{long}; that end has a flat face" + ("" if agrees else ", but the bulk lies nearer the other")
        return Guess(axis * end, Sureness.LIKELY if agrees and slender else Sureness.OPEN, why)
    return Guess(axis * (np.sign(bulk) or 1.0), Sureness.OPEN, f"{long}; both ends are much alike")


def _face_heights(low: float, high: float) -> tuple[float, float]:
    return low + _FACE * (high - low), high - _FACE * (high - low)


def _length(body: _Body, back: Floats | None) -> tuple[Floats, str, bool]:
    """Return the long axis, why it is that, and whether it stands out."""
    axis = _axes(body.moments)[0]
    if back is not None:
        axis = axis - (axis @ back) * back
        if np.linalg.norm(axis) < 0.5:  # the stated back runs along the body: the next longest must do
            axis = _axes(body.moments)[1] - (_axes(body.moments)[1] @ back) * back
        axis = axis / np.linalg.norm(axis)
    taken, angle = _snapped(axis, NEAR_AXIS)
    if back is not None and abs(taken @ back) > 1e-9:
        taken, angle = axis, 0.0
    extents = np.sqrt(np.maximum(np.linalg.eigvalsh(body.moments.second / body.moments.amount), 0.0))
    ratio = float(extents[2] / extents[1])
    turned = f", its principal axis {np.degrees(angle):.1f} degrees beside it" if angle > np.radians(0.5) else ""
    if ratio < SLENDER:
        return taken, f"hardly longer along {_line(taken)} than across{turned}", False
    return taken, f"longest along {_line(taken)}{turned}", True


def _line(axis: Floats) -> str:
    words = direction_words(axis)
    return words[1:] if words[0] in "+-" and len(words) == 2 else f"({words})"


def _back(body: _Body, weights: Sequence[Clue], lips: Sequence[Clue], ahead: Floats, back: Floats | None) -> Guess:
    if back is not None:
        return Guess(back, Sureness.STATED, "as stated")
    first = _across(body, ahead)
    second = np.cross(ahead, first)
    unlike = [body.unlike(first), body.unlike(second)]
    mirrors = [value < MIRRORED and value < DECISIVE * min(unlike) for value in unlike]
    extents = [float(np.ptp(body.surface.vertices @ way)) for way in (first, second)]
    below = _below(body, weights, lips, ahead)
    if all(mirrors) and body.mirrors((first + second) / np.sqrt(2)):
        return _round(body, ahead, first, below)
    if mirrors[0] != mirrors[1]:
        up = second if mirrors[0] else first
        why = f"left and right mirror each other across {_line(first if mirrors[0] else second)}"
        return _signed(body, up, why, below, Sureness.SURE)
    up, wide = (first, second) if extents[0] >= extents[1] else (second, first)
    if all(mirrors):
        why = f"it mirrors itself both ways, and is deeper along {_line(up)} than along {_line(wide)}"
        return _signed(body, up, why, below, Sureness.LIKELY)
    return _signed(body, up, f"it mirrors itself nowhere; it is deepest along {_line(up)}", below, Sureness.OPEN)


def _across(body: _Body, ahead: Floats) -> Floats:
    """A direction across the length that a plane of symmetry would stand on: principal in the plane across it."""
    seed = np.eye(3)[int(np.argmin(np.abs(ahead)))]
    u = seed - (seed @ ahead) * ahead
    u = u / np.linalg.norm(u)
    v = np.cross(ahead, u)
    plane = np.stack([u, v])
    _, vectors = np.linalg.eigh(plane @ body.moments.second @ plane.T)
    own = vectors[:, 0] @ plane
    taken, _ = _snapped(own, NEAR_AXIS)
    square = abs(taken @ ahead) < 1e-9
    return taken if square and body.unlike(taken) <= 2 * body.unlike(own) + 1e-4 else own


@dataclass(frozen=True, eq=False)
class _Below:
    """Where the belly is by what lies in the body: the way to it from the middle, across the length, m."""

    away: Floats
    names: str

    def words(self, along: Floats) -> str:
        return f"{self.names} lies {abs(float(self.away @ along)) * 1e3:.1f} mm off the middle, where the belly must be"


def _below(body: _Body, weights: Sequence[Clue], lips: Sequence[Clue], ahead: Floats) -> _Below | None:
    for clues in (weights, lips):
        if not clues:
            continue
        where = np.average([clue.centre for clue in clues], axis=0, weights=[clue.amount for clue in clues])
        away = where - body.moments.centre
        away = away - (away @ ahead) * ahead
        if np.linalg.norm(away) >= LOW * body.length:
            many = "" if len(clues) == 1 else "the middle of "
            return _Below(away, many + " and ".join(f"'{clue.name}'" for clue in clues))
    return None


def _signed(body: _Body, up: Floats, why: str, below: _Below | None, best: Sureness) -> Guess:
    """Say which way along a line the back is."""
    if below is not None and abs(below.away @ up) >= LOW * body.length:
        return Guess(-up * np.sign(below.away @ up), best, f"{why}; {below.words(up)}")
    back = _habit(up)
    return Guess(back, Sureness.OPEN, f"{why}; {direction_words(back)} or {direction_words(-back)} does not show")


def _round(body: _Body, ahead: Floats, first: Floats, below: _Below | None) -> Guess:
    """Say where the back of a round body is."""
    why = "it is round, so that its shape has no back"
    if below is None:
        return Guess(_habit(first), Sureness.OPEN, why)
    up = -below.away / np.linalg.norm(below.away)
    taken, _ = _snapped(up, NEAR_AXIS)
    square = abs(taken @ ahead) < 1e-9
    back = taken if square else up
    return Guess(back, Sureness.LIKELY, f"{why}; {below.words(back)}")


def _habit(up: Floats) -> Floats:
    """Return a direction turned the way that is up in most drawings: z, else y, else x."""
    for axis in (2, 1, 0):
        if abs(up[axis]) > 0.5:
            return np.asarray(up * np.sign(up[axis]))
    return up
