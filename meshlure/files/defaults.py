"""What is taken where the bait file says nothing, in SI, each with its reason; whatever was taken is marked assumed."""

from __future__ import annotations

import math
from typing import Final

WATER_TEMPERATURE: Final = 18.0
"""degC. Middle of the 8 to 28 degC in which most fishing is done: common practice, no source."""

WATER_SALINITY: Final = 0.0
"""g/kg. Fresh water."""

CAST_SPEED: Final = 25.0
"""m/s. A one-handed overhead cast of 5 to 30 g leaves the rod at 20 to 35 m/s: from memory, no source."""

CAST_ANGLE: Final = math.radians(40.0)
"""rad above the horizontal. About the angle of the longest flight in air: common practice, no source."""

CAST_HEIGHT: Final = 2.0
"""m above the water. A rod tip at the end of a cast from the bank: common practice, no source."""

LINE_PULL: Final = 0.03
"""N, backwards. Line drawn off a reel and through guides takes a tenth to a quarter of the range: common practice."""

WIND: Final = 0.0
"""m/s, positive from behind. Still air."""

RETRIEVE_SPEEDS: Final = (0.5, 1.0)
"""m/s. A slow and a brisk hand on a reel of 60 to 90 cm a turn: common practice, no source."""

BALLAST_MATERIALS: Final = ("lead", "tungsten heavy alloy 90% W", "brass")
"""What ballast is most often made of, the commonest first: common practice, no source."""

BALLAST_COVER: Final = 1.5e-3
"""m of body material around ballast; less shows through or breaks out: common practice, no source."""

BALLAST_CLEAR: Final = 1.0e-3
"""m between ballast and other inserts or hardware, so that what the body is cast of flows between: common practice."""

CHAMBER_CLEARANCE: Final = 0.5e-3
"""m, bore less ball. A ball runs freely with 0.3 to 0.6 mm in a smooth bore: common practice, no source."""

CHAMBER_WALL: Final = 1.2e-3
"""m beside a chamber, three lines of a 0.4 mm nozzle: common practice, no source."""

CHAMBER_END_WALL: Final = 2.0e-3
"""m at a chamber's ends, which the balls strike: common practice, no source."""

CHAMBER_SLOPE: Final = math.radians(8.0)
"""rad by which a bore falls towards the nose, so that the balls come back by themselves: common practice, no source."""

MOULD_WALL: Final = 10e-3
"""m of rubber around the part: 8 to 12 mm for small baits, 12 to 20 mm for large ones. Common practice, no source."""

MOULD_BOARD: Final = 6e-3
"""m. A printed board that stays flat and leaves room for the keys' dimples: common practice, no source."""

MOULD_KEYS: Final = 4
"""Registration keys: one near each corner of the box. Common practice, no source."""

SPRUE_DIAMETER: Final = 8e-3
"""m. Sprues of 6 to 10 mm are poured into by hand: common practice, no source."""

TAB_LENGTH: Final = 12e-3
TAB_WIDTH: Final = 8e-3
TAB_THICKNESS: Final = 3e-3
TAB_HOLE: Final = 3e-3
"""m. A tab that a finger and a wire hold: common practice, no source."""

POUR_RESIN: Final = "polyurethane casting resin unfilled"
POUR_BALLOONS: Final = "glass microballoons true"
"""What a light casting is most often mixed from: common practice, no source."""

POUR_RATIO: Final = (1.0, 1.0)
POUR_BY: Final = "weight"
"""Parts A and B of a casting resin. Many are one to one, others are not: the tin says. Common practice, no source."""

POUR_WASTE: Final = 0.10
"""Share that stays in cup, sprue and vents: common practice, no source."""

POUR_PACKING: Final = 0.6
"""Share of a tapped cup of balloons that is balloons, the rest air between them: datasheets of the class, from memory.
Random close packing of equal spheres is 0.64."""

POUR_THIN: Final = 0.40
"""Volume share of balloons up to which a thin polyurethane still pours: common practice, no source."""

POUR_STIFF: Final = 0.50
"""Volume share of balloons beyond which nothing is poured or spooned without holes: common practice, no source."""

PRINT_SOLID: Final = 0.96
PRINT_SOLID_RANGE: Final = (0.93, 0.99)
"""Share of its filament's density that a print reaches where it is solid, and its range: common practice, no source."""

SCALE_STEP: Final = 0.01e-3
"""kg. A pocket scale's: common practice, no source."""
