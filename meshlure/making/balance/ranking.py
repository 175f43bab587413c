"""The order in which ways to bring the ballast in are offered, and the weights that make it."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace
from math import degrees
from typing import Final

from meshlure.making.balance.aim import Aim
from meshlure.making.balance.outcome import lands_upright
from meshlure.making.balance.room import Left
from meshlure.making.balance.search import Option, Search

OFFERED: Final = 8
_OF_A_SORT: Final = 2
"""Ways of one material and shape that are offered before others have had their turn."""

PER_DEGREE: Final = 1.0
"""Points for each degree by which the posture misses."""
PER_GRAM: Final = 20.0
"""Points for each gram by which the reserve misses: one for each 0.05 g."""
PER_STIFFNESS: Final = 1.0
"""Points for each millimetre of least metacentric height less than the stiffest way has."""
PER_PIECE: Final = 0.25
"""Points for each piece beyond the first: each is one more to set."""
NOT_UPRIGHT: Final = 20.0
"""Points where the bait does not come to rest so by itself from back up."""

WEIGHTS: Final = {
    "per_degree_off": PER_DEGREE,
    "per_gram_off": PER_GRAM,
    "per_mm_less_stiff": PER_STIFFNESS,
    "per_further_piece": PER_PIECE,
    "not_upright": NOT_UPRIGHT,
}
"""By key of the results: what makes the order. Ours, none of them measured; fewer points are better."""


@dataclass(frozen=True, eq=False)
class Ranked:
    """A way with its points, and what is left around it."""

    option: Option
    score: float
    left: Left


def ranked(search: Search, most: int = OFFERED) -> tuple[Ranked, ...]:
    """Return the best ways, the best first: before all others those that reach the target, then by points.

    Notes
    -----
    Whether a bait lands so is asked of the ways that are offered alone: it takes a search over all postures.
    """
    goal, options = search.goal, search.options
    if not options:
        return ()
    stiffest = max(option.outcome.metacentric.least for option in options)
    rows = sorted(((_score(option, goal, stiffest), option) for option in options), key=lambda row: row[0])
    there = _various([row for row in rows if row[1].reaches(goal)])
    beside = _various([row for row in rows if not row[1].reaches(goal)])
    found = []
    for score, option in [*there, *beside][:most]:
        ballast = option.ballast
        upright = lands_upright(search.ground.with_ballast(ballast), option.outcome, goal)
        points = score if upright else score + NOT_UPRIGHT
        found.append(Ranked(replace(option, upright=upright), points, search.room.left(ballast)))
    return tuple(sorted(found, key=lambda row: (not row.option.reaches(goal), row.score)))


def _score(option: Option, goal: Aim, stiffest: float) -> float:
    nose_up, lean = option.outcome.off(goal)
    return (
        PER_DEGREE * (abs(degrees(nose_up)) + abs(degrees(lean)))
        + PER_GRAM * abs(option.outcome.reserve - goal.reserve) * 1e3
        + PER_STIFFNESS * (stiffest - option.outcome.metacentric.least) * 1e3
        + PER_PIECE * (option.ballast.kind.count - 1)
    )


def _various(rows: Sequence[tuple[float, Option]]) -> list[tuple[float, Option]]:
    """The first of each sort, then whatever is left, in order."""
    taken: dict[tuple[str | None, str], int] = {}
    first: list[tuple[float, Option]] = []
    rest: list[tuple[float, Option]] = []
    for row in rows:
        kind = row[1].ballast.kind
        sort = kind.substance.name, kind.shape
        taken[sort] = taken.get(sort, 0) + 1
        (first if taken[sort] <= _OF_A_SORT else rest).append(row)
    return [*first, *rest]
