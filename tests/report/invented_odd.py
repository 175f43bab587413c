"""Odd baits, invented: the minnow drawn out or squeezed, with more in it than there is room to name, or restless."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace
from typing import Any

import numpy as np
from invented_baits import minnow

from meshlure.results import DrawnPiece, Study

ALONG = {"length_mm": 0, "from_nose_mm": 0, "width_mm": 1, "depth_mm": 2, "waterline_mm": 2}
"""Which way a length of the tree runs."""


def stretched(times: Sequence[float]) -> Study:
    """The minnow so many times as long, wide and deep, its outlines and all places in it with it."""

    def grown(value: Any, key: str = "") -> Any:
        if isinstance(value, dict):
            return {name: grown(held, name) for name, held in value.items()}
        if isinstance(value, list):
            if key.endswith("_mm") and len(value) == 3 and all(isinstance(part, int | float) for part in value):
                return [part * by for part, by in zip(value, times, strict=True)]
            return [grown(held, key) for held in value]
        if isinstance(value, int | float) and key in ALONG:
            return value * times[ALONG[key]]
        return value

    study = minnow()
    views = []
    for view in study.views:
        by = np.array([np.abs(view.right) @ times, np.abs(view.up) @ times])
        pieces = tuple(replace(piece, rings=tuple(ring * by for ring in piece.rings)) for piece in view.pieces)
        views.append(replace(view, shift=view.shift * float(by[0]), pieces=pieces))
    return replace(study, results=grown(dict(study.results)), views=tuple(views))


def crowded(inserts: int = 14, hooks: int = 16) -> Study:
    """The minnow with a row of small weights in its belly and hardware along its back."""
    study = minnow()
    results = dict(study.results)
    places = [(12.0 + 70.0 * k / (inserts - 1), -5.0 + 2.0 * (k % 3)) for k in range(inserts)]
    row = next(row for row in results["pieces"] if row["name"] == "belly weight")
    results["pieces"] = [
        *results["pieces"],
        *({**row, "name": f"shot number {k}", "centre_mm": [x, 0.0, z]} for k, (x, z) in enumerate(places)),
    ]
    hook = results["hardware"][0]
    results["hardware"] = [
        {**hook, "name": f"eye of hanger {k}", "at_mm": [4.0 + 5.6 * k, 0.0, 6.0 - (k % 2)]} for k in range(hooks)
    ]
    turn = np.linspace(0, 2 * np.pi, 24, endpoint=False)
    circle = np.column_stack([np.cos(turn), np.sin(turn)])
    views = []
    for view in study.views:
        shots = tuple(
            DrawnPiece(f"shot number {k}", "insert", (1.4 * circle + view.place([x, 0.0, z]),))
            for k, (x, z) in enumerate(places)
        )
        views.append(replace(view, pieces=(*view.pieces, *shots)))
    return replace(study, results=results, views=tuple(views))


def restless(postures: int = 7) -> Study:
    """The minnow with so many postures, each with its righting curves."""
    study = minnow()
    results = dict(study.results)
    curves = {curve["plane"]: curve for curve in results["righting"]}
    results["postures"] = (results["postures"] * postures)[:postures]
    results["righting"] = [
        {**curve, "posture": number, "arm_mm": [None if arm is None else arm + number for arm in curve["arm_mm"]]}
        for number in range(postures)
        for curve in curves.values()
    ]
    return replace(study, results=results)
