"""The result tree's account of shape: silhouettes, rose, stations, form, and the outlines to draw."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

import numpy as np

from meshlure.bait.pieces import Frame, MeshPiece
from meshlure.geometry.outline import Outline, outline
from meshlure.geometry.stations import Stations
from meshlure.geometry.surface import Floats, Surface
from meshlure.geometry.topology import EdgePairs
from meshlure.physics.areas import Rose
from meshlure.results.numbers import MM, MM2, plain
from meshlure.results.study import DrawnPiece, View

Tree = dict[str, Any]

_ROUND = 48
"""Corners of the ring that a ball is drawn by."""


def areas(silhouettes: Sequence[tuple[str, Outline]]) -> list[Tree]:
    """Return the silhouettes' areas."""
    return [
        {
            "name": name,
            "axis": plain(seen.axis),
            "area_mm2": seen.area * MM2,
            "centre_mm": plain(seen.centre, MM),
            "perimeter_mm": seen.perimeter * MM,
        }
        for name, seen in silhouettes
    ]


def rose(found: Rose) -> Tree:
    """Return the rose of area."""
    return {
        "axis": plain(found.axis),
        "area_mm2": plain(found.area, MM2),
        "plane": list(found.plane),
        "angle_deg": plain(np.degrees(found.angle)),
    }


def stations(found: Stations, tip: float) -> Tree:
    """Return the station curves, counted from the nose.

    Parameters
    ----------
    found : Stations
        Along the nose direction, so that they end at the nose.
    tip : float, m
        Of the body's nose along that direction.
    """
    return {
        "from_nose_mm": plain((tip - found.position)[::-1], MM),
        "area_mm2": plain(found.area[::-1], MM2),
        "perimeter_mm": plain(found.perimeter[::-1], MM),
        "width_mm": plain(found.width[::-1], MM),
        "depth_mm": plain(found.depth[::-1], MM),
    }


def views(
    silhouettes: Sequence[tuple[str, Outline]],
    pieces: Sequence[tuple[str, str, Surface, EdgePairs]],
    frame: Frame,
    tip: float,
    balls: Sequence[tuple[str, float, Floats]] = (),
) -> tuple[View, ...]:
    """Return side, top and front view with every piece's outline.

    Parameters
    ----------
    silhouettes : sequence of (name, Outline)
        The outer skin's; the first three are drawn.
    pieces : sequence of (name, role, Surface, EdgePairs)
    frame : Frame
    tip : float, m
        Of the nose along the nose direction.
    balls : sequence of (name, diameter, centres)
        Rows of balls: m, and (n, 3) array, m.
    """
    drawn = []
    turn = np.linspace(0.0, 2 * np.pi, _ROUND, endpoint=False)
    circle = np.column_stack([np.cos(turn), np.sin(turn)])
    for name, skin in silhouettes[:3]:
        seen = [DrawnPiece("skin", "skin", tuple(ring * MM for ring in skin.region.rings))]
        for piece, role, surface, pairs in pieces:
            region = outline(surface, pairs, skin.axis, skin.up).region
            seen.append(DrawnPiece(piece, role, tuple(ring * MM for ring in region.rings)))
        for name_of, diameter, centres in balls:
            middles = centres @ np.column_stack([skin.right, skin.up])
            seen.append(DrawnPiece(name_of, "ball", tuple((middle + diameter / 2 * circle) * MM for middle in middles)))
        shift = -tip * MM if abs(skin.right @ frame.nose + 1) < 1e-6 else 0.0
        shifted = tuple(DrawnPiece(p.name, p.role, tuple(ring - [shift, 0.0] for ring in p.rings)) for p in seen)
        drawn.append(View(name, skin.right, skin.up, shift, shifted))
    return tuple(drawn)


def drawn_pieces(pieces: Sequence[MeshPiece]) -> list[tuple[str, str, Surface, EdgePairs]]:
    """Return inserts and voids as they are drawn."""
    return [(piece.name, str(piece.role), piece.surface, piece.pairs) for piece in pieces]
