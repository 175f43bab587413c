"""What a study of a bait hands on: the result tree of results.json, and the outlines to draw it with."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Any

import numpy as np
from numpy.typing import NDArray

from meshlure.results.jsontext import json_text

Floats = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class DrawnPiece:
    """One piece's filled outline in one view.

    Attributes
    ----------
    name, role : str
        As in ``pieces`` of results.json; the outer skin of everything is drawn as role "skin".
    rings : tuple of (n, 2) arrays, mm
        Closed rings without the repeated first point, outer ones anticlockwise, holes clockwise.
    """

    name: str
    role: str
    rings: tuple[Floats, ...]


@dataclass(frozen=True, eq=False)
class View:
    """The bait seen from one side, to scale.

    Attributes
    ----------
    name : str
        side (nose to the left, back up), top (nose to the left, seen from above) or front (back up, nose to the eye).
    right, up : (3,) arrays
        Mesh directions of the drawing's axes; a mesh point p in mm is drawn at (p.right - shift, p.up).
    shift : float, mm
        Such that the nose tip is at 0 where ``right`` runs from nose to tail, else 0.
    pieces : tuple of DrawnPiece
        The skin first, then the inside pieces in the bait file's order.
    """

    name: str
    right: Floats
    up: Floats
    shift: float
    pieces: tuple[DrawnPiece, ...]

    def place(self, point_mm: Any) -> tuple[float, float]:
        """Return where a mesh point in mm is drawn, mm."""
        point = np.asarray(point_mm, dtype=np.float64)
        return float(point @ self.right - self.shift), float(point @ self.up)


@dataclass(frozen=True, eq=False)
class DraftRegion:
    """A part of a mould half's map.

    Attributes
    ----------
    low, high : float or None, degrees
        Draft there; None where rubber is held.
    rings : tuple of (n, 2) arrays, mm
        Outer ones anticlockwise, holes clockwise.
    """

    low: float | None
    high: float | None
    rings: tuple[Floats, ...]


@dataclass(frozen=True, eq=False)
class HalfMap:
    """A mould half seen from the side that it is pulled to, as it lies on its board.

    Attributes
    ----------
    half : str
        A or B.
    regions : tuple of DraftRegion
        Together all that the half covers; what is held comes last and lies over the others.
    """

    half: str
    regions: tuple[DraftRegion, ...]


@dataclass(frozen=True, eq=False)
class Relief:
    """A piece seen from above as heights on a grid.

    Attributes
    ----------
    name : str
    heights : (i, j) array, mm
        Of the topmost place over each cell, along x and y of the bench; NaN beside the piece.
    pitch : float, mm
    """

    name: str
    heights: Floats
    pitch: float


@dataclass(frozen=True, eq=False)
class ScenePiece:
    """One piece's mesh, to be looked at.

    Attributes
    ----------
    name, role : str
        As in ``pieces`` of results.json.
    vertices : (n, 3) array, mm
        In mesh coordinates; at a sharp edge, one for each side of it.
    normals : (n, 3) array
        Unit normals of the smooth skin there.
    faces : (m, 3) array
        Vertex numbers, outward by the right-hand rule.
    """

    name: str
    role: str
    vertices: Floats
    normals: Floats
    faces: NDArray[np.intp]


@dataclass(frozen=True, eq=False)
class Scene:
    """The bait's pieces in the posture that heads the page.

    Attributes
    ----------
    pieces : tuple of ScenePiece
        The body first, then inserts and hollows in the bait file's order, then the balls where they lie.
    up : (3,) array or None
        The water's upward normal in mesh coordinates; None where no attitude is its own.
    waterline_mm : float or None
        Height of the surface along ``up``; None under water.
    """

    pieces: tuple[ScenePiece, ...]
    up: Floats | None
    waterline_mm: float | None


@dataclass(frozen=True, eq=False)
class Study:
    """Everything one examination of a bait found.

    Attributes
    ----------
    results : mapping
        The tree of results.json: mm, g, degrees at its keys' word; published as a JSON Schema in the package.
    views : tuple of View
        side, top and front, for drawing.
    scene : Scene or None
        The meshes to look at from all sides; None where there is none to show.
    maps : tuple of HalfMap
        Of a mould's halves, where one was made.
    reliefs : tuple of Relief
        Of a mould's boards.
    """

    results: Mapping[str, Any]
    views: tuple[View, ...] = ()
    scene: Scene | None = None
    maps: tuple[HalfMap, ...] = ()
    reliefs: tuple[Relief, ...] = ()

    def to_json(self) -> str:
        """Return results.json as text; raises ValueError if a number in it is not finite."""
        return json_text(self.results)
