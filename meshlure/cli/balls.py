"""`meshlure balls`: the balls that are sold, and what one weighs."""

from __future__ import annotations

from typing import Annotated, Any, Final

import typer

from meshlure.cli.completion import balls_begun
from meshlure.cli.shelves import fine, meant, print_tree
from meshlure.cli.terminal import answer

SHORT: Final = "Look up the balls that are sold, and what one weighs."

HELP: Final = """Look up the balls that are sold, and what one weighs.

What they are sold of, or the sizes of one material:

\b
  meshlure balls
  meshlure balls tungsten
  meshlure balls bearing steel

Exit code: 0 done, 1 it is not sold as balls, 2 the material is not in stock.
"""


def balls(
    material: Annotated[
        list[str] | None,
        typer.Argument(metavar="[MATERIAL]", help="Name of a material in stock.", autocompletion=balls_begun),
    ] = None,
    json: Annotated[bool, typer.Option("--json", help="Print them as one JSON object.")] = False,
) -> None:
    """Look up balls."""
    from meshlure.stock.materials import materials

    names = meant(" ".join(material), "balls") if material else [row.name for row in materials()]
    found = {name: sizes for name in names if (sizes := _of(name))}
    if json:
        print_tree({"balls": [row for sizes in found.values() for row in sizes]})
    elif not found:
        answer(f"{' '.join(material or ())} is not sold as balls. What is: meshlure balls")
    elif len(found) == 1:
        answer(*_sizes(*found.items()))
    else:
        answer(_overview(found), "", "Sizes and masses: meshlure balls MATERIAL. Which are met in shops is assumed.")
    if not found:
        raise typer.Exit(1)


def _of(name: str) -> list[dict[str, Any]]:
    from meshlure.stock.balls import ball_mass, ball_sizes, spread
    from meshlure.stock.materials import material

    row = material(name, "balls")
    strays = spread(row)
    return [
        {
            "material": row.name,
            "size": size.name,
            "diameter_mm": size.diameter * 1e3,
            "mass_g": ball_mass(size.diameter, row.density) * 1e3,
            "spread_share": strays.share,
            "spread_source": strays.source,
        }
        for size in ball_sizes(row.name)
    ]


def _sizes(named: tuple[str, list[dict[str, Any]]]) -> list[Any]:
    from meshlure.cli.tables import Column, Table

    name, rows = named
    cells = [(row["size"], f"{row['diameter_mm']:.3f}", fine(row["mass_g"]), *_strays(row)) for row in rows]
    heads = (Column("size"), *(Column(head, True) for head in ("mm", "g", "from", "to")))
    return [name, Table(heads, cells), "", f"  spread   {rows[0]['spread_source']}"]


def _strays(row: dict[str, Any]) -> tuple[str, str]:
    low, high = (row["mass_g"] * (1 + sign * row["spread_share"]) for sign in (-1, 1))
    return fine(low), fine(high)


def _overview(found: dict[str, list[dict[str, Any]]]) -> Any:
    from meshlure.cli.tables import Column, Table

    cells = [(name, f"{rows[0]['size']} to {rows[-1]['size']}", *_ends(rows, "mass_g")) for name, rows in found.items()]
    heads = (Column("material", words=True), Column("sizes"), Column("g each, from", True), Column("to", True))
    return Table(heads, cells)


def _ends(rows: list[dict[str, Any]], key: str) -> tuple[str, str]:
    return fine(rows[0][key], 2), fine(rows[-1][key], 2)
