"""The chambers that a bait's body can carry, tried and ranked."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from math import radians
from types import MappingProxyType
from typing import Any, Final

from meshlure.bait.pieces import Bait
from meshlure.chambering.delivery import Chambered
from meshlure.chambering.ranking import WEIGHTS, ranked
from meshlure.chambering.telling import told
from meshlure.chambering.trial import Trial, rested
from meshlure.errors import Fault, InputError
from meshlure.making.chamber.grid import Grid
from meshlure.making.chamber.hindrance import hindrances
from meshlure.making.chamber.needs import Needs, needs
from meshlure.making.chamber.option import Option
from meshlure.making.chamber.search import options, shorter
from meshlure.making.chamber.site import Site
from meshlure.results import chamber as tree

Tree = dict[str, Any]
Tell = Callable[[str], None]

STEADY: Final = radians(2.0)
"""rad. A bait whose postures with the balls at either end differ by no more rests alike with both; ours."""

MOST_OFFERED: Final = 8
"""Ways that are flown, flooded and told."""

_SHORTENED: Final = 2
"""Of the best ways, for how many a shorter bore is looked for that does better."""

_KINDS: Final[Mapping[str, tuple[str, Callable[[Trial], bool]]]] = MappingProxyType(
    {"steady": ("nose", lambda trial: trial.change <= STEADY), "returns": ("tail", lambda trial: trial.returns)}
)
"""What a shorter bore may be better in, and the end that gives way for it: steady keeps the balls far aft in flight,
returns keeps them from weighing the tail down so far that they stay there."""

_AT_LIMIT: Final = 0.02e-3
"""m. A distance this near to the one asked for is what ends a bore."""


def chamber(bait: Bait, take: int = 1, tell: Tell = lambda _: None) -> Chambered:
    """Return the chambers for a bait, the best first, and the one to be written.

    Parameters
    ----------
    bait : Bait
        With a [chamber].
    take : int
        Number of the way to write, from 1.
    tell : callable
        Told each phase.

    Raises
    ------
    InputError
        Without a [chamber], with one that contradicts itself, or where there is no such way to take.
    """
    asked = needs(bait)
    tell("what stays")
    site = Site.of(bait, asked.slope)
    tell("room in the body")
    grid = Grid.of(site)
    found = options(site, asked, grid, tell)
    if not found:
        account = tree.chamber(asked, [], WEIGHTS, None, hindrances(site, asked, grid, tell), site.replaced)
        return Chambered(bait, site, None, account)
    tell("postures")
    trials = [(rested(site, option), "longest") for option in found]
    trials += _shorter(site, asked, [trial for trial, _ in trials])
    kinds = {id(trial): kind for trial, kind in trials}
    rows = ranked([trial for trial, _ in trials], asked)[:MOST_OFFERED]
    if not 1 <= take <= len(rows):
        raise InputError(Fault("there is no such way to take", "--take", str(take), f"1 to {len(rows)}", "choose one"))
    tell("flight and flooding")
    tip = float((bait.body.surface.vertices @ bait.frame.nose).max())
    trees = [told(site, row, kinds[id(row.trial)], asked.slope, tip) for row in rows]
    chosen = rows[take - 1].trial
    account = tree.chamber(asked, trees, WEIGHTS, take, _limits(asked, chosen.option), site.replaced)
    return Chambered(bait, site, chosen, account)


def _shorter(site: Site, asked: Needs, trials: list[Trial]) -> list[tuple[Trial, str]]:
    """Shorter bores that differ in a useful way: the bait rests alike with both ends, or the balls come back."""
    found = []
    for kind, (end, holds) in _KINDS.items():
        for row in ranked(trials, asked)[:_SHORTENED]:
            if holds(row.trial):
                continue
            less = shorter(site, asked, row.trial.option, end, _asked_of(site, row.trial, holds))
            if less is not None:
                found.append((rested(site, less), kind))
    return found


def _asked_of(site: Site, near: Trial, holds: Callable[[Trial], bool]) -> Callable[[Option], bool]:
    return lambda option: holds(rested(site, option, near))


def _limits(asked: Needs, option: Option) -> list[str]:
    """What keeps a bore from being longer."""
    bore = option.bore
    words = []
    if bore.nearest is not None and bore.clear <= asked.clear + _AT_LIMIT:
        words.append(f"{bore.nearest} is {bore.clear * 1e3:.2f} mm from the bore, as near as it may be")
    if bore.wall <= asked.wall + _AT_LIMIT:
        words.append(f"the wall at the side is {bore.wall * 1e3:.2f} mm, as thin as it may be")
    if bore.end_wall <= asked.end_wall + _AT_LIMIT:
        words.append(f"the wall at an end is {bore.end_wall * 1e3:.2f} mm, as thin as it may be")
    return words
