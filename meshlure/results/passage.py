"""The result tree's account of form and drag."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

from meshlure.geometry.surface import Surface
from meshlure.physics.drag import Drag
from meshlure.physics.form import fineness, leading_bluffness, sphericity
from meshlure.physics.passage import Passage
from meshlure.results.numbers import MM2

Tree = dict[str, Any]


def form(passage: Passage, outer: Surface, volume: float, trailing: dict[str, float]) -> Tree:
    """Return the measures of form.

    Parameters
    ----------
    passage : Passage
    outer : Surface
        Outer skin, lips in.
    volume : float, m3
        Within it.
    trailing : dict of float
        Share of the largest section left open to the wake, by the end that leads.
    """
    return {
        "fineness": fineness(passage.profiles["nose"]),
        "surface_mm2": outer.area * MM2,
        "sphericity": sphericity(volume, outer.area),
        **{
            f"{end}_first": {
                "leading_bluffness": leading_bluffness(profile),
                "trailing_bluffness": trailing[end],
                "cup": passage.cups[end],
            }
            for end, profile in passage.profiles.items()
        },
    }


def drag(rows: Sequence[tuple[str, str, bool, Drag]]) -> list[Tree]:
    """Return the drag estimates.

    Parameters
    ----------
    rows : sequence of (fluid, leads, headline, Drag)
    """
    return [
        {
            "fluid": fluid,
            "leads": leads,
            "layer": found.layer,
            "headline": headline,
            "speed_m_s": found.speed,
            "reynolds_length": found.reynolds_length,
            "reynolds_diameter": found.reynolds_diameter,
            "cd": found.cd,
            "cd_low": found.cd_low,
            "cd_high": found.cd_high,
            "frontal_mm2": found.frontal_area * MM2,
            "drag_area_mm2": found.drag_area * MM2,
            "drag_n": found.force,
            "parts": {
                name: getattr(found.parts, name) * MM2
                for name in ("friction", "forebody", "base", "tail", "lip", "hooks", "eyes")
            },
            "words": found.words,
        }
        for fluid, leads, headline, found in rows
    ]
