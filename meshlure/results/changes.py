"""The result tree's account of the changes that matter most: what would bring the bait to the posture wanted."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any, Final

import numpy as np

from meshlure.files.baitfile import BaitFile
from meshlure.geometry.surface import Floats
from meshlure.physics.levelling import ballast_move, weight_for_level
from meshlure.physics.posture import attitude
from meshlure.physics.repose import Ends, Vessel
from meshlure.results.numbers import GRAM, MM, degrees
from meshlure.stock.materials import material

Tree = dict[str, Any]

LEVEL: Final = float(np.radians(1.5))
"""rad. A posture this near to the one wanted needs no change."""

_PLACES: Final = (0.12, 0.88)
"""Shares of the length at which a weight on the skin is offered: as far out as there is room for it; ours."""

FARTHEST: Final = 0.4
"""Share of the length beyond which moving the ballast is no change but another bait; ours."""


@dataclass(frozen=True, eq=False)
class Wanted:
    """The posture that changes are held against: that of [target] where it states one, else level."""

    up: Floats
    nose_up: float
    lean: float
    stated: bool


def wanted(plan: BaitFile, vessel: Vessel) -> Wanted:
    """Return the posture that a bait file asks for."""
    target, frame = plan.target, vessel.frame
    nose_up = 0.0 if target is None else target.nose_up or 0.0
    lean = 0.0 if target is None else target.lean or 0.0
    across = np.cos(lean) * frame.back + np.sin(lean) * frame.side
    up = np.sin(nose_up) * frame.nose + np.cos(nose_up) * across
    return Wanted(up, nose_up, lean, target is not None and target.nose_up is not None)


def changes(plan: BaitFile, vessel: Vessel, ends: Ends, up: Floats | None, length: float, tip: float) -> list[Tree]:
    """Return the one or two changes that bring a bait to the posture wanted; none where it rests so.

    Parameters
    ----------
    plan : BaitFile
    vessel : Vessel
    ends : dict
        Where balls lie.
    up : (3,) array or None
        In the posture that heads the page.
    length, tip : float, m
        Of the body along the nose, and where its nose tip lies along that direction.
    """
    if up is None or float(up @ vessel.frame.back) <= 0:
        return []
    goal, frame = wanted(plan, vessel), vessel.frame
    now = attitude(up, frame.nose, frame.back, frame.side)
    rows: list[Tree] = []
    if abs(now.nose_up - goal.nose_up) > LEVEL and not _content(plan, now.nose_up):
        rows += _fore_aft(vessel, ends, goal, length, tip)
    if now.lean is not None and abs(now.lean - goal.lean) > LEVEL:
        move = ballast_move(vessel, ends, goal.up, frame.side)
        if move is not None and abs(move.by) <= FARTHEST * length:
            towards = "left" if move.by > 0 else "right"
            words = f"Moving '{move.piece}' {_mm(move.by)} to the {towards} {_end(goal, 'lean')}."
            rows.append(_row("move", words, piece=move.piece, by_mm=abs(move.by) * MM, towards=towards))
    return rows


def _content(plan: BaitFile, nose_up: float) -> bool:
    """Whether the maker's own limits hold the angle, and no target asks for another."""
    limits = None if plan.limits is None or plan.target is not None else plan.limits.nose_up
    return limits is not None and limits[0] <= nose_up <= limits[1]


def _fore_aft(vessel: Vessel, ends: Ends, goal: Wanted, length: float, tip: float) -> list[Tree]:
    rows = []
    move = ballast_move(vessel, ends, goal.up, vessel.frame.nose)
    if move is not None and abs(move.by) <= FARTHEST * length:
        towards = "nose" if move.by > 0 else "tail"
        words = f"Moving '{move.piece}' {_mm(move.by)} towards the {towards} {_end(goal, 'nose_up')}."
        rows.append(_row("move", words, piece=move.piece, by_mm=abs(move.by) * MM, towards=towards))
    first, last = (tip - share * length for share in _PLACES)
    weight = weight_for_level(vessel, ends, goal.up, (first, last))
    if weight is not None:
        lead = material("lead", "")
        mass = weight.net / (1 - vessel.water / lead.density)
        place = tip - weight.along
        words = (
            f"{mass * GRAM:.2g} g of lead on the skin at {_mm(place)} from the nose {_end(goal, 'nose_up')}, and "
            f"leaves {weight.reserve * GRAM:.2f} g in reserve."
        )
        rows.append(
            _row(
                "add",
                words,
                mass_g=mass * GRAM,
                from_nose_mm=place * MM,
                reserve_g=weight.reserve * GRAM,
            )
        )
    return rows


def _end(goal: Wanted, what: str) -> str:
    angle = degrees(goal.nose_up if what == "nose_up" else goal.lean) or 0.0
    if abs(angle) < 0.05:
        return "levels it" if what == "nose_up" else "rights it"
    if what == "nose_up":
        return f"brings the nose {abs(angle):.0f}° {'up' if angle > 0 else 'down'}"
    return f"brings it to the lean of {angle:+.0f}°"


def _mm(length: float) -> str:
    return f"{abs(length) * MM:.{1 if abs(length) < 9.95e-3 else 0}f} mm"


def _row(kind: str, words: str, **values: Any) -> Tree:
    keys: Tree = dict.fromkeys(("piece", "by_mm", "towards", "mass_g", "from_nose_mm", "reserve_g"))
    return {"kind": kind, "words": words, **keys, **values}
