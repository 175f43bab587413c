"""Tables and sentences of the flight."""

from __future__ import annotations

from collections.abc import Mapping
from itertools import zip_longest
from typing import Any

import numpy as np

from meshlure.report.airborne import NAMES, from_leading, rows_every
from meshlure.report.table import Table, table
from meshlure.report.wording import DASH, SPACE, band, earned, fixed, millimetres, significant

Results = Mapping[str, Any]

SHOWS = {"pitch": "plan area, seen from above", "yaw": "side area, seen from the side"}
DOES = {"steady": "flies steadily", "sways": "sways", "tumbles": "tumbles"}
LEVEL = 0.005
"""Shares of a distance that make no difference."""


def verdict(flight: Mapping[str, Any]) -> str:
    """Return how it flies in a few words."""
    if flight["verdict"] == "tumbles":
        return f"Tumbles; the {flight['leads']} is the likelier end in front"
    return f"{DOES[flight['verdict']].capitalize()}, {flight['leads']} first"


def headline(results: Results) -> list[str]:
    """Return how far it flies beside what it is held against, in sentences."""
    flight = results["flight"]
    ratios, other = flight["ratios"], flight["other_end"]
    said = [f"It reaches {_share(ratios['sphere'])} of the way of a smooth ball of its mass and bulk."]
    if flight["verdict"] == "tumbles" and other["verdict"] == "tumbles":
        said.append("Reversed it reaches as far: it tumbles from either end.")
    elif abs(ratios["reversed"] - 1) < LEVEL:
        said.append(f"{other['leads'].capitalize()} first, where it {DOES[other['verdict']]}, it reaches as far.")
    else:
        said.append(
            f"It reaches {significant(ratios['reversed'], 3)} times as far as {other['leads']} first, "
            f"where it {DOES[other['verdict']]}."
        )
    if ratios["against"] is not None:
        name = flight["against"]
        said.append(f"It reaches {significant(ratios['against'], 3)} times as far as {name} in its own throw.")
    return said


def _share(ratio: float) -> str:
    return f"{fixed(100 * ratio, 0)}{SPACE}%"


def throw(results: Results) -> str:
    """Return how it was thrown, and what of that the bait file does not say."""
    flight, cast = results["flight"], results["cast"]
    speed = f"Thrown at {significant(flight['speed_m_s'], 3)}{SPACE}m/s"
    wind = cast["wind_m_s"]
    air = "in still air" if wind == 0 else f"{'down' if wind > 0 else 'into a'} wind of {fixed(abs(wind), 1)}{SPACE}m/s"
    pull = f"a line that holds back with {significant(cast['line_pull_n'], 2)}{SPACE}N"
    taken = [key.replace("_", " ") for key in cast["assumed"]]
    ours = f" Not in the bait file, so assumed: {', '.join(taken)}." if taken else ""
    return (
        f"{speed}, {fixed(cast['angle_deg'], 0)}° up, {fixed(cast['height_m'], 1)}{SPACE}m above the water, "
        f"{air}, on {pull}.{ours}"
    )


def help_words(flight: Mapping[str, Any]) -> str:
    """Return what would make it fly better, in mm and g."""
    better = flight["better"]
    if better is None:
        if flight["verdict"] == "steady":
            return "Nothing needs to be moved: it flies steadily as it is."
        return "No place of the centre of gravity along the bait was found that would make it fly better."
    end = "nose" if better["shift_to_nose_mm"] > 0 else "tail"
    wanted = {"steady": "fly steadily", "sways": "sway instead of tumbling"}[better["verdict"]]
    moved = f"{significant(abs(better['shift_to_nose_mm']), 2)}{SPACE}mm nearer the {end}"
    added = better["added_g"]
    weight = (
        f"no weight added at the {end} alone can do that"
        if added is None
        else f"{significant(added, 2)}{SPACE}g added at the very {end} would do that"
    )
    return f"With its centre of gravity {moved} it would {wanted}; {weight}."


def facts(results: Results) -> Table | None:
    """Return the flight in facts, ratios before metres."""
    f = results["flight"]
    leads, limits = f["leads"], f["limits"]
    places = earned(f["distance_low_m"], f["distance_high_m"])
    metres = f"{fixed(f['distance_m'], places)}{SPACE}m, band {band(f['distance_low_m'], f['distance_high_m'], 'm')}"
    rows = [
        ("leads", f"{leads}; {f['other_end']['leads']} first it {DOES[f['other_end']['verdict']]}"),
        ("so held, it", DOES[f["verdict"]]),
        ("reach over a smooth ball's", f"{significant(f['ratios']['sphere'], 2)} (same mass and bulk, same throw)"),
        ("reach over itself reversed", significant(f["ratios"]["reversed"], 3)),
    ]
    if f["ratios"]["against"] is not None:
        rows.append((f"reach over {f['against']}", significant(f["ratios"]["against"], 3)))
    ahead = f"{_ahead(f['margin_mm'])}, {fixed(abs(f['margin_percent']), 0)}{SPACE}% of the length"
    drag = f"{significant(f['drag_area_mm2'], 2)}{SPACE}mm²"
    where = "mean over all directions" if f["verdict"] == "tumbles" else "at its trim"
    splash = f"{significant(f['splash_m_s'], 2)}{SPACE}m/s, {fixed(f['splash_deg'], 0)}° below the horizontal"
    rows += [
        (f"G ahead of A, {f['margin_plane']}", ahead),
        (f"G ahead of P, {fixed(limits['pressure_deg'], 0)}° off", _pressure(f)),
        ("swings", _swings(f)),
        ("drag area, all parts", f"{drag}, {where}"),
        ("distance", metres),
        ("in the air", f"{significant(f['flight_s'], 2)}{SPACE}s"),
        ("at the water", splash),
    ]
    return table("The flight; ratios are surer than metres", (), rows, (0, 1))


def _ahead(margin: float) -> str:
    return f"{millimetres(abs(margin), 1)} {'ahead' if margin >= 0 else 'behind'}"


def _pressure(flight: Mapping[str, Any]) -> str:
    margin = flight["pressure_margin_mm"]
    if margin is None:
        return f"{DASH} (the air pushes it across too little or the wrong way to place P)"
    return f"{_ahead(margin)}: {'the air turns it back' if margin >= 0 else 'the air turns it farther off'}"


def _swings(flight: Mapping[str, Any]) -> str:
    start, wide = fixed(flight["limits"]["start_deg"], 0), flight["swing_deg"]
    far = "right round" if wide >= 179.5 else f"to {fixed(wide, 0)}°"
    if flight["swing_hz"] is None:
        return f"none: no stable trim; from {start}° off it swings {far}"
    rate, count = significant(flight["swing_hz"], 2), fixed(flight["swings"], 0)
    return f"{rate} a second about its trim, some {count} in the flight; from {start}° off it swings {far}"


def balls(results: Results) -> Table | None:
    """Return both flights side by side, balls at either end."""
    found = results["flight"]["balls"]
    if found is None:
        return None
    nose, tail = found["nose"], found["tail"]
    base = nose["distance_m"]
    rows = [
        ("leads", nose["leads"], tail["leads"]),
        ("it", DOES[nose["verdict"]], DOES[tail["verdict"]]),
        ("reach, balls at the nose = 1", "1", significant(tail["distance_m"] / base, 3) if base else DASH),
        ("G ahead of A", _ahead(nose["margin_mm"]), _ahead(tail["margin_mm"])),
        ("the same, of the length", *(f"{fixed(abs(one['margin_percent']), 1)}{SPACE}%" for one in (nose, tail))),
        ("distance, m", *(fixed(one["distance_m"], 0) for one in (nose, tail))),
    ]
    return table("Balls at either end, side by side", ("", "balls at the nose", "balls at the tail"), rows, (0, 1, 2))


def trims(results: Results) -> Table | None:
    """Return every trim."""
    flight = results["flight"]
    rows = [
        (trim["plane"], f"{fixed(trim['from_leading_deg'], 0)}°", "it returns" if trim["stable"] else "it turns away")
        for trim in sorted(flight["trims"], key=lambda t: (t["plane"], t["from_leading_deg"]))
    ]
    head = ("plane", f"from {flight['leads']} first", "pushed a little")
    return table("Trims: angles without a turning moment", head, rows, (0, 2))


def moments(results: Results) -> Table | None:
    """Return the turning moments every five degrees, a column a plane."""
    flight = results["flight"]
    found = [(curve["plane"], *from_leading(curve, flight["leads"])) for curve in flight["moments"]]
    if not found:
        return None
    angles = found[0][1]
    columns = [(plane, dict(zip(np.round(at, 3), moment, strict=True))) for plane, at, moment in found]
    rows = [
        (fixed(angles[k], 0), *(fixed(column.get(np.round(angles[k], 3)), 2) for _, column in columns))
        for k in rows_every(angles.tolist(), 5.0)
    ]
    head = (f"° from {flight['leads']} first", *(f"{plane}, N·mm" for plane, _ in columns))
    return table("Turning moment, every 5°", head, rows, ())


def paths(results: Results) -> Table | None:
    """Return the paths' points, two columns a path."""
    found = results["flight"]["paths"]
    head = [f"{NAMES[path['name']]}, {axis}" for path in found for axis in ("m along", "m up")]
    columns = [column for path in found for column in (path["x_m"], path["y_m"])]
    rows = ([fixed(value, 1) for value in row] for row in zip_longest(*columns))
    return table("Paths through the air", head, rows, ())


def launch(results: Results) -> Table | None:
    """Return the distance over the launch angle."""
    found = results["flight"]["launch"]
    most = max(found["distance_m"])
    rows = [
        (fixed(angle, 0), fixed(distance / most, 2), fixed(distance, 1))
        for angle, distance in zip(found["angle_deg"], found["distance_m"], strict=True)
    ]
    return table("Distance over the launch angle", ("° up", "of the greatest", "m"), rows, ())
