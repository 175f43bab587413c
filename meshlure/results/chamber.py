"""The result tree's account of a chamber: every way that was offered, the one taken, what stood in the way."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from typing import Any

from meshlure.making.chamber.needs import Needs
from meshlure.making.chamber.option import Option
from meshlure.results.numbers import GRAM, MM, degrees, plain

Tree = dict[str, Any]


def option(found: Option, frame_nose: Any, tip: float, extra: Tree) -> Tree:
    """Return one way to make a chamber.

    Parameters
    ----------
    found : Option
    frame_nose : (3,) array
        Unit vector out of the nose.
    tip : float, m
        Of the nose along it.
    extra : dict
        What was found of it elsewhere: kind, shift, postures, flight, reserve, leak, score.
    """
    bore, choice, opening, lining = found.bore, found.choice, found.opening, found.lining
    return {
        "ball_mm": choice.diameter * MM,
        "count": choice.count,
        "material": choice.substance.name,
        "bore_mm": 2 * found.hollow.radius * MM,
        "cut_mm": 2 * bore.cut.radius * MM,
        "length_mm": bore.length * MM,
        "travel_mm": found.travel * MM,
        "from_mm": plain(bore.nose_end, MM),
        "to_mm": plain(bore.tail_end, MM),
        "from_nose_mm": [(tip - float(end @ frame_nose)) * MM for end in (bore.nose_end, bore.tail_end)],
        "wall_mm": bore.wall * MM,
        "wall_at_mm": plain(bore.wall_at, MM),
        "end_wall_mm": bore.end_wall * MM,
        "end_walls_mm": [end * MM for end in bore.ends],
        "clear_mm": None if bore.nearest is None else bore.clear * MM,
        "nearest": bore.nearest,
        "balls_g": choice.mass * GRAM,
        "opening": None
        if opening is None
        else {"side": opening.side, "plug_mm": opening.plug * MM, "diameter_mm": 2 * opening.drill.radius * MM},
        "tube": None
        if lining is None or (tube := found.tube) is None
        else {
            "material": lining.substance.name,
            "wall_mm": lining.wall * MM,
            "mass_g": tube.amount * lining.substance.density * GRAM,
        },
        **extra,
    }


def chamber(
    asked: Needs,
    options: Sequence[Tree],
    weights: Mapping[str, float],
    taken: int | None,
    in_the_way: Sequence[str],
    replaced: Sequence[str],
) -> Tree:
    """Return the whole account.

    Parameters
    ----------
    asked : Needs
    options : sequence of dict
        The best first.
    weights : mapping of float
    taken : int or None
        Number of the one that was written, from 1; None where nothing fits.
    in_the_way : sequence of str
    replaced : sequence of str
        Voids that were free and are gone.
    """
    return {
        "asked": {
            "clearance_mm": asked.clearance * MM,
            "wall_mm": asked.wall * MM,
            "end_wall_mm": asked.end_wall * MM,
            "keep_clear_mm": asked.clear * MM,
            "slope_deg": degrees(asked.slope),
            "open_to": asked.open_to,
        },
        "options": list(options),
        "weights": dict(weights),
        "taken": taken,
        "reachable": taken is not None,
        "in_the_way": list(in_the_way),
        "replaced": list(replaced),
    }
