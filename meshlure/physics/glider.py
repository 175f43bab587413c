"""A bait made ready for its loads: sections, axis, crossflow, lips and what trails."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np

from meshlure.bait.composition import Skin
from meshlure.bait.pieces import Frame, Hardware
from meshlure.geometry.stations import Stations
from meshlure.geometry.surface import Floats
from meshlure.physics.crossflow import crossflow
from meshlure.physics.form import fineness
from meshlure.physics.lip import lip_plate
from meshlure.physics.loads import Glider, Lead, Trailing
from meshlure.physics.passage import Passage
from meshlure.physics.profile import Profile
from meshlure.physics.separation import LAMINAR_ANGLE, TRIPPED_ANGLE, attached_share
from meshlure.physics.tackle import hook_drag_area


def glider(
    passage: Passage,
    skin: Skin,
    hardware: Sequence[Hardware],
    frame: Frame,
    speed: float,
    density: float,
    viscosity: float,
) -> Glider:
    """Return what a bait's loads follow from, at the Reynolds number of a speed.

    Parameters
    ----------
    passage : Passage
    skin : Skin
        For its lips.
    hardware : sequence of Hardware
    frame : Frame
    speed : float, m/s
    density : float, kg/m3
    viscosity : float, m2/s
        Of air or water.
    """
    cuts = passage.stations
    axial = {end: passage.drag(end, speed, density, viscosity, None).parts.body for end in ("nose", "tail")}
    axis = np.average(cuts.centre, axis=0, weights=cuts.area)
    return Glider(
        frame=frame,
        axis=axis,
        nose_first=_lead(passage.profiles["nose"], cuts, axial["nose"], from_nose=True),
        tail_first=_lead(passage.profiles["tail"], cuts, axial["tail"], from_nose=False),
        sideways=crossflow(cuts, 0),
        upright=crossflow(cuts, 1),
        fineness=fineness(passage.profiles["nose"]),
        lips=[lip_plate(surface, frame.nose) for surface in skin.lips.values()],
        hooks=[Trailing(item.name, item.at, hook_drag_area(item)) for item in hardware],
    )


def _lead(profile: Profile, cuts: Stations, axial: float, *, from_nose: bool) -> Lead:
    """One end first: the circles on the sections' widths as far as the flow is attached, midway between both layers."""
    order = slice(None, None, -1) if from_nose else slice(None)
    attached = (attached_share(profile, LAMINAR_ANGLE) + attached_share(profile, TRIPPED_ANGLE)) / 2
    # The profile may stand at other stations than the cuts: what is attached is carried over by its place.
    x = (cuts.high - cuts.position if from_nose else cuts.position - cuts.low)[order]
    share = np.interp(x, profile.x, attached)
    held: list[Floats] = []
    for across in (1, 0):
        circle = np.pi / 4 * cuts.spread[order, across] ** 2
        steps = np.diff(circle, prepend=0.0) * share
        held.append(np.cumsum(steps))
    return Lead(axial=axial, station=cuts.position[order], held=np.array(held))
