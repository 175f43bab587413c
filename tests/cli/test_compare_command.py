"""`meshlure compare`: its table, its page, its results, and what it refuses."""

from __future__ import annotations

import json
import re
from html import unescape
from typing import Any

import numpy as np
import pytest
from command_bench import BAIT, Bench, box, fault
from jsonschema import Draft202012Validator
from lxml import html  # type: ignore[import-untyped]

from meshlure.report.lines import LOOKS, WORDS
from meshlure.report.overlay import laid
from meshlure.results import DrawnPiece, View, schema
from meshlure.results.comparison import MOST

STRANGE = 'Reed <b>"5"</b> & co'


@pytest.fixture
def two(bench: Bench) -> Bench:
    """Two bait files: the bench's body, and one 10 mm longer, drawn elsewhere, in other water and of a strange name."""
    bench.put("minnow.toml", BAIT)
    bench.put("long.stl", box((100, 0, 0), (50, 10, 16)))
    other = BAIT.replace("body.stl", "long.stl").replace('"Alder pool minnow"', f"'{STRANGE}'")
    bench.put("reed.toml", other + '[water]\ndensity = "1020 kg/m3"\n')
    return bench


def test_page_results_and_table(two: Bench) -> None:
    ran = two.run("compare", "minnow.toml", "reed.toml", "--out", "out")
    assert (ran.code, ran.err) == (0, "")
    assert sorted(path.name for path in two.out.iterdir()) == ["compare.html", "results.json"]
    tree = json.loads((two.out / "results.json").read_text(encoding="utf-8"))
    assert [error.message for error in Draft202012Validator(schema()).iter_errors(tree)] == []
    assert (tree["name"], tree["files"]) == ("Alder pool minnow", ["compare.html"])
    _table(ran.out)
    _page((two.out / "compare.html").read_text(encoding="utf-8"), tree)
    # What was written is known again as ours.
    assert two.run("compare", "reed.toml", "minnow.toml", "--out", "out", "--no-page", "--quiet").out == ""
    assert [path.name for path in two.out.iterdir()] == ["results.json"]


def _table(said: str) -> None:
    assert said.startswith(f"A  Alder pool minnow  (minnow.toml)\nB  {STRANGE}  (reed.toml)\n")
    assert f"  {STRANGE}: its file says otherwise of water\n" in said
    # 6400 and 8000 mm3 of 1.2 g/cm3, both in fresh water of 18 degC, 0.9986 g/cm3.
    assert re.search(r"^length of the body +mm +40\.0 +50\.0 +\+10\.0$", said, re.MULTILINE)
    assert re.search(r"^mass +g +7\.68 +9\.60 +\+1\.92$", said, re.MULTILINE)
    assert re.search(r"^reserve +g +-1\.29 +-1\.61 +-0\.32$", said, re.MULTILINE)
    assert re.search(r"^silhouette from the front +mm2 +160 +160 +~ \+0$", said, re.MULTILINE)
    assert re.search(r"^centre of gravity .*\? \+5\.0$", said, re.MULTILINE)
    assert said.endswith("  written  results.json, compare.html in out\n")


def _page(text: str, tree: Any) -> None:
    page = html.fromstring(text)
    assert tree["run"] in text
    assert STRANGE in unescape(page.text_content())
    assert not page.xpath("//b[text()='\"5\"']")
    # Nothing remote and no script; every picture says what it shows.
    assert not page.xpath("//script|//link|//iframe")
    assert all(src.startswith("data:") for src in page.xpath("//img/@src"))
    assert all(len(alt) > 20 for alt in page.xpath("//img/@alt"))
    side = next(alt for alt in page.xpath("//img/@alt") if alt.startswith("Outlines from the side"))
    assert f"A, Alder pool minnow, solid; B, {STRANGE}, dashed" in side
    cells = {
        "".join(row.xpath("th//text()")): ["|".join(cell.xpath(".//text()")) for cell in row.xpath("td")]
        for row in page.xpath("//table[caption[contains(., 'Values')]]/tbody/tr[td]")
    }
    assert cells["mass, g"] == ["7.68", "9.60|+1.92"]
    assert cells["silhouette from the front, mm²"] == ["160", "160|≈ 0"]
    assert cells["centre of gravity from the nose, mm"] == ["20.0", "25.0|? +5.0"]
    assert len(cells) == len(tree["comparison"]["rows"])


def test_json_alone_writes_nothing(two: Bench) -> None:
    before = two.contents()
    ran = two.run("compare", "minnow.toml", "reed.toml", "--json")
    assert (ran.code, ran.err) == (0, "")
    assert [bait["letter"] for bait in json.loads(ran.out)["comparison"]["baits"]] == ["A", "B"]
    assert two.contents() == before


@pytest.mark.parametrize(
    ("words", "said"),
    [
        (["minnow.toml"], "nothing to hold it against"),
        (["minnow.toml"] * 9, "found: 9\n  allowed: 2 to 8"),
        (["minnow.toml", "body.stl"], "body.stl: only bait files are compared"),
        (["minnow.toml", "absent.toml"], "absent.toml"),
        ([], "BAIT.toml ... is missing"),
    ],
    ids=["one", "nine", "mesh", "absent", "none"],
)
def test_what_cannot_be_compared(two: Bench, words: list[str], said: str) -> None:
    assert said in fault(two.run("compare", *words))


def test_faults_of_all_files_at_once(two: Bench) -> None:
    two.put("minnow.toml", BAIT.replace("1.2 g/cm3", "1.2"))
    two.put("reed.toml", BAIT.replace('"mm"', '"furlong"'))
    ran = two.run("compare", "minnow.toml", "reed.toml")
    assert ran.code == 2
    assert re.findall(r"^- (\w+\.toml): ", ran.err, re.MULTILINE) == ["minnow.toml", "reed.toml"]


def test_outlines_are_laid_together_at_the_nose_tip() -> None:
    # A box of 50 x 16 mm, drawn 100 mm off and 7 mm up; its nose tip in the middle of its front.
    ring = np.array([[100.0, 7.0], [150.0, 7.0], [150.0, 23.0], [100.0, 23.0]])
    right, up = np.array([1.0, 0.0, 0.0]), np.array([0.0, 0.0, 1.0])
    view = View("side", right, up, 0.0, (DrawnPiece("skin", "skin", (ring,)),))
    found = laid([view], np.array([100.0, 3.0, 15.0]), "side", 0, "A", "box")
    assert found is not None
    assert np.concatenate(found.rings).min(axis=0).tolist() == [0.0, -8.0]
    assert np.concatenate(found.rings).max(axis=0).tolist() == [50.0, 8.0]
    assert laid([view], np.zeros(3), "top", 0, "A", "box") is None


def test_every_bait_has_a_line_that_differs_without_colour() -> None:
    looks = {(str(look["linestyle"]), look.get("marker")) for look in LOOKS}
    assert len(looks) == len(WORDS) == len(LOOKS) == MOST
