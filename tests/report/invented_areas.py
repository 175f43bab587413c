"""Invented drag and silhouettes, as results.json gives them: nothing in them is worked out for a real shape."""

from __future__ import annotations

import math
from typing import Any

NOSE, BACK, SIDE = [-1.0, 0.0, 0.0], [0.0, 0.0, 1.0], [0.0, -1.0, 0.0]


def _drag(fluid: str, leads: str, layer: str, speed: float, cd: float, density: float, nu: float) -> dict[str, Any]:
    frontal = 205.0
    parts = {
        "friction": 0.25 * cd * frontal,
        "forebody": 0.15 * cd * frontal,
        "base": 0.6 * cd * frontal,
        "tail": 0.0,
        "lip": 38.0,
        "hooks": 21.0,
        "eyes": 4.0,
    }
    area = sum(parts.values())
    return {
        "fluid": fluid,
        "leads": leads,
        "layer": layer,
        "speed_m_s": speed,
        "reynolds_length": speed * 0.092 / nu,
        "reynolds_diameter": speed * 0.016 / nu,
        "cd": cd,
        "cd_low": cd * 0.6,
        "cd_high": cd * 1.6,
        "frontal_mm2": frontal,
        "drag_area_mm2": area,
        "drag_n": 0.5 * density * speed**2 * area * 1e-6,
        "parts": parts,
        "headline": layer == "between",
        "words": f"{leads} first, {layer} layer",
    }


def drags() -> list[dict[str, Any]]:
    rows = []
    for fluid, speeds, density, nu in (("air", [25.0], 1.225, 1.46e-5), ("water", [0.5, 1.0], 998.6, 1.05e-6)):
        for leads, cd in (("nose", 0.24), ("tail", 0.31)):
            for speed in speeds:
                for layer, factor in (("laminar", 1.0), ("tripped", 0.6), ("between", 0.77)):
                    rows.append(_drag(fluid, leads, layer, speed, cd * factor, density, nu))
    return rows


PLANES = {"around": (SIDE, BACK), "level": (NOSE, SIDE), "upright": (NOSE, BACK)}


def rose() -> dict[str, Any]:
    found: dict[str, Any] = {"axis": [], "area_mm2": [], "plane": [], "angle_deg": []}
    for name, ends in PLANES.items():
        for angle in range(0, 180, 10):
            c, s = math.cos(math.radians(angle)), math.sin(math.radians(angle))
            axis = [c * first + s * second for first, second in zip(*ends, strict=True)]
            seen = (205 * axis[0], 1290 * axis[1], 880 * axis[2])
            row = {"axis": axis, "area_mm2": math.hypot(*seen), "plane": name, "angle_deg": float(angle)}
            for key, value in row.items():
                found[key].append(value)
    return found
