"""The lines that a comparison prints: who is who, and the table of what differs."""

from __future__ import annotations

from collections.abc import Mapping
from pathlib import Path
from typing import Any

from meshlure.cli.tables import Column, Table

Tree = Mapping[str, Any]


def comparison_lines(results: Tree, out: Path | None) -> tuple[str | Table, ...]:
    """Return who is who, the table of what differs from the first, what is said in words, and the files."""
    found = results["comparison"]
    baits = found["baits"]
    lines: list[str | Table] = [f"{bait['letter']}  {bait['name']}  ({bait['file']})" for bait in baits]
    lines += ["", *_conditions(found["conditions"]), "", _table(found), ""]
    lines.append("~ within its band, the difference means nothing; ? no band is known")
    for row in found["words"][1:]:
        lines += ["", row["what"]]
        lines += [f"  {bait['letter']}  {said}" for bait, said in zip(baits, row["values"], strict=True)]
    lines.append("")
    if out is not None:
        lines.append(f"  written  {', '.join(['results.json', *results['files']])} in {out}")
    return tuple(lines)


def _conditions(found: Tree) -> list[str]:
    if found["as_stated"]:
        return ["each in the water, throw and retrieve of its own file"]
    water = found["water"]
    at = "" if water["temperature_c"] is None else f"{water['temperature_c']:g} degC, "
    throw = f"{found['cast_speed_m_s']:.0f} m/s"
    lines = [f"all in A's water ({at}{water['density_kg_m3']:.1f} kg/m3), throw ({throw}) and retrieve"]
    lines += [
        f"  {o['name']}: its file says otherwise of {', '.join(o['differs'])}" for o in found["others"] if o["differs"]
    ]
    return lines


def _table(found: Tree) -> Table:
    letters = [bait["letter"] for bait in found["baits"]]
    first, *others = letters
    columns = [Column("", words=True), Column("unit"), Column(first, True)]
    for letter in others:
        columns += [Column(letter, True), Column(f"{letter}-{first}", True)]
    rows, strong = [], set()
    for number, row in enumerate(found["rows"]):
        cells = [row["what"], row["unit"], _number(row["values"][0], row["decimals"])]
        for value, difference in zip(row["values"][1:], row["differences"], strict=True):
            cells += [_number(value, row["decimals"]), _by(difference, row["decimals"])]
        rows.append(cells)
        if any(difference["counts"] for difference in row["differences"]):
            strong.add(number)
    return Table(columns, rows, frozenset(strong))


def _number(value: float | None, decimals: int) -> str:
    return "none" if value is None else f"{round(value, decimals) + 0.0:.{decimals}f}"


def _by(difference: Tree, decimals: int) -> str:
    if difference["by"] is None:
        return ""
    by = f"{round(difference['by'], decimals) + 0.0:+.{decimals}f}"
    sign = {True: "", False: "~ ", None: "? "}[difference["counts"]]
    return f"{sign}{by}"
