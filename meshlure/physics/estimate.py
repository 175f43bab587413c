"""Estimate: the drag coefficient of any closed mesh in any direction, for scripts."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass
from os import PathLike
from typing import Final

import numpy as np

from meshlure.errors import Fault, InputError
from meshlure.findings import Finding
from meshlure.geometry.blocks import BlockIndex
from meshlure.geometry.moments import solid_moments
from meshlure.geometry.outline import outline
from meshlure.geometry.surface import Floats, Surface
from meshlure.geometry.topology import EdgePairs
from meshlure.physics.closed import closed
from meshlure.physics.drag import Layer
from meshlure.physics.incidence import in_direction
from meshlure.physics.principal import Box, long_axis
from meshlure.physics.resistance import DragParts
from meshlure.physics.sections import Sections, smooth

Direction = Sequence[float] | Floats

CALL: Final = "estimate_drag"


@dataclass(frozen=True)
class DragEstimate:
    """Drag of a mesh in one direction.

    Attributes
    ----------
    cd, cd_low, cd_high : float
        Drag coefficient on `frontal_area`, and its band.
    frontal_area : float, square of the mesh's unit
        Silhouette of the mesh seen along the direction that goes first.
    parts : DragParts, square of the mesh's unit
        Drag coefficient times area by parts; they add to cd x frontal_area.
    axis : tuple of three float
        Unit vector of the long axis that told end-on from broadside.
    findings : tuple of Finding
        What was found about the mesh on reading and examining it.
    """

    cd: float
    cd_low: float
    cd_high: float
    frontal_area: float
    parts: DragParts
    axis: tuple[float, float, float]
    findings: tuple[Finding, ...] = ()


def estimate_drag(
    mesh: Surface | str | PathLike[str],
    leads: Direction = (-1.0, 0.0, 0.0),
    axis: Direction | None = None,
    reynolds: float = 1e5,
    layer: Layer | None = "tripped",
) -> DragEstimate:
    """Return the drag of a closed mesh that moves in a direction, as coefficient and area.

    Parameters
    ----------
    mesh : path or Surface
        STL or OBJ, or vertices and faces; closed, in any unit.
    leads : three float
        Direction that goes first.
    axis : three float, optional
        The body's own long axis, of either sign: it tells end-on from broadside. Left out, the principal axis whose
        moment of inertia stands apart most from the other two; ties go to `leads`.
    reynolds : float
        Speed x diameter / kinematic viscosity, the diameter that of the circle as large as the greatest section across
        the axis.
    layer : {"laminar", "tripped", None}
        State of the boundary layer; None lets the model choose it by the Reynolds number and the front.

    Raises
    ------
    InputError
        Where the mesh cannot be read or encloses no volume, a direction has no length, the Reynolds number is not
        positive, or the layer's name is unknown.

    Notes
    -----
    An estimate from sections, calibrated at Reynolds numbers of 1e4 to 2.5e6: see `physics.layer` for the flow along
    the axis, `physics.broadside` for the flow across it, `physics.incidence` for angles between.
    """
    towards = _direction(leads, "leads")
    long = None if axis is None else _direction(axis, "axis")
    _check(reynolds, layer)
    surface, pairs, findings = closed(mesh, f"{CALL}: mesh")
    frontal = outline(surface, pairs, towards).area
    fine, pairs = smooth(surface, pairs)
    moments = solid_moments(fine)
    if long is None:
        long = long_axis(moments, towards)
    cut = _Cutter(fine, pairs, moments.second)
    diameter = cut(long).profile(towards).diameter
    found = in_direction(cut, Box.of(moments), long, towards, reynolds / diameter, layer)
    return DragEstimate(
        cd=found.parts.body / frontal,
        cd_low=found.low / frontal,
        cd_high=found.high / frontal,
        frontal_area=frontal,
        parts=found.parts,
        axis=(float(long[0]), float(long[1]), float(long[2])),
        findings=findings,
    )


class _Cutter:
    """Sections of one solid along any axis, each cut once."""

    def __init__(self, surface: Surface, pairs: EdgePairs, second: Floats) -> None:
        self._surface, self._pairs, self._index = surface, pairs, BlockIndex.build(surface)
        self._second = second
        self._made: list[Sections] = []

    def __call__(self, axis: Floats) -> Sections:
        for made in self._made:
            if abs(made.axis @ axis) > 1 - 1e-12:
                return made
        # Width and depth are taken along the solid's own axes across the given one, so that turning it changes nothing.
        across = np.linalg.svd(axis[None])[2][1:]
        _, turn = np.linalg.eigh(across @ self._second @ across.T)
        lateral = turn.T @ across
        self._made.append(Sections.of(self._surface, self._pairs, self._index, axis, (lateral[0], lateral[1])))
        return self._made[-1]


def _direction(given: Direction, name: str) -> Floats:
    try:
        vector = np.asarray(given, dtype=np.float64)
    except (TypeError, ValueError):
        vector = np.zeros(0)
    length = float(np.linalg.norm(vector)) if vector.shape == (3,) else math.nan
    if not 0 < length < math.inf:
        allowed = "three finite numbers that are not all 0"
        advice = "give (-1, 0, 0), for example"
        raise InputError(Fault("this is no direction", f"{CALL}: {name}", repr(given), allowed, advice))
    return np.asarray(vector / length)


def _check(reynolds: float, layer: str | None) -> None:
    if not (isinstance(reynolds, int | float | np.number) and 0 < float(reynolds) < math.inf):
        advice = "give speed x diameter / kinematic viscosity"
        raise InputError(
            Fault("no flow has this Reynolds number", f"{CALL}: reynolds", repr(reynolds), "a number above 0", advice)
        )
    if layer not in ("laminar", "tripped", None):
        allowed = "'laminar', 'tripped' or None"
        advice = "give None to let the model choose"
        raise InputError(Fault("no state of the layer has this name", f"{CALL}: layer", repr(layer), allowed, advice))
