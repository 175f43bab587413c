"""A printed body: which wall with which infill makes the mass that is wanted, and the bait where its infill floods."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace
from typing import Any, Final

from meshlure.bait.composition import room_taken
from meshlure.bait.pieces import Print
from meshlure.bait.printed import Core, core_left, printed
from meshlure.findings import Finding, Level
from meshlure.pouring.bench import Bench, Outcome
from meshlure.results import pour as tree
from meshlure.results import prints

Tree = dict[str, Any]

LINE: Final = 0.45e-3
"""m. Width of a line from a nozzle of 0.4 mm, 0.42 to 0.48 mm: common practice, no source."""

LINES: Final = (2, 3, 4, 5, 6)
"""Lines that a wall is tried with: three or four for a tight one, common practice, no source."""

INFILLS: Final = (0.1, 0.15, 0.2, 0.3, 0.5, 1.0)


def printing(
    bench: Bench, wanted: float, how: str, off: Sequence[float], threshold: float
) -> tuple[Tree, list[Finding]]:
    """Return the result tree of a print, and what is in the way of the mass that is wanted.

    Parameters
    ----------
    bench : Bench
        Of a printed body.
    wanted : float, kg/m3
        Density of the body, wall and infill together.
    how : str
        What asked for it: "density" where nothing did.
    off : sequence of float
        Shares by which a print may stray.
    threshold : float, g
        Within which the bait suspends.
    """
    body, core = bench.bait.body, bench.vessel.composition.core
    made = body.printed
    assert made is not None
    assert core is not None
    asked = how != "density"
    walls = sorted({made.wall, *(LINE * count for count in LINES)})
    rows = [_row(bench, wall, wanted if asked else None) for wall in walls]
    reached = not asked or any(row["infill_share"] is not None for row in rows)
    outcomes = [bench.with_body(bench.density, share) for share in (0.0, *off)]
    drowned = _flooded(bench, core)
    told = prints.printed(
        made=made,
        volume=bench.body.volume,
        core=core.volume.amount,
        target=bench.others + wanted * bench.body.volume if asked else None,
        line=LINE,
        infills=INFILLS,
        rows=rows,
        flooded=tree.outcome(drowned, threshold),
        water=core.air.amount * bench.vessel.water,
    )
    return {
        "wanted": tree.wanted(how, wanted, reached),
        "mix": None,
        "batch": None,
        "bait": tree.outcome(outcomes[0], threshold),
        "off": [tree.outcome(one, threshold) for one in outcomes[1:]],
        "shares": None,
        "print": told,
        "assumptions": prints.assumed(made, bench.bait.plan.body.printed, LINE),
    }, _judged(bench, wanted, reached)


def _row(bench: Bench, wall: float, wanted: float | None) -> Tree:
    """One wall: its volumes, the bait with each infill, and the infill that makes a density of the body, kg/m3."""
    made = _with_wall(bench, wall)
    core = core_left(made, room_taken(bench.bait)).volume.amount
    solid, volume = made.solid.density, bench.body.volume
    shell = volume - core
    bodies = [solid * (shell + infill * core) for infill in INFILLS]
    share = None
    if wanted is not None and core > 0:
        share = (wanted * volume - solid * shell) / (solid * core)
    fits = share is not None and 0.0 <= share <= 1.0
    return prints.row(
        wall=wall,
        lines=wall / LINE,
        shell=shell,
        core=core,
        masses=[bench.others + body for body in bodies],
        reserves=[bench.reserve_of(body) for body in bodies],
        infill=share if fits else None,
    )


def _with_wall(bench: Bench, wall: float) -> Print:
    body, stated = bench.bait.body, bench.bait.plan.body.printed
    made = body.printed
    assert made is not None
    assert stated is not None
    return made if wall == made.wall else printed(made.solid, replace(stated, wall=wall), body.surface, body.cavities)


def _flooded(bench: Bench, core: Core) -> Outcome:
    """The bait with the air in its infill replaced by water."""
    composition = bench.vessel.composition
    water = core.air * bench.vessel.water
    parts = tuple(
        replace(part, mass=part.mass + water) if part.name == bench.body.name else part for part in composition.parts
    )
    return bench.settled(replace(composition, parts=parts))


def _judged(bench: Bench, wanted: float, reached: bool) -> list[Finding]:
    if reached or wanted <= 0:
        return []
    body = bench.bait.body
    assert body.printed is not None
    whole = bench.others + wanted * bench.body.volume
    heavy = wanted > body.printed.solid.density
    lightest = f"walls of {min(LINES)} lines without infill weigh more" if not heavy else "solid it weighs less"
    return [
        Finding(
            code="mass-out-of-reach",
            level=Level.FAULT,
            piece=body.name,
            message=f"no wall and infill make a bait of {whole * 1e3:.2f} g: {lightest}",
            advice="take more ballast or a denser filament" if heavy else "take a foaming filament, or less ballast",
        )
    ]
