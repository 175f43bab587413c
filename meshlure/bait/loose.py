"""Loose shells of one mesh: those that meet count as one solid, and those that are balls may be meant to roll."""

from __future__ import annotations

from collections.abc import Iterator, Sequence

from meshlure import tolerances
from meshlure.bait.pieces import MeshPiece, Role
from meshlure.findings import Finding, Level
from meshlure.geometry.phrasing import counted, places
from meshlure.geometry.roundness import ball_diameter
from meshlure.geometry.shells import Shell, winding_number
from meshlure.geometry.soundness import Soundness


def joined_findings(sound: Soundness, volume: float, piece: str) -> Iterator[Finding]:
    """Say of shells that meet that they count as one.

    Parameters
    ----------
    sound : Soundness
        Of a closed mesh.
    volume : float, m3
        What it encloses once they are joined, cavities left out.
    piece : str
    """
    if not sound.joins or sound.volume is None:
        return
    numbers = sorted({number for pair in sound.joins for number in pair})
    shared = sound.volume - volume
    how = f"share {shared * 1e9:.4g} mm3, which counts once" if shared > tolerances.VOLUME_SHARE * volume else "touch"
    yield Finding(
        "shells-joined",
        Level.NOTE,
        f"{counted(len(numbers), 'shell')} {how}: they are taken for one solid",
        piece,
        len(numbers),
        places(sound.shells[number].centre for number in numbers),
        "Right for an eye in its socket; give what is of another material as a piece of its own.",
    )


def balls_text(balls: Sequence[tuple[Shell, float]]) -> str:
    """Return how many balls of which diameters, m, there are, as a sentence's end."""
    sizes = sorted({f"{size * 1e3:.3g} mm" for _, size in balls})
    return ", ".join(sizes[:5]) + (f" and {len(sizes) - 5} more sizes" if len(sizes) > 5 else "")


def balls_of(sound: Soundness) -> list[tuple[Shell, float]]:
    """Return the shells of a mesh that are balls, with their diameters, m."""
    return [(shell, size) for shell in sound.shells if (size := ball_diameter(shell)) is not None]


def drawn_balls(sound: Soundness, piece: MeshPiece, pieces: Sequence[MeshPiece]) -> Iterator[Finding]:
    """Ask about balls that are given as a mesh, where they look like those that run in a chamber.

    Parameters
    ----------
    sound : Soundness
        Of the piece's mesh.
    piece : MeshPiece
    pieces : sequence of MeshPiece
        All of the bait.

    Notes
    -----
    One ball alone may well be a weight that is cast in; several in one mesh, or one that lies in a hollow, hardly are.
    """
    balls = balls_of(sound)
    if piece.role is not Role.INSERT or not balls or len(balls) < len(sound.shells):
        return
    hollow = next((other for other in pieces if other.role is Role.VOID and _holds(other, balls)), None)
    if len(balls) < 2 and hollow is None:
        return
    lies = "" if hollow is None else f" in '{hollow.name}'"
    yield Finding(
        "balls-drawn",
        Level.WARNING,
        f"'{piece.name}' is a mesh of {counted(len(balls), 'ball')} of {balls_text(balls)}{lies}: they stay where they "
        "are drawn, and their facets weigh less than balls do",
        piece.name,
        len(balls),
        places(shell.centre for shell, _ in balls),
        "if they roll, take the mesh out and state them under [[balls]] with chamber, diameter and count: they then "
        "lie at either end",
    )


def _holds(hollow: MeshPiece, balls: Sequence[tuple[Shell, float]]) -> bool:
    return any(winding_number(hollow.surface, shell.centre) > 0.5 for shell, _ in balls)
