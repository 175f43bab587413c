"""What the commands that look things up in stock have in common: words for sources, cautions, ranges."""

from __future__ import annotations

import json
from collections.abc import Iterable
from typing import Any, Final

from meshlure.cli.terminal import hand_on

G_CM3: Final = 1e-3
"""Times kg/m3."""


def basis(assumed: bool) -> str:
    """Return in a word what a value rests on."""
    return "assumed" if assumed else "source"


def fine(value: float, digits: int = 3) -> str:
    """Return a number in as many significant digits, without an exponent."""
    from math import floor, log10

    value = float(f"{value:.{digits}g}")
    places = max(0, digits - 1 - floor(log10(abs(value)))) if value else 0
    return f"{value:.{places}f}"


def density(value: float) -> str:
    """Return a density, kg/m3, in g/cm3 as the table has it."""
    return f"{value * G_CM3:.3f}" if value < 1000 else f"{value * G_CM3:.2f}"


def meant(words: str, where: str) -> list[str]:
    """Return the names of the materials that words mean: the one of that name, or all that answer to them."""
    from meshlure.errors import InputError
    from meshlure.stock.materials import material, materials_named

    try:
        return [material(words, where).name]
    except InputError:
        return [row.name for row in materials_named(words, where)]


def caution_lines(kinds: Iterable[str]) -> list[str]:
    """Return what these triggers call to mind, a line each."""
    from meshlure.stock.cautions import cautions

    return [f"  caution  {row.text}" for row in cautions(kinds)]


def caution_trees(kinds: Iterable[str]) -> list[dict[str, str]]:
    """Return the same for results in JSON."""
    from meshlure.stock.cautions import cautions

    return [{"trigger": row.trigger, "text": row.text} for row in cautions(kinds)]


def print_tree(tree: Any) -> None:
    """Print a tree as one JSON object."""
    hand_on(json.dumps(tree, indent=1, allow_nan=False, ensure_ascii=False) + "\n")
