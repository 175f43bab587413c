"""What a balance writes, read by other programs: volumes, insides, names and units, and the promise kept.

Authorities: the general mesh library's volumes, water-tightness and containment; lib3mf for the package; formulas of
rods, balls and ellipsoids; masses added up by hand from the files.
"""

from __future__ import annotations

from dataclasses import dataclass
from math import pi
from pathlib import Path
from typing import Any

import lib3mf
import numpy as np
import pytest
import shapes
import trimesh
from workbench import vector

from meshlure.bait.loading import read_bait
from meshlure.balancing import delivery
from meshlure.balancing.delivery import Balance
from meshlure.balancing.finding import balance, place
from meshlure.balancing.flights import Flights
from meshlure.errors import InputError
from meshlure.files.stl import write_stl
from meshlure.geometry.surface import Floats, Surface
from meshlure.results.study import Study

AXES = (0.045, 0.010, 0.015)
BODY, WATER, LEAD, EPOXY = 0.7, 1.0, 11.34, 1.15
"""g/cm3."""


@pytest.fixture(autouse=True)
def _grounded(monkeypatch: pytest.MonkeyPatch) -> None:
    """Flights take a third of a balance's time and change nothing of what is written."""
    flight = {"leads": "tail", "verdict": "steady", "trim_deg": 0.0, "distance_m": 40.0}
    monkeypatch.setattr(Flights, "of", lambda *_: {"flight": flight, "distance_ratio": 1.0})


SINKS = 'behaviour = "sinks"\nreserve = "-2 g"\nnose_up = "-8 deg"'
FLOATS = 'behaviour = "floats"\nreserve = "2 g"\nnose_up = "5 deg"'
HOOKS = (("hook", 0.8, (5.0, 0.0, -15.0)), ("tail hook", 0.8, (45.0, 0.0, 0.0)))


@dataclass(frozen=True, eq=False)
class Drawn:
    """How a bait is drawn: the unit, nose and back, and where its middle lies, m."""

    unit: str = "mm"
    nose: tuple[float, ...] = (-1.0, 0.0, 0.0)
    back: tuple[float, ...] = (0.0, 0.0, 1.0)
    middle: tuple[float, ...] = (0.0, 0.0, 0.0)

    @property
    def turn(self) -> Floats:
        """From a bait drawn with its nose to -x and its back to +z to this one."""
        side = np.cross(self.back, self.nose)
        plain = np.array([[-1.0, 0, 0], [0, 0, 1.0], [0, -1.0, 0]])
        return np.asarray(np.stack([self.nose, self.back, side], axis=1) @ plain)

    def moved(self, surface: Surface) -> Surface:
        return surface.moved(rotation=self.turn, shift=np.array(self.middle))

    def at(self, *place: float) -> list[float]:
        """A place given in mm, in the file's unit."""
        there = self.turn @ vector(*place) + np.array(self.middle)
        return [float(value) / {"mm": 1e-3, "cm": 1e-2}[self.unit] for value in there]


PLAIN = Drawn()


def folder(where: Path, target: str, ballast: str = "", drawn: Drawn = PLAIN) -> Path:
    """A folder with an ellipsoid, an eye and a free weight in it, two hooks, and its bait file, whose path it is."""
    pieces = {
        "body": shapes.ellipsoid(AXES, 3),
        "eye": shapes.box((0.004, 0.002, 0.003), (-0.034, 0.0, 0.002)),
        "old": shapes.box((0.006, 0.004, 0.004), (0.010, 0.0, -0.006)),
    }
    scale = {"mm": 1.0, "cm": 0.1}[drawn.unit]
    for name, surface in pieces.items():
        write_stl(where / f"{name}.stl", drawn.moved(surface).moved(scale=scale))
    rows = "".join(
        f'[[hardware]]\nname = "{name}"\nmass = "{grams} g"\ndensity = "7.8 g/cm3"\n'
        f"at = {drawn.at(*at)}\nhangs = true\n"
        for name, grams, at in HOOKS
    )
    path = where / "bait.toml"
    path.write_text(
        f'format = 1\n[bait]\nname = "bench bait"\nlength_unit = "{drawn.unit}"\nnose = {list(drawn.nose)}\n'
        f"back = {list(drawn.back)}\nsize_checked = true\n"
        f'[water]\ndensity = "{WATER} g/cm3"\n[body]\nmesh = "body.stl"\ndensity = "{BODY} g/cm3"\n'
        '[[insert]]\nname = "eye"\nmesh = "eye.stl"\ndensity = "7.9 g/cm3"\n'
        '[[insert]]\nname = "old weight"\nmesh = "old.stl"\nmaterial = "lead"\nfree = true\n'
        f"{rows}[target]\n{target}\n[ballast]\n{ballast}\n",
        encoding="utf-8",
    )
    return path


def made(found: Balance, out: Path, halves: bool = False) -> Study:
    out.mkdir()
    study, names = found.make(out, out, halves)
    assert sorted(path.name for path in out.iterdir()) == sorted(names)
    return study


def read(path: Path) -> trimesh.Trimesh:
    """An STL as another library reads it, mm."""
    return trimesh.load_mesh(path)


def named(out: Path) -> dict[str, float]:
    """Volumes of the package's objects by name, mm3, as lib3mf reads them; its unit must be the millimetre."""
    model = lib3mf.get_wrapper().CreateModel()
    model.QueryReader("3mf").ReadFromFile(str(out / "balanced.3mf"))
    assert model.GetUnit() == lib3mf.ModelUnit.MilliMeter
    found, objects = {}, model.GetMeshObjects()
    while objects.MoveNext():
        mesh = objects.GetCurrentMeshObject()
        vertices = [list(v.Coordinates) for v in mesh.GetVertices()]
        faces = [list(t.Indices) for t in mesh.GetTriangleIndices()]
        found[mesh.GetName()] = float(trimesh.Trimesh(vertices, faces, process=False).volume)
    return found


def kept(found: Balance, study: Study, out: Path) -> dict[str, Any]:
    """The way taken, after all that holds of every balance was asked."""
    account, results = study.results["balance"], study.results
    row: dict[str, Any] = account["options"][account["taken"] - 1]
    assert results["buoyancy"]["reserve_g"] == pytest.approx(row["reserve_g"], abs=0.02)
    # Angles of touchy postures are told in steps of five degrees; the direction of up is not.
    up, frame = np.array(results["postures"][0]["up"]), results["frame"]
    nose_up = np.degrees(np.arcsin(up @ frame["nose"]))
    lean = np.degrees(np.arctan2(up @ frame["side"], up @ frame["back"]))
    assert (nose_up, lean) == pytest.approx((row["nose_up_deg"], row["lean_deg"]), abs=0.2)
    for path in out.glob("*.stl"):
        assert read(path).is_watertight, path.name
    assert all(volume > 0 for volume in named(out).values())
    assert "old weight" in account["replaced"]
    assert "old weight" not in {piece["name"] for piece in results["pieces"]}
    again = read_bait(out / "balanced.toml")
    assert again.name == "bench bait, balanced"
    weighed = sum(part.volume * part.density for part in _solids(out, again))
    assert results["weight"]["mass_g"] == pytest.approx(weighed + sum(grams for _, grams, _ in HOOKS), abs=0.004)
    return row


@dataclass(frozen=True)
class _Piece:
    volume: float
    density: float


def _solids(out: Path, again: Any) -> list[_Piece]:
    """Every piece of the written bait by its file: cm3 and g/cm3; glue counts less the ballast in it."""
    pieces = [_Piece(read(out / "body.stl").volume * 1e-3, BODY)]
    bodied = 0.0
    lead = sum(read(path).volume for path in out.glob("ballast-*.stl")) * 1e-3
    for insert in again.plan.inserts:
        volume = read(insert.mesh).volume * 1e-3
        known = {"eye": 7.9, "ballast": LEAD, "glue": EPOXY, "plug": BODY}[insert.name.partition("-")[0]]
        pieces.append(_Piece(volume - (lead if insert.name.startswith("glue") else 0.0), known))
        bodied += volume if insert.name == "eye" else 0.0
    # The body's file holds neither pocket nor hole, but the eye's room.
    pieces.append(_Piece(-bodied, BODY))
    if not any((out / f"{name}.stl").exists() for name in ("plug-1", "glue-1")) and again.plan.ballast.pocket == "none":
        pieces.append(_Piece(-lead, BODY))
    return pieces


def drawn_body() -> float:
    """mm3 of the body as drawn."""
    return float(shapes.as_trimesh(shapes.ellipsoid(AXES, 3)).volume) * 1e9


def rod(row: dict[str, Any], fit: float = 0.0) -> float:
    """mm3 of a way's rod, or of its room."""
    return float(pi / 4 * (row["size_mm"] + 2 * fit) ** 2 * (row["length_mm"] + 2 * fit))


LEADEN = 'materials = ["lead"]\nshapes = ["rod"]\ncover = "1.5 mm"\n'
GLUED = 'fit = "0.2 mm"\nglue = "epoxy clear coat"\n'


@pytest.mark.parametrize(("target", "more"), [(FLOATS, ""), (SINKS, 'fit = "0.2 mm"\n'), (SINKS, GLUED)])
def test_an_embedded_rod(tmp_path: Path, target: str, more: str) -> None:
    out, fit = tmp_path / "out", 0.2 if more else 0.0
    found = balance(read_bait(folder(tmp_path, target, LEADEN + more)))
    assert found.met
    row = kept(found, made(found, out), out)
    assert read(out / "body.stl").volume == pytest.approx(drawn_body() - rod(row, fit), rel=1e-4)
    assert read(out / "ballast-1.stl").volume == pytest.approx(rod(row), rel=1e-4)
    assert named(out)["ballast-1"] == pytest.approx(rod(row), rel=1e-4)
    assert set(named(out)) == {"body", "eye", "ballast-1"}
    assert (out / "glue-1.stl").exists() is (more == GLUED)
    hollow_where(row, fit, out)


def hollow_where(row: dict[str, Any], fit: float, out: Path) -> None:
    """The written body is hollow where the rod and its gap lie, and nowhere else, asked at points about it."""
    random = np.random.default_rng(3)
    near = np.array(row["at_mm"]) + random.uniform(-1, 1, (800, 3)) * np.array([row["length_mm"] * 0.8, 5.0, 5.0])
    off = near - row["at_mm"]
    out_by = np.hypot(off[:, 1], off[:, 2]) - row["size_mm"] / 2 - fit
    room = (np.abs(off[:, 0]) < row["length_mm"] / 2 + fit) & (out_by < 0)
    # Facets and rounding of the skins are no more than some hundredths of a millimetre.
    sure = np.abs(out_by) > 0.02
    whole = shapes.as_trimesh(shapes.ellipsoid(AXES, 3)).contains(near * 1e-3)
    inside = read(out / "body.stl").contains(near)
    assert 50 < np.count_nonzero(room) < 600
    assert (inside[sure] == (whole & ~room)[sure]).all()


@pytest.mark.parametrize("more", ["", GLUED])
def test_a_hole_from_the_belly(tmp_path: Path, more: str) -> None:
    out, fit = tmp_path / "out", 0.2 if more else 0.0
    wanted = SINKS.replace("-2 g", "-0.5 g")
    found = balance(read_bait(folder(tmp_path, wanted, LEADEN + 'pocket = "from belly"\n' + more)))
    study = made(found, out)
    row = kept(found, study, out)
    plug, body = read(out / "plug-1.stl").volume, read(out / "body.stl").volume
    # The plug is a hundredth of a millimetre larger all round, so that it closes its hole.
    radius = row["size_mm"] / 2 + fit
    taken = rod(row, fit) + plug * (radius / (radius + 0.01)) ** 2
    assert body == pytest.approx(drawn_body() - taken, rel=1e-4)
    assert set(named(out)) == {"body", "eye", "ballast-1", "plug-1"}
    # Open to the belly: a point in the hole is in no material, nor is one in the skin's surface below it.
    x, y, z = row["at_mm"]
    below = np.array([[x, y, z - row["length_mm"] / 2 - fit - 0.5], [x, y, z]])
    assert not read(out / "body.stl").contains(below).any()
    assert read(out / "plug-1.stl").contains(below[:1]).all()
    assert not [f for f in study.results["findings"] if f["level"] in ("fault", "warning") and f["piece"] != "body"]


def test_another_way_without_a_pocket(tmp_path: Path) -> None:
    out = tmp_path / "out"
    found = balance(read_bait(folder(tmp_path, SINKS, LEADEN + 'pocket = "none"\n')), take=2)
    first, second = found.account["options"][:2]
    row = kept(found, made(found, out), out)
    assert found.account["taken"] == 2
    assert row["size_mm"] == second["size_mm"] != first["size_mm"]
    assert read(out / "ballast-1.stl").volume == pytest.approx(rod(second), rel=1e-4)
    assert read(out / "body.stl").volume == pytest.approx(drawn_body(), rel=1e-6)


def test_balls_in_a_row(tmp_path: Path) -> None:
    out = tmp_path / "out"
    found = balance(read_bait(folder(tmp_path, SINKS, 'materials = ["lead"]\nshapes = ["ball"]\nfit = "0.1 mm"\n')))
    row = kept(found, made(found, out), out)
    one, room = (pi / 6 * (row["size_mm"] + more) ** 3 for more in (0.0, 0.2))
    assert row["count"] >= 2
    assert read(out / "body.stl").volume == pytest.approx(drawn_body() - row["count"] * room, rel=1e-4)
    for number in range(1, row["count"] + 1):
        ball = read(out / f"ballast-{number}.stl")
        assert ball.volume == pytest.approx(one, rel=1e-4)
    ends = [read(out / f"ballast-{n}.stl").center_mass for n in (1, row["count"])]
    assert np.linalg.norm(ends[0] - ends[1]) == pytest.approx((row["count"] - 1) * row["spacing_mm"], abs=1e-3)


def test_two_halves_and_their_pins_make_the_body(tmp_path: Path) -> None:
    out = tmp_path / "out"
    found = balance(read_bait(folder(tmp_path, SINKS, LEADEN)))
    study = made(found, out, halves=True)
    row, pins = kept(found, study, out), study.results["balance"]["pins"]
    left, right = read(out / "body-left.stl"), read(out / "body-right.stl")
    holes = sum(pi / 4 * pin["diameter_mm"] ** 2 * pin["length_mm"] for pin in pins)
    assert len(pins) >= 2
    assert left.volume + right.volume + holes == pytest.approx(read(out / "body.stl").volume, rel=1e-4)
    # The bait's own left is -y here: side = back x nose.
    assert left.bounds[1, 1] == pytest.approx(0.0, abs=1e-5)
    assert right.bounds[0, 1] == pytest.approx(0.0, abs=1e-5)
    for pin in pins:
        assert np.abs(pin["axis"]) == pytest.approx([0, 1, 0])
        assert not left.contains([pin["at_mm"]])[0]
        # A wall of a millimetre all round, to skin and pocket.
        off = np.abs(np.array(pin["at_mm"]) - row["at_mm"])
        clear = np.hypot(max(off[0] - row["length_mm"] / 2, 0), max(off[2] - row["size_mm"] / 2, 0))
        assert clear > 0 or off[1] > 1
    assert {"body left", "body right"} <= set(named(out))


def test_ballast_where_it_is_said(tmp_path: Path) -> None:
    out = tmp_path / "out"
    found = place(read_bait(folder(tmp_path, SINKS, LEADEN)), "lead rod 5 mm x 18 mm at 3,0,-6")
    row = kept(found, made(found, out), out)
    assert row["at_mm"] == pytest.approx([3, 0, -6])
    assert (row["size_mm"], row["length_mm"], row["count"]) == pytest.approx((5, 18, 1))
    assert row["mass_g"] == pytest.approx(pi / 4 * 25 * 18 * 1e-3 * LEAD, rel=1e-9)
    assert read(out / "ballast-1.stl").bounds == pytest.approx(np.array([[-6, -2.5, -8.5], [12, 2.5, -3.5]]), abs=2e-3)
    # 45 - 3 = 42 mm from the nose is the middle; nothing was searched, so that no points are given.
    assert row["from_nose_mm"] == pytest.approx(48)
    assert row["score"] is None


SWAPPED = Drawn("cm", (0.0, 1.0, 0.0), (1.0, 0.0, 0.0))
FAR = Drawn("mm", (-1.0, 0.0, 0.0), (0.0, 0.0, 1.0), (1.0, -1.0, 0.5))


@pytest.mark.parametrize(
    ("drawn", "more"),
    [(SWAPPED, GLUED), (FAR, 'fit = "0.2 mm"\npocket = "from belly"\n')],
    ids=["centimetres, other axes", "a metre away"],
)
def test_however_it_is_drawn(tmp_path: Path, drawn: Drawn, more: str) -> None:
    """The same bait in another unit, along other axes, or a metre off the origin gets the same ballast."""
    plain, other = tmp_path / "plain", tmp_path / "other"
    plain.mkdir()
    other.mkdir()
    wanted = SINKS.replace("-2 g", "-0.5 g")
    known = balance(read_bait(folder(plain, wanted, LEADEN + more))).account["options"]
    found = balance(read_bait(folder(other, wanted, LEADEN + more, drawn)))
    row = kept(found, made(found, other / "out"), other / "out")
    for key in ("size_mm", "length_mm", "mass_g", "reserve_g", "from_nose_mm", "cover_mm"):
        assert row[key] == pytest.approx(known[0][key], abs=0.05), key
    at = drawn.turn @ np.array(known[0]["at_mm"]) + np.array(drawn.middle) * 1e3
    assert row["at_mm"] == pytest.approx(at, abs=0.1)
    middle = read(other / "out" / "ballast-1.stl").center_mass
    assert middle == pytest.approx(row["at_mm"], abs=1e-3)


def test_a_promise_that_is_not_kept_is_told(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    found = place(read_bait(folder(tmp_path, SINKS, LEADEN)), "lead rod 5 mm x 18 mm at 3,0,-6")
    # The ballast that was weighed is left out of the file.
    monkeypatch.setattr(delivery.Balance, "_inserts", lambda *_: ())
    with pytest.raises(InputError) as refused:
        made(found, tmp_path / "out")
    told = [fault.what for fault in refused.value.faults]
    assert told == [
        f"the bait that was written does not keep its {what}; it was not kept" for what in ("reserve", "posture")
    ]
