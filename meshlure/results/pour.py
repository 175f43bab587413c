"""The result tree's account of a pour: the mix, what goes into the cups, and what the bait is with it."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from math import degrees as in_degrees
from typing import Any, Protocol

from meshlure.bait.composition import Part
from meshlure.bait.pieces import Bait, Role, Substance
from meshlure.files.defaults import POUR_STIFF, POUR_THIN
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
    """A bait with its body of some density; see `meshlure.pouring.Outcome`."""

    @property
    def density(self) -> float:
        """Of the body, kg/m3."""

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


def cast(
    *,
    bait: Bait,
    body: Part,
    wanted: float,
    how: str,
    mix: Mix,
    reached: bool,
    names: tuple[Substance, Substance],
    spread: tuple[float, float],
    batch: Batch,
    got: Got,
    off: Sequence[tuple[float, Got]],
    shares: Sequence[tuple[Mix, Got]],
    parts: Sequence[Part],
    threshold: float,
) -> Tree:
    """Return the tree of a casting.

    Parameters
    ----------
    bait : Bait
    body : Part
    wanted : float, kg/m3
    how : str
        What asked for that density: "density", "mass" or "reserve".
    mix : Mix
        That is poured, the nearest where the wanted one is out of reach.
    reached : bool
    names : (Substance, Substance)
        Resin and balloons.
    spread : (float, float), kg/m3
        How light and how heavy the same mix may come out.
    batch : Batch
    got : Got
        The bait with it.
    off : sequence of (float, Got)
        With batches so far off.
    shares : sequence of (Mix, Got)
        With other mixes.
    parts : sequence of Part
        Everything that weighs.
    threshold : float, g
        Within which it suspends.
    """
    stated = bait.plan.pour
    resin, balloons = names
    bare = [part for part in parts if part.role in (Role.INSERT, Role.VOID, Role.BALL)]
    return {
        "wanted": {"by": how, "density_g_cm3": wanted / 1e3 if wanted > 0 else None, "reached": reached},
        "mix": {
            "resin": _named(resin),
            "balloons": _named(balloons),
            "share": mix.share,
            "mass_share": mix.mass_share,
            "cups": mix.cups,
            "packing": mix.packing,
            "density_g_cm3": mix.density / 1e3,
            "density_low_g_cm3": spread[0] / 1e3,
            "density_high_g_cm3": spread[1] / 1e3,
            "flow": mix.flow,
            "pours_to_share": POUR_THIN,
            "stiff_to_share": POUR_STIFF,
        },
        "batch": {
            "baits": stated.baits,
            "waste_share": stated.waste,
            "ratio": list(stated.ratio),
            "by": stated.by,
            "body_mm3": body.volume * MM3,
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
        "bait": outcome(got, threshold) | {"bare_g": bare_mass(body.volume * got.density, bare)},
        "off": [{"off_share": share, **outcome(one, threshold)} for share, one in off],
        "shares": [
            {
                "share": one.share,
                "mass_share": one.mass_share,
                "cups": one.cups,
                "flow": one.flow,
                **outcome(with_it, threshold),
            }
            for one, with_it in shares
        ],
        "print": None,
        "inserts": inserts(bait, parts),
        "assumptions": _assumed(bait, names),
    }


def bare_mass(body: float, parts: Sequence[Part]) -> float:
    """Return what a casting weighs before coat and hooks, g: its body, kg, with all that lies in it."""
    return (body + sum(part.mass.amount for part in parts)) * GRAM


def outcome(found: Got, threshold: float) -> Tree:
    """Return what a bait is with its body of some density; the threshold in g."""
    angles = found.attitude
    return {
        "density_g_cm3": found.density / 1e3,
        "mass_g": found.mass * GRAM,
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


def _named(of: Substance) -> Tree:
    return {
        "name": of.name or f"{of.density / 1e3:g} g/cm3",
        "density_g_cm3": of.density / 1e3,
        "low_g_cm3": of.low / 1e3,
        "high_g_cm3": of.high / 1e3,
    }


def _assumed(bait: Bait, names: tuple[Substance, Substance]) -> list[Tree]:
    """Everything that a mix rests on, what was assumed first."""
    stated = bait.plan.pour
    resin, balloons = names
    usual = "common practice, no source"
    rows = [
        _row("density of the cured resin", _span(resin), resin.source, resin.assumed),
        _row("density of the single balloons", _span(balloons), balloons.source, balloons.assumed),
        _row(
            "share of a tapped cup of balloons that is balloons",
            f"{stated.packing:.0%}",
            "datasheets of the class, from memory" if "packing" in stated.assumed else "stated",
            "packing" in stated.assumed,
        ),
        _row("most balloons that a thin resin pours with", f"{POUR_THIN:.0%} of the volume", usual, True),
        _row("most balloons that fill a mould", f"{POUR_STIFF:.0%} of the volume", usual, True),
        _row(
            "ratio of parts A and B",
            f"{stated.ratio[0]:g} : {stated.ratio[1]:g} by {stated.by}",
            f"{usual}: the tin says" if "ratio" in stated.assumed else "stated",
            "ratio" in stated.assumed,
        ),
        _row(
            "waste in cup, sprue and vents",
            f"{stated.waste:.0%}",
            usual if "waste" in stated.assumed else "stated",
            "waste" in stated.assumed,
        ),
    ]
    if "densities" in stated.assumed:
        rows.append(_row("densities of parts A and B", "both as the cured resin", usual, True))
    return sorted(rows, key=lambda row: not row["assumed"])


def _span(of: Substance) -> str:
    name = "" if of.name is None else f"{of.name}, "
    return f"{name}{of.density / 1e3:.4g} g/cm3 ({of.low / 1e3:.4g} to {of.high / 1e3:.4g})"


def _row(what: str, value: str, source: str, assumed: bool) -> Tree:
    return {"what": what, "value": value, "source": source, "assumed": assumed}
