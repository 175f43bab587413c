"""The result tree's account of a copy that was weighed."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

from meshlure.bait.pieces import Frame
from meshlure.files.sections.measured import MeasuredSection
from meshlure.geometry.moments import Moments
from meshlure.geometry.surface import Floats
from meshlure.physics.buoyancy import Reserve
from meshlure.physics.hydrostatic import Explanation, Weighing
from meshlure.results import pieces
from meshlure.results import water as water_tree
from meshlure.results.numbers import GRAM, MM3
from meshlure.stock.waters import Water

Tree = dict[str, Any]


def rows(section: MeasuredSection, dry: float, reserve: float, uncoated: float, coat: float | None) -> tuple[Tree, ...]:
    """Return every weighing beside what was predicted.

    Parameters
    ----------
    section : MeasuredSection
    dry, reserve, uncoated, coat : float, kg
        Predicted; the reserve in the water that the copy was weighed in, no coat where there is none.
    """
    told = (
        ("dry, g", section.dry, dry),
        ("in water, g", section.in_water, -reserve),
        ("reserve, g", section.reserve, reserve),
        ("uncoated, g", section.uncoated, uncoated),
        ("coat, g", section.coat, coat),
    )
    return tuple(
        {
            "what": what,
            "weighed": value * GRAM,
            "predicted": expected * GRAM,
            "difference": (value - expected) * GRAM,
        }
        for what, value, expected in told
        if value is not None and expected is not None
    )


def displacement(weighing: Weighing | None, predicted: float) -> Tree | None:
    """Return what the copy displaces by its weighings, beside the volume predicted, m3."""
    if weighing is None:
        return None
    return {
        "measured_mm3": weighing.volume * MM3,
        "predicted_mm3": predicted * MM3,
        "difference_share": weighing.volume / predicted - 1,
        "bulk_density_g_cm3": weighing.density / 1e3,
    }


def body(density: float, predicted: float, volume: float, drawn: float) -> Tree:
    """Return the body's material by the weighings: densities in kg/m3, its volume and the one drawn in m3."""
    return {
        "density_g_cm3": density / 1e3,
        "predicted_g_cm3": predicted / 1e3,
        "difference_share": density / predicted - 1,
        "volume_mm3": volume * MM3,
        "drawn_mm3": drawn * MM3,
    }


def coat(mass: float, factor: float, thickness: float) -> Tree:
    """Return the coat that was weighed: predicted mass, kg, and thickness, m, and how many times that it is."""
    return {
        "mass_g": mass * factor * GRAM,
        "predicted_g": mass * GRAM,
        "thickness_mm": thickness * factor * 1e3,
        "predicted_mm": thickness * 1e3,
    }


def explanations(found: Sequence[Explanation]) -> list[Tree]:
    """Return the single causes that could explain what was weighed, the likeliest first."""
    return [
        {
            "what": row.lever.what,
            "change": row.change,
            "unit": row.lever.unit,
            "usual_low": -row.lever.usual[0],
            "usual_high": row.lever.usual[1],
            "left_dry_g": None if row.left_mass is None else row.left_mass * GRAM,
            "left_reserve_g": None if row.left_reserve is None else row.left_reserve * GRAM,
            "explains_share": row.share,
            "likely": row.likely,
        }
        for row in found
    ]


def words(table: Sequence[Tree], found: Sequence[Explanation], step: float) -> str:
    """Return in a sentence or two how far the copy is off, and what alone would explain it; the scale's step in kg."""
    off = [row for row in table if abs(row["difference"]) > step * GRAM]
    if not off:
        return "The copy weighs as predicted, within the scale's step."
    told = ", ".join(f"{row['what'].partition(',')[0]} {row['difference']:+.2f} g" for row in off)
    likely = [row for row in found if row.likely]
    if not likely:
        return f"Off the prediction by: {told}. No single usual cause explains it."
    causes = " or ".join(_cause(row) for row in likely[:3])
    return f"Off the prediction by: {told}. Alone would explain it: {causes}."


def _cause(row: Explanation) -> str:
    unit = row.lever.unit
    space = "" if unit == "%" else " "
    return f"{row.lever.what} {row.change:+.3g}{space}{unit}"


def again(
    held: Reserve, water: Water, displaced: float, centre: Floats, mass: Moments, frame: Frame, tip: float
) -> Tree:
    """Return weight and buoyancy of the bait as weighed.

    Parameters
    ----------
    held : Reserve
    water : Water
        The bait's own.
    displaced : float, m3
    centre : (3,) array, m
        Of buoyancy.
    mass : Moments, kg
    frame : Frame
    tip : float, m
        Of the nose along the nose direction.
    """
    return {
        "weight": pieces.weight(mass, frame, tip),
        "buoyancy": water_tree.buoyancy(held, water, displaced, centre, mass.amount),
    }
