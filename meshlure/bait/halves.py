"""Half a body closed by a flat face at its middle plane, taken for a whole one."""

from __future__ import annotations

from typing import Final

import numpy as np

from meshlure.bait.pieces import Frame
from meshlure.findings import Finding, Level
from meshlure.geometry.phrasing import millimetres
from meshlure.geometry.surface import Floats, Surface

_LIKE: Final = 0.9
"""Share of the side view from which on a flat face is a cut through the middle; our choice."""

_OTHER: Final = 0.5
"""Share below which the other side is no such face: what is flat on both sides was drawn so; our choice."""

_FLAT: Final = 1e-4
"""Share of the width by which a flat face may lie off the body's end, and a normal off the side."""


def half_findings(body: Surface, frame: Frame, name: str) -> list[Finding]:
    """Return the question that a body raises which is flat on one side alone.

    Parameters
    ----------
    body : Surface
    frame : Frame
    name : str
        Of the piece.

    Notes
    -----
    The side view's area is half the sum of the faces' areas as seen from the side: more than the silhouette where a
    face hides another one.
    """
    shadow = body.double_areas @ frame.side / 2
    view = float(np.abs(shadow).sum()) / 2
    left, right = (_flat(body, frame.side * way, shadow * way) for way in (1.0, -1.0))
    area = max(left, right)
    if not view > 0 or area < _LIKE * view or min(left, right) > _OTHER * view:
        return []
    end = frame.side * (1.0 if left > right else -1.0)
    height = float((body.vertices @ end).max())
    axis = int(np.abs(end).argmax())
    at = f"{'xyz'[axis]} = {millimetres(height * np.sign(end[axis]))}" if abs(end[axis]) > 1 - 1e-9 else "one side"
    return [
        Finding(
            code="half-body",
            level=Level.WARNING,
            message=f"the body ends at {at} in a flat face of {area * 1e6:.4g} mm2, as large as its side view, and is "
            "not flat on the other side: is it half a body?",
            piece=name,
            advice="mirror the half and join both in CAD, or export it without that face and say --mend --mirror to "
            "meshlure inspect; a body meant to be flat on one side stays as it is, and leans",
        )
    ]


def _flat(body: Surface, way: Floats, shadow: Floats) -> float:
    """Area, m2, of the faces that lie in the body's end along a direction."""
    heights = body.vertices @ way
    slack = _FLAT * float(np.ptp(heights))
    lies = (heights[body.faces] >= heights.max() - slack).all(axis=1)
    return float(shadow[lies & (shadow > 0)].sum())
