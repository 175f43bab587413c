"""Diameters that balls are sold in, what one weighs, and how far a bought one strays from that."""

from __future__ import annotations

import functools
import math
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from types import MappingProxyType

from meshlure.stock import shelf
from meshlure.stock.materials import Material, material
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
    return _sizes(table["metric"], table["inch"])


def _sizes(metric: Sequence[float], inch: Sequence[str]) -> tuple[BallSize, ...]:
    found = [BallSize(f"{size:g} mm", size * MM) for size in metric]
    for name in inch:
        top, bottom = name.split("/")
        found.append(BallSize(f"{name} in", int(top) / int(bottom) * INCH))
    return tuple(sorted(found, key=lambda size: size.diameter))


@functools.cache
def _sold() -> Mapping[str, tuple[BallSize, ...]]:
    return MappingProxyType(
        {
            row: _sizes(group["metric"], group.get("inch", ()))
            for group in shelf.read_table(_TABLE)["sold"]
            for row in group["rows"]
        }
    )


def ball_sizes(name: str, where: str = "material") -> tuple[BallSize, ...]:
    """Diameters that balls of a material are sold in, smallest first; none where it is not sold as balls.

    Parameters
    ----------
    name : str
        Material or alias, as `meshlure.stock.materials.material` takes it.
    where : str
        The key or option that the name stands at, for the message.

    Raises
    ------
    InputError
        The stock does not know the material.

    Notes
    -----
    What is met in shops: common practice, no source.
    """
    return _sold().get(material(name, where).name, ())


def ball_diameters(name: str, where: str = "material") -> tuple[float, ...]:
    """Diameters, m, ascending, that balls of a material are sold in; see `ball_sizes`."""
    return tuple(size.diameter for size in ball_sizes(name, where))


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
