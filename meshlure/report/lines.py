"""Lines of several baits in one picture: each told apart without colour, by dash, weight and mark."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any, Final

from meshlure.report import figures as ink

if TYPE_CHECKING:
    from matplotlib.axes import Axes

LOOKS: Final[tuple[dict[str, Any], ...]] = (
    {"linestyle": "solid", "color": ink.INK, "linewidth": 1.5},
    {"linestyle": (0, (5, 2)), "color": ink.CLAY, "linewidth": 1.2},
    {"linestyle": (0, (1, 1.4)), "color": ink.WATER, "linewidth": 1.6},
    {"linestyle": (0, (6, 1.5, 1, 1.5)), "color": ink.MOSS, "linewidth": 1.2},
    {"linestyle": "solid", "color": ink.CLAY, "linewidth": 0.7, "marker": "o"},
    {"linestyle": (0, (5, 2)), "color": ink.WATER, "linewidth": 0.7, "marker": "s"},
    {"linestyle": (0, (1, 1.4)), "color": ink.MOSS, "linewidth": 1.0, "marker": "^"},
    {"linestyle": (0, (6, 1.5, 1, 1.5)), "color": ink.INK, "linewidth": 0.7, "marker": "D"},
)
"""As many as baits are compared on one page."""

WORDS: Final = (
    "solid",
    "dashed",
    "dotted",
    "dash and dot",
    "thin with rings",
    "dashed with squares",
    "dotted with triangles",
    "dash and dot with lozenges",
)
"""The same in words, for alt texts."""


def look(number: int, marks: float = 0.09) -> dict[str, Any]:
    """Return how a bait's line is drawn.

    Parameters
    ----------
    number : int
        Of the bait, from 0.
    marks : float
        Distance between its marks, as a share of the axes' diagonal.
    """
    found = dict(LOOKS[number])
    if "marker" in found:
        found |= {"markersize": 3.2, "markerfacecolor": "white", "markeredgewidth": 0.7}
        # Every bait's marks begin elsewhere, so that they do not cover each other where lines run together.
        found["markevery"] = (marks * number / len(LOOKS), marks)
    return found


def sample(axes: Axes, x: float, y: float, wide: float, number: int) -> None:
    """Draw a piece of a bait's line, for a key."""
    found = look(number)
    found.pop("markevery", None)
    axes.plot([x, x + wide / 2, x + wide], [y, y, y], **found)
