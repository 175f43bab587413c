"""Volume, centroid and inertia of solids: from closed surfaces, from formulas, and added up."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

import numpy as np

from meshlure.geometry.surface import Floats, Surface

_AT_ONCE = 8192
"""Faces worked on at a time."""


@dataclass(frozen=True, eq=False)
class Moments:
    """A solid's volume (or mass) with its first and second moments.

    Attributes
    ----------
    amount : float
        m3, or kg once weighed.
    first : (3,) array
        Integral of x, about the mesh origin; m4 or kg m.
    second : (3, 3) array
        Integral of x x^T about the centroid; m5 or kg m2.

    Notes
    -----
    The second moment is kept about the centroid: about a far origin it would lose its digits.
    """

    amount: float
    first: Floats
    second: Floats

    @property
    def centre(self) -> Floats:
        """Centroid, (3,) array, m; the origin where there is no amount."""
        return self.first / self.amount if self.amount else np.zeros(3)

    @property
    def inertia(self) -> Floats:
        """Inertia tensor about the centroid, (3, 3) array: off-diagonal entries are minus the products of inertia."""
        return np.asarray(np.trace(self.second) * np.eye(3) - self.second)

    def __add__(self, other: Moments) -> Moments:
        amount = self.amount + other.amount
        if amount == 0:
            return Moments(0.0, self.first + other.first, self.second + other.second)
        apart = self.centre - other.centre
        shared = self.amount * other.amount / amount * np.outer(apart, apart)
        return Moments(amount, self.first + other.first, self.second + other.second + shared)

    def __mul__(self, factor: float) -> Moments:
        return Moments(self.amount * factor, self.first * factor, self.second * factor)

    __rmul__ = __mul__

    def __sub__(self, other: Moments) -> Moments:
        return self + other * -1.0

    def gyration(self) -> Floats:
        """Return the radii of gyration about the three principal axes, ascending, m."""
        moments = np.maximum(np.linalg.eigvalsh(self.inertia), 0.0)
        return np.asarray(np.sqrt(moments / self.amount))


NOTHING = Moments(0.0, np.zeros(3), np.zeros((3, 3)))


def solid_moments(surface: Surface) -> Moments:
    """Return a closed surface's volume, m3, with its moments.

    Parameters
    ----------
    surface : Surface
        Closed, outward.

    Notes
    -----
    Sums of signed tetrahedra between each face and the middle of the bounds; exact for the facets.

    References
    ----------
    B. Mirtich (1996), Fast and accurate computation of polyhedral mass properties, J. Graphics Tools 1(2).
    J. Blow and A. Binstock (2004), How to find the inertia tensor (or other mass properties) of a 3D solid body
    represented by a triangle mesh: the covariance of the canonical tetrahedron.
    """
    origin = surface.bounds.mean(axis=0)
    volume, first, second = 0.0, np.zeros(3), np.zeros((3, 3))
    for corners, normals, _ in _pieces(surface, origin):
        det = (corners[0] * normals).sum(axis=0)
        volume += det.sum() / 6
        first += corners.sum(axis=0) @ det / 24
        second += _second(corners, det) / 120
    if volume:
        second = second - np.outer(first, first) / volume
    return Moments(float(volume), first + origin * volume, (second + second.T) / 2)


def skin_moments(surface: Surface, thickness: Floats) -> Moments:
    """Return the volume, m3, of a thin coat on a surface, with its moments.

    Parameters
    ----------
    surface : Surface
    thickness : (m,) array, m
        Per face; taken as spread in the face itself.
    """
    origin = surface.bounds.mean(axis=0)
    amount, first, second = 0.0, np.zeros(3), np.zeros((3, 3))
    for corners, normals, piece in _pieces(surface, origin):
        weight = thickness[piece] * np.sqrt((normals**2).sum(axis=0)) / 2
        amount += weight.sum()
        first += corners.sum(axis=0) @ weight / 3
        second += _second(corners, weight) / 12
    if amount:
        second = second - np.outer(first, first) / amount
    return Moments(float(amount), first + origin * amount, (second + second.T) / 2)


def _pieces(surface: Surface, origin: Floats) -> Iterator[tuple[Floats, Floats, slice]]:
    """Faces in pieces that stay in the processor's cache: corners (corner, axis, face), normals (axis, face), place."""
    vertices = surface.vertices - origin
    for at in range(0, len(surface.faces), _AT_ONCE):
        piece = slice(at, at + _AT_ONCE)
        corners = vertices.take(surface.faces[piece], axis=0).transpose(1, 2, 0)
        yield np.ascontiguousarray(corners), surface.double_areas[piece].T, piece


def _second(corners: Floats, weight: Floats) -> Floats:
    """Sum of weight (s s^T + a a^T + b b^T + c c^T), s = a + b + c, over faces, (3, 3)."""
    total = np.zeros((3, 3))
    for points in (corners.sum(axis=0), *corners):
        total += (points * weight) @ points.T
    return total


def point_moments(amount: float, place: Floats) -> Moments:
    """Return the moments of an amount at one point."""
    return Moments(amount, amount * np.asarray(place, dtype=np.float64), np.zeros((3, 3)))


def ball_moments(diameter: float, centre: Floats) -> Moments:
    """Return a ball's volume, m3, with its moments: pi d^3/6, and d^2/20 of it about each axis."""
    volume = np.pi * diameter**3 / 6
    return Moments(volume, volume * np.asarray(centre, dtype=np.float64), volume * diameter**2 / 20 * np.eye(3))
