"""The ways that a search offers, as a table for the terminal."""

from __future__ import annotations

from collections.abc import Mapping
from pathlib import Path
from typing import Any, Final

from meshlure.cli.tables import Column, Table

Tree = Mapping[str, Any]

_NOT_TOLD = ("hooks", "sanding")
"""Cautions that every bait calls for: they stand on the page."""


def balance_lines(results: Tree, out: Path) -> tuple[str | Table, ...]:
    """Return target, ways, what stood in the way and what was written, a line a thing."""
    account = results["balance"]
    lines: list[str | Table] = [str(results["name"])]
    wanted, rows = account["target"], account["options"]
    if wanted is not None:
        lines.append(f"  target   {wanted['behaviour']}, {_wanted(wanted)}")
    if rows:
        lines += [Table.numbered(columns, [cells(row) for row in rows], account["taken"]) for columns, cells in _TABLES]
    if len(rows) > 1:
        lines.append(f"  order    {_order(account['weights'])}")
    dense = account["body_density"]
    if dense is not None:
        lines.append(f"  body     {dense['needed_g_cm3']:.3f} g/cm3 instead of {dense['now_g_cm3']:.3f}")
        lines += [f"           {row['words']}" for row in [*dense["mixes"], *dense["stock"]]]
    if account["replaced"]:
        lines.append(f"  replaced {', '.join(account['replaced'])}")
    if wanted is not None:
        lines.append(f"  reached  {'yes' if account['reachable'] else 'no'}")
    lines += [f"           {words}" for words in account["in_the_way"]]
    lines.append(f"  verdict  {results['buoyancy']['verdict']}")
    lines += [f"  posture  {posture['words']}" for posture in results["postures"][:1]]
    lines += [f"  caution  {row['text']}" for row in results["cautions"] if row["trigger"] not in _NOT_TOLD]
    lines.append(f"  written  {', '.join(['results.json', *results['files']])} in {out}")
    return tuple(lines)


def _wanted(wanted: Tree) -> str:
    how = (
        f"reserve {wanted['reserve_g']:+z.2f} g"
        if wanted["sink_m_s"] is None
        else f"{wanted['sink_m_s'] * 100:.1f} cm/s"
    )
    return f"{how}, nose up {wanted['nose_up_deg']:+z.1f} deg, lean {wanted['lean_deg']:+z.1f} deg"


def _order(weights: Tree) -> str:
    return (
        "what meets the target first, then by points, fewer are better (our choice): "
        f"{weights['per_degree_off']:g} a degree off, {weights['per_gram_off']:g} a gram off, "
        f"{weights['per_mm_less_stiff']:g} a mm less stiff than the stiffest, "
        f"{weights['per_further_piece']:g} for each further piece, "
        f"{weights['not_upright']:g} where it does not come to rest so from back up"
    )


def _deed_cells(row: Tree) -> tuple[str, ...]:
    rod = row["shape"] == "rod"
    size = f"{row['size_mm']:.4g} x {row['length_mm']:.2f}" if rod else f"{row['count']} x {row['size_mm']:.4g}"
    return (
        f"{row['material']} {row['shape']} {size} mm",
        f"{row['mass_g']:.2f}",
        f"{row['from_nose_mm']:z.1f}",
        f"{row['reserve_g']:+z.2f}",
        _angle(row["nose_up_deg"]),
        _angle(row["lean_deg"]) + ("" if row["upright"] else ", not from back up"),
        f"{row['metacentric_mm']['least']:z.2f}",
        "" if row["score"] is None else f"{row['score']:z.2f}",
    )


def _place_cells(row: Tree) -> tuple[str, ...]:
    flight = row["flight"]
    trim = "" if flight["trim_deg"] is None else f", trim {flight['trim_deg']:.0f} deg"
    return (
        ", ".join(f"{value:z.2f}" for value in row["at_mm"]),
        f"{row['cover_mm']:.2f}",
        ", ".join(f"{value:z.1f}" for value in row["cover_at_mm"]),
        f"{flight['leads']} first, {flight['verdict']}{trim}",
        f"{row['distance_ratio']:.2f}",
    )


def _angle(value: float | None) -> str:
    return "none" if value is None else f"{value:+z.1f}"


_DEEDS: Final = (
    Column(""),
    Column("ballast", words=True),
    Column("g", number=True),
    Column("from nose mm", number=True),
    Column("reserve g", number=True),
    Column("nose up", number=True),
    Column("lean", number=True),
    Column("stiff mm", number=True),
    Column("points", number=True),
)
_PLACES: Final = (
    Column(""),
    Column("middle at mm", number=True),
    Column("cover mm", number=True),
    Column("thinnest at mm", number=True),
    Column("flight", words=True),
    Column("reach", number=True),
)

_TABLES: Final = ((_DEEDS, _deed_cells), (_PLACES, _place_cells))
"""What a way does, and where it lies: either fits a terminal of 80 columns."""
