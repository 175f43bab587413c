"""`meshlure chamber`: what it writes, what it answers where nothing fits, and what it refuses."""

from __future__ import annotations

import json
import re

import pytest
from command_bench import BAD_MESHES, BAIT, Bench, box, fault

CHAMBER = '[chamber]\nballs = [{ diameter = "4 mm", count = 1, material = "bearing steel" }]\nslope = "4 deg"\n'


def asked(bench: Bench, text: str, *words: str) -> list[str]:
    bench.put("bait.toml", BAIT + text)
    return ["chamber", "bait.toml", "--no-page", "--out", str(bench.out), *words]


def test_it_writes_the_chambered_bait(bench: Bench) -> None:
    ran = bench.run(*asked(bench, CHAMBER))
    assert (ran.code, ran.err) == (0, "")
    results = json.loads((bench.out / "results.json").read_text())
    written = {path.name for path in bench.out.iterdir()}
    assert written == {*results["files"], "results.json"}
    assert {"body.stl", "bore.stl", "balls-nose.stl", "balls-tail.stl", "chambered.toml", "chambered.3mf"} <= written
    account = results["chamber"]
    taken = account["options"][account["taken"] - 1]
    # A box of 40 x 10 x 16 mm: end to end less both walls along the bore.
    assert taken["length_mm"] == pytest.approx(40 / 0.99756 - 4 - 2 * 2.25 * 0.06993, abs=0.05)
    assert re.search(r"^1> +1 x 4 mm bearing steel", ran.out, re.MULTILINE)
    assert "fits     yes" in ran.out
    # The new bait file is a bait file like any other, and its report agrees.
    again = bench.run("report", bench.out / "chambered.toml", "--json")
    assert json.loads(again.out)["buoyancy"]["reserve_g"] == pytest.approx(results["buoyancy"]["reserve_g"], abs=1e-9)


def test_where_nothing_fits_it_says_what_nearly_does(bench: Bench) -> None:
    text = CHAMBER.replace("4 mm", "6 mm") + 'wall = "2 mm"\n'
    ran = bench.run(*asked(bench, text))
    assert (ran.code, ran.err) == (1, "")
    assert {path.name for path in bench.out.iterdir()} == {"results.json"}
    account = json.loads((bench.out / "results.json").read_text())["chamber"]
    assert (account["reachable"], account["taken"], account["options"]) == (False, None, [])
    walls, smaller = account["in_the_way"]
    # 10 mm less a bore of 6.5 leave 1.75 on either side.
    assert re.fullmatch(r"the longest bore for one 6 mm ball, .* mm, has walls of 1\.[67] mm at the side .*", walls)
    assert re.fullmatch(r"a ball of 5 mm fits with \d+\.\d mm of travel", smaller)
    assert walls in ran.out


def test_pieces_in_the_way_are_named(bench: Bench) -> None:
    bench.put("plate.stl", box((20, 0.5, 0.5), (1, 9, 15)))
    plate = '[[insert]]\nname = "plate"\nmesh = "plate.stl"\nmaterial = "brass"\n'
    ran = bench.run(*asked(bench, CHAMBER.replace("count = 1", "count = 6") + plate))
    assert ran.code == 1
    assert "without 'plate' in the way 6 balls of 4 mm would run" in ran.out
    assert re.search(r"the longest bore for balls of 4 mm is .* mm long: \d balls of 4 mm run", ran.out)


def test_without_a_section_it_says_what_to_write(bench: Bench) -> None:
    said = fault(bench.run(*asked(bench, "")))
    assert "no [chamber] section" in said
    assert 'balls = [{ diameter = "6 mm", count = 1, material = "bearing steel" }]' in said
    assert not bench.out.exists()


@pytest.mark.parametrize(
    ("text", "says"),
    [
        (CHAMBER.replace("bearing steel", "bearing steal"), "bearing steal"),
        (CHAMBER.replace("4 mm", "12 mm"), "the ball is larger than the body"),
        (CHAMBER.replace("count = 1", "count = 11"), "the row of balls is longer than the body"),
        (CHAMBER + 'open_to = "belly"\ntube = { material = "brass", wall = "0.2 mm" }\n', "go through the tube"),
        (CHAMBER + 'tube = { material = "unobtainium", wall = "0.2 mm" }\n', "unobtainium"),
    ],
)
def test_what_cannot_be_meant_is_refused(bench: Bench, text: str, says: str) -> None:
    said = fault(bench.run(*asked(bench, text)))
    assert says in said
    assert "bait.toml: chamber." in said
    assert not bench.out.exists()


def test_all_materials_are_looked_up_at_once(bench: Bench) -> None:
    text = CHAMBER.replace("bearing steel", "steal") + 'tube = { material = "bras", wall = "0.2 mm" }\n'
    ran = bench.run(*asked(bench, text))
    assert ran.code == 2
    assert "for 2 reasons" in ran.err


def test_an_open_body_is_refused(bench: Bench) -> None:
    bench.put("body.stl", (BAD_MESHES / "open_box.stl").read_bytes())
    ran = bench.run(*asked(bench, CHAMBER))
    assert ran.code == 2
    assert "open" in ran.err
    assert not bench.out.exists()


def test_only_ways_that_were_found_can_be_taken(bench: Bench) -> None:
    said = fault(bench.run(*asked(bench, CHAMBER, "--take", "40")))
    assert "there is no such way to take" in said
    assert re.search(r"allowed: 1 to \d", said)
    assert not bench.out.exists()


def test_the_account_alone_can_be_printed(bench: Bench) -> None:
    asked(bench, CHAMBER)
    ran = bench.run("chamber", "bait.toml", "--json")
    assert (ran.code, ran.err) == (0, "")
    assert json.loads(ran.out)["chamber"]["reachable"] is True
    said = fault(bench.run("chamber", "bait.toml"))
    assert "nowhere to write" in said


def test_a_hollow_is_written(bench: Bench) -> None:
    ran = bench.run(*asked(bench, "", "--hollow", "wall 1.5 mm"))
    assert (ran.code, ran.err) == (0, "")
    results = json.loads((bench.out / "results.json").read_text())
    assert results["hollow"]["inside_mm3"] == pytest.approx(37 * 7 * 13, rel=1e-5)
    assert {"body.stl", "hollow.toml", "hollow.3mf"} <= {path.name for path in bench.out.iterdir()}
    assert "g sealed" in ran.out
    said = fault(bench.run(*asked(bench, "", "--hollow", "thin")))
    assert "the hollow cannot be read" in said
    assert fault(bench.run(*asked(bench, "", "--hollow", "wall 2 mm", "--take", "2")))
