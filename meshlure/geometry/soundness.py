"""Soundness: whether a surface encloses a volume, which shells it is made of, and what was put right."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass, replace
from typing import Final

import numpy as np

from meshlure.findings import Finding, Level
from meshlure.geometry.crossing import self_crossings
from meshlure.geometry.flaws import edge_flaws, face_flaws
from meshlure.geometry.nesting import nest
from meshlure.geometry.overcount import overcount
from meshlure.geometry.phrasing import counted, place_text, places, places_text
from meshlure.geometry.shellflaws import shell_flaws
from meshlure.geometry.shells import Shell, extent, measures, split
from meshlure.geometry.surface import Bools, Floats, Surface
from meshlure.geometry.topology import EdgePairs, paired

SEARCHED: Final = 100_000
"""Faces up to which a surface is searched for places where it crosses itself, which then takes about a second."""

CROSSING_SHARE: Final = 1e-6
"""Share of the greatest extent that faces must reach into each other to cross: 0.1 um on a 100 mm bait."""

OVERCOUNTED: Final = 1e-5
"""Share of what a surface encloses that may be enclosed twice without a word."""

_MEND_CROSSING: Final = "Repair the sketch or the loft that folds there, or join its parts in CAD."


@dataclass(frozen=True, eq=False)
class Soundness:
    """What the examination of one surface found.

    Attributes
    ----------
    surface : Surface
        The surface examined, with its inverted shells turned and its flat ones left out.
    pairs : EdgePairs
        Its edges.
    findings : tuple of Finding
    shells : tuple of Shell
        The largest first; empty where the surface is not closed. A reversed one is a cavity.
    joins : tuple of (int, int)
        Pairs of outward shells that meet or lie in each other's solid, the lower number first: to be joined before a
        volume is taken.
    volume : float or None
        Integral of the winding number, m3: space that two shells share counts twice. None where the surface is not
        closed.
    """

    surface: Surface
    pairs: EdgePairs
    findings: tuple[Finding, ...]
    shells: tuple[Shell, ...]
    joins: tuple[tuple[int, int], ...]
    volume: float | None

    @property
    def stops(self) -> bool:
        """Whether a finding leaves the volume undefined."""
        return any(finding.stops for finding in self.findings)


def examine(surface: Surface, piece: str) -> Soundness:
    """Return what is sound and what is not about a surface.

    Parameters
    ----------
    surface : Surface
        Welded.
    piece : str
        Name of the piece, for the findings.

    Notes
    -----
    A surface whose every edge is run along as often forward as backward is closed, and its volume is the integral of
    its winding number. Anything else has no volume and stops. Of a closed surface, what looks inwards is turned when it
    lies in nothing solid, and taken for a cavity when it does; either is said.
    """
    lost = np.asarray(~np.isfinite(surface.vertices).all(axis=1))
    if lost.any() or not len(surface.faces):
        finding = _not_finite(surface, lost, piece) if lost.any() else _no_faces(piece)
        return Soundness(surface, paired(surface), (finding,), (), (), None)
    pairs = paired(surface)
    measured = measures(surface)
    findings = [*edge_flaws(surface, pairs, piece), *face_flaws(surface, pairs, measured[1], piece)]
    if not pairs.closed:
        return Soundness(surface, pairs, tuple(findings), (), (), None)
    depth = CROSSING_SHARE * float(np.ptp(extent(surface.vertices), axis=0).max())
    made = nest(split(surface, pairs, measured), depth)
    findings += shell_flaws(made, piece)
    shells = made.shells
    if made.changed and shells:
        surface, shells = _reassembled(surface, measured[0], shells)
        pairs = paired(surface)
    findings += _self_crossing(surface, shells, bool(made.joins), depth, piece)
    volume = float(sum(shell.volume for shell in shells)) if shells else None
    return Soundness(surface, pairs, tuple(findings), shells, made.joins, volume)


def _no_faces(piece: str) -> Finding:
    return Finding("no-faces", Level.FAULT, "there are no faces", piece, 0, (), "Export the solid again.", stops=True)


def _not_finite(surface: Surface, lost: Bools, piece: str) -> Finding:
    count = int(np.count_nonzero(lost))
    faces = np.flatnonzero(lost[surface.faces].any(axis=1)) + 1
    where = f", first in face {faces[0]:,}" if len(faces) else ", in no face"
    return Finding(
        "non-finite-vertices",
        Level.FAULT,
        f"{counted(count, 'vertex', 'vertices')} with a coordinate that is infinite or not a number{where}",
        piece,
        count,
        (),
        "Export the mesh again; a face of no size in CAD can be the cause.",
        stops=True,
    )


def _reassembled(surface: Surface, volumes: Floats, shells: tuple[Shell, ...]) -> tuple[Surface, tuple[Shell, ...]]:
    """Return the surface as the shells now stand, and the shells with their faces' new numbers."""
    faces = surface.faces.copy()
    kept = np.zeros(len(faces), dtype=np.bool_)
    for shell in shells:
        kept[shell.faces] = True
        if volumes[shell.faces].sum() * shell.volume < 0:
            faces[shell.faces] = faces[shell.faces][:, ::-1]
    numbers = np.cumsum(kept) - 1
    return Surface(surface.vertices, faces[kept]), tuple(replace(s, faces=numbers[s.faces]) for s in shells)


def _self_crossing(
    surface: Surface, shells: tuple[Shell, ...], joined: bool, depth: float, piece: str
) -> Iterator[Finding]:
    """Report skins that cross themselves; shells that cross are another matter."""
    pairs = self_crossings(surface, depth, SEARCHED)
    owner = np.empty(len(surface.faces), dtype=np.intp)
    for number, shell in enumerate(shells):
        owner[shell.faces] = number
    if pairs is not None:
        pairs = pairs[owner[pairs[:, 0]] == owner[pairs[:, 1]]]
    # Where shells are known to share space, lines cannot tell it from a skin that crosses itself.
    lines = overcount(surface) if shells and (not joined or (pairs is not None and len(pairs))) else None
    shared = lines is not None and lines.enclosed > 0 and abs(lines.twice) > OVERCOUNTED * lines.enclosed
    much = ""
    if lines is not None and shared:
        too = "much" if lines.twice > 0 else "little"
        much = f", about {abs(lines.twice) * 1e9:.2g} mm3 too {too} ({abs(lines.twice) / lines.enclosed:.2%})"
    if pairs is not None and len(pairs):
        middles = surface.vertices[surface.faces[pairs[:, 0]]].mean(axis=1)
        yield Finding(
            "self-crossing",
            Level.WARNING,
            f"the skin crosses itself: {counted(len(pairs), 'pair')} of faces reach through each other, "
            f"at {places_text(middles)}; space enclosed twice counts twice{much}",
            piece,
            len(pairs),
            places(middles),
            _MEND_CROSSING,
        )
    elif shared and not joined:
        deepest = (lines.where,) if lines is not None and lines.where is not None else ()
        yield Finding(
            "self-crossing",
            Level.WARNING,
            f"the skin runs through itself or lies on itself: space that it encloses twice counts twice{much}"
            + "".join(f", deepest about {place_text(place)}" for place in deepest),
            piece,
            where=deepest,
            advice=_MEND_CROSSING,
        )
    elif pairs is None:
        so_far = "" if joined else "; along some ten thousand lines through it no space is enclosed twice"
        yield Finding(
            "self-crossing-unsearched",
            Level.NOTE,
            f"not searched for places where the skin crosses itself: with {len(surface.faces):,} faces that takes "
            f"long{so_far}",
            piece,
        )
