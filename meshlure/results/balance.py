"""The result tree's account of the ballast: every way that was offered, the one taken, what stood in the way."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

import numpy as np

from meshlure.making.balance.aim import Aim
from meshlure.making.balance.ballast import ROD
from meshlure.making.balance.density import Dense
from meshlure.making.balance.ground import Ground
from meshlure.making.balance.outcome import Outcome
from meshlure.making.balance.ranking import WEIGHTS
from meshlure.making.balance.room import Left
from meshlure.making.balance.search import Option
from meshlure.results.numbers import GRAM, MM, degrees, plain

Tree = dict[str, Any]


def target(goal: Aim, displaced: float, water: float, behaviour: str) -> Tree:
    """Return what was asked for, in the bait's own terms."""
    return {
        "behaviour": behaviour,
        "reserve_g": goal.reserve * GRAM,
        "submerged_share": 1 - goal.reserve / (displaced * water) if goal.reserve > 0 else 1.0,
        "sink_m_s": goal.sink,
        "nose_up_deg": degrees(goal.nose_up),
        "lean_deg": degrees(goal.lean),
        "assumed": list(goal.assumed),
    }


def option(ground: Ground, found: Option, left: Left, extra: Tree) -> Tree:
    """Return one way to bring the ballast in.

    Parameters
    ----------
    ground : Ground
    found : Option
    left : Left
    extra : dict
        What was found of it elsewhere: score, flight, distance ratio, speed of sinking.
    """
    ballast, kind = found.ballast, found.ballast.kind
    own = ballast.volume()
    glue = ballast.mass().amount - own.amount * kind.substance.density
    return {
        "material": kind.substance.name,
        "density_g_cm3": kind.substance.density / 1e3,
        "shape": kind.shape,
        "size_mm": kind.diameter * MM,
        "count": kind.count,
        "length_mm": ballast.length * MM if kind.shape == ROD else None,
        "spacing_mm": None if kind.count == 1 else kind.spacing * MM,
        "pocket": kind.pocket,
        "fit_mm": kind.fit * MM,
        "glue": None if kind.glue is None else kind.glue.name,
        "glue_g": glue * GRAM,
        "mass_g": own.amount * kind.substance.density * GRAM,
        "at_mm": plain(ballast.middle, MM),
        "from_nose_mm": ground.from_nose(ballast.middle) * MM,
        **outcome(found.outcome),
        "upright": found.upright,
        "cover_mm": left.cover * MM,
        "cover_at_mm": plain(left.cover_at, MM),
        "clear_mm": left.clear * MM if np.isfinite(left.clear) else None,
        **extra,
    }


def outcome(found: Outcome) -> Tree:
    """Return how the bait behaves."""
    angles, heights = found.angles, found.metacentric
    return {
        "reserve_g": found.reserve * GRAM,
        "nose_up_deg": None if angles is None else degrees(angles.nose_up),
        "lean_deg": None if angles is None or angles.lean is None else degrees(angles.lean),
        "metacentric_mm": {
            "fore_aft": None if heights.fore_aft is None else heights.fore_aft * MM,
            "sideways": None if heights.sideways is None else heights.sideways * MM,
            "least": heights.least * MM,
        },
    }


def balance(
    wanted: Tree | None,
    options: Sequence[Tree],
    taken: int | None,
    reachable: bool,
    in_the_way: Sequence[str],
    replaced: Sequence[str],
    dense: Tree | None = None,
    pins: Sequence[Tree] = (),
) -> Tree:
    """Return the whole account.

    Parameters
    ----------
    wanted : dict or None
        None where the ballast was stated and nothing was asked for.
    options : sequence of dict
        The best first.
    taken : int or None
        Number of the one that was written, from 1.
    reachable : bool
        Whether the first meets the target.
    in_the_way : sequence of str
    replaced : sequence of str
        Inserts that were free and are gone.
    dense : dict, optional
        Where the body's density was solved for.
    pins : sequence of dict
        Holes for pins, where halves were written.
    """
    return {
        "target": wanted,
        "options": list(options),
        "taken": taken,
        "reachable": reachable,
        "in_the_way": list(in_the_way),
        "replaced": list(replaced),
        "weights": dict(WEIGHTS),
        "body_density": dense,
        "pins": list(pins),
    }


def density(found: Dense, now: float, mixes: Sequence[Tree], stock: Sequence[Tree]) -> Tree:
    """Return the body's density that was solved for.

    Parameters
    ----------
    found : Dense
    now : float, kg/m3
        What the bait file has.
    mixes : sequence of dict
        Resin mixes that reach it.
    stock : sequence of dict
        Other materials of about that density.
    """
    return {
        "now_g_cm3": now / 1e3,
        "needed_g_cm3": found.density / 1e3,
        "outcome": None if found.outcome is None else outcome(found.outcome),
        "mixes": list(mixes),
        "stock": list(stock),
    }


def pin(place: Any, axis: Any, diameter: float, length: float) -> Tree:
    """Return one hole for a pin across the middle plane."""
    return {
        "at_mm": plain(place, MM),
        "axis": plain(axis),
        "diameter_mm": diameter * MM,
        "length_mm": length * MM,
    }


def ballast_words(row: Tree) -> str:
    """Return one way in words: "lead rod 5 mm x 18.2 mm, 3.99 g"."""
    size = f"{row['size_mm']:.4g} mm"
    if row["shape"] == ROD:
        what = f"{row['material']} rod {size} x {row['length_mm']:.2f} mm"
    else:
        what = f"{row['count']} {row['material']} ball{'' if row['count'] == 1 else 's'} {size}"
    return f"{what}, {row['mass_g']:.2f} g"
