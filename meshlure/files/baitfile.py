"""The bait file: what a maker says about a bait, in SI, with every fault of the file told at once."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from dataclasses import dataclass, field, replace
from pathlib import Path
from typing import Final

from meshlure.errors import Fault, InputError
from meshlure.files.sections.areas import AreasSection, read_areas
from meshlure.files.sections.bait import BaitSection, read_bait
from meshlure.files.sections.ballast import BallastSection, read_ballast
from meshlure.files.sections.balls import BallsSection, read_balls
from meshlure.files.sections.body import BodySection, read_body
from meshlure.files.sections.cast import CastSection, read_cast
from meshlure.files.sections.chamber import ChamberSection, read_chamber
from meshlure.files.sections.coat import CoatSection, read_coat
from meshlure.files.sections.hardware import HardwareSection, read_hardware
from meshlure.files.sections.inserts import InsertSection, read_insert
from meshlure.files.sections.limits import LimitsSection, read_limits
from meshlure.files.sections.line import LineSection, read_line
from meshlure.files.sections.measured import MeasuredSection, read_measured
from meshlure.files.sections.mould import MouldSection, read_mould
from meshlure.files.sections.pour import PourSection, read_pour
from meshlure.files.sections.retrieve import RetrieveSection, read_retrieve
from meshlure.files.sections.target import TargetSection, read_target
from meshlure.files.sections.water import WaterSection, read_water
from meshlure.files.tables import Tables, entry_path
from meshlure.files.toml import toml_table, toml_text

FORMAT: Final = 1
_BODY: Final = "body"


@dataclass(frozen=True)
class MeshName:
    """A mesh that a bait file names.

    Attributes
    ----------
    piece : str
        "body", or the insert's name.
    path : Path
    where : str
        Where it is named, "bait.toml: insert[2] 'belly weight'.mesh"; empty where no file names it.
    """

    piece: str
    path: Path
    where: str


@dataclass(frozen=True)
class BaitFile:
    """A bait as its maker states it; lengths in m, masses in kg, and so on.

    Attributes
    ----------
    path : Path or None
        The file; None where the bait was stated on the command line.
    bait, water, body : sections that every bait has
    inserts, balls, hardware : tuples of sections, in the file's order
    coat, line, measured, limits, target, chamber, mould : sections, None where they are not stated
    areas, retrieve, cast, ballast, pour : sections, at their defaults where they are not stated

    table : mapping
        The sections as they were stated, units and all.
    text : str
        Of the file; empty where there is none.

    Notes
    -----
    Names of materials and of hardware are text here: whether the stock knows them is asked by who looks them up.
    """

    path: Path | None
    bait: BaitSection
    water: WaterSection
    body: BodySection
    inserts: tuple[InsertSection, ...]
    balls: tuple[BallsSection, ...]
    hardware: tuple[HardwareSection, ...]
    coat: CoatSection | None
    line: LineSection | None
    areas: AreasSection
    retrieve: RetrieveSection
    cast: CastSection
    measured: MeasuredSection | None
    limits: LimitsSection | None
    target: TargetSection | None
    ballast: BallastSection
    chamber: ChamberSection | None
    mould: MouldSection | None
    pour: PourSection
    table: Mapping[str, object] = field(default_factory=dict, compare=False, repr=False)
    text: str = field(default="", compare=False, repr=False)

    def meshes(self) -> tuple[MeshName, ...]:
        """Every mesh of the bait, the body first."""
        named = [(_BODY, self.body.mesh, _BODY)]
        for number, insert in enumerate(self.inserts, 1):
            named.append((insert.name, insert.mesh, entry_path("insert", number, insert.name)))
        return tuple(
            MeshName(piece, mesh, f"{self.path.name}: {key}.mesh" if self.path else "") for piece, mesh, key in named
        )


def read_baitfile(path: Path) -> BaitFile:
    """Bait of a bait file, in SI.

    Parameters
    ----------
    path : Path
        A TOML file. Meshes are named relative to its folder.

    Raises
    ------
    InputError
        The file cannot be read, is no TOML (with the line), or has faults: all of them, each with its key.

    Notes
    -----
    Whether the meshes are there is found out when they are read.
    """
    text = toml_text(path)
    table = toml_table(text, path)
    try:
        return replace(bait_of(table, path.parent, path.stem, path), text=text)
    except InputError as error:
        told = [replace(fault, where=f"{path.name}: {fault.where}") for fault in error.faults]
        raise InputError(told) from None


def bait_of(table: Mapping[str, object], folder: Path, name: str, path: Path | None = None) -> BaitFile:
    """Bait of a table of keys as a bait file has them.

    Parameters
    ----------
    table : mapping
        As a TOML reader gives it.
    folder : Path
        What meshes are named relative to.
    name : str
        The bait's, where the table states none.
    path : Path or None
        The file that the table was read from.

    Raises
    ------
    InputError
        With every fault of the table, each with its key.
    """
    faults: list[Fault] = []
    tables = Tables(table, faults)
    if tables.format != FORMAT:
        found = repr(table["format"]) if "format" in table else ""
        step = f"write 'format = {FORMAT}' as the file's first line; a higher one needs a newer meshlure"
        raise InputError(Fault("the bait file's format is not known", "format", found, str(FORMAT), step))
    bait = read_bait(tables.asked("bait"), name)
    inserts = tuple(_inserts(tables, folder))
    result = BaitFile(
        path,
        bait,
        read_water(tables.one("water") or tables.none("water")),
        read_body(tables.asked("body"), folder),
        inserts,
        tuple(_balls(tables, inserts)),
        tuple(read_hardware(keys, bait.metres) for keys in tables.many("hardware")),
        tables.read("coat", read_coat),
        tables.read("line", lambda keys: read_line(keys, bait.metres)),
        tables.read("areas", read_areas) or AreasSection(),
        read_retrieve(tables.one("retrieve") or tables.none("retrieve")),
        read_cast(tables.one("cast") or tables.none("cast")),
        tables.read("measured", read_measured),
        tables.read("limits", read_limits),
        tables.read("target", read_target),
        read_ballast(tables.one("ballast") or tables.none("ballast")),
        tables.read("chamber", read_chamber),
        tables.read("mould", lambda keys: read_mould(keys, bait.metres)),
        read_pour(tables.one("pour") or tables.none("pour")),
        table=table,
    )
    tables.close()
    faults.extend(_same_names(result))
    if faults:
        raise InputError(faults)
    return result


def _inserts(tables: Tables, folder: Path) -> Iterator[InsertSection]:
    entries = tables.many("insert")
    names = [keys.peek("name") for keys in entries]
    for number, keys in enumerate(entries):
        yield read_insert(keys, folder, names[:number], names[number + 1 :])


def _balls(tables: Tables, inserts: tuple[InsertSection, ...]) -> Iterator[BallsSection]:
    filled: list[str] = []
    for keys in tables.many("balls"):
        section = read_balls(keys, inserts, filled)
        filled.append(section.chamber)
        yield section


def _same_names(bait: BaitFile) -> Iterator[Fault]:
    """Faults of pieces whose names cannot be told apart, in a report or as names of files."""
    seen = {_BODY: "the body"}
    named = [("insert", number, insert.name) for number, insert in enumerate(bait.inserts, 1)]
    named += [("hardware", number, item.name) for number, item in enumerate(bait.hardware, 1)]
    for section, number, name in named:
        path = entry_path(section, number, name)
        if name and name.casefold() in seen:
            allowed = "a name of its own; capitals make no difference"
            yield Fault(
                "two pieces have one name",
                f"{path}.name",
                f"{name!r}, as {seen[name.casefold()]}",
                allowed,
                "rename one",
            )
        seen.setdefault(name.casefold(), path)
