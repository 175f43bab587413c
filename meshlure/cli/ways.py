"""The ways that a search offers, as a table for the terminal."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from pathlib import Path
from typing import Any

Tree = Mapping[str, Any]


def balance_lines(results: Tree, out: Path) -> tuple[str, ...]:
    """Return target, ways, what stood in the way and what was written, a line a thing."""
    account = results["balance"]
    lines = [str(results["name"])]
    wanted = account["target"]
    if wanted is not None:
        lines.append(f"  target   {wanted['behaviour']}, {_wanted(wanted)}")
    if account["options"]:
        lines += [f"  {line}" for line in _table(account["options"], account["taken"])]
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
    lines.append(f"  written  {', '.join(['results.json', *results['files']])} in {out}")
    return tuple(lines)


def _wanted(wanted: Tree) -> str:
    how = (
        f"reserve {wanted['reserve_g']:+.2f} g"
        if wanted["sink_m_s"] is None
        else f"{wanted['sink_m_s'] * 100:.1f} cm/s"
    )
    return f"{how}, nose up {wanted['nose_up_deg']:+.1f} deg, lean {wanted['lean_deg']:+.1f} deg"


def _table(rows: Sequence[Tree], taken: int | None) -> list[str]:
    """One line a way, columns aligned."""
    head = (
        "",
        "ballast",
        "g",
        "mm from nose",
        "at mm",
        "reserve g",
        "nose up",
        "lean",
        "stiff mm",
        "cover mm",
        "flight",
        "reach",
    )
    cells = [head, *(_cells(number, row, number == taken) for number, row in enumerate(rows, 1))]
    widths = [max(len(line[column]) for line in cells) for column in range(len(head))]
    return ["  ".join(cell.ljust(width) for cell, width in zip(line, widths, strict=True)).rstrip() for line in cells]


def _cells(number: int, row: Tree, taken: bool) -> tuple[str, ...]:
    rod = row["shape"] == "rod"
    size = f"{row['size_mm']:.4g} x {row['length_mm']:.2f}" if rod else f"{row['count']} x {row['size_mm']:.4g}"
    return (
        f"{number}{'>' if taken else ''}",
        f"{row['material']} {row['shape']} {size} mm",
        f"{row['mass_g']:.2f}",
        f"{row['from_nose_mm']:.1f}",
        ", ".join(f"{value + 0.0:.2f}".replace("-0.00", "0.00") for value in row["at_mm"]),
        f"{row['reserve_g']:+.2f}",
        "none" if row["nose_up_deg"] is None else f"{row['nose_up_deg']:+.1f}",
        "none" if row["lean_deg"] is None else f"{row['lean_deg']:+.1f}",
        f"{row['metacentric_mm']['least']:.2f}",
        f"{row['cover_mm']:.2f}",
        f"{row['flight']['leads']} first, {row['flight']['verdict']}",
        f"{row['distance_ratio']:.2f}",
    )
