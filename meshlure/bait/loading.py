"""A bait made from its bait file: meshes read and examined, materials looked up, sizes and places checked."""

from __future__ import annotations

import time
from collections.abc import Callable, Mapping
from functools import partial
from os import PathLike
from pathlib import Path
from typing import TypeVar

import numpy as np

from meshlure.bait.axes import axis_findings
from meshlure.bait.extent import check_reach, size_findings
from meshlure.bait.halves import half_findings
from meshlure.bait.loose import drawn_balls, joined_findings
from meshlure.bait.mended import mended
from meshlure.bait.meshpiece import shape
from meshlure.bait.pieces import Bait, Balls, Coat, Frame, MeshPiece, Role, Substance
from meshlure.bait.printed import as_drawn, printed, solid_print
from meshlure.bait.refusals import refuse
from meshlure.bait.substances import hardware, name_findings, substance
from meshlure.errors import Fault, InputError
from meshlure.files.baitfile import BaitFile, read_baitfile
from meshlure.files.meshes import read_meshes
from meshlure.files.reading import MeshFile
from meshlure.files.sections.balls import BallsSection
from meshlure.files.sections.inserts import InsertSection
from meshlure.files.sections.substance import Substance as Stated
from meshlure.files.source import LARGEST
from meshlure.files.tables import entry_path
from meshlure.findings import Finding
from meshlure.geometry.mending.steps import Wishes
from meshlure.geometry.shells import enclosed_volume
from meshlure.geometry.soundness import examine
from meshlure.stock.waters import Water, stated_density, water

T = TypeVar("T")


def read_bait(path: str | PathLike[str], largest: int = LARGEST) -> Bait:
    """Return the bait that a bait file describes.

    Parameters
    ----------
    path : path
    largest : int
        Bytes beyond which a mesh file is not read.

    Raises
    ------
    InputError
        With every fault of the file, or of its meshes.
    """
    return load(read_baitfile(Path(path)), largest=largest)


def load(plan: BaitFile, wishes: Wishes | None = None, largest: int = LARGEST) -> Bait:
    """Return the bait of a bait file's contents.

    Parameters
    ----------
    plan : BaitFile
    wishes : Wishes or None
        How its meshes are mended before they are examined; None takes them as they are.
    largest : int
        Bytes beyond which a mesh file is not read.

    Raises
    ------
    InputError
        With every fault of materials and meshes found at that stage.
    """
    made = _Lookup(plan)
    start = time.perf_counter()
    files = read_meshes(plan, largest)
    if wishes is not None:
        files = mended(files, wishes)
    return _assembled(plan, files, made, time.perf_counter() - start)


def assemble(plan: BaitFile, files: Mapping[str, MeshFile]) -> Bait:
    """Return the bait of a bait file's contents and of meshes at hand.

    Parameters
    ----------
    plan : BaitFile
    files : mapping of MeshFile
        By piece, the body's first, then the inserts' in the bait file's order.

    Raises
    ------
    InputError
        With every fault of materials and meshes found at that stage.
    """
    return _assembled(plan, files, _Lookup(plan), 0.0)


def _assembled(plan: BaitFile, files: Mapping[str, MeshFile], made: _Lookup, reading: float) -> Bait:
    start = time.perf_counter()
    findings = [finding for file in files.values() for finding in file.findings]
    pieces, found = _pieces(plan, files, made)
    findings += found
    frame = Frame.of(np.array(plan.bait.nose), np.array(plan.bait.back))
    findings += size_findings(pieces[0], frame, plan, files[pieces[0].name])
    findings += axis_findings(pieces[0].surface, frame, pieces[0].name)
    findings += half_findings(pieces[0].surface, frame, pieces[0].name)
    check_reach(pieces[0], made.hardware, plan)
    return Bait(
        name=plan.bait.name,
        frame=frame,
        body=pieces[0],
        pieces=tuple(pieces[1:]),
        balls=made.balls,
        hardware=made.hardware,
        coat=made.coat,
        water=made.water,
        axes=tuple(np.array(axis) for axis in plan.areas.axes),
        plan=plan,
        files=tuple(files.values()),
        findings=tuple(findings),
        timings={"reading": reading, "soundness": time.perf_counter() - start},
    )


class _Lookup:
    """Everything that the stock has to answer, all its faults told at once."""

    def __init__(self, plan: BaitFile) -> None:
        self._faults: list[Fault] = []
        self._file = f"{plan.path.name}: " if plan.path is not None else ""
        stated = plan.body.substance
        made = plan.body.printed
        self.solid = (
            None
            if made is None
            else self._ask(lambda: solid_print(substance(made.substance, f"{self._file}body.printed.material"), made))
        )
        place = f"{self._file}body.material" if plan.path is not None else "--material"
        self.body = None if stated is None else self._ask(lambda: substance(stated, place))
        self.inserts = [self._insert(number, insert) for number, insert in enumerate(plan.inserts, 1)]
        self.glues = [self._glue(number, insert) for number, insert in enumerate(plan.inserts, 1)]
        balls = [self._ask(partial(self._balls, n, row)) for n, row in enumerate(plan.balls, 1)]
        metal = [
            self._ask(partial(hardware, row, self._file + entry_path("hardware", n, row.name)))
            for n, row in enumerate(plan.hardware, 1)
        ]
        coat = plan.coat
        self.coat = (
            None
            if coat is None
            else self._ask(lambda: Coat(coat.thickness, substance(coat.substance, f"{self._file}coat.material")))
        )
        found = self._ask(lambda: _water(plan, f"{self._file}water"))
        if self._faults or found is None:
            raise InputError(self._faults)
        self.water: Water = found
        self.balls = tuple(row for row in balls if row is not None)
        self.hardware = tuple(row for row in metal if row is not None)

    def _balls(self, number: int, stated: BallsSection) -> Balls:
        where = f"{self._file}{entry_path('balls', number, stated.chamber)}.material"
        return Balls(stated.chamber, stated.diameter, stated.count, substance(stated.substance, where), stated.at)

    def _insert(self, number: int, insert: InsertSection) -> Substance | None:
        stated = insert.substance
        if stated is None:
            return None
        where = f"{self._file}{entry_path('insert', number, insert.name)}.material"
        if not self._file:
            where = f"--insert {insert.mesh}={stated.material}"
        return self._ask(lambda: substance(stated, where))

    def _glue(self, number: int, insert: InsertSection) -> Substance | None:
        name = insert.glue
        if name is None:
            return None
        where = f"{self._file}{entry_path('insert', number, insert.name)}.glue"
        return self._ask(lambda: substance(Stated(material=name), where))

    def _ask(self, question: Callable[[], T]) -> T | None:
        try:
            return question()
        except InputError as error:
            self._faults.extend(error.faults)
            return None


def _water(plan: BaitFile, where: str) -> Water:
    stated = plan.water
    if stated.density is not None:
        return stated_density(stated.density, stated.temperature, where)
    assert stated.temperature is not None
    assert stated.salinity is not None
    return water(stated.temperature, stated.salinity, where)


def _pieces(plan: BaitFile, files: Mapping[str, MeshFile], made: _Lookup) -> tuple[list[MeshPiece], list[Finding]]:
    """Body and inserts from their meshes; every mesh is examined before any fault stops."""
    sounds = {name: examine(file.surface, name) for name, file in files.items()}
    findings = [finding for sound in sounds.values() for finding in sound.findings]
    refuse(findings, {name: str(file.path) for name, file in files.items()})
    body_name, *_ = files
    outer = shape(sounds[body_name], body_name)
    outers = [outer]
    made_of, how = made.body, None
    if plan.body.printed is not None and made.solid is not None:
        how = printed(made.solid, plan.body.printed, outer.outer)
        made_of = as_drawn(how, outer.outer, outer.cavities)
    pieces = [
        MeshPiece(
            name=body_name,
            role=Role.BODY,
            surface=outer.outer,
            pairs=outer.pairs,
            shells=outer.shells,
            cavities=outer.cavities,
            cavities_flooded=plan.body.cavities == "flooded",
            substance=made_of,
            deficit=outer.deficit,
            skin_deficit=outer.skin_deficit,
            printed=how,
        )
    ]
    for insert, of, glue in zip(plan.inserts, made.inserts, made.glues, strict=True):
        own = shape(sounds[insert.name], insert.name)
        outers.append(own)
        pieces.append(
            MeshPiece(
                name=insert.name,
                role=Role.INSERT if insert.void is None else Role.VOID,
                surface=own.outer,
                pairs=own.pairs,
                shells=own.shells,
                cavities=own.cavities,
                cavities_flooded=insert.cavities == "flooded",
                substance=of,
                flooded=insert.void == "flooded",
                replaces=insert.replaces,
                lip=insert.lip,
                coated=insert.coated,
                fit=insert.fit,
                glue=glue,
                deficit=own.deficit,
                skin_deficit=own.skin_deficit,
            )
        )
    for piece, own in zip(pieces, outers, strict=True):
        whole = enclosed_volume(own.outer) - sum(map(enclosed_volume, own.cavities))
        findings += joined_findings(sounds[piece.name], whole, piece.name)
        findings += drawn_balls(sounds[piece.name], piece, pieces)
        findings += name_findings(piece.name, piece.substance) if piece.role is Role.INSERT else ()
    return pieces, findings
