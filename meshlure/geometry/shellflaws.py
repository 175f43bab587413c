"""Flaws of shells: what was put right and what is undefined about the shells of a surface, as findings."""

from __future__ import annotations

from collections.abc import Iterator, Sequence

import numpy as np

from meshlure.findings import Finding, Level
from meshlure.geometry.nesting import Nest
from meshlure.geometry.phrasing import MOST_PLACES, counted, place_text, places, places_text
from meshlure.geometry.shells import Shell


def shell_flaws(made: Nest, piece: str) -> Iterator[Finding]:
    """Report shells that are several, apart, turned, crossing, in each other, enclosing nothing."""
    shells = made.shells
    if made.flat:
        yield Finding(
            "flat-shells",
            Level.WARNING if shells else Level.FAULT,
            f"{counted(len(made.flat), 'shell')} enclosing nothing, two skins laid on each other, left out "
            f"at {places_text(np.array([shell.centre for shell in made.flat]))}",
            piece,
            len(made.flat),
            places(shell.centre for shell in made.flat),
            "Delete the surface in CAD, or give it a thickness.",
            stops=not shells,
        )
    if made.inverted:
        yield Finding(
            "inside-out",
            Level.WARNING,
            "all faces looked inwards; the surface was turned",
            piece,
            len(shells),
            places(shell.centre for shell in shells),
            "Nothing is wrong with the shape; the export wrote its faces the wrong way round.",
        )
    crossing = {number for pair in made.clashes for number in pair}
    turned = [shells[number] for number in made.turned if number not in crossing]
    if turned:
        yield Finding(
            "inside-out-shell",
            Level.WARNING,
            f"{counted(len(turned), 'shell')} with faces that looked inwards, though in nothing solid, turned to look "
            f"outwards: {_shells_text(turned)}",
            piece,
            len(turned),
            places(shell.centre for shell in turned),
            "A shell meant as a cavity must lie wholly inside the solid.",
        )
    if made.clashes:
        clashes = made.clashes[:MOST_PLACES]
        named = "; ".join(f"{shell_text(shells[one])} and {shell_text(shells[other])}" for one, other in clashes)
        yield Finding(
            "cavity-crossing",
            Level.FAULT,
            f"{counted(len(made.clashes), 'pair')} of shells that cross, one of them looking inwards, so that inside "
            f"and outside are undefined: {named}",
            piece,
            len(made.clashes),
            places(shells[one if shells[one].reversed else other].centre for one, other in clashes),
            "Keep the cavity wholly inside the solid, or turn its faces if it is a solid of its own.",
            stops=True,
        )
    if len(shells) > 1:
        yield Finding(
            "several-shells",
            Level.NOTE,
            f"{counted(len(shells), 'shell')}: {_shells_text(shells)}",
            piece,
            len(shells),
            places(shell.centre for shell in shells),
        )
    if made.sunk:
        sunk = [shells[n] for n in made.sunk]
        yield Finding(
            "shell-in-solid",
            Level.WARNING,
            f"{counted(len(sunk), 'shell')} inside solid material of the same mesh: {_shells_text(sunk)}; "
            "the space is counted once",
            piece,
            len(sunk),
            places(shell.centre for shell in sunk),
            "Turn its faces if it is a cavity; give it as an insert of its own if it is another material.",
        )
    groups = made.groups()
    if len(groups) > 1:
        heads = [shells[group[0]] for group in groups]
        yield Finding(
            "shells-apart",
            Level.WARNING,
            f"{len(groups):,} bodies that do not touch each other: {_shells_text(heads)}",
            piece,
            len(groups),
            places(shell.centre for shell in heads),
            "Remove what does not belong to the piece, or give each body as a piece of its own.",
        )


def shell_text(shell: Shell) -> str:
    """Return what a shell is, how large (mm3) and where (mm)."""
    kind = "cavity" if shell.reversed else "shell"
    return f"{kind} of {abs(shell.volume) * 1e9:.4g} mm3 about {place_text(shell.centre)}"


def _shells_text(shells: Sequence[Shell]) -> str:
    listed = "; ".join(map(shell_text, shells[:MOST_PLACES]))
    return f"{listed}; and {len(shells) - MOST_PLACES:,} more" if len(shells) > MOST_PLACES else listed
