"""Invented baits for the page: trees and outlines that keep the contract of results.json but measure nothing real."""

from __future__ import annotations

import copy
from typing import Any

from invented_flights import fluttering, tumbling_flight
from invented_minnow import minnow_results, turned
from invented_outlines import minnow_views

from meshlure.results import DrawnPiece, Study, View
from meshlure.results.readiness import readiness

__all__ = ["hostile", "minnow", "minnow_results", "minnow_views", "sinker", "stick"]


def minnow() -> Study:
    """The invented floating minnow."""
    return _study(minnow_results(), minnow_views())


def _study(results: dict[str, Any], views: tuple[View, ...]) -> Study:
    """A study whose answer fits what was changed in its tree."""
    results["readiness"] = readiness(results, None)
    return Study(results, views)


def sinker() -> Study:
    """Sinks and hangs with no attitude of its own; no balls, line, coat, hardware, limits, findings or cautions."""
    results = minnow_results()
    results["name"] = "Stone"
    results["buoyancy"].update(
        reserve_g=-6.41,
        reserve_low_g=-6.9,
        reserve_high_g=-5.9,
        state="sinks",
        verdict="Sinks: reserve −6.41 g, between −6.90 and −5.90 g.",
    )
    for row in results["waters"]:
        row.update(reserve_g=row["reserve_g"] - 7.6, state="sinks")
    results["postures"] = [
        {
            "kind": "hanging",
            "name": "hangs any way",
            "words": "Hanging under water it has no preferred attitude.",
            "upright": None,
            "up": None,
            "nose_up_deg": None,
            "lean_deg": None,
            "free": "both",
            "waterline_mm": None,
            "submerged_share": 1.0,
            "waterplane_mm2": None,
            "metacentric_mm": {"fore_aft": None, "sideways": None, "least": 0.0},
            "share": 1.0,
            "barrier_g_mm": None,
            "sensitivity": dict.fromkeys(
                (
                    "deg_per_0_1g_10mm",
                    "deg_per_mm",
                    "g_per_mm",
                    "lean_deg_per_0_1g_10mm",
                    "lean_deg_per_mm",
                )
            ),
            "balls": None,
            "dry": [],
            "centre_mm": [42.8, 0.0, -0.7],
            "buoyancy_centre_mm": [42.8, 0.0, -0.7],
            "rounded": False,
        },
    ]
    results["righting"] = []
    results["pieces"] = [row for row in results["pieces"] if row["role"] in ("body", "insert")]
    for key in ("hardware", "balls", "limits", "findings", "cautions", "assumptions"):
        results[key] = []
    results["line"] = None
    results.update(flight=tumbling_flight(), sinking=fluttering())
    views = tuple(
        View(v.name, v.right, v.up, v.shift, tuple(p for p in v.pieces if p.role in ("skin", "insert")))
        for v in minnow_views()
    )
    return _study(results, views)


def stick() -> Study:
    """A round stick that floats on end or rolls freely: neutral lean, no lean where the nose stands up."""
    results = minnow_results()
    results["name"] = "Round stick"
    first = results["postures"][0]
    first.update(
        name="floats level, free to roll",
        words="It floats level and rolls freely: nothing holds its back up.",
        lean_deg=None,
        free="lean",
        up=turned(0.4, 0.0),
        nose_up_deg=0.4,
        metacentric_mm={"fore_aft": 40.0, "sideways": 0.0, "least": 0.0},
        sensitivity={
            "deg_per_0_1g_10mm": 0.1,
            "deg_per_mm": 1.4,
            "g_per_mm": 0.9,
            "lean_deg_per_0_1g_10mm": None,
            "lean_deg_per_mm": None,
        },
    )
    results["postures"][1].update(
        name="stands tail down",
        words="It also stands on its tail.",
        up=[-1.0, 0.0, 0.0],
        nose_up_deg=90.0,
        lean_deg=None,
        metacentric_mm={"fore_aft": None, "sideways": None, "least": 0.4},
    )
    return _study(results, minnow_views())


HOSTILE = (
    "<script>alert(1)</script>\" onerror='x' \x00\x1b[31m\u202egnp.exe\ud800 $\\frac{1}{0}$ {{ 7*7 }} "
    + "Sehrlangeswort" * 12
)


def hostile() -> Study:
    """Names that try to break the page, eighty findings, forty pieces of hardware at nearly one place."""
    results = copy.deepcopy(minnow_results())
    results["name"] = HOSTILE
    results["findings"] = [
        {
            "code": "open-edges",
            "level": level,
            "piece": HOSTILE,
            "message": f"{HOSTILE} number {i}",
            "count": i,
            "where_mm": [[float(i), 0.0, 0.0]] * 10,
            "advice": HOSTILE,
        }
        for i, level in enumerate(("fault", "warning", "note", "note") * 20)
    ]
    results["hardware"] = [
        {
            "name": f"{HOSTILE} {i}",
            "mass_g": 0.1,
            "at_mm": [40.0 + 0.01 * i, 0.0, -9.0],
            "hangs": True,
            "item": HOSTILE,
            "displaced_mm3": 0.0,
        }
        for i in range(40)
    ]
    results["pieces"] = [
        {**row, "name": HOSTILE if row["name"] == "belly weight" else row["name"]} for row in results["pieces"]
    ]
    results["assumptions"].append(
        {"what": HOSTILE, "value": HOSTILE, "source": "https://example.invalid/x", "assumed": True}
    )
    results["buoyancy"]["verdict"] = HOSTILE
    views = tuple(
        View(
            v.name,
            v.right,
            v.up,
            v.shift,
            tuple(DrawnPiece(HOSTILE, p.role, p.rings) if p.name == "belly weight" else p for p in v.pieces),
        )
        for v in minnow_views()
    )
    return _study(results, views)
