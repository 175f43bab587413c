"""Tables of what the water bears: buoyancy, other waters, ball positions."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

from meshlure.report.substance import from_nose
from meshlure.report.table import Table, table
from meshlure.report.wording import (
    band,
    banded_grams,
    cubic_centimetres,
    degrees,
    earned,
    fixed,
    millimetres,
    point,
)

Results = Mapping[str, Any]


def buoyancy(results: Results) -> Table | None:
    """Return displaced volume, centre of buoyancy, reserve with band and the water it was reckoned for."""
    found = results["buoyancy"]
    water = found["water"]
    low, high = found["reserve_low_g"], found["reserve_high_g"]
    rows = [
        ("displaced, wholly under", cubic_centimetres(found["displaced_mm3"])),
        (
            "centre of buoyancy B, wholly under",
            f"{millimetres(from_nose(results, found['centre_mm']))} from the nose, at {point(found['centre_mm'])} mm",
        ),
        ("reserve", f"{banded_grams(found['reserve_g'], low, high)}, band {band(low, high, 'g', signed=True)}"),
        ("density of the whole bait", f"{fixed(found['bulk_density_g_cm3'], 3)} g/cm³"),
        *([("water", water_words(water))] if known(water) else []),
        ("water's density", f"{fixed(water['density_kg_m3'], 1)} kg/m³"),
        ("water's kinematic viscosity", f"{fixed(water['viscosity_m2_s'] * 1e6, 3)} mm²/s"),
    ]
    return table("In the stated water", (), rows, (0, 1))


def verdict_words(found: Mapping[str, Any]) -> str:
    """Return the verdict's sentence with no more digits in its masses than their band earns."""
    low, high = found["reserve_low_g"], found["reserve_high_g"]
    places, words = earned(low, high), str(found["verdict"])
    if places < 2:
        for value in (found["reserve_g"], low, high):
            words = words.replace(fixed(value, 2, signed=True), fixed(value, places, signed=True))
    return words


def doubts(results: Results) -> Table | None:
    """Return what the reserve's band is made of; None where the error budget tells it with more."""
    if results.get("budget"):
        return None
    rows = [
        (row["what"], fixed(-row["low_g"], 2), fixed(row["high_g"], 2, signed=True))
        for row in results["buoyancy"]["doubts"]
    ]
    return table("What the band is made of, by the root of the sum of squares", ("doubt", "g", "g"), rows)


def known(water: Mapping[str, Any]) -> bool:
    """Return whether a water is known by more than its density."""
    return water["salinity_g_kg"] is not None or water["temperature_c"] is not None


def water_words(water: Mapping[str, Any]) -> str:
    """Return temperature and salt of a water in words; a stated density where they are not known."""
    parts = []
    if water["salinity_g_kg"] is not None:
        parts.append(
            "fresh water" if water["salinity_g_kg"] < 0.5 else f"water with {water['salinity_g_kg']:g} g/kg of salt"
        )
    if water["temperature_c"] is not None:
        parts.append(f"{water['temperature_c']:g} °C")
    return ", ".join(parts) if known(water) else f"water of {fixed(water['density_kg_m3'], 1)} kg/m³"


def waters(results: Results) -> Table | None:
    """Return reserve and state in other waters."""
    found = results["buoyancy"]
    places = max(earned(found["reserve_low_g"], found["reserve_high_g"]), 2)
    rows = [
        (row["name"], fixed(row["density_kg_m3"], 1), fixed(row["reserve_g"], places, signed=True), row["state"])
        for row in results["waters"]
    ]
    return table(
        "Other waters; differences are surer than values", ("water", "kg/m³", "reserve, g", "it"), rows, (0, 3)
    )


def balls(results: Results) -> Table | None:
    """Return how the whole bait lies with the balls at either end of their chamber."""
    rows = []
    for row in results.get("balls") or []:
        stays = {True: ", and stay", False: ", and roll away"}.get(row.get("stays"), "")
        nose_up, lean = degrees(row["nose_up_deg"], reason="free"), degrees(row["lean_deg"], reason="free")
        where = (fixed(from_nose(results, row["centre_mm"]), 1), point(row["centre_mm"]))
        rows.append((row["chamber"], f"{row['end']} end{stays}", *where, nose_up, lean))
    head = ("chamber", "balls at the", "G, mm from nose", "G at x, y, z, mm", "nose up", "lean")
    return table("The whole bait, balls at either end of their chamber", head, rows, (0, 1))
