"""Diameters that balls are sold in, what one weighs, and how far a bought one strays from that."""

from __future__ import annotations

import functools
import math
from collections.abc import Mapping
from dataclasses import dataclass
from types import MappingProxyType

from meshlure.stock import shelf
from meshlure.stock.materials import Material
from meshlure.units import INCH, MM

_TABLE = "balls.toml"


@dataclass(frozen=True)
class BallSize:
    """A diameter that balls are sold in.

    Attributes
    ----------
    name : str
        Such as "5 mm" or "3/16 in".
    diameter : float, m
    """

    name: str
    diameter: float


@dataclass(frozen=True)
class BallSpread:
    """How far the mass of one bought ball strays.

    Attributes
    ----------
    share : float
        Of its nominal mass, either way.
    source : str
    assumed : bool
    """

    share: float
    source: str
    assumed: bool


@functools.cache
def sizes() -> tuple[BallSize, ...]:
    """Diameters that balls are sold in, metric and inch, smallest first."""
    table = shelf.read_table(_TABLE)
    metric = [BallSize(f"{size:g} mm", size * MM) for size in table["metric"]]
    inch = []
    for name in table["inch"]:
        top, bottom = name.split("/")
        inch.append(BallSize(f"{name} in", int(top) / int(bottom) * INCH))
    return tuple(sorted(metric + inch, key=lambda size: size.diameter))


@functools.cache
def _spreads() -> Mapping[str, BallSpread]:
    return MappingProxyType(
        {
            row: BallSpread(group["share"], group["words"], assumed=True)
            for group in shelf.read_table(_TABLE)["spread"]
            for row in group["rows"]
        }
    )


def spread(material: Material) -> BallSpread:
    """Spread of the mass of one ball of a material, as a share of its nominal mass.

    Notes
    -----
    Where the trade has no figure of its own, the larger side of the material's range of density is taken, and the
    diameter as exact.
    """
    if material.name in _spreads():
        return _spreads()[material.name]
    share = max(material.high - material.density, material.density - material.low) / material.density
    return BallSpread(share, f"range of density of {material.name}: {material.source}", material.assumed)


def ball_mass(diameter: float, density: float) -> float:
    """Mass of a ball, kg.

    Parameters
    ----------
    diameter : float, m
    density : float, kg/m3
    """
    return math.pi / 6.0 * diameter**3 * density
