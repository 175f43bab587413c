"""Tables and sentences of a balanced bait: what was asked, the ways offered, what stood in the way."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Any

from meshlure.report.table import Table, table
from meshlure.report.wording import DASH, SPACE, fixed, missing, point, significant

Results = Mapping[str, Any]


@dataclass(frozen=True)
class Balanced:
    """What the page says of a balance.

    Attributes
    ----------
    verdict : str
        Whether the target is met.
    asked : str
    hindered : tuple of str
    ways, weights, density, pins : Table or None
    replaced : str
    """

    verdict: str
    asked: str
    hindered: tuple[str, ...]
    ways: Table | None
    weights: Table | None
    density: Table | None
    pins: Table | None
    replaced: str


def balanced(results: Results) -> Balanced | None:
    """Return what is said of a balance, None where the report is of something else."""
    found = results.get("balance")
    if not found:
        return None
    target = found["target"]
    verdict = "Ballast as stated" if target is None else "Target met" if found["reachable"] else "Target not met"
    replaced = ", ".join(found["replaced"])
    return Balanced(
        verdict=verdict,
        asked="" if target is None else _asked(target),
        hindered=tuple(found["in_the_way"]),
        ways=_ways(found),
        weights=_weights(found) if len(found["options"]) > 1 else None,
        density=_density(found["body_density"]),
        pins=_pins(found["pins"]),
        replaced=f"Replaced: {replaced}, marked free in the bait file." if replaced else "",
    )


def way_words(row: Mapping[str, Any]) -> str:
    """Return one way in words: lead rod, 5 × 18.20 mm."""
    size = f"{row['size_mm']:.4g}"
    if row["shape"] == "rod":
        return f"{row['material']} rod, {size} × {fixed(row['length_mm'], 2)}{SPACE}mm"
    balls = "ball" if row["count"] == 1 else f"balls, {row['count']} of"
    return f"{row['material']} {balls} {size}{SPACE}mm"


def _asked(target: Mapping[str, Any]) -> str:
    how = (
        f"reserve {fixed(target['reserve_g'], 2, signed=True)}{SPACE}g"
        if target["sink_m_s"] is None
        else f"sinking at {fixed(target['sink_m_s'] * 100, 1)}{SPACE}cm/s"
    )
    angles = f"nose {fixed(target['nose_up_deg'], 1, signed=True)}°, lean {fixed(target['lean_deg'], 1, signed=True)}°"
    assumed = {"nose_up": "level", "lean": "no lean"}
    taken = ", ".join(assumed[name] for name in target["assumed"])
    return f"Asked for: {target['behaviour']}, {how}, {angles}{f' ({taken} assumed)' if taken else ''}."


def _ways(found: Mapping[str, Any]) -> Table | None:
    rows = []
    for number, row in enumerate(found["options"], 1):
        taken = number == found["taken"]
        flight = row["flight"]
        rows.append(
            (
                f"{number}{' (written)' if taken else ''}: {way_words(row)}",
                fixed(row["mass_g"], 2),
                fixed(row["from_nose_mm"], 1),
                point(row["at_mm"], 2),
                fixed(row["reserve_g"], 2, signed=True),
                _angle(row["nose_up_deg"]),
                _angle(row["lean_deg"]),
                fixed(row["metacentric_mm"]["least"], 2),
                fixed(row["cover_mm"], 2),
                point(row["cover_at_mm"], 1),
                f"{flight['leads']} first, {flight['verdict']}",
                fixed(row["distance_ratio"], 2),
                DASH if row["score"] is None else fixed(row["score"], 2),
            )
        )
    head = (
        "ballast",
        "g",
        "mm from nose",
        "middle at x, y, z, mm",
        "reserve, g",
        "nose up",
        "lean",
        "least metacentric height, mm",
        "cover left, mm",
        "least cover at x, y, z, mm",
        "flight",
        "reach",
        "points",
    )
    caption = "Ways to bring the ballast in, the best first; reach is the distance over that of the bait as it was"
    return table(caption, head, rows, (0, 10))


def _angle(value: float | None) -> str:
    return missing("free") if value is None else f"{fixed(value, 1, signed=True)}°"


def _weights(found: Mapping[str, Any]) -> Table | None:
    words = {
        "per_degree_off": "each degree off the posture asked for",
        "per_gram_off": "each gram off the reserve asked for",
        "per_mm_less_stiff": "each mm of least metacentric height less than the stiffest way",
        "per_further_piece": "each piece beyond the first",
        "not_upright": "not coming to rest so from back up",
    }
    rows = [(words[key], significant(value, 3)) for key, value in found["weights"].items()]
    return table("How the order is made: points for, fewer are better (ours, not measured)", ("for", "points"), rows)


def _density(found: Mapping[str, Any] | None) -> Table | None:
    if found is None:
        return None
    rows = [
        ("body now", f"{fixed(found['now_g_cm3'], 3)} g/cm³"),
        ("body needed", f"{fixed(found['needed_g_cm3'], 3)} g/cm³"),
        *(("reached by", str(row["words"])) for row in [*found["mixes"], *found["stock"]]),
    ]
    return table("The body's density that meets the reserve", (), rows, (0, 1))


def _pins(found: Any) -> Table | None:
    rows = [
        (str(number), point(pin["at_mm"], 1), fixed(pin["diameter_mm"], 1), fixed(pin["length_mm"], 1))
        for number, pin in enumerate(found, 1)
    ]
    return table("Holes for pins across the middle plane", ("pin", "middle at x, y, z, mm", "⌀ mm", "mm long"), rows)
