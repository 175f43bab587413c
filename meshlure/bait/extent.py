"""Whether a bait is of a bait's size and its hardware within reach: both tell a wrong unit from a right one."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Final

import numpy as np

from meshlure import tolerances
from meshlure.bait.pieces import Frame, Hardware, MeshPiece
from meshlure.errors import Fault, InputError
from meshlure.files.baitfile import BaitFile
from meshlure.files.formats import METRES
from meshlure.files.reading import MeshFile
from meshlure.files.tables import entry_path
from meshlure.findings import Finding, Level
from meshlure.geometry.clearance import nearest
from meshlure.geometry.shells import winding_number
from meshlure.units import LENGTH_UNITS

_WORDS: Final = {"mm": "millimetres", "cm": "centimetres", "m": "metres", "in": "inches"}


def size_findings(body: MeshPiece, frame: Frame, plan: BaitFile, file: MeshFile) -> list[Finding]:
    """Return the question that a bait of unusual length raises.

    Parameters
    ----------
    body : MeshPiece
    frame : Frame
    plan : BaitFile
        States whether the maker has seen that the size is unusual.
    file : MeshFile
        The body's, with the unit that it was read in.

    Raises
    ------
    InputError
        Where no bait is of such a length.
    """
    length = float(np.ptp(body.surface.vertices @ frame.nose))
    unit = file.unit
    usual, possible = tolerances.LENGTH_USUAL, tolerances.LENGTH_POSSIBLE
    others = other_units(length, unit)
    if not tolerances.keeps(length, possible):
        raise InputError(
            Fault(
                what="the body is of no bait's length",
                where=str(file.path),
                found=f"{length * 1e3:.4g} mm from nose to tail, read in {unit}",
                allowed=f"{possible[0] * 1e3:g} mm to {possible[1]:g} m",
                next_step=f"is the file in {others}? State length_unit (or --unit) as the mesh was exported"
                if others
                else "state length_unit (or --unit) as the mesh was exported, and check nose",
            )
        )
    if tolerances.keeps(length, usual) or plan.bait.size_checked:
        return []
    asks = f"is the file in {others}?" if others else "is that meant?"
    return [
        Finding(
            code="unusual-size",
            level=Level.WARNING,
            message=f"the body is {length * 1e3:.4g} mm long, read in {unit}: {asks}",
            piece=body.name,
            advice="state length_unit as the mesh was exported; or, if it is meant, say size_checked = true in [bait]",
        )
    ]


def other_units(length: float, unit: str) -> str:
    """Return up to two units in which a length, m, would be a bait's, with that length, a hand's length first.

    Parameters
    ----------
    length : float, m
        As it was read.
    unit : str
        In which it was read.
    """
    low, high = tolerances.LENGTH_USUAL
    hand = float(np.sqrt(low * high))
    lengths = [(name, length / METRES[unit] * metres) for name, metres in LENGTH_UNITS.items() if name != unit]
    usual = [(name, metres) for name, metres in lengths if tolerances.keeps(metres, (low, high))]
    nearest_first = sorted(usual, key=lambda row: abs(float(np.log(row[1] / hand))))
    return " or ".join(f"{_WORDS[name]} ({metres * 1e3:.0f} mm)" for name, metres in nearest_first[:2])


def check_reach(body: MeshPiece, items: Sequence[Hardware], plan: BaitFile) -> None:
    """Refuse hardware far from the body.

    Raises
    ------
    InputError
        With every piece of hardware that is.
    """
    if not items:
        return
    apart = nearest(body.surface, np.array([item.at for item in items])).distance
    faults = []
    for number, (item, distance) in enumerate(zip(items, apart, strict=True), 1):
        if distance <= tolerances.HARDWARE_REACH or winding_number(body.surface, item.at) > 0.5:
            continue
        place = ", ".join(f"{value / plan.bait.metres:.4g}" for value in item.at)
        where = entry_path("hardware", number, item.name) + ".at"
        faults.append(
            Fault(
                what="the hardware is far from the body",
                where=f"{plan.path.name}: {where}" if plan.path is not None else where,
                found=f"[{place}] {plan.bait.length_unit}, {distance * 1e3:.1f} mm from the body's skin",
                allowed=f"within {tolerances.HARDWARE_REACH * 1e3:g} mm of it",
                next_step="give its place in the mesh's own coordinates and unit",
            )
        )
    if faults:
        raise InputError(faults)
