"""The result tree's account of postures: angles, waterline, metacentric heights, sensitivity, righting."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

import numpy as np

from meshlure import tolerances
from meshlure.bait.pieces import Frame
from meshlure.geometry.surface import Floats
from meshlure.physics.posture import attitude, horizontal, nose_is_vertical
from meshlure.physics.repose import Dangle, Repose
from meshlure.physics.righting import Righting
from meshlure.results.numbers import G_MM, GRAM, MM, MM2, degrees, plain, to_fives

Tree = dict[str, Any]

_MOVED = 0.1e-3 * 10e-3
"""kg m. A tenth of a gram moved by ten millimetres."""
_MILLIMETRE = 1e-3


def floating(repose: Repose, frame: Frame, mass: float, water: float, barrier: float | None, share: float) -> Tree:
    """Return one resting posture of a floating bait.

    Parameters
    ----------
    repose : Repose
    frame : Frame
    mass : float, kg
    water : float, kg/m3
    barrier : float or None, m
        Least rise of the energy to leave it.
    share : float
        Of the starts.
    """
    state = repose.rest.state
    up, cut = state.up, state.immersed.cut
    section = cut.section
    heights, _ = state.modes()
    vertical = nose_is_vertical(up, frame.nose)
    along = horizontal(frame.nose, up)
    fore_aft = None if vertical else state.metacentric(along)
    sideways = None if vertical else state.metacentric(np.cross(up, along))
    free = "both" if heights[1] < tolerances.NEUTRAL_HEIGHT else _free(repose.rest.neutral, frame, up)
    angles = _angles(up, frame, free, fore_aft if fore_aft is not None else heights[0], sideways, mass)
    whole = repose.potential.hull.volume
    tree = {
        "kind": "floating",
        "upright": repose.rest.upright,
        "up": plain(up),
        **angles,
        "waterline_mm": cut.height * MM,
        "submerged_share": state.immersed.volume / whole,
        "waterplane_mm2": section.area * MM2,
        "metacentric_mm": {
            "fore_aft": None if fore_aft is None else fore_aft * MM,
            "sideways": None if sideways is None else sideways * MM,
            "least": float(heights[0]) * MM,
        },
        "share": share,
        "barrier_g_mm": None if barrier is None else barrier * mass * G_MM,
        "balls": dict(repose.ends) or None,
        "dry": list(repose.dry),
        "centre_mm": plain(state.centre, MM),
        "buoyancy_centre_mm": plain(state.immersed.centre, MM),
    }
    tree["sensitivity"]["g_per_mm"] = section.area * water * _MILLIMETRE * GRAM
    return _named(tree, frame, np.asarray(up))


def dangling(dangle: Dangle, frame: Frame, mass: float, share: float) -> Tree:
    """Return how the bait hangs under water."""
    up = dangle.hang.up
    tree: Tree = {
        "kind": "hanging",
        "upright": None if up is None else bool(up @ frame.back > 0),
        "up": None if up is None else plain(up),
        "waterline_mm": None,
        "submerged_share": 1.0,
        "waterplane_mm2": None,
        "metacentric_mm": {"fore_aft": None, "sideways": None, "least": dangle.hang.stiffness * MM},
        "share": share,
        "barrier_g_mm": None,
        "balls": dict(dangle.ends) or None,
        "dry": [],
        "centre_mm": plain(dangle.centre, MM),
        "buoyancy_centre_mm": plain(dangle.buoyancy_centre, MM),
    }
    if up is None:
        tree |= {"nose_up_deg": None, "lean_deg": None, "free": "both", "rounded": False}
        tree["sensitivity"] = _no_sensitivity()
    else:
        stiffness = dangle.hang.stiffness
        tree |= _angles(up, frame, None, stiffness, None if nose_is_vertical(up, frame.nose) else stiffness, mass)
        if not nose_is_vertical(up, frame.nose):
            tree["metacentric_mm"] |= {"fore_aft": stiffness * MM, "sideways": stiffness * MM}
    return _named(tree, frame, up)


def _no_sensitivity() -> Tree:
    return dict.fromkeys(("deg_per_0_1g_10mm", "deg_per_mm", "g_per_mm", "lean_deg_per_0_1g_10mm", "lean_deg_per_mm"))


def _angles(up: Floats, frame: Frame, free: str | None, fore_aft: float, sideways: float | None, mass: float) -> Tree:
    """Angles with their sensitivities; a free angle is None, a touchy one comes in steps of five."""
    found = attitude(up, frame.nose, frame.back, frame.side)
    nose_up, lean = degrees(found.nose_up), degrees(found.lean)
    turn, turn_moved = _turn(_MILLIMETRE, fore_aft), _turn(_MOVED / mass, fore_aft)
    roll = None if sideways is None else _turn(_MILLIMETRE, sideways)
    roll_moved = None if sideways is None else _turn(_MOVED / mass, sideways)
    rounded = False
    if free in ("nose_up", "both"):
        nose_up, turn, turn_moved = None, None, None
    elif nose_up is not None and turn is not None and turn > tolerances.COARSE_ANGLE:
        nose_up, rounded = to_fives(nose_up), True
    if free in ("lean", "both"):
        lean, roll, roll_moved = None, None, None
    elif lean is not None and roll is not None and roll > tolerances.COARSE_ANGLE:
        lean, rounded = to_fives(lean), True
    return {
        "nose_up_deg": nose_up,
        "lean_deg": lean,
        "free": free,
        "rounded": rounded,
        "sensitivity": {
            "deg_per_0_1g_10mm": turn_moved,
            "deg_per_mm": turn,
            "g_per_mm": None,
            "lean_deg_per_0_1g_10mm": roll_moved,
            "lean_deg_per_mm": roll,
        },
    }


def _turn(shift: float, height: float) -> float | None:
    """Angle by which a shift of the centre of gravity turns a bait of a metacentric height, degrees."""
    return float(np.degrees(np.arctan(shift / height))) if height > 0 else None


def _free(neutral: Floats | None, frame: Frame, up: Floats) -> str | None:
    """Name the angle that a neutral direction leaves free."""
    if neutral is None:
        return None
    return "nose_up" if abs(neutral @ frame.nose) > np.sqrt(0.5) * np.linalg.norm(np.cross(frame.nose, up)) else "lean"


def _named(tree: Tree, frame: Frame, up: Floats | None) -> Tree:
    """Add the posture's name and sentence."""
    verb = "floats" if tree["kind"] == "floating" else "hangs"
    if up is None:
        words = "Hangs as it is put: its centres meet, so it has no preferred attitude."
        return tree | {"name": f"{verb}, no preferred attitude", "words": words}
    if tree["free"] == "both":
        name = f"{verb}, any way up"
        words = f"{name[0].upper()}{name[1:]}, {tree['submerged_share']:.0%} under water."
        return tree | {"name": name, "words": words}
    side = _side(frame, up)
    if tree["free"] == "lean":
        side = "any side up"
    name = f"{verb} {side}" if side.startswith("nose") else f"{verb}, {side}"
    says = [name[0].upper() + name[1:]]
    if tree["nose_up_deg"] is not None and not side.startswith("nose"):
        says.append(_tilt(tree["nose_up_deg"], "nose {} up", "nose {} down", "level"))
    if tree["lean_deg"] is not None and side in ("back up", "belly up"):
        lean = tree["lean_deg"] if side == "back up" else 180.0 - abs(tree["lean_deg"])
        right, left = ("leaning {} to its right", "leaning {} to its left")
        if side == "belly up":
            right = left = "leaning {}"
        says.append(_tilt(lean, right, left, "without lean"))
    if tree["free"] == "lean":
        says.append("turning freely about its long axis")
    elif tree["free"] == "nose_up":
        says.append("at any nose angle")
    if tree["kind"] == "floating":
        says.append(f"{tree['submerged_share']:.0%} under water")
    return tree | {"name": name, "words": ", ".join(says) + "."}


def _tilt(angle: float, more: str, less: str, none: str) -> str:
    size = f"{abs(angle):.0f}\N{DEGREE SIGN}"
    if abs(angle) < 0.5:
        return none
    return (more if angle > 0 else less).format(size)


def _side(frame: Frame, up: Floats) -> str:
    """Name what of the bait points up."""
    choices = {
        "nose up": frame.nose,
        "nose down": -frame.nose,
        "back up": frame.back,
        "belly up": -frame.back,
        "on its right side": frame.side,
        "on its left side": -frame.side,
    }
    return max(choices, key=lambda name: float(choices[name] @ up))


def righting(curves: Sequence[tuple[int, Righting]]) -> list[Tree]:
    """Return the righting curves with the number of the posture each starts from."""
    return [
        {
            "plane": curve.plane,
            "heel_deg": plain(np.degrees(curve.heel)),
            "arm_mm": plain(curve.arm, MM),
            "posture": number,
        }
        for number, curve in curves
    ]
