"""Loads: force and moment on a bait that moves in any direction, as areas and volumes per unit of dynamic pressure."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from meshlure.bait.pieces import Frame
from meshlure.geometry.surface import Floats
from meshlure.physics.broadside import crossflow_factor
from meshlure.physics.crossflow import Crossflow
from meshlure.physics.lamb import lamb_factors
from meshlure.physics.lip import LipPlate
from meshlure.physics.plate import inclined_plate_cn

_STILL = 1e-12


@dataclass(frozen=True, eq=False)
class Trailing:
    """Something that trails from a point, such as a hook from its eye: its drag acts there, along the flow.

    Attributes
    ----------
    name : str
    place : (3,) array, m
    drag_area : float, m2
    """

    name: str
    place: Floats
    drag_area: float


@dataclass(frozen=True, eq=False)
class Lead:
    """What the body does to a flow that it meets with one end first.

    Attributes
    ----------
    axial : float, m2
        Drag area of the body alone, straight on.
    station : (n,) array, m
        Along the nose direction, from this end to the other.
    held : (2, n) array, m2
        For a crossflow along the side and along the back: circle on the sections' width where the flow is attached;
        its increments press sideways as in slender-body theory.
    """

    axial: float
    station: Floats
    held: Floats


@dataclass(frozen=True, eq=False)
class Loads:
    """Force and moment per unit of dynamic pressure for many directions of motion.

    Attributes
    ----------
    force : (n, 3) array, m2
    moment : (n, 3) array, m3
        About the mesh origin.
    """

    force: Floats
    moment: Floats

    def about(self, centre: Floats) -> Floats:
        """Return the moments about a point, (n, 3) array, m3."""
        return self.moment - np.cross(centre, self.force)

    def __add__(self, other: Loads) -> Loads:
        return Loads(self.force + other.force, self.moment + other.moment)


@dataclass(frozen=True, eq=False)
class Glider:
    """What is needed to know a bait's loads at any attitude.

    Attributes
    ----------
    frame : Frame
    axis : (3,) array, m
        A point on the body's long axis.
    nose_first, tail_first : Lead
    sideways, upright : Crossflow
        For a flow along the side (it sees the side area) and along the back (it sees the plan area).
    fineness : float
        Length over the diameter of the greatest section's circle.
    lips : sequence of LipPlate
    hooks : sequence of Trailing
    """

    frame: Frame
    axis: Floats
    nose_first: Lead
    tail_first: Lead
    sideways: Crossflow
    upright: Crossflow
    fineness: float
    lips: Sequence[LipPlate]
    hooks: Sequence[Trailing]

    def loads(self, towards: Floats) -> Loads:
        """Return the loads of motion in each of many directions.

        Parameters
        ----------
        towards : (n, 3) array
            Unit vectors along which the bait moves through still fluid.

        Notes
        -----
        Axial force C_A0 cos^2 a; slender-body force (k2 - k1) sin 2a cos(a/2) dS/dx along the sections, S the circle
        on a section's width, as far as the flow is attached (beyond, the closed body's Munk couple loses its rear
        part to the wake); viscous crossflow eta C_dc sin^2 a at the crossflow's centre; lips as inclined plates; hooks
        trailing. Angles beyond 90 degrees count from the other end. Parts do not shelter each other.

        References
        ----------
        H. J. Allen and E. W. Perkins (1951), NASA Rep. 1048. L. H. Jorgensen (1977), NASA TR R-474.
        M. Munk (1924), NACA Rep. 184.
        """
        u = np.atleast_2d(np.asarray(towards, dtype=np.float64))
        total = self._body(u)
        for lip in self.lips:
            total = total + _plate(lip, u)
        for hook in self.hooks:
            force = -hook.drag_area * u
            total = total + Loads(force, np.cross(hook.place, force))
        return total

    def body_area(self, towards: Floats) -> Floats:
        """Return the drag area of the body alone along each direction of motion, (n,) array, m2."""
        u = np.atleast_2d(np.asarray(towards, dtype=np.float64))
        return np.asarray(-np.einsum("ij,ij->i", self._body(u).force, u))

    def _body(self, u: Floats) -> Loads:
        nose = self.frame.nose
        along = u @ nose
        across = u - along[:, None] * nose
        sine = np.linalg.norm(across, axis=1)
        lateral = across / np.maximum(sine, _STILL)[:, None]
        lead_cosine = np.abs(along)
        # cos(a/2) of the angle from the end that leads.
        half = np.sqrt((1 + lead_cosine) / 2)
        share = np.stack([(lateral @ self.frame.side) ** 2, (lateral @ self.frame.back) ** 2])
        share = share / np.maximum(share.sum(axis=0), _STILL)
        force, moment = np.zeros_like(u), np.zeros_like(u)

        axial = np.where(along >= 0, self.nose_first.axial, self.tail_first.axial)
        push = -(axial * along * lead_cosine)[:, None] * nose
        force += push
        moment += np.cross(self.axis, push)

        couple = lamb_factors(self.fineness).couple
        slender = couple * 2 * sine * lead_cosine * half
        for lead, chosen in ((self.nose_first, along >= 0), (self.tail_first, along < 0)):
            steps = np.diff(lead.held, axis=1, prepend=0.0)
            area, lever = share.T @ steps.sum(axis=1), share.T @ (steps @ lead.station)
            size = np.where(chosen, slender * area, 0.0)
            force -= size[:, None] * lateral
            moment -= np.where(chosen, slender * lever, 0.0)[:, None] * np.cross(nose, lateral)
            moment -= size[:, None] * np.cross(self._foot, lateral)

        flows = (self.sideways, self.upright)
        pressed = share.T @ np.array([flow.drag_area for flow in flows])
        lever = share.T @ np.array([flow.drag_area * flow.position for flow in flows])
        size = crossflow_factor(self.fineness) * sine**2
        force -= (size * pressed)[:, None] * lateral
        moment -= (size * lever)[:, None] * np.cross(nose, lateral)
        moment -= (size * pressed)[:, None] * np.cross(self._foot, lateral)
        return Loads(force, moment)

    @property
    def _foot(self) -> Floats:
        """Point of the axis at station 0."""
        return np.asarray(self.axis - (self.axis @ self.frame.nose) * self.frame.nose)


def _plate(lip: LipPlate, u: Floats) -> Loads:
    """A lip's normal force, at its centre of pressure by Joessel's rule: 0.2 + 0.3 sin a of the chord from ahead."""
    facing = u @ lip.normal
    sine = np.minimum(np.abs(facing), 1.0)
    flat = u - facing[:, None] * lip.normal
    length = np.linalg.norm(flat, axis=1)
    ahead = flat / np.maximum(length, _STILL)[:, None]
    chord = lip.extent(ahead)
    span = lip.extent(np.cross(lip.normal, ahead))
    cn = np.array(
        [
            inclined_plate_cn(s / c if c > 0 else 1.0, float(np.arcsin(a)))
            for s, c, a in zip(span, chord, sine, strict=True)
        ]
    )
    force = -(lip.area * cn * np.sign(facing))[:, None] * lip.normal
    place = lip.centre + (chord * np.where(length > _STILL, 0.3 * (1 - sine), 0.0))[:, None] * ahead
    return Loads(force, np.cross(place, force))
