"""Pieces that stick out of the body or touch nothing: volumes and places of boxes."""

from __future__ import annotations

import numpy as np
import pytest
import shapes
from workbench import Insert, bait, codes, insert, only, vector, void

from meshlure.bait.composition import Composition, compose
from meshlure.findings import Finding, Level
from meshlure.geometry.surface import Surface

BODY = shapes.box((0.08, 0.016, 0.02))


def block(size: tuple[float, float, float], centre: tuple[float, float, float] = (0, 0, 0)) -> Surface:
    return shapes.box(tuple(vector(*size)), tuple(vector(*centre)))


def made(*pieces: Insert) -> Composition:
    return compose(bait(BODY, *pieces))


def places(finding: Finding) -> list[list[float]]:
    """mm."""
    return [[round(value * 1e3, 6) + 0.0 for value in point] for point in finding.where]


def test_each_part_outside_is_told_with_its_own_place() -> None:
    # A wire from 6 mm before the nose to 4 mm behind the tail: its two ends are apart.
    found = made(insert("wire", block((90, 1, 1), (-1, 0, 3)), 7.93))
    warning = only(found.findings, "sticks-out")
    assert warning.level is Level.WARNING
    assert warning.count == 2
    assert places(warning) == [[-43.0, 0.0, 3.0], [42.0, 0.0, 3.0]]
    assert (
        "10 mm3 of 'wire' stick out of the body at 2 places, by up to 6.0 mm: "
        "6 mm3 about (-43.0, 0.0, 3.0) mm; 4 mm3 about (42.0, 0.0, 3.0) mm; it displaces water there"
    ) in warning.message


def test_many_parts_are_counted_and_the_largest_named() -> None:
    teeth = shapes.together(*(block((1, 1, 4.0 + n), (5.0 * n, 0, 10)) for n in range(7)))
    warning = only(made(insert("comb", teeth, 1.2)).findings, "sticks-out")
    assert warning.count == 7
    assert places(warning)[0] == [30.0, 0.0, 12.5]
    assert "3 more" in warning.message


def test_one_part_is_told_in_one_sentence() -> None:
    warning = only(made(insert("lip", block((20, 10, 2), (-45, 0, -6)), 1.2)).findings, "sticks-out")
    assert "300 mm3 of 'lip' stick out of the body, by up to 15.0 mm, about (-47.5, 0.0, -6.0) mm" in warning.message


def test_a_lip_is_meant_to_stick_out() -> None:
    note = only(made(insert("lip", block((20, 10, 2), (-45, 0, -6)), 1.2, lip=True)).findings, "sticks-out")
    assert note.level is Level.NOTE


def test_how_far_an_oblique_part_stands_off() -> None:
    # A rod of 30 x 1 x 1 turned 30 degrees about y through the top face: its far corner by trigonometry.
    angle = np.radians(30)
    turn = np.array([[np.cos(angle), 0, np.sin(angle)], [0, 1, 0], [-np.sin(angle), 0, np.cos(angle)]])
    rod = block((30, 1, 1)).moved(turn, vector(0, 0, 10))
    far = 15 * np.sin(angle) + 0.5 * np.cos(angle)
    warning = only(made(insert("rod", rod, 1.2)).findings, "sticks-out")
    assert f"by up to {far:.1f} mm" in warning.message


def test_a_sealed_void_that_reaches_out_is_a_fault_but_stops_nothing() -> None:
    fault = only(made(void("bore", block((20, 6, 6), (-40, 0, 0)))).findings, "sealed-void-open")
    assert (fault.level, fault.stops) == (Level.FAULT, False)
    assert places(fault) == [[-40.0, 0.0, 0.0]]
    assert "720 mm3 of it" in fault.message


def test_a_sealed_void_flush_with_the_skin_is_open() -> None:
    assert codes(made(void("dimple", block((6, 6, 6), (0, 0, 7)))).findings) == {"sealed-void-open"}


@pytest.mark.parametrize(("gap", "fit", "stops"), [(0.4, None, False), (0.6, None, True), (0.6, "0.2 mm", False)])
def test_half_a_millimetre_and_the_fit_count_as_touching(gap: float, fit: str | None, stops: bool) -> None:
    keys = {} if fit is None else {"fit": fit}
    found = made(insert("fin", block((10, 1, 6), (0, 0, 13 + gap)), 1.2, **keys))
    assert ("touches-nothing" in codes(found.findings)) is stops


def test_a_piece_that_touches_nothing_stops_with_its_place() -> None:
    fault = only(made(insert("slug", block((4, 4, 4), (0, 0, 32)), 11.34)).findings, "touches-nothing")
    assert fault.stops
    assert "it lies 20.0 mm from the body, about (0.0, 0.0, 32.0) mm" in fault.message


def test_a_piece_may_hang_on_a_piece_that_touches() -> None:
    fin = insert("fin", block((10, 1, 6), (0, 0, 13)), 1.2)
    bead, ring = block((2, 2, 2), (0, 0, 17)), block((2, 2, 2), (0, 0, 19.3))
    assert not any(f.stops for f in made(insert("ring", ring, 7.9), insert("bead", bead, 2.5), fin).findings)
    assert any(f.stops for f in made(insert("ring", ring, 7.9), fin).findings)


def test_a_piece_inside_an_outside_piece_is_held() -> None:
    fin = insert("fin", block((10, 4, 6), (0, 0, 13)), 1.2)
    found = made(fin, insert("pin", block((4, 1, 1), (0, 0, 14)), 7.9, replaces=["fin"]))
    assert not any(f.stops for f in found.findings)
    assert found.still_mass.amount == pytest.approx((25600 * 0.6 + 236 * 1.2 + 4 * 7.9) * 1e-6, rel=1e-9)


def test_one_loose_eye_of_a_pair_stops() -> None:
    pair = shapes.together(block((2, 2, 2), (0, 8, 0)), block((2, 2, 2), (0, -12, 0)))
    fault = only(made(insert("eyes", pair, 1.2)).findings, "touches-nothing")
    assert fault.message.startswith("a part of 'eyes' touches nothing: it lies 3.0 mm from the body")
