"""[measured]: what the finished bait was found to weigh."""

from __future__ import annotations

from dataclasses import dataclass

from meshlure.files.keys import Keys
from meshlure.files.sections.water import TEMPERATURES


@dataclass(frozen=True)
class MeasuredSection:
    """Weighings of a copy.

    Attributes
    ----------
    dry : float or None, kg
        Ready to fish, in air.
    in_water : float or None, kg
        Hung wholly under water; negative where it pulls up.
    water : float or None, degC
        Temperature of that water.
    uncoated : float or None, kg
        In air, before paint and clear coat.
    """

    dry: float | None
    in_water: float | None
    water: float | None
    uncoated: float | None


def read_measured(keys: Keys) -> MeasuredSection:
    """Read [measured]."""
    section = MeasuredSection(
        keys.quantity("dry", "mass", positive=True),
        keys.quantity("in_water", "mass", signed=True),
        keys.quantity("water", "temperature", least=TEMPERATURES[0], most=TEMPERATURES[1]),
        keys.quantity("uncoated", "mass", positive=True),
    )
    if section.dry is not None and section.in_water is not None and section.in_water >= section.dry:
        keys.fault(
            "in_water",
            "nothing weighs as much under water as in air",
            f"{section.in_water * 1e3:g} g, and dry {section.dry * 1e3:g} g",
            "less than dry; negative where the bait pulls up",
            "check both weighings",
        )
    if section.dry is section.in_water is section.uncoated is None:
        keys.fault(
            "", "the section holds no weighing", allowed="dry, in_water, uncoated", next_step="add one or remove it"
        )
    keys.close()
    return section
