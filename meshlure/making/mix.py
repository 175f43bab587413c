"""Resin and balloons: what share of balloons gives a casting its density, and how much of each goes into the cups."""

from __future__ import annotations

from dataclasses import dataclass

from meshlure.bait.pieces import Substance
from meshlure.files.defaults import POUR_STIFF, POUR_THIN
from meshlure.files.sections.pour import PourSection


@dataclass(frozen=True)
class Mix:
    """A mix of resin and balloons.

    Attributes
    ----------
    resin, balloons : float, kg/m3
        Densities of the cured resin and of the single balloons.
    share : float
        Of the mix's volume that is balloons.
    packing : float
        Share of a tapped cup of balloons that is balloons.
    """

    resin: float
    balloons: float
    share: float
    packing: float

    @property
    def density(self) -> float:
        """Density of the cured mix, kg/m3, by the rule of mixtures: volumes add up."""
        return self.share * self.balloons + (1 - self.share) * self.resin

    @property
    def mass_share(self) -> float:
        """Share of the mix's mass that is balloons."""
        return self.share * self.balloons / self.density

    @property
    def cups(self) -> float:
        """Tapped cups of balloons to one cup of resin."""
        return self.share / self.packing / (1 - self.share)

    @property
    def flow(self) -> str:
        """Whether it "pours", is "stiff", or "does not pour"; by shares of common practice."""
        if self.share <= POUR_THIN:
            return "pours"
        return "stiff" if self.share <= POUR_STIFF else "does not pour"


def share_for(density: float, resin: float, balloons: float) -> float:
    """Return the volume share of balloons that gives a mix a density, kg/m3.

    Notes
    -----
    The rule of mixtures, density = share x balloons + (1 - share) x resin, solved for the share: below 0 where the mix
    is to be denser than the resin (or lighter than heavy balloons), above 1 where lighter than the balloons. Neglected:
    air stirred in, which makes a casting 1 to 3% lighter, balloons that break, and shrinkage of the resin.
    """
    return (resin - density) / (resin - balloons)


def mixed(density: float, resin: float, balloons: float, packing: float) -> tuple[Mix, bool]:
    """Return the mix of a density, kg/m3, or the nearest that can still be spooned, and whether it is that density.

    Notes
    -----
    No mix is denser than unfilled resin; none with more balloons than `defaults.POUR_STIFF` of its volume fills a
    mould.
    """
    share = share_for(density, resin, balloons)
    nearest = min(max(share, 0.0), POUR_STIFF)
    return Mix(resin, balloons, nearest, packing), share == nearest


@dataclass(frozen=True)
class Batch:
    """What goes into the cups.

    Attributes
    ----------
    volume : float, m3
        Of the mix, waste included.
    part_a, part_b, balloons : float, kg
    part_a_volume, part_b_volume : float, m3
    resin_volume : float, m3
        Of parts A and B together, as cured.
    balloons_bulk : float, m3
        Of the balloons as they lie tapped in a cup.
    """

    volume: float
    part_a: float
    part_b: float
    balloons: float
    part_a_volume: float
    part_b_volume: float
    resin_volume: float
    balloons_bulk: float

    @property
    def mass(self) -> float:
        """Of everything, kg."""
        return self.part_a + self.part_b + self.balloons


def batch(mix: Mix, volume: float, stated: PourSection) -> Batch:
    """Return what goes into the cups for some baits.

    Parameters
    ----------
    mix : Mix
    volume : float, m3
        Of resin that one bait takes.
    stated : PourSection
        How many, with how much waste, in what ratio.

    Notes
    -----
    Parts measured by volume are turned into weights by their own densities where they are stated, else as if both had
    the cured resin's.
    """
    whole = volume * stated.baits * (1 + stated.waste)
    resin = (1 - mix.share) * whole * mix.resin
    a, b = stated.ratio
    dense_a, dense_b = (mix.resin, mix.resin) if stated.densities is None else stated.densities
    if stated.by == "volume":
        a, b = a * dense_a, b * dense_b
    part_a, part_b = resin * a / (a + b), resin * b / (a + b)
    return Batch(
        volume=whole,
        part_a=part_a,
        part_b=part_b,
        balloons=mix.share * whole * mix.balloons,
        part_a_volume=part_a / dense_a,
        part_b_volume=part_b / dense_b,
        resin_volume=(1 - mix.share) * whole,
        balloons_bulk=mix.share * whole / mix.packing,
    )


def spread(mix: Mix, resin: Substance, balloons: Substance) -> tuple[float, float]:
    """Return how light and how heavy the same mix may come out, kg/m3, by the ranges of resin and balloons.

    Notes
    -----
    Root of the squares of what either range does.
    """
    low = ((1 - mix.share) * (resin.density - resin.low)) ** 2 + (mix.share * (balloons.density - balloons.low)) ** 2
    high = ((1 - mix.share) * (resin.high - resin.density)) ** 2 + (mix.share * (balloons.high - balloons.density)) ** 2
    return mix.density - float(low**0.5), mix.density + float(high**0.5)
