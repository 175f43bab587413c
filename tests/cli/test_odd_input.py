"""What is odd and yet readable is read, and what was done about it is said."""

from __future__ import annotations

import json
from typing import Any

import pytest
from command_bench import BAD_MESHES, BAIT, Bench, Ran, box

BOX = 6400.0
"""mm3: 40 x 10 x 16."""

Tree = dict[str, Any]


def results(bench: Bench, ran: Ran) -> Tree:
    assert (ran.code, ran.err) == (0, ""), ran
    tree: Tree = json.loads((bench.out / "results.json").read_text(encoding="utf-8"))
    return tree


def codes(tree: Tree) -> dict[str, str]:
    return {finding["code"]: finding["level"] for finding in tree["findings"]}


@pytest.mark.parametrize(
    ("name", "volume", "found"),
    [
        ("solid_but_binary.stl", BOX, {}),
        # A second box of the same size beside the first: both count.
        ("two_solids.stl", 2 * BOX, {"several-solids": "note", "several-shells": "note", "shells-apart": "warning"}),
        ("inside_out.stl", BOX, {"inside-out": "warning"}),
        # 20 x 4 x 8 mm of air inside.
        ("cavity.stl", BOX - 640.0, {"several-shells": "note"}),
        # A box of 20 x 6 x 6 mm that lies half in the first one adds its other half.
        ("shells_overlapping.stl", BOX + 360.0, None),
        # 216 mm2 by the shoelace formula, 10 mm high; flat on one side alone, an L may be half a T.
        ("concave.obj", 2160.0, {"half-body": "warning"}),
    ],
)
def test_the_volume_that_counts(bench: Bench, name: str, volume: float, found: dict[str, str] | None) -> None:
    tree = results(bench, bench.report(BAD_MESHES / name))
    assert tree["facets"][0]["volume_mm3"] == pytest.approx(volume, rel=1e-6)
    assert tree["weight"]["mass_g"] == pytest.approx(volume * 1.2e-3, rel=1e-6)
    if found is not None:
        assert codes(tree) == found


def test_a_concave_polygon_shows_its_area_by_the_shoelace_formula(bench: Bench) -> None:
    tree = results(bench, bench.report(BAD_MESHES / "concave.obj"))
    areas = {area["name"]: area["area_mm2"] for area in tree["areas"]}
    # The outline from above is the polygon itself; a face folded at its concave corner would show more.
    assert areas["top"] == pytest.approx(216.0, rel=1e-6)
    # From the side and from the front it is 30 x 10 and 20 x 10 mm.
    assert (areas["side"], areas["front"]) == pytest.approx((300.0, 200.0), rel=1e-6)


def test_a_turned_mesh_is_said_on_stdout_too(bench: Bench) -> None:
    ran = bench.report(BAD_MESHES / "inside_out.stl")
    assert "warning: all faces looked inwards; the surface was turned" in ran.out


LENGTHS = [
    (4.99, "stops", "inches (127 mm)"),
    (5.0, "asks", "inches (127 mm)"),
    (14.99, "asks", "inches (381 mm)"),
    (15.0, "is silent", ""),
    (400.0, "is silent", ""),
    (400.1, "asks", "is that meant?"),
    (1500.0, "asks", "is that meant?"),
    (1500.1, "stops", ""),
]


@pytest.mark.parametrize("checked", [False, True], ids=["unchecked", "checked"])
@pytest.mark.parametrize(("length", "does", "hint"), LENGTHS)
def test_a_length_of_no_usual_bait(bench: Bench, length: float, does: str, hint: str, checked: bool) -> None:
    bench.put("body.stl", box((0, 0, 0), (length, length / 4, length / 5)))
    ran = bench.report(BAIT.replace("[body]", "size_checked = true\n[body]") if checked else BAIT)
    if does == "stops":
        assert ran.code == 2
        assert f"found: {length:.4g} mm from nose to tail, read in mm" in ran.err
        assert "allowed: 5 mm to 1.5 m" in ran.err
        assert hint in ran.err
    else:
        asked = f"the body is {length:.4g} mm long, read in mm"
        assert codes(results(bench, ran)) == ({"unusual-size": "warning"} if does == "asks" and not checked else {})
        assert (asked in ran.out) is (does == "asks" and not checked)
        assert checked or hint in ran.out


def test_inches_taken_for_millimetres(bench: Bench) -> None:
    # 3.94 in are 100 mm.
    bench.put("body.stl", box((0, 0, 0), (3.94, 0.6, 0.8)))
    ran = bench.report(BAIT)
    assert ran.code == 2
    assert "found: 3.94 mm" in ran.err
    assert "next: is the file in inches (100 mm) or centimetres (39 mm)? State length_unit" in ran.err
    assert results(bench, bench.report(BAIT.replace('"mm"', '"in"')))["size"]["length_mm"] == pytest.approx(100.076)
