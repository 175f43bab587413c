"""What stands in the way of a target, in numbers."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace
from math import degrees
from typing import Final

import numpy as np

from meshlure.bait.pieces import Substance
from meshlure.bait.substances import substance
from meshlure.files.sections.substance import Substance as Stated
from meshlure.making.balance.ballast import FROM_BELLY, ROD, Ballast, Kind
from meshlure.making.balance.ranking import Ranked
from meshlure.making.balance.search import REACHED_ANGLE, REACHED_RESERVE, Search
from meshlure.stock.rods import rod_diameters

DENSER: Final = (
    "lead",
    "tungsten heavy alloy 90% W",
    "tungsten heavy alloy 95% W",
    "tungsten pure",
)
"""Metals tried where those asked for have no room, the lighter first."""


def hindrances(search: Search, best: Sequence[Ranked]) -> tuple[str, ...]:
    """Return what keeps a target from being met, a sentence a thing; none where it is met."""
    goal = search.goal
    if any(row.option.reaches(goal) for row in best):
        return ()
    net = search.lines.net
    if net <= 0:
        return (_too_heavy(search, net),)
    found = []
    if not any(abs(row.option.outcome.reserve - goal.reserve) <= REACHED_RESERVE for row in best):
        found += [_cramped(search, net)]
    if best:
        off = best[0].option.outcome.off(goal)
        if max(map(abs, off)) > REACHED_ANGLE:
            found.append(_elsewhere(search, best[0]))
        if not best[0].option.upright:
            found.append(
                "set so, the bait comes to rest on another side when it lands back up: its ballast lies too high"
            )
    return tuple(found)


def _too_heavy(search: Search, net: float) -> str:
    base = search.goal.reserve + net
    words = f"without any ballast the reserve is {base * 1e3:.2f} g, {search.goal.reserve * 1e3:.2f} g are wanted"
    lighter = -net / _body_volume(search)
    density = search.ground.body_density
    return (
        f"{words}: the bait must lose {-net * 1e3:.2f} g, by lighter hooks or a body of "
        f"{(density - lighter) / 1e3:.3f} g/cm3 instead of {density / 1e3:.3f}"
    )


def _body_volume(search: Search) -> float:
    return search.ground.composition.parts[0].volume


def _cramped(search: Search, net: float) -> str:
    """How much has room, by material, and what would have room instead."""
    cover = search.stated.cover * 1e3
    rooms: dict[str, float] = {}
    needed: dict[str, float] = {}
    for kind, length in search.cramped.items():
        name = kind.substance.name or "the ballast"
        held = _rod(search, kind, length).volume().amount if length > 0 else 0.0
        rooms[name] = max(rooms.get(name, 0.0), held * kind.substance.density)
        whole = Ballast(
            kind,
            kind.length_for(net, search.ground.body_density),
            search.ground.frame.nose * 0,
            search.ground.frame.nose,
        )
        needed[name] = whole.volume().amount * kind.substance.density
    if not rooms:
        return f"no size in stock adds the {net * 1e3:.2f} g that are missing, in the shapes asked for"
    text = ", ".join(
        f"{rooms[name] * 1e3:.1f} g of {name} ({needed[name] * 1e3:.1f} g needed)" for name in sorted(rooms)
    )
    others = [metal.name for metal in _fitting(search, net) if metal.name is not None]
    end = f"; {others[0]} would fit" if others else "; nothing denser in stock would fit either"
    return f"{cover:.3g} mm of cover leave room for a rod of {text}{end}"


def _fitting(search: Search, net: float) -> list[Substance]:
    """Metals not asked for of which some rod has room."""
    asked = {kind.substance.name for kind in search.cramped}
    pattern = next(iter(search.cramped))
    found = []
    for name in DENSER:
        metal = substance(Stated(material=name), "ballast.materials")
        if metal.name in asked:
            continue
        if any(_has_room(search, replace(pattern, substance=metal, diameter=d), net) for d in rod_diameters(name)):
            found.append(metal)
    return found


def _has_room(search: Search, kind: Kind, net: float) -> bool:
    assert kind.shape == ROD
    length = kind.length_for(net, search.ground.body_density)
    return length > 0 and bool(len(search.room.places(_rod(search, kind, length))))


def _rod(search: Search, kind: Kind, length: float) -> Ballast:
    frame = search.ground.frame
    return Ballast(kind, length, np.zeros(3), frame.back if kind.pocket == FROM_BELLY else frame.nose)


def _elsewhere(search: Search, best: Ranked) -> str:
    """Where the middle of the ballast would have to lie, and where the nearest room is."""
    ground, option = search.ground, best.option
    ballast = option.ballast
    line = search.lines.line(ballast.kind.net(ballast.length, ground.body_density))
    height = float(ballast.middle @ line.up)
    wanted = ground.from_nose(line.at(height))
    here = ground.from_nose(ballast.middle)
    nose_up, lean = (degrees(angle) for angle in option.outcome.off(search.goal))
    aside = float((line.at(height) - ballast.middle) @ ground.frame.side) * 1e3
    words = f"the ballast would have to lie {wanted * 1e3:.1f} mm from the nose"
    if abs(aside) > 0.05:
        words += f" and {abs(aside):.1f} mm to the {'left' if aside > 0 else 'right'}"
    return (
        f"{words}; the nearest room for it is at {here * 1e3:.1f} mm, which misses the posture by {nose_up:+.1f} "
        f"degrees of nose up and {lean:+.1f} of lean"
    )
