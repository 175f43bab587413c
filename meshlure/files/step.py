"""STEP files: the smooth solid as facets, and its exact volume, by a B-rep kernel that is an optional extra."""

from __future__ import annotations

import importlib.util
import re
import subprocess
import sys
import tempfile
from collections.abc import Mapping
from pathlib import Path
from types import MappingProxyType
from typing import Final

import numpy as np

from meshlure.errors import Fault, InputError
from meshlure.files import stepworker
from meshlure.files.several import BYTES, several, too_many
from meshlure.files.triangles import Part, Triangles, in_metres
from meshlure.findings import Finding, Level

LONGEST: Final = 600.0
"""s. How long the kernel may work on one file."""

_KERNEL: Final = "OCP"
_MM: Final = 1e-3

_PREFIXES: Final[Mapping[bytes, str]] = MappingProxyType(
    {b"$": "m", b".MILLI.": "mm", b".CENTI.": "cm", b".MICRO.": "um"}
)
_NAMED: Final[Mapping[bytes, str]] = MappingProxyType({b"INCH": "in", b"IN": "in", b"FOOT": "ft", b"FT": "ft"})
_UNIT: Final = re.compile(
    rb"=\s*\(\s*(?:CONVERSION_BASED_UNIT\s*\(\s*'(?P<name>[^']{0,40})'\s*,[^;]{0,40}?\)\s*)?LENGTH_UNIT\s*\(\s*\)"
    rb"(?:[^;]{0,200}?SI_UNIT\s*\(\s*(?P<prefix>\$|\.[A-Z]+\.)\s*,\s*\.METRE\.\s*\))?"
)


def read_step(data: bytes, where: str, largest: int) -> Triangles:
    """Triangles of the solids of a STEP file, in m.

    Parameters
    ----------
    data : bytes
        The whole file.
    where : str
        The file, for messages.
    largest : int
        Bytes that may be read; its triangles are bounded in proportion.

    Raises
    ------
    InputError
        The kernel is not installed, takes the file for no STEP, finds neither solids nor faces in it, breaks down on
        it, or takes longer than `LONGEST`.

    Notes
    -----
    The kernel (Open CASCADE) works in a process of its own, so that a damaged file ends that process and not this one.
    Facets leave the smooth skin by 0.02 mm at most, and by 0.05% of the extent on small parts. The volume beside them
    is integrated over the smooth faces and needs no facets. Where the file holds faces that bound no solid, these are
    read only if there is no solid at all. The process gets `stepworker.MEMORY` at most.
    """
    if importlib.util.find_spec(_KERNEL) is None:
        raise InputError(
            Fault(
                "reading STEP takes a B-rep kernel, which is not installed",
                where,
                allowed="3MF, STL, OBJ, PLY, OFF and GLB without it",
                next_step='install it with: pip install "meshlure[brep]"; or export the part as 3MF',
            )
        )
    if not data.lstrip().startswith(b"ISO-10303-21"):
        begins = repr(data[:40].decode("utf-8", "replace"))
        raise InputError(
            Fault("this is no STEP file", where, f"it begins with {begins}", "'ISO-10303-21'", "name the STEP itself")
        )
    with tempfile.TemporaryDirectory(prefix="meshlure-") as folder:
        source, target = Path(folder, "in.step"), Path(folder, "out.npz")
        source.write_bytes(data)
        _facet(source, target, where, largest)
        with np.load(target) as made:
            found = {name: made[name] for name in made.files}
    parts = tuple(Part(str(name), int(count)) for name, count in zip(found["names"], found["counts"], strict=True))
    beyond = too_many(len(found["corners"]), largest, where)
    if beyond is not None:
        raise InputError(beyond)
    chord = float(found["chord"])
    message = f"Facets were made of the smooth solid, at most {chord:.3g} mm off its skin."
    findings = [Finding("facets-made", Level.NOTE, message)]
    volumes = found["volumes"]
    if not len(volumes):
        message = "The file holds faces that bound no solid; they were read as a mesh, and no exact volume is known."
        findings.append(Finding("no-solid", Level.WARNING, message, advice="Sew the faces into a solid in CAD."))
    elif int(found["left"]):
        message = f"Passed over: {int(found['left'])} shells or faces beside the solids that bound none."
        findings.append(Finding("not-read", Level.NOTE, message, count=int(found["left"])))
    exact = float(np.abs(volumes).sum()) * _MM**3 if len(volumes) else None
    corners = in_metres(found["corners"], _MM, where)
    return Triangles(corners, (*findings, *several(parts, "solids")), parts, _unit(data) or "mm", exact)


def _facet(source: Path, target: Path, where: str, largest: int) -> None:
    """Have the kernel make facets.

    Raises
    ------
    InputError
        It does not.
    """
    # -P: the folder that one stands in lends no modules.
    command = [sys.executable, "-P", "-m", stepworker.__name__, str(source), str(target), str(largest // BYTES)]
    try:
        done = subprocess.run(command, capture_output=True, timeout=LONGEST, check=False)  # noqa: S603 - our own words
    except subprocess.TimeoutExpired:
        raise InputError(
            Fault(
                "the B-rep kernel did not come to an end with this file",
                where,
                f"{LONGEST:g} s",
                next_step="export the part as 3MF or STL from the program that drew it",
            )
        ) from None
    if done.returncode == 0 and target.exists():
        return
    step = "export the part as 3MF or STL from the program that drew it"
    if done.returncode == stepworker.TOO_MANY:
        fault = too_many(largest // BYTES + 1, largest, where)
        assert fault is not None
        raise InputError(fault)
    if done.returncode == stepworker.NO_SHAPE:
        raise InputError(Fault("the STEP holds no solid and no faces", where, next_step="export the solid itself"))
    if done.returncode == stepworker.NOT_READ:
        raise InputError(Fault("the B-rep kernel cannot read this STEP", where, next_step=step))
    last = done.stderr.decode("utf-8", "replace").strip().splitlines()[-1:] or [f"exit code {done.returncode}"]
    shown = "".join(c if c.isprintable() else " " for c in last[0])[:120]
    raise InputError(Fault("the B-rep kernel broke down on this STEP", where, shown, next_step=step))


def _unit(data: bytes) -> str:
    """Length unit that the file states, empty where none of ours is found."""
    for match in _UNIT.finditer(data):
        if match["name"] is not None:
            return _NAMED.get(match["name"].strip().upper(), "")
        if match["prefix"] is not None:
            return _PREFIXES.get(match["prefix"], "")
    return ""
