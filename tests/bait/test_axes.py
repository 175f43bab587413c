"""When a body raises the question whether its axes are stated as it lies, and when it does not: by the extents and cuts
of boxes and ellipsoids, which are known."""

from __future__ import annotations

import numpy as np
import pytest
import shapes

from meshlure.bait.axes import axis_findings, rest_findings
from meshlure.bait.halves import half_findings
from meshlure.bait.pieces import Frame
from meshlure.geometry.solids import Solid
from meshlure.geometry.surface import Surface

LEVEL = Frame.of(np.array([-1.0, 0, 0]), np.array([0, 0, 1.0]))


def turned(surface: Surface, rotation: np.ndarray) -> Surface:
    return Surface(surface.vertices @ rotation.T, surface.faces)


@pytest.mark.parametrize(("deep", "asked"), [(1.0, False), (1.2, False), (1.3, True)])
def test_a_body_may_be_somewhat_deeper_than_long(deep: float, asked: bool) -> None:
    body = shapes.box((0.05, 0.01, 0.05 * deep))
    found = axis_findings(body, LEVEL, "body")
    assert [f.code for f in found] == (["nose-not-lengthwise"] if asked else [])
    if asked:
        assert "50 mm long from nose to tail, but 65 mm to the back" in found[0].message
        assert 'nose = "-x"' in found[0].message


def test_a_nose_along_no_axis_is_told_by_its_numbers() -> None:
    slanting = Frame.of(np.array([0.6, 0.8, 0.0]), np.array([0, 0, 1.0]))
    (found,) = axis_findings(shapes.box((0.01, 0.01, 0.1)), slanting, "body")
    assert "nose = [0.6, 0.8, 0]" in found.message


@pytest.mark.parametrize(("degrees", "asked"), [(0.0, False), (90.0, False), (119.0, False), (121.0, True)])
def test_a_back_that_is_down_at_rest_is_asked_about(degrees: float, asked: bool) -> None:
    turn = np.radians(degrees)
    up = np.array([0.0, np.sin(turn), np.cos(turn)])
    assert bool(rest_findings(up, LEVEL)) is asked
    assert rest_findings(None, LEVEL) == []


def half(cut: float) -> Surface:
    """The part of an ellipsoid of 30 x 8 x 10 mm half axes that lies beyond y = cut, m."""
    whole = shapes.sphere(0.01, 4)
    stretched = Surface(whole.vertices * [3.0, 0.8, 1.0], whole.faces)
    return Solid.of(stretched).split(np.array([0.0, 1.0, 0.0]), cut)[0].surface()


@pytest.mark.parametrize("tilt", [0.0, 0.3])
def test_half_a_body_is_asked_about_however_it_lies(tilt: float) -> None:
    turn = np.array([[np.cos(tilt), -np.sin(tilt), 0], [np.sin(tilt), np.cos(tilt), 0], [0, 0, 1.0]])
    frame = Frame.of(turn @ LEVEL.nose, turn @ LEVEL.back)
    (found,) = half_findings(turned(half(0.0), turn), frame, "body")
    assert found.code == "half-body"
    # The ellipse's area, pi 30 10, as far as the facets hold it.
    area = float(found.message.split(" mm2")[0].rsplit(" ", 1)[1])
    assert area == pytest.approx(np.pi * 300, rel=0.01)
    assert ("y = 0 mm" in found.message) is (tilt == 0.0)


def test_what_was_drawn_flat_is_not_asked_about() -> None:
    # Flat on both sides; flat on one with a seventh of its depth gone: at 6 mm of 8 the cut has 44% of the side view.
    assert half_findings(shapes.box((0.06, 0.01, 0.02)), LEVEL, "body") == []
    low = Solid.of(half(-0.006)).surface()
    assert half_findings(low, LEVEL, "body") == []
