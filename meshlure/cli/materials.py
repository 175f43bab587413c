"""`meshlure materials`: what things weigh, with range and source."""

from __future__ import annotations

from collections.abc import Sequence
from typing import TYPE_CHECKING, Annotated, Any, Final

import typer

from meshlure.cli.completion import materials_begun
from meshlure.cli.shelves import G_CM3, basis, caution_lines, caution_trees, density, print_tree
from meshlure.cli.terminal import answer

if TYPE_CHECKING:
    from meshlure.stock.materials import Material

SHORT: Final = "Look up densities in stock, with range and source."

HELP: Final = """Look up densities in stock, with range and source.

All of them, or those that answer to some words; a few are told with source, other names and cautions:

\b
  meshlure materials
  meshlure materials white cedar

Or what has about a density, the nearest first:

\b
  meshlure materials --density "0.55 g/cm3"

Exit code: 0 done, 2 nothing answers to the words.
"""

_FEW: Final = 4
"""Rows that are told at length."""
_ASSUMED: Final = (
    "assumed: from memory, from a class of datasheets or from assumed shares. A weighed density always beats a row."
)


def materials(
    words: Annotated[
        list[str] | None,
        typer.Argument(
            metavar="[WORDS]", help="Words of its name, or their beginnings.", autocompletion=materials_begun
        ),
    ] = None,
    about: Annotated[
        str | None,
        typer.Option("--density", metavar="DENSITY", help='Only those whose range holds it, "0.55 g/cm3".'),
    ] = None,
    json: Annotated[bool, typer.Option("--json", help="Print them as one JSON object.")] = False,
) -> None:
    """Look up materials."""
    from meshlure.stock.materials import materials as stock
    from meshlure.stock.materials import materials_named

    rows: Sequence[Material] = materials_named(" ".join(words), "materials") if words else stock()
    if about is not None:
        rows = _about(rows, about)
    kinds = [kind for row in rows for kind in row.kinds]
    if json:
        print_tree({"materials": [_tree(row) for row in rows], "cautions": caution_trees(kinds)})
        return
    lines: list[Any] = [_table(rows)]
    if len(rows) <= _FEW:
        for row in rows:
            lines += _told(row)
        lines += caution_lines(kinds)
    else:
        lines += ["", _ASSUMED, "Source, other names and cautions: meshlure materials NAME"]
    answer(*lines)


def _about(rows: Sequence[Material], about: str) -> list[Material]:
    from meshlure.errors import Fault, InputError
    from meshlure.units import quantity

    wanted = quantity(about, "density", "--density")
    near = sorted(rows, key=lambda row: abs(row.density - wanted))
    held = [row for row in near if row.low <= wanted <= row.high]
    if not held:
        nearest = ", ".join(f"{row.name} ({density(row.low)} to {density(row.high)})" for row in near[:3])
        step = "mix for it: meshlure pour --help" if wanted < 1200 else "name another density"
        raise InputError(Fault("nothing in stock has this density", "--density", about, f"near are {nearest}", step))
    return held


def _table(rows: Sequence[Material]) -> Any:
    from meshlure.cli.tables import Column, Table

    heads = (Column("material", words=True), Column("g/cm3", True), Column("from", True), Column("to", True))
    cells = [(row.name, *map(density, (row.density, row.low, row.high)), basis(row.assumed)) for row in rows]
    return Table((*heads, Column("by")), cells)


def _told(row: Material) -> list[str]:
    lines = ["", row.name, f"  source   {row.source}{' (assumed)' if row.assumed else ''}"]
    if row.aliases:
        lines.append(f"  also     {', '.join(row.aliases)}")
    sold = _sold(row.name)
    return [*lines, f"  sold as  {sold}"] if sold else lines


def _sold(name: str) -> str:
    from meshlure.stock.balls import ball_sizes
    from meshlure.stock.rods import rod_diameters

    balls, rods = ball_sizes(name), rod_diameters(name)
    words = [f"balls of {balls[0].name} to {balls[-1].name} (meshlure balls)"] if balls else []
    if rods:
        words.append(f"rod of {rods[0] * 1e3:g} to {rods[-1] * 1e3:g} mm (meshlure rods)")
    return ", ".join(words)


def _tree(row: Material) -> dict[str, Any]:
    return {
        "name": row.name,
        "aliases": list(row.aliases),
        "density_g_cm3": row.density * G_CM3,
        "low_g_cm3": row.low * G_CM3,
        "high_g_cm3": row.high * G_CM3,
        "assumed": row.assumed,
        "source": row.source,
        "cautions": list(row.kinds),
    }
