"""The chambers that were found, and a hollow body, as lines for the terminal."""

from __future__ import annotations

from collections.abc import Mapping
from pathlib import Path
from typing import Any, Final

from meshlure.cli.tables import Column, Table

Tree = Mapping[str, Any]


def chamber_lines(results: Tree, out: Path | None) -> tuple[str | Table, ...]:
    """Return the ways, what stood in the way and what was written, a line a thing."""
    account = results["chamber"]
    lines: list[str | Table] = [str(results["name"])]
    if account["options"]:
        lines += [
            Table.numbered(columns, [cells(row) for row in account["options"]], account["taken"])
            for columns, cells in _TABLES
        ]
        lines += [f"  {line}" for line in _taken(account["options"][account["taken"] - 1])]
    if account["replaced"]:
        lines.append(f"  replaced {', '.join(account['replaced'])}")
    lines.append(f"  fits     {'yes' if account['reachable'] else 'no'}")
    lines += [f"           {words}" for words in account["in_the_way"]]
    lines.append(f"  verdict  {results['buoyancy']['verdict']}")
    lines.append(f"  written  {', '.join(['results.json', *results['files']])} in {out}")
    return tuple(lines)


def hollow_lines(results: Tree, out: Path | None) -> tuple[str | Table, ...]:
    """Return what the shell holds and weighs, a line a thing."""
    account = results["hollow"]
    return (
        str(results["name"]),
        f"  shell    {account['shell_mm3']:.0f} of {account['whole_mm3']:.0f} mm3, {account['shell_g']:.2f} g; "
        f"{account['inside_mm3']:.0f} mm3 hollow",
        f"  reserve  {account['reserve_sealed_g']:+.2f} g sealed, {account['reserve_flooded_g']:+.2f} g flooded",
        f"  hollow   {account['words']}",
        f"  verdict  {results['buoyancy']['verdict']}",
        f"  written  {', '.join(['results.json', *results['files']])} in {out}",
    )


def _taken(row: Tree) -> list[str]:
    """What the way that is written does, in words."""
    lines = []
    for end in ("nose", "tail"):
        rest, flight = row["postures"][end], row["flight"][end]
        lies = "any way" if rest["nose_up_deg"] is None else f"nose up {rest['nose_up_deg']:+.1f} deg"
        falls = (
            "" if rest["bore_slope_deg"] is None else f", the bore falls {rest['bore_slope_deg']:+.1f} deg to the nose"
        )
        lines.append(
            f"at {end}  rests {lies}{falls}; flies {flight['leads']} first, {flight['verdict']}, "
            f"{flight['distance_m']:.1f} m"
        )
    back = "come back to the nose by themselves" if row["postures"]["tail"]["returns"] else "stay at the tail at rest"
    lines.append(f"balls    {back}")
    flooded = row["flooded"]
    lines.append(f"flooded  {flooded['state']}, reserve {flooded['reserve_g']:+.2f} g")
    return lines


def _deed_cells(row: Tree) -> tuple[str, ...]:
    return (
        f"{row['count']} x {row['ball_mm']:.4g} mm {row['material']}, {row['balls_g']:.2f} g",
        f"{row['travel_mm']:.1f}",
        f"{row['shift_mm']:.2f}",
        f"{row['posture_change_deg']:.1f}",
        "yes" if row["postures"]["tail"]["returns"] else "no",
        f"{row['reserve_g']:+z.2f}",
        f"{row['score']:.2f}",
    )


def _bore_cells(row: Tree) -> tuple[str, ...]:
    return (
        f"{row['bore_mm']:.4g} x {row['length_mm']:.1f}",
        " to ".join(f"{value:.1f}" for value in row["from_nose_mm"]),
        f"{row['wall_mm']:.2f}",
        f"{row['end_wall_mm']:.2f}",
        "" if row["opening"] is None else f"{row['opening']['plug_mm']:.1f}",
        row["kind"],
    )


_DEEDS: Final = (
    Column(""),
    Column("balls", words=True),
    Column("travel mm", number=True),
    Column("shift mm", number=True),
    Column("turns deg", number=True),
    Column("returns"),
    Column("reserve g", number=True),
    Column("score", number=True),
)
_BORES: Final = (
    Column(""),
    Column("bore mm"),
    Column("from nose mm"),
    Column("wall mm", number=True),
    Column("ends mm", number=True),
    Column("plug mm", number=True),
    Column("kind"),
)

_TABLES: Final = ((_DEEDS, _deed_cells), (_BORES, _bore_cells))
"""What a way does, and where it lies: either fits a terminal of 80 columns."""
