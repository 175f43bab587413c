"""The kernels against the general libraries on one body, in one process: prints one JSON object a line.

python kernels.py TRIANGLES ROUNDS
"""

from __future__ import annotations

import json
import resource
import sys
from collections.abc import Callable
from dataclasses import asdict
from functools import partial
from typing import Any

import lofted
import manifold3d
import numpy as np
import trimesh
from clock import MAXRSS, alternating, to_one_core
from figures import Figure
from numpy.typing import NDArray

from meshlure.geometry.blocks import BlockIndex
from meshlure.geometry.outline import outline
from meshlure.geometry.surface import Surface
from meshlure.geometry.topology import EdgePairs, paired
from meshlure.geometry.waterplane import Cut
from meshlure.physics.immersion import Hull
from meshlure.physics.posture import resting

Floats = NDArray[np.float64]

AGREE = 1e-6
"""Share by which the two sides' answers may differ before the comparison is void."""


def tell(figure: Figure) -> None:
    print(json.dumps(asdict(figure)), flush=True)


def waterlines(index: BlockIndex, count: int) -> list[tuple[Floats, float]]:
    """Planes as a posture search meets them, the dearest kind: along the body, tilted every way by up to 40 degrees."""
    rng = np.random.default_rng(20)
    planes = []
    for _ in range(count):
        tilt, turn = np.radians(40) * np.sqrt(rng.random()), 2 * np.pi * rng.random()
        n = np.array([np.sin(tilt) * np.cos(turn), np.sin(tilt) * np.sin(turn), np.cos(tilt)])
        planes.append((n, float(n @ index.moment / index.volume) + 1e-3 * rng.uniform(-1, 1)))
    return planes


def clipped(index: BlockIndex, normal: Floats, height: float) -> Cut:
    cut = index.cut(normal, height)
    # Computed on demand: the waterplane's area, centroid and second moments.
    assert cut.section.second.shape == (3, 3)
    return cut


def sliced(mesh: Any, normal: Floats, height: float) -> tuple[float, Floats]:
    """Volume, mm3, and its centroid, mm, below a plane."""
    part = mesh.slice_plane(plane_origin=1e3 * height * normal, plane_normal=-normal, cap=True)
    return part.volume, part.center_mass


def clips(index: BlockIndex, mesh: Any, rounds: int) -> None:
    planes = waterlines(index, rounds)
    apart = 0.0
    for normal, height in planes[:3]:
        cut, (volume, centre) = clipped(index, normal, height), sliced(mesh, normal, height)
        off = np.abs(cut.moment / cut.volume - centre / 1e3) / lofted.LENGTH
        apart = max(apart, abs(cut.volume * 1e9 / float(volume) - 1), float(off.max()))
    ours, theirs = alternating(
        [partial(clipped, index, *plane) for plane in planes], [partial(sliced, mesh, *plane) for plane in planes]
    )
    note = f"volumes and centroids agree to {apart:.0e}"
    tell(Figure("one clip, with second moments / capped slice", ours, theirs, 60, True, note, apart <= AGREE))


def growth(index: BlockIndex, small: BlockIndex, rounds: int) -> None:
    planes = waterlines(index, 5 * rounds)
    ours, theirs = alternating(
        [partial(clipped, index, *plane) for plane in planes], [partial(clipped, small, *plane) for plane in planes]
    )
    tell(Figure("one clip / the same with a quarter of the triangles", ours, theirs, 2.5, False))


def shadows(surface: Surface, pairs: EdgePairs, solid: Any, rounds: int) -> None:
    axes = np.random.default_rng(21).normal(size=(rounds, 3))
    axes /= np.linalg.norm(axes, axis=1)[:, None]

    def ours_of(axis: Floats) -> float:
        return outline(surface, pairs, axis).area

    def theirs_of(axis: Floats) -> float:
        upright = np.eye(3)[np.abs(axis).argmin()]
        right = np.cross(upright, axis) / np.linalg.norm(np.cross(upright, axis))
        turn = np.column_stack([np.stack([right, np.cross(axis, right), axis]), np.zeros(3)])
        return float(solid.transform(turn).project().area()) / 1e6

    apart = max(abs(ours_of(axis) / theirs_of(axis) - 1) for axis in axes)
    ours, theirs = alternating([partial(ours_of, axis) for axis in axes], [partial(theirs_of, axis) for axis in axes])
    note = f"areas agree to {apart:.0e}"
    tell(Figure("oblique silhouette / manifold3d's project", ours, theirs, 4, True, note, apart <= AGREE))


def postures(index: BlockIndex, surface: Surface, capped: Callable[[], object], rounds: int) -> None:
    """Two baits: one that rests in one posture only, and one with its weight high up that rests in several."""
    hull = Hull(index, 0.0, np.zeros(3))
    back = np.array([0.0, 0.0, 1.0])
    for name, low in (("low", 2.0e-3), ("central", 0.1e-3)):
        centre = index.moment / index.volume - np.array([1e-3, 0.0, low])

        def ours_of(centre: Floats = centre) -> int:
            return len(resting(hull, surface, centre, 0.75 * index.volume, back))

        found = ours_of()
        ours, theirs = alternating([ours_of] * rounds, [capped] * rounds)
        tell(Figure(f"all resting postures, weight {name} / capped slice", ours, theirs, 2, False, f"{found} found"))


def main(triangles: int, rounds: int) -> None:
    to_one_core()
    surface = lofted.body(triangles)
    index = BlockIndex.build(surface)
    mesh = trimesh.Trimesh(surface.vertices * 1e3, surface.faces, process=False)
    assert mesh.is_watertight
    clips(index, mesh, rounds)
    growth(index, BlockIndex.build(lofted.body(triangles // 4)), rounds)
    normal, height = waterlines(index, 1)[0]
    postures(index, surface, partial(sliced, mesh, normal, height), max(3, rounds // 2))
    solid = manifold3d.Manifold(manifold3d.Mesh64(surface.vertices * 1e3, surface.faces.astype(np.uint64)))
    assert solid.status() == manifold3d.Error.NoError
    shadows(surface, paired(surface), solid, rounds)
    peak = resource.getrusage(resource.RUSAGE_SELF).ru_maxrss * MAXRSS / 1e9
    print(json.dumps({"triangles": len(surface.faces), "peak_gb": peak}))


if __name__ == "__main__":
    main(int(sys.argv[1]), int(sys.argv[2]))
