"""The result tree's account of sinking, rising and towing."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

import numpy as np

from meshlure.physics.course import Course
from meshlure.physics.sinking import Sinking
from meshlure.physics.tow import Tow
from meshlure.results.numbers import GRAM, degrees

Tree = dict[str, Any]


def sinking(found: Sinking, rows: Sequence[Tow]) -> Tree:
    """Return the tree of a bait's motion under water.

    Parameters
    ----------
    found : Sinking
    rows : sequence of Tow
    """
    return {
        "suspends": bool(found.suspends),
        "speed_m_s": found.speed + 0.0,
        "speed_low_m_s": found.speed_low + 0.0,
        "speed_high_m_s": found.speed_high + 0.0,
        "attitude_nose_up_deg": degrees(found.nose_up),
        "overturned": bool(found.overturned),
        "glide_deg": degrees(found.glide),
        "seconds_to_1m": found.seconds[0],
        "seconds_to_3m": found.seconds[1],
        "settles": bool(found.settles),
        "starts_agree": bool(found.same),
        "starts": [_course(course) for course in found.courses],
        "words": _words(found),
        "tow": [
            {
                "speed_m_s": row.speed,
                "drag_n": row.whole,
                "drag_low_n": row.low,
                "drag_high_n": row.high,
                "drag_gf": row.kilogram_force * GRAM,
                "parts": {"body_n": row.body, "lip_n": row.lip, "hooks_n": row.hooks, "eyes_n": row.eyes},
            }
            for row in rows
        ],
    }


def _course(course: Course) -> Tree:
    return {
        "start": course.start,
        "speed_m_s": course.speed + 0.0,
        "attitude_nose_up_deg": degrees(course.nose_up),
        "overturned": bool(course.overturned),
        "glide_deg": degrees(course.glide),
        "seconds_to_1m": course.seconds[0],
        "seconds_to_3m": course.seconds[1],
        "settles": bool(course.settles),
    }


def _words(found: Sinking) -> str:
    """Say how it moves under water in a sentence."""
    if found.suspends:
        return "Suspends: it neither sinks nor rises by more than the numbers can tell."
    verb = "Sinks" if found.speed > 0 else "Rises"
    low, high = sorted((abs(found.speed_low), abs(found.speed_high)))
    speed = f"{verb} at {abs(found.speed) * 100:.0f} cm/s ({low * 100:.0f} to {high * 100:.0f})"
    nose = np.degrees(found.nose_up)
    level = "level" if abs(nose) < 0.5 else f"nose {abs(nose):.0f}\N{DEGREE SIGN} {'up' if nose > 0 else 'down'}"
    glide = abs(np.degrees(found.glide))
    way = (
        ""
        if glide < 1
        else f", {glide:.0f}\N{DEGREE SIGN} off the vertical towards the {'nose' if found.glide > 0 else 'tail'}"
    )
    swings = "" if found.settles else "; it does not settle, these are means of its swings"
    over = ", belly up" if found.overturned else ""
    return f"{speed}, {level}{over}{way}{swings}."
