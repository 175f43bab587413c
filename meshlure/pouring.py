"""Pouring: what a casting is mixed from, or what a print's walls and infill come to, and what that makes of the bait."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, replace
from typing import Any, Final

from meshlure.bait.composition import Part, compose, weighed
from meshlure.bait.pieces import Bait, Role, Substance
from meshlure.bait.refusals import refuse
from meshlure.bait.reweighed import reweighed
from meshlure.bait.substances import substance
from meshlure.errors import Fault, InputError
from meshlure.examine import study
from meshlure.files.sections.substance import Substance as Stated
from meshlure.findings import Finding, Level
from meshlure.geometry.blocks import BlockIndex
from meshlure.making.mix import Mix, batch, mixed, spread
from meshlure.physics.immersion import Hull
from meshlure.physics.posture import Attitude, attitude
from meshlure.physics.repose import Dangle, Repose, Vessel
from meshlure.posing import pose
from meshlure.results import pour as tree
from meshlure.results.account import cautions
from meshlure.results.study import Study

Tree = dict[str, Any]

OFF: Final = (-0.03, 0.03)
"""Shares by which one batch's density strays from another's: common practice, no source."""

SHARES: Final = (0.0, 0.1, 0.2, 0.3, 0.4, 0.5)

_RESINS: Final = frozenset({"polyurethane", "epoxy", "polyester"})
"""What a material calls for caution about by which it is known for a casting resin."""


@dataclass(frozen=True, eq=False)
class Outcome:
    """A bait with its body of some density.

    Attributes
    ----------
    density : float, kg/m3
    mass, reserve : float, kg
    attitude : Attitude or None
        At rest; None where it has none.
    """

    density: float
    mass: float
    reserve: float
    attitude: Attitude | None


@dataclass(frozen=True, eq=False)
class Bench:
    """A bait put together, on the bench.

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
    def hull(self) -> Hull:
        """What displaces water."""
        return self.vessel.hull(self.main.ends)

    @property
    def mass(self) -> float:
        """Of the whole bait, kg."""
        return self.vessel.composition.mass(self.main.ends).amount

    def with_body(self, density: float) -> Outcome:
        """Return the bait with its body of another density, kg/m3, put to rest anew from the posture it had."""
        made_of = self.body.substance
        assert made_of is not None
        composition = reweighed(self.vessel.composition, {self.body.name: density / made_of.density})
        vessel = replace(self.vessel, composition=composition)
        mass = composition.mass(self.main.ends).amount
        reserve = self.hull.volume * vessel.water - mass
        up = self.main.rest.state.up if isinstance(self.main, Repose) else self.vessel.frame.back
        rest = vessel.reposed(self.main.ends, up) if reserve > 0 else None
        stays = vessel.dangle(self.main.ends).hang.up if rest is None else rest.rest.state.up
        frame = vessel.frame
        angles = None if stays is None else attitude(stays, frame.nose, frame.back, frame.side)
        return Outcome(density, mass, reserve, angles)


def pour(bait: Bait) -> Study:
    """Return the study of a bait with what it takes to make it.

    Parameters
    ----------
    bait : Bait

    Raises
    ------
    InputError
        Where resin or balloons are no such thing, or a mass or a volume is left undefined.
    """
    resin, balloons = _materials(bait)
    found = study(bait)
    bench = Bench.of(bait)
    wanted, how, findings = _wanted(bench)
    mix, reached = mixed(wanted, resin.density, balloons.density, bait.plan.pour.packing)
    got = bench.with_body(mix.density)
    findings += _judged(bench, mix, reached, wanted, resin)
    results: Mapping[str, Any] = tree.with_pour(
        found.results,
        tree.cast(
            bait=bait,
            body=bench.body,
            wanted=wanted,
            how=how,
            mix=mix,
            reached=reached,
            names=(resin, balloons),
            spread=spread(mix, resin, balloons),
            batch=batch(mix, bench.body.volume, bait.plan.pour),
            got=got,
            off=[(share, bench.with_body(mix.density * (1 + share))) for share in OFF],
            shares=[
                (one, bench.with_body(one.density))
                for one in (Mix(resin.density, balloons.density, share, bait.plan.pour.packing) for share in SHARES)
            ],
            parts=bench.parts,
            threshold=found.results["buoyancy"]["suspends_within_g"],
        ),
        findings,
        cautions(bait, {*resin.triggers, *balloons.triggers, *_pressure(bait)}),
    )
    return replace(found, results=results)


def _materials(bait: Bait) -> tuple[Substance, Substance]:
    """Resin and balloons, every fault of both told at once."""
    stated = bait.plan.pour
    faults: list[Fault] = []
    found: list[Substance] = []
    for key, of in (("resin", stated.resin), ("balloons", stated.balloons)):
        try:
            made_of = _substance(of, f"pour.{key}")
        except InputError as error:
            faults += error.faults
            continue
        trouble = _no_resin(made_of) if key == "resin" else _no_balloons(made_of)
        if trouble is not None:
            faults.append(replace(trouble, where=f"pour.{key}"))
        found.append(made_of)
    if not faults and found[0].density == found[1].density:
        faults.append(
            Fault(
                what="resin and balloons have one density, so no mix has another",
                where="pour.balloons",
                found=f"{found[1].density / 1e3:g} g/cm3 both",
                next_step="state the density of the single balloons, such as balloons = '0.15 g/cm3'",
            )
        )
    if faults:
        raise InputError(faults)
    return found[0], found[1]


def _substance(stated: Stated, where: str) -> Substance:
    made_of = substance(stated, where)
    if stated.material is not None:
        return made_of
    # A stated density does not say what it is of: the cautions of what is mostly cast stand in.
    return replace(made_of, triggers=("polyurethane", "epoxy") if where.endswith("resin") else ("fine dust",))


def _no_resin(made_of: Substance) -> Fault | None:
    if made_of.name is None or (_RESINS & set(made_of.triggers) and "fine dust" not in made_of.triggers):
        return None
    return Fault(
        what="this is no casting resin",
        where="",
        found=made_of.name,
        allowed="polyurethane casting resin, epoxy casting resin, polyester casting resin, or a density",
        next_step="name the resin without its filler, or state its cured density: '1.05 g/cm3'",
    )


def _no_balloons(made_of: Substance) -> Fault | None:
    if made_of.name is None or ("fine dust" in made_of.triggers and "sanding" not in made_of.triggers):
        if made_of.name is None or not made_of.name.endswith("tapped bulk"):
            return None
        return Fault(
            what="this is the density of balloons with the air between them",
            where="",
            found=made_of.name,
            allowed="the density of the single balloons",
            next_step="name 'glass microballoons true', or state the density on their tin: '0.15 g/cm3'",
        )
    return Fault(
        what="these are no balloons or other powder to fill a resin with",
        where="",
        found=made_of.name,
        allowed="glass microballoons true, phenolic microballoons, fumed silica, or a density",
        next_step="name one, or state the density of the single grains: '0.15 g/cm3'",
    )


def _wanted(bench: Bench) -> tuple[float, str, list[Finding]]:
    """Density that the body is to have, kg/m3, what asked for it, and what is in the way."""
    body, plan = bench.body, bench.bait.plan
    assert body.substance is not None
    others = bench.mass - body.mass.amount
    target = plan.target
    if plan.pour.mass is not None:
        whole, how = plan.pour.mass, "mass"
    elif target is not None and target.reserve is not None and target.vary == "body density":
        whole, how = bench.hull.volume * bench.vessel.water - target.reserve, "reserve"
    else:
        return body.substance.density, "density", []
    density = (whole - others) / body.volume
    if density > 0:
        return density, how, []
    return (
        density,
        how,
        [
            Finding(
                code="mass-out-of-reach",
                level=Level.FAULT,
                piece=body.name,
                message=f"what is not body weighs {others * 1e3:.2f} g already, and {whole * 1e3:.2f} g are wanted of the"
                " whole bait",
                advice="take lighter hooks or less ballast, or ask for more",
            )
        ],
    )


def _judged(bench: Bench, mix: Mix, reached: bool, wanted: float, resin: Substance) -> list[Finding]:
    """Say where the mix does not reach the density, or hardly pours."""
    if wanted <= 0 or (reached and mix.flow == "pours"):
        return []  # what cannot weigh so little is told already
    name = bench.body.name
    if not reached:
        nearest = (
            "unfilled resin" if mix.share == 0 else f"{mix.share:.2f} of the volume balloons, the most that fills a mould"
        )
        advice = (
            "take lighter balloons or a lighter resin, a larger body, or less ballast"
            if wanted < mix.density
            else "take a denser resin or more ballast"
        )
        return [
            Finding(
                code="mix-out-of-reach",
                level=Level.FAULT,
                piece=name,
                message=f"no mix of {resin.name or 'this resin'} and these balloons has {wanted / 1e3:.3f} g/cm3: the"
                f" nearest, {nearest}, has {mix.density / 1e3:.3f} g/cm3",
                advice=advice,
            )
        ]
    return [
        Finding(
            code="stiff-mix",
            level=Level.WARNING,
            piece=name,
            message=f"with {mix.share:.2f} of its volume balloons the mix is stiff: it is spooned rather than poured, and"
            " keeps bubbles",
            advice="take lighter balloons, so that fewer are needed; weigh a trial casting",
        )
    ]


def _pressure(bait: Bait) -> set[str]:
    """Hollows that a pressure pot crushes."""
    hollow = any(piece.role is Role.VOID and not piece.flooded for piece in bait.pieces) or bait.body.cavities
    return {"pressure"} if hollow else set()
