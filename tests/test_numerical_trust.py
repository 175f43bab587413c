"""The same bait wherever it stands, however it lies and in whatever unit it was exported gives the same numbers.

The tolerances stated here are those of the README: in double precision, at the origin or a kilometre from it, masses
and areas keep eight digits and angles a thousandth of a degree; through an STL in any unit six digits and a hundredth
of a degree. Volumes are closed forms of boxes and of the facets' own sums.
"""

from __future__ import annotations

from pathlib import Path
from typing import Any

import numpy as np
import pytest
import shapes
import workbench

import meshlure
from meshlure.bait.composition import compose
from meshlure.bait.pieces import Bait
from meshlure.files.reading import read_mesh
from meshlure.files.stl import stl_bytes
from meshlure.geometry.shells import enclosed_volume
from meshlure.geometry.surface import Floats, Surface

Tree = dict[str, Any]

KILOMETRE = np.array([1000.0, -1000.0, 1000.0])
ROUNDING, ROUNDED = (1e-8, 1e-3), (2e-6, 1e-2)
"""Share of masses, volumes and areas, and degrees, that may change: in double precision, and through an STL."""

TURN = shapes.turn(11)
STILL = np.eye(3)


def pieces() -> dict[str, Surface]:
    body = shapes.ellipsoid((0.04, 0.008, 0.011), 3)
    return {
        "body": body,
        "keel": shapes.box((0.012, 0.004, 0.003), (-0.004, 0.0, -0.0065)),
        "room": shapes.box((0.01, 0.004, 0.004), (0.02, 0.0, 0.003)),
        # It sticks out below.
        "plug": shapes.box((0.003, 0.003, 0.008), (0.008, 0.0, -0.009)),
    }


def placed(turn: Floats = STILL, shift: Floats | float = 0.0, slant: Floats = STILL) -> Bait:
    """The bait turned and moved; its frame and hook go with it. A slant turns what it is drawn in beforehand."""
    made = {name: s.moved(rotation=turn @ slant, shift=np.zeros(3) + shift) for name, s in pieces().items()}
    eye = turn @ slant @ np.array([0.01, 0.0, -0.011]) + shift
    hook = workbench.hardware("hook", 0.7, eye, density=7.8)
    frame = {"nose": (-turn[:, 0]).tolist(), "back": turn[:, 2].tolist()}
    return workbench.bait(
        made["body"],
        workbench.insert("keel", made["keel"], 11.34),
        workbench.void("room", made["room"]),
        workbench.insert("plug", made["plug"], 1.1),
        density=0.6,
        hardware=[hook],
        coat=workbench.coat(0.15e-3, 1.15),
        **frame,
    )


def measured(bait: Bait) -> Tree:
    tree = meshlure.study(bait).results
    main = tree["postures"][0]
    return {
        "mass": tree["weight"]["mass_g"],
        "reserve": tree["buoyancy"]["reserve_g"],
        "displaced": tree["buoyancy"]["displaced_mm3"],
        "skin": tree["skin_mm2"],
        "areas": [area["area_mm2"] for area in tree["areas"]],
        "angles": [main["nose_up_deg"], main["lean_deg"]],
        "postures": len(tree["postures"]),
        "smooth": tree["smooth"]["reserve_g"],
        "findings": sorted(f["code"] for f in tree["findings"]),
    }


@pytest.fixture(scope="module")
def at_home() -> Tree:
    return measured(placed())


def assert_same(found: Tree, expected: Tree, tolerances: tuple[float, float]) -> None:
    share, degrees = tolerances
    for key in ("mass", "displaced", "skin"):
        assert found[key] == pytest.approx(expected[key], rel=share), key
    # A reserve is the difference of masses some times its size.
    assert found["reserve"] == pytest.approx(expected["reserve"], abs=2 * share * expected["mass"])
    # What the facets leave out is an estimate, over whichever triangles the cut of the plug leaves.
    left_out = expected["smooth"] - expected["reserve"]
    assert found["smooth"] - found["reserve"] == pytest.approx(left_out, rel=1e-3)
    assert found["areas"] == pytest.approx(expected["areas"], rel=share)
    assert found["angles"] == pytest.approx(expected["angles"], abs=degrees)
    assert found["postures"] == expected["postures"]


@pytest.mark.parametrize("turn", [STILL, TURN], ids=["as drawn", "turned"])
@pytest.mark.parametrize("shift", [0.0, KILOMETRE], ids=["at home", "a kilometre off"])
def test_moved_and_turned(at_home: Tree, turn: Floats, shift: Floats | float) -> None:
    if turn is STILL and np.ndim(shift) == 0:
        assert at_home["findings"] == ["coarse-facets", "sticks-out"]
        return
    found = measured(placed(turn, shift))
    assert_same(found, at_home, ROUNDING)
    assert found["findings"] == at_home["findings"]


BAIT = """\
format = 1
[bait]
name = "bench bait"
length_unit = "{unit}"
nose = "-x"
back = "+z"
[water]
density = "1000 kg/m3"
[body]
mesh = "body.stl"
density = "0.6 g/cm3"
[[insert]]
name = "keel"
mesh = "keel.stl"
density = "11.34 g/cm3"
[[insert]]
name = "room"
mesh = "room.stl"
void = "sealed"
[[insert]]
name = "plug"
mesh = "plug.stl"
density = "1.1 g/cm3"
[[hardware]]
name = "hook"
mass = "0.7 g"
density = "7.8 g/cm3"
at = [{at}]
hangs = true
[coat]
thickness = "0.15 mm"
density = "1.15 g/cm3"
"""


@pytest.mark.parametrize(("unit", "metres"), [("in", 0.0254), ("m", 1.0), ("cm", 0.01), ("mm", 0.001)])
def test_exported_in_any_unit(at_home: Tree, tmp_path: Path, unit: str, metres: float) -> None:
    for name, surface in pieces().items():
        # The writer writes mm: what is 1 unit long is drawn 1 mm long.
        drawn = Surface(surface.vertices * 1e-3 / metres, surface.faces)
        (tmp_path / f"{name}.stl").write_bytes(stl_bytes(drawn))
    at = ", ".join(repr(float(value)) for value in np.array([0.01, 0.0, -0.011]) / metres)
    (tmp_path / "bait.toml").write_text(BAIT.format(unit=unit, at=at))
    assert_same(measured(meshlure.read_bait(tmp_path / "bait.toml")), at_home, ROUNDED)


@pytest.mark.parametrize("away", [0.0, 10.0, 1000.0])
def test_steps_of_four_byte_numbers_are_said_and_bound_what_they_cost(tmp_path: Path, away: float) -> None:
    """A four-byte number has 24 binary digits (IEEE 754): at 1 km, in mm, its steps are 2^-4 mm."""
    body = shapes.ellipsoid((0.04, 0.008, 0.011), 4)
    path = tmp_path / "body.stl"
    path.write_bytes(stl_bytes(body.moved(shift=np.array([away, 0.0, 0.0]))))
    mesh = read_mesh(path, "mm")
    off = abs(enclosed_volume(mesh.surface) - enclosed_volume(body)) * 1e9
    found = [finding for finding in mesh.findings if finding.code == "far-from-origin"]
    if away < 100:
        assert found == []
        assert off < 1e-4 * enclosed_volume(body) * 1e9
        return
    (said,) = found
    assert said.level == "warning"
    assert "steps of 0.0625 mm" in said.message
    bound = float(said.message.rsplit("up to ", 1)[1].split(" mm3")[0])
    assert 0.001 * bound < off < bound


def composed(bait: Bait) -> tuple[float, float, set[str]]:
    """Mass, g, volume within the skin, mm3, and what was found."""
    made = compose(bait)
    codes = {finding.code for finding in (*bait.findings, *made.findings)}
    return made.mass({}).amount * 1e3, enclosed_volume(made.skin.surface) * 1e9, codes


LIES = {
    "as drawn": (STILL, np.zeros(3)),
    "turned": (TURN, np.zeros(3)),
    "turned, a kilometre off": (TURN, KILOMETRE),
}


@pytest.mark.parametrize("lies", LIES)
@pytest.mark.parametrize(
    "off", [0.0, 1e-12, -1e-12, 1e-9, -1e-9], ids=["on", "1 pm out", "1 pm in", "1 nm out", "1 nm in"]
)
def test_an_insert_whose_faces_lie_in_the_bodys(lies: str, off: float) -> None:
    """A bar of 40 x 10 x 16 mm with a bar of 8 x 4 x 5 mm let into its belly, flush, and one of 6 x 10 x 4 through both
    sides; turned, they are flush to rounding only."""
    turn, shift = LIES[lies]
    body = shapes.box((0.04, 0.01, 0.016), level=2)
    flush = shapes.box((0.008, 0.004, 0.005), (-0.01, 0.0, -0.0055 - off))
    through = shapes.box((0.006, 0.01, 0.004), (0.01, off, 0.003))
    body, flush, through = (s.moved(rotation=turn, shift=shift) for s in (body, flush, through))
    bait = workbench.bait(
        body,
        workbench.insert("flush", flush, 11.34),
        workbench.insert("through", through, 7.8),
        nose=(-turn[:, 0]).tolist(),
        back=turn[:, 2].tolist(),
    )
    mass, volume, found = composed(bait)
    inside = 8 * 4 * 5, 6 * 10 * 4
    assert volume == pytest.approx(6400.0, rel=1e-6)
    expected = 0.6e-3 * (6400 - sum(inside)) + 11.34e-3 * inside[0] + 7.8e-3 * inside[1]
    assert mass == pytest.approx(expected, rel=1e-6)
    assert not found & {"sticks-out", "sits-outside", "self-crossing"}


@pytest.mark.parametrize("lies", LIES)
def test_an_insert_that_touches_the_skin_exactly(lies: str) -> None:
    """A ball that touches the wall at one corner, and a bar whose edge lies in it."""
    turn, shift = LIES[lies]
    body = shapes.box((0.04, 0.01, 0.016), level=2)
    ball = shapes.sphere(0.003, 2)
    ball = ball.moved(shift=np.array([-0.01, 0.0, -0.008 - ball.vertices[:, 2].min()]))
    on_edge = np.array([[2**0.5, 0, 0], [0, 1, -1], [0, 1, 1]]) / 2**0.5
    edge = shapes.box((0.004, 0.003, 0.003)).moved(rotation=on_edge)
    edge = edge.moved(shift=np.array([0.01, 0.0, 0.008 - edge.vertices[:, 2].max()]))
    bait = workbench.bait(
        body.moved(rotation=turn, shift=shift),
        workbench.insert("ball", ball.moved(rotation=turn, shift=shift), 11.34),
        workbench.insert("edge", edge.moved(rotation=turn, shift=shift), 7.8),
        nose=(-turn[:, 0]).tolist(),
        back=turn[:, 2].tolist(),
    )
    mass, volume, found = composed(bait)
    held = enclosed_volume(ball) * 1e9, 4 * 3 * 3
    assert volume == pytest.approx(6400.0, rel=1e-6)
    expected = 0.6e-3 * (6400 - sum(held)) + 11.34e-3 * held[0] + 7.8e-3 * held[1]
    assert mass == pytest.approx(expected, rel=1e-6)
    assert not found & {"sticks-out", "sits-outside"}


@pytest.mark.parametrize("lies", LIES)
@pytest.mark.parametrize("wall", [0.05e-3, 1e-6])
def test_walls_as_thin_as_a_coat_of_paint(lies: str, wall: float) -> None:
    """A bar that is all hollow but for its walls: sealed, it displaces all of itself and weighs its walls."""
    turn, shift = LIES[lies]
    size = np.array([0.04, 0.01, 0.016])
    body, room = shapes.box(size.tolist(), level=1), shapes.box((size - 2 * wall).tolist(), level=1)
    bait = workbench.bait(
        body.moved(rotation=turn, shift=shift),
        workbench.void("room", room.moved(rotation=turn, shift=shift)),
        density=1.2,
        nose=(-turn[:, 0]).tolist(),
        back=turn[:, 2].tolist(),
    )
    mass, volume, found = composed(bait)
    assert volume == pytest.approx(6400.0, rel=1e-9)
    walls = (np.prod(size) - np.prod(size - 2 * wall)) * 1e9
    # A kilometre off, a coordinate's last digit is 1e-13 m: of a wall of a micrometre it leaves seven digits.
    assert mass == pytest.approx(1.2e-3 * walls, rel=1e-6)
    assert not found & {"sealed-void-open", "nothing-left"}
