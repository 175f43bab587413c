"""Tables and sentences of a bait with a chamber bored into it: the bores offered, and how the balls lie in them."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Any

from meshlure.report.table import Table, table
from meshlure.report.wording import SPACE, degrees, fixed, point

Results = Mapping[str, Any]


@dataclass(frozen=True)
class Chambered:
    """What the page says of a chamber.

    Attributes
    ----------
    verdict, asked : str
    hindered : tuple of str
    ways, ends : Table or None
    """

    verdict: str
    asked: str
    hindered: tuple[str, ...]
    ways: Table | None
    ends: Table | None


def chambered(results: Results) -> Chambered | None:
    """Return what is said of a chamber, None where the report is of something else."""
    found = results.get("chamber")
    if not found:
        return None
    asked = found["asked"]
    return Chambered(
        verdict="A bore fits" if found["reachable"] else "No bore fits",
        asked=(
            f"Asked for: {fixed(asked['clearance_mm'], 2)}{SPACE}mm of clearance, walls of "
            f"{fixed(asked['wall_mm'], 2)}{SPACE}mm at the side and {fixed(asked['end_wall_mm'], 2)}{SPACE}mm at the "
            f"ends, a fall of {fixed(asked['slope_deg'], 0)}° towards the nose, open to: {asked['open_to']}."
        ),
        hindered=tuple(found["in_the_way"]),
        ways=_ways(found),
        ends=_ends(found),
    )


def _balls(row: Mapping[str, Any]) -> str:
    return f"{row['count']} × {row['ball_mm']:.4g}{SPACE}mm {row['material']}"


def _ways(found: Mapping[str, Any]) -> Table | None:
    rows = [
        (
            f"{number}{' (written)' if number == found['taken'] else ''}: {_balls(row)}",
            fixed(row["bore_mm"], 2),
            fixed(row["length_mm"], 1),
            fixed(row["travel_mm"], 1),
            fixed(row["balls_g"], 2),
            fixed(row["shift_mm"], 2),
            point(row["from_mm"], 1),
            point(row["to_mm"], 1),
            fixed(row["wall_mm"], 2),
            point(row["wall_at_mm"], 1),
            fixed(row["end_wall_mm"], 2),
            fixed(row["score"], 2),
        )
        for number, row in enumerate(found["options"], 1)
    ]
    head = (
        "balls",
        "bore, mm",
        "length, mm",
        "travel, mm",
        "balls, g",
        "shift of G, mm",
        "nose end at x, y, z, mm",
        "tail end at x, y, z, mm",
        "wall left, mm",
        "least wall at x, y, z, mm",
        "end wall, mm",
        "points",
    )
    return table("Bores that the body can carry, the best first", head, rows, (0,))


def _ends(found: Mapping[str, Any]) -> Table | None:
    rows = []
    for number, row in enumerate(found["options"], 1):
        for end in ("nose", "tail"):
            posture, flight = row["postures"][end], row["flight"][end]
            returns = {True: "yes", False: "no", None: "balls are there"}[posture.get("returns")]
            rows.append(
                (
                    str(number),
                    f"at the {end}",
                    degrees(posture["nose_up_deg"], reason="free"),
                    degrees(posture["lean_deg"], reason="free"),
                    degrees(posture["bore_slope_deg"], reason="free"),
                    returns,
                    f"{flight['leads']} first, {flight['verdict']}",
                    fixed(flight["distance_m"], 0),
                )
            )
    head = ("way", "balls", "nose up", "lean", "bore's fall to the nose", "roll back", "flight", "reach, m")
    return table("With the balls at either end", head, rows, (0, 1, 5, 6))
