"""The fifteen mistakes that makers make in their files, each found and answered by the command that they run.

A row is a file of tests/bad_meshes: a mesh that is inspected or reported on, or a bait file that is reported on.
Numbers in what is expected are worked out from the few boxes, prisms and balls that the files are made of.
"""

from __future__ import annotations

import json
import math
import re
from dataclasses import dataclass, field
from pathlib import Path
from typing import Any

import pytest
from command_bench import BAD_MESHES, QUICK, Bench, Ran

Tree = dict[str, Any]

REPORT = ("report", "--no-page", "--json")
INSPECT = ("inspect", "--unit", "mm", "--json")
MEND = (*INSPECT, "--mend")
MOULD = ("mould", "--master", "--json")


@dataclass(frozen=True)
class Mistake:
    """A file, the command, and what it is answered.

    ``said`` are patterns in what is refused, or in the messages and advice of findings; ``codes`` are all findings
    graver than a note, unless ``notes`` names some of those too.
    """

    number: int
    file: str
    words: tuple[str, ...]
    code: int
    codes: tuple[str, ...] = ()
    said: tuple[str, ...] = ()
    notes: tuple[str, ...] = ()
    holds: dict[str, Any] = field(default_factory=dict)


def rattling(at: float) -> float:
    """Centre of gravity along x, mm, of a box of 36 x 12 x 12 about x = 10 with a bore of 23 x 7 x 7 about x = 8, of
    1.2 g/cm3, and a steel ball of 6 mm and 7.81 g/cm3 at a place: against either end of the bore, less its radius."""
    ball = math.pi * 6**3 / 6 * 7.81
    return (1.2 * (5184 * 10 - 1127 * 8) + ball * at) / (1.2 * (5184 - 1127) + ball)


MISTAKES = {
    # 1: another unit
    "inches read as mm": Mistake(1, "read_in_mm.toml", REPORT, 2, said=(r"3\.94 mm", r"inches \(100 mm\)")),
    "inches, inspected": Mistake(1, "in_inches.stl", INSPECT, 1, ("unusual-size",), (r"inches \(100 mm\)",)),
    "metres, inspected": Mistake(1, "in_metres.stl", INSPECT, 1, ("unusual-size",), (r"metres \(40 mm\)",)),
    # 2: faces that look the wrong way; 6,400 mm3 of 1.2 g/cm3 all the same
    "inside out": Mistake(
        2, "inside_out.stl", REPORT, 0, ("inside-out",), ("turned",), holds={"weight.mass_g": 6.4 * 1.2}
    ),
    "mixed winding": Mistake(2, "mixed_winding.stl", REPORT, 2, said=(r"7 edges", "make normals consistent")),
    "mixed winding, mended": Mistake(
        2, "mixed_winding.stl", MEND, 1, ("mixed-winding",), ("turned 3 faces",), holds={"mending.volume_mm3": 6400.0}
    ),
    # 3: open at the end
    "open at the end": Mistake(
        3, "open_box.stl", REPORT, 2, said=(r"flat hole at x = 40 mm of 4 edges, 52 mm round, about \(40, 5, 8\) mm",)
    ),
    "open at the end, mended": Mistake(
        3, "open_box.stl", MEND, 1, ("open-edges",), (r"160 mm2 \(7\.14% of the skin\)", "--cap 100%")
    ),
    "a small hole, mended": Mistake(3, "small_hole.stl", MEND, 1, ("open-edges",), ("closed 1 flat hole",)),
    # 4: 4 x 4 x 4 mm of a weight outside
    "a weight that pokes out": Mistake(
        4, "weight_pokes_out.toml", REPORT, 0, ("sticks-out",), (r"64 mm3 .* by up to 4\.0 mm, about \(42\.0, 5\.0",)
    ),
    # 5: 2 x 4 x 4 mm
    "weights that overlap": Mistake(
        5, "weights_overlap.toml", REPORT, 2, said=(r"'rear weight' and 'front weight' share 32 mm3", "replaces")
    ),
    # 6: shells in one file
    "an eye as a shell that overlaps": Mistake(
        6,
        "shells_overlapping.stl",
        REPORT,
        0,
        (),
        ("360 mm3, which counts once", "another material"),
        ("several-shells", "shells-joined"),
        {"weight.mass_g": 6.76 * 1.2},
    ),
    "bodies apart": Mistake(6, "shells_apart.stl", REPORT, 0, ("shells-apart",), ("2 bodies that do not touch",)),
    "a nested shell turned inwards is a void": Mistake(
        6, "cavity.stl", REPORT, 0, (), ("cavity of 640 mm3",), ("several-shells",), {"weight.mass_g": 5.76 * 1.2}
    ),
    # 7: nothing in a mesh says at what stage of shrinking it is: all three volumes are told, and the stage is asked
    "shrinkage": Mistake(
        7,
        "shrunk_twice.toml",
        MOULD,
        0,
        holds={
            "mould.volume_drawn_mm3": 6400.0,
            "mould.volume_moulded_mm3": 6400.0 / (0.998 * 0.997 * 0.996) ** 3,
            "mould.volume_cast_mm3": 6400.0,
            "assumptions": "stage of the mesh: as drawn.*state shrinkages of 0 %",
        },
    ),
    # 8: densities
    "a density without unit": Mistake(
        8, "bare_density.toml", REPORT, 2, said=(r"no unit", r"'0\.75 g/cm3' or '750 kg/m3'")
    ),
    "a density in another unit": Mistake(
        8, "density_in_the_wrong_unit.toml", REPORT, 2, said=(r"lighter than any foam", r"is it '0\.75 g/cm3'")
    ),
    "a density below zero": Mistake(8, "density_below_zero.toml", REPORT, 2, said=("above 0 g/cm3",)),
    "a slipped digit": Mistake(
        8,
        "slipped_digit.toml",
        REPORT,
        0,
        ("density-unlike-name",),
        (r"1\.134 g/cm3, where lead has 10\.85 to 11\.35",),
    ),
    # 1 lb/in3 = 453.59237 g / 16.387064 cm3; 80 mm3 of it in 6,320 mm3 of 1.2 g/cm3
    "pounds per cubic inch": Mistake(
        8,
        "pounds_per_cubic_inch.toml",
        REPORT,
        0,
        holds={"weight.mass_g": 6.32 * 1.2 + 0.08 * 0.41 * 453.59237 / 16.387064},
    ),
    # 9: half a body
    "half a body, open": Mistake(9, "half_body.stl", REPORT, 2, said=(r"flat hole at y = 0 mm", "is it half a body")),
    "half a body, mended": Mistake(
        9, "half_body.stl", MEND, 1, ("open-edges",), ("--mirror",), holds={"mending.offers.0.volume_mm3": 12800.0}
    ),
    # Its side view, an octahedron's ring halved three times, has 32 corners: 32/2 sin(2 pi/32) times 30 x 10 mm2, less
    # what the rings' unequal steps take.
    "half a body, closed": Mistake(
        9,
        "half_closed.toml",
        REPORT,
        0,
        ("coarse-facets", "half-body"),
        (r"y = 0 mm in a flat face of 93\d\.\d mm2", "is it half a body"),
        holds={"postures.0.lean_deg": 90.0},
    ),
    # 10: axes
    "nose across": Mistake(
        10, "nose_across.toml", REPORT, 0, ("nose-not-lengthwise",), ("16 mm long from nose to tail, but 40 mm to the",)
    ),
    "upside down": Mistake(
        10, "upside_down.toml", REPORT, 0, ("coarse-facets", "rests-upside-down"), ('is back = "-z" meant',)
    ),
    # 11: 640 mm3 of pocket, 378 mm3 of weight
    "a pocket cut already": Mistake(
        11,
        "pocket_closed.toml",
        REPORT,
        0,
        (),
        ("fills 378 mm3 of its 640 mm3; 262 mm3 of air stay",),
        ("insert-in-cavity", "several-shells"),
        {"weight.mass_g": 5.76 * 1.2 + 0.378 * 11.34},
    ),
    "a pocket cut already and open": Mistake(
        11, "pocket_open.toml", REPORT, 0, ("sits-outside",), (r"0\.25 mm of gap stay between it and the walls",)
    ),
    # 12: skins of scale texture and lofts
    "a skin through itself": Mistake(
        12,
        "crossing_itself.stl",
        INSPECT,
        1,
        ("self-crossing",),
        (r"about [\d.e+]+ mm3 too much \(\d+\.\d+%\), deepest",),
    ),
    "a face twice": Mistake(12, "duplicate_face.stl", MEND, 1, ("crowded-edges", "duplicate-faces"), ("took away 1",)),
    "a face without area": Mistake(
        12, "needle_face.stl", MEND, 1, ("crowded-edges", "open-edges"), ("1 face without area",)
    ),
    "solids that share an edge": Mistake(
        12, "shared_edge.stl", INSPECT, 1, ("crowded-edges",), ("closed all the same", "2 shells touch")
    ),
    # 13: an octahedron's faces halved once hold 70% of their ball
    "too coarse": Mistake(
        13, "coarse.toml", REPORT, 0, ("coarse-facets",), (r"facets leave out about .*% of its vol",)
    ),
    # 14: balls
    "balls as one mesh": Mistake(
        14,
        "balls_as_mesh.toml",
        REPORT,
        0,
        ("balls-drawn", "shells-apart"),
        (r"3 balls of 6 mm in 'rattle chamber': they stay where they are drawn", r"\[\[balls\]\]"),
    ),
    "balls, inspected": Mistake(
        14, "balls.stl", INSPECT, 1, ("coarse-facets", "shells-apart"), ("3 shells are balls",)
    ),
    "a ball at either end": Mistake(
        14,
        "balls_stated.toml",
        REPORT,
        0,
        holds={
            "balls.0.end": "nose",
            "balls.0.centre_mm.0": rattling(-0.5),
            "balls.1.end": "tail",
            "balls.1.centre_mm.0": rattling(16.5),
        },
    ),
    # 15: 0.5 oz = 14.17 g
    "ounces": Mistake(15, "bare_ounces.toml", REPORT, 2, said=("no unit", r"'0\.5 g' or '0\.5 oz' \(14\.17 g\)")),
}


def test_every_mistake_has_a_row_and_every_bait_file_its_mistake() -> None:
    assert {row.number for row in MISTAKES.values()} == set(range(1, 16))
    assert {row.file for row in MISTAKES.values() if row.file.endswith(".toml")} == {
        path.name for path in BAD_MESHES.glob("*.toml")
    }


def run(bench: Bench, row: Mistake) -> Ran:
    path = BAD_MESHES / row.file
    if row.words is MOULD:
        return bench.run(*row.words, path, "--out", bench.out)
    more = QUICK if row.words is REPORT and path.suffix != ".toml" else ()
    command, *options = row.words
    return bench.run(command, path, *options, *more)


def at(tree: Any, path: str) -> Any:
    for key in path.split("."):
        tree = tree[int(key)] if isinstance(tree, list) else tree[key]
    return tree


def words_of(tree: Tree) -> list[str]:
    """Everything that the account says in words."""
    rows = list(tree["findings"])
    made = tree.get("mending") or {}
    said = [f"{row['message']} {row['advice']}" for row in rows]
    said += [step["did"] for step in made.get("steps", [])]
    said += [f"{left['what']} {left['advice']}" for left in made.get("left", [])]
    return said + [offer["option"] for offer in made.get("offers", [])]


@pytest.mark.parametrize("case", MISTAKES)
def test_the_mistake_is_found_and_answered(bench: Bench, case: str) -> None:
    row = MISTAKES[case]
    before = {path: path.read_bytes() for path in BAD_MESHES.glob(f"{Path(row.file).stem}.*")}
    ran = run(bench, row)
    assert ran.code == row.code, ran
    assert {path: path.read_bytes() for path in before} == before
    if row.code == 2:
        assert ran.out == ""
        assert "next: " in ran.err
        for words in row.said:
            assert re.search(words, ran.err), (words, ran.err)
        return
    tree = json.loads(ran.out)
    tree = tree["meshes"][0] if "meshes" in tree else tree
    graver = sorted({f["code"] for f in tree["findings"] if f["level"] != "note"})
    assert graver == sorted(row.codes)
    assert set(row.notes) <= {f["code"] for f in tree["findings"]}
    said = words_of(tree)
    for words in row.said:
        assert any(re.search(words, each) for each in said), (words, said)
    for path, value in row.holds.items():
        if path == "assumptions":
            told = [f"{each['what']}: {each['value']}; {each['source']}" for each in tree["assumptions"]]
            assert any(re.search(value, each) for each in told), told
        elif isinstance(value, str):
            assert at(tree, path) == value
        else:
            assert abs(at(tree, path)) == pytest.approx(abs(value), rel=2e-6), path
