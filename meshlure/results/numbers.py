"""Numbers for the result tree: from SI to mm, g and degrees, as plain Python values."""

from __future__ import annotations

from typing import Any

import numpy as np
from numpy.typing import ArrayLike

MM, MM2, MM3 = 1e3, 1e6, 1e9
GRAM, G_MM, G_MM2 = 1e3, 1e6, 1e9


def plain(values: ArrayLike, factor: float = 1.0) -> Any:
    """Return a number or an array, times a factor, as Python floats and lists; a rounding -0.0 becomes 0.0."""
    return (np.asarray(values, dtype=np.float64) * factor + 0.0).tolist()


def degrees(angle: float | None) -> float | None:
    """Return an angle in degrees, None for None."""
    return None if angle is None else float(np.degrees(angle)) + 0.0


def to_fives(angle: float) -> float:
    """Return an angle in degrees rounded to a step of five, as for a posture that a millimetre turns by over twenty."""
    return round(angle / 5) * 5.0 + 0.0
