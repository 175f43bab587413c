"""Runners: the sprue that the resin goes in by, the vents that the air leaves by, and the seats of pins."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from itertools import pairwise
from typing import Final

import numpy as np

from meshlure.geometry.solids import Solid
from meshlure.geometry.surface import Floats
from meshlure.making.mould.lathe import turned

VENT_DIAMETER: Final = 2e-3
"""m. Vents of 1.5 to 3 mm let air out and are trimmed off easily: common practice, no source."""

FUNNEL: Final = 2.0
"""Diameter of the sprue's mouth over the sprue's own, as far as there is room for it: common practice, no source."""

GATE_DEPTHS: Final = (0.5e-3, 1e-3, 1.5e-3, 2e-3, 3e-3)
"""m inside the body at which its thickness is asked for, to narrow the sprue to it."""

GATE_SHARE: Final = 0.9
"""Share of the body's thickness there that the sprue may take."""

GATE_LEAST: Final = 2e-3
"""m. Resin with microballoons does not run through less: common practice, no source."""

Profile = tuple[tuple[float, float], ...]


@dataclass(frozen=True, eq=False)
class Runner:
    """A round channel in the parting plane, half of it in each board's half.

    Attributes
    ----------
    kind : str
        sprue, vent or pin.
    at : (2,) array, m
        Where it leaves the body's skin.
    direction : (2,) array
        Unit vector outward.
    diameter : float, m
        Where it is neither gate nor funnel.
    profile : tuple of (float, float), m
        Way from ``at`` outward and radius there; begins a little inside the body.
    """

    kind: str
    at: Floats
    direction: Floats
    diameter: float
    profile: Profile

    @property
    def solid(self) -> Solid:
        """The channel, whole."""
        origin, axis = np.append(self.at, 0.0), np.append(self.direction, 0.0)
        return Solid.of(turned(self.profile, origin, axis))

    @property
    def length(self) -> float:
        """From the body's skin to the outer end, m."""
        return self.profile[-1][0]

    @property
    def gate(self) -> float:
        """Diameter at the body's skin, m."""
        return 2 * self.profile[0][1]

    def line(self, start: float, step: float) -> Floats:
        """Return points along its middle from ``start`` to its end, about ``step`` apart, (n, 2) array, m."""
        count = max(2, int(np.ceil((self.length - start) / step)) + 1)
        return np.asarray(self.at + np.linspace(start, self.length, count)[:, None] * self.direction)


def plain(kind: str, at: Floats, direction: Floats, diameter: float, length: float, inside: float) -> Runner:
    """Return a channel of one diameter that begins ``inside`` (m) the body."""
    return Runner(kind, at, direction, diameter, ((-inside, diameter / 2), (length, diameter / 2)))


def sprue(at: Floats, direction: Floats, diameter: float, length: float, thickness: Sequence[float]) -> Runner:
    """Return a sprue that narrows to the body where it meets it, and opens to a funnel at its mouth.

    Parameters
    ----------
    at, direction : (2,) arrays
    diameter : float, m
    length : float, m
        To the edge of the box.
    thickness : sequence of float, m
        The body's least thickness across the sprue at each of `GATE_DEPTHS`.
    """
    wanted = next((n for n, t in enumerate(thickness) if GATE_SHARE * t >= diameter), len(thickness) - 1)
    inside = GATE_DEPTHS[wanted]
    gate = min(diameter, max(GATE_SHARE * thickness[wanted], GATE_LEAST))
    r, g = diameter / 2, gate / 2
    widens = min(r - g, length / 3)
    mouth = min(FUNNEL * r, r + length / 3)
    funnel = length - (mouth - r)
    steps = [(-inside, g), (0.0, g), (widens, r), (max(funnel, widens), r), (length, mouth)]
    # Steps of no length say nothing.
    kept = [steps[0], *(b for a, b in pairwise(steps) if b[0] > a[0])]
    return Runner("sprue", at, direction, diameter, tuple(kept))
