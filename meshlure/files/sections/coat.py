"""[coat]: paint and clear coat over the body's skin."""

from __future__ import annotations

from dataclasses import dataclass

from meshlure.files.keys import Keys
from meshlure.files.sections.substance import Substance, read_substance

THICKEST = 5e-3
"""m."""


@dataclass(frozen=True)
class CoatSection:
    """An even coat.

    Attributes
    ----------
    thickness : float, m
    substance : Substance
    """

    thickness: float
    substance: Substance


def read_coat(keys: Keys) -> CoatSection:
    """Read [coat]."""
    section = CoatSection(
        keys.asked_quantity("thickness", "length", "0.15 mm", positive=True, most=THICKEST),
        read_substance(keys) or Substance(),
    )
    keys.close()
    return section
