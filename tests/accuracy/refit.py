"""What the drag estimate makes of a family of published bodies that is left out while its constants are refitted."""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from contextlib import contextmanager
from dataclasses import dataclass
from types import ModuleType

import numpy as np
from published_bodies import PLATES, REVOLVED, Row, profile
from scipy.optimize import least_squares

from meshlure.physics import layer, prism, separation
from meshlure.physics.drag import axial_drag
from meshlure.physics.profile import Profile

MODULES: tuple[ModuleType, ...] = (layer, prism, separation)

ROW_ERROR = 0.15
"""Scatter, in ln of the coefficient, that a published row is trusted to."""


@dataclass(frozen=True)
class Constant:
    """A constant set with the table in sight.

    name : of the module constant, where, and what it is in words
    middle, spread : what is known of it without the table, as a normal distribution
    rows : families of rows that decide it
    """

    name: str
    module: ModuleType
    words: str
    middle: float
    spread: float
    rows: str


DEGREE = float(np.pi / 180)
CONSTANTS = (
    Constant("WAKE_SUCTION", layer, "suction of a free wake", 0.2, 0.1, "cones, disc, hemisphere, spheres, spheroids"),
    Constant("WAKE_SUCTION_TURNED", layer, "more of it where the flow is turned aside", 0.2, 0.1, "same"),
    Constant("REATTACHMENT", layer, "diameters behind a sharp edge to reattachment", 1.5, 0.7, "cylinders end on"),
    Constant("CLOSED_BEFORE", layer, "share closed before recovery counts whole", 0.15, 0.08,
             "tripped sphere, spheroids"),
    Constant("LAMINAR_ANGLE", separation, "closing angle that a laminar layer follows, rad", 5 * DEGREE, 3 * DEGREE,
             "laminar spheres, spheroids"),
    Constant("TRIPPED_ANGLE", separation, "closing angle that a tripped layer follows, rad", 22 * DEGREE, 3 * DEGREE,
             "tripped spheres, spheroids, teardrop"),
)  # fmt: skip


def values() -> list[float]:
    """Return the constants as they stand."""
    return [float(getattr(constant.module, constant.name)) for constant in CONSTANTS]


@contextmanager
def using(numbers: Sequence[float]) -> Iterator[None]:
    """Compute with other constants for a while."""
    kept = values()
    try:
        _put(numbers)
        yield
    finally:
        _put(kept)


def _put(numbers: Sequence[float]) -> None:
    for constant, number in zip(CONSTANTS, numbers, strict=True):
        for module in MODULES:
            if hasattr(module, constant.name):
                setattr(module, constant.name, float(number))


def axial(rows: Sequence[Row]) -> list[Row]:
    """Return the rows along the flow, which the constants were set on."""
    return [row for row in rows if row.case in REVOLVED or row.case in PLATES]


def logs(rows: Sequence[Row], bodies: Mapping[str, Profile]) -> np.ndarray:
    """Return ln of estimate over published value, the layer as in the source."""
    found = [
        axial_drag(bodies[row.case], 1, 1, bodies[row.case].diameter / row.reynolds, row.given).cd / row.cd
        for row in rows
    ]
    return np.log(found)


def refitted(rows: Sequence[Row], bodies: Mapping[str, Profile]) -> np.ndarray:
    """Return the constants that fit rows best, weighed against what is known of them without the table."""
    middle = np.array([constant.middle for constant in CONSTANTS])
    spread = np.array([constant.spread for constant in CONSTANTS])

    def off(steps: np.ndarray) -> np.ndarray:
        with using(np.maximum(middle + spread * steps, 0.05 * middle).tolist()):
            return np.concatenate([logs(rows, bodies) / ROW_ERROR, steps])

    found = least_squares(off, np.zeros(len(middle)), loss="soft_l1", diff_step=[0.05])
    return np.asarray(np.maximum(middle + spread * found.x, 0.05 * middle))


def left_out(rows: Sequence[Row]) -> tuple[dict[str, float], dict[str, np.ndarray]]:
    """Return ln of estimate over published value of axial rows, their family left out, and the refits' constants."""
    rows = axial(rows)
    bodies = {row.case: profile(row.case) for row in rows}
    found: dict[str, float] = {}
    constants: dict[str, np.ndarray] = {"none": refitted(rows, bodies)}
    for family in dict.fromkeys(row.family for row in rows):
        kept, tested = ([row for row in rows if (row.family == family) is out] for out in (False, True))
        constants[family] = refitted(kept, bodies)
        with using(constants[family].tolist()):
            found |= dict(zip((row.case for row in tested), logs(tested, bodies).tolist(), strict=True))
    return found, constants
