"""A bait on the bench: put together, put to rest, and asked what it would be with a body of another density."""

from __future__ import annotations

from dataclasses import dataclass, replace

from meshlure.bait.composition import Composition, Part, compose, weighed
from meshlure.bait.pieces import Bait, Role
from meshlure.bait.refusals import refuse
from meshlure.bait.reweighed import reweighed
from meshlure.geometry.blocks import BlockIndex
from meshlure.physics.immersion import Hull
from meshlure.physics.posture import Attitude, attitude
from meshlure.physics.repose import Dangle, Repose, Vessel
from meshlure.posing import pose


@dataclass(frozen=True, eq=False)
class Outcome:
    """A bait with its body of some density.

    Attributes
    ----------
    off : float
        Share by which the body's density is off the one asked for.
    density : float, kg/m3
        Of the body.
    bare : float, kg
        The body with all that lies in it, before coat and hooks.
    mass, reserve : float, kg
        Ready to fish.
    attitude : Attitude or None
        At rest; None where it has none.
    """

    off: float
    density: float
    bare: float
    mass: float
    reserve: float
    attitude: Attitude | None


@dataclass(frozen=True, eq=False)
class Bench:
    """A bait put together.

    Attributes
    ----------
    bait : Bait
    vessel : Vessel
    main : Repose or Dangle
        The posture that it is known by.
    parts : tuple of Part
    """

    bait: Bait
    vessel: Vessel
    main: Repose | Dangle
    parts: tuple[Part, ...]

    @classmethod
    def of(cls, bait: Bait) -> Bench:
        """Return the bench of a bait.

        Raises
        ------
        InputError
            Where a mass or a volume is left undefined.
        """
        composition = compose(bait)
        pieces = zip((bait.body, *bait.pieces), bait.files, strict=True)
        refuse(composition.findings, {piece.name: str(file.path) for piece, file in pieces})
        index = BlockIndex.build(composition.skin.surface, composition.skin.thickness)
        vessel = Vessel(composition, index, bait.hardware, bait.frame, bait.water.density)
        main = pose(vessel, bait.plan.bait.suspends_within).main
        return cls(bait, vessel, main, weighed(composition, main.ends))

    @property
    def body(self) -> Part:
        """The body's own material."""
        return next(part for part in self.parts if part.role is Role.BODY)

    @property
    def density(self) -> float:
        """Of the body as stated, kg/m3."""
        assert self.body.substance is not None
        return self.body.substance.density

    @property
    def hull(self) -> Hull:
        """What displaces water."""
        return self.vessel.hull(self.main.ends)

    @property
    def mass(self) -> float:
        """Of the whole bait, kg."""
        return self.vessel.composition.mass(self.main.ends).amount

    @property
    def others(self) -> float:
        """Of everything but the body's own material, kg."""
        return self.mass - self.body.mass.amount

    def reserve_of(self, body: float) -> float:
        """Return the reserve with a body of another mass, kg."""
        return self.hull.volume * self.vessel.water - self.others - body

    def with_body(self, density: float, off: float = 0.0) -> Outcome:
        """Return the bait with its body of another density, kg/m3, put to rest anew from the posture it had."""
        factor = density * (1 + off) / self.density
        return self.settled(reweighed(self.vessel.composition, {self.body.name: factor}), off)

    def settled(self, composition: Composition, off: float = 0.0) -> Outcome:
        """Return the bait put to rest with a composition that weighs otherwise but displaces as it did."""
        vessel = replace(self.vessel, composition=composition)
        mass = composition.mass(self.main.ends).amount
        reserve = self.hull.volume * vessel.water - mass
        up = self.main.rest.state.up if isinstance(self.main, Repose) else self.vessel.frame.back
        rest = vessel.reposed(self.main.ends, up) if reserve > 0 else None
        stays = vessel.dangle(self.main.ends).hang.up if rest is None else rest.rest.state.up
        frame = vessel.frame
        angles = None if stays is None else attitude(stays, frame.nose, frame.back, frame.side)
        parts = weighed(composition, self.main.ends)
        body = next(part for part in parts if part.role is Role.BODY)
        within = (Role.BODY, Role.INSERT, Role.VOID, Role.BALL)
        bare = sum(part.mass.amount for part in parts if part.role in within)
        return Outcome(off, body.mass.amount / body.volume, bare, mass, reserve, angles)
