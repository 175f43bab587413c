"""An invented error budget for the page; it keeps the contract of results.json and measures nothing real."""

from __future__ import annotations

from typing import Any

_ENDS = ("nose_up_low_deg", "nose_up_high_deg", "lean_low_deg", "lean_high_deg")


def budget() -> dict[str, Any]:
    """The budget of the invented minnow, which floats."""
    return {
        "rows": [
            _row("size of body and seats, inserts and hooks as they are", "+1 %", 0.17, 1.2, 0.0),
            _row("every hook one size up", "+0.70 g", -0.61, None, None),
            _row("an air bubble on 'rear treble'", "5 mm", 0.07, -2.9, 0.1),
        ],
        "doubts": [
            _doubt("density of the body", 0.28, 0.28, 0.9),
            _doubt("mass of front treble", 0.14, 0.16, 0.4),
            _doubt("place of belly weight, fore-aft", 0.0, 0.0, 0.6),
        ],
        "band": {
            "reserve_low_g": 0.91,
            "reserve_high_g": 1.54,
            "nose_up_low_deg": -5.1,
            "nose_up_high_deg": -2.7,
            "lean_low_deg": -1.2,
            "lean_high_deg": 1.2,
        },
        "monte_carlo": {
            "draws": 10000,
            "seed": 1,
            "deviations": 2.0,
            "percent": [2.5, 16.0, 50.0, 84.0, 97.5],
            "reserve_g": [0.91, 1.06, 1.22, 1.38, 1.54],
            "nose_up_deg": [-5.1, -4.5, -3.9, -3.3, -2.7],
            "lean_deg": None,
            "floats_share": 0.998,
            "suspends_share": 0.002,
            "sinks_share": 0.0,
            "left_share": 0.0,
            "limits": [{"what": "reserve", "share": 0.97}, {"what": "nose up", "share": None}],
            "pass_share": None,
        },
        "miss_deg": 0.03,
        "looks": 19,
    }


def _row(what: str, change: str, reserve: float, nose: float | None, lean: float | None) -> dict[str, Any]:
    turns = {"nose_up_deg": nose, "lean_deg": lean}
    return {"what": what, "change": change, "reserve_g": reserve, "state": "floats", **turns}


def _doubt(what: str, low: float, high: float, turn: float) -> dict[str, Any]:
    return {"what": what, "reserve_low_g": low, "reserve_high_g": high, **dict.fromkeys(_ENDS, turn)}
