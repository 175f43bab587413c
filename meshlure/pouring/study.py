"""The study of a bait with what it takes to make it."""

from __future__ import annotations

from dataclasses import replace
from typing import Any, Final

from meshlure.bait.pieces import Bait, Role, Substance
from meshlure.examine import study
from meshlure.findings import Finding, Level
from meshlure.making.mix import Mix, batch, mixed, spread
from meshlure.pouring.bench import Bench
from meshlure.pouring.printing import printing
from meshlure.pouring.stuff import stuff
from meshlure.results import pour as tree
from meshlure.results.account import cautions
from meshlure.results.study import Study

Tree = dict[str, Any]

OFF: Final = (-0.03, 0.03)
"""Shares by which one batch's density strays from another's: common practice, no source."""

SHARES: Final = (0.0, 0.1, 0.2, 0.3, 0.4, 0.5)


def pour(bait: Bait) -> Study:
    """Return the study of a bait with a pour in its results.

    Parameters
    ----------
    bait : Bait

    Raises
    ------
    InputError
        Where resin or balloons are no such thing, or a mass or a volume is left undefined.
    """
    made_of = None if bait.body.printed is not None else stuff(bait)
    found = study(bait)
    bench = Bench.of(bait)
    wanted, how = _wanted(bench)
    findings = _too_heavy(bench, wanted)
    threshold = found.results["buoyancy"]["suspends_within_g"]
    if made_of is None:
        made, told = printing(bench, wanted, how, OFF, threshold)
        triggers = _pressure(bait)
    else:
        made, told = _cast(bench, *made_of, wanted, how, threshold)
        triggers = {*made_of[0].triggers, *made_of[1].triggers} | _pressure(bait)
    pour = {**made, "inserts": tree.inserts(bait, bench.parts)}
    return replace(found, results=tree.with_pour(found.results, pour, [*findings, *told], cautions(bait, triggers)))


def _cast(
    bench: Bench, resin: Substance, balloons: Substance, wanted: float, how: str, threshold: float
) -> tuple[Tree, list[Finding]]:
    stated = bench.bait.plan.pour
    mix, reached = mixed(wanted, resin.density, balloons.density, stated.packing)
    others = [Mix(resin.density, balloons.density, share, stated.packing) for share in SHARES]
    made = tree.cast(
        stated=stated,
        volume=bench.body.volume,
        wanted=tree.wanted(how, wanted, reached),
        mix=mix,
        names=(resin, balloons),
        spread=spread(mix, resin, balloons),
        batch=batch(mix, bench.body.volume, stated),
        got=tree.outcome(bench.with_body(mix.density), threshold),
        off=[tree.outcome(bench.with_body(mix.density, off), threshold) for off in OFF],
        shares=[(one, tree.outcome(bench.with_body(one.density), threshold)) for one in others],
    )
    return made, _judged(bench, mix, reached, wanted, resin)


def _wanted(bench: Bench) -> tuple[float, str]:
    """Density that the body is to have, kg/m3, and what asked for it; below 0 where the rest weighs too much."""
    plan = bench.bait.plan
    target = plan.target
    if plan.pour.mass is not None:
        return (plan.pour.mass - bench.others) / bench.body.volume, "mass"
    by_body = target is not None and (target.vary == "body density" or bench.bait.body.printed is not None)
    if target is not None and target.reserve is not None and by_body:
        whole = bench.hull.volume * bench.vessel.water - target.reserve
        return (whole - bench.others) / bench.body.volume, "reserve"
    return bench.density, "density"


def _too_heavy(bench: Bench, wanted: float) -> list[Finding]:
    if wanted > 0:
        return []
    whole = bench.others + wanted * bench.body.volume
    return [
        Finding(
            code="mass-out-of-reach",
            level=Level.FAULT,
            piece=bench.body.name,
            message=f"what is not body weighs {bench.others * 1e3:.2f} g already, and {whole * 1e3:.2f} g are wanted of"
            " the whole bait",
            advice="take lighter hooks or less ballast, or ask for more",
        )
    ]


def _judged(bench: Bench, mix: Mix, reached: bool, wanted: float, resin: Substance) -> list[Finding]:
    """Say where the mix does not reach the density, or hardly pours."""
    if wanted <= 0 or (reached and mix.flow == "pours"):
        return []  # what cannot weigh so little is told already
    name = bench.body.name
    if not reached:
        nearest = (
            "unfilled resin"
            if mix.share == 0
            else f"{mix.share:.2f} of the volume balloons, the most that fills a mould"
        )
        advice = (
            "take lighter balloons or a lighter resin, a larger body, or less ballast"
            if wanted < mix.density
            else "take a denser resin or more ballast"
        )
        return [
            Finding(
                code="mix-out-of-reach",
                level=Level.FAULT,
                piece=name,
                message=f"no mix of {resin.name or 'this resin'} and these balloons has {wanted / 1e3:.3f} g/cm3: the"
                f" nearest, {nearest}, has {mix.density / 1e3:.3f} g/cm3",
                advice=advice,
            )
        ]
    return [
        Finding(
            code="stiff-mix",
            level=Level.WARNING,
            piece=name,
            message=f"with {mix.share:.2f} of its volume balloons the mix is stiff: it is spooned rather than poured,"
            " and keeps bubbles",
            advice="take lighter balloons, so that fewer are needed; weigh a trial casting",
        )
    ]


def _pressure(bait: Bait) -> set[str]:
    """Hollows that a pressure pot crushes call for caution."""
    hollow = any(piece.role is Role.VOID and not piece.flooded for piece in bait.pieces) or bait.body.cavities
    return {"pressure"} if hollow else set()
