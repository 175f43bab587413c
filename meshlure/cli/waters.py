"""`meshlure waters`: density and viscosity of waters."""

from __future__ import annotations

from typing import TYPE_CHECKING, Annotated, Any, Final

import typer

from meshlure.cli.shelves import print_tree
from meshlure.cli.terminal import answer

if TYPE_CHECKING:
    from meshlure.stock.waters import Water

SHORT: Final = "Look up the density of fresh, brackish and sea water."

HELP: Final = """Look up the density of fresh, brackish and sea water, and what it does to a bait.

Those that every report tells of, or one of your own:

\b
  meshlure waters
  meshlure waters --temperature "12 degC" --salinity "20 g/kg"

Exit code: 0 done, 2 there is no such water.
"""

_SOURCE: Final = (
    "  source   density: TEOS-10 at sea pressure, within 0.01 kg/m3; viscosity: Sharqawy and others (2010), within 1.5%"
)
_USUAL: Final = (18.0, 0.0)
"""degC and g/kg of what a bait file takes where it says nothing."""


def waters(
    temperature: Annotated[
        str | None,
        typer.Option("--temperature", metavar="TEMPERATURE", help='Of the water, "12 degC"; 18 if left out.'),
    ] = None,
    salinity: Annotated[
        str | None, typer.Option("--salinity", metavar="SALINITY", help='Salt in it, "35 g/kg"; none if left out.')
    ] = None,
    json: Annotated[bool, typer.Option("--json", help="Print them as one JSON object.")] = False,
) -> None:
    """Look up waters."""
    from meshlure.stock.waters import table, water

    asked = _read(temperature, salinity)
    usual = water(*_USUAL)
    rows = [("this water", water(*asked, "waters"))] if asked is not None else list(table())
    if json:
        print_tree({"waters": [_tree(name, row, usual) for name, row in rows]})
        return
    answer(
        _table(rows, usual), "", "lift: what a bait of 10 cm3 gains in reserve against fresh water of 18 degC.", _SOURCE
    )


def _read(temperature: str | None, salinity: str | None) -> tuple[float, float] | None:
    """Return what was asked for, degC and g/kg, with all faults of it at once."""
    from meshlure.errors import Fault, InputError
    from meshlure.units import quantity

    if temperature is None and salinity is None:
        return None
    faults: list[Fault] = []
    found = list(_USUAL)
    for place, (text, kind) in enumerate(((temperature, "temperature"), (salinity, "salinity"))):
        try:
            found[place] = found[place] if text is None else quantity(text, kind, f"--{kind}")
        except InputError as error:
            faults += error.faults
    if faults:
        raise InputError(faults)
    return found[0], found[1]


def _lift(row: Water, usual: Water) -> float:
    """What ten cubic centimetres under water gain in reserve, g."""
    return (row.density - usual.density) * 1e-2


def _table(rows: list[tuple[str, Water]], usual: Water) -> Any:
    from meshlure.cli.tables import Column, Table

    cells = [
        (
            name,
            f"{row.temperature:g}",
            f"{row.salinity:g}",
            f"{row.density:.2f}",
            f"{row.viscosity * 1e6:.3f}",
            f"{_lift(row, usual):+.3f}",
        )
        for name, row in rows
    ]
    heads = [Column("water", words=True)]
    heads += [Column(head, True) for head in ("degC", "g/kg salt", "kg/m3", "mm2/s", "lift g")]
    return Table(heads, cells)


def _tree(name: str, row: Water, usual: Water) -> dict[str, Any]:
    return {
        "name": name,
        "temperature_c": row.temperature,
        "salinity_g_kg": row.salinity,
        "density_kg_m3": row.density,
        "viscosity_m2_s": row.viscosity,
        "lift_g_per_10_cm3": _lift(row, usual),
    }
