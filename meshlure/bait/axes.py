"""Whether nose and back are stated as the body lies: wrong axes show in its extents, and in how it comes to rest."""

from __future__ import annotations

from typing import Final

import numpy as np

from meshlure.bait.pieces import Frame
from meshlure.findings import Finding, Level
from meshlure.geometry.surface import Floats, Surface

_SQUAT: Final = 1.25
"""How many times longer than from nose to tail a body may be across: round, deep baits reach 1.1."""

_DOWN: Final = -0.5
"""Cosine between the back and the water's upward normal beyond which the back is down."""


def axis_findings(body: Surface, frame: Frame, name: str) -> list[Finding]:
    """Return the question that a body raises which is longer across than from nose to tail.

    Parameters
    ----------
    body : Surface
    frame : Frame
    name : str
        Of the piece.
    """
    length, depth, width = (float(np.ptp(body.vertices @ way)) for way in (frame.nose, frame.back, frame.side))
    if max(depth, width) <= _SQUAT * length:
        return []
    extents = " x ".join(f"{extent * 1e3:.4g}" for extent in np.ptp(body.bounds, axis=0))
    across, towards = max((depth, "to the back"), (width, "to the side"))
    return [
        Finding(
            code="nose-not-lengthwise",
            level=Level.WARNING,
            message=f"the body is {length * 1e3:.4g} mm long from nose to tail, but {across * 1e3:.4g} mm {towards} "
            f"({extents} mm along x, y and z): is nose = {_axis_text(frame.nose)} meant?",
            piece=name,
            advice="state the mesh direction that points out of the nose, and the one out of the back",
        )
    ]


def rest_findings(up: Floats | None, frame: Frame) -> list[Finding]:
    """Return the question that a bait raises which comes to rest on its back.

    Parameters
    ----------
    up : (3,) array or None
        The water's upward normal in the headline posture; None where it has none.
    frame : Frame
    """
    if up is None or float(up @ frame.back) >= _DOWN:
        return []
    return [
        Finding(
            code="rests-upside-down",
            level=Level.WARNING,
            message=f"the bait comes to rest with its back down: is back = {_axis_text(frame.back)} meant?",
            advice="turn back round if it is stated the wrong way; else set the ballast lower",
        )
    ]


def _axis_text(direction: Floats) -> str:
    axis = int(np.abs(direction).argmax())
    if abs(direction[axis]) > 1 - 1e-9:
        return f'"{"+" if direction[axis] > 0 else "-"}{"xyz"[axis]}"'
    return "[" + ", ".join(f"{value + 0.0:.3g}" for value in direction) + "]"
