"""Open edges sewn: corners that nearly meet become one, edges are cut where a corner of the other side lies on them."""

from __future__ import annotations

from itertools import pairwise

import numpy as np

from meshlure.geometry.mending.steps import Step
from meshlure.geometry.phrasing import counted, places, places_text
from meshlure.geometry.surface import Bools, Floats, Ints, Surface
from meshlure.geometry.topology import Ints32, paired

_PASSES = 8
"""Times that edges are cut; a face is cut on one of its sides at a time."""


def welded(surface: Surface, reach: float) -> Step | None:
    """Return the surface with corners of open edges that lie within a reach made one, None where that closes nothing.

    Parameters
    ----------
    surface : Surface
    reach : float, m

    Notes
    -----
    Only corners at which the surface is open are looked at, so that fine details elsewhere stay. Corners that are close
    to each other by way of others become one as well, unless that would move one by more than twice the reach. The
    corner that stands first in the file stays where it is; faces that lose their extent go.
    """
    from scipy.sparse import csr_array
    from scipy.sparse.csgraph import connected_components
    from scipy.spatial import cKDTree

    edges = paired(surface).irregular.open
    if not len(edges):
        return None
    rim = np.unique(edges)
    points = surface.vertices[rim]
    near = cKDTree(points).query_pairs(reach, output_type="ndarray")
    if not len(near):
        return None
    links = csr_array((np.ones(len(near), dtype=np.int8), near.T), shape=(len(rim), len(rim)))
    _, labels = connected_components(links, directed=False)
    _, first = np.unique(labels, return_index=True)
    heads = first[labels]
    moves = np.linalg.norm(points - points[heads], axis=1)
    far = np.zeros(len(first), dtype=np.bool_)
    np.logical_or.at(far, labels, moves > 2 * reach)
    heads[far[labels]] = np.flatnonzero(far[labels])
    numbers = np.arange(len(surface.vertices))
    numbers[rim] = rim[heads]
    made = Surface(surface.vertices, _whole(numbers[surface.faces]))
    if len(paired(made).irregular.open) >= len(edges):
        return None
    joined = np.flatnonzero(heads != np.arange(len(rim)))
    moved = float(np.linalg.norm(points - points[heads], axis=1).max())
    lost = len(surface.faces) - len(made.faces)
    gone = f", {counted(lost, 'face')} between them went" if lost else ""
    did = (
        f"made one of {counted(len(joined), 'corner')} and others that lay up to {moved * 1e3:.2g} mm off, "
        f"at {places_text(points[joined])}{gone}"
    )
    return Step("weld", did, made, len(joined), moved, places(points[joined]))


def stitched(surface: Surface, reach: float) -> Step | None:
    """Return the surface with open edges cut at corners of others that lie on them, None where that closes nothing.

    Parameters
    ----------
    surface : Surface
    reach : float, m
        How far off the edge the corner may lie; the edge is bent to it.
    """
    before = len(paired(surface).irregular.open)
    made, cuts, moved, where = surface, 0, 0.0, []
    for _ in range(_PASSES):
        edges = paired(made).irregular.open
        if not len(edges):
            break
        found = _on_edges(made.vertices, edges, reach)
        if not found:
            break
        made, done = _cut(made, found)
        if not done:
            break
        cuts += sum(len(vertices) for vertices, _ in done)
        moved = max(moved, *(off for _, off in done))
        where += [made.vertices[vertices[0]] for vertices, _ in done]
    if not cuts or len(paired(made).irregular.open) >= before:
        return None
    did = (
        f"cut edges at {counted(cuts, 'corner')} of the other side that lay on them, up to {moved * 1e3:.2g} mm off, "
        f"at {places_text(np.array(where))}"
    )
    return Step("stitch", did, made, cuts, moved, places(where))


def _whole(faces: Ints) -> Ints:
    """Faces with three different corners."""
    a, b, c = faces.T
    return np.asarray(faces[(a != b) & (b != c) & (c != a)])


def _on_edges(vertices: Floats, edges: Ints32, reach: float) -> dict[tuple[int, int], tuple[list[int], float]]:
    """By open edge: the corners of other open edges that lie on it, in its direction, and how far off at most."""
    from scipy.spatial import cKDTree

    rim = np.unique(edges)
    start, way = vertices[edges[:, 0]], vertices[edges[:, 1]] - vertices[edges[:, 0]]
    length = np.linalg.norm(way, axis=1)
    # A long edge has every corner of a rim in its ball: it is asked for in pieces.
    pieces = np.maximum(np.ceil(length / max(float(np.median(length)), reach)).astype(np.intp), 1)
    pieces = np.minimum(pieces, 4096)
    of = np.repeat(np.arange(len(edges)), pieces)
    begins = np.cumsum(pieces) - pieces
    share = (np.arange(len(of)) - begins[of] + 0.5) / pieces[of]
    radius = length[of] / pieces[of] / 2 + reach
    near = cKDTree(vertices[rim]).query_ball_point(start[of] + share[:, None] * way[of], radius)
    found: dict[tuple[int, int], tuple[list[int], float]] = {}
    held: dict[int, set[int]] = {}
    for number, members in zip(of.tolist(), near, strict=True):
        held.setdefault(number, set()).update(members)
    for number, members in held.items():
        candidates = rim[sorted(members)]
        candidates = candidates[~np.isin(candidates, edges[number])]
        if not len(candidates) or length[number] == 0:
            continue
        to = vertices[candidates] - start[number]
        along = to @ way[number] / length[number]
        off = np.linalg.norm(to - along[:, None] * way[number] / length[number], axis=1)
        on = (off <= reach) & (along > reach) & (along < length[number] - reach)
        if on.any():
            order = np.argsort(along[on])
            key = (int(edges[number, 0]), int(edges[number, 1]))
            found[key] = (candidates[on][order].tolist(), float(off[on].max()))
    return found


def _cut(
    surface: Surface, found: dict[tuple[int, int], tuple[list[int], float]]
) -> tuple[Surface, list[tuple[list[int], float]]]:
    """Cut every face along at most one of its open edges; return also what was cut in."""
    faces = surface.faces
    taken: Bools = np.zeros(len(faces), dtype=np.bool_)
    words = faces.astype(np.int64) * len(surface.vertices) + np.roll(faces, -1, axis=1)
    half = dict(zip(words.ravel().tolist(), range(words.size), strict=True)) if len(found) else {}
    new: list[tuple[int, int, int]] = []
    done = []
    for (a, b), (inner, off) in found.items():
        place = half.get(a * len(surface.vertices) + b)
        if place is None or taken[place // 3]:
            continue
        face, slot = divmod(place, 3)
        apex = int(faces[face, (slot + 2) % 3])
        if apex in inner:
            continue
        taken[face] = True
        chain = [a, *inner, b]
        new += [(p, q, apex) for p, q in pairwise(chain)]
        done.append((inner, off))
    kept = faces[~taken]
    return Surface(surface.vertices, np.concatenate([kept, np.reshape(np.array(new, dtype=np.intp), (-1, 3))])), done
