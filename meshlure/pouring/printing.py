"""A printed body: which wall with which infill makes the mass that is wanted, and the bait where its infill floods."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace
from typing import Any, Final

import numpy as np
from scipy.interpolate import CubicHermiteSpline

from meshlure.bait.composition import room_taken
from meshlure.bait.pieces import Print
from meshlure.bait.printed import Core, core_left, printed
from meshlure.findings import Finding, Level
from meshlure.geometry.clusters import coarse, matched
from meshlure.geometry.moments import solid_moments
from meshlure.geometry.solids import Solid
from meshlure.pouring.bench import Bench, Outcome
from meshlure.results import pour as tree
from meshlure.results import prints

Tree = dict[str, Any]

LINE: Final = 0.45e-3
"""m. Width of a line from a nozzle of 0.4 mm, 0.42 to 0.48 mm: common practice, no source."""

LINES: Final = (2, 3, 4, 5, 6)
"""Lines that a wall is tried with: three or four for a tight one, common practice, no source."""

COPY: Final = 2500
"""Triangles of the coarse copy on which the thickest wall is set off."""

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
    cores = _cores(bench, walls)
    rows = [_row(bench, wall, within, wanted if asked else None) for wall, within in zip(walls, cores, strict=True)]
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


def _row(bench: Bench, wall: float, core: float, wanted: float | None) -> Tree:
    """One wall: its volumes, the bait with each infill, and the infill that makes a density of the body, kg/m3."""
    assert bench.bait.body.printed is not None
    solid, volume = bench.bait.body.printed.solid.density, bench.body.volume
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


def _cores(bench: Bench, walls: Sequence[float]) -> list[float]:
    """Volume within each wall, inserts and hollows left out, m3.

    Notes
    -----
    What lies deeper than a wall is set off truly for the wall stated, and on a coarse copy for the thickest one; at no
    wall it is the whole. Between them it is the cubic that has there these values and, for slopes, minus the areas of
    what is left: exact where the skin is convex and the wall thinner than it curves (Steiner's formula), or flat, and
    the walls round pockets meet no others.
    """
    core = bench.vessel.composition.core
    made = bench.bait.body.printed
    assert core is not None
    assert made is not None
    room = room_taken(bench.bait)

    def within(wall: float) -> Core:
        return core if wall == made.wall else core_left(_walled(bench, wall), room)

    thick = within(max(walls))
    if not thick.volume.amount:
        # A bait that the thickest wall fills is small: every wall is set off on its own.
        return [within(wall).volume.amount for wall in walls]
    whole = Solid.of(bench.bait.body.surface)
    area = (whole if room is None else whole.less(room)).surface().area
    known = {0.0: (bench.body.volume, area)}
    known |= {wall: (of.volume.amount, of.area) for wall, of in ((made.wall, core), (max(walls), thick))}
    ends = sorted(known)
    drawn = CubicHermiteSpline(ends, [known[t][0] for t in ends], [-known[t][1] for t in ends])
    return [float(max(volume, 0.0)) for volume in drawn(np.array(walls))]


def _walled(bench: Bench, wall: float) -> Print:
    """The body with another wall, set off on a coarse copy of it."""
    body, stated = bench.bait.body, bench.bait.plan.body.printed
    made = body.printed
    assert made is not None
    assert stated is not None
    whole = solid_moments(body.surface)
    copy = matched(coarse(body.surface, COPY), whole.amount, whole.centre)
    return printed(made.solid, replace(stated, wall=wall), copy)


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
