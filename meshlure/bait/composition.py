"""The bait as one thing: every region weighed once, and the skin that displaces water."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from functools import cached_property

import numpy as np

from meshlure import tolerances
from meshlure.bait.chambers import BallRow, ball_row
from meshlure.bait.contact import untouched
from meshlure.bait.gaps import with_gaps
from meshlure.bait.meshpiece import solid_of
from meshlure.bait.outside import outside_findings
from meshlure.bait.overlaps import Filling, fill
from meshlure.bait.pieces import Bait, MeshPiece, Role, Substance
from meshlure.bait.printed import Core, as_printed, core_left, print_findings, substance_of
from meshlure.bait.relations import Relation, relation
from meshlure.bait.smooth import Deficit, coarse, deficit
from meshlure.errors import Fault, InputError
from meshlure.findings import Finding, Level
from meshlure.geometry.moments import NOTHING, Moments, point_moments, skin_moments, solid_moments
from meshlure.geometry.solids import Solid, SolidError, new_tag
from meshlure.geometry.surface import Bools, Floats, Surface, together
from meshlure.geometry.topology import EdgePairs, paired


@dataclass(frozen=True, eq=False)
class Part:
    """One piece as it counts: what is left to it, weighed.

    Attributes
    ----------
    name, role : str, Role
    substance : Substance or None
    volume : float, m3
        Left to the piece after replacement.
    mass : Moments, kg
    centre : (3,) array, m
    """

    name: str
    role: Role
    substance: Substance | None
    volume: float
    mass: Moments
    centre: Floats


@dataclass(frozen=True, eq=False)
class Skin:
    """What displaces water.

    Attributes
    ----------
    surface : Surface
        Outer skin, with the walls of flooded hollows turned inward.
    thickness : (m,) array, m
        Of the coat on each face.
    own : (m,) array of bool
        Faces of the body's own skin, and of pieces coated like it, which take the coat.
    outer : Surface
        Outer skin alone, every closed-off space filled.
    outer_pairs : EdgePairs
        Its edges.
    bare : Surface
        Outer skin without the lips.
    lips : dict of Surface
        By lip piece: its part outside the body.
    painted : float, m2
        Area of the body's own skin.
    """

    surface: Surface
    thickness: Floats
    own: Bools
    outer: Surface
    outer_pairs: EdgePairs
    bare: Surface
    lips: dict[str, Surface]
    painted: float


@dataclass(frozen=True, eq=False)
class Composition:
    """A bait put together.

    Attributes
    ----------
    parts : tuple of Part
        All but the balls, which may lie at either end.
    rows : tuple of BallRow
    skin : Skin
    deficit : Deficit
        What the facets leave out.
    findings : tuple of Finding
    core : Core or None
        What lies within the wall of a printed body.
    """

    parts: tuple[Part, ...]
    rows: tuple[BallRow, ...]
    skin: Skin
    deficit: Deficit
    findings: tuple[Finding, ...]
    core: Core | None = None

    @cached_property
    def still_mass(self) -> Moments:
        """Mass of all that does not move, kg."""
        return sum((part.mass for part in self.parts), NOTHING)

    def mass(self, ends: Mapping[str, str]) -> Moments:
        """Return the whole bait's mass, kg, with the balls of each chamber at the given end."""
        return sum((row.mass(ends[row.balls.chamber]) for row in self.rows), self.still_mass)


def compose(bait: Bait) -> Composition:
    """Return the bait put together, with what was found on the way.

    Parameters
    ----------
    bait : Bait

    Notes
    -----
    A piece that lies wholly inside the body changes mass and first moment by plain sums and the outer skin not at
    all; only where a piece crosses the body's skin are the two cut against each other. Displaced is the outer
    surface of body and outside pieces joined, every space closed off by them filled, less what floods.

    Raises
    ------
    InputError
        Where balls do not fit their chamber.
    SolidError
        Where a cut's parts do not add up to the whole.
    """
    body, gapped = bait.body, with_gaps(bait.body, bait.pieces)
    pieces = gapped.pieces
    filling = fill(body, pieces)
    findings = [*gapped.findings, *filling.findings]
    relations = {piece.name: [relation(shell, body.shells) for shell in piece.shells] for piece in pieces}
    findings += untouched(body, pieces, relations)
    if any(finding.stops for finding in findings):
        return Composition((), (), _plain_skin(body), Deficit(0.0, 0.0), tuple(findings))
    inner = all(lies is Relation.INSIDE for shells in relations.values() for lies in shells)
    left: Solid | None = None
    if inner:
        outer = _Outer(body.surface, body.pairs, np.ones(len(body.surface.faces), dtype=np.bool_), body.surface, {})
        material = _body_alone(body, filling)
    else:
        outer, left, met = _crossed(body, pieces, filling)
        material = _moments(left)
        findings += met
    if material.amount <= tolerances.VOLUME_SHARE * solid_moments(body.surface).amount:
        findings.append(_nothing_left(body))
    skin = _skin(bait, outer, filling)
    short = deficit(body, pieces, filling, skin.surface, left)
    findings += coarse(body, bait.water.density)
    core = None if body.printed is None else core_left(body.printed, filling.everything())
    if core is not None:
        findings += print_findings(body, core, bait.water.density)
    parts = [_body_part(body, material, core), *_filling_parts(pieces, filling)]
    parts += [
        Part(h.name, Role.HARDWARE, h.substance, h.volume, point_moments(h.mass, h.at), h.at) for h in bait.hardware
    ]
    if bait.coat is not None:
        volume, substance = skin_moments(skin.surface, skin.thickness), bait.coat.substance
        parts.append(Part("coat", Role.COAT, substance, volume.amount, _weighed(volume, substance), volume.centre))
    rows, tight = _rows(bait, filling)
    return Composition(tuple(parts), rows, skin, short, tuple(findings + tight), core)


def weighed(composition: Composition, ends: Mapping[str, str]) -> tuple[Part, ...]:
    """Return everything that weighs, the balls of each chamber at the given end as parts of their own."""
    parts = list(composition.parts)
    for row in composition.rows:
        end, made_of = ends[row.balls.chamber], row.balls.substance
        volume, mass = row.volume(end), row.mass(end)
        parts.append(Part(f"balls in {row.balls.chamber}", Role.BALL, made_of, volume.amount, mass, mass.centre))
    return tuple(parts)


def room_taken(bait: Bait) -> Solid | None:
    """Return the joined room of everything that lies in or on the body, None where there is nothing."""
    return fill(bait.body, with_gaps(bait.body, bait.pieces).pieces).everything()


def inserts_left(bait: Bait) -> dict[str, Solid]:
    """Return by insert name the solid that is left to it once later pieces have taken their space."""
    return fill(bait.body, bait.pieces).solids


@dataclass(frozen=True, eq=False)
class _Outer:
    surface: Surface
    pairs: EdgePairs
    own: Bools
    bare: Surface
    lips: dict[str, Surface]
    solid: Solid | None = None


def _nothing_left(body: MeshPiece) -> Finding:
    return Finding(
        code="nothing-left",
        level=Level.FAULT,
        piece=body.name,
        message="nothing is left of the body: its inserts and hollows take all its space",
        advice="check which mesh is the body, and that every mesh is exported from the same origin in the same unit",
        stops=True,
    )


def _rows(bait: Bait, filling: Filling) -> tuple[tuple[BallRow, ...], list[Finding]]:
    """The balls in their chambers; every row that does not fit is told."""
    drawn = {piece.name: piece for piece in bait.pieces}
    hollow = {space.name: space for space in filling.spaces if space.owner is None}
    rows: list[BallRow] = []
    faults: list[Fault] = []
    for balls in bait.balls:
        try:
            rows.append(ball_row(balls, drawn[balls.chamber].surface, hollow[balls.chamber], bait.frame))
        except InputError as error:
            faults += error.faults
    if faults:
        raise InputError(faults)
    return tuple(rows), [finding for row in rows for finding in row.findings]


def _weighed(volume: Moments, substance: Substance | None) -> Moments:
    return volume * (substance.density if substance is not None else 0.0)


def _moments(solid: Solid) -> Moments:
    return NOTHING if solid.empty else solid_moments(solid.surface())


def _body_alone(body: MeshPiece, filling: Filling) -> Moments:
    whole, taken = solid_moments(body.surface), filling.everything()
    return whole if taken is None else whole - _moments(taken)


def _crossed(body: MeshPiece, pieces: tuple[MeshPiece, ...], filling: Filling) -> tuple[_Outer, Solid, list[Finding]]:
    """The outer skin and the body's own material where some piece crosses the body's skin."""
    tag = new_tag()
    whole = solid_of(body.surface, body.name, tag)
    taken = filling.everything()
    assert taken is not None
    material = whole.less(taken)
    common = whole.met(taken)
    lost = abs(material.volume + common.volume - whole.volume)
    # A plug's end lies in the skin to the rounding of a file's numbers: slivers of that size may be lost.
    if lost > tolerances.VOLUME_SHARE * whole.volume:
        raise SolidError(f"cutting '{body.name}' lost {lost * 1e9:.3g} mm3")
    # Hollows as drawn, and solids laid over them: no two skins then lie in each other that were not drawn so, which
    # the solid library would leave folded.
    walls = whole.less(*filling.drawn) if filling.drawn else whole
    outer = walls.joined(*filling.solids.values()).filled()
    lips = {piece.name for piece in pieces if piece.lip}
    others = [solid for name, solid in filling.solids.items() if name not in lips]
    bare = walls.joined(*others).filled() if lips else outer
    findings = outside_findings(body, pieces, filling, whole, outer)
    surface = outer.surface()
    painted = [tag, *(n for piece in pieces if piece.coated for n in np.unique(filling.solids[piece.name].sources()))]
    beyond = {name: filling.solids[name].less(whole) for name in lips}
    skin = _Outer(
        surface,
        paired(surface),
        np.isin(outer.sources(), painted),
        bare.surface() if lips else surface,
        {name: solid.surface() for name, solid in beyond.items() if not solid.empty},
        outer,
    )
    return skin, material, findings


def _skin(bait: Bait, outer: _Outer, filling: Filling) -> Skin:
    coat = 0.0 if bait.coat is None else bait.coat.thickness
    thickness = np.where(outer.own, coat, 0.0)
    surface, own = outer.surface, outer.own
    wet = filling.flooded()
    if wet is not None:
        if outer.solid is not None:
            wet = wet.met(outer.solid)
        walls = wet.surface().turned()
        surface = together(surface, walls)
        thickness = np.concatenate([thickness, np.zeros(len(walls.faces))])
        own = np.concatenate([own, np.zeros(len(walls.faces), dtype=np.bool_)])
    area = np.linalg.norm(outer.surface.double_areas, axis=1) / 2
    painted = float(area[outer.own].sum())
    return Skin(surface, thickness, own, outer.surface, outer.pairs, outer.bare, outer.lips, painted)


def _plain_skin(body: MeshPiece) -> Skin:
    surface = body.surface
    every = np.ones(len(surface.faces), dtype=np.bool_)
    return Skin(surface, np.zeros(len(surface.faces)), every, surface, body.pairs, surface, {}, surface.area)


def _part(piece: MeshPiece, volume: Moments) -> Part:
    return Part(
        piece.name, piece.role, piece.substance, volume.amount, _weighed(volume, piece.substance), volume.centre
    )


def _body_part(body: MeshPiece, volume: Moments, core: Core | None) -> Part:
    """The body's own material; that of a printed one is wall and infill, each where it lies."""
    if core is None or body.printed is None:
        return _part(body, volume)
    mass = as_printed(volume, core.volume, body.printed)
    substance = substance_of(body.printed, mass.amount, volume.amount)
    return Part(body.name, body.role, substance, volume.amount, mass, volume.centre)


def _filling_parts(pieces: tuple[MeshPiece, ...], filling: Filling) -> list[Part]:
    """Inserts and voids in the bait file's order, then the cavities that meshes close off themselves."""
    left = filling.solids | {space.name: space.solid for space in filling.spaces if space.owner is None}
    parts = [_part(piece, _moments(left[piece.name])) for piece in pieces]
    for space in filling.spaces:
        if space.owner is not None:
            moments = _moments(space.solid)
            parts.append(Part(space.name, Role.VOID, None, moments.amount, NOTHING, moments.centre))
    return parts
