"""Invented flights and descents that keep the contract of results.json but follow from nothing."""

from __future__ import annotations

import math
from typing import Any


def _path(name: str, reach: float) -> dict[str, Any]:
    along = [reach * k / 20 for k in range(21)]
    return {"name": name, "x_m": along, "y_m": [2 * (1 - x / reach) + 0.9 * x * (1 - x / reach) for x in along]}


def _curve(plane: str, angles: range, turn: float) -> dict[str, Any]:
    moments = [3.0 * math.sin(math.radians(2 * (a - turn))) - math.sin(math.radians(a)) for a in angles]
    return {"plane": plane, "angle_deg": [float(a) for a in angles], "moment_n_mm": moments}


def _balls(leads: str, verdict: str, distance: float, margin: float) -> dict[str, Any]:
    percent = 100 * margin / 92
    return {
        "leads": leads,
        "verdict": verdict,
        "distance_m": distance,
        "margin_mm": margin,
        "margin_percent": percent,
    }


def swaying_flight() -> dict[str, Any]:
    """Tail first, swaying, with balls and another bait to hold it against."""
    angles = range(5, 80, 5)
    return {
        "leads": "tail",
        "verdict": "sways",
        "words": "Sways, tail first: centre of gravity 4% of the length ahead of the centre of the area it shows.",
        "other_end": {"leads": "nose", "verdict": "tumbles"},
        "trims": [
            {"plane": "pitch", "from_leading_deg": 24.0, "stable": True},
            {"plane": "pitch", "from_leading_deg": 2.0, "stable": False},
            {"plane": "yaw", "from_leading_deg": -31.0, "stable": True},
        ],
        "margin_mm": 3.7,
        "margin_percent": 4.02,
        "margin_plane": "yaw",
        "pressure_margin_mm": -12.4,
        "swing_hz": 3.14,
        "swings": 7.8,
        "swing_deg": 48.0,
        "drag_area_mm2": 512.0,
        "distance_m": 27.31,
        "distance_low_m": 22.2,
        "distance_high_m": 33.9,
        "flight_s": 2.61,
        "splash_m_s": 11.4,
        "splash_deg": 63.0,
        "speed_m_s": 25.0,
        "towards": [math.cos(math.radians(24)), 0.0, math.sin(math.radians(24))],
        "ratios": {"sphere": 0.81, "reversed": 1.24, "against": 0.97},
        "against": "Willow minnow",
        "balls": {
            "nose": _balls("nose", "tumbles", 22.0, -1.2),
            "tail": _balls("tail", "sways", 27.3, 3.7),
        },
        "better": {"verdict": "steady", "shift_to_nose_mm": -6.26, "added_g": 1.83},
        "moments": [_curve("pitch", range(-180, 181), 24.0), _curve("yaw", range(-180, 181), -31.0)],
        "paths": [_path("bait", 27.31), _path("reversed", 22.02), _path("sphere", 33.72)],
        "launch": {
            "angle_deg": [float(a) for a in angles],
            "distance_m": [28 * math.sin(math.radians(2 * a)) ** 0.6 for a in angles],
        },
        "limits": {"steady_deg": 20.0, "sways_deg": 60.0, "start_deg": 30.0, "pressure_deg": 15.0},
    }  # fmt: skip


def tumbling_flight() -> dict[str, Any]:
    """Tumbling from either end, without trims, balls, centre of pressure, or anything that would help."""
    flight = swaying_flight()
    flight.update(
        leads="nose",
        verdict="tumbles",
        words="Tumbles with the nose as the likelier end in front.",
        other_end={"leads": "tail", "verdict": "tumbles"},
        trims=[],
        pressure_margin_mm=None,
        swing_hz=None,
        swings=None,
        swing_deg=180.0,
        towards=[-1.0, 0.0, 0.0],
        ratios={"sphere": 0.7, "reversed": 1.0, "against": None},
        against=None,
        balls=None,
        better=None,
    )
    return flight


def _start(start: str, speed: float, nose_up: float, glide: float) -> dict[str, Any]:
    return {
        "start": start,
        "speed_m_s": speed,
        "attitude_nose_up_deg": nose_up,
        "overturned": False,
        "glide_deg": glide,
        "seconds_to_1m": abs(1.1 / speed),
        "seconds_to_3m": abs(3.1 / speed),
        "settles": True,
    }


def _tow(speed: float) -> dict[str, Any]:
    parts = {"body_n": 0.011 * speed**2, "lip_n": 0.062 * speed**2, "hooks_n": 0.04 * speed**2, "eyes_n": 0.0}
    whole = sum(parts.values())
    return {
        "speed_m_s": speed,
        "drag_n": whole,
        "drag_low_n": whole - 0.4 * parts["body_n"],
        "drag_high_n": whole + 0.4 * parts["body_n"],
        "drag_gf": whole / 9.80665e-3,
        "parts": parts,
    }


def rising() -> dict[str, Any]:
    """Rises, nose up, gliding to the nose."""
    starts = [_start("hanging", -0.171, 20.5, 17.9), _start("level", -0.171, 20.5, 17.9)]
    return {
        "suspends": False,
        **{key: value for key, value in starts[0].items() if key != "start"},
        "speed_low_m_s": -0.154,
        "speed_high_m_s": -0.193,
        "starts_agree": True,
        "starts": starts,
        "words": "Rises at 17 cm/s (15 to 19), nose 21° up, 18° off the vertical towards the nose.",
        "tow": [_tow(0.5), _tow(1.0)],
    }


def fluttering() -> dict[str, Any]:
    """Sinks without settling, each start its own way, the second for longer than it is followed."""
    second = {**_start("level", 0.004, -3.0, -61.0), "seconds_to_3m": None, "settles": False, "overturned": True}
    starts = [_start("hanging", 0.52, -20.0, 0.2), second]
    motion = {key: value for key, value in starts[0].items() if key != "start"}
    found = {**rising(), **motion, "speed_low_m_s": 0.44, "speed_high_m_s": 0.63}
    return {**found, "starts_agree": False, "starts": starts, "words": "Sinks at 52 cm/s (44 to 63), nose 20° down."}


def suspending() -> dict[str, Any]:
    """Hangs where it is."""
    found = {**rising(), "suspends": True, "starts": [], "seconds_to_1m": None, "seconds_to_3m": None}
    return {**found, "words": "Suspends: it neither sinks nor rises by more than the numbers can tell."}
