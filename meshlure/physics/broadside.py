"""Broadside: the drag of a body that lies across the flow."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass
from typing import Final

import numpy as np

from meshlure.geometry.chords import chords
from meshlure.geometry.surface import Floats
from meshlure.physics.form import leading_bluffness
from meshlure.physics.friction import NATURAL_TRANSITION
from meshlure.physics.layer import front_trips
from meshlure.physics.plate import ENDLESS_PLATE, normal_plate_cd
from meshlure.physics.prism import PrismParts, prism_parts
from meshlure.physics.profile import Profile
from meshlure.physics.sections import Sections

CYLINDER_CD: Final = 1.2
"""Crossflow drag coefficient of an endless circular cylinder at Reynolds numbers of 1e4 to 2e5, laminar separation."""

BAR_RELIEF: Final = 0.18
"""Share by which a cube presses less than a piece of a square bar would by the factor of plates."""

SHAPED: Final = 17
"""Sections of which the shape is read; between them its coefficient is interpolated."""


def crossflow_factor(fineness: float) -> float:
    """Drag of a finite cylinder across the flow over that of as long a piece of an endless one.

    Parameters
    ----------
    fineness : float
        Length over diameter.

    Notes
    -----
    eta = 1 - 23.009/(f + 122.769) - (13.006/(f + 24.368))^2, a published fit to Jorgensen's curve; DATCOM's figure
    4.2.1.2-35a (0.56 at f = 2 to 0.79 at f = 28) lies within 0.03 of it.

    References
    ----------
    Jorgensen, L. H. (1977): NASA TR R-474. Allen, H. J. and Perkins, E. W. (1951): NASA Rep. 1048.
    """
    if not 0 < fineness < math.inf:
        raise ValueError(f"a fineness is positive and finite, not {fineness}")
    return 1 - 23.009 / (fineness + 122.769) - (13.006 / (fineness + 24.368)) ** 2


def finite_factor(fineness: float, bluff: float, depth: float) -> float:
    """Drag of a finite body across the flow over that of as long a piece of an endless one, by the section.

    Parameters
    ----------
    fineness : float
        Length over width across the flow.
    bluff : float
        Leading bluffness of the section: 0 rounded, 1 flat.
    depth : float
        Of the section along the flow, over its width.

    Notes
    -----
    Between the factor of cylinders and that of plates across the flow. That of a short bar with flat faces is less than
    a plate's, down to a cube's 1.05 (White, F. M., Fluid Mechanics, table 7.3, from memory).
    """
    flat = normal_plate_cd(fineness) / ENDLESS_PLATE * (1 - BAR_RELIEF * min(depth, 1.0) / max(fineness, 1.0))
    return (1 - bluff) * crossflow_factor(fineness) + bluff * flat


def broadside_cd(fineness: float) -> float:
    """Drag coefficient of a round body across the flow, on its side silhouette.

    Parameters
    ----------
    fineness : float
        Length over diameter.

    Notes
    -----
    C_D = 1.2 eta (Allen and Perkins 1951). Below the drag crisis, Reynolds number on the diameter from about 1e4 to
    2e5. Sections that are not round are told apart by `broadside`.
    """
    return CYLINDER_CD * crossflow_factor(fineness)


@dataclass(frozen=True)
class Broadside:
    """Drag areas of a body across the flow, m2, for one state of its layer.

    Attributes
    ----------
    friction, forebody, base : float, m2
    trips : float
        Share to which the sections' own fronts trip the layer.
    arc_reynolds : float
        Reynolds number of the flow's way round the sections to where it leaves, their mean.
    """

    friction: float
    forebody: float
    base: float
    trips: float
    arc_reynolds: float

    @property
    def area(self) -> float:
        """Drag area of the whole, m2."""
        return self.friction + self.forebody + self.base


@dataclass(frozen=True, eq=False)
class Strips:
    """A body across the flow as strips, each a piece of an endless body of its section.

    Attributes
    ----------
    position : (n,) array, m
        Of the stations along the axis.
    width : (n,) array, m
        Across the flow.
    facing : (n,) array
        Share of each strip's force that counts: the cube of the cosine between the outline's edge and the axis.
    shaped : (k,) array, m
        Positions of the sections of which the shape was read.
    profiles : sequence of Profile
        Of these, the half width as radius.
    """

    position: Floats
    width: Floats
    facing: Floats
    shaped: Floats
    profiles: Sequence[Profile]

    @property
    def fineness(self) -> float:
        """Length over greatest width."""
        return float(np.ptp(self.position)) / float(self.width.max())


def strips(sections: Sections, towards: Floats) -> Strips:
    """Return a body's strips for motion in a direction across its axis.

    Parameters
    ----------
    sections : Sections
    towards : (3,) array
        Unit vector square to the axis.
    """
    across = np.cross(sections.axis, towards)
    reach = [np.array([cut.start @ across]) if len(cut.start) else np.zeros((1, 1)) for cut in sections.cuts]
    edges = np.array([[side.min(), side.max()] for side in reach])
    position = sections.stations.position
    slope = np.gradient(edges, position, axis=0)
    facing = ((1 + slope**2) ** -1.5).mean(axis=1)
    length = sections.stations.length
    shaped, profiles = [], []
    for share in (np.arange(SHAPED) + 0.5) / SHAPED:
        number = int(np.abs(position - sections.stations.low - share * length).argmin())
        found = chords(sections.cuts[number], towards)
        if found is None or not found.width.any():
            continue
        half = found.width / 2
        shaped.append(position[number])
        profiles.append(Profile(found.x, math.pi * half**2, 2 * math.pi * half, found.depth))
    return Strips(position, np.ptp(edges, axis=1), facing, np.array(shaped), profiles)


def broadside(body: Strips, reynolds_per_length: float, *, tripped: bool, natural: bool = False) -> Broadside:
    """Return the drag areas of a body across the flow, for one state of its layer.

    Parameters
    ----------
    body : Strips
    reynolds_per_length : float, 1/m
        Speed over kinematic viscosity.
    tripped : bool
        Where a section's own front is sharp it trips the layer in any case.
    natural : bool
        Whether a tripped layer that no edge trips turns only at the Reynolds number of a smooth wall.

    Notes
    -----
    Strip theory: the coefficient of each section as if it were endless (`prism.prism_parts`), times its width, times
    the cube of the cosine between the silhouette's edge and the axis, because only the speed square to an edge presses
    (two powers; Hoerner 1965, ch. 3, from memory) and the strip is narrower across its edge (one), times the factor of
    a finite body. A sphere taken so has 0.47, and a cylinder keeps its whole width.

    References
    ----------
    Allen, H. J. and Perkins, E. W. (1951): NASA Rep. 1048. Jorgensen, L. H. (1977): NASA TR R-474.
    """
    rows = []
    for profile in body.profiles:
        trips = front_trips(profile)
        bluff = leading_bluffness(profile)
        reynolds = reynolds_per_length * profile.diameter
        turn = NATURAL_TRANSITION * (1 - trips) if natural else 0.0
        turbulent = prism_parts(profile, reynolds, tripped=True, transition=turn)
        parts = turbulent if tripped else _mixed(prism_parts(profile, reynolds, tripped=False), turbulent, trips)
        eta = finite_factor(body.fineness, bluff, profile.length / profile.diameter)
        rows.append([parts.friction, eta * parts.forebody, eta * parts.base, trips, parts.arc_reynolds])
    strip = body.width * body.facing
    along = [strip * np.interp(body.position, body.shaped, column) for column in np.array(rows).T]
    rubbing, pressing, pulling, trips, arc = (float(np.trapezoid(values, body.position)) for values in along)
    whole = float(np.trapezoid(strip, body.position))
    return Broadside(rubbing, pressing, pulling, trips / whole, arc / whole)


def _mixed(laminar: PrismParts, tripped: PrismParts, share: float) -> PrismParts:
    pairs = ((getattr(laminar, name), getattr(tripped, name)) for name in PrismParts.__dataclass_fields__)
    return PrismParts(*((1 - share) * a + share * b for a, b in pairs))
