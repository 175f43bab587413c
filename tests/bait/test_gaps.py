"""The gap between an insert and its pocket, weighed by hand: a box grown on every side is a box."""

from __future__ import annotations

import numpy as np
import pytest
import shapes
from workbench import bait, codes, insert, vector

from meshlure.bait.composition import compose
from meshlure.bait.pieces import Role
from meshlure.geometry.blocks import BlockIndex
from meshlure.geometry.surface import Surface

BODY = shapes.box((0.08, 0.016, 0.02))
WHOLE = 25600e-9
GLUE = 1150.0
"""kg/m3. Stock row "epoxy clear coat", a usual datasheet value from memory."""


def block(size: tuple[float, float, float], centre: tuple[float, float, float]) -> Surface:
    return shapes.box(tuple(vector(*size)), tuple(vector(*centre)))


def test_a_gap_without_glue_is_air() -> None:
    at = vector(-20, 1, -3)
    made = compose(bait(BODY, insert("slug", block((10, 4, 6), (-20, 1, -3)), 11.34, fit="0.3 mm")))
    pocket = 10.6e-3 * 4.6e-3 * 6.6e-3
    mass = made.still_mass
    assert mass.amount == pytest.approx((WHOLE - pocket) * 600 + 240e-9 * 11340, rel=1e-9)
    np.testing.assert_allclose(mass.first, at * (240e-9 * 11340 - pocket * 600), rtol=1e-6)
    gap = next(part for part in made.parts if part.name == "gap round slug")
    assert gap.role is Role.VOID
    assert gap.volume == pytest.approx(pocket - 240e-9, rel=1e-6)
    # Sealed inside: the water is pushed aside as before.
    assert BlockIndex.build(made.skin.surface).volume == pytest.approx(WHOLE, rel=1e-12)
    assert not codes(made.findings)


def test_glue_fills_the_gap_and_weighs() -> None:
    made = compose(
        bait(BODY, insert("slug", block((10, 4, 6), (-20, 1, -3)), 11.34, fit="0.3 mm", glue="epoxy clear coat"))
    )
    pocket = 10.6e-3 * 4.6e-3 * 6.6e-3
    expected = (WHOLE - pocket) * 600 + 240e-9 * 11340 + (pocket - 240e-9) * GLUE
    assert made.still_mass.amount == pytest.approx(expected, rel=1e-9)
    assert not codes(made.findings)


def test_a_gap_that_opens_to_the_outside_is_water_unless_glued() -> None:
    # The slug stands 5 mm out of the belly and 5 mm in it: the slot round it is open below.
    slug = block((10, 4, 10), (0, 0, -10))
    slot = (10.6e-3 * 4.6e-3 - 40e-6) * 5e-3 + 10.6e-3 * 4.6e-3 * 0.3e-3
    loose = compose(bait(BODY, insert("slug", slug, 11.34, fit="0.3 mm")))
    assert "gap-open" in codes(loose.findings)
    volume = BlockIndex.build(loose.skin.surface).volume
    assert volume == pytest.approx(WHOLE + 200e-9 - slot, rel=1e-6)
    assert loose.still_mass.amount == pytest.approx((WHOLE - 200e-9 - slot) * 600 + 400e-9 * 11340, rel=1e-6)
    glued = compose(bait(BODY, insert("slug", slug, 11.34, fit="0.3 mm", glue="epoxy clear coat")))
    assert "gap-open" not in codes(glued.findings)
    assert BlockIndex.build(glued.skin.surface).volume == pytest.approx(WHOLE + 200e-9, rel=1e-6)
    expected = (WHOLE - 200e-9 - slot) * 600 + 400e-9 * 11340 + slot * GLUE
    assert glued.still_mass.amount == pytest.approx(expected, rel=1e-6)


def test_another_insert_runs_through_the_gap() -> None:
    # A wire through the pocket's gap beside the slug takes its own room from the glue.
    slug, wire = block((10, 4, 6), (0, 0, 0)), block((60, 0.4, 0.4), (0, 2.2, 0))
    made = compose(
        bait(
            BODY,
            insert("wire", wire, 7.93),
            insert("slug", slug, 11.34, fit="0.5 mm", glue="epoxy clear coat"),
        )
    )
    assert not codes(made.findings)
    rod = 60 * 0.4 * 0.4 * 1e-9
    within = 11 * 0.4 * 0.4 * 1e-9
    pocket = 11e-3 * 5e-3 * 7e-3
    body = WHOLE - pocket - (rod - within)
    expected = body * 600 + 240e-9 * 11340 + rod * 7930 + (pocket - 240e-9 - within) * GLUE
    assert made.still_mass.amount == pytest.approx(expected, rel=1e-9)
