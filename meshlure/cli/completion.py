"""What the shell offers behind the tabulator: names in stock, each as one word."""

from __future__ import annotations

import re
from collections.abc import Iterable


def materials_begun(incomplete: str) -> list[tuple[str, str]]:
    """Return names of materials that begin so, with their densities.

    Notes
    -----
    Blanks stand as hyphens, which the stock takes for the same: a name is then one word in every shell.
    """
    from meshlure.stock.materials import materials

    return _begun(incomplete, ((row.name, f"{row.density / 1e3:g} g/cm3") for row in materials()))


def hardware_begun(incomplete: str) -> list[tuple[str, str]]:
    """Return names of hooks, rings and eyes that begin so, with their masses."""
    from meshlure.stock.hardware import hardware

    return _begun(incomplete, ((row.name, f"{row.mass * 1e3:.2g} g") for row in hardware()))


def balls_begun(incomplete: str) -> list[tuple[str, str]]:
    """Return names of materials that balls are sold of."""
    from meshlure.stock.balls import ball_sizes

    return [row for row in materials_begun(incomplete) if ball_sizes(row[0])]


def rods_begun(incomplete: str) -> list[tuple[str, str]]:
    """Return names of materials that rod is sold of."""
    from meshlure.stock.rods import rod_diameters

    return [row for row in materials_begun(incomplete) if rod_diameters(row[0])]


def inserts_begun(incomplete: str) -> list[tuple[str, str]]:
    """Return what an insert may be, behind the FILE= of --insert."""
    file, sign, what = incomplete.rpartition("=")
    if not sign:
        return []
    hollow = [(word, "hollow") for word in ("sealed", "flooded") if word.startswith(what)]
    return [(f"{file}={name}", words) for name, words in [*hollow, *materials_begun(what)]]


def _begun(incomplete: str, names: Iterable[tuple[str, str]]) -> list[tuple[str, str]]:
    """Return what begins so; a name that needs quotes in a shell is left out."""
    asked = _word(incomplete).casefold()
    words = ((_word(name), told) for name, told in names)
    return [
        (word, told) for word, told in words if word.casefold().startswith(asked) and re.fullmatch(r"[\w./%+-]+", word)
    ]


def _word(name: str) -> str:
    return re.sub(r"\s+", "-", name.replace(", ", " "))
