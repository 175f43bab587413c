"""`meshlure mould`: what it writes and prints, its exit codes, and that nothing is left of a run that is refused."""

from __future__ import annotations

import json
from typing import Any

import numpy as np
import pytest
import shapes
from command_bench import BAIT, Bench, fault
from jsonschema import Draft202012Validator

from meshlure.files.stl import stl_bytes
from meshlure.geometry.solids import Solid
from meshlure.results import schema

BODY = shapes.ellipsoid((0.03, 0.007, 0.01), 3)
FLAT = Solid.of(BODY).split(np.array([0.0, 1.0, 0.0]), 0.0)[0].surface()
MOULD = '[mould]\nshrink = { print = "0.2 %", silicone = "0.3 %", resin = "0.4 %" }\nsprue = { diameter = "6 mm" }\n'


def ready(bench: Bench, mould: str = MOULD, body: Any = BODY) -> None:
    bench.put("body.stl", stl_bytes(body))
    bench.put("minnow.toml", BAIT + mould)


def tree(bench: Bench) -> dict[str, Any]:
    found: dict[str, Any] = json.loads((bench.out / "results.json").read_text(encoding="utf-8"))
    assert [error.message for error in Draft202012Validator(schema()).iter_errors(found)] == []
    return found


def test_two_halves(bench: Bench) -> None:
    ready(bench)
    ran = bench.run("mould", "minnow.toml", "--no-page", "--out", "out")
    assert (ran.code, ran.err) == (0, "")
    files = ["board-a.stl", "board-b.stl", "frame.stl", "mould.3mf"]
    assert sorted(path.name for path in bench.out.iterdir()) == sorted([*files, "results.json"])
    found = tree(bench)
    assert found["files"] == found["mould"]["files"] == files
    # The general library's volume of the facets; 1/(0.998 x 0.997 x 0.996) is 1.009055, cubed 1.027412.
    drawn = float(shapes.as_trimesh(BODY).volume) * 1e6
    assert ran.out.splitlines()[:2] == [
        "Alder pool minnow",
        f"  scale    1.0091 times the drawing: {drawn:.2f} cm3 drawn, {drawn * 1.027412:.2f} cm3 moulded, "
        f"{drawn:.2f} cm3 cast",
    ]
    assert "  pour     sprue of 6 mm at the tail, 0 vents, 4 keys\n" in ran.out
    assert "  parting  along [0, -1, 0] at 0.00 mm: " in ran.out
    assert ran.out.endswith(f"  written  results.json, {', '.join(files)} in out\n")
    account = found["mould"]
    assert account["scale"] == pytest.approx(1.009055, abs=1e-6)
    assert account["volume_moulded_mm3"] / account["volume_drawn_mm3"] == pytest.approx(1.027412, abs=2e-6)
    assert account["volume_cast_mm3"] == pytest.approx(account["volume_drawn_mm3"], rel=1e-9)
    said = {row["trigger"] for row in found["cautions"]}
    # No resin is named: the usual one's caution is printed, with those of rubber, print and dust.
    assert {"silicone", "polyurethane", "photopolymer", "sanding"} <= said
    assert {"pull of the mould", "density of the mould"} <= {row["what"] for row in found["assumptions"]}


def test_the_resin_s_own_cautions(bench: Bench) -> None:
    ready(bench)
    epoxy = (BAIT + MOULD).replace('density = "1.2 g/cm3"', 'material = "epoxy + glass microballoons"')
    bench.put("minnow.toml", epoxy)
    assert bench.run("mould", "minnow.toml", "--no-page", "--out", "out").code == 0
    said = {row["trigger"] for row in tree(bench)["cautions"]}
    assert {"epoxy", "fine dust", "silicone"} <= said
    assert "polyurethane" not in said


def test_one_piece_and_master(bench: Bench) -> None:
    ready(bench, body=FLAT)
    assert bench.run("mould", "minnow.toml", "--one-piece", "--no-page", "--out", "out").code == 0
    found = tree(bench)["mould"]
    assert (found["kind"], found["files"], found["sprue"]) == (
        "one piece",
        ["board.stl", "frame.stl", "mould.3mf"],
        None,
    )
    assert len(found["rubber_g"]) == 1
    ran = bench.run("mould", "minnow.toml", "--master", "--tab", "--no-page", "--out", "out")
    assert (ran.code, ran.err) == (0, "")
    found = tree(bench)["mould"]
    assert (found["kind"], found["files"], found["rubber_g"]) == ("master", ["master.stl", "mould.3mf"], [])
    assert found["pieces"][0]["turn"] == [[1, 0, 0], [0, 1, 0], [0, 0, 1]]
    assert found["pieces"][0]["shift_mm"] == pytest.approx([0, 0, 0], abs=1e-9)


def test_json_needs_no_folder(bench: Bench) -> None:
    ready(bench)
    before = bench.contents()
    ran = bench.run("mould", "minnow.toml", "--json")
    assert (ran.code, ran.err) == (0, "")
    found = json.loads(ran.out)
    assert (found["files"], found["mould"]["halves_mm3"], found["mould"]["keys"][0]["gap_mm"]) == ([], [], None)
    assert bench.contents() == before


def test_a_mould_that_will_not_do_ends_with_1(bench: Bench) -> None:
    ready(bench, MOULD + 'bed = ["50 mm", "50 mm", "50 mm"]\n')
    ran = bench.run("mould", "minnow.toml", "--no-page", "--out", "out")
    assert (ran.code, ran.err) == (1, "")
    assert "fault: 'board A' of " in ran.out
    assert (bench.out / "board-a.stl").exists()


def test_a_report_has_no_mould(bench: Bench) -> None:
    ready(bench)
    assert bench.run("report", "minnow.toml", "--no-page", "--out", "out").code == 0
    assert "mould" not in tree(bench)


REFUSED = [
    ("shrink = { print = 5 }", (), "minnow.toml: mould.shrink.print: the number has no unit"),
    ('wall = "0 mm"', (), "minnow.toml: mould.wall: a length must be above zero here"),
    ('sprue = { diameter = "20 mm" }', (), "minnow.toml: mould.sprue.diameter: the sprue is wider than the body"),
    ("sprue = { at = [0, 0, 30] }", (), "minnow.toml: mould.sprue.at: the point is not where the parting plane meets"),
    ("", ("--one-piece",), "minnow.toml: mould.pull: the part has no flat back to be moulded in one piece"),
    ("", ("--one-piece", "--master"), "mould: only one of these can be made"),
    ("", ("--tab",), "--tab: a tab belongs to a master"),
]


@pytest.mark.parametrize(("mould", "words", "told"), REFUSED, ids=[told for _, _, told in REFUSED])
def test_bad_input_ends_with_2_and_writes_nothing(bench: Bench, mould: str, words: tuple[str, ...], told: str) -> None:
    ready(bench, f"[mould]\n{mould}\n")
    before = bench.contents()
    assert fault(bench.run("mould", "minnow.toml", "--no-page", "--out", "out", *words)).startswith(f"- {told}")
    assert bench.contents() == before


def test_an_open_body_is_refused(bench: Bench) -> None:
    ready(bench, body=type(BODY)(BODY.vertices, BODY.faces[3:]))
    assert "open" in fault(bench.run("mould", "minnow.toml", "--out", "out"))
    assert not bench.out.exists()


def test_nowhere_to_write(bench: Bench) -> None:
    ready(bench)
    assert fault(bench.run("mould", "minnow.toml")).startswith("- --out: there is nowhere to write to")


def test_what_fails_while_it_is_written_leaves_nothing(bench: Bench, monkeypatch: pytest.MonkeyPatch) -> None:
    from meshlure.making.mould import check

    ready(bench)
    # The halves are held against a plug that no file can be: the boards are in the staging folder by then.
    monkeypatch.setattr(check, "AGREES", -1.0)
    before = bench.contents()
    told = fault(bench.run("mould", "minnow.toml", "--no-page", "--out", "out"))
    assert told.startswith("- board A and board B: the boards written do not carry the whole plug")
    assert bench.contents() == before
