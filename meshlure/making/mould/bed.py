"""Whether the pieces fit on the printer's bed, and turned how."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Final

import numpy as np

from meshlure.findings import Finding, Level
from meshlure.geometry.surface import Floats
from meshlure.making.mould.boards import Printed

_TURNS: Final = np.arange(0.0, 91.0)
"""degrees about the upright that are tried."""

_HAIR: Final = 1e-9


def bed_findings(pieces: Sequence[Printed], bed: Sequence[float]) -> list[Finding]:
    """Return what does not fit on the bed as it lies in its file, with the turn that would make it fit.

    Parameters
    ----------
    pieces : sequence of Printed
    bed : three float, m
        Room along x, y and z.

    Notes
    -----
    A piece is taken for the box round it.
    """
    room = np.array(bed)
    return [finding for piece in pieces if (finding := _finding(piece, room)) is not None]


def _finding(piece: Printed, room: Floats) -> Finding | None:
    size = piece.size
    if (size <= room + _HAIR).all():
        return None
    told = f"'{piece.name}' of {_text(size)} mm does not fit the bed of {_text(room)} mm"
    for words, lying in (
        ("", size),
        ("stood on its long side, and then ", size[[0, 2, 1]]),
        ("stood on end, and then ", size[[2, 1, 0]]),
    ):
        turn = _turn(lying, room)
        if turn is not None:
            way = (
                f"{words}turned by {turn:.0f} degrees about the upright" if turn else words.removesuffix(", and then ")
            )
            return Finding("bed", Level.WARNING, f"{told} as it lies; {way} it does", piece.name, advice="turn it so")
    return Finding(
        "bed-too-small",
        Level.FAULT,
        f"{told}, however it is turned",
        piece.name,
        advice="print it elsewhere, or make wall and sprue shorter",
    )


def _turn(size: Floats, room: Floats) -> float | None:
    """Least turn about the upright, degrees, by which a box fits; None where none does."""
    if size[2] > room[2] + _HAIR:
        return None
    angle = np.radians(_TURNS)
    wide = size[0] * np.cos(angle) + size[1] * np.sin(angle)
    deep = size[0] * np.sin(angle) + size[1] * np.cos(angle)
    fits = (wide <= room[0] + _HAIR) & (deep <= room[1] + _HAIR)
    return float(_TURNS[fits.argmax()]) if fits.any() else None


def _text(size: Floats) -> str:
    return " x ".join(f"{value * 1e3:.0f}" for value in size)
