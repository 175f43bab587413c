"""A hollow body against the shells of balls and boxes."""

from __future__ import annotations

from pathlib import Path
from typing import Any

import numpy as np
import pytest
import shapes
from jsonschema import Draft202012Validator
from workbench import bait, coat, insert, void

from meshlure.bait.pieces import Bait
from meshlure.chambering.hollowing import hollowed
from meshlure.errors import InputError
from meshlure.files.reading import read_mesh
from meshlure.geometry.moments import solid_moments
from meshlure.making.hollow import hollow, read_wish
from meshlure.results import schema

MM = 1e-3
SIZE = (40.0, 14.0, 18.0)
WHOLE, INSIDE = 40 * 14 * 18, 36 * 10 * 14
"""mm3 of the box, and of what is 2 mm under its skin."""


def box(*pieces: Any, **keys: Any) -> Bait:
    return bait(shapes.box([side * MM for side in SIZE]), *pieces, density=1.1, **keys)


def faults(words: str, *pieces: Any, **keys: Any) -> list[str]:
    with pytest.raises(InputError) as told:
        hollowed(box(*pieces, **keys), words)
    assert all(fault.next_step for fault in told.value.faults)
    return [fault.what for fault in told.value.faults]


def test_a_box_is_hollowed_to_a_box(tmp_path: Path) -> None:
    found = hollowed(box(), "wall 2 mm")
    account = found.account
    assert account["whole_mm3"] == pytest.approx(WHOLE, rel=1e-9)
    assert account["inside_mm3"] == pytest.approx(INSIDE, rel=1e-6)
    assert account["shell_mm3"] == pytest.approx(WHOLE - INSIDE, rel=1e-6)
    for mass in (account["shell_g"], account["mass_g"]):
        assert mass == pytest.approx((WHOLE - INSIDE) * 1.1e-3, rel=1e-6)
    assert account["reserve_sealed_g"] == pytest.approx((WHOLE - (WHOLE - INSIDE) * 1.1) * 1e-3, rel=1e-5)
    assert account["reserve_flooded_g"] == pytest.approx((WHOLE - INSIDE) * (1 - 1.1) * 1e-3, rel=1e-5)
    study, names = found.make(tmp_path, Path("out"))
    Draft202012Validator(schema()).validate(study.results)
    assert sorted(names) == ["body.stl", "hollow.3mf", "hollow.toml"]
    assert study.results["buoyancy"]["reserve_g"] == pytest.approx(account["reserve_sealed_g"], abs=1e-4)
    written = read_mesh(tmp_path / "body.stl", "mm").surface
    assert solid_moments(written).amount * 1e9 == pytest.approx(WHOLE - INSIDE, rel=1e-5)


def test_a_ball_is_hollowed_to_a_ball() -> None:
    made = hollow(bait(shapes.sphere(12 * MM, 4), density=1.1), read_wish("wall 1.5 mm", MM))
    (inside,) = made.inside
    # The facets of the ball lie up to a hundredth of a millimetre within it, and so those inside.
    assert inside.volume == pytest.approx(4 / 3 * np.pi * (10.5 * MM) ** 3, rel=5e-3)
    assert made.sealed.volume == pytest.approx(made.whole.volume - inside.volume, rel=1e-9)


def test_drains_let_the_water_in(tmp_path: Path) -> None:
    found = hollowed(box(coat=coat(0.1 * MM, 1.2)), "wall 2 mm, drain 3 mm at -12,0,-9.4 and 15, 0.5, -9")
    account = found.account
    holes = 2 * np.pi * 1.5**2 * 2
    assert account["shell_mm3"] == pytest.approx(WHOLE - INSIDE - holes, rel=1e-5)
    assert [row["at_mm"] for row in account["drains"]] == [
        pytest.approx([-12, 0, -9], abs=1e-9),
        pytest.approx([15, 0.5, -9], abs=1e-9),
    ]
    assert account["drains"][0]["axis"] == pytest.approx([0, 0, 1], abs=1e-9)
    # The coat covers what water reaches: outside, inside and the holes' walls, less the holes' discs.
    outer = 2 * (40 * 14 + 40 * 18 + 14 * 18)
    skin = outer + 2 * (36 * 10 + 36 * 14 + 10 * 14) + 2 * np.pi * 3 * 2 - 4 * np.pi * 1.5**2
    shell = WHOLE - INSIDE - holes
    assert account["reserve_flooded_g"] == pytest.approx((shell * (1 - 1.1) + skin * 0.1 * (1 - 1.2)) * 1e-3, rel=1e-3)
    sealed = WHOLE - (WHOLE - INSIDE) * 1.1 + outer * 0.1 * (1 - 1.2)
    assert account["reserve_sealed_g"] == pytest.approx(sealed * 1e-3, rel=1e-5)
    assert "coat" in account["words"]
    study, _ = found.make(tmp_path, Path("out"))
    assert study.results["buoyancy"]["reserve_g"] == pytest.approx(account["reserve_flooded_g"], abs=1e-3)
    assert study.results["buoyancy"]["state"] == "sinks"


def test_what_stands_inside_is_told() -> None:
    weight = insert("weight", shapes.box((6 * MM, 4 * MM, 6 * MM), (0, 0, -5.5 * MM)), 11.3)
    account = hollowed(box(weight), "wall 2 mm").account
    assert account["inserts_inside"] == ["weight"]
    assert "'weight'" in account["words"]
    # 1.5 mm of its six stand in the wall.
    within = 6 * 4 * 4.5
    left = WHOLE - INSIDE - 6 * 4 * 1.5
    assert account["mass_g"] == pytest.approx((left * 1.1 + 144 * 11.3) * 1e-3, rel=1e-5)
    assert account["reserve_flooded_g"] == pytest.approx(
        account["reserve_sealed_g"] - (INSIDE - within) * 1e-3, rel=1e-5
    )


@pytest.mark.parametrize(
    ("words", "what"),
    [
        ("2 mm", "the hollow cannot be read"),
        ("wall 2", "the number has no unit"),
        ("wall 2 mm, drain 3 mm", "the hollow cannot be read"),
        ("wall 2 mm, drain 3 mm at 1,2", "the drain's place is no point"),
        ("wall 2 mm, drain 3 mm at 1,2,x", "the drain's place is no point"),
        ("wall 8 mm", "with this wall nothing of the body is hollow"),
        ("wall 2 mm, drain 3 mm at 0,0,40", "the drain's place lies 31.0 mm off the skin"),
        ("wall 2 mm, drain 3 mm at 0,6.5,9", "the drain does not come out in the hollow"),
        ("wall 2 mm, drain 12 mm at 0,0,9", "the drain does not come out in the hollow"),
    ],
)
def test_slips_are_told(words: str, what: str) -> None:
    assert faults(words) == [what]


def test_all_bad_drains_are_told_at_once() -> None:
    assert len(faults("wall 2 mm, drain 3 mm at 0,0,40 and 0,6.5,9 and 0,0,9")) == 2


def test_a_chamber_keeps_its_walls() -> None:
    chamber = void("chamber", shapes.box((10 * MM, 5 * MM, 5 * MM)))
    assert faults("wall 2 mm", chamber) == ["hollowing the body would take the walls of 'chamber'"]
