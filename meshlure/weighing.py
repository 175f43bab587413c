"""A copy that was weighed: what its body and coat really are, what explains it, and the bait foretold anew."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace
from typing import Any, Final

from meshlure.bait.composition import Composition, Part, weighed
from meshlure.bait.pieces import Bait, Role
from meshlure.bait.reweighed import reweighed
from meshlure.errors import Fault, InputError
from meshlure.files.sections.measured import MeasuredSection
from meshlure.findings import Finding, Level
from meshlure.geometry.blocks import BlockIndex
from meshlure.physics.buoyancy import COAT_SPREAD, Cause, Doubt, Reserve, reserve
from meshlure.physics.hydrostatic import Lever, Weighing, explained
from meshlure.physics.repose import Vessel
from meshlure.physics.whatifs import beside_inserts, net_mass
from meshlure.posing import Posed, pose
from meshlure.results import measured as tree
from meshlure.stock.waters import water

Tree = dict[str, Any]

ODD: Final = 0.1
"""Share by which a displaced volume that was weighed may differ from the one drawn before the weighing is asked about;
a percent of size is three of volume, so this is beyond any master."""

_BATCH: Final = 3.0
"""Percent by which one batch of mix strays from another: common practice, no source."""


def weigh(bait: Bait, vessel: Vessel, posed: Posed, held: Reserve, tip: float) -> tuple[Tree | None, list[Finding]]:
    """Return the result tree of a copy as it was weighed, None where none was, and what is odd about it.

    Parameters
    ----------
    bait : Bait
    vessel : Vessel
        As drawn.
    posed : Posed
        Its postures.
    held : Reserve
        Its reserve, for the doubts that weighing leaves.
    tip : float, m
        Of the nose along the nose direction.

    Raises
    ------
    InputError
        Where the weighings leave nothing for the body or for the coat.

    Notes
    -----
    Hydrostatic weighing: the volume is (dry - in water)/water. What the copy weighs beside inserts, hooks and coat is
    its body's. The volume that was displaced beyond the one drawn is taken to be the body's too, so that its density
    can be told; for the postures the bait is put into water as many times denser, which leaves its shape as drawn:
    lengths are off by a third of the volume's share.
    """
    section = bait.plan.measured
    if section is None:
        return None, []
    composition, ends = vessel.composition, posed.ends
    parts = weighed(composition, ends)
    tank, at = _tank(bait, section), vessel.water
    body = next(part for part in parts if part.role is Role.BODY)
    coat = next((part for part in parts if part.role is Role.COAT), None)
    hooks = sum(part.mass.amount for part in parts if part.role is Role.HARDWARE)
    inside = sum(part.mass.amount for part in parts if part.role in (Role.INSERT, Role.BALL))
    on = _coat(bait, section, coat, hooks)
    factor = 1.0 if on is None or coat is None else on / coat.mass.amount
    coat_mass, grown = (0.0, 0.0) if coat is None else (coat.mass.amount * factor, coat.volume * (factor - 1))
    drawn = vessel.hull(ends).volume
    displaced = drawn + grown
    pull = _pull(section)
    own = _own(section, body, inside, hooks + coat_mass, None if pull is None else displaced * tank - pull)
    weighing = None if section.dry is None or pull is None else Weighing(section.dry, -pull, tank)
    swollen = 1.0 if weighing is None else weighing.volume / displaced
    volume = body.volume + displaced * (swollen - 1)
    odd = _odd(swollen, volume, body)
    if volume <= 0:
        volume = body.volume
    factors = {body.name: own / body.mass.amount} | ({} if coat is None else {coat.name: factor})
    made, index = reweighed(composition, factors), vessel.index
    if factor != 1.0:
        skin = replace(made.skin, thickness=made.skin.thickness * factor)
        made, index = replace(made, skin=skin), BlockIndex.build(skin.surface, skin.thickness)
    copy = Vessel(made, index, bait.hardware, bait.frame, at * swollen)
    again = pose(copy, bait.plan.bait.suspends_within)
    mass, hull = made.mass(again.ends), copy.hull(again.ends)
    doubts = _doubts(bait, section, composition, held, at, at / tank if pull is not None else None)
    left = reserve(mass.amount, displaced * swollen, at, bait.plan.bait.suspends_within, doubts)
    predicted = composition.mass(ends).amount
    rest = drawn * tank - predicted
    causes = explained(
        _levers(bait, parts, body, coat, vessel, tank),
        None if section.dry is None else section.dry - predicted,
        None if pull is None else pull - rest,
        section.step,
    )
    assert body.substance is not None
    bare = body.mass.amount + inside
    table = tree.rows(section, predicted, rest, bare, None if coat is None else coat.mass.amount)
    known = section.dry is not None or section.uncoated is not None or pull is not None
    return {
        "rows": list(table),
        "words": tree.words(table, causes, section.step),
        "water_c": section.water,
        "water_kg_m3": tank,
        "step_g": section.step * 1e3,
        "displaced": tree.displacement(weighing, displaced),
        "body": tree.body(own / volume, body.substance.density, volume, body.volume) if known else None,
        "coat": None
        if on is None or coat is None or bait.coat is None
        else tree.coat(coat.mass.amount, factor, bait.coat.thickness),
        "explanations": tree.explanations(causes),
        **tree.again(left, bait.water, displaced * swollen, hull.centre, mass, bait.frame, tip),
        "postures": again.trees,
    }, odd


def _own(section: MeasuredSection, body: Part, inside: float, outside: float, by_lift: float | None) -> float:
    """Mass of the body's own material, kg.

    Parameters
    ----------
    section : MeasuredSection
    body : Part
    inside, outside : float, kg
        Of inserts and balls; of hooks and coat.
    by_lift : float or None, kg
        Mass of the whole by what it displaces and how it pulls under water.
    """
    own = body.mass.amount
    if section.dry is not None:
        own = section.dry - inside - outside
    elif section.uncoated is not None:
        own = section.uncoated - inside
    elif by_lift is not None:
        own = by_lift - inside - outside
    _check(own, body, section)
    return own


def _tank(bait: Bait, section: MeasuredSection) -> float:
    """Density of the water that the copy was weighed in: fresh beside a temperature, else the bait's own."""
    if section.water is None:
        return bait.water.density
    return water(section.water, section.salinity or 0.0, "measured").density


def _pull(section: MeasuredSection) -> float | None:
    """Reserve that was weighed, kg."""
    return section.reserve if section.in_water is None else -section.in_water


def _coat(bait: Bait, section: MeasuredSection, coat: Part | None, hooks: float) -> float | None:
    """Mass of the coat that was weighed, by itself or as what is left of the whole; None where it was not."""
    told = section.coat
    if told is None and section.dry is not None and section.uncoated is not None and coat is not None:
        told = section.dry - section.uncoated - hooks
        if told <= 0:
            raise InputError(
                Fault(
                    what="body and hooks weigh as much as the coated bait, so nothing is left for the coat",
                    where="measured.uncoated",
                    found=f"{section.uncoated * 1e3:g} g, hooks and fittings {hooks * 1e3:.2f} g, dry"
                    f" {section.dry * 1e3:g} g",
                    allowed="the body with its inserts, everything that is [[hardware]] off, less than dry",
                    next_step="weigh again, or correct the masses in [[hardware]]",
                )
            )
    if section.coat is not None and bait.coat is None:
        raise InputError(
            Fault(
                what="a coat was weighed, but the bait file states none",
                where="measured.coat",
                found=f"{section.coat * 1e3:g} g",
                allowed="only beside [coat]",
                next_step="add [coat] with its thickness and material",
            )
        )
    return told


def _check(own: float, body: Part, section: MeasuredSection) -> None:
    """Refuse weighings that leave nothing for the body."""
    if own > 0:
        return
    key = "dry" if section.dry is not None else "uncoated" if section.uncoated is not None else "in_water"
    raise InputError(
        Fault(
            what="what was weighed is less than inserts, hooks and coat together",
            where=f"measured.{key}",
            found=f"{own * 1e3:.2f} g are left for the body, {body.mass.amount * 1e3:.2f} g were expected",
            next_step="check the weighing, and the masses of inserts and hardware",
        )
    )


def _odd(swollen: float, volume: float, body: Part) -> list[Finding]:
    """Ask about a displaced volume that no copy of this body has."""
    if abs(swollen - 1) <= ODD and volume > 0:
        return []
    return [
        Finding(
            code="odd-weighing",
            level=Level.WARNING,
            piece=body.name,
            message=f"by its weighings the copy displaces {swollen - 1:+.0%} of what is drawn",
            advice="check both readings, that the bait was wholly under without touching, and the unit of the meshes",
        )
    ]


def _doubts(
    bait: Bait, section: MeasuredSection, composition: Composition, held: Reserve, at: float, waters: float | None
) -> list[Doubt]:
    """What weighing leaves in doubt.

    Parameters
    ----------
    waters : float or None
        The bait's water over the tank's, where it was weighed under water.
    """
    half = section.step / 2
    if waters is not None:
        found = [Doubt("step of the scale, in water", half * waters, half * waters)]
        if section.dry is not None and waters != 1.0:
            found.append(Doubt("step of the scale, dry", half * abs(waters - 1), half * abs(waters - 1)))
        return found
    found = [Doubt("step of the scale", half, half)]
    facets = abs(composition.deficit.displaced) * at
    if facets:
        found.append(Doubt("facets", facets, facets, Cause.FACETS))
    if section.dry is None:
        found += [doubt for doubt in held.doubts if doubt.cause is Cause.MASS]
    if bait.coat is not None and section.coat is None and (section.dry is None or section.uncoated is None):
        if section.dry is None:
            found += [doubt for doubt in held.doubts if doubt.cause is Cause.COAT]
        else:
            # The whole was weighed: a thicker coat means a lighter body, and what it displaces is all that is in doubt.
            thin = min(COAT_SPREAD, bait.coat.thickness)
            lift = composition.skin.painted * at
            found.append(Doubt("thickness of the coat", lift * thin, lift * COAT_SPREAD, Cause.COAT))
    return found


def _levers(
    bait: Bait, parts: Sequence[Part], body: Part, coat: Part | None, vessel: Vessel, tank: float
) -> list[Lever]:
    """Everything that may be otherwise, by what one unit of it does."""
    assert body.substance is not None
    own, stuff = body.mass.amount, body.substance
    low, high = 100 * (1 - stuff.low / stuff.density), 100 * (stuff.high / stuff.density - 1)
    skin, painted = vessel.index.volume, vessel.composition.skin.painted
    on = 0.0 if coat is None else coat.mass.amount
    wet = 0.0 if coat is None else coat.volume
    size = 0.01 * (3 * (own + stuff.density * beside_inserts(bait, parts).amount) + 2 * on)
    solid = stuff.density if bait.body.printed is None else bait.body.printed.solid.density
    levers = [
        Lever("density of the body", "%", own / 100, -own / 100, (max(low, _BATCH), max(high, _BATCH))),
        Lever("size of the body", "%", size, 0.01 * (3 * skin + 2 * wet) * tank - size, (1.0, 1.0)),
        Lever("skin of the body", "mm", painted * solid / 1e3, painted * (tank - solid) / 1e3, (0.15, 0.15)),
    ]
    if bait.coat is not None:
        dense, thick = bait.coat.substance.density, bait.coat.thickness * 1e3
        lift = painted * (tank - dense) / 1e3
        levers.append(Lever("thickness of the coat", "mm", painted * dense / 1e3, lift, (min(0.1, thick), 0.15)))
    if bait.hardware:
        mass = sum(item.mass for item in bait.hardware)
        sinks = 1 - tank * sum(item.volume for item in bait.hardware) / mass
        usual = tuple(
            1e3 * sum(abs(getattr(item, end) - item.mass) for item in bait.hardware) for end in ("low", "high")
        )
        levers.append(Lever("mass of hooks and fittings", "g", 1e-3, -sinks * 1e-3, (usual[0], usual[1])))
    heavy = [part for part in parts if part.role is Role.INSERT and net_mass(part, body) > 0]
    if heavy:
        part = max(heavy, key=lambda one: one.mass.amount)
        share = net_mass(part, body) / part.mass.amount * 1e-3
        usual_of = 0.02 * part.mass.amount * 1e3
        levers.append(Lever(f"mass of '{part.name}'", "g", share, -share, (usual_of, usual_of)))
    levers.append(Lever("air bubbles under water", "cm3", 0.0, tank * 1e-6, (0.0, 0.3)))
    levers.append(Lever("water taken up in the tank", "g", 0.0, -1e-3, (0.0, 0.5)))
    return levers
