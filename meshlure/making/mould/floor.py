"""The parting plane with what stands on it: where runners may lie."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Final

import numpy as np

from meshlure.bait.pieces import Frame
from meshlure.geometry.solids import Solid
from meshlure.geometry.surface import Floats
from meshlure.making.mould.contour import Contour
from meshlure.making.mould.ground import PITCH, Ground
from meshlure.making.mould.plug import Plug
from meshlure.making.mould.runners import Runner
from meshlure.making.mould.shadow import Shadow

APART: Final = 1e-3
"""m between two runners, and between a runner and a seat: less rubber than this tears. Common practice, no source."""

_TOUCH: Final = 1e-11
"""m3. An overlap of less is rounding."""


@dataclass(frozen=True, eq=False)
class Floor:
    """What stands on the parting plane of a plug.

    Attributes
    ----------
    plug : Plug
    frame : Frame
    contour : Contour
        Of the form.
    shadow : Shadow
        Of the form.
    ground : Ground
        Of the whole plug.
    outside : Solid or None
        What of the seats lies outside the form.
    seats : Ground
        Its own.
    """

    plug: Plug
    frame: Frame
    contour: Contour
    shadow: Shadow
    ground: Ground
    outside: Solid | None
    seats: Ground

    @classmethod
    def of(cls, plug: Plug, frame: Frame) -> Floor:
        """Return the floor of a plug."""
        beyond = [fitting.shape.less(plug.form) for fitting in plug.seats]
        outside = beyond[0].joined(*beyond[1:]) if beyond else None
        shadow = Shadow.of(plug.form.surface(), PITCH)
        return cls(plug, frame, Contour.of(plug.form), shadow, Ground.of(plug.whole), outside, Ground.of(outside))

    def thickness(self, point: Floats, across: Floats) -> float:
        """Return the form's least thickness, m, at a (2,) place, along the pull and along a direction across."""
        return min(self.contour.chord(point, across), self.shadow.thickness(point))

    def over_seats(self, runner: Runner) -> bool:
        """Tell whether a runner runs through a seat."""
        return self.outside is not None and runner.solid.met(self.outside).volume > _TOUCH

    def free(self, runner: Runner, others: tuple[Runner, ...]) -> bool:
        """Tell whether a runner meets neither the plug again, nor a seat, nor another runner."""
        radius = runner.diameter / 2
        line = runner.line(0.0, PITCH)
        way = np.linspace(0.0, runner.length, len(line))
        # Near its beginning the plug is its own neighbour.
        if (self.ground.away(line) < np.minimum(radius, 0.5 * way - 2 * PITCH)).any():
            return False
        if (self.seats.away(line) < radius + APART).any():
            return False
        for other in others:
            theirs = other.line(0.0, PITCH)
            apart = np.linalg.norm(line[:, None] - theirs[None], axis=-1).min()
            if apart < radius + max(r for _, r in other.profile) + APART:
                return False
        return True
