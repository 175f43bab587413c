"""Tables of the bait wholly under water: sinking or rising from either start, and the pull in tow."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

from meshlure.report.table import Table, table
from meshlure.report.wording import DASH, SPACE, degrees, fixed, missing, significant

Results = Mapping[str, Any]
Motion = Mapping[str, Any]

PARTS = (("body_n", "body"), ("lip_n", "lip"), ("hooks_n", "hooks and rings"), ("eyes_n", "eyes and hangers"))
LONG = "over ten minutes"


def facts(results: Results) -> Table | None:
    """Return the steady motion from the hanging posture and from level, side by side."""
    found = results["sinking"]
    if found["suspends"] or not found["starts"]:
        return None
    low, high = sorted((abs(found["speed_low_m_s"]), abs(found["speed_high_m_s"])))
    columns = [_column(start) for start in found["starts"]]
    head = ("", *(f"from rest, {start['start']}" for start in found["starts"]))
    rows = [(title, *(column[title] for column in columns)) for title in columns[0]]
    other = "the same" if found["starts_agree"] else DASH
    rows.insert(
        1,
        (
            "band of that speed",
            f"{centimetres(low)} to {centimetres(high)}{SPACE}cm/s",
            *([other] * (len(columns) - 1)),
        ),
    )
    return table("Steady motion under water", head, rows, range(len(head)))


def _column(start: Motion) -> dict[str, str]:
    speed = start["speed_m_s"]
    word = "down" if speed > 0 else "up"
    return {
        "speed": f"{centimetres(abs(speed))}{SPACE}cm/s {word}",
        "nose up": degrees(start["attitude_nose_up_deg"]) + (", belly up" if start["overturned"] else ""),
        "glide, off the vertical": glide_words(start["glide_deg"]),
        f"to 1{SPACE}m {word}": seconds(start["seconds_to_1m"]),
        f"to 3{SPACE}m {word}": seconds(start["seconds_to_3m"]),
        "becomes steady": "yes" if start["settles"] else "no: means of its swings",
    }


def centimetres(speed: float) -> str:
    """Return a speed given in m/s as cm/s, to the two significant digits that an estimate of drag earns."""
    return significant(100 * speed, 2)


def glide_words(glide: float) -> str:
    """Return how far a path leans off the vertical, and to which end."""
    if abs(round(glide)) < 1:
        return "straight"
    return f"{fixed(abs(glide), 0)}° towards the {'nose' if glide > 0 else 'tail'}"


def seconds(value: float | None) -> str:
    """Return seconds to two significant digits."""
    return missing(LONG) if value is None else f"{significant(value, 2)}{SPACE}s"


def tow(results: Results) -> Table | None:
    """Return the pull at the retrieve's speeds, whole and by parts."""
    rows = results["sinking"]["tow"]
    keys = [(key, name) for key, name in PARTS if any(row["parts"][key] for row in rows)]
    head = ("m/s", "pull, gf", "pull, N", "body's band, N", *(f"{name}, N" for _, name in keys))
    lines = [
        (
            fixed(row["speed_m_s"], 1),
            significant(row["drag_gf"], 2),
            significant(row["drag_n"], 2),
            f"{significant(row['drag_low_n'], 2)} to {significant(row['drag_high_n'], 2)}",
            *(significant(row["parts"][key], 2) for key, _ in keys),
        )
        for row in rows
    ]
    return table("Pull in tow, nose first and straight: an order of size", head, lines, ())
