"""`meshlure pour` from the command line: options over the bait file, what is written, and exit codes."""

from __future__ import annotations

import json
import re

import pytest
from command_bench import BAIT, Bench

POUR = BAIT.replace("1.2 g/cm3", "1.0 g/cm3") + '[pour]\nresin = "1.05 g/cm3"\nballoons = "0.15 g/cm3"\nbaits = 2\n'
"""A box of 6.4 cm3 and 6.4 g that neither sinks nor floats in the water stated below."""

WATER = '[water]\ndensity = "990 kg/m3"\n'


def test_a_pour_is_written_and_told(bench: Bench) -> None:
    bench.put("bait.toml", POUR + WATER)
    ran = bench.run("pour", "bait.toml", "--out", bench.out)
    assert ran.code == 0, ran.err
    assert sorted(path.name for path in bench.out.iterdir()) == ["bench.html", "results.json"]
    results = json.loads((bench.out / "results.json").read_text(encoding="utf-8"))
    assert results["files"] == ["bench.html"]
    # Two boxes of 6.4 cm3 and a tenth more are 14.08 cm3; 1/18 of it balloons: 0.7822 cm3, 0.1173 g.
    cups = results["pour"]["batch"]
    assert cups["balloons_g"] == pytest.approx(14.08 / 18 * 0.15, rel=1e-6)
    assert cups["part_a_g"] == pytest.approx(14.08 * 17 / 18 * 1.05 / 2, rel=1e-6)
    assert f"part A {cups['part_a_g']:.2f} g" in ran.out
    assert "bench.html" in ran.out
    assert "isocyanates" in ran.out
    assert results["run"] in (bench.out / "bench.html").read_text(encoding="utf-8")


def test_options_stand_in_the_place_of_the_files(bench: Bench) -> None:
    bench.put("bait.toml", POUR + WATER)
    words = ("--baits", "5", "--waste", "25 %", "--balloons", "0.25 g/cm3", "--mass", "6.1 g", "--json")
    ran = bench.run("pour", "bait.toml", *words)
    assert ran.code == 0, ran.err
    pour = json.loads(ran.out)["pour"]
    assert (pour["batch"]["baits"], pour["batch"]["waste_share"]) == (5, 0.25)
    # 6.1 g over 6.4 cm3 from 1.05, as the file says, and 0.25 g/cm3.
    assert pour["mix"]["share"] == pytest.approx((1.05 - 6.1 / 6.4) / 0.8)
    assert pour["wanted"]["by"] == "mass"
    assert not bench.out.exists()


def test_out_of_reach_ends_with_one_and_the_nearest(bench: Bench) -> None:
    bench.put("bait.toml", POUR + WATER)
    ran = bench.run("pour", "bait.toml", "--mass", "7.5 g")
    assert ran.code == 1
    assert "unfilled resin" in ran.out
    assert "1.050 g/cm3" in ran.out


def test_a_print_tells_walls_and_infills(bench: Bench) -> None:
    how = 'printed = { density = "1.2 g/cm3", wall = "1.2 mm", infill = 0.95 }'
    bench.put("bait.toml", re.sub(r"density = .*", how, BAIT))
    ran = bench.run("pour", "bait.toml", "--mass", "7 g", "--out", bench.out)
    assert ran.code == 0, ran.err
    assert "flooded" in ran.out
    # The core of the box of 40 x 10 x 16 mm under 0.9 mm: 38.2 x 8.2 x 14.2 mm.
    core = 38.2 * 8.2 * 14.2e-3
    share = (7 / 1.2 - 6.4 + core) / core
    assert f"{share:.1%}" in ran.out


@pytest.mark.parametrize(
    ("words", "told"),
    [
        (("--baits", "0"), "--baits"),
        (("--waste", "ten"), "--waste"),
        (("--waste", "0.1"), "the number has no unit"),
        (("--mass", "-1 g"), "--mass"),
        (("--resin", "granite"), "no material of this name"),
        (("--balloons", "glass microballoons tapped bulk"), "with the air between them"),
    ],
)
def test_options_that_cannot_be(bench: Bench, words: tuple[str, ...], told: str) -> None:
    bench.put("bait.toml", POUR + WATER)
    ran = bench.run("pour", "bait.toml", *words, "--out", bench.out)
    assert ran.code == 2
    assert told in ran.err
    assert "Traceback" not in ran.err
    assert not bench.out.exists()


def test_every_fault_of_the_options_at_once(bench: Bench) -> None:
    bench.put("bait.toml", POUR + WATER)
    ran = bench.run("pour", "bait.toml", "--baits", "0", "--mass", "0 g", "--waste", "-5 %")
    assert ran.code == 2
    assert [option for option in ("--baits", "--mass", "--waste") if option in ran.err] == [
        "--baits",
        "--mass",
        "--waste",
    ]


def test_a_folder_of_strangers_is_left_alone(bench: Bench) -> None:
    bench.put("bait.toml", POUR + WATER)
    bench.put("out/mine.txt", "mine")
    ran = bench.run("pour", "bait.toml", "--out", bench.out)
    assert ran.code == 2
    assert "mine.txt" in ran.err
    assert [path.name for path in bench.out.iterdir()] == ["mine.txt"]
