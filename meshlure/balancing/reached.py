"""What a body of some density is made of: mixes of resin and balloons, and materials in stock."""

from __future__ import annotations

from typing import Any, Final

from meshlure.bait.pieces import Substance
from meshlure.bait.substances import substance
from meshlure.files.sections.pour import PourSection
from meshlure.files.sections.substance import Substance as Stated
from meshlure.making.mix import Mix, mixed
from meshlure.stock.materials import Material, materials

Tree = dict[str, Any]

_RESINS: Final = ("polyurethane casting resin unfilled", "epoxy casting unfilled", "polyester casting resin")

_NO_BODY: Final = frozenset(
    {
        "glass microballoons true",
        "glass microballoons tapped bulk",
        "phenolic microballoons true",
        "fumed silica true",
        "photopolymer liquid",
        "silicone mould rubber",
        "tungsten-filled putty",
        "epoxy clear coat cured",
        "UV-cure clear coat",
        "polyurethane clear dry",
        "acrylic paint film dry",
        "cyanoacrylate cured",
    }
)
"""Powders, liquids, rubber, putty, coats and glue: no bodies are made of them."""


def mixes(density: float, stated: PourSection) -> list[Tree]:
    """Return the mixes of resin and balloons that have a density, kg/m3, those of the bait's own [pour] first.

    Notes
    -----
    Shares of balloons up to what can still be spooned into a mould; see `making.mix`.
    """
    balloons = substance(stated.balloons, "pour.balloons")
    resins = [substance(stated.resin, "pour.resin")]
    named = (substance(Stated(material=name), "pour.resin") for name in _RESINS)
    resins += [resin for resin in named if resin.name != resins[0].name]
    found = []
    for resin in resins:
        if resin.density > balloons.density:
            mix, reached = mixed(density, resin.density, balloons.density, stated.packing)
            if reached:
                found.append(_mix(mix, resin, balloons))
    return found


def stock(density: float) -> list[Tree]:
    """Return the materials in stock whose range holds a density, kg/m3, the nearest by its usual value first."""
    rows = [row for row in materials() if row.low <= density <= row.high and row.name not in _NO_BODY]
    return [_material(row) for row in sorted(rows, key=lambda row: abs(row.density - density))]


def _mix(mix: Mix, resin: Substance, balloons: Substance) -> Tree:
    of = resin.name or f"resin of {resin.density / 1e3:g} g/cm3"
    filler = balloons.name or f"balloons of {balloons.density / 1e3:g} g/cm3"
    words = f"{of} with {filler}, {mix.share:.2f} of the volume ({mix.mass_share:.1%} by mass), {mix.flow}"
    return {
        "words": of if mix.share == 0 else words,
        "resin": resin.name,
        "balloons": balloons.name,
        "share": mix.share,
        "mass_share": mix.mass_share,
        "density_g_cm3": mix.density / 1e3,
        "flow": mix.flow,
    }


def _material(row: Material) -> Tree:
    low, usual, high = (value / 1e3 for value in (row.low, row.density, row.high))
    return {
        "words": f"{row.name}, {low:g} to {high:g} g/cm3, usually {usual:g}: weigh yours",
        "material": row.name,
        "density_g_cm3": usual,
        "low_g_cm3": low,
        "high_g_cm3": high,
    }
