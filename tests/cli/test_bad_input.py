"""Every bad input gets one message with what, where, the value found, what is allowed and the next step; exit 2."""

from __future__ import annotations

import os
import re
from pathlib import Path

import pytest
from command_bench import BAD_MESHES, BAIT, QUICK, Bench, box, fault

INSERT = '[[insert]]\nname = "belly weight"\nmesh = "weight.stl"\nmaterial = "lead"\n'
HOOK = '[[hardware]]\nname = "front treble"\nmass = "0.7 g"\nat = [20, 5, -2]\nhangs = true\n'

MESHES = {
    # name of the body's file: what its fault must say, in this order
    "empty.stl": ["empty.stl: the mesh is empty", "found: 0 bytes", "next: export or save it again"],
    "text_renamed.stl": [
        "text_renamed.stl: this is a text file, no STL",
        "found: .*Belly weight",
        "allowed: .*'solid'",
    ],
    # The box has 12 faces, and STL 84 bytes before the first and 50 for each.
    "cut_inside_a_face.stl": [
        "cut_inside_a_face.stl: the binary STL is cut off inside face 10",
        "found: 564 bytes",
        "allowed: 684 bytes for the 12 faces",
        "next: export the part again",
    ],
    "cut_between_faces.stl": [
        "cut_between_faces.stl: the binary STL is cut off between faces 10 and 11",
        "found: 584 bytes, room for 10 whole faces",
        "allowed: 684 bytes for the 12 faces",
        "next: export the part again",
    ],
    "not_a_number.stl": ["not_a_number.stl, face 5: ", "no finite number", "found: nan", "allowed: finite numbers"],
    "not_a_number.obj": ["not_a_number.obj, face 1, 4, 5; line 3: ", "found: nan", "allowed: finite numbers"],
    "no_faces.stl": ["no_faces.stl: the STL holds no faces", "found: a face count of 0"],
    "no_faces_ascii.stl": ["no_faces_ascii.stl: the STL holds no faces", "found: "],
    "no_faces.obj": ["no_faces.obj: the OBJ holds no faces", "found: 8 vertices and no polygon", "allowed: 'f' lines"],
    # The box without the two faces of its end at x = 40 mm, which is 10 by 16 mm: 52 mm round, its middle at (5, 8).
    "open_box.stl": [
        r"open_box.stl: 4 open edges in 1 rim: flat hole at x = 40 mm .*52 mm round, about \(40, 5, 8\) mm",
        "allowed: a closed surface",
        "next: the body ends at x = 40 mm.*close the face",
    ],
    "mixed_winding.stl": [
        r"mixed_winding.stl: 7 edges where .* wound against each other, at \(0, 5, 0\) mm",
        "allowed: a closed surface: .*wound",
        "next: turn the faces",
    ],
}


@pytest.mark.parametrize("name", MESHES)
def test_a_bad_mesh(bench: Bench, name: str) -> None:
    told = fault(bench.report(BAD_MESHES / name))
    assert re.search(".*".join(MESHES[name]), told, re.DOTALL), told
    assert not bench.out.exists()


def quoted(text: str) -> str:
    return f'density = "{text}"'


STATED = quoted("1.2 g/cm3")

FILES = {
    "missing file": (BAIT.replace("body.stl", "bodi.stl"), ["bodi.stl: the mesh is not there", "next: .*'body.stl'"]),
    "unknown key": (
        BAIT + 'colour = "red"\n',
        ["minnow.toml: body.colour: no such key", "allowed: .*density, material, mesh", "next: remove it"],
    ),
    "mistyped key": (
        BAIT.replace("density", "densty"),
        ["minnow.toml: body.densty: no such key", "allowed: .*density", "next: did you mean 'density'"],
    ),
    "unknown section": (
        BAIT + "[hooks]\n",
        ["minnow.toml: hooks: no such key", "allowed: .*hardware, insert", "next: "],
    ),
    "unknown material": (
        BAIT.replace(STATED, 'material = "balza"'),
        ["minnow.toml: body.material: no material of this name", "found: balza", "allowed: .*balsa", "next: .*density"],
    ),
    "unknown material of an insert": (
        BAIT + INSERT.replace('"lead"', '"leed"'),
        ["minnow.toml: insert.1. 'belly weight'.material: no material", "found: leed", "allowed: .*lead"],
    ),
    "unknown hook": (
        BAIT + HOOK.replace('mass = "0.7 g"', 'item = "trebble 6"'),
        [
            "minnow.toml: hardware.1. 'front treble'.item: ",
            "found: trebble 6",
            "allowed: .*treble 6",
            "next: .*weigh it",
        ],
    ),
    "negative density": (
        BAIT.replace(STATED, quoted("-0.72 g/cm3")),
        ["minnow.toml: body.density: ", "found: -0.72 g/cm3", "allowed: above 0 g/cm3"],
    ),
    "zero density": (
        BAIT.replace(STATED, quoted("0 g/cm3")),
        ["minnow.toml: body.density: ", "found: 0 g/cm3", "allowed: above 0 g/cm3"],
    ),
    "density without a unit": (
        BAIT.replace(STATED, "density = 0.72"),
        [
            "minnow.toml: body.density: the number has no unit",
            "found: 0.72",
            "allowed: .*g/cm3, kg/m3",
            "next: write '0.72 g/cm3' or '720 kg/m3'",
        ],
    ),
    "insert that touches nothing": (
        BAIT + INSERT.replace("weight.stl", "far.stl"),
        # 60 mm of air between the body's end at 40 mm and the weight's side at 100 mm.
        ["far.stl: 'belly weight' touches nothing: .*60.0 mm", "allowed: at most 0.5 mm", "next: .*same CAD origin"],
    ),
    "inserts that share space": (
        BAIT + INSERT + INSERT.replace("belly weight", "wire").replace("weight.stl", "shared.stl"),
        # 3 x 4 x 4 mm of both.
        [r"shared.stl: .*share 48 mm3", "allowed: .*share no space", r'next: .*replaces = \["belly weight"\]'],
    ),
    "hardware far from the body": (
        BAIT + HOOK.replace("-2]", "-950]"),
        [
            "minnow.toml: hardware.1. 'front treble'.at: the hardware is far from the body",
            r"found: \[20, 5, -950\] mm, 950.0 mm from",
            "allowed: within 30 mm",
            "next: .*mesh's own coordinates",
        ],
    ),
    "water that boils": (
        BAIT + '[water]\ntemperature = "120 degC"\n',
        ["minnow.toml: water.temperature: ", "found: 120 degC", "allowed: from 0 degC up to 40 degC"],
    ),
}


@pytest.mark.parametrize("case", FILES)
def test_a_bad_bait_file(bench: Bench, case: str) -> None:
    bench.put("far.stl", box((100, 3, 3), (5, 4, 4)))
    bench.put("shared.stl", box((12, 3, 3), (5, 4, 4)))
    text, said = FILES[case]
    told = fault(bench.report(text))
    assert re.search(".*".join(said), told, re.DOTALL), told
    assert not bench.out.exists()


QUICK_FORM = {
    "missing file": (["bodi.stl"], ["- bodi.stl: the mesh is not there", "next: did you mean 'body.stl'"]),
    "missing folder": (
        ["no/body.stl"],
        ["- no/body.stl: the mesh is not there", "next: check the path: no is no folder"],
    ),
    "density without a unit": (["--density", "0.72"], ["- --density: the number has no unit", "next: .*'0.72 g/cm3'"]),
    "negative density": (["--density", "-1 g/cm3"], ["- --density: ", "found: -1 g/cm3", "allowed: above 0 g/cm3"]),
    "density and material": (["--material", "balsa"], ["- --density: .*one of them", "found: .*balsa", "next: "]),
    "unknown material of an insert": (
        ["--insert", "weight.stl=leed"],
        ["- --insert weight.stl=leed: no material", "found: leed", "allowed: .*lead", "next: "],
    ),
    "unknown unit": (["--unit", "feet"], ["- --unit: ", "found: feet", "allowed: .*mm", "next: "]),
    "no direction": (["--nose", "forward"], ["- --nose: no such direction", "found: 'forward'", r"allowed: .*\+x, -x"]),
    "back along the nose": (["--back", "+x"], ["- --back: .*not at a right angle", "found: ", "allowed: 89.9 to 90.1"]),
    "insert without its kind": (["--insert", "weight.stl"], ["- --insert weight.stl: ", "allowed: FILE=", "next: "]),
    "insert that is missing": (["--insert", "wait.stl=lead"], ["wait.stl: the mesh is not there", "'weight.stl'"]),
}


@pytest.mark.parametrize("case", QUICK_FORM)
def test_a_bad_quick_form(bench: Bench, case: str) -> None:
    words, said = QUICK_FORM[case]
    body = words[0] if not words[0].startswith("-") else "body.stl"
    told = fault(bench.report(Path(body), *(words if body == "body.stl" else [])))
    assert re.search(".*".join(said), told, re.DOTALL), told
    assert not bench.out.exists()


@pytest.mark.parametrize(
    ("name", "said"),
    [
        ("samples", ["- samples: this is a folder", "allowed: .*.toml, .stl, .obj", "next: name the bait file in it"]),
        ("body.iges", ["- body.iges: this is neither a bait file nor a mesh", "found: '.iges'", "next: export .* STL"]),
        ("minnow", ["- minnow: this is neither", "found: 'minnow'", "allowed: .*.toml"]),
    ],
)
def test_neither_a_bait_file_nor_a_mesh(bench: Bench, name: str, said: list[str]) -> None:
    (bench.folder / "samples").mkdir()
    told = fault(bench.run("report", name, "--out", "out"))
    assert re.search(".*".join(said), told, re.DOTALL), told


def test_an_unknown_material_of_the_body(bench: Bench) -> None:
    told = fault(bench.run("report", "body.stl", "--material", "balza", *QUICK[2:], "--out", "out"))
    assert re.search("- --material: no material.*found: balza.*allowed: .*balsa", told, re.DOTALL), told


def test_what_the_mesh_cannot_say_must_be_stated(bench: Bench) -> None:
    told = fault(bench.run("report", "body.stl", "--density", "1 g/cm3", "--nose", "-x", "--out", "out"))
    assert re.search("- body.stl: .*does not say.*found: no --unit, --back.*next: add them", told, re.DOTALL)


def test_options_of_the_quick_form_beside_a_bait_file(bench: Bench) -> None:
    told = fault(bench.report(BAIT, "--density", "1 g/cm3"))
    assert re.search(
        "- minnow.toml: .*quick form.*found: --density.*next: write them into the bait file", told, re.DOTALL
    )


NO_BAIT_FILE = {
    "missing": (None, ["minnow.toml: the bait file is not there", "next: "]),
    "empty": ("", ["minnow.toml: the bait file is empty", "found: 0 bytes", "next: "]),
    "prose": (
        "A minnow of alder wood.\n",
        ["minnow.toml, line 1: the bait file is no TOML", "found: A minnow", "next: "],
    ),
    "a mesh": (box((0, 0, 0), (9, 9, 9)), ["minnow.toml", "no UTF-8 text|no TOML", "next: "]),
    "a folder": ("folder", ["minnow.toml: the bait file is a folder", "allowed: a file", "next: "]),
}


@pytest.mark.parametrize("case", NO_BAIT_FILE)
def test_no_bait_file(bench: Bench, case: str) -> None:
    content, said = NO_BAIT_FILE[case]
    if content == "folder":
        (bench.folder / "minnow.toml").mkdir()
    elif content is not None:
        bench.put("minnow.toml", content)
    told = fault(bench.run("report", "minnow.toml", "--out", "out"))
    assert re.search(".*".join(said), told, re.DOTALL), told


def test_all_faults_of_a_file_at_once(bench: Bench) -> None:
    text = BAIT.replace("1.2 g/cm3", "1.2").replace('"mm"', '"furlong"') + HOOK.replace("true", '"yes"')
    ran = bench.report(text)
    assert ran.code == 2
    assert ran.err.startswith("meshlure cannot go on, for 3 reasons:\n")
    places = re.findall(r"^- minnow.toml: ([^:]*):", ran.err, re.MULTILINE)
    assert places == ["bait.length_unit", "body.density", "hardware[1] 'front treble'.hangs"]


def test_all_broken_meshes_at_once(bench: Bench) -> None:
    bench.put("weight.stl", (BAD_MESHES / "open_box.stl").read_bytes())
    ran = bench.report(BAD_MESHES / "mixed_winding.stl", "--insert", "weight.stl=lead")
    assert ran.code == 2
    assert re.findall(r"^- .*?(\w+\.stl): (\d+)", ran.err, re.MULTILINE) == [
        ("mixed_winding.stl", "7"),
        ("weight.stl", "4"),
    ]


def test_a_file_in_the_commands_place(bench: Bench) -> None:
    told = fault(bench.run("body.stl", "--out", "out"))
    assert re.search("found: body.stl.*next: write meshlure report body.stl", told, re.DOTALL)


def test_a_name_cannot_steer_the_terminal(bench: Bench) -> None:
    told = fault(bench.report(Path("\x1b[31mred\n- body.stl: fine.stl")))
    assert "\x1b" not in told
    assert "\\x1b[31mred" in told


def test_meshes_that_lie_elsewhere_are_read_and_nothing_is_written_there(bench: Bench) -> None:
    """A maker's hooks and weights are drawn once, for all baits; links and ways out of the folder are only followed."""
    bench.put("parts/weight.stl", (bench.folder / "weight.stl").read_bytes())
    (bench.folder / "linked.stl").symlink_to(bench.folder / "parts" / "weight.stl")
    text = BAIT.replace("body.stl", str(bench.folder / "body.stl"))
    pieces = (("../parts/weight.stl", "../../weight"), ("../linked.stl", "/linked"))
    for mesh, name in pieces:
        bench.put("baits/bait.toml", text + INSERT.replace("weight.stl", mesh).replace("belly weight", name))
        before = bench.contents()
        ran = bench.run("report", "baits/bait.toml", "--no-page", "--cut", "--out", bench.out)
        assert (ran.code, ran.err) == (0, "")
        after = bench.contents()
        # Whatever a piece is called, its file lies in the folder that was named.
        stem = name.strip("./")
        assert {path for path in after if path.startswith("out/")} == {
            "out/results.json", "out/body.stl", f"out/{stem}.stl",
        }  # fmt: skip
        outside = {path: content for path, content in after.items() if not path.startswith("out/")}
        assert outside == {path: content for path, content in before.items() if not path.startswith("out/")}


def test_ways_to_what_is_no_mesh(bench: Bench) -> None:
    (bench.folder / "endless.stl").symlink_to("/dev/zero")
    (bench.folder / "round.stl").symlink_to("round.stl")
    os.mkfifo(bench.folder / "pipe.stl")
    for mesh, told in {
        "endless.stl": "a device or a pipe",
        "round.stl": "cannot be read|is not there",
        "pipe.stl": "a device or a pipe",
        "/etc/passwd": "a mesh in this format is not read",
        "/proc/self/environ": "a mesh in this format is not read",
        "../..": "the mesh is a folder",
    }.items():
        assert re.search(told, fault(bench.report(BAIT.replace("body.stl", mesh)))), mesh
        assert not bench.out.exists()


READERS = {
    "report": ("minnow.toml", "--json"),
    "report quick": ("body.stl", *QUICK, "--json"),
    "balance": ("minnow.toml", "--json"),
    "chamber": ("minnow.toml", "--json"),
    "mould": ("minnow.toml", "--json"),
    "pour": ("minnow.toml", "--json"),
    "sheet": ("minnow.toml", "--out", "out"),
    "compare": ("minnow.toml", "minnow.toml", "--json"),
    "inspect": ("body.stl", "--unit", "mm", "--mend", "--out", "mended.stl"),
    "new": ("body.stl", "--unit", "mm", "--density", "1.2 g/cm3", "--yes", "--out", "new.toml"),
}


@pytest.mark.parametrize("command", READERS)
def test_the_limit_on_meshes_in_every_command_that_reads_one(bench: Bench, command: str) -> None:
    """A binary STL of 12 faces is 84 + 12 x 50 = 684 bytes long."""
    bench.put("minnow.toml", BAIT)
    words = (command.split()[0], *READERS[command])
    ran = bench.run(*words, "--largest", "683 B")
    said = ran.out if command == "inspect" and ran.out else ran.err
    assert ran.code == 2
    assert re.search("larger than is read.*684 bytes.*up to 683 bytes.*raise the limit: --largest", said, re.DOTALL)
    assert not bench.out.exists()
    told = fault(bench.run(*words, "--largest", "much"))
    assert re.search("--largest: this is no size of a file.*found: much.*2 GB", told, re.DOTALL)
