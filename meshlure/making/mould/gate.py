"""The sprue: where the resin goes in, narrowed to the body that it meets."""

from __future__ import annotations

import numpy as np

from meshlure.errors import Fault, InputError
from meshlure.files.sections.mould import MouldSection
from meshlure.findings import Finding, Level, Point
from meshlure.making.mould.box import Box
from meshlure.making.mould.floor import Floor
from meshlure.making.mould.places import Place, known_places, place
from meshlure.making.mould.runners import GATE_DEPTHS, Runner, sprue

NARROW = 0.6
"""Share of its diameter from which a sprue's narrowing is worth a word."""


def lay_sprue(floor: Floor, section: MouldSection, box: Box, where: str) -> tuple[Place, Runner, list[Finding]]:
    """Return the sprue with its place, and what is to be said about it.

    Parameters
    ----------
    floor : Floor
    section : MouldSection
    box : Box
        To whose edge it runs.
    where : str
        The section's name in messages.

    Raises
    ------
    InputError
        Where its place is not in the parting plane, or it is wider than the body.

    Notes
    -----
    Where the bait file says nothing of a sprue, it goes to the first of tail, nose, back and belly that no seat is in
    the way at.
    """
    if "sprue" in section.assumed:
        words = known_places(floor.frame, floor.plug.bench)
        for word in sorted(words, key=("tail", "nose", "back", "belly").index):
            spot, made = _at(floor, word, section.sprue.diameter, box, where)
            if not floor.over_seats(made):
                return spot, made, _said(floor, spot, made)
    spot, made = _at(floor, section.sprue.at, section.sprue.diameter, box, where)
    return spot, made, _said(floor, spot, made)


def _at(floor: Floor, stated: str | Point, diameter: float, box: Box, where: str) -> tuple[Place, Runner]:
    spot = place(stated, floor.contour, floor.plug.bench, floor.frame, f"{where}.sprue.at")
    across = np.array([-spot.out[1], spot.out[0]])
    bounds = floor.plug.form.bounds
    widest = min(float(np.ptp(floor.contour.points @ across)), float(np.ptp(bounds[:, 2])))
    if diameter > widest:
        raise InputError(
            Fault(
                what="the sprue is wider than the body",
                where=f"{where}.sprue.diameter",
                found=f"{diameter * 1e3:.4g} mm",
                allowed=f"up to {widest * 1e3:.1f} mm, the body's least size across a sprue at {spot.name}",
                next_step="make it narrower; 6 to 10 mm are usual",
            )
        )
    thickness = [floor.thickness(spot.at - depth * spot.out, across) for depth in GATE_DEPTHS]
    return spot, sprue(spot.at, spot.out, diameter, box.way_out(spot.at, spot.out), thickness)


def _said(floor: Floor, spot: Place, made: Runner) -> list[Finding]:
    found = []
    x, y, z = floor.plug.bench.drawn(np.append(made.at, 0.0)).tolist()
    if floor.over_seats(made):
        found.append(
            Finding(
                code="sprue-over-seat",
                level=Level.FAULT,
                message=f"the sprue at {spot.name} runs over a seat: resin would close round what lies in it",
                where=((x, y, z),),
                advice="name another place for the sprue, where no wire or eye comes out of the body",
            )
        )
    if made.gate < NARROW * made.diameter:
        found.append(
            Finding(
                code="sprue-narrow",
                level=Level.NOTE,
                message=f"the sprue of {made.diameter * 1e3:.3g} mm narrows to {made.gate * 1e3:.1f} mm "
                f"where it meets the body at {spot.name}",
                where=((x, y, z),),
                advice="the body is no thicker there; a thicker place fills faster",
            )
        )
    return found
