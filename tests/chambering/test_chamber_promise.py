"""What is written keeps its promise once read back: bodies without symmetry, every opening, a tube."""

from __future__ import annotations

from pathlib import Path
from tempfile import TemporaryDirectory
from typing import Any

import numpy as np
import pytest
import shapes
from hypothesis import given, settings
from hypothesis import strategies as st
from jsonschema import Draft202012Validator
from workbench import bait, coat, insert

from meshlure.bait.loading import read_bait
from meshlure.chambering import delivery, finding
from meshlure.errors import InputError
from meshlure.files.reading import read_mesh
from meshlure.geometry.clearance import Boxes
from meshlure.geometry.moments import solid_moments
from meshlure.geometry.solids import Solid
from meshlure.geometry.soundness import examine
from meshlure.geometry.standoff import side_standoff
from meshlure.geometry.surface import Surface
from meshlure.results import schema

MM = 1e-3
BALLS = [{"diameter": "4 mm", "count": [1, 2], "material": "bearing steel"}]
ROW = [{"diameter": "4 mm", "count": 4, "material": "bearing steel"}]
"""A row so long that few places are left to try."""


def bumped(size: tuple[float, float, float], bump: tuple[float, float, float], radius: float) -> Surface:
    """An ellipsoid of semi-axes in mm with a ball that stands out of it."""
    body = Solid.of(shapes.ellipsoid([semi * MM for semi in size], 3))
    ball = Solid.of(shapes.sphere(radius * MM, 2).moved(shift=np.array(bump) * np.array(size) * MM))
    return body.joined(ball).surface()


def made(body: Surface, *pieces: Any, folder: Path, take: int = 1, **keys: Any) -> tuple[delivery.Chambered, Any]:
    asked = {"balls": ROW, "wall": "1 mm", "end_wall": "1.5 mm"} | keys.pop("chamber", {})
    found = finding.chamber(bait(body, *pieces, chamber=asked, **keys), take)
    assert found.reachable
    study, names = found.make(folder, Path("out"))
    assert sorted(path.name for path in folder.iterdir()) == sorted(names)
    return found, study


@settings(max_examples=2)
@given(
    size=st.tuples(st.floats(28, 40), st.floats(6.5, 9), st.floats(7.5, 11)),
    bump=st.tuples(st.floats(-0.5, 0.5), st.floats(-0.9, 0.9), st.floats(0.4, 0.9)),
    open_to=st.sampled_from(["none", "nose", "tail"]),
)
def test_lopsided_bodies(size: Any, bump: Any, open_to: str) -> None:
    density = 1.15  # sinking: its postures take no search
    with TemporaryDirectory() as place:
        folder = Path(place)
        body = bumped(size, bump, 4.0)
        found, study = made(body, folder=folder, chamber={"open_to": open_to, "slope": "5 deg"}, density=density)
        assert found.taken is not None
        option = found.taken.option
        results = study.results
        Draft202012Validator(schema()).validate(results)
        # The reserve by hand: the body displaces whole, and weighs what bore and balls leave of it.
        whole, balls = solid_moments(body).amount, option.choice.mass
        mass = (whole - np.pi * option.bore.cut.radius**2 * option.bore.length) * density * 1e3 + balls
        assert results["weight"]["mass_g"] == pytest.approx(mass * 1e3, rel=1e-5)
        assert results["buoyancy"]["reserve_g"] == pytest.approx((whole * 1000 - mass) * 1e3, abs=0.005)
        for row in results["balls"]:
            angles = found.taken.rested[row["end"]].angles
            assert angles is not None
            assert row["nose_up_deg"] == pytest.approx(np.degrees(angles.nose_up), abs=0.2)
        # Every mesh comes back closed, and the bore keeps its wall from the body as it was.
        for path in folder.glob("*.stl"):
            assert examine(read_mesh(path, "mm").surface, path.name).volume is not None
        bore = read_mesh(folder / "bore.stl", "mm").surface
        assert solid_moments(bore).amount == pytest.approx(option.hollow.volume, rel=1e-5)
        assert side_standoff(Boxes.of(body), option.bore.cut).distance >= 1.0 * MM - 2e-6


def test_a_tube_a_plug_and_a_coat(tmp_path: Path) -> None:
    body = shapes.ellipsoid((0.04, 0.009, 0.011), 3)
    weight = insert("keel", shapes.box((8 * MM, 3 * MM, 2 * MM), (0, 0, -8 * MM)), 11.3)
    tube = {"open_to": "tail", "tube": {"material": "brass", "wall": "0.3 mm"}}
    found, study = made(
        body, weight, folder=tmp_path, chamber=tube, density=0.75, coat=coat(0.2 * MM, 1.15), measured={"dry": "9 g"}
    )
    assert found.taken is not None
    option = found.taken.option
    pieces = {row["name"]: row for row in study.results["pieces"]}
    cut, hollow = option.bore.cut, option.hollow
    assert cut.radius - hollow.radius == pytest.approx(0.3 * MM, abs=1e-12)
    assert hollow.radius == pytest.approx(2.25 * MM, abs=1e-12)
    assert pieces["tube"]["volume_mm3"] == pytest.approx((cut.volume - hollow.volume) * 1e9, rel=1e-5)
    # The coat covers the plug too: the whole skin as it was.
    assert pieces["coat"]["volume_mm3"] == pytest.approx(body.area * 0.2 * MM * 1e9, rel=1e-4)
    assert abs(study.results["buoyancy"]["reserve_g"] - found.taken.reserve * 1e3) < 0.002
    levels = {finding["level"] for finding in study.results["findings"] if finding["piece"] == "plug-1"}
    assert levels <= {"note"}
    # The new bait file stands by itself: its chamber is drawn, what was weighed was another bait.
    again = read_bait(tmp_path / "chambered.toml")
    assert again.plan.chamber is None
    assert again.plan.measured is None
    assert [row.chamber for row in again.balls] == ["bore"]
    account = study.results["chamber"]
    assert account["options"][0]["tube"]["mass_g"] == pytest.approx((cut.volume - hollow.volume) * 8.45e6, rel=0.02)
    assert account["options"][0]["opening"]["plug_mm"] >= 1.5


def test_every_way_can_be_taken(tmp_path: Path) -> None:
    body = shapes.box((50 * MM, 13 * MM, 24 * MM))
    rows = finding.chamber(bait(body, chamber={"balls": BALLS, "slope": "0 deg"}, density=1.1)).account["options"]
    assert len(rows) >= 5
    scores = [row["score"] for row in rows]
    assert scores == sorted(scores, reverse=True)
    assert len({(row["count"], row["ball_mm"], *row["from_mm"], row["length_mm"]) for row in rows}) == len(rows)
    walls = {"wall": "1.2 mm", "end_wall": "2 mm"}
    found, _ = made(
        body, folder=tmp_path, take=len(rows), chamber={"slope": "0 deg", "balls": BALLS} | walls, density=1.1
    )
    assert found.taken is not None
    assert found.account["taken"] == len(rows)
    assert found.taken.option.bore.length * 1e3 == pytest.approx(rows[-1]["length_mm"], abs=1e-9)


def test_a_shorter_bore_is_offered_where_the_bait_rests_steadier() -> None:
    body = shapes.box((50 * MM, 12 * MM, 10 * MM))
    keel = insert("keel", shapes.box((30 * MM, 6 * MM, 1.5 * MM), (0, 0, -4 * MM)), 11.3)
    asked = {"balls": [{"diameter": "2 mm", "count": 1, "material": "bearing steel"}], "slope": "3 deg"}
    rows = finding.chamber(bait(body, keel, chamber=asked, density=1.1)).account["options"]
    longest = next(row for row in rows if row["kind"] == "longest")
    steady = next(row for row in rows if row["kind"] == "steady")
    assert longest["posture_change_deg"] > 2 >= steady["posture_change_deg"] > 1.8
    assert steady["length_mm"] < longest["length_mm"]
    assert steady["to_mm"] == pytest.approx(longest["to_mm"], abs=1e-6)


def test_a_broken_promise_is_told_and_refused(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(delivery, "KEPT_RESERVE", -1.0)
    monkeypatch.setattr(delivery, "KEPT_ANGLE", -1.0)
    found = finding.chamber(bait(shapes.box((50 * MM, 13 * MM, 14 * MM)), chamber={"balls": ROW}, density=1.1))
    with pytest.raises(InputError) as told:
        found.make(tmp_path, Path("out"))
    what = [fault.what for fault in told.value.faults]
    assert [words.split("keep its ")[1].split(";")[0] for words in what] == [
        "reserve",
        "posture with the balls at the nose",
        "posture with the balls at the tail",
    ]
    assert all(fault.found and fault.allowed for fault in told.value.faults)


def test_a_bore_is_drawn_back_from_the_tail_until_the_balls_come_back() -> None:
    # Afloat, the balls at the tail weigh it down by more than the bore falls; nearer the middle they do not.
    body = shapes.box((60 * MM, 14 * MM, 16 * MM))
    keel = insert("keel", shapes.box((30 * MM, 8 * MM, 2 * MM), (-6 * MM, 0, -6 * MM)), 11.3)
    asked = {"balls": [{"diameter": "6 mm", "count": 2, "material": "bearing steel"}], "slope": "4 deg"}
    found = finding.chamber(bait(body, keel, chamber=asked, density=1.1))
    rows = found.account["options"]
    longest = next(row for row in rows if row["kind"] == "longest")
    returning = next(row for row in rows if row["kind"] == "returns")
    tail = {row["kind"]: row["postures"]["tail"] for row in (longest, returning)}
    assert not tail["longest"]["returns"]
    assert tail["returns"]["returns"]
    # As long as may be: the fall is just what a ball needs, and the nose's end stayed.
    assert 1.0 <= tail["returns"]["bore_slope_deg"] < 1.5
    assert returning["from_mm"] == pytest.approx(longest["from_mm"], abs=1e-6)
    assert returning["length_mm"] < longest["length_mm"]
    assert rows[0] is returning
