"""Volume, centroid and inertia of every sound file of the tests, three ways that share nothing with the package.

The general mesh library reads the file and sums by itself. A B-rep kernel (Open CASCADE, its answers stored) integrated
the smooth solid that the mesh was made from. And points drawn by lot in the mesh's box are asked how often the skin
winds round them (generalized winding number, libigl): the share within, and the moments of the points within, are the
solid's to four standard deviations, of which a right answer misses one in sixteen thousand; every run draws the same.
"""

from __future__ import annotations

import importlib.util
import runpy
import sys
from functools import cache
from pathlib import Path
from typing import Any

import numpy as np
import pytest
import trimesh

from meshlure.bait.meshpiece import shape
from meshlure.files.formats import FORMATS
from meshlure.files.reading import read_mesh
from meshlure.geometry.moments import NOTHING, Moments, solid_moments
from meshlure.geometry.soundness import Soundness, examine
from meshlure.geometry.surface import Floats, Surface

sys.path.append(str(Path(__file__).parent / "authorities"))

import brep

ROOT = Path(__file__).parents[1]
TESTS = ROOT / "tests"
BROKEN: dict[str, Any] = runpy.run_path(str(TESTS / "bad_meshes" / "build.py"))

WINDING = importlib.util.find_spec("igl") is not None
POINTS = 20_000 if WINDING else 2_000
SIGMAS = 4.0

SAMPLES = sorted((ROOT / "samples").glob("*/*.stl"))
AUTHORITIES = sorted((TESTS / "authorities" / "meshes").glob("*.stl"))
SOUND_FORMATS = sorted(p for p in (TESTS / "formats").iterdir() if p.suffix in FORMATS and p.suffix != ".step")
ODD = [
    *("solid_but_binary.stl", "trailing_bytes.stl", "two_solids.stl", "collapsed.stl", "concave.obj", "bent.obj"),
    *("groups_and_negative.obj", "inside_out.stl", "shells_apart.stl", "shells_overlapping.stl", "cavity.stl"),
    *("shared_edge.stl", "balls.stl", "coarse.stl", "in_metres.stl", "far_off.stl", *BROKEN["PIECES"]),
]
FILES = [*SAMPLES, *AUTHORITIES, *SOUND_FORMATS, *(TESTS / "bad_meshes" / name for name in ODD)]

CHORD = 0.02
"""mm. How far facets of the samples lie off the smooth solid, as they were made."""

NOT_READ_THERE = {"trailing_bytes.stl": "refuses it", "groups_and_negative.obj": "misreads indices from the end"}
"""What the general mesh library does with files whose volumes tests/files/test_bad_meshes.py has by hand."""

READ_THERE = [path for path in FILES if path.parent.name != "formats" and path.name not in NOT_READ_THERE]
"""The formats' files are held against it in tests/files/test_formats.py."""


def name(path: Path) -> str:
    return f"{path.parent.name}/{path.name}"


@cache
def sound(path: Path) -> Soundness:
    found = examine(read_mesh(path, None if FORMATS[path.suffix].says_unit else "mm").surface, path.stem)
    assert not found.stops, found.findings
    return found


def counted_once(path: Path) -> Moments:
    """What the report weighs: shells joined, cavities left out."""
    made = shape(sound(path), path.stem)
    return solid_moments(made.outer) - sum((solid_moments(cavity) for cavity in made.cavities), NOTHING)


@pytest.mark.parametrize("path", READ_THERE, ids=name)
def test_the_general_mesh_library(path: Path) -> None:
    """Space that shells share counts twice there, and in the sum over all faces here."""
    theirs: Any = trimesh.load(path, force="mesh", process=False)
    sign = np.sign(theirs.volume)
    ours = solid_moments(sound(path).surface)
    reach = float(np.linalg.norm(np.ptp(theirs.bounds, axis=0)))
    # Sums about the origin lose digits as the part stands away from it.
    away = max(1.0, float(np.abs(theirs.bounds).max()) / reach)
    assert ours.amount * 1e9 == pytest.approx(abs(theirs.volume), rel=1e-9 * away)
    np.testing.assert_allclose(ours.centre * 1e3, theirs.center_mass, rtol=0, atol=1e-9 * away * reach)
    inertia = sign * theirs.moment_inertia
    np.testing.assert_allclose(ours.inertia * 1e15, inertia, rtol=0, atol=1e-8 * away**2 * np.abs(inertia).max())


def winding(surface: Surface, points: Floats) -> Floats:
    """Winding numbers of points, for a surface of about unit size at the origin."""
    if not WINDING:
        made = trimesh.Trimesh(surface.vertices, surface.faces, process=False)
        return np.asarray(made.contains(points), dtype=np.float64)
    # The library's core only: beside it the package ships a module under another licence.
    from igl import fast_winding_number

    faces = np.ascontiguousarray(surface.faces, dtype=np.int64)
    return np.asarray(fast_winding_number(np.ascontiguousarray(surface.vertices), faces, points))


@pytest.mark.parametrize("path", FILES, ids=name)
def test_points_drawn_by_lot(path: Path) -> None:
    """Hit or miss in the bounding box: a share p of n points has a standard deviation of sqrt(p (1 - p) / n)."""
    surface = sound(path).surface
    low, high = surface.bounds
    size = float((high - low).max())
    middle, half = (low + high) / 2, (high - low) / 2
    draw = np.random.default_rng(len(surface.faces))
    points = draw.uniform(-1, 1, (POINTS, 3)) * half
    scaled = Surface((surface.vertices - middle) / size, surface.faces)
    within = points[winding(scaled, np.ascontiguousarray(points / size)) > 0.5]
    share, box = len(within) / POINTS, float(np.prod(high - low))
    ours = counted_once(path)
    assert abs(share * box - ours.amount) <= SIGMAS * box * np.sqrt(max(share * (1 - share), 1 / POINTS) / POINTS)
    spread = within.std(axis=0) / np.sqrt(len(within))
    assert (np.abs(within.mean(axis=0) + middle - ours.centre) <= SIGMAS * spread + 1e-12).all()
    # Inertia over volume about the centroid: the mean of (r.r) 1 - r r.
    r = within + middle - ours.centre
    each = (r * r).sum(axis=1)[:, None, None] * np.eye(3) - r[:, :, None] * r[:, None, :]
    bound = SIGMAS * each.std(axis=0) / np.sqrt(len(within))
    assert (np.abs(each.mean(axis=0) - ours.inertia / ours.amount) <= bound + 1e-9 * each.max()).all()


def exact_of() -> list[tuple[str, Path, brep.Exact, float]]:
    rows = [
        (f"{bait}/{stem}", ROOT / "samples" / bait / f"{stem}.stl", brep.sample(bait, stem), CHORD)
        for bait, solids in brep.book()["samples"].items()
        for stem in solids
        if (ROOT / "samples" / bait / f"{stem}.stl").exists() and "coarse" not in stem
    ]
    for composite in brep.book()["composites"]:
        exact, meshes = brep.composite(composite)
        rows += [(f"{composite} at {chord}", path, exact, chord) for chord, path in meshes.items()]
    return rows


EXACT = {row[0]: row[1:] for row in exact_of()}


@pytest.mark.parametrize("solid", EXACT)
def test_the_smooth_solid_by_a_kernel(solid: str) -> None:
    """Facets within a chord of a skin of area A change the volume by less than chord times A; what they change of the
    moments lies no farther out than the solid reaches."""
    path, exact, chord = EXACT[solid]
    ours = counted_once(path)
    slack = chord * exact.area
    reach = float(np.abs(sound(path).surface.bounds * 1e3 - exact.centroid).max()) * np.sqrt(3)
    assert abs(ours.amount * 1e9 - exact.volume) <= slack
    assert np.abs(ours.centre * 1e3 - exact.centroid).max() <= slack * reach / exact.volume
    assert np.abs(ours.inertia * 1e15 - exact.inertia).max() <= slack * reach**2


def test_nothing_is_left_out() -> None:
    assert len(SAMPLES) >= 12
    assert len(AUTHORITIES) == 9
    assert len(SOUND_FORMATS) >= 25
    assert len(EXACT) == len(SAMPLES) + len(AUTHORITIES)
