"""`meshlure report`: what it writes, what it prints where, and what its exit code says."""

from __future__ import annotations

import json
import re
from typing import Any

import numpy as np
import pytest
from command_bench import BAIT, QUICK, Bench, box
from jsonschema import Draft202012Validator

from meshlure.results import schema
from meshlure.version import VERSION

VOID = '[[insert]]\nname = "chamber"\nmesh = "chamber.stl"\nvoid = "sealed"\n'
WEIGHT = '[[insert]]\nname = "belly weight"\nmesh = "weight.stl"\nmaterial = "lead"\nfit = "0.2 mm"\n'


def written(bench: Bench) -> dict[str, Any]:
    tree: dict[str, Any] = json.loads((bench.out / "results.json").read_text(encoding="utf-8"))
    assert [error.message for error in Draft202012Validator(schema()).iter_errors(tree)] == []
    return tree


def volume(stl: bytes) -> float:
    """Volume of a binary STL in its unit, cubed: records of 50 bytes behind 84, by the sum of tetrahedra."""
    records = np.frombuffer(stl, dtype=[("normal", "<3f4"), ("corners", "<9f4"), ("rest", "<u2")], offset=84)
    a, b, c = records["corners"].astype(float).reshape(-1, 3, 3).transpose(1, 0, 2)
    return float((a * np.cross(b, c)).sum()) / 6


def test_the_quick_form(bench: Bench) -> None:
    ran = bench.run(
        "report", "body.stl", "--density", "0.72 g/cm3", "--insert", "weight.stl=lead", "--unit", "mm",
        "--nose", "-x", "--back", "+z", "--name", "Alder", "--temperature", "12 degC", "--salinity", "35 g/kg",
        "--out", "out",
    )  # fmt: skip
    assert (ran.code, ran.err) == (0, "")
    tree = written(bench)
    assert sorted(path.name for path in bench.out.iterdir()) == ["report.html", "results.json"]
    assert tree["files"] == ["report.html"]
    # By hand: the box has 6400 mm3, 80 of them lead at 11.34 g/cm3.
    assert tree["weight"]["mass_g"] == pytest.approx(6320 * 0.72e-3 + 80 * 11.34e-3, rel=1e-6)
    assert (tree["name"], tree["buoyancy"]["water"]["temperature_c"]) == ("Alder", 12.0)
    assert tree["buoyancy"]["water"]["salinity_g_kg"] == 35.0
    assert (tree["frame"]["nose"], tree["frame"]["back"]) == ([-1.0, 0.0, 0.0], [0.0, 0.0, 1.0])
    assert tree["run"] in (bench.out / "report.html").read_text(encoding="utf-8")


def test_the_same_bait_either_way(bench: Bench) -> None:
    assert bench.report(BAIT + WEIGHT.replace('fit = "0.2 mm"\n', "")).code == 0
    stated = written(bench)
    assert bench.report("body.stl", "--insert", "weight.stl=lead").code == 0
    quick = written(bench)
    for key in ("weight", "areas", "stations", "drag"):
        assert quick[key] == stated[key], key


def test_stdout_says_what_a_maker_asks_first(bench: Bench) -> None:
    ran = bench.report(BAIT)
    assert (ran.code, ran.err) == (0, "")
    # 6400 mm3 of 1.2 g/cm3 are 7.68 g, and 0.2709 oz of 28.349523 g.
    assert ran.out.startswith(
        "Alder pool minnow\n  make it  Make one and weigh it before the rest: its centres meet, so it has no preferred"
        " attitude.\n"
    )
    assert "\n  mass     7.68 g (0.271 oz), centre of gravity 20.0 mm from the nose\n" in ran.out
    assert re.search(r"^  verdict  Sinks: reserve \u22121\.\d\d g, between", ran.out, re.MULTILINE)
    assert re.search(r"^  posture  Hangs ", ran.out, re.MULTILINE)
    assert "  found    0 faults, 0 warnings, 0 notes\n" in ran.out
    assert ran.out.endswith(f"  written  results.json in {bench.out}\n")


def test_postures_that_differ_by_the_balls_say_so(bench: Bench) -> None:
    # A bore of 20 mm along the box; a ball at one of its ends moves the centre of gravity towards it.
    bench.put("chamber.stl", box((10, 3, 6), (20, 4, 4)))
    balls = '[[balls]]\nchamber = "chamber"\ndiameter = "3.5 mm"\ncount = 1\nmaterial = "bearing steel"\n'
    ran = bench.report(BAIT + VOID + balls)
    assert (ran.code, ran.err) == (0, "")
    said = re.findall(r"^  posture  .*\. Balls: those of 'chamber' at the (nose|tail)\.$", ran.out, re.MULTILINE)
    assert sorted(said) == sorted(posture["balls"]["chamber"] for posture in written(bench)["postures"])
    assert len(said) >= 1


def test_no_page(bench: Bench) -> None:
    assert bench.report("body.stl").code == 0
    assert [path.name for path in bench.out.iterdir()] == ["results.json"]
    tree = written(bench)
    assert (tree["files"], tree["timings_s"]["page"]) == ([], 0.0)


def test_json_prints_one_object_and_nothing_else(bench: Bench) -> None:
    before = bench.contents()
    ran = bench.run("report", "body.stl", *QUICK, "--json")
    assert (ran.code, ran.err) == (0, "")
    tree = json.loads(ran.out)  # more than one object would be refused
    assert ran.out.startswith("{")
    assert ran.out.endswith("}\n")
    assert tree["files"] == []
    assert bench.contents() == before


def test_json_beside_a_folder_is_the_file(bench: Bench) -> None:
    ran = bench.report("body.stl", "--json")
    assert (ran.code, ran.err) == (0, "")
    assert ran.out == (bench.out / "results.json").read_text(encoding="utf-8")
    assert written(bench)["files"] == []


def test_cut_lists_its_files_and_they_are_there(bench: Bench) -> None:
    ran = bench.report(BAIT + WEIGHT, "--cut")
    assert (ran.code, ran.err) == (0, "")
    tree = written(bench)
    assert tree["files"] == ["belly-weight.stl", "body.stl"]
    assert sorted(path.name for path in bench.out.iterdir()) == ["belly-weight.stl", "body.stl", "results.json"]
    assert "written  results.json, belly-weight.stl, body.stl in" in ran.out
    sizes = {name: volume((bench.out / name).read_bytes()) for name in tree["files"]}
    assert sizes["belly-weight.stl"] == pytest.approx(80.0, rel=1e-4)
    # The pocket is 0.2 mm wider on every side: between the box of 5.4 x 4.4 x 4.4 mm and that box with edges rounded
    # to 0.2 mm, whose volume is 80 + 0.2 * 112 + pi * 0.04 * 13 + 4/3 pi 0.008.
    assert sizes["body.stl"] >= (6400 - 5.4 * 4.4 * 4.4) * (1 - 1e-6)
    assert sizes["body.stl"] <= (6400 - 104.06) * (1 + 1e-4)


def test_a_second_run_replaces_the_first_whole(bench: Bench) -> None:
    assert bench.report(BAIT + WEIGHT, "--cut").code == 0
    first = written(bench)["run"]
    assert bench.report(BAIT + WEIGHT).code == 0
    assert written(bench)["run"] != first
    assert [path.name for path in bench.out.iterdir()] == ["results.json"]
    assert [path.name for path in bench.folder.iterdir() if path.name.startswith(".")] == []


def test_exit_1_and_everything_written_where_a_fault_is_found(bench: Bench) -> None:
    # It opens through the body's side at y = 0.
    bench.put("chamber.stl", box((20, -1, 3), (6, 6, 6)))
    ran = bench.report(BAIT + VOID)
    assert (ran.code, ran.err) == (1, "")
    tree = written(bench)
    assert [finding["code"] for finding in tree["findings"] if finding["level"] == "fault"] == ["sealed-void-open"]
    assert "1 fault, 0 warnings" in ran.out
    assert "fault: 'chamber' is called sealed, but reaches the outside" in ran.out
    assert bench.run("report", "minnow.toml", "--json").code == 1


def test_a_warning_ends_with_0(bench: Bench) -> None:
    bench.put("weight.stl", box((-2, 3, 3), (5, 4, 4)))
    ran = bench.report(BAIT + WEIGHT)
    assert (ran.code, ran.err) == (0, "")
    assert "warning: " in ran.out


@pytest.mark.parametrize("words", [["--out"], ["--foo"], [], ["body.stl", "extra.stl"]])
def test_exit_2_where_it_is_used_wrongly(bench: Bench, words: list[str]) -> None:
    ran = bench.run("report", *words)
    assert (ran.code, ran.out) == (2, "")
    assert ran.err.startswith("meshlure cannot go on:\n- ")
    assert "\n  next: " in ran.err
    assert "Traceback" not in ran.err


def test_nowhere_to_write_to(bench: Bench) -> None:
    ran = bench.run("report", "body.stl", *QUICK)
    assert (ran.code, ran.out) == (2, "")
    assert "next: add --out DIR, or --json" in ran.err
    ran = bench.run("report", "body.stl", *QUICK, "--json", "--cut")
    assert (ran.code, ran.out) == (2, "")
    assert "next: add --out DIR" in ran.err


def _break(monkeypatch: pytest.MonkeyPatch, error: Exception) -> None:
    def broken(*_: object) -> object:
        raise error

    monkeypatch.setattr("meshlure.examine.study", broken)


def test_exit_3_and_an_apology_for_a_fault_of_ours(bench: Bench, monkeypatch: pytest.MonkeyPatch) -> None:
    _break(monkeypatch, ZeroDivisionError("division by zero"))
    before = bench.contents()
    ran = bench.report("body.stl")
    assert (ran.code, ran.out) == (3, "")
    assert "Traceback" not in ran.err
    assert "fault of its own (ZeroDivisionError: division by zero). We are sorry." in ran.err
    assert "--debug" in ran.err
    assert bench.contents() == before


def test_debug_shows_where_it_happened(bench: Bench, monkeypatch: pytest.MonkeyPatch) -> None:
    _break(monkeypatch, ZeroDivisionError("division by zero"))
    ran = bench.report("body.stl", "--debug")
    assert (ran.code, ran.out) == (3, "")
    assert "Traceback" in ran.err
    assert "in broken\n" in ran.err
    assert "We are sorry." in ran.err


def test_debug_changes_nothing_for_bad_input(bench: Bench) -> None:
    plain, debug = bench.report("bodi.stl"), bench.report("bodi.stl", "--debug")
    assert (plain.code, plain.err) == (2, debug.err)
    assert debug.code == 2


def test_too_little_memory_is_no_fault_of_ours(bench: Bench, monkeypatch: pytest.MonkeyPatch) -> None:
    _break(monkeypatch, MemoryError())
    ran = bench.report("body.stl")
    assert (ran.code, ran.out) == (2, "")
    assert "more memory" in ran.err


def test_version(bench: Bench) -> None:
    assert bench.run("--version") == type(bench.run("--version"))(0, f"meshlure {VERSION}\n", "")
