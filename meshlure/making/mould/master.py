"""The scaled master alone, as for a mould made round it by hand, with or without a tab to hang it by."""

from __future__ import annotations

from typing import Final

import numpy as np

from meshlure.bait.pieces import Frame
from meshlure.errors import Fault, InputError
from meshlure.files.sections.mould import TabSection
from meshlure.geometry.solids import Solid
from meshlure.making.mould.boards import Printed
from meshlure.making.mould.contour import Contour
from meshlure.making.mould.lathe import block, turned
from meshlure.making.mould.places import place
from meshlure.making.mould.plug import Plug

_INSIDE: Final = 2e-3
"""m that a tab reaches into the body."""


def master(plug: Plug, tab: TabSection | None, frame: Frame, where: str) -> Printed:
    """Return the master in the drawing's coordinates times the scale, its slots cut, without seats.

    Parameters
    ----------
    plug : Plug
    tab : TabSection or None
    frame : Frame
    where : str
        The mould section's name in messages.

    Raises
    ------
    InputError
        Where the tab's place is not in the parting plane, or it would not hold on to the body.
    """
    solid = plug.form if tab is None else _with_tab(plug, tab, frame, where)
    bench = plug.bench
    shift = bench.turn.T @ np.array([0.0, 0.0, bench.height])
    lying = Solid.of(solid.surface().moved(rotation=bench.turn.T, shift=shift))
    return Printed("master", lying, bench.turn.T, shift)


def _with_tab(plug: Plug, tab: TabSection, frame: Frame, where: str) -> Solid:
    contour = Contour.of(plug.form)
    spot = place(tab.at, contour, plug.bench, frame, f"{where}.tab.at")
    half_width, half_thickness = tab.width / 2, tab.thickness / 2
    plate = Solid.of(block((-_INSIDE, -half_width, -half_thickness), (tab.length, half_width, half_thickness)))
    hole = turned(
        ((-tab.thickness, tab.hole / 2), (tab.thickness, tab.hole / 2)),
        np.array([tab.length - max(half_width, tab.hole), 0.0, 0.0]),
        np.array([0.0, 0.0, 1.0]),
    )
    out = np.append(spot.out, 0.0)
    up = np.array([0.0, 0.0, 1.0])
    turn = np.column_stack([out, np.cross(up, out), up])
    lying = plate.less(Solid.of(hole)).surface().moved(rotation=turn, shift=np.append(spot.at, 0.0))
    whole = plug.form.joined(Solid.of(lying))
    if len([part for part in whole.parts() if part.volume > 0]) > len(
        [part for part in plug.form.parts() if part.volume > 0]
    ):
        raise InputError(
            Fault(
                what="the tab does not reach into the body",
                where=f"{where}.tab.at",
                found=spot.name,
                allowed=f"a place where the body is {_INSIDE * 1e3:g} mm deep",
                next_step="put it where the body is thicker",
            )
        )
    return whole
