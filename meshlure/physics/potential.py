"""The potential whose minima over the up-directions are a floating body's resting postures, and descent on it."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from functools import cached_property

import numpy as np

from meshlure.geometry.surface import Floats
from meshlure.physics.immersion import Hull, Immersed

_STEPS = 80
_LEAST_GRADIENT = 1e-12
_ROUNDING = 1e-14
"""m. Energies closer than this are alike for the descent: the cuts carry no more digits."""


def tangents(up: Floats) -> Floats:
    """Return two unit vectors that span the plane normal to ``up``, (3, 2) array.

    References
    ----------
    T. Duff et al. (2017), Building an orthonormal basis, revisited, J. Computer Graphics Techniques 6(1).
    """
    x, y, z = (float(value) for value in up)
    sign = 1.0 if z >= 0 else -1.0
    a = -1.0 / (sign + z)
    b = x * y * a
    return np.array([[1.0 + sign * x * x * a, b], [sign * b, sign + y * y * a], [-sign * x, -y]])


@dataclass(frozen=True, eq=False)
class State:
    """A floating body held at one up-direction at its own displacement.

    Attributes
    ----------
    immersed : Immersed
    centre : (3,) array, m
        Centre of gravity.
    """

    immersed: Immersed
    centre: Floats

    @property
    def up(self) -> Floats:
        """Upward normal of the water, (3,) array."""
        return self.immersed.up

    @property
    def energy(self) -> float:
        """Height of the centre of gravity over that of buoyancy, m."""
        return float(self.up @ (self.centre - self.immersed.centre))

    @property
    def lever(self) -> Floats:
        """Horizontal offset of the centre of gravity from that of buoyancy, (3,) array, m."""
        apart = self.centre - self.immersed.centre
        return np.asarray(apart - (apart @ self.up) * self.up)

    @cached_property
    def stiffness(self) -> Floats:
        """Second derivative of the energy as a (3, 3) array on directions normal to ``up``, m.

        Its eigenvalues are the metacentric heights.
        """
        flat = np.eye(3) - np.outer(self.up, self.up)
        return np.asarray(self.immersed.cut.section.second / self.immersed.volume - self.energy * flat)

    def metacentric(self, direction: Floats) -> float:
        """Return the metacentric height for tilting towards a horizontal unit vector, m."""
        return float(direction @ self.stiffness @ direction)

    def modes(self) -> tuple[Floats, Floats]:
        """Return the two metacentric heights, ascending, m, and their directions as columns of a (3, 2) array."""
        plane = tangents(self.up)
        heights, vectors = np.linalg.eigh(plane.T @ self.stiffness @ plane)
        return heights, plane @ vectors


@dataclass(frozen=True, eq=False)
class Potential:
    """U(n) = n . (G - B(n)) at a fixed displacement, over the sphere of up-directions n.

    Attributes
    ----------
    hull : Hull
    centre : (3,) array, m
        Centre of gravity.
    volume : float, m3
        Displaced.
    precision : float, rad
        A descent ends with a step shorter than this.

    Notes
    -----
    Equilibria are its critical points, stable ones its minima. The gradient on the sphere is the horizontal part
    of G - B, the Hessian I/V - U with the waterplane's second moments I: the principle of least potential energy
    with Dupin's and Bouguer's theorems on the surface of buoyancy.

    References
    ----------
    E. N. Gilbert (1991), How things float, American Mathematical Monthly 98(3).
    """

    hull: Hull
    centre: Floats
    volume: float
    precision: float = 1e-9

    def at(self, up: Floats, near: State | None = None) -> State:
        """Return the state at an up-direction; a near state gives the draught to start from."""
        start = None if near is None else float(near.immersed.cut.section.centre @ up)
        return State(self.hull.settled(up, self.volume, start, 1e-4 * self.precision), self.centre)

    def descended(self, up: Floats, radius: float = 0.4, known: Callable[[State], bool] = lambda _: False) -> State:
        """Return the minimum that steps of limited length reach from an up-direction.

        Parameters
        ----------
        up : (3,) array
            Unit vector.
        radius : float, rad
            Longest first step.
        known : callable, optional
            Asked at every step; where it says so, the descent ends there.

        Notes
        -----
        Newton's method with a trust radius. At a saddle or a maximum it leaves along the softest direction,
        so that a body balanced on an edge is not called at rest.
        """
        state = self.at(up)
        for _ in range(_STEPS):
            if known(state):
                break
            heights, directions = state.modes()
            slope = directions.T @ state.lever
            scale = max(float(np.abs(heights).max()), 1e-9)
            if np.linalg.norm(slope) <= _LEAST_GRADIENT and heights[0] >= -1e-7 * scale:
                break
            step = _newton(slope, heights, radius, 1e-7 * scale)
            length = float(np.linalg.norm(step))
            if length <= self.precision and heights[0] >= -1e-7 * scale:
                break
            trial = self.at(turned(state.up, directions @ step), state)
            expected = -(slope @ step + step @ (heights * step) / 2)
            gained = state.energy - trial.energy
            if gained < 0.1 * expected and expected > _ROUNDING:
                radius = length / 4
                continue
            if gained > 0.7 * expected and length > 0.9 * radius:
                radius = min(2 * radius, 0.6)
            elif gained < 0.3 * expected:
                radius = max(length / 2, self.precision)
            state = trial
        return state


def _newton(slope: Floats, heights: Floats, radius: float, floor: float) -> Floats:
    """Step along the two modes: Newton where it curves up, down the slope as far as allowed where it does not."""
    step = np.empty(2)
    for mode in range(2):
        if heights[mode] > floor:
            step[mode] = -slope[mode] / heights[mode]
        elif abs(slope[mode]) > _LEAST_GRADIENT or heights[mode] < -floor:
            step[mode] = -radius if slope[mode] > 0 else radius
        else:
            step[mode] = 0.0
    length = float(np.linalg.norm(step))
    return step if length <= radius else step * (radius / length)


def turned(up: Floats, step: Floats) -> Floats:
    """Direction reached from ``up`` by a turn along a tangent vector, rad."""
    angle = float(np.linalg.norm(step))
    if angle == 0:
        return up
    turned = np.cos(angle) * up + np.sin(angle) / angle * step
    return np.asarray(turned / np.linalg.norm(turned))
