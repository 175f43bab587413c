"""[body]: the mesh that all else sits in, and what it is made of."""

from __future__ import annotations

from dataclasses import dataclass
from pathlib import Path

from meshlure.files.keys import Keys
from meshlure.files.sections.substance import Substance, read_substance

SPACES = ("sealed", "flooded")


@dataclass(frozen=True)
class Printed:
    """A body printed as a wall with a filling.

    Attributes
    ----------
    substance : Substance
        Of the solid print.
    wall : float, m
        Thickness of the wall, measured inwards from the skin.
    infill : float
        Share of the inside that is solid, 0 to 1.
    solid : float or None
        Share of its filament's density that the print reaches where it is solid; None where it was not stated. A
        stated density is taken to be that of the solid print.
    """

    substance: Substance
    wall: float
    infill: float
    solid: float | None = None


@dataclass(frozen=True)
class BodySection:
    """The body; either its substance or how it is printed is there, the other is None.

    Attributes
    ----------
    mesh : Path
        Joined to the bait file's folder.
    substance : Substance or None
    printed : Printed or None
    cavities : str
        What the mesh's inner shells are: "sealed" (they displace, and weigh as air) or "flooded".
    """

    mesh: Path
    substance: Substance | None
    printed: Printed | None
    cavities: str


def read_body(keys: Keys, folder: Path) -> BodySection:
    """Read [body]."""
    substance = read_substance(keys, "printed")
    print_keys = keys.inner("printed", '{ material = "PLA solid", wall = "1.2 mm", infill = 0.15 }')
    section = BodySection(
        folder / keys.asked_text("mesh", "body.stl"),
        substance,
        None if print_keys is None else _read_printed(print_keys),
        keys.choice("cavities", SPACES) or "sealed",
    )
    keys.close()
    return section


def _read_printed(keys: Keys) -> Printed:
    substance = read_substance(keys) or Substance()
    wall = keys.asked_quantity("wall", "length", "1.2 mm", positive=True, most=0.1)
    infill = keys.share("infill")
    solid = keys.share("solid", positive=True) if keys.stated("solid") else None
    if solid is not None and substance.density is not None:
        what = "a stated density is that of the solid print already"
        keys.fault("solid", what, f"{solid:g}", "only beside material", "remove solid, or name the material")
    printed = Printed(substance, wall, infill, solid)
    keys.close()
    return printed
