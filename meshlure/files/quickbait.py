"""A bait stated in a few words: its body, one density, and inserts by file and substance."""

from __future__ import annotations

import re
from collections.abc import Sequence
from dataclasses import replace
from pathlib import Path
from typing import Any

from meshlure.errors import Fault, InputError
from meshlure.files.baitfile import FORMAT, BaitFile, bait_of
from meshlure.files.sections.body import SPACES
from meshlure.files.tables import entry_path

_OPTIONS = {
    "bait.length_unit": "--unit",
    "bait.nose": "--nose",
    "bait.back": "--back",
    "bait.name": "--name",
    "body.density": "--density",
    "body.material": "--material",
    "water.temperature": "--temperature",
    "water.salinity": "--salinity",
}

_NAMED = "named outside of the table"
"""Stands where the table would name a mesh: a path on the command line may be longer and odder than a file's text."""


def quick_bait(
    mesh: Path,
    *,
    density: str | None = None,
    material: str | None = None,
    inserts: Sequence[str] = (),
    unit: str,
    nose: str,
    back: str,
    name: str | None = None,
    temperature: str | None = None,
    salinity: str | None = None,
) -> BaitFile:
    """Bait without a bait file, checked as one.

    Parameters
    ----------
    mesh : Path
        The body.
    density, material : str or None
        One of them: the body's density with its unit, or a material's name.
    inserts : sequence of str
        "FILE=WHAT", where WHAT is a density with its unit, ``sealed`` or ``flooded`` for a hollow space, or else the
        name of a material. The insert's name is the file's without its suffix.
    unit : str
        Length unit of all the meshes: mm, cm, m or in.
    nose, back : str
        Mesh directions: a signed axis such as "-x", or three numbers such as "1,0,0.2".
    name : str or None
        The bait's; the body's file name without its suffix where it is None.
    temperature, salinity : str or None
        Of the water, with their units.

    Raises
    ------
    InputError
        With every fault, each with its option.
    """
    faults: list[Fault] = []
    if (density is None) == (material is None):
        what = "the body needs a density or a material, one of them"
        found = "neither" if density is None else f"--density {density} and --material {material}"
        faults.append(Fault(what, "--density", found, "--density '0.72 g/cm3' or --material balsa", "give one of them"))
        # The stand-in lets the other options be checked; it goes nowhere, since a fault is already put down.
        density, material = None, "unstated"
    bait: dict[str, Any] = {"length_unit": unit, "nose": _direction(nose), "back": _direction(back)}
    body = {"mesh": _NAMED} | _stated(density=density, material=material)
    files: list[Path] = []
    table: dict[str, Any] = {
        "format": FORMAT,
        "bait": bait | _stated(name=name),
        "body": body,
        "water": _stated(temperature=temperature, salinity=salinity),
        "insert": [],
    }
    options = dict(_OPTIONS)
    for text in inserts:
        file, _, what = (part.strip() for part in text.rpartition("="))
        if not file or not what:
            allowed = "FILE=MATERIAL, FILE=DENSITY, FILE=sealed or FILE=flooded"
            faults.append(
                Fault("an insert is a file and what it is", f"--insert {text}", text, allowed, "write belly.stl=lead")
            )
            continue
        files.append(Path(file))
        entry = {"name": Path(file).stem, "mesh": _NAMED, _key(what): what.casefold() if _key(what) == "void" else what}
        table["insert"].append(entry)
        path = entry_path("insert", len(table["insert"]), entry["name"])
        options |= {f"{path}.{key}": f"--insert {text}" for key in entry}
    try:
        made = bait_of(table, Path(), mesh.stem)
    except InputError as error:
        faults.extend(replace(fault, where=options.get(fault.where, fault.where)) for fault in error.faults)
        raise InputError(faults) from None
    if faults:
        raise InputError(faults)
    return replace(
        made,
        body=replace(made.body, mesh=mesh),
        inserts=tuple(replace(insert, mesh=file) for insert, file in zip(made.inserts, files, strict=True)),
    )


def _stated(**values: str | None) -> dict[str, str]:
    return {key: value for key, value in values.items() if value is not None}


def _key(what: str) -> str:
    if what.casefold() in SPACES:
        return "void"
    return "density" if re.match(r"[+\-\N{MINUS SIGN}]?\.?\d", what) else "material"


def _direction(text: str) -> str | list[float]:
    try:
        return [float(number) for number in text.split(",")]
    except ValueError:
        return text.strip()
