"""Faces that occur more than once, and faces without area, taken away."""

from __future__ import annotations

import numpy as np

from meshlure.geometry.flaws import without_area
from meshlure.geometry.mending.edges import edge_numbers
from meshlure.geometry.mending.steps import Step
from meshlure.geometry.phrasing import counted, places, places_text
from meshlure.geometry.shells import measures
from meshlure.geometry.surface import Bools, Ints, Surface
from meshlure.geometry.topology import paired


def undoubled(surface: Surface) -> Step | None:
    """Return the surface with one of every set of faces that have the same corners, None where there are none.

    Notes
    -----
    Of copies wound alike one stays. Of copies wound against each other both go where that opens nothing: they are a
    wall between two solids, or a sheet without thickness, and cancel in every sum. Else one of them is skin, and stays.
    """
    triples = np.sort(surface.faces, axis=1)
    order = np.lexsort(triples.T)
    ordered = triples[order]
    begins = np.flatnonzero(np.concatenate(([True], (ordered[1:] != ordered[:-1]).any(axis=1))))
    sizes = np.diff(begins, append=len(order))
    if not (sizes > 1).any():
        return None
    # Three corners in a ring run up or down in number: even turns of the sorted triple, or odd ones.
    even = _even(surface.faces)[order]
    ahead = np.add.reduceat(even, begins, dtype=np.intp)
    more = 2 * ahead - sizes
    group = np.repeat(np.arange(len(sizes)), sizes)
    staying = np.flatnonzero((more[group] != 0) & (even == (more[group] > 0)))
    _, first = np.unique(group[staying], return_index=True)
    kept = np.zeros(len(order), dtype=np.bool_)
    kept[order[staying[first]]] = True
    _keep_skin(surface, kept, order[begins[more == 0]])
    dropped = np.flatnonzero(~kept)
    middles = surface.corners[dropped].mean(axis=1)
    did = f"took away {counted(len(dropped), 'face')} that had the corners of another face, at {places_text(middles)}"
    return Step("doubles", did, Surface(surface.vertices, surface.faces[kept]), len(dropped), 0.0, places(middles))


def _keep_skin(surface: Surface, kept: Bools, cancelled: Ints) -> None:
    """Keep, in place, those of the cancelled faces without which an edge would be open."""
    if not len(cancelled):
        return
    numbers = edge_numbers(surface)
    while True:
        uses = np.bincount(numbers[kept].ravel(), minlength=int(numbers.max()) + 1)
        opened = cancelled[(uses[numbers[cancelled]] % 2 == 1).any(axis=1) & ~kept[cancelled]]
        if not len(opened):
            return
        kept[opened] = True


def without_needles(surface: Surface) -> Step | None:
    """Return the surface without its faces of no area, None where there are none or none can go.

    Notes
    -----
    The long edge of such a face is turned: its neighbour there is cut in two at the corner that lies on that edge, and
    no edge is opened. One without such a neighbour goes if it has an open edge. What the turning moves is less than
    what an STL resolves.
    """
    areas = measures(surface)[1]
    thin = without_area(surface, areas)
    if not len(thin):
        return None
    faces, gone = surface.faces.copy(), np.zeros(len(surface.faces), dtype=np.bool_)
    pairs = paired(surface)
    across = np.full(3 * len(faces), -1, dtype=np.intp)
    across[pairs.forward], across[pairs.backward] = pairs.backward, pairs.forward
    odd = {tuple(edge) for edge in pairs.irregular.ends.tolist()}
    ends = {(min(a, b), max(a, b)) for a, b in zip(pairs.start.tolist(), pairs.end.tolist(), strict=True)}
    touched: set[int] = set()
    turned, dropped = [], []
    for face in thin.tolist():
        if face in touched:
            continue  # it is another face by now
        corners = surface.corners[face]
        side = int(np.linalg.norm(np.roll(corners, -1, axis=0) - corners, axis=1).argmax())
        a, b, c = (int(v) for v in np.roll(faces[face], -side))
        other = int(across[3 * face + side]) // 3 if across[3 * face + side] >= 0 else -1
        edges = [(min(p, q), max(p, q)) for p, q in ((a, b), (b, c), (c, a))]
        if other < 0 or edges[0] in odd:
            if any(edge in odd for edge in edges):
                gone[face] = True
                dropped.append(face)
            continue
        if other in touched:
            continue
        (d,) = set(faces[other].tolist()) - {a, b} or {c}
        new = (min(c, d), max(c, d))
        if c == d or new in ends:
            continue
        faces[face], faces[other] = (b, c, d), (c, a, d)
        ends.add(new)
        touched |= {face, other}
        turned.append(face)
    done = [*turned, *dropped]
    made = Surface(surface.vertices, faces[~gone])
    # Where nothing but needles lie about an edge, turning it only makes others of them, and then these again.
    if not done or len(without_area(made, measures(made)[1])) >= len(thin):
        return None
    middles = surface.corners[done].mean(axis=1)
    did = f"took away {counted(len(done), 'face')} without area, at {places_text(middles)}"
    return Step("zero-area", did, made, len(done), 0.0, places(middles))


def _even(faces: Ints) -> Bools:
    """Whether each face runs through its corners in ascending order, from the lowest on."""
    first = faces.argmin(axis=1)
    turned = np.take_along_axis(faces, (first[:, None] + np.arange(3)) % 3, axis=1)
    return np.asarray(turned[:, 1] < turned[:, 2])
