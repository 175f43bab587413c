"""The ground of the parting plane: how far a place is from what stands on the boards already."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from meshlure.geometry.solids import Solid
from meshlure.geometry.surface import Floats
from meshlure.making.mould.shadow import Shadow

if TYPE_CHECKING:
    from scipy.spatial import cKDTree

PITCH = 0.25e-3
"""m between the columns that stand for a solid's footprint."""


@dataclass(frozen=True, eq=False)
class Ground:
    """Footprints in the parting plane.

    Attributes
    ----------
    tree : cKDTree or None
        Of places that something stands on; None where nothing does.
    slack : float, m
        By how much a distance to these places may be more than that to the footprint.
    """

    tree: cKDTree[None] | None
    slack: float

    @classmethod
    def of(cls, solid: Solid | None) -> Ground:
        """Return the ground that a solid on the bench takes."""
        from scipy.spatial import cKDTree

        if solid is None or solid.empty:
            return cls(None, 0.0)
        shadow = Shadow.of(solid.surface(), PITCH)
        places = np.column_stack(np.divmod(shadow.cell, shadow.shape[1])) * shadow.pitch + shadow.origin
        return cls(cKDTree(places) if len(places) else None, shadow.pitch * float(np.sqrt(0.5)))

    def away(self, points: Floats) -> Floats:
        """Return how far (n, 2) points, m, are from the footprint at least, (n,) array, m; infinite from nothing."""
        if self.tree is None:
            return np.full(len(points), np.inf)
        return np.asarray(self.tree.query(points)[0]) - self.slack
