"""A table's numbers as a file to save: CSV as in RFC 4180, with every digit of results.json, held in the page itself.

The link is a data address, so that it works from a page on a disk, without a network and without a script.
"""

from __future__ import annotations

import base64
import csv
import io
import re
from collections.abc import Iterable, Iterator, Mapping, Sequence
from dataclasses import replace
from typing import Any

from meshlure.report.airborne import from_leading
from meshlure.report.table import Saved, Table

Tree = Mapping[str, Any]
Rows = list[dict[str, Any]]

MARK = "\ufeff"
"""Tells spreadsheets that the letters are UTF-8."""
FORMULA = ("=", "+", "-", "@", "\t", "\r")
"""What a spreadsheet would take a text for a formula by; names come from files that anybody may have written."""
LONGEST = 60
"""Letters of a bait's name in the name of a file."""


def with_files(tables: Mapping[str, Table | None], results: Tree) -> dict[str, Table | None]:
    """Return a page's tables, those of numbers with their CSV beside them, named after the bait."""
    found = dict(tables)
    for name, rows in csv_rows(results).items():
        shown = found.get(name)
        if shown is not None and rows:
            found[name] = with_file(shown, rows, results["name"], name)
    return found


def with_file(table: Table, rows: Rows, bait: str | None, name: str) -> Table:
    """Return a table with a CSV of its rows."""
    return replace(table, saved=saved_file(rows, bait, name))


def saved_file(rows: Rows, bait: str | None, name: str) -> Saved:
    """Return rows as a file to be saved, named after the bait and what they hold."""
    return Saved(file_name(bait, name), address(text(rows)))


def csv_rows(results: Tree) -> dict[str, Rows]:
    """Return the rows of every CSV, by the table that it stands under; columns are named as in results.json."""
    flight = results["flight"]
    budget = results.get("budget") or {"rows": [], "doubts": []}
    return {
        "pieces": flat(results["pieces"]),
        "hardware": flat(results.get("hardware") or []),
        "facets": flat(results["facets"]),
        "waters": flat(results["waters"]),
        "buoyancy": flat([{key: value for key, value in results["buoyancy"].items() if key != "doubts"}]),
        "doubts": flat(results["buoyancy"]["doubts"]),
        "budget": flat(budget["rows"]),
        "budget_doubts": flat(budget["doubts"]),
        "righting_sideways": _curves(results["righting"], "sideways"),
        "righting_fore_aft": _curves(results["righting"], "fore_aft"),
        "areas": flat(results["areas"]),
        "stations": columns(results["stations"]),
        "rose": columns(results["rose"]),
        "drag": flat([{**row, "parts": {}} for row in results["drag"]]),
        "parts": flat([_part(row) for row in results["drag"]]),
        "trims": flat(flight["trims"]),
        "moments": list(_moments(flight)),
        "paths": [{"name": path["name"], **row} for path in flight["paths"] for row in columns(path, "x_m", "y_m")],
        "launch": columns(flight["launch"], "angle_deg", "distance_m"),
        "tow": flat(results["sinking"]["tow"]),
    }


def flat(rows: Iterable[Tree]) -> Rows:
    """Return rows with what is nested in them as columns of their own: three numbers as x, y, z."""
    return [dict(_flat("", row)) for row in rows]


def columns(table: Tree, *keys: str) -> Rows:
    """Return the rows of a table that is kept by columns; of some of its columns, or of all."""
    chosen = keys or tuple(table)
    return flat(dict(zip(chosen, row, strict=True)) for row in zip(*(table[key] for key in chosen), strict=True))


def _flat(before: str, row: Tree) -> Iterator[tuple[str, Any]]:
    for key, value in row.items():
        name = f"{before}{key}"
        if isinstance(value, Mapping):
            yield from _flat(f"{name}_", value)
        elif isinstance(value, list | tuple):
            yield from ((f"{name}_{way}", part) for way, part in zip("xyz", value, strict=False))
        else:
            yield name, value


def _curves(curves: Sequence[Tree], plane: str) -> Rows:
    return [
        {"posture": (curve.get("posture") or 0) + 1, **row}
        for curve in curves
        if curve["plane"] == plane
        for row in columns(curve, "heel_deg", "arm_mm")
    ]


def _moments(flight: Tree) -> Iterator[dict[str, Any]]:
    for curve in flight["moments"]:
        for angle, moment in zip(*from_leading(curve, flight["leads"]), strict=True):
            yield {"plane": curve["plane"], "from_leading_deg": float(angle), "moment_n_mm": float(moment)}


def _part(row: Tree) -> Tree:
    shares = {f"{name}_mm2": value for name, value in row["parts"].items()}
    return {key: row[key] for key in ("fluid", "leads", "layer", "speed_m_s", "frontal_mm2")} | shares


def text(rows: Rows) -> str:
    """Return rows as CSV: a head, commas, a point in numbers, nothing where there is no value."""
    paper = io.StringIO()
    head = list(dict.fromkeys(key for row in rows for key in row))
    writer = csv.writer(paper, lineterminator="\r\n")
    writer.writerow(head)
    writer.writerows([_cell(row.get(key)) for key in head] for row in rows)
    return paper.getvalue()


def _cell(value: Any) -> Any:
    if isinstance(value, str):
        return f"'{value}" if value.startswith(FORMULA) else value
    if isinstance(value, bool):
        return "yes" if value else "no"
    return "" if value is None else value


def address(content: str) -> str:
    """Return a text as a data address of CSV."""
    packed = base64.b64encode((MARK + content).encode("utf-8", "replace")).decode("ascii")
    return f"data:text/csv;charset=utf-8;base64,{packed}"


def file_name(bait: str | None, name: str) -> str:
    """Return the name of a file for a bait's table, of letters that every file system takes."""
    plain = re.sub(r"[^a-z0-9]+", "-", (bait or "").lower())[:LONGEST].strip("-")
    return f"{plain or 'bait'}-{name.replace('_', '-')}.csv"
