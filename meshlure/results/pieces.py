"""The result tree's account of the pieces: what was read, found, weighed."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from typing import Any

import numpy as np

from meshlure.bait.chambers import BallRow
from meshlure.bait.composition import Composition, Part
from meshlure.bait.pieces import Bait, Frame, MeshPiece
from meshlure.findings import Finding
from meshlure.geometry.moments import Moments
from meshlure.geometry.surface import Surface
from meshlure.results.numbers import G_MM2, GRAM, MM, MM3, plain

Tree = dict[str, Any]


def inputs(bait: Bait) -> list[Tree]:
    """Return every mesh file as it was read."""
    names = [bait.body.name, *(piece.name for piece in bait.pieces)]
    return [
        {
            "piece": name,
            "file": str(file.path),
            "sha256": file.sha256,
            "triangles": file.triangles,
            "length_unit": file.unit,
        }
        for name, file in zip(names, bait.files, strict=True)
    ]


def frame(frame: Frame) -> Tree:
    """Return the bait's directions."""
    return {"nose": plain(frame.nose), "back": plain(frame.back), "side": plain(frame.side)}


def findings(found: Sequence[Finding]) -> list[Tree]:
    """Return the findings, faults first."""
    order = {"fault": 0, "warning": 1, "note": 2}
    return [
        {
            "code": finding.code,
            "level": str(finding.level),
            "piece": finding.piece,
            "message": finding.message,
            "count": finding.count,
            "where_mm": [plain(point, MM) for point in finding.where],
            "advice": finding.advice,
        }
        for finding in sorted(found, key=lambda finding: order[finding.level])
    ]


def nose_tip(body: Surface, frame: Frame) -> float:
    """Return how far along the nose direction the body reaches, m."""
    return float((body.vertices @ frame.nose).max())


def size(body: Surface, frame: Frame) -> Tree:
    """Return the body's extents along nose, back and side."""
    return {
        key: float(np.ptp(body.vertices @ direction)) * MM
        for key, direction in (("length_mm", frame.nose), ("depth_mm", frame.back), ("width_mm", frame.side))
    }


def facets(pieces: Sequence[MeshPiece], volumes: Mapping[str, float]) -> list[Tree]:
    """Return each mesh's exact volume and what its facets leave out of the smooth part."""
    return [
        {
            "piece": piece.name,
            "volume_mm3": volumes[piece.name] * MM3,
            "deficit_mm3": piece.deficit * MM3,
            "deficit_g": None if piece.substance is None else piece.deficit * piece.substance.density * GRAM,
        }
        for piece in pieces
    ]


def pieces(composition: Composition, ends: Mapping[str, str]) -> list[Tree]:
    """Return every piece as it counts, the balls at the given ends."""
    rows = [_balls(row, ends[row.balls.chamber]) for row in composition.rows]
    return [_part(part) for part in composition.parts] + rows


def _part(part: Part) -> Tree:
    substance = part.substance
    return {
        "name": part.name,
        "role": str(part.role),
        "material": None if substance is None else substance.name,
        "density_g_cm3": None if substance is None else substance.density / 1e3,
        "volume_mm3": part.volume * MM3,
        "mass_g": part.mass.amount * GRAM,
        "centre_mm": plain(part.centre, MM),
    }


def _balls(row: BallRow, end: str) -> Tree:
    volume = row.volume(end)
    return {
        "name": f"balls in {row.balls.chamber}",
        "role": "ball",
        "material": row.balls.substance.name,
        "density_g_cm3": row.balls.substance.density / 1e3,
        "volume_mm3": volume.amount * MM3,
        "mass_g": row.mass(end).amount * GRAM,
        "centre_mm": plain(volume.centre, MM),
    }


def weight(mass: Moments, frame: Frame, tip: float) -> Tree:
    """Return mass, centre of gravity and inertia.

    Parameters
    ----------
    mass : Moments, kg
    frame : Frame
    tip : float, m
        Of the nose along the nose direction.
    """
    inertia = mass.inertia
    principal, vectors = np.linalg.eigh(inertia)
    axes = vectors.T
    # Each axis with its greatest component positive, so that rounding does not flip it between runs.
    axes = axes * np.sign(axes[np.arange(3), np.abs(axes).argmax(axis=1)])[:, None]
    return {
        "mass_g": mass.amount * GRAM,
        "centre_mm": plain(mass.centre, MM),
        "from_nose_mm": (tip - float(mass.centre @ frame.nose)) * MM,
        "inertia_g_mm2": plain(inertia, G_MM2),
        "principal_g_mm2": plain(principal, G_MM2),
        "principal_axes": plain(axes),
        "gyration_mm": plain(mass.gyration(), MM),
    }


def hardware(bait: Bait) -> list[Tree]:
    """Return the hardware with its places."""
    return [
        {
            "name": item.name,
            "mass_g": item.mass * GRAM,
            "at_mm": plain(item.at, MM),
            "hangs": item.hangs,
            "item": item.item,
            "displaced_mm3": item.volume * MM3,
        }
        for item in bait.hardware
    ]
