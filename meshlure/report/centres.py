"""The lettered rings: where gravity, buoyancy and the outline's area have their centres in a drawing."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

import numpy as np
from numpy.typing import NDArray

from meshlure.report.figures import INK, POINTS_PER_MM
from meshlure.report.layout import RAIL, Layout
from meshlure.report.pen import halo

if TYPE_CHECKING:
    from matplotlib.axes import Axes

Floats = NDArray[np.float64]

RADII = {"G": 1.5, "B": 1.05, "A": 0.62}
"""mm; each its own, so that rings at one place still show as three."""


def draw_centres(axes: Axes, paper: Layout) -> None:
    """Draw the rings and their letters."""
    spots = {"G": np.array(paper.spot(paper.subject.gravity)), "B": np.array(paper.spot(paper.subject.buoyancy))}
    if paper.view.name in paper.subject.area_centres:
        spots["A"] = np.array(paper.spot(paper.subject.area_centres[paper.view.name]))
    for (letter, (x, y)), seat in zip(spots.items(), seats(paper, list(spots.values())), strict=True):
        for colour, weight in (("white", 2.2), (INK, 1.0)):
            axes.plot(
                *(x, y),
                marker="o",
                markersize=2 * RADII[letter] * POINTS_PER_MM,
                markerfacecolor="none",
                markeredgecolor=colour,
                markeredgewidth=weight,
                zorder=8.4 if colour == INK else 8.2,
            )
        look: dict[str, Any] = {"fontsize": 8.2, "fontweight": "bold", "ha": "center", "va": "center"}
        axes.text(*seat, letter, zorder=9, path_effects=halo(), **look)


def seats(paper: Layout, rings: list[Floats]) -> list[tuple[float, float]]:
    """Return where the rings' letters stand: near their ring, off other rings, letters, marks and leaders."""
    low, high = paper.floor - RAIL, paper.roof + RAIL
    stakes = [(p.drop_x, float(paper.origin[1] + p.named.y), high if p.above else low) for p in paper.placed]
    marks = [np.array(paper.spot(place)) for place in paper.subject.spots()]
    found: list[tuple[float, float]] = []
    for centre in rings:
        best, least = (0.0, 0.0), np.inf
        for reach in (3.2, 4.4, 6.0):
            for turn in np.radians([90, 270, 45, 135, 225, 315, 0, 180]):
                seat = centre + reach * np.array([np.cos(turn), np.sin(turn)])
                cost = 0.35 * reach
                cost += sum(_too_near(seat, ring, 3.3) for ring in rings if ring is not centre)
                cost += sum(2 * _too_near(seat, np.array(other), 3.6) for other in found)
                cost += sum(_too_near(seat, mark, 2.8) for mark in marks)
                beside = [x for x, a, b in stakes if min(a, b) - 1.5 < seat[1] < max(a, b) + 1.5]
                cost += sum(max(0.0, 2.0 - abs(float(seat[0]) - x)) for x in beside)
                if cost < least - 1e-9:
                    best, least = (float(seat[0]), float(seat[1])), cost
        found.append(best)
    return found


def _too_near(seat: Floats, other: Floats, room: float) -> float:
    return max(0.0, room - float(np.hypot(*(seat - other))))
