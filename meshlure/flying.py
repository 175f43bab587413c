"""The flight of a whole bait: with its balls at either end, against a sphere, itself reversed and another bait."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Any

import numpy as np

from meshlure.bait.composition import Composition, compose
from meshlure.bait.pieces import Bait
from meshlure.bait.refusals import refuse
from meshlure.errors import Fault, InputError
from meshlure.files.sections.cast import CastSection
from meshlure.files.sections.retrieve import FASTEST
from meshlure.geometry.blocks import BlockIndex
from meshlure.geometry.moments import Moments
from meshlure.geometry.outline import Outline
from meshlure.geometry.stations import stations
from meshlure.physics.betterment import better
from meshlure.physics.flight import Air, Flight, distances, fly
from meshlure.physics.glider import glider
from meshlure.physics.loads import Glider
from meshlure.physics.passage import Passage, passage
from meshlure.physics.repose import Ends
from meshlure.physics.trajectory import Throw, launch_speed, sphere_drag_area, trajectory
from meshlure.physics.trim import OURS, Limits
from meshlure.results import flight as tree
from meshlure.stock.waters import standard_air
from meshlure.tolerances import GRAVITY

Tree = dict[str, Any]

_USUAL_PULL = 0.3
"""Share of the weight above which a pull that nobody stated is not assumed; our choice."""

_MOST_PULL = 0.9
"""Share of its weight with which the line may pull at what is thrown: with all of it, it would never come down."""


@dataclass(frozen=True, eq=False)
class Flown:
    """A bait's flight.

    Attributes
    ----------
    ends : dict
        Where the balls lie in it.
    flight : Flight
    mass : Moments, kg
    air : Air
    glider : Glider
    """

    ends: Ends
    flight: Flight
    mass: Moments
    air: Air
    glider: Glider


def launch(bait: Bait, mass: float) -> float:
    """Return the speed at which a bait of a mass, kg, leaves the rod, m/s.

    Raises
    ------
    InputError
        Where the sinker named in the bait file could not have flown so far.

    Notes
    -----
    Stated, or from the energy given to bait and moving rod together, or the speed at which a plain sinker, a smooth
    sphere, reaches its measured distance from the same throw.
    """
    cast = bait.plan.cast
    if cast.speed is not None:
        return cast.speed
    if cast.energy is not None and cast.rod_mass is not None:
        return float(np.sqrt(2 * cast.energy / (mass + cast.rod_mass)))
    sinker = cast.sinker
    assert sinker is not None
    pull = line_pull(bait, sinker.mass, "the sinker")
    air = standard_air()
    area = sphere_drag_area(sinker.diameter, air.viscosity)

    def reach(speed: float) -> float:
        throw = Throw(speed, cast.angle, cast.height, pull, cast.wind)
        return trajectory(sinker.mass, area, throw, air.density, 2).distance

    speed = launch_speed(sinker.distance, reach, FASTEST)
    if speed is None:
        raise InputError(
            Fault(
                what="the sinker could not have flown so far",
                where="cast.sinker.distance",
                found=f"{sinker.distance:g} m with {sinker.mass * 1e3:g} g of {sinker.diameter * 1e3:g} mm",
                allowed=f"{reach(0.1):.1f} to {reach(FASTEST):.0f} m, for speeds up to {FASTEST:g} m/s",
                next_step="check mass, diameter and distance, or the cast's angle and height",
            )
        )
    return speed


def line_pull(bait: Bait, mass: float, what: str = "the bait") -> float:
    """Return the pull of the line in the flight of something of a mass, kg, in N.

    Raises
    ------
    InputError
        Where a stated pull would hold up what is thrown.

    Notes
    -----
    Where none is stated it is the usual pull, but no more than three tenths of the weight: a light bait goes on a
    light line.
    """
    cast, weight = bait.plan.cast, mass * GRAVITY
    pull = cast.line_pull
    if "line_pull" in cast.assumed:
        return min(pull, _USUAL_PULL * weight)
    if pull > _MOST_PULL * weight:
        raise InputError(
            Fault(
                what=f"the line would hold {what} up in the air",
                where="cast.line_pull",
                found=f"{pull:g} N, where {what} weighs {weight:.3g} N",
                allowed=f"0 to {_MOST_PULL * weight:.2g} N",
                next_step="state what a free line drags in flight, about 0.03 N, or leave the key out",
            )
        )
    return pull


def _check_lands_ahead(bait: Bait, reaches: Sequence[float]) -> None:
    """Refuse a throw that gets nowhere, or that the wind carries back: no reach can be held against its own."""
    if min(reaches) <= 0:
        cast = bait.plan.cast
        raise InputError(
            Fault(
                what="the throw does not come down ahead of the thrower",
                where="cast",
                found=f"{np.degrees(cast.angle):.3g} deg from {cast.height:g} m, wind {cast.wind:g} m/s from behind",
                allowed="a height above 0 m or an angle above 0 deg, and a headwind that the throw gets through",
                next_step="check angle, height and wind",
            )
        )


def flown(bait: Bait, composition: Composition, way: Passage) -> dict[str, Flown]:
    """Return the flights with the balls at the nose and at the tail, one named "still" where there are none."""
    chambers = [row.balls.chamber for row in composition.rows]
    fixed = {row.balls.chamber: row.balls.at for row in composition.rows}
    found = {}
    for end in ("tail", "nose") if chambers else ("still",):
        ends = {chamber: fixed[chamber] or end for chamber in chambers}
        found[end] = _one(bait, composition, way, ends)
    return found


def _one(bait: Bait, composition: Composition, way: Passage, ends: Ends) -> Flown:
    mass = composition.mass(ends)
    pull = line_pull(bait, mass.amount)
    air, cast = standard_air(), bait.plan.cast
    speed = launch(bait, mass.amount)
    wings = glider(way, composition.skin, bait.hardware, bait.frame, speed, air.density, air.viscosity)
    tie = None if bait.plan.line is None else np.array(bait.plan.line.tie)
    around = Air(air.density, Throw(speed, cast.angle, cast.height, pull, cast.wind), tie, _limits(cast))
    return Flown(ends, fly(wings, mass, around, band(way, speed)), mass, around, wings)


def _limits(cast: CastSection) -> Limits:
    """Limits of the verdict as the bait file sets them, ours where it does not."""
    return Limits(
        steady=OURS.steady if cast.steady_within is None else cast.steady_within,
        sways=OURS.sways if cast.sways_within is None else cast.sways_within,
    )


def band(way: Passage, speed: float) -> dict[str, tuple[float, float]]:
    """Return by leading end the ends of the body's drag band as shares of the drag."""
    air = standard_air()
    drags = {end: way.drag(end, speed, air.density, air.viscosity, None) for end in ("nose", "tail")}
    return {end: (drag.cd_low / drag.cd, drag.cd_high / drag.cd) for end, drag in drags.items()}


def reference(bait: Bait) -> tuple[str, float]:
    """Return a bait's name and how far it flies in its own throw, m."""
    composition = compose(bait)
    skin, frame = composition.skin, bait.frame
    refuse(composition.findings, {})
    index = BlockIndex.build(skin.outer)
    cuts = stations(index, frame.nose, (frame.side, frame.back))
    way = passage(skin, bait.hardware, frame, cuts, index)
    return bait.name, headline(flown(bait, composition, way)).flight.path.distance


def headline(flights: dict[str, Flown]) -> Flown:
    """Return the flight in which the balls lie at the end that leads, where the air's drag presses them."""
    for end in ("tail", "nose"):
        if end in flights and flights[end].flight.bearing.end == end:
            return flights[end]
    return next(iter(flights.values()))


def flight(
    bait: Bait,
    composition: Composition,
    way: Passage,
    seen: Sequence[tuple[str, Outline]],
    displaced: float,
    tip: float,
    against: tuple[str, float] | None,
) -> Tree:
    """Return the result tree of a bait's flight.

    Parameters
    ----------
    bait, composition, way : Bait, Composition, Passage
    seen : sequence of (name, Outline)
        Silhouettes: side and top are wanted.
    displaced : float, m3
        For the sphere of the same mass and bulk.
    tip : float, m
        Of the nose along the nose direction.
    against : (str, float) or None
        Another bait's name and its distance in its own throw, m.
    """
    flights = flown(bait, composition, way)
    main = headline(flights)
    found, air = main.flight, main.air
    other = "tail" if found.bearing.end == "nose" else "nose"
    reversed_ = fly(main.glider, main.mass, air, band(way, air.throw.speed), other)
    still = standard_air()
    diameter = float(np.cbrt(6 * displaced / np.pi))
    ball = trajectory(main.mass.amount, sphere_drag_area(diameter, still.viscosity), air.throw, air.density)
    _check_lands_ahead(bait, (found.path.distance, reversed_.path.distance, ball.distance))
    ahead = tip - float(main.mass.centre @ bait.frame.nose)
    areas = {name: outline.centre for name, outline in seen}
    return tree.flight(
        main=found,
        mass=main.mass,
        frame=bait.frame,
        centres={"yaw": areas["side"], "pitch": areas["top"]},
        length=way.stations.length,
        ratios={
            "sphere": found.path.distance / ball.distance,
            "reversed": found.path.distance / reversed_.path.distance,
            "against": None if against is None else found.path.distance / against[1],
        },
        against=None if against is None else against[0],
        reversed_path=reversed_,
        sphere_path=ball,
        balls={end: (flights[end].flight, flights[end].mass) for end in ("nose", "tail")}
        if "tail" in flights
        else None,
        angles=distances(main.mass.amount, found.drag_area, air),
        change=better(found.curves, found.bearing, main.mass.amount, ahead, way.stations.length - ahead, air.limits),
        throw=air.throw,
        limits=air.limits,
    )
