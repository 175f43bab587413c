"""What each doubt about a bait does to its weight and displacement, at either of its ends."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass

import numpy as np

from meshlure.bait.composition import Part
from meshlure.bait.pieces import Bait, Role
from meshlure.physics.buoyancy import COAT_SPREAD, Cause, Doubt
from meshlure.physics.changes import Changes, load, moved
from meshlure.physics.layers import Layers
from meshlure.physics.whatifs import four, net_mass

ALONG, ACROSS = 0.5e-3, 0.3e-3
"""m. How far an insert strays in its seat, fore-aft and sideways; common practice, no source."""


@dataclass(frozen=True, eq=False)
class Doubtful:
    """A doubt with what its ends do to the bait.

    Attributes
    ----------
    what : str
    low, high : float, kg
        How far the reserve may lie below and above; both positive.
    under, over : Changes
        One row each: the bait at the end where the reserve is low, and where it is high.
    most : (float, float)
        As many times this end as the cause can go at all, under and over.
    """

    what: str
    low: float
    high: float
    under: Changes
    over: Changes
    most: tuple[float, float] = (np.inf, np.inf)


def doubtful(
    bait: Bait, parts: Sequence[Part], doubts: Sequence[Doubt], layer: Layers, water: float, dry: Sequence[str]
) -> tuple[Doubtful, ...]:
    """Return the doubts of a bait's reserve with what they do, then those of its inserts' places.

    Parameters
    ----------
    bait : Bait
    parts : sequence of Part
        What weighs, balls included.
    doubts : sequence of Doubt
        That make up the band of the reserve.
    layer : Layers
        Of a layer on the body.
    water : float, kg/m3
    dry : sequence of str
        Names of hardware that is out of the water at rest.
    """
    body = next(part for part in parts if part.role is Role.BODY)
    named = {part.name: part for part in parts}
    found = []
    for doubt in doubts:
        match doubt.cause:
            case Cause.DENSITY:
                under, over = (_density([named[name] for name in doubt.pieces], end, water) for end in ("high", "low"))
            case Cause.MASS:
                under, over = (_mass(bait, doubt.pieces, end, water, dry) for end in ("high", "low"))
            case Cause.COAT:
                found.append(_coat(bait, doubt, layer, water))
                continue
            case Cause.FACETS:
                under, over = (_facets(end, body, layer, water) for end in (-doubt.low, doubt.high))
            case None:
                continue
        found.append(Doubtful(doubt.what, doubt.low, doubt.high, under, over))
    return (*found, *_misplaced(bait, parts, body, water))


def _density(parts: Sequence[Part], end: str, water: float) -> Changes:
    mass = np.zeros(4)
    for part in parts:
        assert part.substance is not None
        mass = mass + four(part.mass) * (getattr(part.substance, end) / part.substance.density - 1)
    return Changes.one(water, mass)


def _mass(bait: Bait, names: Sequence[str], end: str, water: float, dry: Sequence[str]) -> Changes:
    mass, volume, wet = np.zeros(4), np.zeros(4), np.zeros(4)
    for item in bait.hardware:
        if item.name not in names:
            continue
        more = getattr(item, end) - item.mass
        size = load(item.volume * more / item.mass, item.at)
        mass, volume = mass + load(more, item.at), volume + size
        wet = wet if item.name in dry else wet + size
    return Changes.one(water, mass, volume, wet)


def _coat(bait: Bait, doubt: Doubt, layer: Layers, water: float) -> Doubtful:
    assert bait.coat is not None
    density, thin = bait.coat.substance.density, min(COAT_SPREAD, bait.coat.thickness)
    thicker, thinner = (
        Changes.one(water, layer.whole * t * density, layer.whole * t, layer.wet * t) for t in (COAT_SPREAD, -thin)
    )
    bare = bait.coat.thickness / thin
    if density > water:
        return Doubtful(doubt.what, doubt.low, doubt.high, thicker, thinner, (np.inf, bare))
    return Doubtful(doubt.what, doubt.low, doubt.high, thinner, thicker, (bare, np.inf))


def _facets(reserve: float, body: Part, layer: Layers, water: float) -> Changes:
    """Where the missing volume lies is not known: it is taken to lie all over the skin, and to be the body's stuff."""
    density = 0.0 if body.substance is None else body.substance.density
    if density == water:
        return Changes.one(water)
    thick = reserve / ((water - density) * layer.whole[0])
    return Changes.one(water, layer.whole * thick * density, layer.whole * thick, layer.wet * thick)


def _misplaced(bait: Bait, parts: Sequence[Part], body: Part, water: float) -> Iterator[Doubtful]:
    """Yield doubts of where the inserts sit; they leave the reserve as it is."""
    names = {piece.name for piece in bait.pieces if not piece.lip}
    for part in parts:
        if part.role is not Role.INSERT or part.name not in names:
            continue
        mass = net_mass(part, body)
        for way, reach, how in ((bait.frame.nose, ALONG, "fore-aft"), (bait.frame.side, ACROSS, "sideways")):
            there, back = (Changes.one(water, moved(mass, way * sign * reach)) for sign in (1.0, -1.0))
            yield Doubtful(f"place of {part.name}, {how}", 0.0, 0.0, back, there)
