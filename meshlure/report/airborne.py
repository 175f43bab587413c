"""Charts of the flight: turning moment over the angle, the paths through the air, distance over the launch angle."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from typing import Any

import numpy as np
from numpy.typing import NDArray

from meshlure.report import figures as ink
from meshlure.report.charts import LINES, WIDE
from meshlure.report.figures import Picture, blank, picture
from meshlure.report.pen import halo
from meshlure.report.rulings import Ticks, margins, ruled
from meshlure.report.wording import fixed

Floats = NDArray[np.float64]
Flight = Mapping[str, Any]

SEEN = {"pitch": "pitch, nose up and down", "yaw": "yaw, nose left and right"}
TOWARDS = {"pitch": ("belly", "back"), "yaw": ("right", "left")}
"""Where the bait moves at negative and at positive angles."""
NAMES = {"bait": "this bait", "reversed": "reversed", "sphere": "sphere"}
LOW = 36.0
"""mm of paper that the picture of the paths is high at least."""
LEAST = 3
"""Points that make a path; fewer only tell where it ends."""


def from_leading(curve: Mapping[str, Any], leads: str) -> tuple[Floats, Floats]:
    """Return angles from the leading end, degrees, ascending from -180 to 180, and the moments there, N mm.

    Notes
    -----
    The tree counts from nose first. A moment that lessens that angle lessens the one from tail first too.
    """
    angle, moment = np.asarray(curve["angle_deg"], dtype=float), np.asarray(curve["moment_n_mm"], dtype=float)
    if leads == "tail":
        angle = np.where(angle < 0, angle + 180, angle - 180)
    # The turn's two ends are one direction: kept at both ends of the chart, and once where they meet in its middle.
    angle, kept = np.unique(np.round(angle, 6), return_index=True)
    moment = moment[kept]
    if angle[0] == -180 and angle[-1] < 180:
        angle, moment = np.append(angle, 180.0), np.append(moment, moment[0])
    elif angle[0] > -180 and angle[-1] == 180:
        angle, moment = np.insert(angle, 0, -180.0), np.insert(moment, 0, moment[-1])
    return angle, moment


def moments(flight: Flight, plane: str) -> Picture | None:
    """Return the turning moment over the angle from the leading end in one plane, its trims marked, N mm."""
    curve = next((curve for curve in flight["moments"] if curve["plane"] == plane), None)
    if curve is None:
        return None
    angle, moment = from_leading(curve, flight["leads"])
    steady, sways = flight["limits"]["steady_deg"], flight["limits"]["sways_deg"]
    reach = 1.45 * max(float(np.abs(moment).max()), 1e-9)
    figure = blank(WIDE, 58)
    axes = margins(figure, 14, 10, 3, 10)
    axes.set(xlim=(-180, 180), ylim=(-reach, reach))
    axes.axvspan(-steady, steady, color=ink.SHALLOW, linewidth=0)
    for limit in (-sways, sways):
        axes.axvline(limit, color=ink.PENCIL, linewidth=0.7, linestyle=(0, (1, 1.5)))
    axes.text(0, 0.96 * reach, "steady", ha="center", va="top", fontsize=6.2)
    for side in (-1, 1):
        middle = side * (steady + sways) / 2
        axes.text(middle, 0.84 * reach, "sways", ha="center", va="top", fontsize=6.2)
    axes.axhline(0, color=ink.PENCIL, linewidth=0.8)
    axes.plot(angle, moment, **LINES[0])
    trims = [trim for trim in flight["trims"] if trim["plane"] == plane]
    for stable, face, label in (
        (True, ink.INK, "stable trim: it returns"),
        (False, "white", "unstable: it turns away"),
    ):
        places = [trim["from_leading_deg"] for trim in trims if trim["stable"] is stable]
        axes.plot(places, [0.0] * len(places), "o", markersize=5, markerfacecolor=face, markeredgecolor=ink.INK,
                  label=label, clip_on=False, zorder=5)  # fmt: skip
        for place in places if stable else ():
            # There the line rises through zero: below it to the right is room.
            axes.text(
                place + 5, -0.05 * reach, f"{fixed(place, 0)}°", ha="left", va="top", fontsize=6.8, path_effects=halo()
            )
    low, high = TOWARDS[plane]
    axes.set(ylabel="moment, N·mm", xlabel=f"{low} ←  ° from {flight['leads']} first, {SEEN[plane]}  → {high}")
    axes.xaxis.label.set_fontsize(6.8)
    ruled(axes, Ticks(range(-180, 181, 60)))
    axes.legend(
        loc="lower center", bbox_to_anchor=(0.5, 1.0), ncols=2, fontsize=6.8, handlelength=1.2, borderaxespad=0.2
    )
    stable_words = ", ".join(f"{fixed(t['from_leading_deg'], 0)}°" for t in trims if t["stable"]) or "none"
    return picture(
        figure,
        f"Turning moment over the angle from {flight['leads']} first, {SEEN[plane]}; stable trims: {stable_words}.",
    )


def reaches(flight: Flight) -> dict[str, float]:
    """Return how far each path reaches, the bait's own being 1."""
    ratios = flight["ratios"]
    return {"bait": 1.0, "reversed": 1 / ratios["reversed"], "sphere": 1 / ratios["sphere"]}


def paths(flight: Flight) -> Picture:
    """Return the paths of the bait, of itself reversed and of a sphere thrown alike, m over m."""
    far = 1.03 * max(max(path["x_m"]) for path in flight["paths"])
    high = 1.08 * max(max(path["y_m"]) for path in flight["paths"])
    # One scale along and up, so that steepness looks as it is: the paper's height follows from the paths.
    across, tall = WIDE - 15.0, 62.0
    scale = min(across / far, tall / high)
    figure = blank(WIDE, max(scale * high, LOW) + 16.0)
    axes = margins(figure, 12, 10, 3, 6)
    axes.set(xlim=(0, across / scale), ylim=(0, max(high, LOW / scale)))
    share = reaches(flight)
    looks = dict(zip(NAMES, LINES, strict=False))
    for path in flight["paths"]:
        x, y, name = path["x_m"], path["y_m"], path["name"]
        label = f"{NAMES[name]} {fixed(share[name], 2)}"
        colour = looks[name]["color"]
        if len(x) < LEAST:
            axes.plot(
                x[-1:], [0.0], marker="^", markersize=5, linestyle="none", color=colour, label=label, clip_on=False
            )
            continue
        axes.plot(x, y, label=label, zorder=3 if name == "reversed" else 2, **looks[name])
    axes.spines["bottom"].set(color=ink.WATER, linewidth=1.2)
    axes.set(xlabel="m from the rod", ylabel="m above the water")
    ruled(axes)
    axes.legend(
        loc="lower center",
        bbox_to_anchor=(0.46, 0.99),
        ncols=3,
        fontsize=6.6,
        handlelength=2.6,
        columnspacing=1.0,
        handletextpad=0.5,
        borderaxespad=0.1,
    )
    told = ", ".join(f"{NAMES[name]} {fixed(value, 2)}" for name, value in share.items())
    return picture(figure, f"Paths through the air, one scale both ways; reach with this bait's as 1: {told}.")


def launch(flight: Flight, cast: Mapping[str, Any]) -> Picture:
    """Return the distance over the launch angle, the stated throw marked, m over degrees."""
    angle, distance = flight["launch"]["angle_deg"], flight["launch"]["distance_m"]
    figure = blank(WIDE, 52)
    axes = margins(figure, 12, 10, 3, 6)
    axes.plot(angle, distance, **LINES[0])
    thrown = f"as thrown, {fixed(cast['angle_deg'], 0)}°"
    look: dict[str, Any] = {"color": ink.INK, "markersize": 5, "markeredgecolor": "white"}
    axes.plot([cast["angle_deg"]], [flight["distance_m"]], "D", label=thrown, **look)
    axes.legend(loc="lower center", bbox_to_anchor=(0.5, 0.99), fontsize=7, borderaxespad=0.1)
    axes.set(xlabel="launch angle, ° above the horizontal", ylabel="distance, m", ylim=(0, None))
    ruled(axes)
    best = angle[int(np.argmax(distance))]
    return picture(figure, f"Distance over the launch angle, greatest near {fixed(best, 0)}°; numbers in the table.")


def rows_every(values: Sequence[float], step: float) -> list[int]:
    """Return the indices of the values that are whole multiples of a step, or all where none is."""
    chosen = [index for index, value in enumerate(values) if abs(value / step - round(value / step)) < 1e-6]
    return chosen or list(range(len(values)))
