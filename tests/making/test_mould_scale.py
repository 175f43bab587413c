"""The scale of a mould, against the definition of moulding shrinkage in ISO 294-4."""

from __future__ import annotations

from typing import Any

import numpy as np
import pytest
import shapes
from workbench import bait, insert, vector

from meshlure.files.sections.mould import MouldSection
from meshlure.geometry.surface import Surface
from meshlure.making.mould.bench import Bench
from meshlure.making.mould.plug import plug
from meshlure.making.mould.scale import Scale

BODY = shapes.ellipsoid((0.03, 0.007, 0.01), 4)


def section(**keys: Any) -> MouldSection:
    return MouldSection(**keys)


def same(share: float) -> tuple[float, float, float]:
    return share, share, share


def test_each_shrinkage_is_what_iso_294_4_calls_one() -> None:
    # S_M = (l_cavity - l_part)/l_cavity, from the standard's definition: a bar of 80 mm out of a cavity of 80.32 mm.
    shrinkage = (80.32 - 80.0) / 80.32
    assert Scale.of(section(shrink_resin=same(shrinkage))).part == pytest.approx(80.32 / 80.0, rel=1e-12)


def test_one_step_after_the_other() -> None:
    # By hand: 1/(0.998 x 0.997 x 0.996) = 1.009055, cubed 1.027412; the seats 1/(0.998 x 0.997) = 1.005019.
    scale = Scale.of(section(shrink_print=same(0.002), shrink_silicone=same(0.003), shrink_resin=same(0.004)))
    assert scale.part == pytest.approx(1.009055, abs=1e-6)
    assert scale.volume == pytest.approx(1.027412, abs=2e-6)
    assert scale.linear == pytest.approx(1.009055, abs=1e-6)
    assert scale.seat == pytest.approx(1.005019, abs=1e-6)
    assert scale.findings() == []


def test_a_master_shrinks_back_to_the_drawing() -> None:
    shares = {"shrink_print": (0.002, 0.003, 0.006), "shrink_silicone": same(0.004), "shrink_resin": (0.01, 0.0, 0.02)}
    given = bait(BODY)
    made = plug(given, Bench.of(section(**shares), given.frame))
    master = shapes.as_trimesh(made.body.surface())
    # One step after the other, each a stretch of the part along mesh axes; the bench is turned back first.
    points = master.vertices @ made.bench.turn
    for share in shares.values():
        points = points * (1 - np.array(share))
    assert np.ptp(points, axis=0) == pytest.approx(np.ptp(BODY.vertices, axis=0), rel=1e-12)
    assert shapes.as_trimesh(Surface(points, master.faces)).volume == pytest.approx(
        shapes.as_trimesh(BODY).volume, rel=1e-9
    )


@pytest.mark.parametrize(("resin", "odd"), [(0.0, False), (0.0196, False), (0.0197, True), (0.05, True)])
def test_a_scale_beyond_two_percent_is_asked_about(resin: float, odd: bool) -> None:
    # 1/(1 - 0.0196) = 1.01999, 1/(1 - 0.0197) = 1.02010.
    found = Scale.of(section(shrink_resin=same(resin))).findings()
    assert [(f.code, f.level.value) for f in found] == ([("mould-scale", "warning")] if odd else [])


def test_a_real_wire_keeps_its_size_in_its_seat() -> None:
    # A wire of 1 mm across, 8 mm of it outside; resin shrinks by 3%, print by 1%.
    wire = shapes.box(tuple(vector(16, 1, 1)), tuple(vector(30, 0, 0)))
    given = bait(BODY, insert("wire", wire, 7.9, fit="0.2 mm"))
    shares = section(shrink_print=same(0.01), shrink_resin=same(0.03))
    made = plug(given, Bench.of(shares, given.frame))
    (seat,) = made.seats
    size = np.sort(np.ptp(seat.shape.bounds, axis=0)) * 1e3
    assert size == pytest.approx(np.array([1, 1, 16]) / 0.99 + 0.4, rel=1e-9)
    # Its middle goes where the resin's middle goes.
    middle = made.bench.drawn(seat.shape.bounds.mean(axis=0))
    assert middle * 1e3 == pytest.approx([30, 0, 0], abs=1e-9)
    assert np.ptp(made.body.bounds, axis=0)[0] * 1e3 == pytest.approx(60 / 0.99 / 0.97, rel=1e-9)


def test_without_a_fit_a_seat_has_a_tenth_of_a_millimetre() -> None:
    wire = shapes.box(tuple(vector(16, 1, 1)), tuple(vector(30, 0, 0)))
    given = bait(BODY, insert("wire", wire, 7.9))
    (seat,) = plug(given, Bench.of(section(), given.frame)).seats
    assert np.sort(np.ptp(seat.shape.bounds, axis=0)) * 1e3 == pytest.approx([1.2, 1.2, 16.2], rel=1e-9)
