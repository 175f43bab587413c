"""How sure the difference between two baits is: what makes both err alike falls out of it."""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from dataclasses import dataclass
from math import exp, hypot, log
from typing import Any, Final

Tree = Mapping[str, Any]

SCATTER: Final = 0.18
"""Natural logarithm by which the estimate of one body's drag strays from that of another, at two standard deviations:
2 x 1.4826 x 0.060, the median absolute log ratio of estimate over published value of 30 plain bodies
(tests/accuracy/drag.md). The rest of a drag's band, which state the layer is in above all, two like baits share."""
FACET_SPREAD: Final = 0.1
"""Share by which the estimate of what facets leave out may miss: 3.5% at most on spheroids and a torus; our choice."""
COAT_SPREAD: Final = 0.05
"""mm. How far a coat's thickness strays; as in `meshlure.physics.buoyancy`."""


@dataclass(frozen=True)
class Band:
    """How far a value may lie below and above what was found, in its own unit.

    Negative where it is known which way: below -1 and above 1 for a value that is likely to be 1 higher.
    """

    below: float
    above: float

    @classmethod
    def root(cls, bands: Iterable[Band]) -> Band:
        """Return the root of the sum of squares, with what is known which way added as it is."""
        every = list(bands)
        known = sum(band.above for band in every if band.above == -band.below)
        loose = [band for band in every if band.above != -band.below]
        return cls(
            hypot(*(max(0.0, band.below) for band in loose)) + max(0.0, -known),
            hypot(*(max(0.0, band.above) for band in loose)) + max(0.0, known),
        )

    @property
    def turned(self) -> Band:
        """The band of the value's negative."""
        return Band(self.above, self.below)


Doubts = Mapping[str, Band]
"""By what is doubted; doubts of one name in two baits are one and the same, and move both alike."""


def apart(first: Doubts, other: Doubts) -> Band:
    """Return the band of the other value less the first.

    Notes
    -----
    A doubt in both moves both at once: only what it does to one more than to the other is left. Whatever raises the one
    is taken to raise the other.
    """
    bands = []
    for name in dict.fromkeys([*first, *other]):
        if name not in other:
            bands.append(first[name].turned)
        elif name not in first:
            bands.append(other[name])
        else:
            ends = (first[name].below - other[name].below, other[name].above - first[name].above)
            bands.append(Band(-min(ends), max(ends)))
    return Band.root(bands)


def reserve(results: Tree) -> Doubts:
    """Return the doubts of a bait's reserve, g."""
    rows = [row for row in results["buoyancy"]["doubts"] if row["what"] != "facets"]
    found = {_name(results, row["what"]): Band(row["low_g"], row["high_g"]) for row in rows}
    off = results["smooth"]["reserve_g"] - results["buoyancy"]["reserve_g"]
    # The little that is left of what water and mass lose each is no surer than these.
    water = results["buoyancy"]["water"]["density_kg_m3"] * 1e-6
    lost = (results["smooth"]["displaced_mm3"] - results["buoyancy"]["displaced_mm3"]) * water
    return {**found, **_facets(results, off, max(abs(lost), abs(lost - off)))}


def mass(results: Tree) -> Doubts:
    """Return the doubts of a bait's mass, g.

    Notes
    -----
    Those of its reserve, turned around, for what a denser piece takes off the one it adds to the other. A hook's water
    is added again; facets and coat weigh what they weigh.
    """
    water = results["buoyancy"]["water"]["density_kg_m3"] / 1e3
    found = dict(_facets(results, results["smooth"]["mass_g"] - results["weight"]["mass_g"]))
    for row in results["buoyancy"]["doubts"]:
        what, band = row["what"], Band(row["high_g"], row["low_g"])
        if what == "facets":
            continue
        if what == "thickness of the coat":
            band = _coat(results)
        elif what.startswith("mass of "):
            share = _dry_share(results, what.removeprefix("mass of "), water)
            band = Band(band.below * share, band.above * share)
        found[_name(results, what)] = band
    return found


def angle(results: Tree, key: str, alike: bool) -> Doubts | None:
    """Return the doubts of an angle of the posture, degrees; None where it has no band.

    Parameters
    ----------
    results : mapping
    key : str
        nose_up or lean.
    alike : bool
        Whether the bait is held against another of the same body: a doubt then turns both the same way. Of different
        bodies nothing of the kind is known, and every doubt is taken as the bait's own.
    """
    if results["budget"]["band"][f"{key}_low_deg"] is None or results["budget"]["band"][f"{key}_high_deg"] is None:
        return None
    found = {}
    for row in results["budget"]["doubts"]:
        ends = row[f"{key}_low_deg"], row[f"{key}_high_deg"]
        if None in ends:
            return None
        own = row["what"].startswith("place of ") or not alike
        name = _name(results, row["what"])
        found[f"{name}, of {results['run']}" if own else name] = Band(*ends)
    return found


def facets(results: Tree, value: float, dimension: int) -> Doubts:
    """Return what facets leave out of a length (dimension 1), an area (2) or a volume (3) of a bait, in its unit."""
    share = results["smooth"]["displaced_mm3"] / results["buoyancy"]["displaced_mm3"] - 1
    return _facets(results, value * share * dimension / 3)


def _facets(results: Tree, left_out: float, gross: float | None = None) -> Doubts:
    """What the smooth parts have more, which is known but for a tenth of it, or of what it is the difference of."""
    loose = FACET_SPREAD * abs(left_out if gross is None else gross)
    return {"facets": Band(-left_out, left_out), f"facets, of {results['run']}": Band(loose, loose)}


def scattered(value: float, low: float, high: float, cd: tuple[float, float, float] | None = None) -> Band:
    """Return what of an estimate's band two baits do not share.

    Parameters
    ----------
    value, low, high : float
        What rests on the drag, with its band.
    cd : (float, float, float), optional
        The drag coefficient that the band comes from, with its own band; left out where the value is a drag itself.
    """
    if cd is None:
        return Band(value * (1 - exp(-SCATTER)), value * (exp(SCATTER) - 1))
    middle, least, most = cd
    wide = max(log(most / middle), log(middle / least), SCATTER)
    return Band((value - low) * SCATTER / wide, (high - value) * SCATTER / wide)


def counts(difference: float, band: Band | None) -> bool | None:
    """Tell whether a difference is more than its band; None where it has none."""
    if band is None:
        return None
    return not difference - band.below <= 0 <= difference + band.above


def _name(results: Tree, what: str) -> str:
    """Return a doubt's name; a stated density is that of one mix, which another bait of the same density shares."""
    piece = what.removeprefix("density of ")
    if piece == what:
        return what
    stated = [row for row in results["pieces"] if row["name"] == piece and row["material"] is None]
    return f"{what}, {stated[0]['density_g_cm3']!r}" if stated else what


def _dry_share(results: Tree, item: str, water: float) -> float:
    """By how much more a hook's mass is in doubt than its weight in water."""
    names = {row["name"] for row in results["hardware"] if item in (row["item"], row["name"])}
    for row in results["pieces"]:
        if row["role"] == "hardware" and row["name"] in names and row["density_g_cm3"]:
            return float(1 / (1 - water / row["density_g_cm3"])) if row["density_g_cm3"] > water else 1.0
    return 1.0


def _coat(results: Tree) -> Band:
    coat = next(row for row in results["pieces"] if row["role"] == "coat")
    thick = coat["volume_mm3"] / results["skin_mm2"]
    per_mm = results["skin_mm2"] * coat["density_g_cm3"] / 1e3
    return Band(per_mm * min(COAT_SPREAD, thick), per_mm * COAT_SPREAD)
