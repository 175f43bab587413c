"""One call that inspects a mesh file by itself, and mends it where that is asked."""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass
from pathlib import Path
from typing import Any, Final

import numpy as np

from meshlure import tolerances
from meshlure.bait.extent import other_units
from meshlure.bait.loose import balls_of, balls_text, joined_findings
from meshlure.bait.meshpiece import shape
from meshlure.errors import Fault, InputError
from meshlure.files.formats import FORMATS
from meshlure.files.nearness import did_you_mean
from meshlure.files.reading import MeshFile, read_mesh
from meshlure.files.source import LARGEST
from meshlure.findings import Finding, Level
from meshlure.geometry.mending.caps import capped
from meshlure.geometry.mending.loose import without_part
from meshlure.geometry.mending.mend import Mended, mend
from meshlure.geometry.mending.mirror import mirrored
from meshlure.geometry.mending.steps import Step, Wishes
from meshlure.geometry.phrasing import counted, places
from meshlure.geometry.shells import enclosed_volume
from meshlure.geometry.soundness import Soundness, examine
from meshlure.geometry.surface import Surface
from meshlure.geometry.topology import paired
from meshlure.results import inspection
from meshlure.results.inspection import Volume
from meshlure.version import VERSION

Tree = dict[str, Any]

_MATTERS: Final = 2e-9
"""m3. What facets leave out of a small insert does not matter below this: 0.02 g, if it is lead."""

_WHOLE: Final = 1.0
"""A lid of any size, to tell what the volume would be with it."""


@dataclass(frozen=True, eq=False)
class Inspection:
    """What is to be said of a mesh file.

    Attributes
    ----------
    tree : dict
        The account, in mm.
    surface : Surface or None
        As read, m; None where the file cannot be read.
    findings : tuple of Finding
    open_edges : (k, 2, 3) array, m
    mended : Mended or None
        None where mending was not asked for.
    """

    tree: Tree
    surface: Surface | None = None
    findings: tuple[Finding, ...] = ()
    open_edges: Any = None
    mended: Mended | None = None

    def told(self) -> Inspection:
        """Return the account alone: of a folder of meshes, not all need be in memory."""
        return Inspection(self.tree)


def inspect(
    path: Path,
    unit: str | None,
    wishes: Wishes | None = None,
    dropped: Sequence[str] = (),
    largest: int = LARGEST,
) -> Inspection:
    """Return what is to be said of a mesh file.

    Parameters
    ----------
    path : Path
    unit : str or None
        mm, cm, m or in; None where the format says it.
    wishes : Wishes or None
        How to mend it; None leaves it as it is.
    dropped : sequence of str
        Names of parts in the file that are to be left out when mending.
    largest : int
        Bytes beyond which a file is not read.

    Raises
    ------
    InputError
        A part that is to be left out is not there. A file that cannot be read as a mesh is no error here: the account
        says so.
    """
    try:
        file = read_mesh(path, _unit(path, unit, largest), piece=path.stem, largest=largest)
    except InputError as error:
        return Inspection(inspection.unreadable(str(path), error.faults))
    sound = examine(file.surface, path.stem)
    volume, more = _volume(sound, path.stem)
    found = (*file.findings, *_size(file), *sound.findings, *more, *_facets(volume, file), *_balls(sound, path.stem))
    tree = inspection.mesh(file, sound, volume, found)
    made = None
    if wishes is not None:
        made = mend(file.surface, wishes, path.stem, tuple(_without(file, dropped)))
        after, still = _volume(made.after, path.stem)
        offers = _offers(made.after.surface) if after is None else {}
        tree["mending"] = inspection.mending(made, after, (*made.after.findings, *still), offers)
    edges = paired(file.surface).irregular.open
    return Inspection(tree, file.surface, found, file.surface.vertices[edges], made)


def account(meshes: Sequence[Inspection]) -> Tree:
    """Return the tree of several inspections."""
    return {
        "format": 1,
        "tool": {"name": "meshlure", "version": VERSION},
        "meshes": [each.tree for each in meshes],
    }


def _unit(path: Path, unit: str | None, largest: int) -> str | None:
    """Return the unit as stated; where none is and the file says none, refuse with the sizes it would make.

    Raises
    ------
    InputError
    """
    form = FORMATS.get(path.suffix.lower())
    if unit is not None or form is None or form.says_unit:
        return unit
    size = np.ptp(read_mesh(path, "m", largest=largest).surface.bounds, axis=0)
    shown = " x ".join(f"{length:.4g}" for length in size)
    raise InputError(
        Fault(
            f"a file of the format {form.name} does not say its unit",
            str(path),
            f"a part of {shown} units",
            "--unit mm, cm, m or in",
            f"state the unit of the export: as mm it is {size.max():.4g} mm long, as inches {25.4 * size.max():.4g} mm",
        )
    )


def _volume(sound: Soundness, piece: str) -> tuple[Volume | None, tuple[Finding, ...]]:
    """What a mesh encloses, and why it cannot be told where it is closed and yet cannot."""
    if sound.stops or sound.volume is None:
        return None, ()
    try:
        made = shape(sound, piece)
    except InputError as error:
        fault = error.faults[0]
        message = f"{fault.what}: {fault.found}"
        return None, (Finding("no-solid", Level.FAULT, message, piece, advice=fault.next_step, stops=True),)
    hollow = sum(enclosed_volume(cavity) for cavity in made.cavities)
    volume = Volume(enclosed_volume(made.outer) - hollow, sound.volume, made.deficit)
    return volume, tuple(joined_findings(sound, volume.volume, piece))


def _size(file: MeshFile) -> Iterator[Finding]:
    """Ask about an extent that no bait has."""
    length = float(np.ptp(file.surface.bounds, axis=0).max())
    if tolerances.keeps(length, tolerances.LENGTH_USUAL):
        return
    level = Level.NOTE if tolerances.keeps(length, tolerances.LENGTH_POSSIBLE) else Level.WARNING
    others = other_units(length, file.unit)
    asks = f"is the file in {others}?" if others else "is that meant?"
    message = f"the part is {length * 1e3:.4g} mm long, read in {file.unit}: {asks}"
    advice = "State the unit as the mesh was exported; a small insert may well be that small."
    yield Finding("unusual-size", level, message, file.path.stem, advice=advice)


def _facets(volume: Volume | None, file: MeshFile) -> Iterator[Finding]:
    """Say where the mesh is too coarse, or not what its file's own solid holds."""
    if volume is None or not volume.volume > 0:
        return
    share = volume.deficit / volume.volume
    if abs(share) > tolerances.COARSE_SHARE:
        message = f"the facets leave out about {volume.deficit * 1e9:.3g} mm3 ({share:.1%}) of the smooth part"
        advice = "Export finer: at 0.02 mm chord or less."
        level = Level.WARNING if abs(volume.deficit) > _MATTERS else Level.NOTE
        yield Finding("coarse-facets", level, message, file.path.stem, advice=advice)


def _balls(sound: Soundness, piece: str) -> Iterator[Finding]:
    """Recognize shells that are balls."""
    balls = balls_of(sound)
    if not balls:
        return
    verb = "is a ball" if len(balls) == 1 else "are balls"
    message = f"{counted(len(balls), 'shell')} {verb} of {balls_text(balls)}"
    advice = "Balls that run in a chamber are no insert: state them under [[balls]] with diameter and count."
    where = places(shell.centre for shell, _ in balls)
    yield Finding("balls", Level.NOTE, message, piece, len(balls), where, advice)


def _without(file: MeshFile, dropped: Sequence[str]) -> Iterator[Step]:
    """Leave out parts by their names.

    Raises
    ------
    InputError
        With every name that no part has.
    """
    known = sorted({part.name for part in file.parts if part.name})
    strange = [name for name in dropped if name not in known]
    if strange:
        allowed = ", ".join(map(repr, known)) or "nothing: the file names no parts"
        raise InputError(
            [
                Fault(
                    "no part of the file has this name",
                    f"--drop {name}",
                    name,
                    allowed,
                    did_you_mean(name, known, "leave it out"),
                )
                for name in strange
            ]
        )
    surface, gone = file.surface, np.zeros(len(file.surface.faces), dtype=np.bool_)
    for name in dict.fromkeys(dropped):
        own = np.concatenate([part.faces for part in file.parts if part.name == name])
        numbers = np.cumsum(~gone) - 1
        step = without_part(surface, numbers[own[~gone[own]]], name)
        gone[own] = True
        surface = step.surface
        yield step


def _offers(surface: Surface) -> Mapping[str, float]:
    """Volumes, m3, that options not taken would give an open surface."""
    offers = {}
    for option, step in (("--mirror", mirrored(surface)[0]), ("--cap 100%", capped(surface, _WHOLE)[0])):
        if step is not None and paired(step.surface).closed:
            offers[option] = abs(enclosed_volume(step.surface))
    return offers
