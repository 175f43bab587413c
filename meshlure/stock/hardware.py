"""Masses and wires of hooks, rings, hangers and eyes by the names that shops give them; every one of them assumed."""

from __future__ import annotations

import functools
import math
import re
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from types import MappingProxyType
from typing import Any

from meshlure.errors import Fault, InputError
from meshlure.stock import shelf
from meshlure.stock.materials import Material, material
from meshlure.units import GRAM, MM

_TABLE = "hardware.toml"
_WEIGH = "or weigh it and give its mass instead of the item"
_WIRE = re.compile(r"wire (?P<diameter>\d+(?:\.\d+)?) x (?P<length>\d+(?:\.\d+)?)", re.ASCII)


@dataclass(frozen=True)
class HardwareItem:
    """One piece of hardware of a shop's size.

    Attributes
    ----------
    name : str
    mass, low, high : float, kg
        The usual mass, and the range within which a bought one will lie.
    wire : float or None, m
        Diameter of its wire.
    wire_length : float or None, m
        Length of wire of that diameter that stands in the stream.
    material : str
        Name of its material in `meshlure.stock.materials`.
    source : str
        Where the values come from, in words.
    assumed : bool
        True for all that is in stock: the sizes of shops are not standardised.
    kinds : tuple of str
        The triggers of `meshlure.stock.cautions` that it sets off.
    """

    name: str
    mass: float
    low: float
    high: float
    wire: float | None
    wire_length: float | None
    material: str
    source: str
    assumed: bool
    kinds: tuple[str, ...] = ()


def wire_mass(diameter: float, length: float, density: float) -> float:
    """Mass of round wire, kg.

    Parameters
    ----------
    diameter, length : float, m
    density : float, kg/m3
    """
    return math.pi / 4.0 * diameter**2 * length * density


@functools.cache
def hardware() -> tuple[HardwareItem, ...]:
    """All hardware in stock, smallest first within its sort; lengths of wire are made to measure by `item`."""
    table = shelf.read_table(_TABLE)
    return (*_trebles(table), *_split_rings(table), *_screw_eyes(table), *_others(table))


@functools.cache
def _by_name() -> Mapping[str, HardwareItem]:
    return MappingProxyType({shelf.plain(row.name): row for row in hardware()})


def item(name: str, where: str) -> HardwareItem:
    """Hardware of this name; case, spaces, hyphens and the sign for a number do not matter.

    Parameters
    ----------
    name : str
        Such as ``"treble 6"``, ``"treble 1/0"``, ``"split ring 3"``, ``"screw eye 1.0 x 15"`` (wire by shank, mm) or
        ``"wire 0.8 x 90"`` (diameter by length, mm).
    where : str
        The key or option that the name stands at, for the message.

    Raises
    ------
    InputError
        Where nothing of this name is in stock, with the names near it, and where a wire is of no size that is sold.
    """
    asked = shelf.plain(name)
    if asked in _by_name():
        return _by_name()[asked]
    if match := _WIRE.fullmatch(asked):
        return _wire(float(match["diameter"]), float(match["length"]), name, where)
    known = {key: row.name for key, row in _by_name().items()}
    raise shelf.unknown("hardware", name, where, known, _TABLE, f"name one, {_WEIGH}")


def hardware_named(words: str, where: str) -> tuple[HardwareItem, ...]:
    """Hardware whose name begins words with all of these; all of it without any, a wire as it is asked for.

    Parameters
    ----------
    words : str
        Such as ``"treble"``, ``"ring 3"`` or ``"wire 0.8 x 90"``.
    where : str
        What the words stand at, for the message.

    Raises
    ------
    InputError
        As `item` does, where nothing answers to them.
    """
    asked = shelf.plain(words)
    if asked in _by_name():
        return (_by_name()[asked],)
    parts = asked.split()
    found = tuple(
        row
        for name, row in _by_name().items()
        if all(any(word.startswith(part) for word in re.split(r"[\s,]+", name)) for part in parts)
    )
    return found or (item(words, where),)


def _trebles(table: Mapping[str, Any]) -> list[HardwareItem]:
    group = table["treble"]
    return [
        HardwareItem(
            name=f"treble {row['size']}",
            mass=_middle(row["mass"]) * GRAM,
            low=row["mass"][0] * GRAM,
            high=row["mass"][1] * GRAM,
            wire=_middle(row["wire"]) * MM,
            wire_length=group["gapes"] * _middle(row["gape"]) * MM,
            material=group["material"],
            source=group["source"],
            assumed=table["assumed"],
            kinds=tuple(group["cautions"]),
        )
        for row in group["rows"]
    ]


def _split_rings(table: Mapping[str, Any]) -> list[HardwareItem]:
    group = table["split_ring"]
    rows = []
    for row in group["rows"]:
        wire = row["wire"] * MM
        length = 2.0 * math.pi * (row["outside"] * MM - wire)
        rows.append(_bent(f"split ring {row['size']}", wire, length, length, group, table["assumed"]))
    return rows


def _screw_eyes(table: Mapping[str, Any]) -> list[HardwareItem]:
    group = table["screw_eye"]
    rows = []
    for row in group["rows"]:
        wire = row["wire"] * MM
        eye = math.pi * (row["eye"] * MM + wire)
        name = f"screw eye {row['wire']} x {row['shank']:g}"
        rows.append(_bent(name, wire, row["shank"] * MM + eye, eye, group, table["assumed"]))
    return rows


def _bent(
    name: str, wire: float, length: float, in_stream: float, group: Mapping[str, Any], assumed: bool
) -> HardwareItem:
    """Return an item bent from round wire, its mass computed."""
    mass = wire_mass(wire, length, _material(group).density)
    low, high = mass * (1.0 - group["spread"]), mass * (1.0 + group["spread"])
    kinds = tuple(group["cautions"])
    return HardwareItem(name, mass, low, high, wire, in_stream, group["material"], group["source"], assumed, kinds)


def _wire(diameter: float, length: float, name: str, where: str) -> HardwareItem:
    table = shelf.read_table(_TABLE)
    group = table["wire"]
    sizes, lengths = group["diameter"], group["length"]
    if not (sizes[0] <= diameter <= sizes[1] and lengths[0] <= length <= lengths[1]):
        allowed = f"'wire D x L' in mm, D {sizes[0]:g} to {sizes[1]:g}, L {lengths[0]:g} to {lengths[1]:g}"
        raise InputError(
            Fault("no wire of this size is in stock", where, name, allowed, f"correct the sizes, {_WEIGH}")
        )
    metal = _material(group)
    across, along = diameter * MM, length * MM
    slack = group["tolerance"] * MM
    return HardwareItem(
        name=f"wire {diameter:g} x {length:g}",
        mass=wire_mass(across, along, metal.density),
        low=wire_mass(across - slack, along, metal.low),
        high=wire_mass(across + slack, along, metal.high),
        wire=across,
        wire_length=along,
        material=group["material"],
        source=group["source"],
        assumed=table["assumed"],
        kinds=tuple(group["cautions"]),
    )


def _others(table: Mapping[str, Any]) -> list[HardwareItem]:
    return [
        HardwareItem(
            name=row["name"],
            mass=_middle(row["mass"]) * GRAM,
            low=row["mass"][0] * GRAM,
            high=row["mass"][1] * GRAM,
            wire=None,
            wire_length=None,
            material=row["material"],
            source=row["source"],
            assumed=table["assumed"],
        )
        for row in table["other"]["rows"]
    ]


def _material(group: Mapping[str, Any]) -> Material:
    return material(group["material"], _TABLE)


def _middle(ends: Sequence[float]) -> float:
    return 0.5 * (ends[0] + ends[1])
