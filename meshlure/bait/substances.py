"""What the bait file's materials and hardware are, looked up in stock."""

from __future__ import annotations

import re

import numpy as np

from meshlure.bait.pieces import Hardware, Substance
from meshlure.files.sections.hardware import HardwareSection
from meshlure.files.sections.substance import Substance as Stated
from meshlure.findings import Finding, Level
from meshlure.stock.hardware import item as stock_item
from meshlure.stock.materials import Material, material, materials

STATED_SPREAD = 0.005
"""Share by which a stated density may be off either way: a careful weighing of a blank and of its displaced water."""

METAL = 2600.0
"""kg/m3. Nothing lighter is a metal of this trade."""

_UNLIKE = 0.25
"""Share by which a density may lie outside its metal's range before it is asked about: alloys and air in castings."""

WEIGHED_SPREAD = 0.01
"""Share by which a stated mass of hardware may be off: half a step of a pocket scale on a gram."""


def substance(stated: Stated, where: str) -> Substance:
    """Return a substance by the density stated, or from stock by the material's name.

    Raises
    ------
    InputError
        Where the stock does not know the name.
    """
    if stated.density is not None:
        density = stated.density
        low, high = density * (1 - STATED_SPREAD), density * (1 + STATED_SPREAD)
        return Substance(None, density, low, high, "stated", assumed=False)
    row = material(stated.material or "", where)
    return Substance(row.name, row.density, row.low, row.high, row.source, row.assumed, row.kinds)


def name_findings(piece: str, made_of: Substance | None) -> list[Finding]:
    """Return the question that a stated density raises which is far from that of the metal in the piece's name.

    Parameters
    ----------
    piece : str
        Name, such as "lead keel".
    made_of : Substance or None
    """
    if made_of is None or made_of.name is not None:
        return []
    words = set(re.findall(r"[a-z]+", piece.casefold()))
    rows = [row for row in materials() if row.density >= METAL and words & _metal_words(row)]
    if not rows:
        return []
    low, high = min(row.low for row in rows), max(row.high for row in rows)
    if low * (1 - _UNLIKE) <= made_of.density <= high * (1 + _UNLIKE):
        return []
    ends = f"{low / 1e3:.4g} to {high / 1e3:.4g}"
    return [
        Finding(
            code="density-unlike-name",
            level=Level.WARNING,
            message=f"'{piece}' is stated to have {made_of.density / 1e3:.4g} g/cm3, where "
            f"{' or '.join(sorted({word for row in rows for word in words & _metal_words(row)}))} has {ends}: "
            "a slipped digit, or another unit?",
            piece=piece,
            advice="check number and unit: 1 lb/in3 is 27.68 g/cm3, 1 lb/ft3 is 0.01602 g/cm3",
        )
    ]


def _metal_words(row: Material) -> set[str]:
    """Words by which a metal is called: the first of its name, and aliases of one word."""
    return {row.name.split()[0].casefold(), *(alias.casefold() for alias in row.aliases if " " not in alias)}


def hardware(section: HardwareSection, where: str) -> Hardware:
    """Return a piece of hardware by its own values, those of its stock row where they are left out.

    Raises
    ------
    InputError
        Where the stock does not know the item or the material.
    """
    row = None if section.item is None else stock_item(section.item, f"{where}.item")
    made_of: Substance | None = None
    if section.substance is not None:
        made_of = substance(section.substance, where)
    elif row is not None:
        made_of = substance(Stated(material=row.material), where)
    if section.mass is not None:
        mass, low, high = section.mass, section.mass * (1 - WEIGHED_SPREAD), section.mass * (1 + WEIGHED_SPREAD)
        source, assumed = "stated", False
    else:
        assert row is not None
        mass, low, high, source, assumed = row.mass, row.low, row.high, row.source, row.assumed
    return Hardware(
        name=section.name,
        mass=mass,
        low=low,
        high=high,
        at=np.array(section.at),
        hangs=section.hangs,
        volume=0.0 if made_of is None else mass / made_of.density,
        substance=made_of,
        item=None if row is None else row.name,
        source=source,
        assumed=assumed,
        triggers=() if row is None else row.kinds,
        wire=section.wire if section.wire is not None or row is None else row.wire,
        wire_length=section.wire_length if section.wire_length is not None or row is None else row.wire_length,
        drag_area=section.drag_area,
    )
