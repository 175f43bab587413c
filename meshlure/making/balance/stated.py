"""Ballast stated in one line: "lead rod 5 mm x 18 mm at 41,0,-6"."""

from __future__ import annotations

import re
from typing import Final

import numpy as np

from meshlure.bait.substances import substance
from meshlure.errors import Fault, InputError
from meshlure.files.sections.ballast import BallastSection
from meshlure.files.sections.substance import Substance as Stated
from meshlure.geometry.shells import winding_number
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


def stated_ballast(text: str, ground: Ground, section: BallastSection) -> Ballast:
    """Return ballast that was stated in one line.

    Parameters
    ----------
    text : str
        Count (of balls), material, shape, diameter, length (of a rod), and its middle in the bait file's coordinates.
    ground : Ground
    section : BallastSection
        For pocket, fit and glue.

    Raises
    ------
    InputError
        Where the line cannot be read, the stock does not know the material, or the ballast does not lie in the body.
    """
    found = _FORM.fullmatch(text.strip())
    if found is None:
        raise InputError(Fault("the ballast cannot be read", WHERE, text, SUCH_AS, "write it like that"))
    rod = found["shape"].lower() == ROD
    count = int(found["count"] or 1)
    if rod is (found["length"] is None) or (rod and count > 1) or not 1 <= count <= _MOST:
        what = "a rod has a diameter and a length, balls have a count and a diameter"
        raise InputError(Fault(what, WHERE, text, SUCH_AS, "write it like that"))
    metal = substance(Stated(material=found["material"]), WHERE)
    diameter = quantity(found["diameter"], "length", WHERE, positive=True, most=_LONGEST)
    glue = None if section.glue is None else substance(Stated(material=section.glue), "ballast.glue")
    kind = Kind(metal, ROD if rod else BALL, diameter, count, section.pocket, section.fit, glue)
    frame = ground.frame
    axis = frame.back if section.pocket == FROM_BELLY else frame.nose
    middle = _point(found["at"], ground.bait.plan.bait.metres)
    if rod:
        length = quantity(found["length"], "length", WHERE, positive=True, most=_LONGEST)
        ballast = Ballast(kind, length, middle, axis)
    else:
        ballast = Ballast.balls(kind, middle, axis)
    _check_inside(ballast, ground, text)
    return ballast


def _point(text: str, metres: float) -> np.ndarray[tuple[int, ...], np.dtype[np.float64]]:
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
    from meshlure.bait.meshpiece import solid_of
    from meshlure.geometry.solids import Solid

    body = ground.bait.body
    rooms = [Solid.of(surface) for surface in ballast.rooms()]
    whole = rooms[0].joined(*rooms[1:])
    beyond = whole.less(solid_of(body.surface, body.name)).volume
    inside = winding_number(body.surface, ballast.middle) > 0.5
    faults = []
    if beyond > 1e-6 * whole.volume or not inside:
        faults.append(
            Fault(
                "the ballast does not lie in the body",
                WHERE,
                f"{text}: {beyond * 1e9:.3g} of {whole.volume * 1e9:.3g} mm3 are outside",
                "all of it inside the body's skin",
                "move it, or make it smaller",
            )
        )
    for piece in ground.bait.pieces:
        shared = whole.met(solid_of(piece.surface, piece.name)).volume
        if shared > 1e-6 * whole.volume:
            faults.append(
                Fault(
                    f"the ballast and '{piece.name}' share room",
                    WHERE,
                    f"{text}: {shared * 1e9:.3g} mm3",
                    "none",
                    "move it, or say free = true beside an insert that it replaces",
                )
            )
    if faults:
        raise InputError(faults)
