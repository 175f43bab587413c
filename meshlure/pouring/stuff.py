"""What a casting is mixed from: a resin and balloons of the stock, or of stated densities."""

from __future__ import annotations

from dataclasses import replace
from typing import Final

from meshlure.bait.pieces import Bait, Substance
from meshlure.bait.substances import substance
from meshlure.errors import Fault, InputError
from meshlure.files.sections.substance import Substance as Stated

_RESINS: Final = frozenset({"polyurethane", "epoxy", "polyester"})
"""What a material calls for caution about by which it is known for a casting resin."""


def stuff(bait: Bait) -> tuple[Substance, Substance]:
    """Return resin and balloons of a bait's pour.

    Raises
    ------
    InputError
        With every fault of both: unknown to the stock, no resin, no balloons, or of one density.
    """
    stated = bait.plan.pour
    faults: list[Fault] = []
    found: list[Substance] = []
    for key, of in (("resin", stated.resin), ("balloons", stated.balloons)):
        try:
            made_of = _substance(of, f"pour.{key}")
        except InputError as error:
            faults += error.faults
            continue
        trouble = _no_resin(made_of) if key == "resin" else _no_balloons(made_of)
        if trouble is not None:
            faults.append(replace(trouble, where=f"pour.{key}"))
        found.append(made_of)
    if not faults and found[0].density == found[1].density:
        faults.append(
            Fault(
                what="resin and balloons have one density, so no mix has another",
                where="pour.balloons",
                found=f"{found[1].density / 1e3:g} g/cm3 both",
                next_step="state the density of the single balloons, such as balloons = '0.15 g/cm3'",
            )
        )
    if faults:
        raise InputError(faults)
    return found[0], found[1]


def _substance(stated: Stated, where: str) -> Substance:
    made_of = substance(stated, where)
    if stated.material is not None:
        return made_of
    # A stated density does not say what it is of: the cautions of what is mostly cast stand in.
    return replace(made_of, triggers=("polyurethane", "epoxy") if where.endswith("resin") else ("fine dust",))


def _no_resin(made_of: Substance) -> Fault | None:
    if made_of.name is None or (_RESINS & set(made_of.triggers) and "fine dust" not in made_of.triggers):
        return None
    return Fault(
        what="this is no casting resin",
        where="",
        found=made_of.name,
        allowed="polyurethane casting resin, epoxy casting resin, polyester casting resin, or a density",
        next_step="name the resin without its filler, or state its cured density: '1.05 g/cm3'",
    )


def _no_balloons(made_of: Substance) -> Fault | None:
    if made_of.name is None or ("fine dust" in made_of.triggers and "sanding" not in made_of.triggers):
        if made_of.name is None or not made_of.name.endswith("tapped bulk"):
            return None
        return Fault(
            what="this is the density of balloons with the air between them",
            where="",
            found=made_of.name,
            allowed="the density of the single balloons",
            next_step="name 'glass microballoons true', or state the density on their tin: '0.15 g/cm3'",
        )
    return Fault(
        what="these are no balloons or other powder to fill a resin with",
        where="",
        found=made_of.name,
        allowed="glass microballoons true, phenolic microballoons, fumed silica, or a density",
        next_step="name one, or state the density of the single grains: '0.15 g/cm3'",
    )
