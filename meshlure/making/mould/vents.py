"""Vents: channels out of every high point that the cavity has while it is poured."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Final

import numpy as np

from meshlure.bait.wording import place_text
from meshlure.files.sections.mould import MouldSection
from meshlure.findings import Finding, Level, Point
from meshlure.geometry.surface import Floats
from meshlure.making.mould.box import Box
from meshlure.making.mould.floor import Floor
from meshlure.making.mould.peaks import Peak, peaks
from meshlure.making.mould.places import place
from meshlure.making.mould.runners import VENT_DIAMETER, Runner, plain

PROMINENT: Final = 0.5e-3
"""m. A high point that stands out by less keeps no air worth a vent: common practice, no source."""

OFF_PLANE: Final = 2e-3
"""m. A high point farther than this from the contour is out of reach of a vent in the parting plane."""

_WALK: Final = 6e-3
"""m along the contour by which a vent may move aside of what is in its way."""

_STEP: Final = 0.5e-3

_TURNS: Final = np.radians([0, 20, -20, 40, -40, 60, -60, 80, -80])
"""rad by which a vent may lean from straight up."""

_INSIDE: Final = 1e-3
"""m that a vent begins inside the body."""

_LOWER: Final = 1e-3
"""m below its high point from which a vent's beginning is worth a word."""


@dataclass(frozen=True, eq=False)
class Vents:
    """The vents of a mould.

    Attributes
    ----------
    runners : tuple of Runner
    findings : tuple of Finding
    """

    runners: tuple[Runner, ...]
    findings: tuple[Finding, ...]


def high_points(floor: Floor, sprue: Runner) -> list[Peak]:
    """Return the high points of the cavity that its sprue does not empty itself, the sprue pointing up."""
    up = np.append(sprue.direction, 0.0)
    near = max(sprue.diameter, OFF_PLANE)
    found = peaks(floor.plug.form.surface(), up, PROMINENT)
    return [peak for peak in found if float(np.linalg.norm(peak.at - np.append(sprue.at, 0.0))) > near]


def lay_vents(floor: Floor, section: MouldSection, box: Box, sprue: Runner, high: Sequence[Peak], where: str) -> Vents:
    """Return the vents to the edges of a box.

    Parameters
    ----------
    floor : Floor
    section : MouldSection
    box : Box
    sprue : Runner
        It points up while the mould is poured.
    high : sequence of Peak
        From `high_points`.
    where : str
        The section's name in messages.

    Raises
    ------
    InputError
        Where a place that the bait file names is not in the parting plane.
    """
    if isinstance(section.vents, str):
        return _found(floor, box, sprue, high)
    return _named(floor, section.vents, box, sprue, where)


def _found(floor: Floor, box: Box, sprue: Runner, high: Sequence[Peak]) -> Vents:
    made: list[Runner] = []
    findings = []
    for peak in high:
        at = floor.contour.nearest(peak.at[:2])
        if float(np.linalg.norm(peak.at - np.append(at, 0.0))) > OFF_PLANE:
            findings.append(_out_of_reach(floor, peak))
            continue
        runner = _laid(floor, at, sprue.direction, box, (sprue, *made))
        if runner is None:
            findings.append(_blocked(floor, peak.at, "high point"))
            continue
        made.append(runner)
        lower = peak.height - float(runner.at @ sprue.direction)
        if lower > _LOWER:
            findings.append(_lower(floor, peak, lower))
    return Vents(tuple(made), tuple(findings))


def _named(floor: Floor, stated: Sequence[str | Point], box: Box, sprue: Runner, where: str) -> Vents:
    made: list[Runner] = []
    findings = []
    for number, one in enumerate(stated, 1):
        spot = place(one, floor.contour, floor.plug.bench, floor.frame, f"{where}.vents[{number}]")
        runner = _laid(floor, spot.at, spot.out, box, (sprue, *made))
        if runner is None:
            findings.append(_blocked(floor, np.append(spot.at, 0.0), f"vent at {spot.name}"))
        else:
            made.append(runner)
    return Vents(tuple(made), tuple(findings))


def _laid(floor: Floor, at: Floats, up: Floats, box: Box, others: tuple[Runner, ...]) -> Runner | None:
    """Vent from a place of the contour to the edge of the box, moved or leant no more than what is in its way asks."""
    for start in np.vstack([at[None], floor.contour.walked(at, _WALK, _STEP)]):
        for turn in _TURNS:
            way = np.array([up[0] * np.cos(turn) - up[1] * np.sin(turn), up[0] * np.sin(turn) + up[1] * np.cos(turn)])
            runner = plain("vent", start, way, VENT_DIAMETER, box.way_out(start, way), _INSIDE)
            if floor.free(runner, others):
                return runner
    return None


def _at(floor: Floor, place: Floats) -> Point:
    x, y, z = floor.plug.bench.drawn(place).tolist()
    return x, y, z


def _out_of_reach(floor: Floor, peak: Peak) -> Finding:
    at = _at(floor, peak.at)
    off = abs(float(peak.at[2]))
    return Finding(
        code="air-trap",
        level=Level.WARNING,
        message=f"air stays at {place_text(at)}, a high point of the cavity {off * 1e3:.1f} mm off the parting plane, "
        "where no vent in that plane reaches it",
        where=(at,),
        advice="tip the mould about while it fills, drill a vent through the rubber, or put the sprue elsewhere",
    )


def _blocked(floor: Floor, place: Floats, what: str) -> Finding:
    at = _at(floor, place)
    return Finding(
        code="vent-blocked",
        level=Level.WARNING,
        message=f"no vent finds its way out from the {what} at {place_text(at)}: body, seats or runners stand about it",
        where=(at,),
        advice="name places for the vents, or cut one into the rubber",
    )


def _lower(floor: Floor, peak: Peak, lower: float) -> Finding:
    at = _at(floor, peak.at)
    return Finding(
        code="vent-moved",
        level=Level.NOTE,
        message=f"the vent of the high point at {place_text(at)} begins {lower * 1e3:.1f} mm lower, beside what is in "
        "its way",
        where=(at,),
        advice="tip the mould a little when it is full; a seat also lets air pass",
    )
