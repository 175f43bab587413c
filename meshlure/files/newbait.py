"""A first bait file for a mesh: every section there, what is not known yet as a comment to be filled in."""

from __future__ import annotations

import os
import textwrap
from collections.abc import Sequence
from dataclasses import dataclass
from pathlib import Path
from typing import Final

import tomlkit

_WIDE: Final = 110
"""Characters of a comment's line."""


@dataclass(frozen=True)
class NewPiece:
    """An insert.

    Attributes
    ----------
    name : str
    mesh : Path
    key, value : str
        What it is: material, density or void, as the bait file has them.
    lip : bool
    """

    name: str
    mesh: Path
    key: str
    value: str
    lip: bool


@dataclass(frozen=True)
class NewHardware:
    """A piece of hardware: an item of the stock at a place, in the meshes' unit."""

    name: str
    item: str
    at: tuple[float, float, float]
    hangs: bool


@dataclass(frozen=True)
class NewBait:
    """What is known of a bait that has no file yet.

    Attributes
    ----------
    name, unit : str
    nose, back : str
        A signed axis, or three numbers with commas between.
    nose_why, back_why : str
        What that rests on.
    mesh : Path
        The body's.
    key, value : str
        What the body is of: material or density.
    water : tuple of (key, value)
        Of [water].
    pieces : sequence of NewPiece
    hardware : sequence of NewHardware
    """

    name: str
    unit: str
    nose: str
    nose_why: str
    back: str
    back_why: str
    mesh: Path
    key: str
    value: str
    water: Sequence[tuple[str, str]]
    pieces: Sequence[NewPiece] = ()
    hardware: Sequence[NewHardware] = ()


def new_text(bait: NewBait, folder: Path) -> str:
    """Return the bait file's text.

    Parameters
    ----------
    bait : NewBait
    folder : Path
        That the file will stand in: meshes are named relative to it.
    """
    lines = [
        *_comment(
            f"{bait.name}: begun by meshlure new. Correct it, fill in what stands behind a # where you know it, and "
            "see what the bait does: meshlure report, with this file's name, --out and a folder."
        ),
        "",
        "format = 1",
        "",
        "[bait]",
        f"name = {_text(bait.name)}",
        f"length_unit = {_text(bait.unit)}",
        *_comment("Of the meshes, and of every place in this file: the coordinates are those of your CAD."),
        *_comment(f"Out of the nose: {bait.nose_why}."),
        f"nose = {_direction(bait.nose)}",
        *_comment(f"Out of the back: {bait.back_why}."),
        f"back = {_direction(bait.back)}",
        "",
        "[water]",
        *(f"{key} = {_text(value)}" for key, value in bait.water),
        "",
        "[body]",
        f"mesh = {_text(_relative(bait.mesh, folder))}",
        f"{bait.key} = {_text(bait.value)}",
        *(_comment(_OF_STOCK) if bait.key == "material" else ()),
        "",
    ]
    for piece in bait.pieces:
        lines += [
            "[[insert]]",
            f"name = {_text(piece.name)}",
            f"mesh = {_text(_relative(piece.mesh, folder))}",
            f"{piece.key} = {_text(piece.value)}",
            *(["lip = true"] if piece.lip else []),
            "",
        ]
    for row in bait.hardware:
        lines += [
            "[[hardware]]",
            f"name = {_text(row.name)}",
            f"item = {_text(row.item)}",
            *_comment('mass = "0.75 g"     # weigh ten of your own and divide: shop sizes differ'),
            f"at = [{', '.join(f'{value:.10g}' for value in row.at)}]",
            f"hangs = {'true' if row.hangs else 'false'}",
            "",
        ]
    return "\n".join(lines) + "\n" + _rest(bait)


_OF_STOCK: Final = (
    "A stock value with its whole range. Better: weigh a cured or printed sample, and write density in its place."
)


def _rest(bait: NewBait) -> str:
    parts = [] if bait.pieces else [_INSERT]
    parts += [] if bait.hardware else [_HARDWARE]
    parts += [_COAT, _LINE, _CAST]
    return "\n".join(parts)


_INSERT: Final = """\
# Ballast, wire, lip, hollows: a mesh each, drawn in its place. meshlure materials lists what is in stock.
# [[insert]]
# name = "belly weight"
# mesh = "belly.stl"
# material = "lead"         # or density = "11 g/cm3", or void = "sealed", or void = "flooded"
# lip = true                # only for the lip
"""
_HARDWARE: Final = """\
# Hooks, rings, eyes: a mass each at its eye (hangs = true) or at its own middle (false). meshlure hardware lists them.
# [[hardware]]
# name = "front treble"
# item = "treble 6"
# mass = "0.75 g"           # weigh ten of your own and divide: shop sizes differ
# material = "carbon steel"
# at = [31.0, 0.0, -9.5]
# hangs = true
"""
_COAT: Final = """\
# Paint and clear coat over the body, all coats together.
# [coat]
# thickness = "0.15 mm"
# material = "epoxy clear coat"
"""
_LINE: Final = """\
# Where the line is tied, for how it flies.
# [line]
# tie = [0.0, 0.0, 0.0]
"""
_CAST: Final = """\
# How it is thrown and retrieved; left out, usual values are taken and named in the report.
# [cast]
# speed = "25 m/s"
# [retrieve]
# speeds = ["0.5 m/s", "1 m/s"]
"""


def _comment(words: str) -> list[str]:
    """Return words as lines of comment; what no comment may hold is left out."""
    plain = "".join(c if c.isprintable() else " " for c in words)
    return textwrap.wrap(
        plain, _WIDE, initial_indent="# ", subsequent_indent="# ", break_long_words=False, break_on_hyphens=False
    )


def _text(value: str) -> str:
    return tomlkit.string(value).as_string()


def _direction(words: str) -> str:
    return f"[{', '.join(words.split(','))}]" if "," in words else _text(words)


def _relative(mesh: Path, folder: Path) -> str:
    """Return how a mesh is named from a folder, with forward slashes."""
    try:
        return Path(os.path.relpath(mesh, folder)).as_posix()
    except ValueError:  # on another drive
        return mesh.resolve().as_posix()
