"""A bait made from its bait file: meshes read and examined, materials looked up, sizes and places checked."""

from __future__ import annotations

import time
from collections.abc import Callable, Mapping
from functools import partial
from os import PathLike
from pathlib import Path
from typing import TypeVar

import numpy as np

from meshlure import tolerances
from meshlure.bait.meshpiece import shape
from meshlure.bait.pieces import Bait, Balls, Coat, Frame, Hardware, MeshPiece, Role, Substance
from meshlure.bait.refusals import refuse
from meshlure.bait.substances import hardware, substance
from meshlure.errors import Fault, InputError
from meshlure.files.baitfile import BaitFile, read_baitfile
from meshlure.files.meshes import read_meshes
from meshlure.files.reading import MeshFile
from meshlure.files.sections.balls import BallsSection
from meshlure.files.sections.inserts import InsertSection
from meshlure.files.tables import entry_path
from meshlure.findings import Finding, Level
from meshlure.geometry.clearance import nearest
from meshlure.geometry.shells import winding_number
from meshlure.geometry.soundness import examine
from meshlure.stock.waters import Water, stated_density, water
from meshlure.units import LENGTH_UNITS

T = TypeVar("T")


def read_bait(path: str | PathLike[str]) -> Bait:
    """Return the bait that a bait file describes.

    Raises
    ------
    InputError
        With every fault of the file, or of its meshes.
    """
    return load(read_baitfile(Path(path)))


def load(plan: BaitFile) -> Bait:
    """Return the bait of a bait file's contents.

    Raises
    ------
    InputError
        With every fault of materials and meshes found at that stage.
    """
    made = _Lookup(plan)
    start = time.perf_counter()
    files = read_meshes(plan)
    read = time.perf_counter()
    findings = [finding for file in files.values() for finding in file.findings]
    pieces, found = _pieces(plan, files, made)
    findings += found
    frame = Frame.of(np.array(plan.bait.nose), np.array(plan.bait.back))
    findings += _size(plan, pieces[0], frame, files[pieces[0].name])
    _reach(pieces[0], made.hardware, plan)
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
        timings={"reading": read - start, "soundness": time.perf_counter() - read},
    )


class _Lookup:
    """Everything that the stock has to answer, all its faults told at once."""

    def __init__(self, plan: BaitFile) -> None:
        self._faults: list[Fault] = []
        self._file = f"{plan.path.name}: " if plan.path is not None else ""
        if plan.body.printed is not None:
            self._faults.append(Fault(
                what="the weight of a printed wall with infill is not computed",
                where=f"{self._file}body.printed",
                allowed="density or material",
                next_step="weigh the print and state density = its mass over the body's volume, both in one unit",
            ))
        stated = plan.body.substance
        self.body = None if stated is None else self._ask(lambda: substance(stated, f"{self._file}body.material"))
        self.inserts = [self._insert(number, insert) for number, insert in enumerate(plan.inserts, 1)]
        balls = [self._ask(partial(self._balls, n, row)) for n, row in enumerate(plan.balls, 1)]
        metal = [
            self._ask(partial(hardware, row, self._file + entry_path("hardware", n, row.name)))
            for n, row in enumerate(plan.hardware, 1)
        ]
        coat = plan.coat
        self.coat = None if coat is None else self._ask(
            lambda: Coat(coat.thickness, substance(coat.substance, f"{self._file}coat.material"))
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
        return self._ask(lambda: substance(stated, where))

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
    pieces = [MeshPiece(
        name=body_name, role=Role.BODY, surface=outer.outer, pairs=outer.pairs, shells=outer.shells,
        cavities=outer.cavities, cavities_flooded=plan.body.cavities == "flooded", substance=made.body,
        deficit=outer.deficit, skin_deficit=outer.skin_deficit,
    )]
    for insert, of in zip(plan.inserts, made.inserts, strict=True):
        own = shape(sounds[insert.name], insert.name)
        pieces.append(MeshPiece(
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
            fit=insert.fit,
            deficit=own.deficit,
            skin_deficit=own.skin_deficit,
        ))
    return pieces, findings


def _size(plan: BaitFile, body: MeshPiece, frame: Frame, file: MeshFile) -> list[Finding]:
    """Ask about a bait of unusual length, refuse an impossible one."""
    length = float(np.ptp(body.surface.vertices @ frame.nose))
    usual, possible = tolerances.LENGTH_USUAL, tolerances.LENGTH_POSSIBLE
    hint = _other_unit(length, plan.bait.length_unit)
    if not possible[0] <= length <= possible[1]:
        raise InputError(Fault(
            what="the body is of no bait's length",
            where=str(file.path),
            found=f"{length * 1e3:.4g} mm from nose to tail, read in {plan.bait.length_unit}",
            allowed=f"{possible[0] * 1e3:g} mm to {possible[1]:g} m",
            next_step=f"is the file in {hint}? State length_unit (or --unit) as the mesh was exported" if hint
            else "state length_unit (or --unit) as the mesh was exported, and check nose",
        ))
    if usual[0] <= length <= usual[1] or plan.bait.size_checked:
        return []
    asks = f": is the file in {hint}?" if hint else ": is that meant?"
    return [Finding(
        code="unusual-size",
        level=Level.WARNING,
        message=f"the body is {length * 1e3:.4g} mm long, read in {plan.bait.length_unit}{asks}",
        piece=body.name,
        advice="state length_unit as the mesh was exported; if the size is meant, add size_checked = true to [bait]",
    )]


def _other_unit(length: float, unit: str) -> str | None:
    """Name the unit in which the length would be usual, the nearest to a hand's length where several would."""
    middle = float(np.sqrt(np.prod(tolerances.LENGTH_USUAL)))
    low, high = tolerances.LENGTH_USUAL
    words = {"mm": "millimetres", "cm": "centimetres", "m": "metres", "in": "inches"}
    lengths = {name: length / LENGTH_UNITS[unit] * metres for name, metres in LENGTH_UNITS.items() if name != unit}
    fitting = {name: value for name, value in lengths.items() if low <= value <= high}
    if not fitting:
        return None
    best = min(fitting, key=lambda name: abs(float(np.log(fitting[name] / middle))))
    return f"{words[best]} ({fitting[best] * 1e3:.0f} mm)"


def _reach(body: MeshPiece, items: tuple[Hardware, ...], plan: BaitFile) -> None:
    """Refuse hardware far from the body."""
    if not items:
        return
    apart = nearest(body.surface, np.array([item.at for item in items])).distance
    faults = []
    for number, (item, distance) in enumerate(zip(items, apart, strict=True), 1):
        if distance <= tolerances.HARDWARE_REACH or winding_number(body.surface, item.at) > 0.5:
            continue
        place = ", ".join(f"{value / plan.bait.metres:.4g}" for value in item.at)
        where = entry_path("hardware", number, item.name) + ".at"
        faults.append(Fault(
            what="the hardware is far from the body",
            where=f"{plan.path.name}: {where}" if plan.path is not None else where,
            found=f"[{place}] {plan.bait.length_unit}, {distance * 1e3:.1f} mm from the body's skin",
            allowed=f"within {tolerances.HARDWARE_REACH * 1e3:g} mm of it",
            next_step="give its eye in the mesh's own coordinates and unit",
        ))
    if faults:
        raise InputError(faults)
