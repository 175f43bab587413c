"""Flooding of a landscape given at the nodes of a net: where the waters rising from several places first meet."""

from __future__ import annotations

import numpy as np

from meshlure.geometry.surface import Floats, Ints


def first_meetings(values: Floats, edges: Ints, seeds: Ints) -> Ints:
    """Return for each seed the node over which its flood first meets that of another seed, (k,) array; -1 where none.

    Parameters
    ----------
    values : (n,) array
        Height of each node.
    edges : (m, 2) array
        Pairs of neighbouring nodes.
    seeds : (k,) array
        Nodes, each once.

    Notes
    -----
    Of all ways from one seed to any other, the least highest node. Edges are added in ascending order of their higher
    end, and joined nodes kept as sets (union-find).

    References
    ----------
    J. B. Kruskal (1956), On the shortest spanning subtree of a graph, Proc. Amer. Math. Soc. 7(1).
    """
    height = values[edges].max(axis=1)
    owner = list(range(len(values)))
    held: dict[int, list[int]] = {int(seed): [number] for number, seed in enumerate(seeds)}
    met = np.full(len(seeds), -1, dtype=np.intp)

    def root(node: int) -> int:
        while owner[node] != node:
            owner[node] = owner[owner[node]]
            node = owner[node]
        return node

    for edge in np.argsort(height, kind="stable"):
        a, b = edges[edge].tolist()
        one, other = root(a), root(b)
        if one == other:
            continue
        here, there = held.pop(one, []), held.pop(other, [])
        if here and there:
            top = a if values[a] >= values[b] else b
            for side in (here, there):
                # A flood of several seeds has already met.
                if len(side) == 1:
                    met[side[0]] = top
        owner[one] = other
        if here or there:
            held[other] = here + there
        if len(held) == 1:
            break
    return met
