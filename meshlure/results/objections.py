"""What speaks against making a bait as it is: faults, what was asked and is missed, and doubts too wide to build on.

Read off the result tree, in the tree's units. The bars are ours unless a source stands beside them; none is a law of
the field.
"""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from math import degrees
from typing import Any, Final

from meshlure.files.sections.target import TargetSection
from meshlure.results.account import headline
from meshlure.results.numbers import GRAM

Tree = Mapping[str, Any]

NEAR_DEG: Final = 1.5
"""An angle this near to the one wanted is reached: a posture is not set by eye more finely."""
NEAR_G: Final = 0.05
NEAR_SHARE: Final = 0.1
"""A reserve this near, in g or as a share of the one wanted, is reached: what a hook or a coat of clear varies by."""
NEAR_SUBMERGED: Final = 0.02
ROUNDED_DEG: Final = 2.5
"""Half a step of the angles that turn so easily that they are given in steps of five degrees."""
WIDE_G: Final = 0.2
"""Half a band of reserve, g, beyond which the densities want weighing: with weighed ones a bait is good to that."""
STRAY: Final = 0.05
"""Share of the copies that may behave otherwise, or leave their posture, before it is said."""
MOST_FAIL: Final = 0.5
"""Share of the copies that must pass the limits, or it is no bait to make."""
LOOSE_DEG: Final = 10.0
"""From the flattest to the steepest of nineteen copies in twenty, degrees."""
USUAL: Final = ("sticks-out",)
"""Warnings that are right for eyes, hangers and lips, and that only the maker can judge."""

_DOES: Final = {"floats": "float", "suspends": "suspend", "sinks": "sink"}


@dataclass(frozen=True)
class Objection:
    """One thing that speaks against making it.

    Attributes
    ----------
    kind : str
        fault, behaviour, target, limit, copies, density, posture or warning.
    stops : bool
        Whether it says no; else it asks for one copy to be made and weighed first.
    words : str
        Without a full stop, so that it can stand in a list.
    quantity : str or None
        What was asked: reserve_g, submerged_share, sink_m_s, nose_up_deg or lean_deg.
    wanted, found : float or None
        Of that quantity.
    """

    kind: str
    stops: bool
    words: str
    quantity: str | None = None
    wanted: float | None = None
    found: float | None = None


def objections(tree: Tree, target: TargetSection | None) -> list[Objection]:
    """Return all that speaks against making a bait, what stops it first.

    Parameters
    ----------
    tree : mapping
        Of results.json, with everything but the readiness itself.
    target : TargetSection or None
        What the bait file asks for.
    """
    found = [*_faults(tree), *_missed(tree, target), *_limits(tree), *_copies(tree), *_doubts(tree), *_warnings(tree)]
    return sorted(found, key=lambda each: not each.stops)


def _faults(tree: Tree) -> Iterator[Objection]:
    count = sum(found["level"] == "fault" for found in tree["findings"])
    if count:
        yield Objection("fault", True, f"{count} fault{'s were' if count > 1 else ' was'} found")


def _warnings(tree: Tree) -> Iterator[Objection]:
    count = sum(found["level"] == "warning" and found["code"] not in USUAL for found in tree["findings"])
    if count:
        yield Objection("warning", False, f"{count} warning{'s' if count > 1 else ''} to look at")


def _missed(tree: Tree, target: TargetSection | None) -> Iterator[Objection]:
    if target is None:
        return
    state = tree["buoyancy"]["state"]
    if target.behaviour is not None and target.behaviour != state:
        yield Objection("behaviour", True, f"it {state}; wanted is that it {target.behaviour}")
    if target.reserve is not None:
        wanted, found = target.reserve * GRAM, tree["buoyancy"]["reserve_g"]
        if abs(found - wanted) > max(NEAR_G, NEAR_SHARE * abs(wanted)):
            places = _places(tree)
            words = f"reserve {grams(found, places)}, {grams(wanted, places)} wanted"
            yield Objection("target", True, words, "reserve_g", wanted, found)
    posture = headline(tree["postures"]) if tree["postures"] else None
    share = None if posture is None else posture["submerged_share"]
    if target.submerged is not None and share is not None and abs(share - target.submerged) > NEAR_SUBMERGED:
        words = f"{share:.0%} under water, {target.submerged:.0%} wanted"
        yield Objection("target", True, words, "submerged_share", target.submerged, share)
    yield from _sinking(tree, target)
    for key, wanted_rad, say in (("nose_up_deg", target.nose_up, nose), ("lean_deg", target.lean, lean)):
        angle = None if posture is None else posture[key]
        if wanted_rad is None:
            continue
        wanted = degrees(wanted_rad)
        if angle is None:
            yield Objection("target", True, f"nothing holds it at {say(wanted)}", key, wanted, None)
        elif abs(angle - wanted) > _near(posture, angle):
            words = f"{say(angle)}, {say(wanted).removeprefix('nose ')} wanted"
            yield Objection("target", True, words, key, wanted, angle)


def _near(posture: Tree | None, angle: float) -> float:
    """How near an angle must be to the one wanted, degrees."""
    return ROUNDED_DEG if posture is not None and posture["rounded"] and angle % 5 == 0 else NEAR_DEG


def _sinking(tree: Tree, target: TargetSection) -> Iterator[Objection]:
    wanted, speed = target.sink, tree["sinking"]["speed_m_s"]
    if wanted is None:
        return
    down = speed if tree["buoyancy"]["state"] == "sinks" else 0.0
    if abs(down - wanted) > NEAR_SHARE * wanted:
        words = f"sinks at {down * 100:.0f} cm/s, {wanted * 100:.0f} cm/s wanted"
        yield Objection("target", True, words, "sink_m_s", wanted, down)


def _limits(tree: Tree) -> Iterator[Objection]:
    for row in tree["limits"]:
        if row["met"] is False:
            name, _, unit = row["what"].partition(", ")
            say = grams if unit == "g" else plain_degrees
            words = f"{name} {say(row['value'])}, outside your limits of {say(row['low'])} to {say(row['high'])}"
            yield Objection("limit", True, words)


def _copies(tree: Tree) -> Iterator[Objection]:
    drawn, state = tree["budget"]["monte_carlo"], tree["buoyancy"]["state"]
    for other in ("floats", "suspends", "sinks"):
        share = drawn[f"{other}_share"]
        if other != state and share > STRAY:
            yield Objection("behaviour", False, f"{share:.0%} of copies would {_DOES[other]}")
    share = drawn["pass_share"]
    if share is not None and share < 1 - STRAY:
        words = f"only {share:.0%} of copies would pass your limits" if share else "no copy would pass your limits"
        yield Objection("copies", share < MOST_FAIL, words)
    if tree["postures"] and headline(tree["postures"])["up"] is None:
        yield Objection("posture", False, "its centres meet, so it has no preferred attitude")
    elif drawn["left_share"] > STRAY:
        yield Objection("posture", False, f"{drawn['left_share']:.0%} of copies would tip into another posture")
    angles = drawn["nose_up_deg"]
    if angles is not None and angles[-1] - angles[0] > LOOSE_DEG:
        words = f"its posture is touchy: copies would rest from {nose(angles[0])} to {nose(angles[-1])}"
        yield Objection("posture", False, words)


def _doubts(tree: Tree) -> Iterator[Objection]:
    """The one density from stock that widens the band most, where the band is wide."""
    held = tree["buoyancy"]
    if (held["reserve_high_g"] - held["reserve_low_g"]) / 2 <= WIDE_G:
        return
    stock = {f"density of {row['material']}" for row in tree["pieces"] if row["material"]}
    rows = [row for row in held["doubts"] if row["what"] in stock]
    widest = max(rows, key=lambda row: max(row["low_g"], row["high_g"]), default=None)
    most = 0.0 if widest is None else max(widest["low_g"], widest["high_g"])
    low, high = (grams(held[f"reserve_{end}_g"], _places(tree)) for end in ("low", "high"))
    band = f"reserve anywhere from {low} to {high}"
    if widest is not None and most > WIDE_G / 2:
        yield Objection("density", False, f"the {widest['what']} is from stock, not weighed: {band}")
    else:
        yield Objection("density", False, f"masses and densities are too unsure: {band}")


def _places(tree: Tree) -> int:
    """Decimals that the reserve's band earns: the 0.01 g of a pocket scale, or 0.1 g where the band is wide."""
    held = tree["buoyancy"]
    return 1 if (held["reserve_high_g"] - held["reserve_low_g"]) / 2 > WIDE_G else 2


def grams(value: float, places: int = 2) -> str:
    """Return a reserve in g, signed."""
    return f"{value:+.{places}f} g".replace("-", "\N{MINUS SIGN}")


def plain_degrees(value: float) -> str:
    """Return an angle in degrees, signed where it is below zero."""
    return f"{value:.0f}°".replace("-", "\N{MINUS SIGN}") if abs(value) >= 0.5 else "0°"


def nose(angle: float) -> str:
    """Return how the nose lies, from degrees above the horizontal."""
    return "nose level" if abs(angle) < 0.5 else f"nose {abs(angle):.0f}° {'up' if angle > 0 else 'down'}"


def lean(angle: float) -> str:
    """Return how a bait leans, from degrees towards its right."""
    return "no lean" if abs(angle) < 0.5 else f"lean {abs(angle):.0f}° to its {'right' if angle > 0 else 'left'}"
