"""[target]: how the finished bait is to behave, to be reached by its ballast or by its body's density."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass
from typing import Final

from meshlure.files.keys import Keys
from meshlure.units import grams

BEHAVIOURS: Final = ("floats", "suspends", "sinks")
VARIED: Final = ("ballast", "body density")
FASTEST_SINKING: Final = 5.0
"""m/s. A lead ball of 30 mm sinks no faster: slips of the unit lie beyond."""

# A right angle in degrees is rounded when it is turned into radians.
_RIGHT_ANGLE = math.pi / 2 * (1 + 1e-12)
_ON_END = math.pi / 2 * (1 - 1e-12)
_HOW = ("reserve", "submerged", "sink")


@dataclass(frozen=True)
class TargetSection:
    """What is wanted; None where nothing is asked.

    Attributes
    ----------
    behaviour : str or None
        "floats", "suspends" or "sinks".
    reserve : float or None, kg
        Displaced water less mass, bait wholly under water; negative where it sinks. At most one of reserve, submerged
        and sink is there.
    submerged : float or None
        Share of the whole displacement that lies under water afloat, between 0 and 1.
    sink : float or None, m/s
        Steady speed of sinking.
    nose_up : float or None, rad
        Of the nose above the horizontal: at rest where the bait floats, else hanging in the water.
    lean : float or None, rad
        Towards the bait's own right, in the same posture.
    vary : str
        What is solved for: "ballast", or "body density", the ballast then standing as it is.
    """

    behaviour: str | None
    reserve: float | None
    submerged: float | None
    sink: float | None
    nose_up: float | None
    lean: float | None
    vary: str


def read_target(keys: Keys) -> TargetSection:
    """Read [target]."""
    keys.one_of(*_HOW, required=False)
    section = TargetSection(
        keys.choice("behaviour", BEHAVIOURS),
        keys.quantity("reserve", "mass", signed=True),
        keys.share("submerged", inside=True) if keys.stated("submerged") else None,
        keys.quantity("sink", "speed", positive=True, most=FASTEST_SINKING),
        keys.quantity("nose_up", "angle", least=-_RIGHT_ANGLE, most=_RIGHT_ANGLE),
        keys.quantity("lean", "angle", least=-_RIGHT_ANGLE, most=_RIGHT_ANGLE),
        keys.choice("vary", VARIED) or "ballast",
    )
    stated = [key for key in _HOW if getattr(section, key) is not None]
    if len(stated) < 2:  # more than one is told already, and which of them is meant is not known
        _check(keys, section, stated)
    if section.lean is not None and section.nose_up is not None and abs(section.nose_up) > _ON_END:
        found = f"nose_up {math.degrees(section.nose_up):.4g} degrees"
        keys.fault("lean", "a bait that stands on end has no lean", found, "a nose_up short of it", "remove lean")
    keys.close()
    return section


def _check(keys: Keys, section: TargetSection, stated: Sequence[str]) -> None:
    """Put down what cannot be meant together, or that nothing is asked."""
    match section.behaviour:
        case None if not stated and section.nose_up is None and section.lean is None:
            allowed = "behaviour, reserve, submerged, sink, nose_up, lean"
            keys.fault("", "the section asks for nothing", "", allowed, "add one or remove the section")
        case "floats" if not stated:
            what, step = "nothing says how much it floats", "add reserve = '1.2 g'"
            keys.fault("", what, "", "reserve, above 0, or submerged", step)
        case "sinks" if not stated:
            what, step = "nothing says how much it sinks", "add reserve = '-2 g'"
            keys.fault("", what, "", "reserve, below 0, or sink", step)
        case "floats" if section.sink is not None:
            _clash(keys, section, "sink", "what floats does not sink", "reserve, above 0, or submerged")
        case "sinks" if section.submerged is not None:
            _clash(keys, section, "submerged", "what sinks is wholly under water", "reserve, below 0, or sink")
        case "suspends" if section.submerged is not None:
            _clash(keys, section, "submerged", "what suspends is wholly under water", "reserve, or none of the three")
        case "suspends" if section.sink is not None:
            _clash(keys, section, "sink", "what suspends does not sink", "reserve, or none of the three")
        case "floats" if section.reserve is not None and section.reserve <= 0.0:
            _clash(keys, section, "reserve", "what floats has a reserve above 0", "above 0 g")
        case "sinks" if section.reserve is not None and section.reserve >= 0.0:
            _clash(keys, section, "reserve", "what sinks has a reserve below 0", "below 0 g")


def _clash(keys: Keys, section: TargetSection, key: str, what: str, allowed: str) -> None:
    value = getattr(section, key)
    shown = grams(value) if key == "reserve" else f"{value:g} m/s" if key == "sink" else f"{value:g}"
    step = f"change behaviour, or {'the sign' if key == 'reserve' else f'remove {key}'}"
    keys.fault(key, what, f"behaviour {section.behaviour!r}, {key} {shown}", allowed, step)
