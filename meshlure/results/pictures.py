"""What a mould hands on to be drawn: maps of its halves, and its pieces seen from above; mm and degrees."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np

from meshlure.geometry.surface import Surface
from meshlure.making.mould.draftmap import DraftMap
from meshlure.making.mould.relief import seen_from_above
from meshlure.results.numbers import MM
from meshlure.results.study import DraftRegion, HalfMap, Relief


def half_maps(maps: Sequence[DraftMap]) -> tuple[HalfMap, ...]:
    """Return the maps of a mould's halves in mm and degrees."""
    return tuple(
        HalfMap(
            one.half,
            tuple(
                DraftRegion(
                    None if region.low is None else float(np.degrees(region.low)),
                    None if region.high is None else float(np.degrees(region.high)),
                    tuple(ring * MM for ring in region.rings),
                )
                for region in one.regions
            ),
        )
        for one in maps
    )


def reliefs(pieces: Sequence[tuple[str, Surface]]) -> tuple[Relief, ...]:
    """Return pieces seen from above, in mm."""
    seen = [(name, seen_from_above(surface)) for name, surface in pieces]
    return tuple(Relief(name, found.heights * MM, found.pitch * MM) for name, found in seen)
