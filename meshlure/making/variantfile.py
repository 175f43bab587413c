"""A changed bait written as a whole: its meshes in mm, its bait file, and one package of every piece."""

from __future__ import annotations

from dataclasses import dataclass, replace
from pathlib import Path

from meshlure.bait.pieces import Bait
from meshlure.files.baitwriter import Changes, write_baitfile
from meshlure.files.sections.balls import BallsSection
from meshlure.files.sections.inserts import InsertSection
from meshlure.files.stl import write_stl
from meshlure.files.threemf import write_3mf
from meshlure.geometry.solids import Solid
from meshlure.geometry.surface import Surface
from meshlure.making.written import file_name, write_solid

BODY = "body.stl"


@dataclass(frozen=True, eq=False)
class NewInsert:
    """A piece that the bait did not have.

    Attributes
    ----------
    section : InsertSection
        As the bait file shall state it; its mesh's name is found here.
    surface : Surface
        Closed, outward.
    made : bool
        Whether it is a piece to be made, and so part of the package; glue and air are not.
    """

    section: InsertSection
    surface: Surface
    made: bool = True


@dataclass(frozen=True, eq=False)
class Variant:
    """What of a bait is changed.

    Attributes
    ----------
    name : str
        The new bait's.
    body : Solid
    inserts : tuple of NewInsert
    balls : tuple of BallsSection
    dropped : tuple of str
        Inserts that it no longer has.
    further : tuple of (str, Surface)
        Pieces to be written beside, which the bait file does not name: halves, plugs of a mould.
    body_density : float or None, kg/m3
    without : tuple of str
        Sections that the new bait file leaves out.
    """

    name: str
    body: Solid
    inserts: tuple[NewInsert, ...] = ()
    balls: tuple[BallsSection, ...] = ()
    dropped: tuple[str, ...] = ()
    further: tuple[tuple[str, Surface], ...] = ()
    body_density: float | None = None
    without: tuple[str, ...] = ()


def write_variant(folder: Path, stem: str, bait: Bait, variant: Variant) -> list[str]:
    """Write a changed bait into a folder: body, inserts and further pieces as STL, bait file and 3MF.

    Parameters
    ----------
    folder : Path
        Exists.
    stem : str
        Of bait file and package: "balanced".
    bait : Bait
        As it was, with all its pieces.
    variant : Variant

    Returns
    -------
    list of str
        Names of the files.

    Raises
    ------
    InputError
        Where a mesh does not come back as it was promised.

    Notes
    -----
    Inserts that stay are written as they were read, in mm: the bait file that comes out stands by itself. The package
    holds every piece that is made, in the order of the bait file.
    """
    used = {BODY}
    write_solid(variant.body, folder / BODY)
    meshes, pieces = {"body": BODY}, [("body", variant.body.surface())]
    for piece, file in zip(bait.pieces, bait.files[1:], strict=True):
        if piece.name in variant.dropped:
            continue
        meshes[piece.name] = file_name(piece.name, used)
        write_stl(folder / meshes[piece.name], file.surface)
        if piece.substance is not None:
            pieces.append((piece.name, file.surface))
    sections = []
    for new in variant.inserts:
        name = file_name(new.section.name, used)
        write_solid(Solid.of(new.surface), folder / name)
        sections.append(replace(new.section, mesh=Path(name)))
        if new.made:
            pieces.append((new.section.name, new.surface))
    for label, surface in variant.further:
        write_solid(Solid.of(surface), folder / file_name(label, used))
        pieces.append((label, surface))
    write_baitfile(
        folder / f"{stem}.toml",
        bait.plan,
        Changes(
            meshes=meshes,
            name=variant.name,
            body_density=variant.body_density,
            dropped=variant.dropped,
            inserts=tuple(sections),
            balls=variant.balls,
            without=variant.without,
        ),
    )
    write_3mf(folder / f"{stem}.3mf", pieces)
    return sorted([*used, f"{stem}.toml", f"{stem}.3mf"])
