"""The lengths, angles and shares below which a difference does not count, each with its reason."""

from __future__ import annotations

from typing import Final

TOUCH_GAP: Final = 0.5e-3
"""m. A piece farther than this from every other piece touches nothing: glue, paint and a loose fit stay below it."""

HARDWARE_REACH: Final = 30e-3
"""m. Hardware whose place is farther than this from the body is taken for a slip of a coordinate or a unit."""

VOLUME_SHARE: Final = 1e-6
"""Share of a piece's volume below which an overlap or a part outside is rounding, not design."""

NEUTRAL_HEIGHT: Final = 0.05e-3
"""m. A metacentric height below this is no preference: the posture is neutral."""

CENTRES_MEET: Final = 0.1e-3
"""m. A hanging bait whose centres of gravity and buoyancy are closer than this has no preferred attitude."""

NOSE_VERTICAL: Final = 5.0
"""degrees. Closer to the vertical than this, a nose has no lean, and fore-aft no direction."""

COARSE_SHARE: Final = 0.005
"""Share of a body's volume that its facets may leave out before a finer export is asked for: half a percent of a
floating bait's displacement is as much as a careful maker's weighing is off."""

COARSE_ANGLE: Final = 20.0
"""degrees per mm of the centre of gravity. Beyond it an angle is printed in steps of 5 degrees."""

SUSPENDS_SHARE: Final = 0.002
"""Share of the displaced mass within which a reserve counts as none: the bait suspends."""

SHARP_EDGE: Final = 30.0
"""degrees between the normals of two faces beyond which their edge was drawn sharp, not faceted."""

LENGTH_USUAL: Final = (15e-3, 400e-3)
"""m. A bait's length outside this range is asked about."""

LENGTH_POSSIBLE: Final = (5e-3, 1.5)
"""m. A bait's length outside this range stops the run."""

SAME_LENGTH: Final = 1e-6
"""Share of a limit by which a length may miss it and still keep it: files hold seven digits of their coordinates."""

GRAVITY: Final = 9.80665
"""m/s2. Standard gravity (3rd CGPM, 1901)."""


def keeps(length: float, limits: tuple[float, float]) -> bool:
    """Whether a length, m, lies within limits, m, as far as files hold it."""
    return limits[0] * (1 - SAME_LENGTH) <= length <= limits[1] * (1 + SAME_LENGTH)
