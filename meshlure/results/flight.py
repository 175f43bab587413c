"""The result tree's account of a flight."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

import numpy as np

from meshlure.bait.pieces import Frame
from meshlure.geometry.moments import Moments
from meshlure.geometry.surface import Floats
from meshlure.physics.betterment import Change
from meshlure.physics.flight import ANGLES, OFF_END, Flight
from meshlure.physics.trajectory import Throw, Trajectory
from meshlure.physics.trim import Limits
from meshlure.results.numbers import GRAM, MM, MM2, degrees, plain

Tree = dict[str, Any]


def flight(
    *,
    main: Flight,
    mass: Moments,
    frame: Frame,
    centres: Mapping[str, Floats],
    length: float,
    ratios: Mapping[str, float | None],
    against: str | None,
    reversed_path: Flight,
    sphere_path: Trajectory,
    balls: Mapping[str, tuple[Flight, Moments]] | None,
    angles: Floats,
    change: Change | None,
    throw: Throw,
    limits: Limits,
) -> Tree:
    """Return the tree of a flight.

    Parameters
    ----------
    main : Flight
    mass : Moments, kg
    frame : Frame
    centres : mapping of (3,) arrays, m
        By plane, the centre of the area that it sees.
    length : float, m
    ratios : mapping
        Distance over that of a sphere, of the bait reversed and of another bait.
    against : str or None
        Name of the other bait.
    reversed_path, sphere_path : Flight, Trajectory
    balls : mapping or None
        By end, the flight with the balls there.
    angles : (n,) array, m
        Distance over `flight.ANGLES`.
    change : Change or None
    throw : Throw
    limits : Limits
    """
    end = main.bearing.end
    margins = {plane: _margin(mass, centre, frame, end) for plane, centre in centres.items()}
    plane = min(margins, key=lambda name: margins[name])
    path = main.path
    return {
        "leads": end,
        "verdict": main.bearing.verdict,
        "words": _words(main, margins[plane] / length, change),
        "other_end": {"leads": main.other.end, "verdict": main.other.verdict},
        "trims": [
            {"plane": curve.plane, "from_leading_deg": degrees(trim.from_end(end)), "stable": bool(trim.stable)}
            for curve in main.curves
            for trim in curve.trims
        ],
        "margin_mm": margins[plane] * MM,
        "margin_percent": margins[plane] / length * 100,
        "margin_plane": plane,
        "pressure_margin_mm": None if main.pressure_margin is None else main.pressure_margin * MM,
        "swing_hz": main.swing_hz,
        "swings": None if main.swing_hz is None else main.swing_hz * path.seconds,
        "swing_deg": degrees(main.bearing.swing),
        "drag_area_mm2": main.drag_area * MM2,
        "distance_m": path.distance,
        "distance_low_m": main.nearest.distance,
        "distance_high_m": main.farthest.distance,
        "flight_s": path.seconds,
        "splash_m_s": path.splash_speed,
        "splash_deg": degrees(path.splash_angle),
        "speed_m_s": throw.speed,
        "towards": plain(main.towards),
        "ratios": dict(ratios),
        "against": against,
        "balls": None if balls is None else {name: _balls(*one, centres, frame, length) for name, one in balls.items()},
        "better": None
        if change is None
        else {
            "verdict": change.verdict,
            "shift_to_nose_mm": change.shift * MM,
            "added_g": None if change.added is None else change.added * GRAM,
        },
        "moments": [
            {"plane": c.plane, "angle_deg": plain(np.degrees(c.angle)), "moment_n_mm": plain(c.moment, MM)}
            for c in main.curves
        ],
        "paths": [
            {"name": name, "x_m": plain(p.x), "y_m": plain(p.y)}
            for name, p in (("bait", path), ("reversed", reversed_path.path), ("sphere", sphere_path))
        ],
        "launch": {"angle_deg": plain(np.degrees(ANGLES)), "distance_m": plain(angles)},
        "limits": {
            "steady_deg": degrees(limits.steady),
            "sways_deg": degrees(limits.sways),
            "start_deg": degrees(limits.start),
            "pressure_deg": degrees(float(OFF_END)),
        },
    }


def _margin(mass: Moments, centre: Floats, frame: Frame, end: str) -> float:
    """By how much the centre of gravity lies ahead of a centre of area in the direction of flight, m."""
    ahead = float((mass.centre - centre) @ frame.nose)
    return ahead if end == "nose" else -ahead


def _balls(found: Flight, mass: Moments, centres: Mapping[str, Floats], frame: Frame, length: float) -> Tree:
    margin = min(_margin(mass, centre, frame, found.bearing.end) for centre in centres.values())
    return {
        "leads": found.bearing.end,
        "verdict": found.bearing.verdict,
        "distance_m": found.path.distance,
        "margin_mm": margin * MM,
        "margin_percent": margin / length * 100,
    }


def _words(main: Flight, margin: float, change: Change | None) -> str:
    """Say how it flies in a sentence or two."""
    end, verdict = main.bearing.end, main.bearing.verdict
    how = {"steady": f"Flies steadily, {end} first", "sways": f"Sways, {end} first", "tumbles": "Tumbles"}[verdict]
    where = "ahead of" if margin >= 0 else "behind"
    head = "" if verdict != "tumbles" else f" with the {end} as the likelier end in front"
    text = f"{how}{head}: centre of gravity {abs(margin):.0%} of the length {where} the centre of the area it shows."
    if change is not None:
        to = "nose" if change.shift > 0 else "tail"
        flies = {"steady": "fly steadily", "sways": "sway instead of tumbling"}[change.verdict]
        text += f" With its centre of gravity {abs(change.shift) * MM:.0f} mm nearer the {to} it would {flies}."
    return text
