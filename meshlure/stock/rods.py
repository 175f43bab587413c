"""Diameters that round rod and wire for ballast are sold in."""

from __future__ import annotations

import functools
from collections.abc import Mapping
from dataclasses import dataclass
from types import MappingProxyType

from meshlure.stock import shelf
from meshlure.stock.materials import material
from meshlure.units import MM

_TABLE = "rods.toml"


@dataclass(frozen=True)
class RodSizes:
    """What round stock of one material is sold.

    Attributes
    ----------
    diameters : tuple of float, m
        Ascending; empty where none is sold: it is cast or pressed to any size.
    source : str
        Where that comes from, in words; empty where none is sold.
    """

    diameters: tuple[float, ...]
    source: str


@functools.cache
def _by_row() -> Mapping[str, RodSizes]:
    return MappingProxyType(
        {
            row: RodSizes(tuple(sorted(size * MM for size in group["diameters"])), group["words"])
            for group in shelf.read_table(_TABLE)["sold"]
            for row in group["rows"]
        }
    )


def rod_sizes(name: str, where: str = "material") -> RodSizes:
    """Diameters of round stock of a material with their source.

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
    """
    return _by_row().get(material(name, where).name, RodSizes((), ""))


def rod_diameters(name: str, where: str = "material") -> tuple[float, ...]:
    """Diameters, m, ascending, that round rod or wire of a material is sold in; see `rod_sizes`."""
    return rod_sizes(name, where).diameters
