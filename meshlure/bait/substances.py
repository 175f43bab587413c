"""What the bait file's materials and hardware are, looked up in stock."""

from __future__ import annotations

import numpy as np

from meshlure.bait.pieces import Hardware, Substance
from meshlure.files.sections.hardware import HardwareSection
from meshlure.files.sections.substance import Substance as Stated
from meshlure.stock.hardware import item as stock_item
from meshlure.stock.materials import material

STATED_SPREAD = 0.005
"""Share by which a stated density may be off either way: a careful weighing of a blank and of its displaced water."""

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
