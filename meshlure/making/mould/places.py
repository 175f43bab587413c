"""Places that the bait file names, found on the contour that the parting plane cuts."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Final

import numpy as np

from meshlure.bait.pieces import Frame
from meshlure.errors import Fault, InputError
from meshlure.files.sections.mould import PLACES
from meshlure.findings import Point
from meshlure.geometry.surface import Floats
from meshlure.making.mould.bench import Bench
from meshlure.making.mould.contour import Contour

REACH: Final = 2e-3
"""m by which a point that is named may miss the contour."""

_ALONG: Final = 0.5
"""Share of a direction that must lie in the parting plane for a place to be there."""


@dataclass(frozen=True, eq=False)
class Place:
    """A place on the contour.

    Attributes
    ----------
    at : (2,) array, m
    out : (2,) array
        Unit vector out of the body there; towards the end that a word names.
    name : str
        As the bait file says it.
    """

    at: Floats
    out: Floats
    name: str


def towards(word: str, frame: Frame, bench: Bench) -> Floats | None:
    """Return the unit vector in the parting plane that a word names, (2,) array; None where it runs along the pull."""
    named = {"nose": frame.nose, "tail": -frame.nose, "back": frame.back, "belly": -frame.back}
    flat = (bench.turn @ named[word])[:2]
    length = float(np.linalg.norm(flat))
    return flat / length if length >= _ALONG else None


def known_places(frame: Frame, bench: Bench) -> tuple[str, ...]:
    """Return the words that name a place in the parting plane."""
    return tuple(word for word in PLACES if towards(word, frame, bench) is not None)


def place(stated: str | Point, contour: Contour, bench: Bench, frame: Frame, where: str) -> Place:
    """Return a place that the bait file names.

    Parameters
    ----------
    stated : str or Point
        nose, tail, back, belly, or a point in m, mesh coordinates.
    contour : Contour
    bench : Bench
    frame : Frame
    where : str
        Key, for the message.

    Raises
    ------
    InputError
        Where the place is not in the parting plane, or a point lies off the body's contour there.
    """
    if isinstance(stated, str):
        out = towards(stated, frame, bench)
        if out is None:
            known = known_places(frame, bench)
            raise InputError(
                Fault(
                    what="this place lies along the pull, not in the parting plane",
                    where=where,
                    found=repr(stated),
                    allowed=f"{', '.join(repr(word) for word in known)}, or a point",
                    next_step="name one of these, or pull the halves another way",
                )
            )
        return Place(contour.outermost(out), out, stated)
    spot = bench.place(np.array(stated))
    at = contour.nearest(spot[:2])
    off = float(np.linalg.norm(spot - np.append(at, 0.0)))
    if off > REACH:
        near = bench.drawn(np.append(at, 0.0)) * 1e3
        raise InputError(
            Fault(
                what="the point is not where the parting plane meets the body's skin",
                where=where,
                found=f"{_text(np.array(stated) * 1e3)}, {off * 1e3:.1f} mm off",
                allowed=f"within {REACH * 1e3:g} mm of that line",
                next_step=f"the nearest place on it is {_text(near)}",
            )
        )
    return Place(at, contour.outward(at, REACH), _text(np.array(stated) * 1e3))


def _text(point: Floats) -> str:
    return "[" + ", ".join(f"{round(float(value), 1) + 0.0:.1f}" for value in point) + "]"
