"""[chamber]: what balls may run in a chamber that is still to be drawn, and how thick its walls must be."""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import Final

from meshlure.files.defaults import CHAMBER_CLEARANCE, CHAMBER_END_WALL, CHAMBER_SLOPE, CHAMBER_WALL
from meshlure.files.keys import Keys
from meshlure.files.sections.balls import LARGEST_BALL

ENDS: Final = ("nose", "tail", "belly", "none")
CLEARANCES: Final = (0.1e-3, 3e-3)
"""m. With less a ball sticks, with more it knocks from side to side."""
MOST_IN_A_ROW: Final = 20
_THICKEST = 50e-3
_THICKEST_TUBE = 5e-3
# Angles in degrees are rounded when they are turned into radians.
_STEEPEST = math.radians(60.0) * (1 + 1e-12)


@dataclass(frozen=True)
class BallChoice:
    """Balls to choose from: any of the diameters with any of the counts.

    Attributes
    ----------
    diameters : tuple of float, m
    counts : tuple of int
    material : str
        Name as it was written; whether the stock knows it is not asked here.
    """

    diameters: tuple[float, ...]
    counts: tuple[int, ...]
    material: str


@dataclass(frozen=True)
class Tube:
    """A tube that lines the bore.

    Attributes
    ----------
    material : str
    wall : float, m
    """

    material: str
    wall: float


@dataclass(frozen=True)
class ChamberSection:
    """A chamber for balls that run in it.

    Attributes
    ----------
    balls : tuple of BallChoice
    clearance : float, m
        Diameter of the bore less that of a ball.
    wall, end_wall : float, m
        Least body material beside the chamber, and beyond its ends.
    slope : float, rad
        By which the bore falls towards the nose.
    open_to : str
        Side that it is bored from, "nose", "tail" or "belly"; "none" where it is cast or printed in.
    tube : Tube or None
    assumed : tuple of str
        Keys that were not stated and stand at their defaults.
    """

    balls: tuple[BallChoice, ...]
    clearance: float
    wall: float
    end_wall: float
    slope: float
    open_to: str
    tube: Tube | None
    assumed: tuple[str, ...]


def read_chamber(keys: Keys) -> ChamberSection:
    """Read [chamber]."""
    such_as = '[{ diameter = "6 mm", count = 1, material = "bearing steel" }]'
    tube = keys.inner("tube", '{ material = "brass", wall = "0.25 mm" }')
    section = ChamberSection(
        tuple(_read_choice(each) for each in keys.tables("balls", such_as)),
        keys.assumed_quantity("clearance", "length", CHAMBER_CLEARANCE, least=CLEARANCES[0], most=CLEARANCES[1]),
        keys.assumed_quantity("wall", "length", CHAMBER_WALL, positive=True, most=_THICKEST),
        keys.assumed_quantity("end_wall", "length", CHAMBER_END_WALL, positive=True, most=_THICKEST),
        keys.assumed_quantity("slope", "angle", CHAMBER_SLOPE, least=0.0, most=_STEEPEST),
        keys.choice("open_to", ENDS) or keys.assume("open_to", "none"),
        None if tube is None else _read_tube(tube),
        tuple(keys.assumed),
    )
    keys.close()
    return section


def _read_choice(keys: Keys) -> BallChoice:
    choice = BallChoice(
        keys.one_or_more("diameter", "length", '"6 mm"', positive=True, most=LARGEST_BALL),
        keys.wholes("count", 1, MOST_IN_A_ROW),
        keys.asked_text("material", "bearing steel"),
    )
    keys.close()
    return choice


def _read_tube(keys: Keys) -> Tube:
    tube = Tube(
        keys.asked_text("material", "brass"),
        keys.asked_quantity("wall", "length", "0.25 mm", positive=True, most=_THICKEST_TUBE),
    )
    keys.close()
    return tube
