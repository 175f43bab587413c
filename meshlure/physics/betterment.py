"""Betterment: the least shift of the centre of gravity that would make a bait fly more steadily."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Final

from meshlure.physics.trim import OURS, VERDICTS, Bearing, Limits, MomentCurve, leading

_FARTHEST: Final = 0.3
"""Share of the length by which a shift is looked for."""

_STEPS: Final = 60
_HALVINGS: Final = 6


@dataclass(frozen=True)
class Change:
    """The least shift of the centre of gravity that flies better.

    Attributes
    ----------
    verdict : str
        What it would then be.
    shift : float, m
        Towards the nose; negative towards the tail.
    added : float or None, kg
        Mass that does it, put at the end that the centre shifts to; None where none can.
    """

    verdict: str
    shift: float
    added: float | None


def better(
    curves: Sequence[MomentCurve], lead: Bearing, mass: float, to_nose: float, to_tail: float, limits: Limits = OURS
) -> Change | None:
    """Return the least shift along the bait that flies more steadily, None where there is none or no need.

    Parameters
    ----------
    curves : sequence of MomentCurve
    lead : Bearing
        Of the end that leads now.
    mass : float, kg
    to_nose, to_tail : float, m
        From the centre of gravity to either end.
    limits : Limits

    Notes
    -----
    Loads do not hang on the centre of gravity, so only the moments are moved; the moment of inertia is kept, which
    the verdict does not ask for.
    """
    now = VERDICTS.index(lead.verdict)
    if now == 0:
        return None

    def steadier(shift: float) -> bool:
        return VERDICTS.index(leading([curve.moved(shift) for curve in curves], limits).verdict) < now

    length = to_nose + to_tail
    for step in range(1, _STEPS + 1):
        for side in (1.0, -1.0):
            far = side * _FARTHEST * length * step / _STEPS
            if steadier(far):
                near = far * (step - 1) / step
                for _ in range(_HALVINGS):
                    middle = (near + far) / 2
                    near, far = (near, middle) if steadier(middle) else (middle, far)
                verdict = leading([curve.moved(far) for curve in curves], limits).verdict
                reach = (to_nose if far > 0 else to_tail) - abs(far)
                return Change(verdict, far, mass * abs(far) / reach if reach > 0 else None)
    return None
