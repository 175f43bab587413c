"""The ballast, or the body's density, for a bait's target."""

from __future__ import annotations

from collections.abc import Callable
from math import degrees
from typing import Any, Final

from meshlure.bait.pieces import Bait
from meshlure.balancing import reached
from meshlure.balancing.delivery import Balance
from meshlure.balancing.flights import Flights
from meshlure.errors import Fault, InputError
from meshlure.files.sections.target import TargetSection
from meshlure.making.balance.aim import Aim, aim
from meshlure.making.balance.asked import asked, placed
from meshlure.making.balance.density import Dense, density_for
from meshlure.making.balance.ground import Ground
from meshlure.making.balance.hindrance import hindrances
from meshlure.making.balance.outcome import outcome, reserve_for_speed, sinking_speed
from meshlure.making.balance.ranking import Ranked, ranked
from meshlure.making.balance.room import Left, Room
from meshlure.making.balance.search import REACHED_ANGLE, Option, Search
from meshlure.making.balance.stated import stated_ballast
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
        if take != 1:
            raise InputError(Fault("there is one density only", "--take", str(take), "1", "leave it out"))
        return _by_density(bait, target, tell)
    wanted = asked(bait)
    tell("weighing what stays")
    ground = Ground.of(bait)
    goal = aim(ground, target)
    flights = Flights(ground)
    search, rows, speeds = _searched(Search.of(ground, goal, wanted, Room.of(ground, wanted.stated)), flights, tell)
    goal = search.goal
    if not 1 <= take <= max(len(rows), 1):
        raise InputError(
            Fault("there is no such way to take", "--take", str(take), f"1 to {max(len(rows), 1)}", "choose one")
        )
    tell("flying the ways")
    trees = [
        tree.option(
            ground,
            row.option,
            row.left,
            {"score": row.score, "sink_m_s": speed, **flights.of(ground.with_ballast(row.option.ballast))},
        )
        for row, speed in zip(rows, speeds, strict=True)
    ]
    met = [_meets(row.option, goal, speed) for row, speed in zip(rows, speeds, strict=True)]
    hindered = [] if any(met) else list(hindrances(search, rows))
    if rows and not any(met) and not hindered:
        hindered.append(f"way 1 {_misses(rows[0].option, goal, speeds[0])}")
    if any(met) and not met[take - 1]:
        words = _misses(rows[take - 1].option, goal, speeds[take - 1])
        hindered.append(f"way {take}, which is written, {words}; way 1 meets it")
    account = tree.balance(
        _wanted(ground, goal, target),
        trees,
        take if rows else None,
        any(met),
        hindered,
        [piece.name for piece in ground.freed],
    )
    if not rows:
        bare = outcome(ground.vessel, goal, ground.ends(goal.up))
        return Balance(bait, ground, None, bare, None, False, account)
    chosen = rows[take - 1].option
    return Balance(bait, ground, chosen.ballast, chosen.outcome, None, met[take - 1], account)


def place(bait: Bait, text: str, tell: Tell = lambda _: None) -> Balance:
    """Return a bait with ballast in a stated place: "lead rod 5 mm x 18 mm at 41,0,-6".

    Raises
    ------
    InputError
        Where the words cannot be read, or the ballast does not lie in the body.
    """
    tell("weighing what stays")
    ground = Ground.of(bait)
    ballast = stated_ballast(text, ground)
    vessel = ground.with_ballast(ballast)
    target = bait.plan.target
    goal = None if target is None or target.vary != "ballast" else aim(ground, target)
    back = bait.frame.back
    landed = vessel.landed(ground.ends(back))
    up = back if landed is None else landed.rest.state.up
    option = Option(ballast, outcome(vessel, Aim(up, 0.0, None, 0.0, 0.0, ()), ground.ends(up)))
    tell("flying the ways")
    flights = Flights(ground)
    left = Room.of(ground, bait.plan.ballast).left(ballast)
    speed = None if goal is None else _speed(ground, flights, option, goal)
    row = tree.option(ground, option, left, {"score": None, "sink_m_s": speed, **flights.of(vessel)})
    met = goal is None or _meets(option, goal, speed)
    near = _nearness(bait, left)
    if goal is not None and not met:
        near.append(f"it {_misses(option, goal, speed)}")
    account = tree.balance(
        None if goal is None or target is None else _wanted(ground, goal, target),
        [row],
        1,
        met,
        near,
        [piece.name for piece in ground.freed],
    )
    return Balance(bait, ground, ballast, option.outcome, None, met, account)


def _nearness(bait: Bait, left: Left) -> list[str]:
    """What of [ballast] a stated place does not keep to."""
    section, near = bait.plan.ballast, []
    if left.cover < section.cover:
        near.append(f"{left.cover * 1e3:.2f} mm of cover are left, {section.cover * 1e3:.2f} mm are asked for")
    if left.clear < section.keep_clear:
        near.append(
            f"it lies {left.clear * 1e3:.2f} mm from the next piece, {section.keep_clear * 1e3:.2f} mm are asked for"
        )
    return near


def _misses(option: Option, goal: Aim, speed: float | None = None) -> str:
    """By how much a way misses a target, in words."""
    nose_up, lean = (degrees(angle) for angle in option.outcome.off(goal))
    more = (option.outcome.reserve - goal.reserve) * 1e3
    by = f"{more:+z.2f} g of reserve"
    if goal.sink is not None and speed is not None:
        by = f"{(speed - goal.sink) * 100:+z.1f} cm/s"
    words = f"misses the target by {by}, {nose_up:+z.1f} degrees of nose up and {lean:+z.1f} of lean"
    return words if option.upright else f"{words}, and comes to rest on another side from back up"


def _target(bait: Bait) -> TargetSection:
    if bait.plan.target is None:
        raise InputError(
            Fault(
                "nothing says how the bait is to rest",
                "" if bait.plan.path is None else bait.plan.path.name,
                "no [target]",
                "a section such as\n  [target]\n  behaviour = 'floats'\n  reserve = '1.2 g'\n  nose_up = '-5 deg'",
                "add it to the bait file, or place ballast with --ballast",
            )
        )
    return bait.plan.target


def _searched(search: Search, flights: Flights, tell: Tell) -> tuple[Search, tuple[Ranked, ...], list[float | None]]:
    """The search, repeated until the reserve gives the speed of sinking that was asked for, and the ways' speeds."""
    ground, goal, sink = search.ground, search.goal, search.goal.sink
    if sink is None:
        search.run(tell)
        rows = ranked(search)
        return search, rows, [None] * len(rows)
    goal = goal.with_reserve(reserve_for_speed(ground, goal, flights.way))
    for _ in range(_SINK_ROUNDS):
        search = Search.of(ground, goal, search.asked, search.room)
        search.run(tell)
        rows = ranked(search)
        speed = _speed(ground, flights, rows[0].option, goal) if rows else None
        if speed is None or speed <= 0 or abs(speed / sink - 1) <= _SINK_CLOSE:
            break
        # Drag grows with the square of the speed.
        goal = goal.with_reserve(rows[0].option.outcome.reserve * (sink / speed) ** 2)
    return search, rows, [_speed(ground, flights, row.option, goal) for row in rows]


def _speed(ground: Ground, flights: Flights, option: Option, goal: Aim) -> float | None:
    if goal.sink is None:
        return None
    vessel = ground.with_ballast(option.ballast)
    return sinking_speed(vessel, option.outcome.ends, flights.way, ground.bait.water.viscosity)


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
    tell("weighing the body")
    if target.sink is not None:
        raise InputError(
            Fault(
                "a speed of sinking is settled by ballast, not by the body's density",
                placed(bait, "target.sink"),
                "vary = 'body density'",
                "reserve or submerged",
                "state the reserve, or leave vary out",
            )
        )
    ground = Ground.of(bait, keep=True)
    goal = aim(ground, target)
    dense = density_for(ground, goal)
    found = dense.outcome
    mixes = [] if found is None else reached.mixes(dense.density, bait.plan.pour)
    stock = [] if found is None else reached.stock(dense.density)
    misses = _density_misses(ground, goal, dense, bool(mixes or stock))
    met = found is not None and not misses
    account = tree.balance(
        _wanted(ground, goal, target),
        [],
        None,
        met,
        misses,
        [],
        tree.density(dense, ground.body_density, mixes, stock),
    )
    if found is None:
        found = outcome(ground.vessel, goal, ground.ends(goal.up))
        return Balance(bait, ground, None, found, None, False, account)
    return Balance(bait, ground, None, found, dense.density, met, account)


def _density_misses(ground: Ground, goal: Aim, dense: Dense, reached_by: bool) -> list[str]:
    found = dense.outcome
    body = ground.composition.parts[0]
    if found is None:
        others = (ground.mass(ground.ends(goal.up)).amount - body.mass.amount) * 1e3
        whole = others + dense.density * body.volume * 1e3
        return [
            f"what is not body weighs {others:.2f} g already, and {whole:.2f} g are wanted of the whole bait: it takes "
            "lighter hooks or less ballast"
        ]
    misses = []
    off = tuple(
        0.0 if name in goal.assumed else angle for name, angle in zip(("nose_up", "lean"), found.off(goal), strict=True)
    )
    if max(map(abs, off)) > REACHED_ANGLE:
        nose_up, lean = (degrees(angle) for angle in off)
        misses.append(
            f"with that body the posture misses by {nose_up:+z.1f} degrees of nose up and {lean:+z.1f} of lean: only "
            "ballast that moves can mend it"
        )
    if not reached_by:
        misses.append("no mix of resin and balloons and no material in stock has that density")
    return misses
