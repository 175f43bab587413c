"""The rose: how large the bait looks from every direction within one plane."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

import numpy as np
from numpy.typing import NDArray

from meshlure.report import figures as ink
from meshlure.report.figures import Picture, blank, blank_axes, picture
from meshlure.report.pen import strokes
from meshlure.report.wording import fixed, square_millimetres

Floats = NDArray[np.float64]

SIDE = 62.0
"""mm of paper, both ways."""
MIDDLE = np.array([31.0, 26.6])
REACH = 20.5
"""mm from the middle to the rim."""
NAMES = (("nose", "tail"), ("back", "belly"), ("side", ""))
"""Of the ends of the bait's own directions."""


def rose(table: Mapping[str, Any], frame: Mapping[str, Any], plane: str) -> Picture | None:
    """Return the silhouette's area over the direction of view within one plane, mm2."""
    planes = table.get("plane") or [""] * len(table["axis"])
    chosen = [index for index, name in enumerate(planes) if name == plane]
    if len(chosen) < 3:
        return None
    views = (
        np.array([table["axis"][index] for index in chosen])
        @ np.array([frame[key] for key in ("nose", "back", "side")]).T
    )
    area = np.array([table["area_mm2"][index] for index in chosen])
    across = int(np.argmin(np.abs(views).max(axis=0)))
    first, second = [axis for axis in range(3) if axis != across]
    angle = np.arctan2(views[:, second], views[:, first])
    # Seen from behind a silhouette is its own mirror image: the half not measured is the half that was.
    angle, area = np.concatenate([angle, angle + np.pi]), np.concatenate([area, area])
    angle, kept = np.unique(np.round(np.mod(angle, 2 * np.pi), 6), return_index=True)
    angle, area = np.append(angle, angle[0] + 2 * np.pi), np.append(area[kept], area[kept[0]])
    rings = _round_steps(float(area.max()))
    scale = REACH / max(float(area.max()) * 1.05, rings[-1])
    # As in the drawings: nose to the left and back up, seen from the front its left on the right.
    start, way = (np.pi if first == 0 else np.pi / 2), (1 if across == 1 else -1)

    def at(turn: Any, distance: Any) -> Floats:
        way_round = start + way * np.asarray(turn)
        ahead = np.stack([np.cos(way_round), np.sin(way_round)], axis=-1)
        return np.asarray(MIDDLE + ahead * np.asarray(distance)[..., None], dtype=np.float64)

    figure = blank(SIDE, SIDE)
    axes: Any = blank_axes(figure)
    axes.set(xlim=(0, SIDE), ylim=(0, SIDE))
    axes.axis("off")
    axes.fill(*at(angle, area * scale).T, color=ink.SHALLOW, zorder=1)
    spokes = [at([turn, turn], [0.0, REACH]) for turn in np.radians(range(0, 360, 45))]
    round_about = np.radians(np.arange(0, 361, 4))
    circles = [at(round_about, np.full(len(round_about), level * scale)) for level in rings]
    strokes(axes, spokes, ink.GRID_FIVE, 0.5, 0.5)
    for circle, colour in ((each, ink.GRID_FIVE) for each in circles):
        axes.plot(*circle.T, color=colour, linewidth=0.5, zorder=0.6)
    axes.plot(*at(round_about, np.full(len(round_about), REACH)).T, color=ink.PENCIL, linewidth=0.6, zorder=0.7)
    axes.plot(*at(angle, area * scale).T, color=ink.INK, linestyle="solid", zorder=3)
    words = {0: NAMES[first][0], 180: NAMES[first][1] or "right", 90: NAMES[second][0], 270: NAMES[second][1]}
    if second == 2:
        words.update({90: "left", 270: "right"})
    for turn, word in words.items():
        end = at(np.radians(turn), REACH + 1.4)
        side = float(end[0] - MIDDLE[0])
        align = "center" if abs(side) < 1 else "left" if side > 0 else "right"
        upright = "center_baseline" if align != "center" else "bottom" if end[1] > MIDDLE[1] else "top"
        axes.text(*end, word, ha=align, va=upright, zorder=4)
    for level in rings:
        place = at(np.radians(67.5), level * scale)
        axes.text(*place, fixed(level, 0), fontsize=6, ha="center", va="center", color=ink.PENCIL, zorder=4)
    for height, line in ((SIDE - 1.8, "silhouette area, mm²"), (SIDE - 4.8, rose_words(across))):
        axes.text(SIDE / 2, height, line, ha="center", va="center", fontsize=7)
    most, least = int(np.argmax(area)), int(np.argmin(area))
    ends = f"from {square_millimetres(area[least])} to {square_millimetres(area[most])}"
    return picture(figure, f"Silhouette area by direction of view, {rose_words(across)}: {ends}; numbers in the table.")


def rose_words(across: int) -> str:
    """Return what a plane of directions of view means to someone who holds the bait, by the axis that stands on it."""
    return ("turning it about its length", "walking around it", "over it from nose to tail")[across]


def _round_steps(most: float) -> list[float]:
    """Return two or three round areas up to the greatest."""
    decade = 10.0 ** np.floor(np.log10(max(most, 1e-9)))
    step = next(step for step in (1, 2, 5, 10) if most / (step * decade / 2) < 4) * decade / 2
    return [step * count for count in range(1, int(most / step + 1e-9) + 1)] or [most]
