"""`meshlure report --mend`: the meshes of a bait mended for one run, each step told, the files left alone."""

from __future__ import annotations

import json

import pytest
from command_bench import BAD_MESHES, Bench

CASES = {
    # name: (finding, volume in mm3 by hand)
    "mixed_winding.stl": ("mended-winding", 6400.0),
    "cracked.obj": ("mended-weld", 6400.0),
    "needle_face.stl": ("mended-zero-area", 6400.0),
    "shells_overlapping.stl": ("mended-join", 6760.0),
}


@pytest.mark.parametrize("name", CASES)
def test_a_report_on_meshes_mended_as_asked(bench: Bench, name: str) -> None:
    code, volume = CASES[name]
    data = (BAD_MESHES / name).read_bytes()
    body = bench.put(name, data)
    if name != "shells_overlapping.stl":
        assert bench.report(body).code == 2
    ran = bench.report(body, "--mend")
    assert ran.code == 0, ran
    assert "warning: mended as asked: " in ran.out
    results = json.loads((bench.out / "results.json").read_text(encoding="utf-8"))
    (told,) = (finding for finding in results["findings"] if finding["code"].startswith("mended-"))
    assert (told["code"], told["level"], told["piece"]) == (code, "warning", "body")
    assert f"The file {body} is as it was" in told["advice"]
    assert results["weight"]["mass_g"] == pytest.approx(volume * 1.2e-3, rel=1e-5)
    assert body.read_bytes() == data


def test_what_mending_leaves_stops_the_report_as_before(bench: Bench) -> None:
    body = bench.put("half.stl", (BAD_MESHES / "half_body.stl").read_bytes())
    ran = bench.report(body, "--mend")
    assert ran.code == 2
    assert "flat hole at y = 0 mm" in ran.err
    assert not bench.out.exists()
