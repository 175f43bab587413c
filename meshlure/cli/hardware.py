"""`meshlure hardware`: what hooks, rings, eyes and wire weigh."""

from __future__ import annotations

from typing import TYPE_CHECKING, Annotated, Any, Final

import typer

from meshlure.cli.completion import hardware_begun
from meshlure.cli.shelves import caution_lines, caution_trees, fine, print_tree
from meshlure.cli.terminal import answer

if TYPE_CHECKING:
    from meshlure.stock.hardware import HardwareItem

SHORT: Final = "Look up hooks, rings, eyes and wire: mass and size."

HELP: Final = """Look up hooks, rings, eyes and wire: mass, range and wire.

All of them, or those whose name has some words:

\b
  meshlure hardware
  meshlure hardware treble 1/0

Wire is made to measure, diameter by length in mm:

\b
  meshlure hardware "wire 0.8 x 90"

Exit code: 0 done, 2 nothing answers to the words.
"""

_WEIGH: Final = "All assumed: numbered sizes differ from packet to packet. Weigh ten of your own and state their mass."


def hardware(
    words: Annotated[
        list[str] | None,
        typer.Argument(
            metavar="[WORDS]", help="Words of its name, or their beginnings.", autocompletion=hardware_begun
        ),
    ] = None,
    json: Annotated[bool, typer.Option("--json", help="Print them as one JSON object.")] = False,
) -> None:
    """Look up hardware."""
    from meshlure.stock.hardware import hardware_named

    rows = hardware_named(" ".join(words or ()), "hardware")
    kinds = [kind for row in rows for kind in row.kinds]
    if json:
        print_tree({"hardware": [_tree(row) for row in rows], "cautions": caution_trees(kinds)})
        return
    lines: list[Any] = [_table(rows), "", _WEIGH]
    if words:
        lines += [f"  source   {source}" for source in dict.fromkeys(row.source for row in rows)]
        lines += caution_lines(kinds)
    answer(*lines)


def _table(rows: tuple[HardwareItem, ...]) -> Any:
    from meshlure.cli.tables import Column, Table

    heads = [
        Column("item", words=True),
        *(Column(head, True) for head in ("g", "from", "to", "wire mm", "in the stream mm")),
        Column("material", words=True),
    ]
    cells = [
        (
            row.name,
            fine(row.mass * 1e3),
            fine(row.low * 1e3),
            fine(row.high * 1e3),
            "" if row.wire is None else f"{row.wire * 1e3:.2f}",
            "" if row.wire_length is None else f"{row.wire_length * 1e3:.0f}",
            row.material,
        )
        for row in rows
    ]
    return Table(heads, cells)


def _tree(row: HardwareItem) -> dict[str, Any]:
    return {
        "name": row.name,
        "mass_g": row.mass * 1e3,
        "low_g": row.low * 1e3,
        "high_g": row.high * 1e3,
        "wire_mm": None if row.wire is None else row.wire * 1e3,
        "wire_length_mm": None if row.wire_length is None else row.wire_length * 1e3,
        "material": row.material,
        "assumed": row.assumed,
        "source": row.source,
        "cautions": list(row.kinds),
    }
