"""Baits held against each other: bands of differences against hand calculations, and the same design meshed twice."""

from __future__ import annotations

import copy
import functools
import math
from dataclasses import astuple
from pathlib import Path
from statistics import median
from typing import Any

import numpy as np
import pytest
import shapes
import workbench
from command_bench import Bench
from studied import sample

import meshlure
from meshlure.comparing import compare
from meshlure.errors import InputError
from meshlure.files.baitfile import BaitFile, bait_of
from meshlure.report import compared
from meshlure.results.comparison import comparison
from meshlure.results.difference import SCATTER, Band, apart, counts, scattered

Tree = dict[str, Any]


def rows(*trees: Tree) -> dict[str, Tree]:
    found = comparison(trees, [tree["name"] for tree in trees], {})["rows"]
    return {row["key"]: row for row in found}


@functools.cache
def box(density: float = 1.2, nose: bool = False, dressed: bool = False) -> Tree:
    """A box of 60 x 12 x 20 mm with a lead cube of 8 mm, studied; it sinks. With another cube of 4 mm ahead if asked,
    and with a hook and a coat."""
    cubes = [("keel", 8e-3, 5e-3)] + [("nose", 4e-3, -18e-3)] * nose
    inserts = [
        workbench.Insert(name, shapes.box((size,) * 3, (at, 0.0, -3e-3)), {"material": "lead"})
        for name, size, at in cubes
    ]
    more: Tree = {}
    if dressed:
        hook = {"name": "hook", "item": "treble 6", "at": [0.0, 0.0, -10.0], "hangs": True}
        more = {"hardware": [hook], "coat": {"thickness": "0.15 mm", "material": "epoxy clear coat"}}
    body = shapes.box((60e-3, 12e-3, 20e-3))
    return dict(meshlure.study(workbench.bait(body, *inserts, density=density, **more)).results)


def test_one_design_meshed_twice_differs_in_nothing_that_counts() -> None:
    # samples/cad exports both from one solid, at 0.02 and at 0.1 mm: whatever differs is the facets' doing.
    found = rows(*(dict(sample(f"minnow/{name}.toml").results) for name in ("minnow", "minnow_coarse")))
    assert len(found) >= 18
    assert {key: row["differences"][0]["counts"] for key, row in found.items()} == {
        key: None if row["differences"][0]["low"] is None else False for key, row in found.items()
    }
    assert sum(row["differences"][0]["counts"] is False for row in found.values()) >= 14
    # And yet they do differ: the facets cut a good 80 mm3 off.
    assert found["displaced_mm3"]["differences"][0]["by"] < -80


def test_what_both_share_falls_out() -> None:
    tree = box()
    again = copy.deepcopy(tree) | {"run": "another"}
    for key, row in rows(tree, again).items():
        difference = row["differences"][0]
        assert difference["by"] == 0 or difference["by"] is None, key
        assert difference["counts"] in (False, None), key
    exact = rows(tree, again)["reserve_g"]["differences"][0]
    assert exact["high"] - exact["low"] < 1e-4
    # Alone the reserve is not that sure: half a percent of 14 cm3 of the body's mix alone is a good 0.08 g.
    alone = tree["buoyancy"]
    assert alone["reserve_high_g"] - alone["reserve_low_g"] > 0.05


def test_another_weight_of_the_same_lead_differs_by_what_it_weighs() -> None:
    found = rows(box(), box(nose=True))
    # 64 mm3 of lead, 11.34 (11.30 to 11.35) g/cm3, in the place of a body of 1.2 g/cm3 that is known to 0.5%.
    for key, sign in (("mass_g", 1), ("reserve_g", -1)):
        difference = found[key]["differences"][0]
        assert difference["by"] == pytest.approx(sign * 0.064 * (11.34 - 1.2), rel=1e-6)
        heavier = math.hypot(0.064 * 0.01, 0.064 * 1.2 * 0.005)
        lighter = math.hypot(0.064 * 0.04, 0.064 * 1.2 * 0.005)
        ends = (difference["by"] - difference["low"], difference["high"] - difference["by"])
        assert ends == pytest.approx((lighter, heavier)[::sign], rel=1e-3)
        assert difference["counts"] is True
    assert found["side_mm2"]["differences"][0]["counts"] is False
    # One body: its drag is estimated alike in both.
    assert found["drag_air_nose_mm2"]["differences"][0]["by"] == 0


def test_a_hook_and_a_coat_are_doubted_by_what_they_weigh() -> None:
    found = rows(box(), box(dressed=True))
    # A treble of size 6 weighs 0.60 to 0.90 g in stock, its steel 7.85 g/cm3; the coat lies on 4320 mm2, 0.10 to 0.20
    # mm thick, of 1.15 (1.10 to 1.18) g/cm3.
    hook, coat = 0.15, 4.32 * 0.05 * 1.15
    difference = found["mass_g"]["differences"][0]
    assert difference["by"] == pytest.approx(0.75 + 4.32 * 0.15 * 1.15, rel=1e-6)
    assert difference["high"] - difference["by"] == pytest.approx(math.hypot(hook, coat, 0.648 * 0.03), rel=1e-6)
    assert difference["by"] - difference["low"] == pytest.approx(math.hypot(hook, coat, 0.648 * 0.05), rel=1e-6)
    # Under water both lose what they displace; the bench's water has 1 g/cm3.
    wet = (hook * (1 - 1 / 7.85), 4.32 * 0.05 * 0.15)
    difference = found["reserve_g"]["differences"][0]
    assert difference["by"] - difference["low"] == pytest.approx(math.hypot(*wet, 0.648 * 0.03), rel=1e-6)


def test_two_mixes_are_doubted_apart_and_one_mix_is_not() -> None:
    first, same, other = box(), copy.deepcopy(box()) | {"run": "another"}, box(1.21)
    # 14,400 mm3 less the keel's 512, each mix known to half a percent.
    volume = 14.4 - 0.512
    difference = rows(first, other)["mass_g"]["differences"][0]
    assert difference["by"] == pytest.approx(volume * 0.01, rel=1e-6)
    band = math.hypot(volume * 1.2 * 0.005, volume * 1.21 * 0.005)
    assert difference["high"] - difference["by"] == pytest.approx(band, rel=1e-3)
    assert difference["counts"] is True
    difference = rows(first, same)["mass_g"]["differences"][0]
    assert difference["high"] - difference["low"] < 1e-4


def test_bands_by_hand() -> None:
    one, two = {"a": Band(3.0, 1.0), "b": Band(4.0, 4.0)}, {"a": Band(1.0, 0.5), "c": Band(0.0, 12.0)}
    # a moves both at once: the other less the first rises by 2 or falls by 0.5; b and c are each one's own.
    found = apart(one, two)
    assert found == Band(math.hypot(0.5, 4.0, 0.0), math.hypot(2.0, 4.0, 12.0))
    assert apart(one, one) == Band(0.0, 0.0)
    # What is known which way is no doubt: it is added as it is.
    assert apart({}, {"f": Band(-2.0, 2.0), "b": Band(4.0, 4.0)}) == Band(4.0, 6.0)
    assert [counts(1.0, Band(below, 9.0)) for below in (0.9, 1.0, 1.1)] == [True, False, False]
    assert counts(1.0, None) is None


def test_scatter_is_that_of_the_published_bodies() -> None:
    off = median(abs(math.log(row["estimate"] / row["published"])) for row in compared.rows())
    # Two robust standard deviations; the rows here are those with the layer of the source, 0.054 for 0.060.
    assert pytest.approx(2 * 1.4826 * off, rel=0.15) == SCATTER
    assert astuple(scattered(100.0, 0.0, 0.0)) == pytest.approx((16.47, 19.72), abs=0.01)
    # Of a band of ln 2 either way, the scatter's share.
    share = SCATTER / math.log(2)
    assert astuple(scattered(10.0, 8.0, 13.0, (1.0, 0.5, 2.0))) == pytest.approx((2 * share, 3 * share))


def plan(folder: Path, water: str, **keys: Any) -> BaitFile:
    table: Tree = {
        "format": 1,
        "bait": {"name": f"in {water}", "length_unit": "mm", "nose": "-x", "back": "+z"},
        "water": {"density": water},
        "body": {"mesh": "body.stl", "density": "1.2 g/cm3"},
        **keys,
    }
    return bait_of(table, folder, water)


def test_all_are_taken_in_the_first_ones_water_and_throw(bench: Bench) -> None:
    plans = [
        plan(bench.folder, "998 kg/m3", cast={"speed": "20 m/s"}),
        plan(bench.folder, "1025 kg/m3", cast={"speed": "30 m/s"}),
    ]
    told: list[str] = []
    found = compare(plans, tell=told.append)
    tree = found.study.results["comparison"]
    reserve = next(row for row in tree["rows"] if row["key"] == "reserve_g")
    # 6400 mm3 of 1.2 g/cm3.
    assert reserve["values"] == pytest.approx([6.4 * (0.998 - 1.2)] * 2, rel=1e-6)
    assert found.studies[1].results["flight"]["speed_m_s"] == 20.0
    assert tree["conditions"]["others"] == [{"name": "in 1025 kg/m3", "differs": ["water", "throw"]}]
    assert {phase.partition(",")[0] for phase in told} == {"1 of 2", "2 of 2"}
    own = compare(plans, as_stated=True).study.results["comparison"]
    reserve = next(row for row in own["rows"] if row["key"] == "reserve_g")
    assert reserve["values"] == pytest.approx([6.4 * (0.998 - 1.2), 6.4 * (1.025 - 1.2)], rel=1e-6)
    # The nose tip of the box: the middle of its face at x = 0.
    assert np.allclose(found.tips[0], (0.0, 5.0, 8.0))


@pytest.mark.parametrize("count", [1, 9])
def test_too_few_and_too_many(bench: Bench, count: int) -> None:
    with pytest.raises(InputError, match="2 to 8"):
        compare([plan(bench.folder, "998 kg/m3")] * count)
