"""A plug that is set in before painting takes the coat like the body around it."""

from __future__ import annotations

import pytest
import shapes
from workbench import bait, coat, codes, insert

from meshlure.bait.composition import compose
from meshlure.findings import Level
from meshlure.geometry.solids import Solid

BODY = Solid.of(shapes.box((0.06, 0.02, 0.02)))
HOLE = Solid.of(shapes.box((0.01, 0.008, 0.006), (0.025, 0.0, 0.0)))
PLUG = shapes.box((0.01, 0.00804, 0.00604), (0.025, 0.0, 0.0))
"""A hole of 8 x 6 mm into an end face, and a plug larger by 0.02 mm all round, flush with the face."""


@pytest.mark.parametrize(("coated", "bare"), [(True, 0.0), (False, 8.04 * 6.04)])
def test_the_coat_covers_a_plug_that_is_coated(coated: bool, bare: float) -> None:
    made = compose(bait(BODY.less(HOLE).surface(), insert("plug", PLUG, 0.6, coated=coated), coat=coat(0.2e-3, 1.15)))
    # The box's skin: 2 (60 x 20 + 60 x 20 + 20 x 20) mm2.
    area = 2 * (1200 + 1200 + 400) - bare
    assert made.skin.painted * 1e6 == pytest.approx(area, rel=1e-9)
    (layer,) = (part for part in made.parts if part.name == "coat")
    assert layer.mass.amount * 1e3 == pytest.approx(area * 0.2 * 1.15e-3, rel=1e-9)
    assert made.still_mass.amount * 1e3 == pytest.approx(24 * 0.6 + area * 0.2 * 1.15e-3, rel=1e-6)


def test_a_coated_plug_outside_the_body_is_as_it_should_be() -> None:
    found = compose(bait(BODY.less(HOLE).surface(), insert("plug", PLUG, 0.6, coated=True))).findings
    assert codes(found) == {"sits-outside"}
    assert [finding.level for finding in found] == [Level.NOTE]
