"""The order in which chambers are offered, and what it rests on."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from math import radians
from types import MappingProxyType
from typing import Final

import numpy as np

from meshlure.chambering.trial import Trial
from meshlure.making.chamber.needs import Needs

WEIGHTS: Final[Mapping[str, float]] = MappingProxyType({"shift": 0.4, "posture": 0.2, "wall": 0.1, "returns": 0.3})
"""What each thing counts for in the score, which runs from 0 to 1. Shift: by how far the balls move the bait's centre
of gravity, over the most of all ways. Posture: 1 where the bait rests alike with the balls at either end, 0 from 10
degrees of difference on. Wall: that at the side over the one asked for, 1 from one and a half times on. Returns:
whether the balls come back to the nose by themselves. Our choice: a chamber is there to shift weight, and one that
leaves it at the tail has changed how the bait rests."""

_TURNS: Final = radians(10.0)
_THICK: Final = 1.5


@dataclass(frozen=True, eq=False)
class Ranked:
    """A chamber with its score.

    Attributes
    ----------
    trial : Trial
    score : float
        Between 0 and 1.
    """

    trial: Trial
    score: float


def ranked(trials: Sequence[Trial], asked: Needs) -> list[Ranked]:
    """Return chambers with their scores, the best first."""
    most = max((_moved(trial) for trial in trials), default=0.0)
    found = [Ranked(trial, _score(trial, asked, most)) for trial in trials]
    return sorted(found, key=lambda row: -row.score)


def _score(trial: Trial, asked: Needs, most: float) -> float:
    shares = {
        "shift": _moved(trial) / most if most > 0 else 0.0,
        "posture": 1 - min(trial.change / _TURNS, 1.0),
        "wall": min(trial.option.bore.wall / (_THICK * asked.wall), 1.0),
        "returns": float(trial.returns),
    }
    return sum(WEIGHTS[what] * share for what, share in shares.items())


def _moved(trial: Trial) -> float:
    return float(np.linalg.norm(trial.shift))
