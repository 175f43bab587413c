"""One way to make a chamber: its bore, its balls, and the bait weighed with both."""

from __future__ import annotations

from dataclasses import dataclass, replace
from functools import cached_property

import numpy as np

from meshlure.bait.chambers import BallRow
from meshlure.bait.composition import Composition, Part
from meshlure.bait.pieces import Balls, Role
from meshlure.geometry.blocks import BlockIndex
from meshlure.geometry.cylinder import Cylinder
from meshlure.geometry.moments import Moments
from meshlure.geometry.surface import Floats, together
from meshlure.making.altered import altered
from meshlure.making.chamber.barrel import barrel
from meshlure.making.chamber.bore import Bore
from meshlure.making.chamber.needs import Choice, Lining
from meshlure.making.chamber.opening import Opening
from meshlure.making.chamber.site import Site
from meshlure.physics.repose import Vessel

CHAMBER = "bore"
"""What the hollow is called, unless another piece is called so."""


@dataclass(frozen=True, eq=False)
class Option:
    """A bore with the balls that run in it.

    Attributes
    ----------
    choice : Choice
    bore : Bore
    lining : Lining or None
    opening : Opening or None
        Where the bore is drilled from; None where it is cast in.
    """

    choice: Choice
    bore: Bore
    lining: Lining | None
    opening: Opening | None

    @property
    def hollow(self) -> Cylinder:
        """What the balls run in: the bore less its lining."""
        cut = self.bore.cut
        return cut if self.lining is None else replace(cut, radius=cut.radius - self.lining.wall)

    @property
    def travel(self) -> float:
        """How far the balls run, m."""
        return self.bore.length - self.choice.row

    @cached_property
    def row(self) -> BallRow:
        """The balls at either end."""
        choice, cut = self.choice, self.bore.cut
        steps = (np.arange(choice.count) + 0.5) * choice.diameter
        balls = Balls(CHAMBER, choice.diameter, choice.count, choice.substance, None)
        nose, tail = cut.ends
        places = {"nose": nose - np.outer(steps, cut.axis), "tail": tail + np.outer(steps, cut.axis)}
        return BallRow(balls, cut.axis, places, flooded=False)

    @property
    def tube(self) -> Moments | None:
        """Volume of the lining, m3, with its moments; None without one."""
        return None if self.lining is None else self.bore.cut.moments() - self.hollow.moments()

    def composed(self, site: Site) -> Composition:
        """Return the bait with this chamber, weighed by sums."""
        parts = []
        if self.lining is not None and (tube := self.tube) is not None:
            mass = tube * self.lining.substance.density
            parts.append(Part("tube", Role.INSERT, self.lining.substance, tube.amount, mass, tube.centre))
        return altered(site.composition, self.bore.cut.moments(), parts, [self.row])

    def vessel(self, site: Site) -> Vessel:
        """Return the bait with this chamber, ready to be put into water."""
        return replace(site.vessel, composition=self.composed(site))

    def flooded(self, site: Site) -> Vessel:
        """Return the same with the chamber full of water.

        Notes
        -----
        The bore's wall, turned inward, joins the skin, so that what the bait displaces in any posture is found from the
        mesh: the water in the bore stands as high as the water around. The balls count as wholly under water.
        """
        dry = self.composed(site)
        skin = dry.skin
        wall = barrel(self.hollow).turned()
        surface = together(skin.surface, wall)
        thickness = np.concatenate([skin.thickness, np.zeros(len(wall.faces))])
        own = np.concatenate([skin.own, np.zeros(len(wall.faces), dtype=np.bool_)])
        rows = (*dry.rows[:-1], replace(dry.rows[-1], flooded=True))
        wet = replace(dry, rows=rows, skin=replace(skin, surface=surface, thickness=thickness, own=own))
        return replace(site.vessel, composition=wet, index=BlockIndex.build(surface, thickness))

    def shift(self, site: Site) -> Floats:
        """Return how far the bait's centre of gravity moves as the balls run from nose to tail, (3,) array, m."""
        mass = self.composed(site).mass(dict.fromkeys(self.chambers(site), "nose"))
        return np.asarray(-self.choice.mass * self.travel / mass.amount * self.bore.cut.axis)

    def chambers(self, site: Site) -> tuple[str, ...]:
        """Return the names of all chambers."""
        return (*(row.balls.chamber for row in site.composition.rows), CHAMBER)
