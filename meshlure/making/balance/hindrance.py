"""What stands in the way of a target, in numbers."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace
from math import degrees
from typing import Final

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
    "tungsten heavy alloy 97% W",
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
        found.append(_short_of_room(search, net) if search.cramped else _short_of_sizes(search, net, best))
    if best:
        first = best[0].option
        if max(map(abs, first.outcome.off(goal))) > REACHED_ANGLE:
            found.append(_elsewhere(search, first.ballast, first.outcome.off(goal)))
        if not first.upright:
            found.append("so weighted, the bait comes to rest on another side from back up: its ballast lies too high")
    return tuple(found)


def _too_heavy(search: Search, net: float) -> str:
    goal, ground = search.goal, search.ground
    body = ground.composition.parts[0]
    lighter = (body.mass.amount + net) / body.volume
    speed = "" if goal.sink is None else f" for {goal.sink * 100:.1f} cm/s"
    words = (
        f"without any ballast the reserve is {(goal.reserve + net) * 1e3:+z.2f} g, and "
        f"{goal.reserve * 1e3:+z.2f} g are wanted{speed}: the bait must lose {-net * 1e3:.2f} g"
    )
    if lighter <= 0:
        return f"{words}, more than the body weighs"
    return (
        f"{words}, by lighter hooks or a body of {lighter / 1e3:.3f} g/cm3 instead of {ground.body_density / 1e3:.3f}"
    )


def _short_of_room(search: Search, net: float) -> str:
    """How much has room, by material, and what would have room instead."""
    rooms: dict[str, float] = {}
    needed: dict[str, float] = {}
    for kind in search.cramped:
        ballast = search.longest(kind)
        name, density = kind.substance.name or "the ballast", kind.substance.density
        held = 0.0 if ballast is None else ballast.volume().amount * density
        if name not in rooms or held > rooms[name]:
            rooms[name] = held
            needed[name] = search.placing.drawn(kind, net).volume().amount * density
    cover = f"{search.room.cover * 1e3:.3g} mm of cover"
    if search.asked.stated.pocket == FROM_BELLY:
        cover += " round a hole from the belly"
    if search.room.between is not None:
        low, high = search.room.between
        cover += f" between {low * 1e3:g} and {high * 1e3:g} mm from the nose"
    text = ", ".join(
        f"{f'{held * 1e3:.1f} g' if held > 0 else 'no piece'} of {name} ({needed[name] * 1e3:.1f} g needed)"
        for name, held in rooms.items()
    )
    others = _fitting(search, net)
    end = f"{others[0]} would fit" if others else "no denser metal in stock would fit either"
    return f"{cover} leaves room for {text}; {end}"


def _short_of_sizes(search: Search, net: float, best: Sequence[Ranked]) -> str:
    shapes = " or ".join({"rod": "rod", "ball": "balls"}[shape] for shape in search.asked.stated.shapes)
    words = f"no size of {shapes} in stock adds the {net * 1e3:.2f} g that are missing"
    if not best:
        return words
    near = min((row.option.outcome.reserve - search.goal.reserve for row in best), key=abs)
    return f"{words}: the nearest leaves the reserve {near * 1e3:+z.2f} g off"


def _fitting(search: Search, net: float) -> list[str]:
    """Metals not asked for of which some rod has room."""
    asked = {metal.name for metal in search.asked.metals}
    pattern = search.cramped[0]
    found = []
    for name in DENSER:
        metal = substance(Stated(material=name), "ballast.materials")
        if metal.name not in asked and _has_room(search, metal, pattern, net):
            found.append(str(metal.name))
    return found


def _has_room(search: Search, metal: Substance, pattern: Kind, net: float) -> bool:
    kinds = (
        replace(pattern, substance=metal, shape=ROD, count=1, diameter=diameter)
        for diameter in rod_diameters(metal.name or "")
    )
    placing = search.placing
    return any(
        placing.is_piece(kind, net) and (placing.on_line(kind, net) or placing.beside(kind, net)) is not None
        for kind in kinds
    )


def _elsewhere(search: Search, ballast: Ballast, off: tuple[float, float]) -> str:
    """Where the middle of the ballast would have to lie, and where the nearest room is."""
    ground = search.ground
    line = search.lines.line(ballast.kind.net(ballast.length, ground.body_density))
    wanted = line.at(float(ballast.middle @ line.up))
    nose_up, lean = (degrees(angle) for angle in off)
    behind = ground.from_nose(wanted) * 1e3
    where = f"{behind:.1f} mm from the nose"
    if behind < 0:
        where = f"{-behind:.1f} mm ahead of the nose"
    elif behind > ground.length * 1e3:
        where += f", {behind - ground.length * 1e3:.1f} mm behind the tail"
    aside = float((wanted - ballast.middle) @ ground.frame.side) * 1e3
    if abs(aside) > 0.05:
        where += f" and {abs(aside):.1f} mm to the {'left' if aside > 0 else 'right'}"
    here = ground.from_nose(ballast.middle) * 1e3
    return (
        f"the ballast would have to lie {where}; the nearest room for it is at {here:.1f} mm, which misses the posture "
        f"by {nose_up:+z.1f} degrees of nose up and {lean:+z.1f} of lean"
    )
