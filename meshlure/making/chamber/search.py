"""Every bore worth to be offered for what a maker asks."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import replace
from typing import Final

from meshlure.making.chamber.bore import Bore, measured, shortened
from meshlure.making.chamber.fit import bores
from meshlure.making.chamber.grid import Grid
from meshlure.making.chamber.line import Rules
from meshlure.making.chamber.needs import Choice, Needs
from meshlure.making.chamber.opening import Opening, at_end, from_belly
from meshlure.making.chamber.option import Option
from meshlure.making.chamber.site import Site

ENOUGH: Final = 5
"""Ways to offer at least, where there are as many: with fewer choices of balls more places are looked for."""

_MOST_PLACES = 3

_WORTH = 0.25
"""Of the way in the longest bore, what a shorter one must leave to be offered; ours."""

_CLOSE = 0.25e-3
"""m to which the length of a shorter bore is found."""

_OPENS = {"nose": 1, "tail": -1}

Tell = Callable[[str], None]


def rules(asked: Needs, ball: float) -> Rules:
    """Return the distances that a bore for a ball of a diameter, m, must keep."""
    opens = _OPENS.get(asked.open_to, 0)
    return Rules(asked.cut(ball) / 2, asked.wall, asked.end_wall, asked.clear, opens)


def options(site: Site, asked: Needs, grid: Grid, tell: Tell = lambda _: None) -> list[Option]:
    """Return the longest bores for all balls to choose from, by diameter.

    Parameters
    ----------
    site : Site
    asked : Needs
    grid : Grid
    tell : callable
        Told each diameter.
    """
    diameters = sorted({choice.diameter for choice in asked.choices}, reverse=True)
    places = min(_MOST_PLACES, -(-ENOUGH // len(asked.choices)))
    found = []
    for diameter in diameters:
        tell(f"bores for balls of {diameter * 1e3:g} mm")
        choices = [choice for choice in asked.choices if choice.diameter == diameter]
        least = min(asked.shortest(choice) for choice in choices)
        for bore in bores(site, grid, rules(asked, diameter), least, places):
            found += [
                option
                for choice in choices
                if bore.length >= asked.shortest(choice) and (option := made(site, asked, choice, bore)) is not None
            ]
    return found


def made(site: Site, asked: Needs, choice: Choice, bore: Bore) -> Option | None:
    """Return a bore with its balls and its opening; None where it cannot be opened as asked."""
    opening: Opening | None = None
    if asked.open_to == "belly":
        opening = from_belly(site, bore, asked.end_wall, asked.clear)
        if opening is None:
            return None
    elif asked.open_to in _OPENS:
        opening = at_end(site, bore, asked.open_to)
    return Option(choice, bore, asked.lining, opening)


def shorter(site: Site, asked: Needs, option: Option, end: str, holds: Callable[[Option], bool]) -> Option | None:
    """Return the longest of an option's shorter bores for which something holds; None where it does for none.

    Parameters
    ----------
    site : Site
    asked : Needs
    option : Option
        For which it does not hold.
    end : str
        nose or tail: the end that gives way. One that is drilled open gets a longer plug.
    holds : callable
        Asked of an option; holds the more likely the shorter the bore.

    Notes
    -----
    A bore in which the balls have less than a quarter of their way is of no use, and not looked at. The length is
    found to a quarter of a millimetre.
    """
    low, high = max(asked.shortest(option.choice), option.choice.row + _WORTH * option.travel), option.bore.length
    if low >= high or not holds(_cut_back(option, end, low)):
        return None
    while high - low > _CLOSE:
        middle = (low + high) / 2
        if holds(_cut_back(option, end, middle)):
            low = middle
        else:
            high = middle
    best = _cut_back(option, end, low)
    return made(site, asked, option.choice, measured(site, best.bore.cut))


def _cut_back(option: Option, end: str, length: float) -> Option:
    """An option with its bore shortened to a length from one end, its walls those of the longer one."""
    less = option.bore.length - length
    nose, tail = (less, 0.0) if end == "nose" else (0.0, less)
    return replace(option, bore=replace(option.bore, cut=shortened(option.bore.cut, nose, tail)))
