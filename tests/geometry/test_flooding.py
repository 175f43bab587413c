"""Meetings of floods on nets small enough to follow by hand, and against a search through all ways."""

from __future__ import annotations

import numpy as np
from hypothesis import given
from hypothesis import strategies as st
from scipy.sparse import coo_array
from scipy.sparse.csgraph import connected_components

from meshlure.geometry.flooding import first_meetings


def test_along_a_row_of_hills() -> None:
    # Seeds in the valleys 0, 2 and 5: between 0 and 2 the hill of 3, between 2 and 5 that of 7.
    values = np.array([0.0, 3.0, 1.0, 7.0, 6.0, 2.0])
    edges = np.column_stack([np.arange(5), np.arange(1, 6)])
    assert first_meetings(values, edges, np.array([0, 2, 5])).tolist() == [1, 1, 3]


def test_the_lower_of_two_ways_round() -> None:
    values = np.array([0.0, 9.0, 1.0, 4.0])
    edges = np.array([[0, 1], [1, 2], [2, 3], [3, 0]])
    assert first_meetings(values, edges, np.array([0, 2])).tolist() == [3, 3]


def test_one_seed_or_no_way_between_two_meets_none() -> None:
    values = np.arange(4.0)
    assert first_meetings(values, np.array([[0, 1], [2, 3]]), np.array([0, 2])).tolist() == [-1, -1]
    assert first_meetings(values, np.array([[0, 1], [1, 2], [2, 3]]), np.array([1])).tolist() == [-1]


@given(st.integers(0, 10_000))
def test_least_highest_node_of_all_ways(seed: int) -> None:
    # Two seeds are joined at a level if the nodes up to it connect them: scipy's connected components, level by level.
    random = np.random.default_rng(seed)
    every = np.array([(a, b) for a in range(12) for b in range(a)])
    edges = every[random.choice(len(every), 20, replace=False)]
    values = random.permutation(12).astype(float)
    seeds = random.choice(12, 3, replace=False)
    found = first_meetings(values, edges, seeds)
    first: dict[int, int] = {}
    for level in range(12):
        kept = edges[(values[edges] <= level).all(axis=1)]
        _, part = connected_components(coo_array((np.ones(len(kept)), (kept[:, 0], kept[:, 1])), shape=(12, 12)))
        for number, start in enumerate(seeds):
            if any(part[start] == part[other] for other in seeds if other != start):
                first.setdefault(number, int(np.flatnonzero(values == level)[0]))
    assert found.tolist() == [first.get(number, -1) for number in range(3)]
