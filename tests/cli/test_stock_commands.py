"""Looking things up in stock, held against closed forms and handbook values."""

from __future__ import annotations

import json
import math
import re
from typing import Any

import pytest
from command_bench import Bench, fault

from meshlure.stock.materials import materials


def tree(bench: Bench, *words: str) -> Any:
    ran = bench.run(*words, "--json")
    assert (ran.code, ran.err) == (0, "")
    return json.loads(ran.out)


def names(bench: Bench, *words: str) -> list[str]:
    return [row["name"] for row in tree(bench, "materials", *words)["materials"]]


def test_all_materials_are_listed_once_with_their_basis(bench: Bench) -> None:
    ran = bench.run("materials")
    assert (ran.code, ran.err) == (0, "")
    lines = ran.out.splitlines()
    assert re.split(r"  +", lines[0]) == ["material", "g/cm3", "from", "to", "by"]
    rows = [re.split(r"  +", line) for line in lines[1 : 1 + len(materials())]]
    assert [row[0] for row in rows] == [row.name for row in materials()]
    assert {row[-1] for row in rows} == {"source", "assumed"}
    # A pipe gets every row on one line, however long; nothing is broken or coloured.
    assert "\x1b" not in ran.out


def test_lead_is_told_with_source_and_cautions(bench: Bench) -> None:
    ran = bench.run("materials", "soft", "lead")
    # Handbooks have 11.34 to 11.35 g/cm3 for lead at room temperature.
    assert re.search(r"^lead pure +11\.3[45] ", ran.out, re.MULTILINE)
    assert re.search(r"^  source   .*Particle Data Group", ran.out, re.MULTILINE)
    assert "  caution  Lead is poisonous" in ran.out
    assert "  also     lead, soft lead, pure lead" in ran.out


@pytest.mark.parametrize(
    ("words", "found"),
    [
        (("white", "cedar"), ["northern white cedar", "atlantic white cedar"]),
        (("White-Ced",), ["northern white cedar", "atlantic white cedar"]),
        (("heavy", "95%"), ["tungsten heavy alloy 95% W"]),
        (("linden",), ["european lime"]),
        (("pewter",), ["tin-based lead-free pewter"]),
    ],
)
def test_words_find_names_aliases_and_families(bench: Bench, words: tuple[str, ...], found: list[str]) -> None:
    assert names(bench, *words) == found


def test_a_density_finds_what_may_have_it(bench: Bench) -> None:
    rows = tree(bench, "materials", "--density", "0.55 g/cm3")["materials"]
    assert rows
    assert all(row["low_g_cm3"] <= 0.55 <= row["high_g_cm3"] for row in rows)
    away = [abs(row["density_g_cm3"] - 0.55) for row in rows]
    assert away == sorted(away)
    told = fault(bench.run("materials", "--density", "5 g/cm3"))
    # Titanium, 4.5 g/cm3 in every handbook, is the nearest below.
    assert "near are titanium" in told


@pytest.mark.parametrize(
    ("words", "said"),
    [
        (["materials", "basalt"], "found: basalt\n  allowed: near it are: .*balsa"),
        (["materials", "--density", "0.55"], "the number has no unit"),
        (["hardware", "trebble"], "found: trebble\n  allowed: near it are: treble"),
        (["hardware", "wire 9 x 20"], "no wire of this size"),
        (["balls", "spoon"], "no material of this name"),
        (["rods", "leed"], "found: leed"),
        (["waters", "--temperature", "60 degC", "--salinity", "50 g/kg"], "0 to 40 degC"),
        (["waters", "--temperature", "warm"], "--temperature"),
    ],
    ids=lambda it: " ".join(it) if isinstance(it, list) else "",
)
def test_what_is_not_in_stock(bench: Bench, words: list[str], said: str) -> None:
    ran = bench.run(*words)
    assert ran.code == 2
    assert re.search(said, ran.err, re.DOTALL), ran.err
    assert "  next: " in ran.err


def test_waters(bench: Bench) -> None:
    rows = tree(bench, "waters")["waters"]
    assert len(rows) == 12
    # Fresh water at 20 degC: 998.207 kg/m3 and 1.0034 mm2/s, ITTC 7.5-02-01-03 (2011).
    fresh = next(row for row in rows if row["temperature_c"] == 20 and row["salinity_g_kg"] == 0)
    assert fresh["density_kg_m3"] == pytest.approx(998.207, abs=0.01)
    assert fresh["viscosity_m2_s"] == pytest.approx(1.0034e-6, rel=1e-3)
    # Sea water of practical salinity 35 at 25 degC: 1023.343 kg/m3, check value of EOS-80 (UNESCO 1983), from memory.
    (sea,) = tree(bench, "waters", "--temperature", "25 degC", "--salinity", "35.165 g/kg")["waters"]
    assert sea["density_kg_m3"] == pytest.approx(1023.343, abs=0.02)
    # A hundredth of a litre displaces that much more than fresh water of 998.599 kg/m3 at 18 degC (ITTC, the same).
    assert sea["lift_g_per_10_cm3"] == pytest.approx(0.2474, abs=3e-4)


def test_balls(bench: Bench) -> None:
    rows = tree(bench, "balls", "bearing", "steel")["balls"]
    ten = next(row for row in rows if row["size"] == "10 mm")
    # pi/6 d^3 at 7.81 g/cm3.
    assert ten["mass_g"] == pytest.approx(math.pi / 6 * 7.81, rel=1e-12)
    quarter = next(row for row in rows if row["size"] == "1/4 in")
    assert quarter["diameter_mm"] == pytest.approx(6.35)
    ran = bench.run("balls", "bearing", "steel")
    assert ran.out.startswith("bearing steel 52100\n")
    assert re.search(r"^1/4 in +6\.350 +1\.05 +1\.04 +1\.06$", ran.out, re.MULTILINE)
    many = bench.run("balls", "tungsten").out
    assert "tungsten heavy alloy 95% W  " in many
    assert bench.run("balls", "balsa").code == 1


def test_rods(bench: Bench) -> None:
    rows = tree(bench, "rods", "lead")["rods"]
    five = next(row for row in rows if row["diameter_mm"] == 5)
    # pi/4 x 5 mm x 5 mm x 10 mm at 11.34 g/cm3.
    assert five["mass_g_per_10_mm"] == pytest.approx(math.pi / 4 * 0.25 * 11.34, rel=1e-12)
    assert "Lead is poisonous" in bench.run("rods", "lead").out
    assert bench.run("rods", "balsa").code == 1


def test_hardware(bench: Bench) -> None:
    (wire,) = tree(bench, "hardware", "wire 0.8 x 90")["hardware"]
    # pi/4 x 0.8 mm x 0.8 mm x 90 mm of stainless steel at 7.93 g/cm3.
    assert wire["mass_g"] == pytest.approx(math.pi / 4 * 0.64 * 0.09 * 7.93, rel=1e-12)
    ran = bench.run("hardware", "treble")
    assert "All assumed" in ran.out
    assert "points covered" in ran.out
    (one,) = tree(bench, "hardware", "treble", "1/0")["hardware"]
    assert one["name"] == "treble 1/0"
