"""Incidence: the drag of a body whose axis stands at any angle to the flow."""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import dataclass
from typing import Final

import numpy as np

from meshlure.geometry.surface import Floats
from meshlure.physics.broadside import Broadside, broadside, strips
from meshlure.physics.drag import SHARP_BAND, Drag, Layer, axial_drag, share_for, spread_of
from meshlure.physics.form import fineness
from meshlure.physics.lamb import lamb_factors
from meshlure.physics.layer import ramp, turns_by_itself
from meshlure.physics.plate import inclined_plate_cn
from meshlure.physics.principal import Box
from meshlure.physics.resistance import DragParts
from meshlure.physics.sections import Sections

THIN: Final = 0.1
THICK: Final = 0.3
"""Thickness over the lesser of both other extents up to which a body is a plate, and from which it is none."""

_STRAIGHT: Final = 1e-6


@dataclass(frozen=True)
class Bearing:
    """Drag areas of a body in one direction, m2.

    Attributes
    ----------
    parts : DragParts
    low, high : float, m2
        Band of the whole.
    """

    parts: DragParts
    low: float
    high: float

    def __add__(self, other: Bearing) -> Bearing:
        return Bearing(self.parts + other.parts, self.low + other.low, self.high + other.high)

    def __mul__(self, factor: float) -> Bearing:
        return Bearing(self.parts * factor, self.low * factor, self.high * factor)


def _straight_on(sections: Sections, towards: Floats, reynolds_per_length: float, layer: Layer | None) -> Drag:
    profile, cup = sections.profile(towards), sections.cup(towards)
    return axial_drag(profile, 1.0, 1.0, 1 / reynolds_per_length, layer, cup=cup)


def along_axis(sections: Sections, towards: Floats, reynolds_per_length: float, layer: Layer | None) -> Bearing:
    """Return the drag areas of a body that moves along its axis, the end that leads by the direction's sign."""
    return _bearing(_straight_on(sections, towards, reynolds_per_length, layer))


def _bearing(found: Drag) -> Bearing:
    area = found.frontal_area
    return Bearing(found.parts, found.cd_low * area, found.cd_high * area)


def across_axis(sections: Sections, towards: Floats, reynolds_per_length: float, layer: Layer | None) -> Bearing:
    """Return the drag areas of a body that moves square to its axis, its layer given or chosen."""
    body = strips(sections, towards)
    laminar, tripped = (broadside(body, reynolds_per_length, tripped=state) for state in (False, True))
    if layer is None:
        share = turns_by_itself(tripped.arc_reynolds)
        turned = broadside(body, reynolds_per_length, tripped=True, natural=True) if share else tripped
        share = share_for(laminar.area, turned.area, share)
    else:
        share, turned = float(layer == "tripped"), tripped
    parts = _parts(laminar) * (1 - share) + _parts(turned) * share
    spread = spread_of(laminar.area, tripped.area)
    return Bearing(parts, parts.body * (1 - spread), parts.body * (1 + spread))


def _parts(found: Broadside) -> DragParts:
    return DragParts(found.friction, found.forebody, found.base, 0.0)


def at_angle(sections: Sections, towards: Floats, reynolds_per_length: float, layer: Layer | None) -> Bearing:
    """Return the drag areas of a body that moves at any angle to its axis.

    Parameters
    ----------
    sections : Sections
    towards : (3,) array
        Unit vector along which it moves.
    reynolds_per_length : float, 1/m
        Speed over kinematic viscosity.
    layer : {"laminar", "tripped", None}

    Notes
    -----
    With a the angle between axis and motion, D = D_along cos^p a + D_across sin^p a + (k2 - k1) S_b sin 2a cos(a/2)
    sin a, S_b the section left open to the wake. For slender bodies p = 3: axial force and crossflow force with the
    square of their own speed, each with its share along the motion (Allen and Perkins). A round body has the same drag
    every way, which takes p = 2; between them p = 2 + (k2 - k1), ours, with Lamb's factors, which goes from 2 to 3 as
    a spheroid goes from round to endless.

    References
    ----------
    Allen, H. J. and Perkins, E. W. (1951): NASA Rep. 1048. Jorgensen, L. H. (1977): NASA TR R-474.
    """
    cosine = float(abs(towards @ sections.axis))
    lateral = towards - (towards @ sections.axis) * sections.axis
    sine = float(np.linalg.norm(lateral))
    if sine < _STRAIGHT:
        return along_axis(sections, towards, reynolds_per_length, layer)
    across = across_axis(sections, lateral / sine, reynolds_per_length, layer)
    if cosine < _STRAIGHT:
        return across
    straight = _straight_on(sections, towards, reynolds_per_length, layer)
    couple = lamb_factors(fineness(sections.profile(towards))).couple
    power = 2 + couple
    open_area = straight.trailing_bluffness * straight.frontal_area
    induced = couple * open_area * 2 * sine * cosine * math.sqrt((1 + cosine) / 2) * sine
    spread = (1 - SHARP_BAND, 1 + SHARP_BAND)
    extra = Bearing(DragParts(0, 0, 0, 0, induced=induced), *(induced * share for share in spread))
    return _bearing(straight) * float(cosine**power) + across * float(sine**power) + extra


def in_direction(
    cut: Callable[[Floats], Sections],
    box: Box,
    axis: Floats,
    towards: Floats,
    reynolds_per_length: float,
    layer: Layer | None,
) -> Bearing:
    """Return the drag areas of a body in any direction, that of a thin one as a plate's.

    Parameters
    ----------
    cut : callable
        Sections along any axis, (3,) array.
    box : Box
        With the body's second moments.
    axis : (3,) array
        The body's long axis, unit vector.
    towards : (3,) array
        Unit vector along which it moves.
    reynolds_per_length : float, 1/m
    layer : {"laminar", "tripped", None}

    Notes
    -----
    A body thinner than a tenth of its middle extent is a plate: its drag square to the flow, times the normal force at
    its angle over that at 90 degrees (`plate.inclined_plate_cn`), times the sine of the angle; and edge-on drag with
    the square of the cosine. Up to three tenths the two readings blend. Which axis is named long then hardly matters.
    """
    plate = 1 - ramp(box.thinness, THIN, THICK)
    if plate == 0:
        return at_angle(cut(axis), towards, reynolds_per_length, layer)
    thin = _plate(cut, box, axis, towards, reynolds_per_length, layer)
    if plate == 1:
        return thin
    return thin * plate + at_angle(cut(axis), towards, reynolds_per_length, layer) * (1 - plate)


def _plate(
    cut: Callable[[Floats], Sections],
    box: Box,
    axis: Floats,
    towards: Floats,
    reynolds_per_length: float,
    layer: Layer | None,
) -> Bearing:
    """Drag areas of a thin plate."""
    normal = box.axes[0]
    within = towards - (towards @ normal) * normal
    cosine = float(np.linalg.norm(within))
    sine = float(abs(towards @ normal))
    square_on = along_axis(cut(normal), towards, reynolds_per_length, layer)
    if cosine < _STRAIGHT:
        return square_on
    within = within / cosine
    edge_on = at_angle(cut(axis), within, reynolds_per_length, layer) * cosine**2
    if sine < _STRAIGHT:
        return edge_on
    aspect = box.extent(np.cross(normal, within)) / box.extent(within)
    force = inclined_plate_cn(aspect, math.asin(min(sine, 1.0))) / inclined_plate_cn(aspect, math.pi / 2)
    return square_on * (force * sine) + edge_on
