"""[measured]: what a copy was found to weigh, and to displace."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Final

from meshlure.files.defaults import SCALE_STEP
from meshlure.files.keys import Keys
from meshlure.files.sections.water import SALINITIES, TEMPERATURES

COARSEST_STEP: Final = 10e-3
"""kg. A kitchen scale that shows tens of grams."""


@dataclass(frozen=True)
class MeasuredSection:
    """Weighings of a copy; None where one was not made.

    Attributes
    ----------
    dry : float or None, kg
        Ready to fish, in air.
    in_water : float or None, kg
        Hung wholly under water, ready to fish; negative where it pulls up. At most one of in_water and reserve is
        there.
    reserve : float or None, kg
        What holds it neutral: the weight under water of what was hung on it, negative where it had to be held up.
    water : float or None, degC
        Temperature of that water; None where it is the bait's own water.
    salinity : float or None, g/kg
        Of that water; None where it was not stated: fresh beside a temperature, else the bait's own water.
    uncoated : float or None, kg
        The body with its inserts and balls in air, before paint and clear coat, hooks and everything else that is
        [[hardware]] off.
    coat : float or None, kg
        What the coat alone added.
    step : float, kg
        What the scale shows at the least.
    assumed : tuple of str
        ("step",) where it was not stated.
    """

    dry: float | None
    in_water: float | None
    reserve: float | None
    water: float | None
    salinity: float | None
    uncoated: float | None
    coat: float | None
    step: float
    assumed: tuple[str, ...]


def read_measured(keys: Keys) -> MeasuredSection:
    """Read [measured]."""
    keys.one_of("in_water", "reserve", required=False)
    section = MeasuredSection(
        keys.quantity("dry", "mass", positive=True),
        keys.quantity("in_water", "mass", signed=True),
        keys.quantity("reserve", "mass", signed=True),
        keys.quantity("water", "temperature", least=TEMPERATURES[0], most=TEMPERATURES[1]),
        keys.quantity("salinity", "salinity", least=SALINITIES[0], most=SALINITIES[1]),
        keys.quantity("uncoated", "mass", positive=True),
        keys.quantity("coat", "mass", positive=True),
        keys.assumed_quantity("step", "mass", SCALE_STEP, positive=True, most=COARSEST_STEP),
        tuple(keys.assumed),
    )
    _check(keys, section)
    keys.close()
    return section


def _check(keys: Keys, section: MeasuredSection) -> None:
    """Put down weighings that cannot all be right, or that none was made."""
    weighed = [section.dry, section.in_water, section.reserve, section.uncoated, section.coat]
    if all(value is None for value in weighed):
        allowed = "dry, in_water, reserve, uncoated, coat"
        keys.fault("", "the section holds no weighing", allowed=allowed, next_step="add one or remove it")
    dry = section.dry
    if dry is not None and section.in_water is not None and section.in_water >= dry:
        keys.fault(
            "in_water",
            "nothing weighs as much under water as in air",
            f"{section.in_water * 1e3:g} g, and dry {dry * 1e3:g} g",
            "less than dry; negative where the bait pulls up",
            "check both weighings",
        )
    if dry is not None and section.reserve is not None and -section.reserve >= dry:
        keys.fault(
            "reserve",
            "nothing weighs as much under water as in air",
            f"{section.reserve * 1e3:g} g, and dry {dry * 1e3:g} g",
            f"above {-dry * 1e3:g} g; positive where the bait pulls up",
            "check both weighings",
        )
    for key, value in (("uncoated", section.uncoated), ("coat", section.coat)):
        if dry is not None and value is not None and value >= dry:
            found = f"{value * 1e3:g} g, and dry {dry * 1e3:g} g"
            keys.fault(key, "a part weighs as much as the whole", found, "less than dry", "check both weighings")
    if section.salinity is not None and section.water is None:
        step = "add water = '20 degC'"
        keys.fault("salinity", "the water that it was weighed in has no temperature", "", "beside water", step)
