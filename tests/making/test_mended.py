"""Bodies spoilt by lot, mended and written: closed and of the volume told, by the general mesh library; or left, and
said why."""

from __future__ import annotations

import io
from pathlib import Path
from typing import Any

import numpy as np
import pytest
import shapes
import trimesh

from meshlure.geometry.mending.mend import mend
from meshlure.geometry.mending.steps import Wishes
from meshlure.geometry.shells import enclosed_volume
from meshlure.geometry.surface import Floats
from meshlure.geometry.welding import weld
from meshlure.making.mended import mesh_bytes


def spoilt(seed: int) -> Floats:
    """Corners of a body with an eye, a cavity, cracks, turned, doubled, missing, thin and stray faces, each by lot."""
    random = np.random.default_rng(seed)
    body = shapes.lumpy(seed, level=2, depth=0.2)
    middle = body.vertices.mean(axis=0)
    parts = [body]
    if random.random() < 0.4:
        parts.append(shapes.sphere(0.005, 2).moved(shift=body.vertices[random.integers(len(body.vertices))]))
    if random.random() < 0.3:
        parts.append(shapes.sphere(0.002, 1).moved(shift=middle).turned())
    corners = np.concatenate([part.corners for part in parts])
    count = len(corners)
    if random.random() < 0.5:
        corners = corners + random.uniform(-1, 1, corners.shape) * 10 ** random.uniform(-8, -5.3)
    if random.random() < 0.5:
        wrong = random.random(count) < random.uniform(0, 0.3)
        corners[wrong] = corners[wrong][:, ::-1]
    if random.random() < 0.4:
        corners = np.concatenate([corners, corners[random.integers(count, size=3)]])
    if random.random() < 0.4:
        corners = np.delete(corners, random.integers(count, size=3), axis=0)
    if random.random() < 0.3:
        a, b = corners[5, :2]
        corners = np.concatenate([corners, [[a, b, (a + b) / 2]]])
    if random.random() < 0.2:
        corners = np.concatenate([corners, random.normal(size=(2, 3, 3)) * 0.01])
    return np.asarray(corners)


@pytest.mark.parametrize("suffix", [".stl", ".3mf"])
def test_what_is_written_is_closed_and_what_is_not_is_said(suffix: str) -> None:
    written = 0
    for seed in range(16):
        made = mend(weld(spoilt(seed)).surface, Wishes(weld=20e-6, cap=0.05), "body")
        if made.after.stops:
            assert made.left, seed
            assert all(left.what and left.advice for left in made.left), seed
            continue
        surface = made.after.surface
        data, merged = mesh_bytes(surface, Path(f"body{suffix}"), "body")
        theirs: Any = trimesh.load(io.BytesIO(data), file_type=suffix[1:], force="mesh")
        assert theirs.is_watertight, seed
        assert theirs.is_winding_consistent, seed
        # Four-byte numbers move a volume by a millionth, merged corners by a ten-thousandth.
        share = 1e-6 if merged == 0 else 1e-4
        assert theirs.volume == pytest.approx(enclosed_volume(surface) * 1e9, rel=share), seed
        written += 1
    assert written >= 12
