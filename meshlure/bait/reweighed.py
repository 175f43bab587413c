"""A composition whose parts weigh more or less than was thought, each in the same proportion throughout."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import replace

from meshlure.bait.composition import Composition, Part


def reweighed(composition: Composition, factors: Mapping[str, float]) -> Composition:
    """Return a composition with the masses of some parts multiplied; densities and their ranges go with them.

    Parameters
    ----------
    composition : Composition
    factors : mapping
        By name of the part.

    Notes
    -----
    What displaces water stays as it was.
    """
    return replace(composition, parts=tuple(_part(part, factors.get(part.name, 1.0)) for part in composition.parts))


def _part(part: Part, factor: float) -> Part:
    if factor == 1.0:
        return part
    made_of = part.substance
    if made_of is not None:
        made_of = replace(
            made_of, density=made_of.density * factor, low=made_of.low * factor, high=made_of.high * factor
        )
    return replace(part, mass=part.mass * factor, substance=made_of)
