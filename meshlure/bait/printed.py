"""A printed body: a solid wall, and within it an infill that is solid in part."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace
from math import hypot

from meshlure import tolerances
from meshlure.bait.pieces import MeshPiece, Print, Substance
from meshlure.bait.wording import volume_text
from meshlure.files.defaults import PRINT_SOLID, PRINT_SOLID_RANGE
from meshlure.files.sections.body import Printed
from meshlure.findings import Finding, Level
from meshlure.geometry.inset import inset
from meshlure.geometry.moments import NOTHING, Moments, solid_moments
from meshlure.geometry.solids import Solid
from meshlure.geometry.surface import Surface
from meshlure.geometry.vicinity import vicinity


@dataclass(frozen=True, eq=False)
class Core:
    """What lies deeper than the walls of a printed body: those of its skin and those round its pockets.

    Attributes
    ----------
    volume : Moments, m3
    area : float, m2
        Of its skin.
    infill : float
        Share of it that is solid.
    """

    volume: Moments
    area: float
    infill: float

    @classmethod
    def of(cls, parts: Sequence[Surface], infill: float) -> Core:
        """Return the core that consists of some closed parts."""
        volume = sum((solid_moments(part) for part in parts), NOTHING)
        return cls(volume, sum(part.area for part in parts), infill)

    @property
    def air(self) -> Moments:
        """What of it is air and fills with water where the wall leaks, m3."""
        return self.volume * (1 - self.infill)


def solid_print(material: Substance, stated: Printed) -> Substance:
    """Return what a solid print of a material is.

    Parameters
    ----------
    material : Substance
        The filament, or the solid print where a density was stated.
    stated : Printed

    Notes
    -----
    A print that is solid by its settings reaches 93 to 99% of its filament's density, for the gaps between its lines:
    common practice, no source. That range and the filament's own are taken together by the root of their squares.
    """
    if material.name is None:
        return material
    usual = stated.solid is None
    share = PRINT_SOLID if stated.solid is None else stated.solid
    least, most = PRINT_SOLID_RANGE if usual else (share, share)
    low = hypot(1 - material.low / material.density, 1 - least / share)
    high = hypot(material.high / material.density - 1, most / share - 1)
    density = material.density * share
    words = f"{share:.0%} of the filament's density where the print is solid"
    return replace(
        material,
        density=density,
        low=density * (1 - low),
        high=density * (1 + high),
        source=f"{material.source}; {words}{', common practice' if usual else ''}",
        assumed=material.assumed or usual,
    )


def printed(solid: Substance, stated: Printed, skin: Surface) -> Print:
    """Return how a body is printed: its wall set off inwards from its skin.

    Parameters
    ----------
    solid : Substance
    stated : Printed
    skin : Surface
        Outward, without cavities: these count with the hollows, see `core_left`.
    """
    return Print(solid, stated.wall, stated.infill, inset(skin, stated.wall))


def as_printed(whole: Moments, core: Moments, made: Print) -> Moments:
    """Return the mass of a printed body, kg, from the volumes of all its material and of what is core."""
    wall = whole - core
    return wall * made.solid.density + core * (made.solid.density * made.infill)


def substance_of(made: Print, mass: float, volume: float) -> Substance:
    """Return wall and infill together as one substance; its range is the solid print's in proportion."""
    solid = made.solid
    density = mass / volume if volume > 0 else solid.density
    factor = density / solid.density
    of = "a print" if solid.name is None else solid.name
    return Substance(
        name=f"{of}, {made.wall * 1e3:.4g} mm wall, {made.infill:.0%} infill",
        density=density,
        low=solid.low * factor,
        high=solid.high * factor,
        source=solid.source,
        assumed=solid.assumed,
        triggers=solid.triggers,
    )


def as_drawn(made: Print, skin: Surface, cavities: Sequence[Surface]) -> Substance:
    """Return the substance of a printed body as drawn, before inserts take their room."""
    whole = sum((solid_moments(cavity) * -1.0 for cavity in cavities), solid_moments(skin))
    hollow = Solid.of(cavities[0]).joined(*map(Solid.of, cavities[1:])) if cavities else None
    return substance_of(made, as_printed(whole, core_left(made, hollow).volume, made).amount, whole.amount)


def core_left(made: Print, taken: Solid | None) -> Core:
    """Return the core of a printed body with the pockets of its inserts and hollows in it.

    Parameters
    ----------
    made : Print
    taken : Solid or None
        All that takes room in the body; None where nothing does.

    Notes
    -----
    A slicer puts the same wall round a pocket as on the skin, so the core lies farther than the wall from both. What
    the pockets and their walls take from it is summed on a grid, see `geometry.vicinity.vicinity`.
    """
    whole = Core.of(made.core, made.infill)
    if taken is None or taken.empty or not made.core:
        return whole
    lost = vicinity(made.core, taken.surface(), made.wall)
    return Core(whole.volume - lost.volume, whole.area - lost.covered + lost.face, made.infill)


def print_findings(body: MeshPiece, core: Core, water: float) -> list[Finding]:
    """Return what is worth knowing of a print: that its walls meet, or what it takes up where it leaks.

    Parameters
    ----------
    body : MeshPiece
    core : Core
    water : float, kg/m3
    """
    made = body.printed
    assert made is not None
    if core.volume.amount <= tolerances.VOLUME_SHARE * solid_moments(body.surface).amount:
        return [
            Finding(
                code="printed-solid",
                level=Level.NOTE,
                piece=body.name,
                message=f"walls of {made.wall * 1e3:.4g} mm meet everywhere: the body is solid, and its infill counts"
                " for nothing",
                advice="make the wall thinner if it is to be light",
            )
        ]
    gained = core.air.amount * water
    return [
        Finding(
            code="printed-leaks",
            level=Level.NOTE,
            piece=body.name,
            message="printed walls leak between their lines: full of water, the"
            f" {volume_text(core.air.amount)} of air in the infill would make it {gained * 1e3:.2f} g heavier",
            advice="seal the print, and leave it under water overnight before it is trusted; meshlure pour shows the"
            " flooded bait",
        )
    ]
