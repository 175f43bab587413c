"""The invented minnow's tree, which keeps the contract of results.json but measures nothing real."""

from __future__ import annotations

import math
from typing import Any

import numpy as np
from invented_areas import BACK, NOSE, SIDE, drags, rose
from invented_budget import budget
from invented_flights import rising, swaying_flight
from invented_outlines import LENGTH, half

from meshlure.results.readiness import readiness


def _piece(
    name: str, role: str, material: str | None, density: float | None, volume: float, mass: float, centre: list[float]
) -> dict[str, Any]:
    return {
        "name": name,
        "role": role,
        "material": material,
        "density_g_cm3": density,
        "volume_mm3": volume,
        "mass_g": mass,
        "centre_mm": centre,
    }


def turned(nose_up: float, lean: float) -> list[float]:
    """The upward direction of the water for a nose-up angle and a lean, in degrees, mesh coordinates."""
    n, s = math.radians(nose_up), math.radians(lean)
    return [-math.sin(n), -math.cos(n) * math.sin(s), math.cos(n) * math.cos(s)]


def minnow_results() -> dict[str, Any]:
    """A floating minnow with belly weight, wire, rattle ball, lip and two hooks; everything in it is invented."""
    stations = np.linspace(0, LENGTH, 61)
    height, width = half(stations, 9.5, 0.35) * 2, half(stations, 6.5, 0.34) * 2
    area = math.pi / 4 * height * width
    heel = list(range(0, 181, 5))
    pieces = [
        _piece("body", "body", None, 0.72, 10430.0, 7.51, [41.2, 0.0, -0.6]),
        _piece("through-wire", "insert", "stainless 304", 7.93, 48.5, 0.385, [45.8, 0.0, 0.0]),
        _piece("belly weight", "insert", "lead", 11.34, 212.0, 2.404, [34.0, 0.02, -6.0]),
        _piece("rattle chamber", "void", None, None, 305.0, 0.0004, [60.0, 0.0, 0.8]),
        _piece("lip", "insert", "polycarbonate", 1.2, 196.0, 0.235, [-0.6, 0.0, -9.6]),
        _piece("left eye", "insert", "acrylic", 1.19, 18.0, 0.021, [9.0, -4.6, 2.6]),
        _piece("right eye", "insert", "acrylic", 1.19, 18.0, 0.021, [9.0, 4.6, 2.6]),
        _piece("front treble", "hardware", "carbon steel", 7.85, 95.5, 0.75, [31.0, 0.0, -9.8]),
        _piece("rear treble", "hardware", "carbon steel", 7.85, 95.5, 0.75, [94.0, 0.0, 0.0]),
        _piece("coat", "coat", "epoxy clear coat", 1.15, 560.0, 0.644, [42.0, 0.0, -0.5]),
        _piece("balls in rattle chamber", "ball", "bearing steel", 7.81, 65.4, 0.511, [66.0, 0.0, 0.6]),
    ]
    tree: dict[str, Any] = {
        "format": 1,
        "run": "7f3a9c52",
        "tool": {"name": "meshlure", "version": "0.1.0"},
        "name": "Alder pool minnow",
        "inputs": [
            {"piece": "body", "file": "body.stl", "sha256": "9f" * 32, "triangles": 18422, "length_unit": "mm"},
            {"piece": "belly weight", "file": "belly.stl", "sha256": "1c" * 32, "triangles": 1204, "length_unit": "mm"},
        ],
        "files": ["results.json", "report.html"],
        "frame": {"nose": NOSE, "back": BACK, "side": SIDE},
        "findings": [
            {
                "code": "sticks-out",
                "level": "warning",
                "piece": "lip",
                "message": "151 mm3 of lip is outside the body",
                "count": None,
                "where_mm": [[-3.1, 0.0, -11.4]],
                "advice": "Wanted for a lip: set lip = true on it and this is no warning.",
            },
            {
                "code": "welded",
                "level": "note",
                "piece": "body",
                "message": "2 triangles collapsed when equal corners were welded",
                "count": 2,
                "where_mm": [[0.0, 0.0, 0.0], [92.0, 0.0, 0.0]],
                "advice": "",
            },
        ],
        "size": {"length_mm": LENGTH, "depth_mm": 19.0, "width_mm": 13.0},
        "facets": [
            {"piece": "body", "volume_mm3": 11240.0, "deficit_mm3": 9.4, "deficit_g": 0.0068},
            {"piece": "belly weight", "volume_mm3": 212.0, "deficit_mm3": 0.6, "deficit_g": 0.0068},
        ],
        "pieces": pieces,
        "hardware": [
            {
                "name": "front treble",
                "mass_g": 0.75,
                "at_mm": [31.0, 0.0, -9.8],
                "hangs": True,
                "item": "treble 6",
                "displaced_mm3": 95.5,
            },
            {
                "name": "rear treble",
                "mass_g": 0.75,
                "at_mm": [94.0, 0.0, 0.0],
                "hangs": True,
                "item": "treble 6",
                "displaced_mm3": 95.5,
            },
        ],
        "line": {"tie_mm": [-2.5, 0.0, 0.0]},
        "skin_mm2": 3720.0,
        "weight": {
            "mass_g": 13.2264,
            "centre_mm": [42.85, 0.01, -1.62],
            "from_nose_mm": 42.85,
            "inertia_g_mm2": [[402.0, 0.5, -310.0], [0.5, 7810.0, 0.1], [-310.0, 0.1, 7640.0]],
            "principal_g_mm2": [388.7, 7653.3, 7810.0],
            "principal_axes": [[0.999, 0.0, 0.043], [-0.043, 0.0, 0.999], [0.0, 1.0, 0.0]],
            "gyration_mm": [5.42, 24.05, 24.3],
        },
        "buoyancy": {
            "water": {"density_kg_m3": 998.6, "viscosity_m2_s": 1.053e-6, "temperature_c": 18.0, "salinity_g_kg": 0.0},
            "displaced_mm3": 14470.0,
            "centre_mm": [41.9, 0.0, -0.72],
            "reserve_g": 1.2233,
            "reserve_low_g": 0.91,
            "reserve_high_g": 1.54,
            "suspends_within_g": 0.07,
            "doubts": [
                {"what": "density of the body", "low_g": 0.28, "high_g": 0.28},
                {"what": "mass of front treble", "low_g": 0.14, "high_g": 0.16},
            ],
            "state": "floats",
            "verdict": "Floats: reserve +1.22 g, between +0.91 and +1.54 g.",
            "bulk_density_g_cm3": 0.914,
        },
        "budget": budget(),
        "smooth": {"mass_g": 13.24, "displaced_mm3": 14480.0, "reserve_g": 1.22},
        "waters": [
            {
                "name": f"{kind}, {t} °C",
                "temperature_c": float(t),
                "salinity_g_kg": salt,
                "density_kg_m3": base - 0.006 * (t - 4) ** 2,
                "reserve_g": 14.470 * (base - 0.006 * (t - 4) ** 2) / 1000 - 13.2264,
                "state": "floats",
            }
            for kind, salt, base in (("fresh water", 0.0, 1000.0), ("sea water", 35.0, 1027.8))
            for t in (4, 10, 15, 20, 25, 30)
        ],
        "balls": [
            {
                "chamber": "rattle chamber",
                "end": "nose",
                "mass_g": 13.2264,
                "centre_mm": [42.85 - 12 * 0.511 / 13.2264, 0.01, -1.62],
                "reserve_g": 1.2233,
                "nose_up_deg": -6.2,
                "lean_deg": 0.1,
                "stays": False,
            },
            {
                "chamber": "rattle chamber",
                "end": "tail",
                "mass_g": 13.2264,
                "centre_mm": [42.85, 0.01, -1.62],
                "reserve_g": 1.2233,
                "nose_up_deg": -3.9,
                "lean_deg": 0.1,
                "stays": True,
            },
        ],
        "postures": [
            {
                "kind": "floating",
                "name": "floats, back up",
                "words": "It floats back up, nose 4° down, and rights itself from any lean below 118°.",
                "upright": True,
                "up": turned(-3.9, 0.1),
                "nose_up_deg": -3.9,
                "lean_deg": 0.1,
                "free": None,
                "waterline_mm": 4.05,
                "submerged_share": 0.914,
                "waterplane_mm2": 612.0,
                "metacentric_mm": {"fore_aft": 26.4, "sideways": 2.31, "least": 2.31},
                "share": 0.81,
                "barrier_g_mm": 41.0,
                "sensitivity": {
                    "deg_per_0_1g_10mm": 0.17,
                    "deg_per_mm": 2.2,
                    "g_per_mm": 0.61,
                    "lean_deg_per_0_1g_10mm": 1.9,
                    "lean_deg_per_mm": 24.1,
                },
                "balls": {"rattle chamber": "tail"},
                "dry": ["rear treble"],
                "centre_mm": [42.85, 0.01, -1.62],
                "buoyancy_centre_mm": [42.62, 0.0, -1.51],
                "rounded": False,
            },
            {
                "kind": "floating",
                "name": "floats, on its side",
                "words": "It also rests on its right side, nose 20° up.",
                "upright": False,
                "up": turned(20.0, 95.0),
                "nose_up_deg": 20.0,
                "lean_deg": 95.0,
                "free": None,
                "waterline_mm": 3.1,
                "submerged_share": 0.914,
                "waterplane_mm2": 540.0,
                "metacentric_mm": {"fore_aft": 17.0, "sideways": 0.3, "least": 0.28},
                "share": 0.19,
                "barrier_g_mm": 3.0,
                "sensitivity": {
                    "deg_per_0_1g_10mm": 0.3,
                    "deg_per_mm": 3.3,
                    "g_per_mm": 0.54,
                    "lean_deg_per_0_1g_10mm": 15.0,
                    "lean_deg_per_mm": 190.0,
                },
                "balls": {"rattle chamber": "nose"},
                "dry": [],
                "centre_mm": [42.4, 0.01, -1.62],
                "buoyancy_centre_mm": [42.5, 0.0, -1.9],
                "rounded": True,
            },
        ],
        "righting": [
            {
                "plane": "sideways",
                "posture": 0,
                "heel_deg": heel,
                "arm_mm": [2.1 * math.sin(math.radians(h)) + 0.6 * math.sin(math.radians(2 * h)) for h in heel],
            },
            {
                "plane": "fore_aft",
                "posture": 0,
                "heel_deg": [h - 90 for h in heel],
                "arm_mm": [14 * math.sin(math.radians(h - 90)) for h in heel],
            },
        ],
        "areas": [
            {"name": "side", "axis": SIDE, "area_mm2": 1290.0, "centre_mm": [41.0, 0.0, -0.9], "perimeter_mm": 205.0},
            {"name": "top", "axis": BACK, "area_mm2": 880.0, "centre_mm": [41.5, 0.0, 0.0], "perimeter_mm": 196.0},
            {"name": "front", "axis": NOSE, "area_mm2": 205.0, "centre_mm": [0.0, 0.0, -2.0], "perimeter_mm": 66.0},
            {
                "name": "axis",
                "axis": [0.267, 0.535, 0.802],
                "area_mm2": 1012.0,
                "centre_mm": [41.2, 0.1, -0.4],
                "perimeter_mm": 199.0,
            },
        ],
        "rose": rose(),
        "stations": {
            "from_nose_mm": stations.tolist(),
            "area_mm2": area.tolist(),
            "perimeter_mm": (math.pi * (height + width) / 2).tolist(),
            "width_mm": width.tolist(),
            "depth_mm": height.tolist(),
        },
        "form": {
            "fineness": 5.85,
            "surface_mm2": 3980.0,
            "sphericity": 0.72,
            "nose_first": {"leading_bluffness": 0.021, "trailing_bluffness": 0.31, "cup": 0.0},
            "tail_first": {"leading_bluffness": 0.004, "trailing_bluffness": 0.66, "cup": 0.12},
        },
        "drag": drags(),
        "flight": swaying_flight(),
        "sinking": rising(),
        "cast": {
            "speed_m_s": 25.0,
            "angle_deg": 40.0,
            "height_m": 2.0,
            "line_pull_n": 0.03,
            "wind_m_s": -3.0,
            "assumed": ["speed", "line_pull"],
        },
        "retrieve": {"speeds_m_s": [0.5, 1.0], "assumed": ["speeds"]},
        "assumptions": [
            {
                "what": "mass of treble 6",
                "value": "0.75 g (0.55 to 0.95 g)",
                "source": "common practice, no source",
                "assumed": True,
            },
            {"what": "density of lead", "value": "11.34 g/cm3", "source": "handbook value", "assumed": False},
            {
                "what": "coat thickness",
                "value": "0.15 mm, give or take 0.05 mm",
                "source": "bait file",
                "assumed": False,
            },
        ],
        "cautions": [
            {
                "trigger": "lead",
                "text": "Lead is poisonous. Many places restrict it in tackle; check the rules where you fish.",
            },
            {"trigger": "hooks fitted", "text": "Fit hooks last and cover the points."},
        ],
        "measured": None,
        "changes": [],
        "limits": [
            {"what": "reserve, g", "low": 0.8, "high": 1.6, "value": 1.2233, "met": True},
            {"what": "nose up, degrees", "low": -3.0, "high": 0.0, "value": -3.9, "met": False},
        ],
        "timings_s": {
            "reading": 0.02,
            "soundness": 0.05,
            "weight": 0.11,
            "posture": 0.21,
            "budget": 0.2,
            "measured": 0.0,
            "areas": 0.06,
            "drag": 0.02,
            "flight": 0.3,
            "sinking": 0.1,
            "page": 0.0,
            "mould": 0.0,
        },
    }
    tree["readiness"] = readiness(tree, None)
    return tree
