"""Topology: which faces meet along which edge, and where they fail to."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from meshlure.geometry.surface import Floats, Surface

Ints32 = NDArray[np.int32]
_Words = NDArray[np.uint64]
_WORD = 64


@dataclass(frozen=True, eq=False)
class IrregularEdges:
    """Edges that are not shared by exactly two faces running along it in opposite directions.

    Attributes
    ----------
    ends : (k, 2) int32 array
        Vertices, the lower number first.
    forward, backward : (k,) int32 arrays
        How many faces run along the edge from its first vertex to its second, and how many the other way.
    """

    ends: Ints32
    forward: Ints32
    backward: Ints32

    @property
    def open(self) -> Ints32:
        """(k, 2) edges of one face only, each in the direction in which that face runs along it."""
        kept = self.forward + self.backward == 1
        edges: Ints32 = self.ends[kept].copy()
        reverse = self.backward[kept] == 1
        edges[reverse] = edges[reverse][:, ::-1]
        return edges

    @property
    def miswound(self) -> Ints32:
        """(k, 2) edges of an even number of faces that do not cancel: neighbours wound against each other."""
        total = self.forward + self.backward
        edges: Ints32 = self.ends[(total % 2 == 0) & (self.forward != self.backward)]
        return edges

    @property
    def crowded(self) -> Ints32:
        """(k, 2) edges of more than two faces, whether they cancel or not."""
        edges: Ints32 = self.ends[self.forward + self.backward > 2]
        return edges

    @property
    def balanced(self) -> bool:
        """True where every edge is run along as often forward as backward, so that the surface is closed."""
        return bool((self.forward == self.backward).all())


@dataclass(frozen=True, eq=False)
class EdgePairs:
    """Every edge of a surface with a face that runs along it and one that runs back.

    Attributes
    ----------
    start, end : (k,) int32 arrays
        Vertices of the edge, start < end; sorted by start, then by end.
    forward, backward : (k,) int32 arrays
        Half-edges, 3 * face + slot: slot i runs from the face's corner i to its corner i + 1. The forward one runs from
        start to end, the backward one from end to start.
    forward_face, backward_face : (k,) int32 arrays
        The faces those half-edges belong to.
    irregular : IrregularEdges
        What could not be paired, or only among more than two faces.

    Notes
    -----
    An edge shared by four faces gives two rows, and a half-edge without a partner none. All arrays are contiguous and
    read-only.
    """

    start: Ints32
    end: Ints32
    forward: Ints32
    backward: Ints32
    forward_face: Ints32
    backward_face: Ints32
    irregular: IrregularEdges

    def __post_init__(self) -> None:
        for array in (self.start, self.end, self.forward, self.backward, self.forward_face, self.backward_face):
            array.flags.writeable = False

    @property
    def closed(self) -> bool:
        """True where every half-edge has its partner."""
        return self.irregular.balanced


def paired(surface: Surface) -> EdgePairs:
    """Edges of a surface, each with its forward and its backward face.

    Parameters
    ----------
    surface : Surface
        Welded. A face that names a vertex twice has an edge of no length there, which is left out.

    Notes
    -----
    Each half-edge becomes one integer: lower vertex, higher vertex, direction, its own number. One sort brings an
    edge's half-edges together, forward ones first. Where more than two faces share an edge and forward and backward
    ones take turns about it, those with the solid between them are paired, so that two solids that touch along an edge
    stay two; otherwise the order of the faces decides.
    """
    ends, half, backwards = _sorted_half_edges(surface)
    if _regular(ends, backwards):
        return _edge_pairs(ends[0::2], half[0::2], half[1::2], _none_irregular())
    start = np.flatnonzero(np.concatenate(([True], ends[1:] != ends[:-1]))) if len(ends) else np.empty(0, np.intp)
    size = np.diff(start, append=len(ends))
    back = np.add.reduceat(backwards, start, dtype=np.intp) if len(start) else np.empty(0, np.intp)
    ahead = size - back
    _order_round_edges(surface, half, start, ahead, back)
    # The r-th forward half-edge of an edge stands at start + r, its partner at start + ahead + r.
    couples = np.minimum(ahead, back)
    first = np.repeat(start, couples) + _count_up(couples)
    second = first + np.repeat(ahead, couples)
    odd = (ahead != 1) | (back != 1)
    low, high = _split(ends[start[odd]])
    irregular = IrregularEdges(np.stack([low, high], axis=1), ahead[odd].astype(np.int32), back[odd].astype(np.int32))
    return _edge_pairs(ends[first], half[first], half[second], irregular)


def next_corner(half: Ints32) -> Ints32:
    """Corner, 3 * face + corner, at which a half-edge ends; the next half-edge of its face begins there."""
    return np.asarray(np.where(half % np.int32(3) == 2, half - np.int32(2), half + np.int32(1)))


def _sorted_half_edges(surface: Surface) -> tuple[_Words, Ints32, NDArray[np.bool_]]:
    """Half-edges sorted by edge: the edge's two vertices as one word, the half-edge's number, whether it runs back."""
    faces = surface.faces.astype(np.uint64)
    source = faces.ravel()
    target = faces[:, [1, 2, 0]].ravel()
    count = len(source)
    number_bits = max(count - 1, 1).bit_length()
    vertex_bits = max(len(surface.vertices) - 1, 1).bit_length()
    words = np.minimum(source, target)
    words <<= np.uint64(32)
    words |= np.maximum(source, target)
    reverse = source > target
    loops = source == target
    if 2 * vertex_bits + 1 + number_bits <= _WORD:
        packed = words >> np.uint64(32)
        packed <<= np.uint64(vertex_bits)
        packed |= words & np.uint64(0xFFFFFFFF)
        packed <<= np.uint64(1)
        packed |= reverse
        packed <<= np.uint64(number_bits)
        packed |= np.arange(count, dtype=np.uint64)
        packed.sort()
        half = (packed & np.uint64((1 << number_bits) - 1)).astype(np.int32)
        backwards = ((packed >> np.uint64(number_bits)) & np.uint64(1)).astype(np.bool_)
        packed >>= np.uint64(number_bits + 1)
        words = packed >> np.uint64(vertex_bits)
        words <<= np.uint64(32)
        packed &= np.uint64((1 << vertex_bits) - 1)
        words |= packed
    else:
        # Beyond about two million faces the parts no longer fit one word.
        order = np.lexsort((reverse, words))
        half, backwards, words = order.astype(np.int32), reverse[order], words[order]
    if loops.any():
        kept = ~loops[half]
        words, half, backwards = words[kept], half[kept], backwards[kept]
    return words, half, backwards


def _regular(ends: _Words, backwards: NDArray[np.bool_]) -> bool:
    """Whether every edge has exactly one half-edge forward and one backward."""
    if len(ends) % 2:
        return False
    return (
        bool((ends[0::2] == ends[1::2]).all())
        and not backwards[0::2].any()
        and bool(backwards[1::2].all())
        and bool((ends[2::2] != ends[1:-1:2]).all())
    )


def _order_round_edges(
    surface: Surface, half: Ints32, start: NDArray[np.intp], ahead: NDArray[np.intp], back: NDArray[np.intp]
) -> None:
    """Reorder the half-edges of crowded edges, in place, so that the r-th forward and backward ones bound one solid."""
    crowded = np.flatnonzero((ahead == back) & (ahead > 1))
    if not len(crowded):
        return
    size = 2 * ahead[crowded]
    rank = _count_up(size)
    places = np.repeat(start[crowded], size) + rank
    is_back = rank >= np.repeat(ahead[crowded], size)
    group = np.repeat(np.arange(len(crowded)), size)
    number = half[places]
    # Exact ties are faces that lie in each other; the forward one then bounds the solid that comes first.
    angle = np.round(_angles_round_edges(surface, number, is_back), 9)
    first = np.cumsum(size) - size
    turn = is_back[np.lexsort((is_back, angle, group))]
    alternate = np.logical_and.reduceat(turn != turn[_next_in_group(size)], first)
    # A forward face's solid lies on the side of smaller angles, so its partner is the backward face before it;
    # where the count begins with a forward face, that partner is the last one.
    half_size = np.repeat(ahead[crowded], size)
    behind = is_back & np.repeat(~turn[first], size)
    source = np.where(behind, half_size + (rank - half_size - 1) % half_size, rank) + np.repeat(first, size)
    arranged = number[np.lexsort((angle, is_back, group))][source]
    half[places] = np.where(np.repeat(alternate, size), arranged, number)


def _angles_round_edges(surface: Surface, number: Ints32, is_back: NDArray[np.bool_]) -> Floats:
    """Angle, rad, at which each half-edge's face stands about its edge, seen with the edge coming forward."""
    face, slot = np.divmod(number, 3)
    source, target, apex = (surface.vertices[surface.faces[face, (slot + i) % 3]] for i in range(3))
    origin = np.where(is_back[:, None], target, source)
    along = np.where(is_back[:, None], source - target, target - source)
    along = _unit(along)
    # Any direction square to the edge will do, as long as all faces of one edge count from the same.
    zero = np.cross(along, np.eye(3)[np.abs(along).argmin(axis=1)])
    quarter = np.cross(along, zero)
    arm = _unit(apex - origin)
    angles: Floats = np.arctan2((arm * quarter).sum(axis=1), (arm * zero).sum(axis=1))
    return angles


def _unit(ways: Floats) -> Floats:
    """(k, 3) array, each row of length 1; one without any length stays so, and whatever angle it has will do."""
    # Scaled before it is squared: the square of a length such as 1e-200 is nothing.
    reach = np.abs(ways).max(axis=1, keepdims=True)
    scaled = ways / np.where(reach > 0, reach, 1.0)
    return np.asarray(scaled / np.maximum(np.linalg.norm(scaled, axis=1, keepdims=True), 1.0))


def _next_in_group(size: NDArray[np.intp]) -> NDArray[np.intp]:
    """For members counted through group after group, the number of the next one, the first again after the last."""
    following = np.arange(1, int(size.sum()) + 1)
    stops = np.cumsum(size)
    following[stops - 1] = stops - size
    return following


def _count_up(size: NDArray[np.intp]) -> NDArray[np.intp]:
    """0, 1, ... size - 1 for each size, one after another."""
    stops = np.cumsum(size)
    return np.arange(int(size.sum())) - np.repeat(stops - size, size)


def _split(ends: _Words) -> tuple[Ints32, Ints32]:
    """Lower and higher vertex of an edge's word."""
    return (ends >> np.uint64(32)).astype(np.int32), (ends & np.uint64(0xFFFFFFFF)).astype(np.int32)


def _edge_pairs(ends: _Words, forward: Ints32, backward: Ints32, irregular: IrregularEdges) -> EdgePairs:
    low, high = _split(ends)
    forward, backward = np.ascontiguousarray(forward), np.ascontiguousarray(backward)
    three = np.int32(3)
    return EdgePairs(low, high, forward, backward, forward // three, backward // three, irregular)


def _none_irregular() -> IrregularEdges:
    empty = np.empty(0, dtype=np.int32)
    return IrregularEdges(np.empty((0, 2), dtype=np.int32), empty, empty)
