"""The README's examples, run as they stand, and its table of commands.

The example for spreadsheets is read back with the standard library's csv and json.
"""

from __future__ import annotations

import csv
import json
import re
import shlex
from pathlib import Path

import pytest
from command_bench import Bench

from meshlure.cli.commands import NAMES

ROOT = Path(__file__).parents[1]
README = (ROOT / "README.md").read_text(encoding="utf-8")


def test_the_python_runs_one_after_the_other(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]
) -> None:
    (tmp_path / "samples").symlink_to(ROOT / "samples")
    monkeypatch.chdir(tmp_path)
    blocks = re.findall(r"^```python\n(.*?)^```$", README, re.DOTALL | re.MULTILINE)
    assert len(blocks) == 3
    for block in blocks:
        exec(compile(block, "README.md", "exec"), {"__name__": "__main__"})
    said = capsys.readouterr().out
    assert "Floats: reserve +1.07 g" in said
    assert "Not yet: nose 8° up, 4° up wanted." in said
    results = json.loads((tmp_path / "results.json").read_text(encoding="utf-8"))
    with (tmp_path / "pieces.csv").open(encoding="utf-8-sig", newline="") as lines:
        rows = list(csv.DictReader(lines))
    assert [float(row["mass_g"]) for row in rows] == [piece["mass_g"] for piece in results["pieces"]]
    assert sum(float(row["mass_g"]) for row in rows) == pytest.approx(results["weight"]["mass_g"], rel=1e-12)


def test_every_command_is_named() -> None:
    assert [name for name in NAMES if f"meshlure {name}" not in README and f"`{name}`" not in README] == []


def test_every_picture_is_there() -> None:
    pictures = re.findall(r"!\[[^\]]+\]\(([^)]+)\)", README)
    assert len(pictures) >= 5
    assert [name for name in pictures if not (ROOT / name).is_file()] == []


def test_an_inspection_prints_what_is_shown(bench: Bench) -> None:
    (shown,) = re.findall(r"<!-- inspect -->\n```text\n\$ meshlure (.*?)\n(.*?)^```$", README, re.DOTALL | re.MULTILINE)
    words, text = shown
    (bench.folder / "tests").symlink_to(ROOT / "tests")
    bench.out.mkdir()
    ran = bench.run(*shlex.split(words))
    said = ran.out.splitlines()
    assert ran.code == 0
    for line, full in zip(text.splitlines(), said, strict=True):
        assert full == line or (line.endswith(" ...") and full.startswith(line.removesuffix("...")))
