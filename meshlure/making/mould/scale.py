"""How much larger than the drawing a master is made, so that the casting comes out as drawn."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Final

import numpy as np

from meshlure.files.sections.mould import MouldSection
from meshlure.findings import Finding, Level
from meshlure.geometry.surface import Floats

USUAL: Final = (1.0, 1.02)
"""Scales outside this range are asked about: common practice, no source."""


@dataclass(frozen=True, eq=False)
class Scale:
    """Lengths in the master over lengths in the drawing, along mesh x, y, z.

    Attributes
    ----------
    part : (3,) array
        Of all that the resin forms: it shrinks in print, rubber and resin.
    seat : (3,) array
        Of the rubber's seats for real wire, pins and ballast: these shrink in print and rubber only.

    Notes
    -----
    A moulding shrinkage is S = (l_cavity - l_part)/l_cavity, so a cavity is l_part/(1 - S); one step after the other,
    the master is 1/((1 - S_print)(1 - S_silicone)(1 - S_resin)) times the drawing. Post-shrinkage, over days, counts
    where it was in the S that was measured.

    References
    ----------
    ISO 294-4, Plastics: injection moulding of test specimens, part 4: determination of moulding shrinkage.
    """

    part: Floats
    seat: Floats

    @classmethod
    def of(cls, section: MouldSection) -> Scale:
        """Return the scale that a mould's shrinkages call for."""
        kept = [1 - np.array(share) for share in (section.shrink_print, section.shrink_silicone, section.shrink_resin)]
        return cls(1 / (kept[0] * kept[1] * kept[2]), 1 / (kept[0] * kept[1]))

    @property
    def volume(self) -> float:
        """Volume of the master over that of the drawing."""
        return float(np.prod(self.part))

    @property
    def linear(self) -> float:
        """Side of a cube in the master over that in the drawing, of the same volume: the axes' geometric mean."""
        return float(self.volume ** (1 / 3))

    def findings(self) -> list[Finding]:
        """Return a warning where the scale is not a usual one."""
        low, high = USUAL
        odd = [k for k in self.part if not low <= round(float(k), 6) <= high]
        if not odd:
            return []
        told = ", ".join(f"{k:.4f}" for k in self.part) if np.ptp(self.part) > 0 else f"{self.part[0]:.4f}"
        return [
            Finding(
                code="mould-scale",
                level=Level.WARNING,
                message=f"the master is made {told} times the drawing; usual is {low:.3f} to {high:.3f}",
                advice="check the shrinkages: print, silicone and resin shrink by a few tenths of a percent each, "
                "and one that the drawing already allows for counts twice",
            )
        ]
