"""Ballast stated in one line: "lead rod 5 mm x 18 mm at 41,0,-6"."""

from __future__ import annotations

import re
from typing import Final

import numpy as np

from meshlure.bait.meshpiece import solid_of
from meshlure.bait.substances import substance
from meshlure.errors import Fault, InputError
from meshlure.files.sections.substance import Substance as Stated
from meshlure.geometry.shapes import rod
from meshlure.geometry.solids import Solid
from meshlure.geometry.surface import Floats
from meshlure.making.balance.asked import glue_of
from meshlure.making.balance.ballast import BALL, FROM_BELLY, ROD, Ballast, Kind
from meshlure.making.balance.ground import Ground
from meshlure.units import quantity

WHERE: Final = "--ballast"
SUCH_AS: Final = "'lead rod 5 mm x 18 mm at 41,0,-6', or '3 lead balls 5 mm at 41,0,-6'"

_FORM = re.compile(
    r"(?:(?P<count>\d+)\s+)?(?P<material>.+?)\s+(?P<shape>rod|balls?)\s+(?P<diameter>[\d.]+\s*[a-z]+)"
    r"(?:\s+x\s+(?P<length>[\d.]+\s*[a-z]+))?\s+at\s+(?P<at>\S+(?:\s*,\s*\S+){0,2})",
    re.IGNORECASE,
)
_LONGEST = 2.0
_MOST = 20
_LOST = 1e-6
"""Share of the ballast's room that rounding may cost."""


def stated_ballast(text: str, ground: Ground) -> Ballast:
    """Return ballast that was stated in one line; pocket, fit and glue are those of [ballast].

    Parameters
    ----------
    text : str
        Count (of balls), material, shape, diameter, length (of a rod), and its middle in the bait file's coordinates.
    ground : Ground

    Raises
    ------
    InputError
        Where the line cannot be read, the stock does not know the material, or the ballast does not lie in the body.
    """
    found = _FORM.fullmatch(text.strip())
    if found is None:
        raise InputError(Fault("the ballast cannot be read", WHERE, text, SUCH_AS, "write it like that"))
    is_rod = found["shape"].lower() == ROD
    count = int(found["count"] or 1)
    if is_rod is (found["length"] is None) or (is_rod and count > 1) or not 1 <= count <= _MOST:
        what = "a rod has a diameter and a length, balls have a count and a diameter"
        raise InputError(Fault(what, WHERE, text, SUCH_AS, "write it like that"))
    metal = substance(Stated(material=found["material"]), WHERE)
    diameter = quantity(found["diameter"], "length", WHERE, positive=True, most=_LONGEST)
    section = ground.bait.plan.ballast
    kind = Kind(metal, ROD if is_rod else BALL, diameter, count, section.pocket, section.fit, glue_of(ground.bait))
    frame = ground.frame
    axis = frame.back if section.pocket == FROM_BELLY else frame.nose
    middle = _point(found["at"], ground.bait.plan.bait.metres)
    if is_rod:
        length = quantity(found["length"], "length", WHERE, positive=True, most=_LONGEST)
        ballast = Ballast(kind, length, middle, axis)
    else:
        ballast = Ballast.balls(kind, middle, axis)
    _check_inside(ballast, ground, text)
    return ballast


def _point(text: str, metres: float) -> Floats:
    try:
        x, y, z = (float(number) for number in text.split(","))
        place = np.array([x, y, z]) * metres
    except ValueError:
        place = np.full(3, np.nan)
    if not np.isfinite(place).all():
        raise InputError(Fault("the place is no point", WHERE, text, "three numbers: 41,0,-6", "correct it"))
    return place


def _check_inside(ballast: Ballast, ground: Ground, text: str) -> None:
    """Refuse ballast of which some room lies outside the body's material, or in another piece."""
    body = ground.bait.body
    rooms = [Solid.of(surface) for surface in ballast.rooms()]
    whole = rooms[0].joined(*rooms[1:])
    beyond = whole.less(solid_of(body.surface, body.name)).volume
    if beyond > _LOST * whole.volume:
        raise InputError(
            Fault(
                "the ballast does not lie in the body",
                WHERE,
                f"{text}: {beyond * 1e9:.3g} of {whole.volume * 1e9:.3g} mm3 are outside",
                "all of it inside the body's skin",
                "move it, or make it smaller",
            )
        )
    faults = []
    hole = ballast.drill(ground.lowest)
    way = whole if hole is None else whole.joined(Solid.of(rod(hole)))
    names = [f"'{piece.name}'" for piece in ground.bait.pieces] + ["a cavity of the body"] * len(body.cavities)
    for name, surface in zip(names, ground.neighbours, strict=True):
        shared = way.met(Solid.of(surface)).volume
        if shared > _LOST * whole.volume:
            faults.append(
                Fault(
                    f"the ballast{' or the hole to it' if hole is not None else ''} and {name} share room",
                    WHERE,
                    f"{text}: {shared * 1e9:.3g} mm3",
                    "none",
                    "move it, or say free = true beside an insert that it replaces",
                )
            )
    if faults:
        raise InputError(faults)
