"""Baits from bait files: units, lookups, deficits and every fault of one stage at once."""

from __future__ import annotations

from pathlib import Path

import numpy as np
import pytest
import shapes
from workbench import bait, hardware, insert, only, vector, void

from meshlure import read_bait
from meshlure.bait.pieces import Frame, Role
from meshlure.errors import InputError
from meshlure.files.stl import write_stl
from meshlure.geometry.surface import Floats, Surface

BODY = shapes.box((0.08, 0.016, 0.02))

FILE = """
format = 1
[bait]
name = "from a file"
length_unit = "{unit}"
nose = "-x"
back = "+z"
[water]
density = "1000 kg/m3"
[body]
mesh = "body.stl"
density = "0.6 g/cm3"
[[insert]]
name = "slug"
mesh = "slug.stl"
material = "lead"
[[hardware]]
name = "hook"
item = "treble 6"
at = [{at}, 0, 0]
hangs = true
"""


def written(folder: Path, unit: str, scale: float) -> Path:
    """A bait file with its meshes in a unit; write_stl writes mm, so lengths are scaled to the unit's numbers."""
    write_stl(folder / "body.stl", BODY.moved(scale=scale))
    write_stl(folder / "slug.stl", shapes.box((0.01, 0.004, 0.004)).moved(scale=scale))
    (folder / "bait.toml").write_text(FILE.format(unit=unit, at=10.0 * scale), encoding="utf-8")
    return folder / "bait.toml"


@pytest.mark.parametrize(("unit", "scale"), [("mm", 1.0), ("cm", 0.1), ("m", 1e-3), ("in", 1 / 25.4)])
def test_the_unit_of_the_meshes_is_theirs_alone(tmp_path: Path, unit: str, scale: float) -> None:
    read = read_bait(written(tmp_path, unit, scale))
    np.testing.assert_allclose(np.ptp(read.body.surface.vertices, axis=0), [0.08, 0.016, 0.02], rtol=1e-6)
    np.testing.assert_allclose(read.hardware[0].at, [0.01, 0, 0], rtol=1e-12)
    assert [piece.role for piece in (read.body, *read.pieces)] == [Role.BODY, Role.INSERT]


def test_stock_values_come_with_their_band_and_source(tmp_path: Path) -> None:
    read = read_bait(written(tmp_path, "mm", 1.0))
    lead, hook = read.pieces[0].substance, read.hardware[0]
    assert lead is not None
    assert lead.low < lead.density < lead.high
    assert lead.source
    assert hook.low < hook.mass < hook.high
    # A hook displaces its mass over its steel's density.
    assert hook.substance is not None
    assert hook.volume == pytest.approx(hook.mass / hook.substance.density, rel=1e-12)


def test_a_stated_density_has_half_a_percent_either_way() -> None:
    stated = bait(BODY).body.substance
    assert stated is not None
    assert (stated.low, stated.density, stated.high) == pytest.approx((597, 600, 603), rel=1e-12)


def test_side_is_the_baits_own_left() -> None:
    # Facing -x with the back along +z, the left hand points along -y.
    np.testing.assert_allclose(bait(BODY).frame.side, [0, -1, 0], atol=1e-15)
    frame = Frame.of(np.array([0.0, 2, 0]), np.array([0.0, 0.1, 3]))
    np.testing.assert_allclose([frame.nose, frame.back, frame.side], [[0, 1, 0], [0, 0, 1], [-1, 0, 0]], atol=1e-15)


def test_every_unknown_name_is_told() -> None:
    with pytest.raises(InputError) as raised:
        bait(
            BODY,
            void("chamber", shapes.box((0.02, 0.006, 0.006))),
            hardware=[{"name": "hook", "mass": "0.8 g", "material": "carbonsteel", "at": [0, 0, -10], "hangs": True}],
            coat={"thickness": "0.1 mm", "material": "epoxi"},
            balls=[{"chamber": "chamber", "diameter": "5 mm", "count": 1, "material": "bering steel"}],
        )
    assert len(raised.value.faults) == 3
    assert all(fault.next_step for fault in raised.value.faults)


def test_every_mesh_that_is_open_is_told() -> None:
    hole = Surface(BODY.vertices, BODY.faces[1:])
    slug = shapes.box((0.01, 0.004, 0.004))
    with pytest.raises(InputError) as raised:
        bait(hole, insert("slug", Surface(slug.vertices, slug.faces[:-1]), 11.34))
    assert [fault.where for fault in raised.value.faults] == ["body.stl", "slug.stl"]


@pytest.mark.parametrize(
    ("at", "allowed"),
    [
        (vector(0, 0, 0), True),  # in the middle of the body
        (vector(-65, 0, 0), True),  # 25 mm before the nose
        (vector(-75, 0, 0), False),
        (vector(-400, 0, 0), False),
    ],
)
def test_hardware_far_from_the_body_is_refused(at: Floats, allowed: bool) -> None:
    if allowed:
        assert len(bait(BODY, hardware=[hardware("hook", 0.8, at)]).hardware) == 1
        return
    with pytest.raises(InputError, match=r"hardware\[1\] 'hook'.at: the hardware is far from the body"):
        bait(BODY, hardware=[hardware("hook", 0.8, at)])


def test_a_long_body_is_no_fault_of_its_hardware() -> None:
    # In a body of 300 mm the middle is farther from the skin than the reach: what is inside is near all the same.
    thick = shapes.box((0.3, 0.1, 0.1))
    assert len(bait(thick, hardware=[hardware("hook", 0.8, vector(0, 0, 0))]).hardware) == 1


def test_an_unusual_length_asks_and_an_impossible_one_stops() -> None:
    with pytest.raises(InputError, match="no bait's length"):
        bait(BODY.moved(scale=25.4))
    with pytest.raises(InputError, match="inches"):
        bait(BODY.moved(scale=1 / 25.4))


def test_two_shells_apart_are_a_warning_and_both_count() -> None:
    pair = shapes.together(BODY, shapes.box((0.01, 0.01, 0.01), (0, 0, 0.03)))
    read = bait(pair)
    assert only(read.findings, "shells-apart").level == "warning"
    assert shapes.as_trimesh(read.body.surface).volume == pytest.approx(26.6e-6, rel=1e-12)
