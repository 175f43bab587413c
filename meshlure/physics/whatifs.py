"""What could be otherwise about a bait, one thing at a time: size, skin, hooks, water, coat, density, ballast."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from typing import Final

import numpy as np

from meshlure.bait.composition import Part
from meshlure.bait.pieces import Bait, Hardware, Print, Role
from meshlure.bait.printed import Core
from meshlure.geometry.moments import Moments, point_moments, solid_moments
from meshlure.geometry.surface import Floats
from meshlure.physics.buoyancy import COAT_SPREAD
from meshlure.physics.changes import Changes, load, moved
from meshlure.physics.layers import Layers
from meshlure.stock.hardware import hardware
from meshlure.stock.waters import SEA_SALINITY, water

_SCALE: Final = 1.01
_SKIN: Final = 0.1e-3
"""m. What layer lines, sanding and filler leave on or take off a master."""
_BUBBLE: Final = 5e-3
"""m. Diameter of an air bubble that clings to a hook in a test tank."""
_MOVED: Final = 1e-3
"""m. By how much a ballast slips in a pour; common practice, no source."""
_COLD, _WARM = 4.0, 30.0
_USUAL_TEMPERATURE: Final = 15.0
"""degC. Taken for the two waters where only the density of the bait's own is stated."""


@dataclass(frozen=True, eq=False)
class Whatif:
    """One change.

    Attributes
    ----------
    what : str
        What is otherwise.
    change : str
        By how much, with its unit.
    before, after : Changes
        One row each; ``before`` is the bait as it is, or in another water.
    """

    what: str
    change: str
    before: Changes
    after: Changes


def four(moments: Moments) -> Floats:
    """Return an amount with its first moment, (4,) array."""
    return np.concatenate([[moments.amount], moments.first])


def net_mass(part: Part, body: Part) -> float:
    """Return what a piece weighs more than the body's material that it takes the place of, kg."""
    density = 0.0 if body.substance is None else body.substance.density
    return part.mass.amount - density * part.volume


def beside_inserts(bait: Bait, parts: Sequence[Part]) -> Moments:
    """Return what solid inserts take of the body as drawn, m3: room that does not grow when the body does."""
    drawn = sum((solid_moments(cavity) * -1.0 for cavity in bait.body.cavities), solid_moments(bait.body.surface))
    own = {part.name for part in parts if part.role in (Role.BODY, Role.VOID)}
    hollows = {piece.name for piece in bait.pieces} | {bait.body.name}
    return sum((point_moments(-part.volume, part.centre) for part in parts if part.name in own & hollows), drawn)


def whatifs(
    bait: Bait, parts: Sequence[Part], skin: Layers, dry: Sequence[str] = (), core: Core | None = None
) -> tuple[Whatif, ...]:
    """Return what could be otherwise about a bait.

    Parameters
    ----------
    bait : Bait
    parts : sequence of Part
        What weighs, the body among them.
    skin : Layers
        Of a layer on the body.
    dry : sequence of str
        Names of hardware that is out of the water at rest.
    core : Core or None
        Of a printed body.
    """
    body = next(part for part in parts if part.role is Role.BODY)
    at = bait.water.density
    return (
        *_grown(bait, parts, body, skin, core, at),
        *_hooks(bait, dry, at),
        *_waters(bait),
        *_coat(bait, skin, at),
        *_densities(body, at),
        *_flooded(core, at),
        *_ballast(bait, parts, body, at),
        *_flanks(bait, body, skin, at),
        *_bubble(bait, dry, at),
    )


def _grown(
    bait: Bait, parts: Sequence[Part], body: Part, skin: Layers, core: Core | None, at: float
) -> Iterator[Whatif]:
    """The bait a percent larger and a layer thicker: of its material, and at the mass that was weighed.

    Solid inserts stay as large as they are, so the body's material grows by a share of all that its skin holds; what
    stands out of the body is taken to grow with it.
    """
    still = Changes.one(at)
    k = _SCALE
    density = 0.0 if body.substance is None else body.substance.density
    mass = (four(body.mass) + density * four(beside_inserts(bait, parts))) * (k**3 - 1)
    volume, wet = np.zeros(4), np.zeros(4)
    coat = next((part for part in parts if part.role is Role.COAT), None)
    if coat is not None and bait.coat is not None:
        # The skin that the coat lies on grows by the square of the scale.
        mass = mass + four(coat.mass) * (k**2 - 1)
        volume, wet = (layer * bait.coat.thickness * (k**2 - k**3) for layer in (skin.whole, skin.wet))
    if bait.body.printed is not None and core is not None:
        mass = mass - _thinner(bait.body.printed, core, k)
    grown = "size of body and seats, inserts and hooks as they are"
    yield Whatif(grown, "+1 %", still, Changes.one(at, mass, volume, wet, k))
    yield Whatif("the same, at the mass as it is", "+1 %", still, Changes.one(at, np.zeros(4), volume, wet, k))
    if bait.body.printed is not None:
        density = bait.body.printed.solid.density
    layer, under = skin.whole * _SKIN, skin.wet * _SKIN
    yield Whatif("skin of the body's material", "+0.1 mm", still, Changes.one(at, layer * density, layer, under))
    yield Whatif("the same, at the mass as it is", "+0.1 mm", still, Changes.one(at, np.zeros(4), layer, under))


def _thinner(made: Print, core: Core, scale: float) -> Floats:
    """What a printed body's walls, which stay as thick, weigh less than walls that grow with the body."""
    strip = core.area * made.wall * (scale - 1) * made.solid.density * (1 - made.infill)
    return load(strip, core.volume.centre)


def _hooks(bait: Bait, dry: Sequence[str], at: float) -> Iterator[Whatif]:
    mass, volume, wet = np.zeros(4), np.zeros(4), np.zeros(4)
    names = []
    for item in bait.hardware:
        factor = _next_size(item)
        if factor is not None:
            mass = mass + load(item.mass * (factor - 1), item.at)
            more = load(item.volume * (factor - 1), item.at)
            volume, wet = volume + more, wet if item.name in dry else wet + more
            names.append(item.name)
    if names:
        what = "every hook one size up" if len(names) > 1 else f"'{names[0]}' one size up"
        yield Whatif(what, f"{mass[0] * 1e3:+.2f} g", Changes.one(at), Changes.one(at, mass, volume, wet))


def _next_size(item: Hardware) -> float | None:
    """How many times as heavy the next larger treble of the stock is; None for what is none, or the largest."""
    trebles = [row for row in hardware() if row.name.startswith("treble ")]
    names = [row.name for row in trebles]
    if item.item not in names[:-1]:
        return None
    number = names.index(item.item)
    return trebles[number + 1].mass / trebles[number].mass


def _waters(bait: Bait) -> Iterator[Whatif]:
    stated = bait.water
    temperature = _USUAL_TEMPERATURE if stated.temperature is None else stated.temperature
    salinity = 0.0 if stated.salinity is None else stated.salinity
    fresh, sea = (water(temperature, salt).density for salt in (0.0, SEA_SALINITY))
    change = f"at {temperature:g} °C"
    yield Whatif(f"sea water of {SEA_SALINITY:g} g/kg after fresh", change, Changes.one(fresh), Changes.one(sea))
    cold, warm = (water(degrees, salinity).density for degrees in (_COLD, _WARM))
    change = f"{_COLD:g} to {_WARM:g} °C"
    what = "fresh water warmed" if salinity == 0 else f"water of {salinity:g} g/kg warmed"
    yield Whatif(what, change, Changes.one(cold), Changes.one(warm))


def _coat(bait: Bait, skin: Layers, at: float) -> Iterator[Whatif]:
    if bait.coat is None:
        return
    density = bait.coat.substance.density
    for sign in (1.0, -1.0):
        thick = COAT_SPREAD if sign > 0 else -min(COAT_SPREAD, bait.coat.thickness)
        after = Changes.one(at, skin.whole * thick * density, skin.whole * thick, skin.wet * thick)
        yield Whatif("thickness of the coat", f"{thick * 1e3:+.2f} mm", Changes.one(at), after)


def _densities(body: Part, at: float) -> Iterator[Whatif]:
    substance = body.substance
    if substance is None:
        return
    for density in (substance.low, substance.high):
        share = density / substance.density - 1
        if share:
            after = Changes.one(at, four(body.mass) * share)
            yield Whatif("density of the body", f"{share * 100:+.1f} %", Changes.one(at), after)


def _flooded(core: Core | None, at: float) -> Iterator[Whatif]:
    if core is not None and core.air.amount > 0:
        yield Whatif("the infill full of water", "all of it", Changes.one(at), Changes.one(at, four(core.air) * at))


def _ballast(bait: Bait, parts: Sequence[Part], body: Part, at: float) -> Iterator[Whatif]:
    solid = [(net_mass(part, body), part) for part in parts if part.role is Role.INSERT]
    heavy = [(mass, part) for mass, part in solid if mass > 0]
    if not heavy:
        return
    mass, part = max(heavy, key=lambda pair: pair[0])
    for way, where in ((-bait.frame.nose, "aft"), (bait.frame.side, "to its left")):
        after = Changes.one(at, moved(mass, way * _MOVED))
        yield Whatif(f"place of '{part.name}'", f"{_MOVED * 1e3:g} mm {where}", Changes.one(at), after)


def _flanks(bait: Bait, body: Part, skin: Layers, at: float) -> Iterator[Whatif]:
    coating = bait.coat.substance if bait.coat is not None else body.substance
    if coating is None:
        return
    half = _SKIN / 2
    after = Changes.one(at, skin.flanks * half * coating.density, skin.flanks * half, skin.wet_flanks * half)
    of = "coat" if bait.coat is not None else "skin"
    yield Whatif(f"{of} on the left flank, against the right one", "+0.1 mm", Changes.one(at), after)


def _bubble(bait: Bait, dry: Sequence[str], at: float) -> Iterator[Whatif]:
    hung = [item for item in bait.hardware if item.hangs and item.name not in dry]
    nose = bait.frame.nose
    if hung:
        item = min(hung, key=lambda hung: float(hung.at @ nose))
        place, where = item.at, f"on '{item.name}'"
    else:
        vertices = bait.body.surface.vertices
        place, where = vertices[int((vertices @ nose).argmin())], "at the tail"
    lift = load(np.pi / 6 * _BUBBLE**3, place)
    yield Whatif(f"an air bubble {where}", f"{_BUBBLE * 1e3:g} mm", Changes.one(at), Changes.one(at, volume=lift))
