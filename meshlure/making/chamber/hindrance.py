"""Why no bore fits, and what nearly would: thinner walls, a smaller ball, or a piece out of the way."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import replace
from typing import Final

from meshlure.making.chamber.bore import Bore, distances
from meshlure.making.chamber.fit import bores
from meshlure.making.chamber.grid import Grid
from meshlure.making.chamber.line import Rules
from meshlure.making.chamber.needs import Choice, Needs
from meshlure.making.chamber.search import made, rules
from meshlure.making.chamber.site import Site
from meshlure.stock.balls import sizes

_ROUNDS: Final = 5
"""Halvings of the walls' share: they are told to a thirtieth."""

_MOST_SIZES: Final = 12

Tell = Callable[[str], None]


def hindrances(site: Site, asked: Needs, grid: Grid, tell: Tell = lambda _: None) -> list[str]:
    """Return, as sentences, what stands in the way of the balls asked for and what nearly fits.

    Parameters
    ----------
    site : Site
    asked : Needs
        For which no bore was found.
    grid : Grid
    tell : callable
        Told what is looked for.
    """
    words = []
    choice = min(asked.choices, key=lambda choice: (asked.shortest(choice), choice.diameter))
    tell("what nearly fits")
    keeps = rules(asked, choice.diameter)
    if asked.open_to == "belly" and bores(site, grid, keeps, asked.shortest(choice)):
        words.append(
            f"a bore for {choice.name} fits, but no hole from the belly reaches it with a plug of "
            f"{asked.end_wall * 1e3:.2g} mm and {asked.clear * 1e3:.2g} mm to the next piece"
        )
    else:
        words += _fewer(site, asked, grid, choice, keeps)
        words += _pieces(site, asked, grid, choice, keeps)
        words += _walls(site, asked, grid, choice, keeps)
    if not words:
        words.append(f"no straight bore for {choice.name} lies in the body, however thin its walls")
    words += _smaller(site, asked, grid, choice)
    return words


def _fewer(site: Site, asked: Needs, grid: Grid, choice: Choice, keeps: Rules) -> list[str]:
    """How many of these balls the longest bore would hold, where it holds fewer."""
    if choice.count == 1:
        return []
    found = bores(site, grid, keeps, asked.shortest(replace(choice, count=1)))
    if not found:
        return []
    longest = found[0].length
    fits = max(n for n in range(1, choice.count) if n == 1 or asked.shortest(replace(choice, count=n)) <= longest)
    fewer = replace(choice, count=fits)
    verb = "runs" if fits == 1 else "run"
    size = f"{choice.diameter * 1e3:.4g} mm"
    return [
        f"the longest bore for balls of {size} is {longest * 1e3:.1f} mm long: {fewer.name} {verb} "
        f"{(longest - fewer.row) * 1e3:.1f} mm in it"
    ]


def _walls(site: Site, asked: Needs, grid: Grid, choice: Choice, keeps: Rules) -> list[str]:
    """The thickest walls that the shortest useful bore can have."""
    low, high = 0.0, 1.0
    best: Bore | None = None
    for _ in range(_ROUNDS):
        share = (low + high) / 2
        thinner = replace(keeps, wall=share * keeps.wall, end_wall=share * keeps.end_wall)
        found = bores(site, grid, thinner, asked.shortest(choice))
        if found:
            low, best = share, found[0]
        else:
            high = share
    if best is None:
        return []
    return [
        f"the longest bore for {choice.name}, {best.length * 1e3:.1f} mm, has walls of {best.wall * 1e3:.1f} mm at the "
        f"side and {best.end_wall * 1e3:.1f} mm at the ends; {keeps.wall * 1e3:.2g} and {keeps.end_wall * 1e3:.2g} mm "
        "are asked for"
    ]


def _pieces(site: Site, asked: Needs, grid: Grid, choice: Choice, keeps: Rules) -> list[str]:
    """The pieces but for which a bore would fit."""
    if not site.way.names:
        return []
    empty = site.emptied()
    found = bores(empty, grid.emptied(), keeps, asked.shortest(choice))
    if not found or (best := made(empty, asked, choice, found[0])) is None:
        return []
    room = [best.bore.cut] if best.opening is None else [best.bore.cut, best.opening.drill]
    names = sorted({name for name, apart in distances(site, room) if apart < asked.clear})
    if not names:
        return []
    listed = names[0] if len(names) == 1 else f"{', '.join(names[:-1])} and {names[-1]}"
    way = "" if asked.open_to == "none" else f", drilled from the {asked.open_to}"
    return [f"without {listed} in the way {choice.name} would run {best.travel * 1e3:.1f} mm{way}"]


def _smaller(site: Site, asked: Needs, grid: Grid, choice: Choice) -> list[str]:
    """The largest smaller ball that can be bought and fits."""
    below = [size for size in reversed(sizes()) if size.diameter < choice.diameter * (1 - 1e-9)][:_MOST_SIZES]
    for size in below:
        other = replace(choice, diameter=size.diameter)
        for bore in bores(site, grid, rules(asked, size.diameter), asked.shortest(other)):
            if made(site, asked, other, bore) is not None:
                count = "a ball" if other.count == 1 else f"{other.count} balls"
                verb = "fits" if other.count == 1 else "fit"
                return [f"{count} of {size.name} {verb} with {(bore.length - other.row) * 1e3:.1f} mm of travel"]
    return ["no ball that can be bought fits with these walls"] if below else []
