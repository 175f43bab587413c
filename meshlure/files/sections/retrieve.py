"""[retrieve]: how fast the bait is drawn through the water."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Final

from meshlure.files.defaults import RETRIEVE_SPEEDS
from meshlure.files.keys import Keys

FASTEST: Final = 100.0
"""m/s. Nothing thrown or drawn by hand is faster."""


@dataclass(frozen=True)
class RetrieveSection:
    """Speeds of the retrieve.

    Attributes
    ----------
    speeds : tuple of float, m/s
        In the order asked.
    assumed : tuple of str
        ("speeds",) where they were not stated and stand at their defaults.
    """

    speeds: tuple[float, ...]
    assumed: tuple[str, ...]


def read_retrieve(keys: Keys) -> RetrieveSection:
    """Read [retrieve]; an empty one has the usual speeds."""
    speeds = keys.quantities("speeds", "speed", '["0.5 m/s", "1 m/s"]', positive=True, most=FASTEST)
    keys.close()
    return RetrieveSection(RETRIEVE_SPEEDS, ("speeds",)) if speeds is None else RetrieveSection(speeds, ())
