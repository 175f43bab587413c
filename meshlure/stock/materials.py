"""Densities of what baits are made of, each with its range and its source."""

from __future__ import annotations

import functools
import re
from collections.abc import Mapping
from dataclasses import dataclass
from types import MappingProxyType

from meshlure.errors import Fault, InputError
from meshlure.stock import shelf

_TABLE = "materials.toml"
_WEIGH = "or weigh it and give its density instead of the material"


@dataclass(frozen=True)
class Material:
    """One row of the table of densities.

    Attributes
    ----------
    name : str
    density, low, high : float, kg/m3
        The usual value, and the range within which a maker's own will lie.
    source : str
        Where the values come from, in words.
    assumed : bool
        True where they rest on memory, on a class of datasheets or on assumed shares; False where a standard or a
        public table was read, or where they follow from such by arithmetic.
    kinds : tuple of str
        The triggers of `meshlure.stock.cautions` that the material sets off.
    aliases : tuple of str
        Other names that it answers to.
    """

    name: str
    density: float
    low: float
    high: float
    source: str
    assumed: bool
    kinds: tuple[str, ...] = ()
    aliases: tuple[str, ...] = ()


@functools.cache
def materials() -> tuple[Material, ...]:
    """All materials in stock, in the table's order."""
    table = shelf.read_table(_TABLE)
    sources = table["sources"]
    rows = []
    for row in table["materials"]["row"]:
        source = sources[row["from"]]
        note = row.get("note", "")
        rows.append(
            Material(
                name=row["name"],
                density=float(row["typical"]),
                low=float(row["low"]),
                high=float(row["high"]),
                source=f"{source['words']}; {note}" if note else source["words"],
                assumed=source["assumed"],
                kinds=tuple(row.get("cautions", ())),
                aliases=tuple(row.get("aliases", ())),
            )
        )
    return tuple(rows)


@functools.cache
def _by_name() -> Mapping[str, Material]:
    own = {shelf.plain(row.name): row for row in materials()}
    others = {shelf.plain(alias): row for row in materials() for alias in row.aliases}
    return MappingProxyType(others | own)


@functools.cache
def _unsettled() -> Mapping[str, tuple[str, ...]]:
    rows = shelf.read_table(_TABLE)["materials"]["unsettled"]
    return MappingProxyType({shelf.plain(row["name"]): tuple(row["rows"]) for row in rows})


def material(name: str, where: str) -> Material:
    """Material of this name or alias; case, spaces and hyphens do not matter.

    Parameters
    ----------
    name : str
        Such as ``"lead"`` or ``"tungsten heavy alloy 95% W"``.
    where : str
        The key or option that the name stands at, for the message.

    Raises
    ------
    InputError
        Where nothing of this name is in stock (with the names near it), where the name stands for several materials
        of different density (with the rows to choose from), and for air and water, which are voids.
    """
    asked = shelf.plain(name)
    if asked in _by_name():
        return _by_name()[asked]
    if asked in _unsettled():
        rows = [_by_name()[shelf.plain(row)] for row in _unsettled()[asked]]
        allowed = ", ".join(f"{row.name} ({row.density / 1e3:g} g/cm3)" for row in rows)
        raise InputError(Fault("the name stands for several materials", where, name, allowed, f"name one, {_WEIGH}"))
    if asked in ("air", "water"):
        state = "sealed" if asked == "air" else "flooded"
        raise InputError(
            Fault(f"a space filled with {asked} is a void, not a material", where, name, next_step=f'void = "{state}"')
        )
    known = {key: row.name for key, row in _by_name().items()} | {key: key for key in _unsettled()}
    raise shelf.unknown("material", name, where, known, _TABLE, f"name one, {_WEIGH}")


def materials_named(words: str, where: str) -> tuple[Material, ...]:
    """Materials whose name, alias or family begins words with all of these, in the table's order.

    Parameters
    ----------
    words : str
        Such as ``"cedar"``, ``"tungsten 95"`` or ``"wood"``; case and hyphens do not matter.
    where : str
        What the words stand at, for the message.

    Raises
    ------
    InputError
        Where there is none, with the names near it.
    """
    asked = shelf.plain(words).split()
    families: dict[str, list[str]] = {}
    for family, rows in _unsettled().items():
        for name in rows:
            families.setdefault(shelf.plain(name), []).append(family)

    def answers(row: Material) -> bool:
        own = shelf.plain(row.name)
        named = " ".join([own, *map(shelf.plain, row.aliases), *families.get(own, ())])
        return all(any(part.startswith(word) for part in re.split(r"[\s/+,]+", named)) for word in asked)

    found = tuple(row for row in materials() if answers(row))
    if not found:
        known = {key: row.name for key, row in _by_name().items()} | {key: key for key in _unsettled()}
        raise shelf.unknown("material", words, where, known, _TABLE, "shorten the words, or leave them out to see all")
    return found
