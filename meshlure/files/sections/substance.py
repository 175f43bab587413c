"""What a piece is made of: a material by name, or a density."""

from __future__ import annotations

from dataclasses import dataclass

from meshlure.files.keys import Keys


@dataclass(frozen=True)
class Substance:
    """A material or a density; the other one is None.

    Attributes
    ----------
    material : str or None
        Name as it was written; whether the stock knows it is not asked here.
    density : float or None, kg/m3
    """

    material: str | None = None
    density: float | None = None


def read_substance(keys: Keys, *others: str, required: bool = True) -> Substance | None:
    """Substance of a piece, None where none is stated or another key excludes it.

    Parameters
    ----------
    keys : Keys
        The piece's table.
    others : str
        Keys that stand in the substance's place, such as ``void``.
    required : bool
        A fault where none of all these is stated.
    """
    stated = keys.one_of("density", "material", *others, required=required)
    density = keys.quantity("density", "density")
    material = keys.text("material")
    if stated == "density":
        return Substance(density=density)
    return Substance(material=material) if stated == "material" else None
