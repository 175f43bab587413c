"""`meshlure rods`: the round rod and wire that is sold for ballast, and what a length of it weighs."""

from __future__ import annotations

from typing import Annotated, Any, Final

import typer

from meshlure.cli.completion import rods_begun
from meshlure.cli.shelves import caution_lines, fine, meant, print_tree
from meshlure.cli.terminal import answer

SHORT: Final = "Look up the rod and wire that is sold for ballast."

HELP: Final = """Look up the round rod and wire that is sold for ballast, and what 10 mm of it weigh.

What it is sold of, or the diameters of one material:

\b
  meshlure rods
  meshlure rods lead

Exit code: 0 done, 1 it is not sold round, 2 the material is not in stock.
"""


def rods(
    material: Annotated[
        list[str] | None,
        typer.Argument(metavar="[MATERIAL]", help="Name of a material in stock.", autocompletion=rods_begun),
    ] = None,
    json: Annotated[bool, typer.Option("--json", help="Print them as one JSON object.")] = False,
) -> None:
    """Look up rods."""
    from meshlure.stock.materials import materials

    names = meant(" ".join(material), "rods") if material else [row.name for row in materials()]
    found = {name: rows for name in names if (rows := _of(name))}
    if json:
        print_tree({"rods": [row for rows in found.values() for row in rows]})
    elif not found:
        words = " ".join(material or ())
        answer(f"{words} is not sold round: cast or press it to size, or take another. What is: meshlure rods")
    elif len(found) == 1:
        answer(*_diameters(*found.items()))
    else:
        answer(_overview(found), "", "Masses: meshlure rods MATERIAL. Which are met in shops is assumed.")
    if not found:
        raise typer.Exit(1)


def _of(name: str) -> list[dict[str, Any]]:
    from meshlure.stock.hardware import wire_mass
    from meshlure.stock.materials import material
    from meshlure.stock.rods import rod_sizes

    row = material(name, "rods")
    sold = rod_sizes(row.name)
    return [
        {
            "material": row.name,
            "diameter_mm": round(diameter * 1e3, 6),
            "mass_g_per_10_mm": wire_mass(diameter, 0.01, row.density) * 1e3,
            "low_g_per_10_mm": wire_mass(diameter, 0.01, row.low) * 1e3,
            "high_g_per_10_mm": wire_mass(diameter, 0.01, row.high) * 1e3,
            "source": sold.source,
        }
        for diameter in sold.diameters
    ]


def _diameters(named: tuple[str, list[dict[str, Any]]]) -> list[Any]:
    from meshlure.cli.tables import Column, Table
    from meshlure.stock.materials import material

    name, rows = named
    keys = ("mass_g_per_10_mm", "low_g_per_10_mm", "high_g_per_10_mm")
    cells = [(f"{row['diameter_mm']:g} mm", *(fine(row[key]) for key in keys)) for row in rows]
    heads = (Column("diameter", True), Column("g per 10 mm", True), Column("from", True), Column("to", True))
    notes = [f"  source   {rows[0]['source']}", *caution_lines(material(name, "rods").kinds)]
    return [name, Table(heads, cells), "", *notes]


def _overview(found: dict[str, list[dict[str, Any]]]) -> Any:
    from meshlure.cli.tables import Column, Table

    cells = [(name, ", ".join(f"{row['diameter_mm']:g}" for row in rows)) for name, rows in found.items()]
    return Table((Column("material", words=True), Column("diameters, mm", words=True)), cells)
