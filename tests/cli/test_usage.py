"""Command lines that are not understood, and the options that every command has."""

from __future__ import annotations

import json
import re
from pathlib import Path

import pytest
from command_bench import QUICK, Bench, fault

from meshlure.cli import commands
from meshlure.cli.commands import JOBS


@pytest.mark.parametrize(
    ("words", "said"),
    [
        (["baance"], "found: baance\n  next: did you mean meshlure balance?"),
        (["Report"], "found: Report\n  next: did you mean meshlure report?"),
        (["weigh"], "next: see meshlure report --help"),
        (["spoon"], "found: spoon\n  allowed: .*report.*\n  next: meshlure --help"),
        (["report", "body.stl", "--ouut", "x"], "meshlure report: .*\n  found: --ouut\n  next: did you mean --out\\?"),
        (["report", "body.stl", "--no_page"], "next: did you mean --no-page\\?"),
        (["report", "body.stl", "--take", "2"], "found: --take\n.*next: --take belongs to meshlure balance"),
        (["--cut", "report"], "next: options stand behind the command: meshlure report ... --cut"),
        (["report"], "BAIT is missing\n  allowed: .*\n  next: write meshlure report BAIT; meshlure report --help"),
        (["report", "a.stl", "b.stl"], "a word too many\n  found: b.stl"),
        (["report", "a.stl", "--out"], "--out: a value is missing behind it"),
        (["pour", "a.toml", "--baits", "six"], "--baits: a whole number is wanted"),
    ],
    ids=lambda it: " ".join(it) if isinstance(it, list) else "",
)
def test_a_slip_is_answered_with_what_was_meant(bench: Bench, words: list[str], said: str) -> None:
    told = fault(bench.run(*words))
    assert re.search(said, told, re.DOTALL), told


def test_every_job_has_commands_and_no_command_two() -> None:
    names = [name for names in JOBS.values() for name in names]
    assert len(names) == len(set(names)) >= 14
    assert all(JOBS.values())
    # Every module of a command that is there is listed.
    folder = Path(commands.__file__).parent
    there = {path.stem for path in folder.glob("*.py") if "SHORT: Final" in path.read_text(encoding="utf-8")}
    assert set(names) == there


def test_quiet_prints_only_errors(bench: Bench) -> None:
    before = bench.report("body.stl")
    ran = bench.report("body.stl", "--quiet")
    assert (ran.code, ran.out, ran.err) == (0, "", "")
    assert (bench.out / "results.json").exists()
    # The next run in the same process speaks again.
    assert bench.report("body.stl").out == before.out
    assert fault(bench.report("bodi.stl", "-q"))
    assert json.loads(bench.run("report", "body.stl", *QUICK, "--quiet", "--json").out)["name"] == "body"
