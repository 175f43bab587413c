"""`meshlure inspect` from its words to its files: what it prints, how it ends, what it writes, what it leaves alone.

What is written is read back with the general mesh library; volumes are closed forms of the boxes and balls that the
files were made of.
"""

from __future__ import annotations

import json
import math
import shutil
from pathlib import Path
from typing import Any
from xml.etree import ElementTree as ET

import pytest
import trimesh
from command_bench import BAD_MESHES, Bench, Ran, box

FORMATS = Path(__file__).parents[1] / "formats"
BOX = 40.0 * 10.0 * 16.0
"""mm3. The body of the bench and of most files here."""

Tree = dict[str, Any]


def put(bench: Bench, name: str) -> Path:
    return Path(shutil.copy(BAD_MESHES / name, bench.folder / name))


def inspect(bench: Bench, *words: str | Path) -> Ran:
    return bench.run("inspect", *words)


def tree(ran: Ran) -> Tree:
    """The account of the one mesh that was inspected."""
    (row,) = json.loads(ran.out)["meshes"]
    found: Tree = row
    return found


def outside_reader(path: Path) -> trimesh.Trimesh:
    made: Any = trimesh.load(path, force="mesh", process=True)
    assert isinstance(made, trimesh.Trimesh)
    return made


def test_a_sound_file_says_what_it_holds(bench: Bench) -> None:
    ran = inspect(bench, "body.stl", "--unit", "mm")
    assert (ran.code, ran.err) == (0, "")
    said = ran.out.splitlines()
    assert said[0] == "body.stl"
    assert "  format   STL, 12 triangles, 684 bytes, read in mm" in said
    assert "  size     40 x 10 x 16 mm, x 0 to 40, y 0 to 10, z 0 to 16" in said
    assert "  volume   6400 mm3 (6.4 cm3)" in said
    assert said[-1] == "  verdict  sound"
    assert set(bench.contents()) == {"body.stl", "weight.stl"}


def test_findings_come_with_count_place_and_advice(bench: Bench) -> None:
    ran = inspect(bench, put(bench, "open_box.stl"), "--unit", "mm")
    assert (ran.code, ran.err) == (1, "")
    assert (
        "fault: 4 open edges in 1 rim: flat hole at x = 40 mm of 4 edges, 52 mm round, about (40, 5, 8) mm" in ran.out
    )
    assert "next: The body ends at x = 40 mm in a flat opening: is it half a body" in ran.out
    assert "volume   undefined" in ran.out
    assert "verdict  1 fault, 0 warnings, 0 notes" in ran.out


@pytest.mark.parametrize("name", ["text_renamed.stl", "four_billion.stl", "cut.3mf", "missing.stl"])
def test_what_cannot_be_read_says_why(bench: Bench, name: str) -> None:
    path = put(bench, name) if (BAD_MESHES / name).exists() else Path(name)
    ran = inspect(bench, path, "--unit", "mm")
    assert (ran.code, ran.err) == (2, "")
    assert "  unread   " in ran.out
    assert "next: " in ran.out
    told = inspect(bench, path, "--unit", "mm", "--json")
    assert told.code == 2
    assert tree(told)["verdict"] == "unreadable"
    assert tree(told)["faults"][0]["next_step"]


def test_a_unit_is_asked_for_with_the_sizes_it_would_make(bench: Bench) -> None:
    ran = inspect(bench, "body.stl")
    assert ran.code == 2
    assert "a part of 40 x 16 x 10 units" in ran.out or "a part of 40 x 10 x 16 units" in ran.out
    assert "as mm it is 40 mm long, as inches 1016 mm" in ran.out
    believed = inspect(bench, FORMATS / "inch.3mf")
    assert believed.code == 0
    assert "read in in" in believed.out
    assert "size     1016 x 254 x 406.4 mm" in believed.out


def test_a_part_of_exactly_five_millimetres_is_not_outside_what_is_possible(bench: Bench) -> None:
    """15 to 20 mm: the difference in metres is 5 mm less a bit's rounding."""
    bench.put("pin.stl", box((15, 0, 0), (5, 1, 1)))
    ran = inspect(bench, "pin.stl", "--unit", "mm", "--json")
    assert [(f["code"], f["level"]) for f in tree(ran)["findings"]] == [("unusual-size", "note")]
    assert ran.code == 0
    bench.put("pin.stl", box((15, 0, 0), (4.99, 1, 1)))
    assert inspect(bench, "pin.stl", "--unit", "mm").code == 1


def test_a_folder_and_many_files_make_a_table(bench: Bench) -> None:
    put(bench, "open_box.stl")
    put(bench, "text_renamed.stl")
    bench.put("notes.txt", "not a mesh")
    ran = inspect(bench, bench.folder, FORMATS / "box.3mf", "--unit", "mm")
    assert ran.code == 2, "one is unreadable"
    lines = ran.out.splitlines()
    assert lines[0].split() == [
        "file",
        "format",
        "unit",
        "size",
        "mm",
        "triangles",
        "shells",
        "volume",
        "mm3",
        "verdict",
    ]
    rows = {Path(line.split()[0]).name: line for line in lines[1:] if line[:1].strip()}
    assert list(rows) == ["body.stl", "open_box.stl", "text_renamed.stl", "weight.stl", "box.3mf"]
    assert rows["body.stl"].split()[1:] == ["STL", "mm", "40", "x", "10", "x", "16", "12", "1", "6400", "sound"]
    assert "undefined" in rows["open_box.stl"]
    assert "open-edges" in rows["open_box.stl"]
    assert "unreadable" in rows["text_renamed.stl"]
    (bench.folder / "text_renamed.stl").unlink()
    assert inspect(bench, bench.folder, "--unit", "mm").code == 1, "the worst one that is left has findings"
    (bench.folder / "open_box.stl").unlink()
    assert inspect(bench, bench.folder, "--unit", "mm").code == 0


def test_a_folder_without_a_mesh_names_one_with(bench: Bench) -> None:
    bench.put("parts/lip.stl", box((0, 0, 0), (20, 10, 1)))
    (bench.folder / "body.stl").unlink()
    (bench.folder / "weight.stl").unlink()
    ran = inspect(bench, ".", "--unit", "mm")
    assert ran.code == 2
    assert "next: name one that does, such as 'parts'" in ran.err


def test_json_holds_everything_and_nothing_else_is_printed(bench: Bench) -> None:
    ran = inspect(bench, put(bench, "shells_overlapping.stl"), "--unit", "mm", "--json")
    assert (ran.code, ran.err) == (0, "")
    row = tree(ran)
    # The second box of 20 x 6 x 6 mm lies half in the first.
    assert row["volume_mm3"] == pytest.approx(BOX + 360.0, rel=1e-9)
    assert row["summed_volume_mm3"] == pytest.approx(BOX + 720.0, rel=1e-9)
    assert [shell["meets"] for shell in row["shells"]] == [[1], [0]]
    assert row["size_mm"] == pytest.approx([50.0, 10.0, 16.0])
    assert row["mending"] is None


def test_a_picture_shows_the_findings_where_they_are(bench: Bench) -> None:
    name = put(bench, "open_box.stl")
    assert inspect(bench, name, "--unit", "mm", "--picture", "open.svg").code == 1
    assert ET.parse(bench.folder / "open.svg").getroot().tag.endswith("svg")
    assert inspect(bench, name, "--unit", "mm", "--picture", "open.png").code == 1
    assert (bench.folder / "open.png").read_bytes().startswith(b"\x89PNG\r\n\x1a\n")
    # A picture of ours is replaced; anything else stays.
    assert inspect(bench, name, "--unit", "mm", "--picture", "open.png").code == 1
    bench.put("mine.png", "a photograph")
    ran = inspect(bench, name, "--unit", "mm", "--picture", "mine.png")
    assert ran.code == 2
    assert "it stays" in ran.err
    assert (bench.folder / "mine.png").read_bytes() == b"a photograph"


Steps = list[tuple[str, int, str, float | None, float]]

MENDED: dict[str, tuple[Steps, float, float, tuple[str, ...]]] = {
    # name: (steps in order, words of each, mm3 before and after each, mm moved at most, volume by hand, options)
    "cracked.obj": ([("weld", 1, "made one of 1 corner", None, BOX)], 0.0005, BOX, ()),
    "mixed_winding.stl": ([("winding", 3, "turned 3 faces", None, BOX)], 0.0, BOX, ()),
    "duplicate_face.stl": ([("doubles", 1, "took away 1 face", None, BOX)], 0.0, BOX, ()),
    "needle_face.stl": ([("zero-area", 1, "took away 1 face without area", None, BOX)], 0.0, BOX, ()),
    "inside_out.stl": ([("outward", 1, "all faces looked inwards", BOX, BOX)], 0.0, BOX, ()),
    "shells_overlapping.stl": (
        [("join", 2, "360 mm3 had counted twice", BOX + 720, BOX + 360)],
        0.0,
        BOX + 360,
        (),
    ),
    "half_body.stl": (
        [("mirror", 1, "mirrored the body at the flat", None, 2 * BOX)],
        0.0,
        2 * BOX,
        ("--mirror",),
    ),
    "open_box.stl": ([("cap", 1, "closed 1 flat hole of 160 mm2", None, BOX)], 0.0, BOX, ("--cap", "10%")),
}


@pytest.mark.parametrize("name", MENDED)
def test_mending_tells_first_and_writes_only_with_out(bench: Bench, name: str) -> None:
    steps, moved, volume, options = MENDED[name]
    path = put(bench, name)
    before = bench.contents()
    told = inspect(bench, path.name, "--unit", "mm", "--mend", *options)
    assert bench.contents() == before, "telling writes nothing"
    assert told.code == inspect(bench, path.name, "--unit", "mm").code, "the file is as it was found"
    assert "  would    " in told.out
    ran = inspect(bench, path.name, "--unit", "mm", "--mend", *options, "--out", "mended.stl", "--json")
    row = tree(ran)
    made = row["mending"]
    assert [(s["code"], s["count"]) for s in made["steps"]] == [step[:2] for step in steps]
    for step, (_, _, words, was, now) in zip(made["steps"], steps, strict=True):
        assert words in step["did"]
        assert words in told.out
        assert step["before_mm3"] == (None if was is None else pytest.approx(was, rel=1e-6))
        assert step["after_mm3"] == pytest.approx(now, rel=1e-5)
        assert step["moved_mm"] <= moved * (1 + 1e-4)
        assert step["where_mm"]
    after = bench.contents()
    assert after.pop("mended.stl")
    assert after == before, "the original stays byte for byte"
    assert (made["closed"], made["file"]) == (True, "mended.stl")
    theirs = outside_reader(bench.folder / "mended.stl")
    assert theirs.is_watertight
    assert theirs.is_winding_consistent
    assert theirs.volume == pytest.approx(made["volume_mm3"], rel=2e-6)
    assert theirs.volume == pytest.approx(volume, rel=1e-5)
    again = inspect(bench, "mended.stl", "--unit", "mm", "--json")
    assert tree(again)["volume_mm3"] == pytest.approx(volume, rel=1e-5)
    assert (again.code, ran.code) == (0, 0)


def test_a_named_part_and_small_shells_are_left_out(bench: Bench) -> None:
    weight = 10.0 * 9.0 * 5.0 / 6.0
    ran = inspect(bench, FORMATS / "two_objects.3mf", "--mend", "--drop", "belly weight", "--out", "body.3mf", "--json")
    assert ran.code == 0
    (step,) = tree(ran)["mending"]["steps"]
    assert (step["code"], step["did"][:33]) == ("drop-part", "left out the part 'belly weight' ")
    assert step["before_mm3"] - step["after_mm3"] == pytest.approx(weight, rel=1e-6)
    assert outside_reader(bench.folder / "body.3mf").volume == pytest.approx(BOX, rel=1e-6)
    ran = inspect(bench, FORMATS / "two_objects.3mf", "--mend", "--drop", "bely weight")
    assert ran.code == 2
    assert "did you mean 'belly weight'" in ran.err
    ran = inspect(bench, FORMATS / "two_objects.3mf", "--mend", "--drop", "11 mm", "--json")
    assert [s["code"] for s in tree(ran)["mending"]["steps"]] == ["drop-small"]


def test_a_small_hole_is_closed_without_being_asked_for(bench: Bench) -> None:
    """One facet of a ball of 128 is gone, and comes back as it was: the octahedron's facets halved twice."""
    ran = inspect(bench, put(bench, "small_hole.stl"), "--unit", "mm", "--mend", "--out", "mended.3mf", "--json")
    made = tree(ran)["mending"]
    assert [s["code"] for s in made["steps"]] == ["cap"]
    theirs = outside_reader(bench.folder / "mended.3mf")
    assert theirs.is_watertight
    assert theirs.volume == pytest.approx(made["volume_mm3"], rel=1e-6)
    assert BOX + 0.9 * 4 / 3 * math.pi * 6**3 < theirs.volume < BOX + 4 / 3 * math.pi * 6**3
    assert ran.code == 1, "the box and the ball are still apart"


def test_what_cannot_be_mended_says_where_and_why_and_writes_nothing(bench: Bench) -> None:
    path = put(bench, "half_body.stl")
    before = bench.contents()
    told = inspect(bench, path.name, "--unit", "mm", "--mend")
    assert told.code == 1
    assert "left     flat hole of 4 edges and 640 mm2 (36.36% of the skin) about (20, 0, 8) mm: larger than" in told.out
    assert "offer    --mirror would close it, with 12800 mm3" in told.out
    assert "offer    --cap 100% would close it, with 6400 mm3" in told.out
    ran = inspect(bench, path.name, "--unit", "mm", "--mend", "--out", "mended.stl")
    assert ran.code == 2
    assert "cannot be mended: flat hole of 4 edges" in ran.err
    assert bench.contents() == before
    touching = inspect(bench, put(bench, "shared_edge.stl"), "--unit", "mm", "--mend", "--json")
    assert tree(touching)["mending"]["steps"] == []
    (left,) = tree(touching)["mending"]["left"]
    assert "touch along an edge or at a corner only" in left["what"]
    crossing = inspect(bench, put(bench, "crossing_itself.stl"), "--unit", "mm", "--mend", "--json")
    (left,) = tree(crossing)["mending"]["left"]
    assert "runs through itself" in left["what"]
    assert "--remake" in left["advice"]


REFUSED = {
    "options of mending without it": (["body.stl", "--weld", "0.1 mm"], "add --mend"),
    "out of several": (["body.stl", "weight.stl", "--mend", "--out", "m.stl"], "one mesh is mended into one file"),
    "out over the original": (["body.stl", "--mend", "--out", "body.stl"], "it stays"),
    "out of another format": (["body.stl", "--mend", "--out", "m.obj"], "written as STL or 3MF"),
    "a wide weld": (["body.stl", "--mend", "--weld", "2 mm"], "--weld"),
    "more than the whole skin": (["body.stl", "--mend", "--cap", "120%"], "--cap"),
    "no length": (["body.stl", "--mend", "--remake", "fine"], "--remake"),
    "one picture of several": (["body.stl", "weight.stl", "--picture", "p.png"], "need a folder"),
    "a picture of another format": (["body.stl", "--picture", "p.jpeg"], "make the folder"),
    "an unknown unit": (["body.stl", "--unit", "feet"], "feet"),
}


@pytest.mark.parametrize("case", REFUSED)
def test_refused_before_anything_is_written(bench: Bench, case: str) -> None:
    words, said = REFUSED[case]
    before = bench.contents()
    ran = inspect(bench, *words, *([] if "--unit" in words else ["--unit", "mm"]))
    assert ran.code == 2
    assert said in ran.err + ran.out
    assert bench.contents() == before
