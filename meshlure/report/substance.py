"""Tables of what the bait is made of: pieces, hardware, weight and inertia, what the facets leave out, limits."""

from __future__ import annotations

import math
from collections.abc import Mapping
from typing import Any

import numpy as np

from meshlure.report.subject import piece_numbers
from meshlure.report.table import Table, table
from meshlure.report.wording import DASH, band, fixed, grams, millimetres, point, significant

Results = Mapping[str, Any]
ROLES = {"body": "body", "insert": "insert", "void": "hollow", "hardware": "hardware", "coat": "coat", "ball": "ball"}


def from_nose(results: Results, place: Any) -> float:
    """Return how far a place in mesh coordinates lies behind the nose tip, mm."""
    weight, nose = results["weight"], np.asarray(results["frame"]["nose"], dtype=float)
    return float(
        weight["from_nose_mm"] + (np.asarray(weight["centre_mm"], dtype=float) - np.asarray(place, dtype=float)) @ nose
    )


def pieces(results: Results) -> Table | None:
    """Return the table by piece, numbered as in the drawings."""
    numbers = piece_numbers(results)
    rows = [
        (
            f"{numbers[row['name']]} {row['name']}",
            ROLES.get(row["role"], row["role"]),
            row["material"] or ("air" if row["role"] == "void" else DASH),
            significant(row["density_g_cm3"], 3) if row["density_g_cm3"] is not None else DASH,
            fixed(row["volume_mm3"] / 1000, 2) if row["volume_mm3"] else DASH,
            fixed(row["mass_g"], 2),
            fixed(from_nose(results, row["centre_mm"]), 1),
            point(row["centre_mm"]),
        )
        for row in results["pieces"]
    ]
    weight = results["weight"]
    volume = sum(row["volume_mm3"] for row in results["pieces"])
    rows.append(
        (
            "all together",
            "",
            "",
            "",
            fixed(volume / 1000, 2),
            fixed(weight["mass_g"], 2),
            fixed(weight["from_nose_mm"], 1),
            point(weight["centre_mm"]),
        )
    )
    head = ("piece", "is", "material", "g/cm³", "cm³", "g", "mm from nose", "centre x, y, z, mm")
    return table(
        "By piece: volume is what is left to the piece, each gram counted once", head, rows, (0, 1, 2), last_is_sum=True
    )


def hardware(results: Results) -> Table | None:
    """Return the masses at points, with what they displace."""
    numbers = piece_numbers(results)
    rows = [
        (
            f"{numbers[row['name']]} {row['name']}",
            row["item"] or DASH,
            fixed(row["mass_g"], 2),
            fixed((row["displaced_mm3"] or None) and row["displaced_mm3"] / 1000, 3, reason="no material given"),
            "hangs from its eye" if row["hangs"] else "fixed",
            point(row["at_mm"]),
        )
        for row in results.get("hardware") or []
    ]
    return table(
        "Hardware", ("hardware", "stock item", "g", "displaces, cm³", "how", "at x, y, z, mm"), rows, (0, 1, 4)
    )


def weight(results: Results) -> Table | None:
    """Return weight, centre of gravity, moments of inertia and radii of gyration as facts."""
    body, size = results["weight"], results["size"]
    tensor = body["inertia_g_mm2"]
    # No digit of a small product of inertia is surer than the last one of the greatest moment.
    places = max(2 - math.floor(math.log10(max(body["principal_g_mm2"]))), 0)
    axes = body["principal_axes"]
    long, deep, wide = (fixed(size[key], 1) for key in ("length_mm", "depth_mm", "width_mm"))
    rows = [
        ("mass, ready to fish", grams(body["mass_g"])),
        ("centre of gravity G", f"{millimetres(body['from_nose_mm'])} from the nose, at {point(body['centre_mm'])} mm"),
        ("body", f"{long} long, {deep} deep, {wide} wide, mm"),
        ("radii of gyration", " / ".join(fixed(v, 1) for v in body["gyration_mm"]) + " mm, about the axes below"),
        *(
            (
                f"principal moment {n + 1}",
                f"{fixed(moment, places)} g·mm² about {', '.join(fixed(c, 2) for c in axes[n])}",
            )
            for n, moment in enumerate(body["principal_g_mm2"])
        ),
        (
            "inertia about G, mesh axes",
            "; ".join(
                f"{name} {fixed(tensor[i][j], places)}"
                for name, i, j in (("xx", 0, 0), ("yy", 1, 1), ("zz", 2, 2), ("xy", 0, 1), ("yz", 1, 2), ("zx", 2, 0))
            )
            + " g·mm²",
        ),
    ]
    if results.get("skin_mm2") is not None:
        rows.append(("skin that takes a coat", fixed(results["skin_mm2"] / 100, 1) + " cm²"))
    return table("Weight and inertia", (), rows, (0, 1))


def facets(results: Results) -> Table | None:
    """Return what flat facets leave out of the smooth part they stand for."""
    rows = []
    for row in results["facets"]:
        share = row["deficit_mm3"] / row["volume_mm3"] if row["volume_mm3"] else 0.0
        rows.append(
            (
                row["piece"],
                fixed(row["volume_mm3"] / 1000, 3),
                fixed(row["deficit_mm3"], 1),
                fixed(100 * share, 2),
                grams(row["deficit_g"], 3),
            )
        )
    return table(
        "What the facets leave out of the smooth part",
        ("piece", "mesh, cm³", "left out, mm³", "%", "mass of that"),
        rows,
    )


def limits(results: Results) -> Table | None:
    """Return the limits that the bait file sets, and whether they are met."""
    rows = []
    for row in results.get("limits") or []:
        places = 0 if "degrees" in row["what"] else 2
        met = "not known" if row["met"] is None else "met" if row["met"] else "NOT met"
        wanted = band(row["low"], row["high"], "", places, signed=True)
        rows.append((row["what"], wanted, fixed(row["value"], places, signed=True, reason="free"), met))
    return table("Limits set in the bait file", ("limit", "wanted", "found", ""), rows, (0, 3))


def measured(results: Results) -> Table | None:
    """Return weighings beside what was predicted."""
    found = results.get("measured") or {"rows": [], "water_c": None}
    rows = [
        (row["what"], fixed(row["weighed"], 2), fixed(row["predicted"], 2), fixed(row["difference"], 2, signed=True))
        for row in found["rows"]
    ]
    at = "" if found["water_c"] is None else f", water at {fixed(found['water_c'], 0)} °C"
    return table(f"Weighed, beside what was predicted{at}", ("what", "weighed", "predicted", "difference"), rows)
