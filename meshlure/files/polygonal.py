"""Polygons of a mesh file as triangles in metres, with what is to be said of them."""

from __future__ import annotations

from collections.abc import Callable, Sequence

import numpy as np

from meshlure.errors import Fault, InputError
from meshlure.files.polygons import LONGEST, Polygons, TooLongError, cut
from meshlure.files.triangles import Part, Triangles, check_within, in_metres
from meshlure.findings import Finding, Level
from meshlure.geometry.surface import Floats, Ints

_PLACES = 10


def triangles_of(
    vertices: Floats,
    polygons: Polygons,
    metres: float,
    where: str,
    line: Callable[[int], str],
    parts: Sequence[tuple[str, int]] = (),
) -> Triangles:
    """Triangles, m, of polygons over a table of vertices, with findings on those that are not flat or cross themselves.

    Parameters
    ----------
    vertices : (n, 3) array, file's unit
    polygons : Polygons
        At least one, of vertices that are there.
    metres : float, m
        Length of the file's unit.
    where : str
        The file, for messages.
    line : callable
        Says of a polygon, counted from 0, where it stands in the file: "line 12".
    parts : sequence of (str, int)
        Runs of polygons: their name and how many they are.

    Raises
    ------
    InputError
        A corner has a coordinate that is no finite number, or farther out than any bait; or faces that are not convex
        would take too long to cut.
    """
    count = len(polygons.counts)
    corners = vertices[polygons.corners]
    owners = np.repeat(np.arange(count), polygons.counts)
    with np.errstate(over="ignore"):
        check_within(corners * metres, corners, count, where, owners)
    try:
        pieces = cut(vertices, polygons)
    except TooLongError as error:
        raise InputError(
            Fault(
                "faces that are not convex are too many or have too many corners to be cut into triangles",
                f"{where}, {line(error.first)}",
                f"{error.polygons:,} of {error.corners:,} corners",
                f"what takes {LONGEST:g} s, such as one of 40,000 corners or 300,000 of five",
                "export triangles",
            )
        ) from None
    firsts = vertices[polygons.corners[np.cumsum(polygons.counts) - polygons.counts]] * metres
    findings = []
    if len(pieces.bent):
        message = (
            f"Not flat: {len(pieces.bent)} of {count} polygons, by up to "
            f"{pieces.bend * metres * 1e3:.2g} mm (the first in {line(int(pieces.bent[0]))}); "
            "along which diagonal they bend is not in the file."
        )
        advice = "Export triangles where this matters, so that every program sees the same surface."
        findings.append(_finding("bent-polygons", Level.NOTE, message, firsts, pieces.bent, advice))
    if len(pieces.crossing):
        message = (
            f"Crossing their own outline: {len(pieces.crossing)} of {count} polygons (the first in "
            f"{line(int(pieces.crossing[0]))}); the surface there is not the one that was drawn."
        )
        advice = "Redraw these faces, or export triangles."
        findings.append(_finding("crossing-polygons", Level.WARNING, message, firsts, pieces.crossing, advice))
    stops = np.searchsorted(pieces.owners, np.cumsum([length for _, length in parts], dtype=np.intp))
    runs = np.diff(stops, prepend=0)
    named = tuple(Part(name, int(run)) for (name, _), run in zip(parts, runs, strict=True))
    return Triangles(in_metres(vertices[pieces.faces], metres, where), tuple(findings), named)


def _finding(code: str, level: Level, message: str, firsts: Floats, numbers: Ints, advice: str) -> Finding:
    """Return a finding about polygons, placed at their first corners."""
    places = tuple((float(x), float(y), float(z)) for x, y, z in firsts[numbers[:_PLACES]])
    return Finding(code, level, message, count=len(numbers), where=places, advice=advice)
