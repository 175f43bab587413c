"""A bait's beginning: from a mesh and what is known of it to a bait file that can be reported on."""

from __future__ import annotations

import tomllib
from collections.abc import Callable, Sequence
from dataclasses import dataclass, replace
from pathlib import Path
from typing import Final

import numpy as np

from meshlure.bait.extent import check_reach
from meshlure.bait.guess import Clue, Guess, Pose, Sureness, direction_words, guess
from meshlure.bait.loading import load
from meshlure.bait.pieces import Bait
from meshlure.bait.substances import hardware
from meshlure.errors import Fault, InputError
from meshlure.files.baitfile import BaitFile, bait_of
from meshlure.files.formats import FORMATS
from meshlure.files.keys import Keys
from meshlure.files.newbait import NewBait, NewHardware, NewPiece, new_text
from meshlure.files.quickbait import quick_bait
from meshlure.files.reading import read_mesh
from meshlure.files.sections.inserts import InsertSection
from meshlure.files.single import put_file
from meshlure.files.source import LARGEST
from meshlure.geometry.moments import solid_moments
from meshlure.geometry.surface import Floats
from meshlure.stock.hardware import item
from meshlure.units import LENGTH_UNITS

METAL: Final = 2500.0
"""kg/m3. A piece denser than this is ballast or wire that holds the belly down; glass, rock and metals are."""
LIKELY_LENGTHS: Final = (0.025, 0.4)
"""m. Baits are mostly of such lengths: a unit that gives one is proposed."""
SWINGING: Final = ("treble", "split ring")
"""First words of items that hang from an eye; others are fixed."""


@dataclass(frozen=True)
class Stated:
    """What is said of a new bait; each None is left open.

    Attributes
    ----------
    mesh : Path
        The body's.
    unit : str
    density, material : str or None
        Of the body, one of them.
    inserts : sequence of str
        "FILE=WHAT" each.
    hardware : sequence of str
        "ITEM=X,Y,Z" each, in the meshes' unit.
    name : str or None
    water : str or None
        fresh, sea, a salinity or a density.
    temperature : str or None
    nose, back : str or None
        A signed axis, or three numbers with commas between.
    """

    mesh: Path
    unit: str
    density: str | None = None
    material: str | None = None
    inserts: Sequence[str] = ()
    hardware: Sequence[str] = ()
    name: str | None = None
    water: str | None = None
    temperature: str | None = None
    nose: str | None = None
    back: str | None = None


@dataclass(frozen=True, eq=False)
class Size:
    """A mesh's size before its unit is known.

    Attributes
    ----------
    triangles : int
    longest : float
        In its own unit: its greatest extent along an axis.
    unit : str or None
        Where the file says it.
    proposed : str or None
        The unit that would make it as long as a bait; None where several would, or none.
    """

    triangles: int
    longest: float
    unit: str | None
    proposed: str | None


def measure(mesh: Path, largest: int = LARGEST) -> Size:
    """Return a mesh's size, to propose a unit.

    Raises
    ------
    InputError
        The file cannot be read.
    """
    # Millimetres stand in; a file that says its unit is believed before what is stated.
    file = read_mesh(mesh, "mm", "body", largest=largest)
    says = FORMATS[mesh.suffix.casefold()].says_unit
    longest = float(np.ptp(file.surface.bounds, axis=0).max()) / LENGTH_UNITS["mm"]
    fitting = [
        name for name, metres in LENGTH_UNITS.items() if LIKELY_LENGTHS[0] <= longest * metres <= LIKELY_LENGTHS[1]
    ]
    unit = file.unit if says else None
    return Size(
        file.triangles, longest, unit, unit or (fitting[0] if fitting[:1] == ["mm"] or len(fitting) == 1 else None)
    )


@dataclass(frozen=True, eq=False)
class Start:
    """A bait that is known but for its directions, and what its shape says of these."""

    stated: Stated
    bait: Bait
    hardware: tuple[NewHardware, ...]
    pose: Pose | None = None


def look(stated: Stated, tell: Callable[[str], None] = lambda _: None, largest: int = LARGEST) -> Start:
    """Return a bait as it was stated, with the directions that its meshes suggest.

    Parameters
    ----------
    stated : Stated
    tell : callable
        Is told what is done.
    largest : int
        Bytes beyond which a mesh is not read.

    Raises
    ------
    InputError
        With every fault of what was stated, or of the meshes.
    """
    faults: list[Fault] = []
    rows = [row for text in stated.hardware if (row := _hardware(text, faults)) is not None]
    tell("reading the meshes")
    try:
        plan = quick_bait(
            stated.mesh,
            density=stated.density,
            material=stated.material,
            inserts=stated.inserts,
            unit=stated.unit,
            # What is not stated is stood in for by what is square to the other.
            nose=stated.nose or _square(stated.back or "+z"),
            back=stated.back or _square(stated.nose or "+x"),
            name=stated.name,
            temperature=stated.temperature,
            salinity=_water(stated)["salinity"],
        )
    except InputError as error:
        faults += [replace(fault, where=_WATER.get(fault.where, fault.where)) for fault in error.faults]
    if faults:
        raise InputError(faults)
    bait = load(plan, largest=largest)
    tell("looking at the shape")
    nose, back = (np.array(way) for way in (plan.bait.nose, plan.bait.back))
    start = Start(stated, bait, _numbered(rows))
    return replace(start, pose=posed(start, nose if stated.nose else None, back if stated.back else None))


_WATER: Final = {"--salinity": "--water"}


def posed(start: Start, nose: Floats | None, back: Floats | None) -> Pose:
    """Return the directions that a bait's meshes suggest, those that are known taken as they are."""
    bait = start.bait
    body = bait.body.substance
    dense = METAL if body is None else body.density
    weights, lips = [], []
    for piece in bait.pieces:
        solid = solid_moments(piece.surface)
        if is_lip(piece.name):
            lips.append(Clue(piece.name, solid.centre, solid.amount))
        elif piece.substance is not None and piece.substance.density > max(METAL, dense):
            weights.append(Clue(piece.name, solid.centre, solid.amount * (piece.substance.density - dense)))
    return guess(bait.body.surface, weights, lips, nose, back)


def is_lip(name: str) -> bool:
    """Tell by its name whether a piece is the lip."""
    words = name.casefold().replace("_", " ").replace("-", " ").split()
    return any(word in ("lip", "bib", "bill", "vane") for word in words)


def direction(text: str, where: str) -> Floats:
    """Return a direction that was typed: a signed axis, or three numbers with commas between.

    Raises
    ------
    InputError
        It is neither.
    """
    faults: list[Fault] = []
    try:
        value: object = [float(number) for number in text.split(",")]
    except ValueError:
        value = text.strip()
    found = Keys({"way": value}, "", faults).direction("way")
    if faults:
        raise InputError([replace(fault, where=where) for fault in faults])
    return np.array(found)


def _square(words: str) -> str:
    """Return a direction at a right angle to another, to stand in until the real one is known."""
    try:
        way = direction(words, "")
    except InputError:
        return "+y" if words.strip().endswith("x") else "+x"  # a fault is told of the other
    across = np.cross(way, np.eye(3)[int(np.argmin(np.abs(way)))])
    return ",".join(repr(float(value)) for value in across)


def _hardware(text: str, faults: list[Fault]) -> NewHardware | None:
    name, _, at = (part.strip() for part in text.rpartition("="))
    where = f"--hardware {text}"
    place = _three(at)
    if not name or place is None:
        allowed = "ITEM=X,Y,Z in the mesh's unit"
        faults.append(Fault("hardware is an item and its place", where, text, allowed, "write treble-6=31,0,-9.5"))
        return None
    try:
        found = item(name, where)
    except InputError as error:
        faults += error.faults
        return None
    return NewHardware(found.name, found.name, place, found.name.startswith(SWINGING))


def _three(text: str) -> tuple[float, float, float] | None:
    try:
        x, y, z = (float(part) for part in text.split(","))
    except ValueError:
        return None
    return (x, y, z) if np.isfinite([x, y, z]).all() else None


def _numbered(rows: Sequence[NewHardware]) -> tuple[NewHardware, ...]:
    """Give items of one kind names of their own."""
    made: list[NewHardware] = []
    for row in rows:
        count = sum(other.item == row.item for other in made)
        made.append(replace(row, name=f"{row.item}, number {count + 1}") if count else row)
    return tuple(made)


def _water(stated: Stated) -> dict[str, str]:
    """Return the keys of [water], every one of them."""
    words = (stated.water or "fresh").strip()
    known = {"fresh": "0 g/kg", "sea": "35 g/kg"}
    return {"temperature": stated.temperature or "18 degC", "salinity": known.get(words.casefold(), words)}


def check_new(out: Path) -> None:
    """Refuse a bait file that is there already.

    Raises
    ------
    InputError
    """
    if out.suffix.casefold() != ".toml":
        step = f"write --out {out.with_suffix('.toml')}"
        raise InputError(Fault("a bait file's name ends in .toml", str(out), repr(out.suffix), ".toml", step))
    if out.exists() or out.is_symlink():
        raise InputError(_taken(out))


def write(start: Start, nose: Guess, back: Guess, out: Path) -> BaitFile:
    """Write the bait file, which must not be there yet, and return the bait that it describes.

    Parameters
    ----------
    start : Start
    nose, back : Guess
        As they were taken in the end.
    out : Path
        The bait file.

    Raises
    ------
    InputError
        There is such a file already, it cannot be written, or what it would say has faults: then nothing is written.
    """
    plan, stated = start.bait.plan, start.stated
    new = NewBait(
        name=plan.bait.name,
        unit=plan.bait.length_unit,
        nose=direction_words(nose.direction),
        nose_why=_why(nose),
        back=direction_words(back.direction),
        back_why=_why(back),
        mesh=stated.mesh,
        key="material" if stated.material is not None else "density",
        value=(stated.material or stated.density or "").strip(),
        water=list(_water(stated).items()),
        pieces=[_piece(section, text) for section, text in zip(plan.inserts, stated.inserts, strict=True)],
        hardware=start.hardware,
    )
    text = new_text(new, out.parent)
    try:
        made = bait_of(tomllib.loads(text), out.parent, out.stem, out)
    except InputError as error:
        raise InputError([_renamed(fault, stated) for fault in error.faults]) from None
    check_reach(start.bait.body, tuple(hardware(row, row.name) for row in made.hardware), made)
    try:
        put_file(out, text.encode("utf-8"))
    except FileExistsError as error:
        raise InputError(_taken(out)) from error
    except OSError as error:
        reason = error.strerror or str(error)
        raise InputError(
            Fault("the bait file cannot be written", str(out), reason, "", "name another file with --out")
        ) from error
    return replace(made, text=text)


def _renamed(fault: Fault, stated: Stated) -> Fault:
    """Return a fault of the file that would have been written as one of what was stated for it."""
    if fault.where == "bait.name":
        step = "state another with --name" if stated.name is not None else "state one with --name"
        return replace(fault, where="--name" if stated.name is not None else str(stated.mesh), next_step=step)
    if fault.where.endswith("mesh"):
        return replace(fault, next_step="rename the file, so that a bait file can name it")
    return fault


def _piece(section: InsertSection, text: str) -> NewPiece:
    what = text.rpartition("=")[2].strip()
    if section.void is not None:
        return NewPiece(section.name, section.mesh, "void", section.void, lip=False)
    stated = section.substance is not None and section.substance.material is not None
    return NewPiece(section.name, section.mesh, "material" if stated else "density", what, is_lip(section.name))


def _why(guess: Guess) -> str:
    if guess.sureness is Sureness.STATED:
        return "as stated"
    return f"guessed, {guess.sureness}: {guess.why}"


def _taken(out: Path) -> Fault:
    return Fault(
        "there is a file of this name already, which is not written over",
        str(out),
        next_step=f"name another with --out, or report on this one: meshlure report {out}",
    )
