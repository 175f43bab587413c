"""A bait's passage through air and water: its profile both ways and what is fixed to it, ready for the drag."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from meshlure.bait.composition import Skin
from meshlure.bait.pieces import Frame, Hardware
from meshlure.geometry.blocks import BlockIndex
from meshlure.geometry.outline import outline
from meshlure.geometry.stations import Stations
from meshlure.geometry.topology import paired
from meshlure.physics.drag import Drag, Layer, axial_drag, headline_drag
from meshlure.physics.form import Profile
from meshlure.physics.lip import lip_plate
from meshlure.physics.plate import lip_drag_area
from meshlure.physics.resistance import Fittings
from meshlure.physics.sections import Sections, smooth
from meshlure.physics.tackle import hook_drag_area

LEADS = ("nose", "tail")
LAYERS: tuple[Layer | None, ...] = (None, "laminar", "tripped")
"""None asks for the headline between both states."""


@dataclass(frozen=True, eq=False)
class Passage:
    """What the drag of a bait along its axis needs.

    Attributes
    ----------
    stations : Stations
        Of the body and outside pieces without lips, along the nose direction.
    profiles : dict of Profile
        By the end that leads.
    cups : dict of float
        Depth of a cupped face at either end, 0 to 1.
    frontal : float, m2
        Silhouette along the nose, without lips.
    fittings : Fittings
    trips : bool
        Whether hooks or other hardware stand in the flow.
    """

    stations: Stations
    profiles: dict[str, Profile]
    cups: dict[str, float]
    frontal: float
    fittings: Fittings
    trips: bool

    def drag(self, leads: str, speed: float, density: float, viscosity: float, layer: Layer | None) -> Drag:
        """Return the drag with an end leading; layer None gives the headline."""
        profile, cup = self.profiles[leads], self.cups[leads]
        if layer is None:
            return headline_drag(
                profile,
                speed,
                density,
                viscosity,
                trips=self.trips,
                silhouette=self.frontal,
                cup=cup,
                fittings=self.fittings,
            )
        return axial_drag(
            profile, speed, density, viscosity, layer, silhouette=self.frontal, cup=cup, fittings=self.fittings
        )


def passage(skin: Skin, hardware: Sequence[Hardware], frame: Frame, whole: Stations, index: BlockIndex) -> Passage:
    """Return a bait's passage along its axis.

    Parameters
    ----------
    skin : Skin
    hardware : sequence of Hardware
    frame : Frame
    whole : Stations
        Of the outer skin with its lips, along the nose.
    index : BlockIndex
        Of the outer skin.
    """
    bare, pairs = skin.bare, paired(skin.bare) if skin.lips else skin.outer_pairs
    frontal = outline(bare, pairs, frame.nose).area
    fine, pairs = smooth(bare, pairs)
    if skin.lips or fine is not bare:
        index = BlockIndex.build(fine)
    cut = Sections.of(fine, pairs, index, frame.nose, (frame.side, frame.back))
    ends = {"nose": frame.nose, "tail": -frame.nose}
    return Passage(
        stations=cut.stations.even() if skin.lips else whole,
        profiles={end: cut.profile(towards) for end, towards in ends.items()},
        cups={end: cut.cup(towards) for end, towards in ends.items()},
        frontal=frontal,
        fittings=_fittings(skin, hardware, frame),
        trips=bool(hardware),
    )


def _fittings(skin: Skin, hardware: Sequence[Hardware], frame: Frame) -> Fittings:
    lips = 0.0
    for surface in skin.lips.values():
        plate = lip_plate(surface, frame.nose)
        lips += lip_drag_area(plate.area, plate.aspect, plate.angle)
    hanging, fixed = (sum(hook_drag_area(item) for item in hardware if item.hangs is hangs) for hangs in (True, False))
    return Fittings(lip=lips, hooks=hanging, eyes=fixed)
