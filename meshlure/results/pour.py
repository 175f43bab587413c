"""The result tree's account of a pour: the mix, what goes into the cups, and what the bait is with it."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from math import degrees as in_degrees
from typing import Any, Protocol

from meshlure.bait.composition import Part
from meshlure.bait.pieces import Bait, Role, Substance
from meshlure.files.defaults import POUR_STIFF, POUR_THIN
from meshlure.files.sections.pour import PourSection
from meshlure.findings import Finding
from meshlure.making.mix import Batch, Mix
from meshlure.physics.buoyancy import behaviour
from meshlure.physics.posture import Attitude
from meshlure.results import pieces
from meshlure.results.numbers import GRAM, MM, MM3, plain

Tree = dict[str, Any]

_ML = 1e6
"""Millilitres in a cubic metre."""


class Got(Protocol):
    """A bait with its body of some density; see `meshlure.pouring.bench.Outcome`."""

    @property
    def off(self) -> float:
        """Share by which the body's density is off."""

    @property
    def density(self) -> float:
        """Of the body, kg/m3."""

    @property
    def bare(self) -> float:
        """Body with all that lies in it, kg."""

    @property
    def mass(self) -> float:
        """Of the bait, kg."""

    @property
    def reserve(self) -> float:
        """In kg."""

    @property
    def attitude(self) -> Attitude | None:
        """At rest."""


def with_pour(results: Mapping[str, Any], pour: Tree, findings: Sequence[Finding], cautions: Sequence[Tree]) -> Tree:
    """Return a study's tree with a pour, its findings among the others."""
    order = {"fault": 0, "warning": 1, "note": 2}
    told = sorted([*pieces.findings(findings), *results["findings"]], key=lambda row: order[row["level"]])
    return {**results, "pour": pour, "findings": told, "cautions": list(cautions)}


def wanted(how: str, density: float, reached: bool) -> Tree:
    """Return what was asked for: a density of the body, kg/m3, below 0 where it can be none."""
    return {"by": how, "density_g_cm3": density / 1e3 if density > 0 else None, "reached": reached and density > 0}


def cast(
    *,
    stated: PourSection,
    volume: float,
    wanted: Tree,
    mix: Mix,
    names: tuple[Substance, Substance],
    spread: tuple[float, float],
    batch: Batch,
    got: Tree,
    off: Sequence[Tree],
    shares: Sequence[tuple[Mix, Tree]],
) -> Tree:
    """Return the tree of a casting.

    Parameters
    ----------
    stated : PourSection
    volume : float, m3
        Of mix that one bait takes.
    wanted : dict
    mix : Mix
        That is poured, the nearest where the wanted one is out of reach.
    names : (Substance, Substance)
        Resin and balloons.
    spread : (float, float), kg/m3
        How light and how heavy the same mix may come out.
    batch : Batch
    got : dict
        The bait with it.
    off : sequence of dict
        With batches that stray.
    shares : sequence of (Mix, dict)
        With other mixes.
    """
    return {
        "wanted": wanted,
        "mix": {
            "resin": named(names[0], "resin"),
            "balloons": named(names[1], "balloons"),
            **_mix(mix),
            "packing": mix.packing,
            "density_g_cm3": mix.density / 1e3,
            "density_low_g_cm3": spread[0] / 1e3,
            "density_high_g_cm3": spread[1] / 1e3,
            "pours_to_share": POUR_THIN,
            "stiff_to_share": POUR_STIFF,
        },
        "batch": {
            "baits": stated.baits,
            "waste_share": stated.waste,
            "ratio": list(stated.ratio),
            "by": stated.by,
            "body_mm3": volume * MM3,
            "volume_ml": batch.volume * _ML,
            "part_a_g": batch.part_a * GRAM,
            "part_b_g": batch.part_b * GRAM,
            "balloons_g": batch.balloons * GRAM,
            "part_a_ml": batch.part_a_volume * _ML,
            "part_b_ml": batch.part_b_volume * _ML,
            "resin_ml": batch.resin_volume * _ML,
            "balloons_ml": batch.balloons_bulk * _ML,
            "mass_g": batch.mass * GRAM,
        },
        "bait": got,
        "off": list(off),
        "shares": [{**_mix(one), "outcome": with_it} for one, with_it in shares],
        "print": None,
        "assumptions": _assumed(stated, names),
    }


def _mix(mix: Mix) -> Tree:
    return {"share": mix.share, "mass_share": mix.mass_share, "cups": mix.cups, "flow": mix.flow}


def outcome(found: Got, threshold: float) -> Tree:
    """Return what a bait is with its body of some density; the threshold in g."""
    angles = found.attitude
    return {
        "off_share": found.off,
        "density_g_cm3": found.density / 1e3,
        "mass_g": found.mass * GRAM,
        "bare_g": found.bare * GRAM,
        "reserve_g": found.reserve * GRAM,
        "state": str(behaviour(found.reserve * GRAM, threshold)),
        "nose_up_deg": None if angles is None else in_degrees(angles.nose_up) + 0.0,
        "lean_deg": None if angles is None or angles.lean is None else in_degrees(angles.lean) + 0.0,
    }


def inserts(bait: Bait, parts: Sequence[Part]) -> list[Tree]:
    """Return what is to lie in the body, with its place."""
    tip = pieces.nose_tip(bait.body.surface, bait.frame)
    pinned = {insert.name for insert in bait.plan.inserts if insert.pinned}
    return [
        {
            "name": part.name,
            "material": None if part.substance is None else part.substance.name,
            "mass_g": part.mass.amount * GRAM,
            "from_nose_mm": (tip - float(part.centre @ bait.frame.nose)) * MM,
            "centre_mm": plain(part.centre, MM),
            "pinned": part.name in pinned,
        }
        for part in parts
        if part.role in (Role.INSERT, Role.VOID)
    ]


def named(of: Substance, what: str) -> Tree:
    """Return a material with its range; what it is stands for a name where a density was stated."""
    return {
        "name": of.name or f"{what} of {of.density / 1e3:g} g/cm3",
        "density_g_cm3": of.density / 1e3,
        "low_g_cm3": of.low / 1e3,
        "high_g_cm3": of.high / 1e3,
    }


def _assumed(stated: PourSection, names: tuple[Substance, Substance]) -> list[Tree]:
    """Everything that a mix rests on, what was assumed first."""
    resin, balloons = names
    usual = "common practice, no source"
    rows = [
        assumption("density of the cured resin", span(resin), resin.source, resin.assumed),
        assumption("density of the single balloons", span(balloons), balloons.source, balloons.assumed),
        assumption(
            "share of a tapped cup of balloons that is balloons",
            f"{stated.packing:.0%}",
            "datasheets of the class, from memory" if "packing" in stated.assumed else "stated",
            "packing" in stated.assumed,
        ),
        assumption("most balloons that a thin resin pours with", f"{POUR_THIN:.0%} of the volume", usual, True),
        assumption("most balloons that fill a mould", f"{POUR_STIFF:.0%} of the volume", usual, True),
        assumption(
            "ratio of parts A and B",
            f"{stated.ratio[0]:g} : {stated.ratio[1]:g} by {stated.by}",
            f"{usual}: the tin says" if "ratio" in stated.assumed else "stated",
            "ratio" in stated.assumed,
        ),
        assumption(
            "waste in cup, sprue and vents",
            f"{stated.waste:.0%}",
            usual if "waste" in stated.assumed else "stated",
            "waste" in stated.assumed,
        ),
    ]
    if "densities" in stated.assumed:
        rows.append(assumption("densities of parts A and B", "both as the cured resin", usual, True))
    return sorted(rows, key=lambda entry: not entry["assumed"])


def span(of: Substance) -> str:
    """Return a material with its density and range in words."""
    name = "" if of.name is None else f"{of.name}, "
    return f"{name}{of.density / 1e3:.4g} g/cm3 ({of.low / 1e3:.4g} to {of.high / 1e3:.4g})"


def assumption(what: str, value: str, source: str, assumed: bool) -> Tree:
    """Return one entry of what a pour rests on."""
    return {"what": what, "value": value, "source": source, "assumed": assumed}
