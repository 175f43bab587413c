"""[[hardware]]: hooks, rings, eyes and the like, each a mass at a point."""

from __future__ import annotations

from dataclasses import dataclass

from meshlure.errors import Fault
from meshlure.files.keys import Keys
from meshlure.files.sections.substance import Substance, read_substance
from meshlure.findings import Point


@dataclass(frozen=True)
class HardwareSection:
    """One piece of hardware; an item of the stock or a mass is there, or both.

    Attributes
    ----------
    name : str
    item : str or None
        Name of a row of the stock, as it was written.
    mass : float or None, kg
        Stands in the place of the item's.
    substance : Substance or None
        With one it displaces water; without one, and without an item that has one, it does not.
    at : Point, m
        Mesh coordinates: of its eye if it hangs, of its own centre if it is fixed.
    hangs : bool
    wire, wire_length : float or None, m
        Of the wire it is bent from, for its drag.
    drag_area : float or None, m2
        In the place of what follows from the wire.
    """

    name: str
    item: str | None
    mass: float | None
    substance: Substance | None
    at: Point
    hangs: bool
    wire: float | None
    wire_length: float | None
    drag_area: float | None


def read_hardware(keys: Keys, metres: float) -> HardwareSection:
    """Read one [[hardware]], its place in units of ``metres``."""
    if not keys.stated("hangs"):
        step = "write hangs = true where it swings (at is its eye), hangs = false where it is fixed (at is its centre)"
        keys.absent(Fault("the key is missing", keys.where("hangs"), next_step=step), "hangs")
    section = HardwareSection(
        keys.asked_text("name", "front treble"),
        keys.text("item"),
        keys.quantity("mass", "mass", positive=True),
        read_substance(keys, required=False),
        keys.point("at", metres),
        keys.flag("hangs"),
        keys.quantity("wire", "length", positive=True, most=20e-3),
        keys.quantity("wire_length", "length", positive=True, most=2.0),
        keys.quantity("drag_area", "area", positive=True, most=0.1),
    )
    if section.item is None and section.mass is None:
        what, step = "nothing says what this weighs", "add mass = '0.75 g', weighed"
        keys.absent(Fault(what, keys.path, allowed="item, mass or both", next_step=step), "item", "mass")
    if section.wire is not None or section.wire_length is not None:
        keys.one_of("wire" if section.wire is not None else "wire_length", "drag_area", required=False)
    keys.close()
    return section
