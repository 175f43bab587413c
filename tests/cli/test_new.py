"""`meshlure new`: what it writes, what it asks on a terminal, what it refuses elsewhere."""

from __future__ import annotations

import re
import tomllib
from typing import Any

import pytest
from command_bench import SCRIPT, Bench, Ran, box, fault

from meshlure.files.baitfile import bait_of, read_baitfile
from meshlure.files.single import put_file

KNOWN = ("--unit", "mm", "--density", "1.2 g/cm3")


def new(bench: Bench, *words: str) -> Ran:
    """Begin a bait from the bench's body, 40 x 10 x 16 mm, with its weight moved down."""
    bench.put("keel.stl", box((10, 3, 2), (5, 4, 4)))
    return bench.run("new", "body.stl", *words)


def written(bench: Bench, name: str = "body.toml") -> dict[str, Any]:
    return tomllib.loads((bench.folder / name).read_text(encoding="utf-8"))


def test_a_bait_file_that_can_be_reported_on(bench: Bench) -> None:
    ran = new(
        bench, *KNOWN, "--insert", "keel.stl=lead", "--hardware", "treble-6=20,5,-2", "--hardware", "treble 6=40,5,8",
        "--hardware", "screw eye 1.0 x 15=5,5,8", "--name", 'Marl "flat" 40', "--water", "sea",
        "--temperature", "12 degC", "--nose", "-x", "--yes",
    )  # fmt: skip
    assert (ran.code, ran.err) == (0, "")
    assert ran.out.startswith("body.toml is written\n  nose     -x, stated: as stated\n  back     +z, likely: ")
    tree = written(bench)
    assert tree["bait"] == {"name": 'Marl "flat" 40', "length_unit": "mm", "nose": "-x", "back": "+z"}
    assert tree["water"] == {"temperature": "12 degC", "salinity": "35 g/kg"}
    assert tree["body"] == {"mesh": "body.stl", "density": "1.2 g/cm3"}
    assert tree["insert"] == [{"name": "keel", "mesh": "keel.stl", "material": "lead"}]
    assert [(row["name"], row["at"], row["hangs"]) for row in tree["hardware"]] == [
        ("treble 6", [20, 5, -2], True),
        ("treble 6, number 2", [40, 5, 8], True),
        ("screw eye 1.0 x 15", [5, 5, 8], False),
    ]
    ran = bench.run("report", "body.toml", "--json")
    assert (ran.code, ran.err) == (0, "")


def test_what_is_not_known_stands_there_as_comments_that_hold_when_they_are_filled_in(bench: Bench) -> None:
    assert new(bench, *KNOWN, "--yes").code == 0
    text = (bench.folder / "body.toml").read_text(encoding="utf-8")
    # Every commented line that has a key or a section is taken in; those of words are left.
    filled = re.sub(r"^# (?=\[|\w+ = )", "", text, flags=re.MULTILINE)
    plan = bait_of(tomllib.loads(filled), bench.folder, "body", bench.folder / "body.toml")
    assert [insert.name for insert in plan.inserts] == ["belly weight"]
    assert [row.name for row in plan.hardware] == ["front treble"]
    assert plan.coat is not None
    assert plan.line is not None
    assert plan.cast.speed == 25.0


def test_meshes_are_named_from_where_the_bait_file_stands(bench: Bench) -> None:
    bench.put("baits/keep", "")
    ran = new(
        bench,
        *KNOWN,
        "--insert",
        "keel.stl=11 g/cm3",
        "--insert",
        "weight.stl=sealed",
        "--yes",
        "--out",
        "baits/a.toml",
    )
    assert ran.code == 0
    plan = read_baitfile(bench.folder / "baits" / "a.toml")
    assert plan.body.mesh.resolve() == (bench.folder / "body.stl").resolve()
    rows = written(bench, "baits/a.toml")["insert"]
    assert [row["mesh"] for row in rows] == ["../keel.stl", "../weight.stl"]
    assert (rows[0]["density"], rows[1]["void"]) == ("11 g/cm3", "sealed")


def test_a_lip_is_told_by_its_name_and_stands_at_the_nose(bench: Bench) -> None:
    bench.put("diving_lip.stl", box((36, 3, -4), (8, 4, 6)))
    ran = new(bench, *KNOWN, "--insert", "diving_lip.stl=polycarbonate", "--yes")
    assert "nose     +x, sure: longest along x; 'diving_lip' stands at that end" in ran.out
    assert written(bench)["insert"][0]["lip"] is True


def test_nothing_is_written_over(bench: Bench) -> None:
    bench.put("body.toml", "mine")
    told = fault(new(bench, *KNOWN, "--yes"))
    assert "body.toml: there is a file of this name already" in told
    assert (bench.folder / "body.toml").read_text() == "mine"
    # Nor is one that came to be there while the shape was looked at.
    with pytest.raises(FileExistsError):
        put_file(bench.folder / "body.toml", b"ours")
    assert (bench.folder / "body.toml").read_text() == "mine"


def test_without_a_terminal_what_is_missing_is_an_error_that_names_the_option(bench: Bench) -> None:
    before = bench.contents()
    ran = bench.run("new", "body.stl")
    assert (ran.code, ran.out) == (2, "")
    assert re.findall(r"^- (--\w+): ", ran.err, re.MULTILINE) == ["--unit", "--density"]
    assert "body.stl is 40 long" in ran.err
    assert "add --unit mm" in ran.err
    ran = bench.run("new", "body.stl", *KNOWN)
    assert re.findall(r"^- (--\w+): ", ran.err, re.MULTILINE) == ["--nose", "--back"]
    assert re.search(r"found: [+-]x is an open guess: longest along x; both ends are much alike", ran.err)
    assert bench.contents() == before


@pytest.mark.parametrize(
    ("words", "said"),
    [
        (("--density", "0.7 g/cm3", "--material", "balsa", "--unit", "mm"), "one of them"),
        (("--unit", "furlong", "--density", "1 g/cm3"), "furlong"),
        ((*KNOWN, "--nose", "+x", "--back", "+x"), "right angle"),
        ((*KNOWN, "--water", "salty"), "--water: .*salinity"),
        ((*KNOWN, "--hardware", "spoon=1,2,3"), "--hardware spoon=1,2,3: no hardware of this name"),
        ((*KNOWN, "--hardware", "treble-6=1,2"), "write treble-6=31,0,-9.5"),
        ((*KNOWN, "--hardware", "treble-6=1,2,4000"), "treble 6"),
        ((*KNOWN, "--insert", "absent.stl=lead"), "absent.stl"),
        ((*KNOWN, "--out", "body.stl"), "ends in .toml"),
        ((*KNOWN, "--out", "absent/a.toml"), "cannot be written"),
    ],
    ids=lambda it: " ".join(it[-2:]) if isinstance(it, tuple) else "",
)
def test_what_cannot_be_used_is_told_and_nothing_written(bench: Bench, words: tuple[str, ...], said: str) -> None:
    before = bench.contents()
    ran = bench.run("new", "body.stl", *words, "--yes")
    assert (ran.code, ran.out) == (2, "")
    assert re.search(said, ran.err, re.DOTALL), ran.err
    assert "Traceback" not in ran.err
    assert bench.contents() == before


def test_a_unit_is_taken_only_where_one_alone_makes_a_bait_of_it(bench: Bench) -> None:
    assert new(bench, "--density", "1 g/cm3", "--yes").code == 0
    assert written(bench)["bait"]["length_unit"] == "mm"
    # 4 long: a bait of 40 mm in cm and of 102 mm in inches.
    bench.put("small.stl", box((0, 0, 0), (4, 1, 1.6)))
    told = fault(bench.run("new", "small.stl", "--density", "1 g/cm3", "--yes"))
    assert "small.stl is 4 long" in told


def test_on_a_terminal_it_asks_until_it_can_go_on(bench: Bench) -> None:
    pytest.importorskip("pty", reason="needs POSIX pseudo-terminals")
    from terminal_bench import shown

    bench.put("keel.stl", box((10, 3, 2), (5, 4, 4)))
    answers = ["", "basalt", "1.2", "1.2 g/cm3", "keel.stl", "keel.stl=lead", "", "Marl flat", "", "up", "-x", "+x", ""]
    code, sent = shown([SCRIPT, "new", "body.stl", "--out", bench.folder / "a.toml"], 100, answers=answers)
    assert code == 0, sent
    for said in ("near it are:", "the number has no unit", "it is a file and what it is", "no such direction"):
        assert said in sent
    assert "it must be at a right angle to -x" in sent
    tree = written(bench, "a.toml")
    assert tree["bait"] == {"name": "Marl flat", "length_unit": "mm", "nose": "-x", "back": "+z"}
    assert tree["insert"][0]["material"] == "lead"
    # Ctrl-D ends it, and nothing is written.
    code, sent = shown([SCRIPT, "new", bench.folder / "body.stl"], 100, answers=["\x04"])
    assert code == 130, sent
    assert not (bench.folder / "body.toml").exists()
