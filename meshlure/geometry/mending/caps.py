"""Flat holes closed by a lid between the corners of their rims."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from meshlure.geometry.ears import ears_of, in_plane
from meshlure.geometry.mending.rims import Rim, rims
from meshlure.geometry.mending.steps import Left, Step
from meshlure.geometry.openings import FLAT_SHARE
from meshlure.geometry.phrasing import counted, millimetres, place_text, places
from meshlure.geometry.surface import Floats, Ints, Surface
from meshlure.geometry.topology import paired

_SAME_AREA = 1e-6
_MOST = 20_000
"""Holes. Which of them lie within others takes their square: some seconds."""

_ADVICE = "Close it in CAD. A flat opening can be closed by a lid (--cap), half a body be mirrored (--mirror)."


@dataclass(frozen=True, eq=False)
class _Lid:
    """A flat hole: its outer rim, and rims of islands within it."""

    outer: Rim
    inner: tuple[Rim, ...]

    @property
    def area(self) -> float:
        return self.outer.area - sum(rim.area for rim in self.inner)


def capped(surface: Surface, share: float) -> tuple[Step | None, list[Left]]:
    """Return the surface with its small flat holes closed, and what holes stay.

    Parameters
    ----------
    surface : Surface
        Its faces wound alike.
    share : float
        Greatest share of the surface's area that a hole may have.

    Notes
    -----
    A hole is flat where its rim keeps within a thousandth of its length of one plane. It is cut into triangles between
    the rim's corners by ears; nothing else of the surface moves. A rim within another one of the same plane is an
    island: the lid runs between the two. What lies between the rim's corners and its plane counts as nothing.
    """
    open_edges = paired(surface).irregular.open
    if not len(open_edges):
        return None, []
    found, loose = rims(surface, open_edges)
    if len(found) > _MOST:
        what = f"{counted(len(found), 'hole')}: more than {_MOST:,}, up to which holes are closed"
        return None, [Left(what, places(rim.centre for rim in found[:10]), "Export the part again, as a closed solid.")]
    lids, single = _lids(found)
    most = share * surface.area
    new: list[Ints] = []
    closed: list[_Lid] = []
    left = []
    for lid in lids:
        said = _hole_text(lid.outer, lid.area, surface.area)
        if lid.area > most:
            allowed = f"{100 * share:.3g}% of the skin"
            left.append(_left(lid.outer, f"{said}: larger than the {allowed} up to which holes are closed"))
            continue
        faces = _faces(lid)
        if faces is None:
            left.append(_left(lid.outer, f"{said}: its rim crosses itself"))
            continue
        new.append(faces)
        closed.append(lid)
    for rim in single:
        said = _hole_text(rim, rim.area, surface.area)
        left.append(_left(rim, f"{said}: not flat, a corner lies {millimetres(rim.bend)} off its plane"))
    if loose:
        left.append(Left(f"{counted(loose, 'open edge')} that run round no hole", (), "Repair the part in CAD."))
    if not new:
        return None, left
    area = sum(lid.area for lid in closed)
    listed = ", ".join(place_text(lid.outer.centre) for lid in closed[:3])
    more = f" and {len(closed) - 3:,} more" if len(closed) > 3 else ""
    did = f"closed {counted(len(closed), 'flat hole')} of {area * 1e6:.4g} mm2 in all, at {listed}{more}"
    made = Surface(surface.vertices, np.concatenate([surface.faces, *new]))
    return Step("cap", did, made, len(closed), 0.0, places(lid.outer.centre for lid in closed)), left


def _left(rim: Rim, what: str) -> Left:
    return Left(what, places([rim.centre]), _ADVICE)


def _hole_text(rim: Rim, area: float, whole: float) -> str:
    kind = "flat hole" if rim.flat else "hole"
    return (
        f"{kind} of {counted(len(rim.vertices), 'edge')} and {area * 1e6:.4g} mm2 ({area / whole:.2%} of the skin) "
        f"about {place_text(rim.centre)}"
    )


def _lids(found: list[Rim]) -> tuple[list[_Lid], list[Rim]]:
    """Flat rims put together to holes, and the others."""
    flat = [rim for rim in found if rim.flat]
    inner: dict[int, list[Rim]] = {}
    islands: set[int] = set()
    ways = np.array([rim.vector_area for rim in flat]).reshape(-1, 3)
    areas = np.array([rim.area for rim in flat])
    slack = np.array([FLAT_SHARE * rim.length for rim in flat]).reshape(-1, 1)
    low = np.array([rim.points.min(axis=0) for rim in flat]).reshape(-1, 3) - slack
    high = np.array([rim.points.max(axis=0) for rim in flat]).reshape(-1, 3) + slack
    for number, rim in enumerate(flat):
        # Larger ones that run round the other way and reach here: few enough to be looked at one by one.
        others = np.flatnonzero((areas > rim.area) & (ways @ rim.vector_area < 0))
        others = others[((low[others] <= rim.points[0]) & (rim.points[0] <= high[others])).all(axis=1)]
        holders = [n for n in others.tolist() if _within(rim, flat[n])]
        if holders:
            islands.add(number)
            inner.setdefault(min(holders, key=lambda n: flat[n].area), []).append(rim)
    lids = [_Lid(rim, tuple(inner.get(n, ()))) for n, rim in enumerate(flat) if n not in islands]
    return lids, [rim for rim in found if not rim.flat]


def _within(rim: Rim, other: Rim) -> bool:
    """Whether a flat rim lies within another one of the same plane and runs round the other way."""
    if rim.area >= other.area or rim.vector_area @ other.vector_area >= 0:
        return False
    normal = other.vector_area / other.area
    if np.abs((rim.points - other.centre) @ normal).max() > FLAT_SHARE * other.length:
        return False
    ring = in_plane(other.points - other.centre, normal)
    return _round(ring, in_plane(rim.points[:1] - other.centre, normal)[0])


def _round(ring: Floats, point: Floats) -> bool:
    """Whether a ring of (n, 2) points goes round a point: edges crossed by the line from it along x."""
    a, b = ring - point, np.roll(ring, -1, axis=0) - point
    crossing = (a[:, 1] > 0) != (b[:, 1] > 0)
    a, b = a[crossing], b[crossing]
    return bool(np.count_nonzero(a[:, 0] - a[:, 1] * (b[:, 0] - a[:, 0]) / (b[:, 1] - a[:, 1]) > 0) % 2)


def _faces(lid: _Lid) -> Ints | None:
    """Triangles of a lid, None where its rims cross."""
    normal = lid.outer.vector_area / lid.outer.area
    if not lid.inner:
        ears, whole = ears_of(lid.outer.points, normal)
        return lid.outer.vertices[ears] if whole else None
    from mapbox_earcut import triangulate_float64

    rings = [lid.outer, *lid.inner]
    vertices = np.concatenate([rim.vertices for rim in rings])
    flat = in_plane(np.concatenate([rim.points for rim in rings]) - lid.outer.centre, normal)
    ends = np.cumsum([len(rim.vertices) for rim in rings]).astype(np.uint32)
    ears = triangulate_float64(np.ascontiguousarray(flat), ends).astype(np.intp).reshape(-1, 3)
    a, b, c = flat[ears[:, 0]], flat[ears[:, 1]], flat[ears[:, 2]]
    areas = ((b - a)[:, 0] * (c - a)[:, 1] - (b - a)[:, 1] * (c - a)[:, 0]) / 2
    # Bridges to n islands add two triangles each to what a ring of as many corners takes.
    if len(ears) != len(flat) + 2 * len(lid.inner) - 2:
        return None
    if abs(np.abs(areas).sum() - lid.area) > _SAME_AREA * lid.outer.area:
        return None
    ears[areas < 0] = ears[areas < 0][:, ::-1]
    return np.asarray(vertices[ears])
