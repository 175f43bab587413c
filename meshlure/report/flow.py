"""Tables of how the bait meets the stream: areas, directions, stations, form, drag."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

from meshlure.report.charts import PARTS, layer_words, leads_words
from meshlure.report.substance import from_nose
from meshlure.report.table import Table, table
from meshlure.report.wording import DASH, SPACE, fixed, newtons, point, reynolds, significant

Results = Mapping[str, Any]


def areas(results: Results) -> Table | None:
    """Return silhouettes: area, its centre, and the length of its edge."""
    rows = [
        (
            {"axis": "asked for"}.get(row["name"], f"from the {row['name']}" if row["name"] != "top" else "from above"),
            ", ".join(fixed(c, 3) for c in row["axis"]),
            fixed(row["area_mm2"], 0),
            fixed(row["perimeter_mm"], 1),
            fixed(from_nose(results, row["centre_mm"]), 1) if row["name"] in ("side", "top") else DASH,
            point(row["centre_mm"]),
        )
        for row in results["areas"]
    ]
    return table(
        "Silhouettes", ("seen", "along, mesh axes", "mm²", "edge, mm", "A, mm from nose", "A at x, y, z, mm"), rows
    )


def rose(results: Results) -> Table | None:
    """Return the silhouette's area direction by direction."""
    found = results["rose"]
    rows = [
        (plane, f"{fixed(angle, 0)}°", ", ".join(fixed(c, 3) for c in axis), fixed(area, 0))
        for plane, angle, axis, area in zip(
            found["plane"], found["angle_deg"], found["axis"], found["area_mm2"], strict=True
        )
    ]
    return table("Silhouette area by direction", ("turned", "by", "along, mesh axes", "mm²"), rows, (0, 2))


def stations(results: Results) -> Table | None:
    """Return the sections from nose to tail."""
    found = results["stations"]
    columns = [
        ("mm from nose", "from_nose_mm", 1),
        ("area, mm²", "area_mm2", 1),
        ("girth, mm", "perimeter_mm", 1),
        ("width, mm", "width_mm", 1),
        ("depth, mm", "depth_mm", 1),
    ]
    present = [column for column in columns if found.get(column[1])]
    rows = zip(*([fixed(value, places) for value in found[key]] for _, key, places in present), strict=True)
    return table("Stations: sections across the bait's length", [title for title, _, _ in present], rows, ())


def form(results: Results) -> Table | None:
    """Return the measures of form as facts."""
    found = results["form"]
    rows = [
        ("length over thickness", f"{fixed(found['fineness'], 2)} (of the round body with the same greatest section)"),
        ("wetted surface", f"{fixed(found['surface_mm2'] / 100, 1)} cm²"),
        ("sphericity", f"{fixed(found['sphericity'], 2)} (a ball is 1)"),
    ]
    for way in ("nose", "tail"):
        ends = found[f"{way}_first"]
        bluff, wake = fixed(ends["leading_bluffness"], 3), fixed(ends["trailing_bluffness"], 2)
        rows.append((f"{way} first, leading bluffness", f"{bluff} (flat face 1, half ball 0.04)"))
        rows.append((f"{way} first, open to the wake", f"{wake} of the greatest section"))
        if (ends.get("cup") or 0) >= 0.005:
            rows.append((f"{way} first, hollow of the face", f"{fixed(ends['cup'], 2)} (flat 0, half ball 1)"))
    return table("Form", (), rows, (0, 1))


def drag(results: Results) -> Table | None:
    """Return the drag estimate: each fluid, way, layer and speed with its band."""
    head = ("in", "leading", "layer", "m/s", "Re on length", "Cd, body", "its band", "drag area, mm²", "drag")
    lines = [
        (
            *_case(row),
            reynolds(row["reynolds_length"]),
            significant(row["cd"], 2),
            f"{significant(row['cd_low'], 2)}{SPACE}to{SPACE}{significant(row['cd_high'], 2)}",
            significant(row["drag_area_mm2"], 2),
            newtons(row["drag_n"]),
        )
        for row in results["drag"]
    ]
    return table(
        "Cd is the body's own on its greatest section; the drag area counts everything; * the row to go by",
        head,
        lines,
        (0, 1, 2),
    )


def parts(results: Results) -> Table | None:
    """Return the drag areas by parts, which add up to the whole."""
    rows = results["drag"]
    keys = [key for key in PARTS if any(row["parts"].get(key) for row in rows)]
    keys += sorted({key for row in rows for key in row["parts"]} - set(PARTS))
    head = (
        "in",
        "leading",
        "layer",
        "m/s",
        "greatest section",
        *(PARTS[key][0] if key in PARTS else key for key in keys),
    )
    lines = [
        (*_case(row), fixed(row["frontal_mm2"], 0), *(significant(row["parts"].get(key), 2) for key in keys))
        for row in rows
    ]
    return table("Drag area by parts, mm²", head, lines, (0, 1, 2))


def _case(row: Mapping[str, Any]) -> tuple[str, str, str, str]:
    return row["fluid"], leads_words(row["leads"]), layer_words(row), fixed(row["speed_m_s"], 1)


def journey(results: Results) -> list[str]:
    """Return at what speeds the drag was reckoned, in sentences, and whether they were stated or assumed."""
    said = []
    cast, retrieve = results.get("cast"), results.get("retrieve")
    if cast:
        speed, angle, height = fixed(cast["speed_m_s"], 1), fixed(cast["angle_deg"], 0), fixed(cast["height_m"], 1)
        said.append(f"Cast at {speed} m/s, {angle}° up, from {height} m above the water{_from(cast)}.")
    if retrieve and retrieve["speeds_m_s"]:
        speeds = " and ".join(fixed(speed, 1) for speed in retrieve["speeds_m_s"])
        said.append(f"Retrieved at {speeds} m/s{_from(retrieve)}.")
    return said


def _from(source: Mapping[str, Any]) -> str:
    named = [key for key in source.get("assumed") or [] if key in ("speed", "angle", "height", "speeds")]
    return f" ({' and '.join(named)} assumed: the bait file does not say)" if named else ""
