"""A bait's passage through air and water: its profile both ways and what is fixed to it, ready for the drag."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from meshlure.bait.composition import Skin
from meshlure.bait.pieces import Frame, Hardware
from meshlure.geometry.blocks import BlockIndex
from meshlure.geometry.outline import outline
from meshlure.geometry.stations import Stations, stations
from meshlure.geometry.surface import Floats, Surface
from meshlure.geometry.topology import EdgePairs, paired
from meshlure.physics.cup import FRONT, cup_depth
from meshlure.physics.drag import Drag, Layer, axial_drag, headline_drag
from meshlure.physics.form import Profile
from meshlure.physics.lip import lip_plate
from meshlure.physics.plate import lip_drag_area
from meshlure.physics.resistance import Fittings
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
                profile, speed, density, viscosity, trips=self.trips, silhouette=self.frontal, cup=cup,
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
    bare, pairs, cuts = skin.bare, skin.outer_pairs, whole
    if skin.lips:
        index = BlockIndex.build(bare)
        cuts = stations(index, frame.nose, (frame.side, frame.back))
        pairs = paired(bare)
    first = Profile.from_stations(cuts, leads_low=False)
    return Passage(
        stations=cuts,
        profiles={"nose": first, "tail": first.reversed()},
        cups={"nose": _cup(bare, index, cuts, frame.nose), "tail": _cup(bare, index, cuts, -frame.nose)},
        frontal=_frontal(bare, pairs, frame),
        fittings=_fittings(skin, hardware, frame),
        trips=bool(hardware),
    )


def _cup(bare: Surface, index: BlockIndex, cuts: Stations, leads: Floats) -> float:
    """Depth of a hollow in the end that leads: what the hull of its foremost fifth holds beyond the solid."""
    from scipy.spatial import ConvexHull

    tip = cuts.high if leads @ cuts.axis > 0 else -cuts.low
    front = FRONT * cuts.length
    behind = index.cut(leads, tip - front)
    ahead = bare.vertices[bare.vertices @ leads > tip - front]
    points = np.concatenate([ahead, behind.start])
    missing = float(ConvexHull((points - points.mean(axis=0)) / front).volume) * front**3 - (index.volume - behind.volume)
    return cup_depth(max(missing, 0.0), float(cuts.area.max()), front)


def _frontal(bare: Surface, pairs: EdgePairs, frame: Frame) -> float:
    return outline(bare, pairs, frame.nose).area


def _fittings(skin: Skin, hardware: Sequence[Hardware], frame: Frame) -> Fittings:
    lips = 0.0
    for surface in skin.lips.values():
        plate = lip_plate(surface, frame.nose)
        lips += lip_drag_area(plate.area, plate.aspect, plate.angle)
    hooks = sum(hook_drag_area(item) for item in hardware)
    return Fittings(lip=lips, hooks=hooks)
