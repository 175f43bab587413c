"""What a maker asks of the ballast, materials looked up, and what he asks for that cannot be."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from meshlure.bait.pieces import Bait, Substance
from meshlure.bait.substances import substance
from meshlure.errors import Fault, InputError
from meshlure.files.sections.ballast import BallastSection
from meshlure.files.sections.substance import Substance as Stated
from meshlure.making.balance.ballast import BALL, ROD, UNCUT
from meshlure.stock.balls import ball_diameters
from meshlure.stock.materials import materials
from meshlure.stock.rods import rod_diameters


@dataclass(frozen=True)
class Asked:
    """What the ballast may be.

    Attributes
    ----------
    stated : BallastSection
    metals : tuple of Substance
        In the order of the maker's liking.
    glue : Substance or None
        What fills the gap; None leaves sealed air.
    """

    stated: BallastSection
    metals: tuple[Substance, ...]
    glue: Substance | None


def asked(bait: Bait) -> Asked:
    """Return what a bait's [ballast] asks for.

    Raises
    ------
    InputError
        With everything in it that cannot be: names that the stock does not know, metals that are sold in none of the
        shapes, more cover than the body has room for, a stretch behind the tail.
    """
    stated, file = bait.plan.ballast, placed(bait, "ballast")
    faults = _beyond(bait, file)
    metals: list[Substance] = []
    for number, name in enumerate(stated.materials, 1):
        try:
            metals.append(_metal(name, stated, bait, f"{file}.materials[{number}]"))
        except InputError as error:
            faults += error.faults
    glue = None
    try:
        glue = glue_of(bait)
    except InputError as error:
        faults += error.faults
    if faults:
        raise InputError(faults)
    return Asked(stated, tuple(metals), glue)


def glue_of(bait: Bait) -> Substance | None:
    """Return what fills the gap round ballast, None where nothing does.

    Raises
    ------
    InputError
        Where the stock does not know it, or there is no pocket to leave a gap in.
    """
    stated = bait.plan.ballast
    if stated.pocket == UNCUT and stated.fit > 0:
        raise InputError(
            Fault(
                "without a pocket there is no gap",
                placed(bait, "ballast.fit"),
                f"fit {stated.fit * 1e3:g} mm, pocket = 'none'",
                "no fit, or pocket = 'embedded' or 'from belly'",
                "remove fit and glue: what is cast round the ballast touches it",
            )
        )
    return None if stated.glue is None else substance(Stated(material=stated.glue), placed(bait, "ballast.glue"))


def placed(bait: Bait, key: str) -> str:
    """Return where a key stands, for a message: the file's name and the key."""
    return key if bait.plan.path is None else f"{bait.plan.path.name}: {key}"


def _metal(name: str, stated: BallastSection, bait: Bait, where: str) -> Substance:
    metal = substance(Stated(material=name), where)
    known = metal.name or name
    sold = {ROD: rod_diameters(known), BALL: ball_diameters(known)}
    if not any(sold[shape] for shape in stated.shapes):
        shapes = " or ".join({ROD: "rod", BALL: "balls"}[shape] for shape in stated.shapes)
        names = [
            row.name
            for row in materials()
            if (ROD in stated.shapes and rod_diameters(row.name))
            or (BALL in stated.shapes and ball_diameters(row.name))
        ]
        raise InputError(
            Fault(
                f"{known} is not sold as {shapes}, so there are no sizes to choose from",
                where,
                name,
                ", ".join(names),
                "name one of these, or say its size and place yourself with --ballast",
            )
        )
    body = bait.body.substance
    if body is not None and metal.density <= body.density:
        raise InputError(
            Fault(
                "this is no heavier than the body, and no ballast for it",
                where,
                f"{known}, {metal.density / 1e3:g} g/cm3",
                f"more than the body's {body.density / 1e3:g} g/cm3",
                "name a heavier material",
            )
        )
    return metal


def _beyond(bait: Bait, file: str) -> list[Fault]:
    """What leaves no place in the body at all."""
    stated, frame = bait.plan.ballast, bait.frame
    spans = [float(np.ptp(bait.body.surface.vertices @ way)) for way in (frame.nose, frame.side, frame.back)]
    faults = []
    if 2 * stated.cover >= min(spans):
        faults.append(
            Fault(
                "the cover leaves nothing of the body",
                f"{file}.cover",
                f"{stated.cover * 1e3:g} mm on either side",
                f"less than {min(spans) * 500:.3g} mm, half of the body's {min(spans) * 1e3:.3g} mm",
                "ask for less cover",
            )
        )
    if stated.between is not None and stated.between[0] >= spans[0]:
        faults.append(
            Fault(
                "the stretch for the ballast begins behind the tail",
                f"{file}.between",
                f"{stated.between[0] * 1e3:g} to {stated.between[1] * 1e3:g} mm behind the nose",
                f"0 to {spans[0] * 1e3:.4g} mm, the body's length",
                "state distances behind the nose tip",
            )
        )
    return faults
