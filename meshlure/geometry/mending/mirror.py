"""Half a body completed by its mirror image."""

from __future__ import annotations

import numpy as np

from meshlure.geometry.mending.rims import Rim, rims
from meshlure.geometry.mending.steps import Left, Step
from meshlure.geometry.openings import FLAT_SHARE
from meshlure.geometry.phrasing import millimetres, place_text, places
from meshlure.geometry.surface import Floats, Surface
from meshlure.geometry.topology import paired

_STRAIGHT = 1e-6
"""How far a unit normal may be off an axis to be taken for it."""


def mirrored(surface: Surface) -> tuple[Step | None, Left | None]:
    """Return a half body joined with its mirror image, or why it is none.

    Notes
    -----
    All open edges must lie in one plane, and the whole body on one side of it. Their corners are brought into that
    plane; the image shares them.
    """
    edges = paired(surface).irregular.open
    if not len(edges):
        return None, Left("the surface is closed: there is no opening to mirror it at")
    found, loose = rims(surface, edges)
    flat = [rim for rim in found if rim.flat]
    if loose or not flat:
        return None, Left("no flat opening to mirror the body at", (), "Mirror and join the half in CAD.")
    largest = max(flat, key=lambda rim: rim.area)
    normal, height = _plane(largest)
    slack = FLAT_SHARE * largest.length
    off = surface.vertices[np.unique(edges)] @ normal - height
    if np.abs(off).max() > slack:
        farthest = surface.vertices[np.unique(edges)[np.abs(off).argmax()]]
        apart = millimetres(float(np.abs(off).max()))
        return None, Left(
            f"the surface is also open at {place_text(farthest)}, {apart} off the plane of its largest flat opening: "
            "it is no clean half",
            places([farthest]),
            "Close the other holes first.",
        )
    above = surface.vertices[np.unique(surface.faces)] @ normal - height
    if above.max() > slack:
        return None, Left(
            f"the body reaches {millimetres(float(above.max()))} beyond the opening's plane: its image would cross it",
            places([largest.centre]),
            "Mirror and join the half in CAD.",
        )
    rim = np.unique(edges)
    vertices = surface.vertices.copy()
    vertices[rim] -= off[:, None] * normal
    count = len(vertices)
    image = vertices - 2 * (vertices @ normal - height)[:, None] * normal
    numbers = np.arange(count) + count
    numbers[rim] = rim
    faces = np.concatenate([surface.faces, numbers[surface.faces][:, ::-1]])
    did = (
        f"mirrored the body at the flat opening about {place_text(largest.centre)}, across the direction "
        f"({', '.join(f'{x + 0.0:.4g}' for x in normal)}), and joined both halves"
    )
    made = Surface(np.concatenate([vertices, image]), faces)
    return Step("mirror", did, made, 1, float(np.abs(off).max()), places([largest.centre])), None


def _plane(rim: Rim) -> tuple[Floats, float]:
    """Unit normal out of the body, along an axis where it nearly is, and height of the plane along it, m."""
    normal = rim.vector_area / rim.area
    axis = int(np.abs(normal).argmax())
    if 1 - abs(normal[axis]) < _STRAIGHT:
        normal = np.eye(3)[axis] * np.sign(normal[axis])
    # Rounded to a millionth of a millimetre, so that a half drawn at y = 0 is mirrored there.
    return normal, round(float((rim.points @ normal).mean()), 9)
