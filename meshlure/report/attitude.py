"""Tables of how the bait lies: its resting postures, one a column, and its righting arms."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

from meshlure.report.subject import touchy
from meshlure.report.table import Table, table
from meshlure.report.wording import (
    DASH,
    SPACE,
    degrees,
    fixed,
    millimetres,
    missing,
    percent,
    point,
    significant,
    square_millimetres,
)

Results = Mapping[str, Any]
Posture = Mapping[str, Any]

NO_ATTITUDE = "no attitude of its own"


def postures(results: Results) -> Table | None:
    """Return every resting posture as a column, its measures as rows."""
    found = results["postures"]
    if not found:
        return None
    columns = [column(posture) for posture in found]
    empty = {title for title in ("balls lie", "above the water") if all(each[title] == DASH for each in columns)}
    titles = [title for title in columns[0] if title not in empty]
    head = ("", *(f"{number + 1}. {p.get('name') or p['kind']}" for number, p in enumerate(found)))
    return table("Posture by posture", head, [(title, *(each[title] for each in columns)) for title in titles])


def column(posture: Posture) -> dict[str, str]:
    """Return one posture's measures in words, each with the reason where it has none."""
    still = posture["up"] is None
    hangs = posture["kind"] == "hanging"
    dry = "hangs under water" if hangs else "has no meaning here"
    heights = posture["metacentric_mm"] or {}
    no_height = NO_ATTITUDE if still else "stands on end" if heights else "not found"
    balls = ", ".join(f"{chamber}: {end}" for chamber, end in (posture.get("balls") or {}).items())
    barrier = posture["barrier_g_mm"]
    return {
        "it": ("hangs" if hangs else "floats") + (", reached from back up" if posture["upright"] else ""),
        "nose up": degrees(
            posture["nose_up_deg"], rounded=touchy(posture, "nose_up_deg"), reason=NO_ATTITUDE if still else "free"
        ),
        "lean, to its right +": degrees(
            posture["lean_deg"], rounded=touchy(posture, "lean_deg"), reason=no_lean(posture)
        ),
        "free to turn": free_words(posture["free"]),
        "balls lie": balls or DASH,
        "above the water": ", ".join(posture.get("dry") or []) or DASH,
        "share under water": percent(posture["submerged_share"], reason="all of it" if hangs else "not found"),
        "cut by the surface": square_millimetres(posture["waterplane_mm2"], reason=dry),
        "metacentre above G, fore-aft": millimetres(heights.get("fore_aft"), 2, reason=no_height),
        "metacentre above G, sideways": millimetres(heights.get("sideways"), 2, reason=no_height),
        "metacentre above G, least": millimetres(heights.get("least"), 2, reason=no_height),
        "found from": missing(dry) if hangs else percent(posture["share"]) + " of starts",
        "work to tip out of it": missing(dry if hangs else "nothing else to tip into")
        if barrier is None
        else f"{significant(barrier, 2)}{SPACE}g·mm",
        "0.1 g moved 10 mm fore-aft turns it": sensitive(posture, "deg_per_0_1g_10mm", "°"),
        "G moved 1 mm fore-aft turns it": sensitive(posture, "deg_per_mm", "°"),
        "0.1 g moved 10 mm sideways leans it": sensitive(posture, "lean_deg_per_0_1g_10mm", "°"),
        "G moved 1 mm sideways leans it": sensitive(posture, "lean_deg_per_mm", "°"),
        "1 mm deeper takes": sensitive(posture, "g_per_mm", SPACE + "g", dry),
        "water's up, mesh axes": missing(NO_ATTITUDE) if still else ", ".join(fixed(c, 3) for c in posture["up"]),
        "water level along that": millimetres(posture["waterline_mm"], 2, reason=dry),
        "G at x, y, z, mm": point(posture.get("centre_mm")),
        "B at x, y, z, mm": point(posture.get("buoyancy_centre_mm")),
    }


def sensitive(posture: Posture, key: str, unit: str, reason: str = "") -> str:
    """Return one sensitivity to two significant digits, or why there is none."""
    value = (posture["sensitivity"] or {}).get(key)
    if value is None:
        return missing(reason or ("free" if posture["free"] is not None else "has no meaning here"))
    return significant(value, 2) + unit


def no_lean(posture: Posture) -> str:
    """Return why a posture has no lean."""
    if posture["up"] is None:
        return NO_ATTITUDE
    return "free to roll" if posture["free"] is not None else "stands on end"


def free_words(free: Any) -> str:
    """Return which angle nothing holds."""
    if free is None:
        return "no"
    return {"lean": "about its length", "nose_up": "nose up and down", "both": "any way"}.get(
        str(free), str(free).replace("_", " ")
    )


def righting(results: Results, plane: str) -> Table | None:
    """Return the righting curves of one plane, a column a posture."""
    curves = [curve for curve in results["righting"] if curve["plane"] == plane]
    heels = sorted({heel for curve in curves for heel in curve["heel_deg"]})
    arms = [dict(zip(curve["heel_deg"], curve["arm_mm"], strict=True)) for curve in curves]
    head = ["°"]
    for curve in curves:
        number = curve.get("posture")
        head.append("arm, mm" if number is None else f"arm, mm, posture {number + 1}")
    rows = [(fixed(heel, 0), *(fixed(column.get(heel), 2) for column in arms)) for heel in heels]
    words = "heeled sideways" if plane == "sideways" else "turned nose up (+) and down"
    return table(f"Righting arm, {words}", head, rows, ())
