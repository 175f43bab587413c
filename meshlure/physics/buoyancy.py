"""Reserve buoyancy: how many grams a bait floats or sinks by, with its band, and the word for it."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass, replace
from enum import StrEnum
from math import hypot

from meshlure import tolerances
from meshlure.bait.composition import Part
from meshlure.bait.pieces import Coat, Hardware, Role


class Cause(StrEnum):
    """What of a bait a doubt is about."""

    DENSITY = "density"
    FACETS = "facets"
    MASS = "mass"
    COAT = "coat"


class Behaviour(StrEnum):
    """What a bait does at rest, left under water."""

    FLOATS = "floats"
    SUSPENDS = "suspends"
    SINKS = "sinks"


COAT_SPREAD = 0.05e-3
"""m. How far a brushed or dipped coat's thickness strays; common practice, no source."""


@dataclass(frozen=True)
class Doubt:
    """One source of doubt in the reserve.

    Attributes
    ----------
    what : str
    low, high : float, kg
        How far the reserve may lie below and above; both positive.
    cause : Cause or None
    pieces : tuple of str
        Names of the pieces that it is about, all of which err together.
    """

    what: str
    low: float
    high: float
    cause: Cause | None = None
    pieces: tuple[str, ...] = ()


@dataclass(frozen=True)
class Reserve:
    """Reserve buoyancy with its band.

    Attributes
    ----------
    reserve : float, kg
        Displaced water less mass, wholly under water; positive floats.
    low, high : float, kg
        Root of the squares of the doubts below and above.
    threshold : float, kg
        Within this of zero it suspends.
    doubts : tuple of Doubt
    """

    reserve: float
    low: float
    high: float
    threshold: float
    doubts: tuple[Doubt, ...]

    @property
    def state(self) -> Behaviour:
        """Floats, suspends or sinks, by the reserve itself."""
        return behaviour(self.reserve, self.threshold)

    @property
    def possible(self) -> tuple[Behaviour, ...]:
        """Every state that the band holds, the likely one first."""
        span = [state for state in Behaviour if self._holds(state)]
        return (self.state, *(state for state in span if state is not self.state))

    def _holds(self, state: Behaviour) -> bool:
        if state is Behaviour.FLOATS:
            return self.high > self.threshold
        if state is Behaviour.SINKS:
            return self.low < -self.threshold
        return self.low <= self.threshold and self.high >= -self.threshold


def behaviour(reserve: float, threshold: float) -> Behaviour:
    """Return the state that a reserve means."""
    if abs(reserve) <= threshold:
        return Behaviour.SUSPENDS
    return Behaviour.FLOATS if reserve > 0 else Behaviour.SINKS


def suspends_within(displaced: float, stated: float | None) -> float:
    """Return the reserve within which a bait suspends, kg: the stated one, or 0.2% of the displaced mass, kg."""
    return tolerances.SUSPENDS_SHARE * displaced if stated is None else stated


def reserve(mass: float, displaced: float, water: float, threshold: float | None, doubts: Sequence[Doubt]) -> Reserve:
    """Return the reserve buoyancy of a bait.

    Parameters
    ----------
    mass : float, kg
    displaced : float, m3
        When wholly under water.
    water : float, kg/m3
    threshold : float or None, kg
        Within which it suspends; None takes 0.2% of the displaced mass.
    doubts : sequence of Doubt
    """
    value = displaced * water - mass
    limit = suspends_within(displaced * water, threshold)
    return Reserve(
        value, value - hypot(*(d.low for d in doubts)), value + hypot(*(d.high for d in doubts)), limit, tuple(doubts)
    )


def doubts(
    parts: Sequence[Part], facets: float, hardware: Sequence[Hardware], coat: Coat | None, painted: float, water: float
) -> tuple[Doubt, ...]:
    """Return every source of doubt in a bait's reserve.

    Parameters
    ----------
    parts : sequence of Part
        What weighs, balls included.
    facets : float, kg
        What the facets leave out of the reserve.
    hardware : sequence of Hardware
    coat : Coat or None
    painted : float, m2
        Skin under the coat.
    water : float, kg/m3

    Notes
    -----
    Densities: the stock's range, or 0.5% of a stated one; pieces of one stock material come from one batch and err
    together. Facets: what the smooth parts would weigh and displace more. Hardware: the stock's range; equal items come
    from one packet and err together. Coat: 0.05 mm either way, or the whole of a thinner one.
    """
    found = list(_densities(parts))
    if facets:
        found.append(Doubt("facets", abs(facets), abs(facets), Cause.FACETS))
    packets: dict[str, Doubt] = {}
    for item in hardware:
        key = item.item or item.name
        old = packets.get(key, Doubt(f"mass of {key}", 0.0, 0.0, Cause.MASS))
        # A heavier hook of a known material displaces more too.
        wet = 1.0 if item.substance is None else 1 - water / item.substance.density
        low, high = old.low + (item.high - item.mass) * wet, old.high + (item.mass - item.low) * wet
        packets[key] = replace(old, low=low, high=high, pieces=(*old.pieces, item.name))
    found += packets.values()
    if coat is not None:
        lift = painted * (water - coat.substance.density)
        thicker, thinner = lift * COAT_SPREAD, -lift * min(COAT_SPREAD, coat.thickness)
        low, high = -min(thicker, thinner), max(thicker, thinner)
        found.append(Doubt("thickness of the coat", low, high, Cause.COAT))
    return tuple(found)


def _densities(parts: Sequence[Part]) -> Iterator[Doubt]:
    """Doubts of density: by piece where a density was stated, by material where it is the stock's."""
    batches: dict[str, Doubt] = {}
    for part in parts:
        substance = part.substance
        if substance is None or part.role is Role.HARDWARE or part.volume <= 0:
            continue
        key = f"density of {substance.name or part.name}"
        old = batches.get(key, Doubt(key, 0.0, 0.0, Cause.DENSITY))
        low = old.low + part.volume * (substance.high - substance.density)
        high = old.high + part.volume * (substance.density - substance.low)
        batches[key] = replace(old, low=low, high=high, pieces=(*old.pieces, part.name))
    yield from batches.values()
