"""The smooth bait: what the plane facets of its meshes leave out of displaced volume and of mass."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from meshlure import tolerances
from meshlure.bait.overlaps import Filling
from meshlure.bait.pieces import MeshPiece, Role
from meshlure.bait.wording import volume_text
from meshlure.findings import Finding, Level
from meshlure.geometry.deficit import facet_deficit
from meshlure.geometry.moments import solid_moments
from meshlure.geometry.solids import Solid
from meshlure.geometry.surface import Surface
from meshlure.geometry.topology import paired


@dataclass(frozen=True)
class Deficit:
    """What the facets leave out of a whole bait; negative where they add to it.

    Attributes
    ----------
    displaced : float, m3
        Of the volume that displaces water.
    mass : float, kg
    """

    displaced: float
    mass: float

    def reserve(self, water: float) -> float:
        """Return what the facets leave out of the reserve in water of a density, kg."""
        return self.displaced * water - self.mass


def deficit(
    body: MeshPiece, pieces: Sequence[MeshPiece], filling: Filling, skin: Surface, material: Solid | None
) -> Deficit:
    """Return what the facets leave out of displaced volume and mass.

    Parameters
    ----------
    body : MeshPiece
    pieces : sequence of MeshPiece
        Inserts and voids.
    filling : Filling
        What is left to each.
    skin : Surface
        What displaces water, walls of flooded hollows turned inward.
    material : Solid or None
        What is left of the body where pieces were cut from it; None where all lie inside it.

    Notes
    -----
    Each region counts by its own facets: the outer skin displaces, an insert's facets are made up for by the body's
    material where it lies inside. The coat on the facets is left as it is; its area falls short by far less than that.
    """
    displaced = body.skin_deficit if skin is body.surface else _deficit(skin)
    if material is not None:
        own = _deficit(material.surface())
    else:
        everything = filling.everything()
        own = body.skin_deficit - (0.0 if everything is None else _deficit(everything.surface()))
    mass = own * _density(body)
    for piece in pieces:
        if piece.role is Role.INSERT:
            left = _deficit(filling.solids[piece.name].surface()) if piece.name in filling.taken else piece.deficit
            mass += left * _density(piece)
    return Deficit(displaced, mass)


def _deficit(surface: Surface) -> float:
    return facet_deficit(surface, paired(surface)) if len(surface.faces) else 0.0


def _density(piece: MeshPiece) -> float:
    return 0.0 if piece.substance is None else piece.substance.density


def coarse(body: MeshPiece, water: float) -> list[Finding]:
    """Return a warning where the body's facets leave out too much of it; the water's density in kg/m3."""
    volume = solid_moments(body.surface).amount
    if abs(body.skin_deficit) <= tolerances.COARSE_SHARE * volume:
        return []
    missing = body.skin_deficit
    does, share = "leave out" if missing > 0 else "add", abs(missing) / volume
    weight, lift = (abs(missing * density) * 1e3 for density in (_density(body), water - _density(body)))
    return [
        Finding(
            code="coarse-facets",
            level=Level.WARNING,
            piece=body.name,
            message=f"the body's facets {does} about {volume_text(abs(missing))}, {share:.1%} of its volume: "
            f"{weight:.2f} g of its weight and {lift:.2f} g of reserve",
            advice="export the mesh finer: 0.02 mm chord and 20 degrees keep it well below",
        )
    ]
