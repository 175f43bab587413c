"""[mould]: how the bait is moulded, from the shrinkages to the box that the rubber is poured into."""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import dataclass
from typing import Final, TypeVar

from meshlure.files.defaults import (
    MOULD_BOARD,
    MOULD_KEYS,
    MOULD_WALL,
    SPRUE_DIAMETER,
    TAB_HOLE,
    TAB_LENGTH,
    TAB_THICKNESS,
    TAB_WIDTH,
)
from meshlure.files.keys import AXES, Keys
from meshlure.findings import Point

PLACES: Final = ("nose", "tail", "back", "belly")
PULLS: Final = ("side", "back")
MOST_SHRINKAGE: Final = 0.1
"""Share of the length. No casting resin, rubber or print material shrinks by more than a few percent."""
MOST_KEYS: Final = 20
WALLS: Final = (2e-3, 100e-3)
"""m. Rubber thinner than the one tears, thicker than the other is a slip of the unit."""
BOARDS: Final = (1e-3, 50e-3)
"""m."""
WIDEST_SPRUE: Final = 50e-3
"""m."""
_TAB_MOST: Final = 100e-3

Three = tuple[float, float, float]
T = TypeVar("T")


@dataclass(frozen=True)
class SprueSection:
    """Where and how wide the resin is poured in.

    Attributes
    ----------
    at : str or Point
        nose, tail, back, belly, or a point in m, mesh coordinates.
    diameter : float, m
    """

    at: str | Point = "tail"
    diameter: float = SPRUE_DIAMETER


@dataclass(frozen=True)
class TabSection:
    """The tab that a master is hung by.

    Attributes
    ----------
    at : str or Point
        As a sprue's.
    length, width, thickness, hole : float, m
        Out of the body, across, along the pull; diameter of the hole.
    """

    at: str | Point = "tail"
    length: float = TAB_LENGTH
    width: float = TAB_WIDTH
    thickness: float = TAB_THICKNESS
    hole: float = TAB_HOLE


@dataclass(frozen=True)
class MouldSection:
    """How the bait is moulded; without a section all stands at its default.

    Attributes
    ----------
    pull : str or Point
        "side", "back", or a unit vector in mesh coordinates: both halves part along it.
    shrink_print, shrink_silicone, shrink_resin : three float
        Linear shrinkage along mesh x, y, z, as a share of the length before it.
    wall : float, m
        Rubber around the part.
    draft_least : float, rad
        Less draft than this is told apart.
    keys : int
    sprue : SprueSection
    vents : str or tuple of (str or Point)
        "auto", or places as a sprue's.
    board : float, m
        Thickness of the boards.
    bed : three float or None, m
        Room of the printer along x, y, z.
    tab : TabSection
    assumed : tuple of str
        Keys that were not stated and stand at their defaults.
    """

    pull: str | Point = "side"
    shrink_print: Three = (0.0, 0.0, 0.0)
    shrink_silicone: Three = (0.0, 0.0, 0.0)
    shrink_resin: Three = (0.0, 0.0, 0.0)
    wall: float = MOULD_WALL
    draft_least: float = 0.0
    keys: int = MOULD_KEYS
    sprue: SprueSection = SprueSection()
    vents: str | tuple[str | Point, ...] = "auto"
    board: float = MOULD_BOARD
    bed: Three | None = None
    tab: TabSection = TabSection()
    assumed: tuple[str, ...] = ("pull", "shrink", "wall", "keys", "sprue", "vents", "board")


def read_mould(keys: Keys, metres: float) -> MouldSection:
    """Read [mould].

    Parameters
    ----------
    keys : Keys
    metres : float, m
        Length of a unit of the mesh's coordinates.
    """
    shrink = keys.inner("shrink", '{ print = "0.2 %", silicone = "0.3 %", resin = "0.4 %" }')
    print_share, silicone, resin = _shrinkages(shrink)
    if shrink is None:
        keys.assumed.append("shrink")
    section = MouldSection(
        _pull(keys),
        print_share,
        silicone,
        resin,
        keys.assumed_quantity("wall", "length", MOULD_WALL, positive=True, least=WALLS[0], most=WALLS[1]),
        keys.quantity("draft_least", "angle", least=0.0, most=math.radians(45.0)) or 0.0,
        keys.whole("keys", 0, MOST_KEYS) if keys.stated("keys") else keys.assume("keys", MOULD_KEYS),
        _inner(keys, "sprue", '{ at = "tail", diameter = "8 mm" }', lambda inner: _sprue(inner, metres))
        or keys.assume("sprue", SprueSection()),
        _vents(keys, metres),
        keys.assumed_quantity("board", "length", MOULD_BOARD, positive=True, least=BOARDS[0], most=BOARDS[1]),
        _bed(keys),
        _inner(keys, "tab", '{ at = "tail", hole = "3 mm" }', lambda inner: _tab(inner, metres)) or TabSection(),
        tuple(keys.assumed),
    )
    keys.close()
    return section


def _pull(keys: Keys) -> str | Point:
    word = keys.peek("pull")
    if not word:
        return keys.direction("pull") if keys.stated("pull") else keys.assume("pull", "side")
    chosen = keys.choice("pull", (*PULLS, *AXES))
    return keys.direction("pull") if chosen in AXES else chosen or "side"


def _shrinkages(keys: Keys | None) -> tuple[Three, Three, Three]:
    if keys is None:
        return (0.0, 0.0, 0.0), (0.0, 0.0, 0.0), (0.0, 0.0, 0.0)
    found = _per_axis(keys, "print"), _per_axis(keys, "silicone"), _per_axis(keys, "resin")
    keys.close()
    return found


def _per_axis(keys: Keys, key: str) -> Three:
    """Read a shrinkage, or a list of three along mesh x, y, z."""
    if not keys.listed(key):
        one = keys.quantity(key, "shrinkage", least=0.0, most=MOST_SHRINKAGE) or 0.0
        return one, one, one
    such_as = '["0.2 %", "0.2 %", "0.4 %"]'
    values = keys.quantities(key, "shrinkage", such_as, least=0.0, most=MOST_SHRINKAGE) or ()
    if len(values) != 3:
        keys.fault(
            key,
            "a shrinkage is one value, or three along mesh x, y and z",
            f"{len(values)} values",
            such_as,
            "write one, or all three",
        )
        return 0.0, 0.0, 0.0
    return values[0], values[1], values[2]


def _inner(keys: Keys, key: str, such_as: str, reader: Callable[[Keys], T]) -> T | None:
    inner = keys.inner(key, such_as)
    return None if inner is None else reader(inner)


def _sprue(keys: Keys, metres: float) -> SprueSection:
    at = keys.place("at", PLACES, metres)
    diameter = keys.quantity("diameter", "length", positive=True, most=WIDEST_SPRUE)
    keys.close()
    return SprueSection("tail" if at is None else at, SPRUE_DIAMETER if diameter is None else diameter)


def _vents(keys: Keys, metres: float) -> str | tuple[str | Point, ...]:
    if keys.listed("vents"):
        return keys.places("vents", PLACES, metres)
    if not keys.stated("vents"):
        return keys.assume("vents", "auto")
    if keys.peek("vents") != "auto":
        allowed = "'auto', or a list of places: ['nose', [31.0, 0.0, -9.5]]"
        keys.fault("vents", "no such vents", keys.peek("vents"), allowed, "put a place into square brackets")
    return "auto"


def _bed(keys: Keys) -> Three | None:
    such_as = '["220 mm", "220 mm", "250 mm"]'
    values = keys.quantities("bed", "length", such_as, positive=True, most=10.0)
    if values is None:
        return None
    if len(values) != 3:
        keys.fault(
            "bed", "a bed has three sizes", f"{len(values)} values", f"along x, y and z: {such_as}", "write all three"
        )
        return None
    return values[0], values[1], values[2]


def _tab(keys: Keys, metres: float) -> TabSection:
    usual = TabSection()
    at = keys.place("at", PLACES, metres)

    def size(key: str, default: float) -> float:
        value = keys.quantity(key, "length", positive=True, most=_TAB_MOST)
        return default if value is None else value

    tab = TabSection(
        usual.at if at is None else at,
        size("length", usual.length),
        size("width", usual.width),
        size("thickness", usual.thickness),
        size("hole", usual.hole),
    )
    if not tab.hole < min(tab.width, tab.length):
        keys.fault(
            "hole",
            "the hole is wider than the tab",
            f"{tab.hole * 1e3:g} mm",
            f"less than {min(tab.width, tab.length) * 1e3:g} mm",
            "make the tab larger or the hole smaller",
        )
    keys.close()
    return tab
