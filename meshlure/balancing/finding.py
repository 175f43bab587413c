"""The ballast, or the body's density, for a bait's target."""

from __future__ import annotations

from collections.abc import Callable
from math import degrees
from typing import Any, Final

from meshlure.bait.pieces import Bait
from meshlure.balancing.delivery import Balance
from meshlure.balancing.flights import Flights
from meshlure.errors import Fault, InputError
from meshlure.files.sections.target import TargetSection
from meshlure.geometry.surface import Floats
from meshlure.making.balance.aim import Aim, aim
from meshlure.making.balance.density import Dense, density_for
from meshlure.making.balance.ground import Ground
from meshlure.making.balance.hindrance import hindrances
from meshlure.making.balance.outcome import outcome, reserve_for_speed, sinking_speed
from meshlure.making.balance.ranking import Ranked, ranked
from meshlure.making.balance.room import Room
from meshlure.making.balance.search import REACHED_ANGLE, REACHED_RESERVE, Option, Search
from meshlure.making.balance.stated import stated_ballast
from meshlure.physics.passage import Passage
from meshlure.physics.repose import Vessel
from meshlure.results import balance as tree

Tree = dict[str, Any]
Tell = Callable[[str], None]

_SINK_ROUNDS: Final = 5
_SINK_CLOSE: Final = 0.01
"""Share within which a speed of sinking is settled."""
_SINK_REACHED: Final = 0.03
"""Share within which a speed of sinking counts as reached."""


def balance(bait: Bait, take: int = 1, tell: Tell = lambda _: None) -> Balance:
    """Return the best ballast for a bait's target.

    Parameters
    ----------
    bait : Bait
        With a [target].
    take : int
        Number of the way to write, from 1, the best first.
    tell : callable
        Told each phase.

    Raises
    ------
    InputError
        Without a target, with contradictions, or where there is no such way to take.
    """
    target = _target(bait)
    if target.vary == "body density":
        return _by_density(bait, target, tell)
    tell("what stays")
    ground = Ground.of(bait)
    goal = aim(ground, target)
    goal, search, rows = _searched(ground, goal, bait, tell)
    tell("flight")
    flights = Flights(ground, bait)
    if rows and not 1 <= take <= len(rows):
        raise InputError(Fault("there is no such way to take", "--take", str(take), f"1 to {len(rows)}", "choose one"))
    speeds = [_speed(ground, flights.way, row.option, goal) for row in rows]
    trees = [
        tree.option(
            ground,
            row.option,
            row.left,
            {"score": row.score, "sink_m_s": speed, **flights.of(ground.with_ballast(row.option.ballast))},
        )
        for row, speed in zip(rows, speeds, strict=True)
    ]
    reachable = bool(rows) and any(_meets(row.option, goal, speed) for row, speed in zip(rows, speeds, strict=True))
    hindered = () if reachable else hindrances(search, rows)
    account = tree.balance(
        _wanted(ground, goal, target),
        trees,
        take if rows else None,
        reachable,
        hindered,
        [piece.name for piece in ground.freed],
    )
    chosen = rows[take - 1].option if rows else None
    return Balance(
        bait,
        ground,
        None if chosen is None else chosen.ballast,
        None if chosen is None else chosen.outcome,
        None,
        reachable,
        account,
    )


def place(bait: Bait, text: str, tell: Tell = lambda _: None) -> Balance:
    """Return a bait with ballast in a stated place: "lead rod 5 mm x 18 mm at 41,0,-6".

    Raises
    ------
    InputError
        Where the words cannot be read, or the ballast does not lie in the body.
    """
    tell("what stays")
    ground = Ground.of(bait)
    section = bait.plan.ballast
    ballast = stated_ballast(text, ground, section)
    vessel = ground.with_ballast(ballast)
    target = bait.plan.target
    goal = None if target is None or target.vary != "ballast" else aim(ground, target)
    level = Aim(bait.frame.back, 1.0 if _floats(vessel, bait.frame.back, ground) else -1.0, None, 0.0, 0.0, ())
    found = outcome(vessel, level, ground.ends(bait.frame.back))
    option = Option(ballast, found, upright=True)
    tell("flight")
    flights = Flights(ground, bait)
    room = Room(ground, section.cover, section.keep_clear, section.between)
    left = room.left(ballast)
    row = tree.option(ground, option, left, {"score": None, "sink_m_s": None, **flights.of(vessel)})
    reachable = goal is None or option.reaches(goal)
    near = []
    if left.cover < section.cover:
        near.append(f"{left.cover * 1e3:.2f} mm of cover are left, {section.cover * 1e3:.2f} mm are asked for")
    if left.clear < section.keep_clear:
        near.append(
            f"it lies {left.clear * 1e3:.2f} mm from the next piece, {section.keep_clear * 1e3:.2f} mm are asked for"
        )
    if goal is not None and not reachable:
        nose_up, lean = (degrees(angle) for angle in found.off(goal))
        more = (found.reserve - goal.reserve) * 1e3
        near.append(
            f"it misses the target by {more:+.2f} g of reserve, {nose_up:+.1f} degrees of nose up, {lean:+.1f} of lean"
        )
    account = tree.balance(
        None if goal is None or target is None else _wanted(ground, goal, target),
        [row],
        1,
        reachable,
        near,
        [piece.name for piece in ground.freed],
    )
    return Balance(bait, ground, ballast, found, None, reachable, account)


def _floats(vessel: Vessel, up: Floats, ground: Ground) -> bool:
    ends = ground.ends(up)
    return vessel.hull(ends).volume * vessel.water > vessel.composition.mass(ends).amount


def _target(bait: Bait) -> TargetSection:
    if bait.plan.target is None:
        where = "" if bait.plan.path is None else bait.plan.path.name
        raise InputError(
            Fault(
                "nothing says how the bait is to rest",
                where,
                "no [target]",
                "a section such as\n  [target]\n  behaviour = 'floats'\n  reserve = '1.2 g'\n  nose_up = '-5 deg'",
                "add it to the bait file, or place ballast with --ballast",
            )
        )
    return bait.plan.target


def _searched(ground: Ground, goal: Aim, bait: Bait, tell: Tell) -> tuple[Aim, Search, tuple[Ranked, ...]]:
    """The search, repeated until the reserve gives the speed of sinking that was asked for."""
    section = bait.plan.ballast
    room = Room(ground, section.cover, section.keep_clear, section.between)
    way: Passage | None = None
    if goal.sink is not None:
        way = Flights(ground, bait).way
        goal = goal.with_reserve(reserve_for_speed(ground, goal, way))
    for _ in range(_SINK_ROUNDS):
        search = Search.of(ground, goal, section, room)
        search.run(tell)
        rows = ranked(search)
        if goal.sink is None or not rows:
            break
        assert way is not None
        speed = _speed(ground, way, rows[0].option, goal)
        assert speed is not None
        if speed <= 0 or abs(speed / goal.sink - 1) <= _SINK_CLOSE:
            break
        # Drag grows with the square of the speed.
        goal = goal.with_reserve(rows[0].option.outcome.reserve * (goal.sink / speed) ** 2)
    return goal, search, rows


def _speed(ground: Ground, way: Passage, option: Option, goal: Aim) -> float | None:
    if goal.sink is None:
        return None
    vessel = ground.with_ballast(option.ballast)
    return sinking_speed(vessel, option.outcome.ends, way, ground.bait.water.viscosity)


def _meets(option: Option, goal: Aim, speed: float | None) -> bool:
    if goal.sink is None:
        return option.reaches(goal)
    assert speed is not None
    return abs(speed / goal.sink - 1) <= _SINK_REACHED and max(map(abs, option.outcome.off(goal))) <= REACHED_ANGLE


def _wanted(ground: Ground, goal: Aim, target: TargetSection) -> Tree:
    displaced = ground.vessel.hull(ground.ends(goal.up)).volume
    words = target.behaviour or ("floats" if goal.reserve > 0 else "sinks" if goal.reserve < 0 else "suspends")
    return tree.target(goal, displaced, ground.vessel.water, words)


def _by_density(bait: Bait, target: TargetSection, tell: Tell) -> Balance:
    """The body's density for the ballast as it stands."""
    tell("density")
    ground = Ground.of(bait, keep=True)
    goal = aim(ground, target)
    if goal.sink is not None:
        raise InputError(
            Fault(
                "a speed of sinking is settled by ballast, not by the body's density",
                "target.sink",
                "vary = 'body density'",
                "reserve or submerged",
                "state the reserve, or leave vary out",
            )
        )
    dense = density_for(ground, goal)
    mixes, stock = _reached_by(dense)
    found = dense.outcome
    misses = []
    if found is None:
        misses.append(f"even a body without weight would leave the bait {-dense.density * 1e-3:.3g} g/cm3 too heavy")
    else:
        off = tuple(
            0.0 if name in goal.assumed else angle
            for name, angle in zip(("nose_up", "lean"), found.off(goal), strict=True)
        )
        if max(map(abs, off)) > REACHED_ANGLE:
            nose_up, lean = (degrees(angle) for angle in off)
            misses.append(
                f"with that body the posture misses by {nose_up:+.1f} degrees of nose up and {lean:+.1f} of lean: only "
                "ballast that moves can mend it"
            )
        if not mixes and not stock:
            misses.append("no resin mix and no material in stock has that density")
    reachable = found is not None and not misses and abs(found.reserve - goal.reserve) <= REACHED_RESERVE
    assert ground.bait.body.substance is not None
    account = tree.balance(
        _wanted(ground, goal, target),
        [],
        None,
        reachable,
        misses,
        [],
        tree.density(dense, ground.bait.body.substance.density, mixes, stock),
    )
    density = dense.density if found is not None else None
    return Balance(bait, ground, None, found, density, reachable, account)


def _reached_by(dense: Dense) -> tuple[list[Tree], list[Tree]]:
    return [], []
