"""Crossflow: how hard the flow presses on a long body's sections from the side, and where."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Final

import numpy as np

from meshlure.geometry.stations import Stations
from meshlure.geometry.surface import Floats

_RATIO: Final = (0.125, 0.25, 0.5, 1.0, 2.0, 4.0, 8.0)
_ELLIPSE_CD: Final = (1.9, 1.8, 1.6, 1.2, 0.65, 0.35, 0.25)
"""Elliptic sections, depth along the flow over width across it, below the drag crisis. 0.5 to 8: White, Fluid
Mechanics, table 7.2 after Hoerner (from memory); an endless plate has 2.0, so thinner ones run towards that."""


def section_cd(depth_over_width: Floats) -> Floats:
    """Return the drag coefficient of elliptic sections across the flow, on their width, (n,) array.

    Parameters
    ----------
    depth_over_width : (n,) array
        Axis along the flow over axis across it.

    Notes
    -----
    Interpolated over the logarithm of the ratio, held at the ends of 1/8 and 8. Reynolds numbers of the width from
    about 1e4 to 1e5, laminar separation; sharp corners would press up to twice as hard.
    """
    ratio = np.clip(depth_over_width, _RATIO[0], _RATIO[-1])
    return np.asarray(np.interp(np.log(ratio), np.log(_RATIO), _ELLIPSE_CD))


@dataclass(frozen=True)
class Crossflow:
    """What a flow square to the bait's long axis meets.

    Attributes
    ----------
    area : float, m2
        Of the sections' widths along the length.
    drag_area : float, m2
        Sum of section coefficient times width, without the loss round the ends.
    position : float, m
        Its centre along the stations' axis, mesh coordinates.
    """

    area: float
    drag_area: float
    position: float


def crossflow_strips(stations: Stations, towards: int) -> Floats:
    """Return section coefficient times width at each station, (n,) array, m, without the loss round the ends.

    Parameters
    ----------
    stations : Stations
    towards : int
        0 for a flow along the first lateral direction (which sees the second as width), 1 for the other.
    """
    depth, width = stations.spread[:, towards], stations.spread[:, 1 - towards]
    ratio = np.divide(depth, width, out=np.ones_like(depth), where=width > 0)
    return np.asarray(section_cd(ratio) * width)


def crossflow(stations: Stations, towards: int) -> Crossflow:
    """Return what a flow along one of the two lateral directions meets.

    Parameters
    ----------
    stations : Stations
    towards : int
        0 for a flow along the first lateral direction (which sees the second as width), 1 for the other.
    """
    width, strips = stations.spread[:, 1 - towards], crossflow_strips(stations, towards)
    area = float(np.trapezoid(width, stations.position))
    total = float(np.trapezoid(strips, stations.position))
    moment = float(np.trapezoid(strips * stations.position, stations.position))
    return Crossflow(area, total, moment / total if total > 0 else (stations.low + stations.high) / 2)
