"""Meshes that are nothing but holes are answered in bounded time: closed where that can be, told where it cannot."""

from __future__ import annotations

import numpy as np
import pytest

from meshlure.geometry.mending import caps
from meshlure.geometry.surface import Surface


def soup(count: int) -> Surface:
    """Triangles of a millimetre strewn about, none touching another."""
    lot = np.random.default_rng(1)
    corners = lot.uniform(0.0, 1.0, (count, 1, 3)) + lot.uniform(-1e-3, 1e-3, (count, 3, 3))
    return Surface(corners.reshape(-1, 3), np.arange(3 * count).reshape(-1, 3))


def test_every_hole_among_many_is_closed() -> None:
    step, left = caps.capped(soup(300), 1.0)
    assert step is not None
    assert (step.count, left) == (300, [])


def test_more_holes_than_are_closed(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(caps, "_MOST", 299)
    step, left = caps.capped(soup(300), 1.0)
    assert step is None
    assert [one.what for one in left] == ["300 holes: more than 299, up to which holes are closed"]
    assert left[0].advice
