"""The result tree's account of a print: wall, infill, and what other walls and infills would make."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

from meshlure.bait.pieces import Print
from meshlure.files.defaults import PRINT_SOLID_RANGE
from meshlure.files.sections.body import Printed
from meshlure.results.numbers import GRAM, MM, MM3
from meshlure.results.pour import assumption, named, span

Tree = dict[str, Any]


def printed(
    *,
    made: Print,
    volume: float,
    core: float,
    target: float | None,
    line: float,
    infills: Sequence[float],
    rows: Sequence[Tree],
    flooded: Tree,
    water: float,
) -> Tree:
    """Return the tree of a print.

    Parameters
    ----------
    made : Print
    volume, core : float, m3
        Of the body's own material, and of what of it lies within the wall.
    target : float or None, kg
        Mass of the whole bait that is wanted.
    line : float, m
        Width of a printed line.
    infills : sequence of float
        Of the columns of the rows.
    rows : sequence of dict
        One wall each.
    flooded : dict
        The bait with its infill full of water.
    water : float, kg
        That the infill takes up.
    """
    return {
        "material": named(made.solid, "a print"),
        "solid_g_cm3": made.solid.density / 1e3,
        "wall_mm": made.wall * MM,
        "infill_share": made.infill,
        "shell_mm3": (volume - core) * MM3,
        "core_mm3": core * MM3,
        "target_g": None if target is None else target * GRAM,
        "line_mm": line * MM,
        "infills": list(infills),
        "rows": list(rows),
        "flooded": flooded,
        "flooded_water_g": water * GRAM,
    }


def row(
    *,
    wall: float,
    lines: float,
    shell: float,
    core: float,
    masses: Sequence[float],
    reserves: Sequence[float],
    infill: float | None,
) -> Tree:
    """Return one wall: its thickness, m, and lines; volumes, m3; the bait with each infill, kg; the infill wanted."""
    return {
        "wall_mm": wall * MM,
        "lines": lines,
        "shell_mm3": shell * MM3,
        "core_mm3": core * MM3,
        "bait_g": [mass * GRAM for mass in masses],
        "reserve_g": [reserve * GRAM for reserve in reserves],
        "infill_share": infill,
    }


def assumed(made: Print, stated: Printed | None, line: float) -> list[Tree]:
    """Return everything that a print rests on, what was assumed first; the width of a line in m."""
    usual = "common practice, no source"
    low, high = PRINT_SOLID_RANGE
    rows = [
        assumption("density of the solid print", span(made.solid), made.solid.source, made.solid.assumed),
        assumption("width of a printed line", f"{line * MM:.2f} mm", f"{usual}, for a nozzle of 0.4 mm", True),
        assumption("walls round pockets and chambers", "none but the body's own", "not counted", True),
        assumption("walls other than the one stated", "between known ones by a cubic", "computed", False),
        assumption("top and bottom layers", "as thick as the wall, square to the skin", "not told apart", True),
    ]
    if stated is not None and stated.solid is None and stated.substance.density is None:
        of = "share of the filament's density that a solid print reaches"
        rows.append(assumption(of, f"{low:.0%} to {high:.0%}", usual, True))
    return sorted(rows, key=lambda entry: not entry["assumed"])
