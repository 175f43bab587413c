"""A piece's mesh made ready: its shells sorted into outer skin and cavities, overlapping ones joined."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from meshlure.errors import Fault, InputError
from meshlure.geometry.deficit import facet_deficit
from meshlure.geometry.shells import Shell, split
from meshlure.geometry.solids import Solid, SolidError
from meshlure.geometry.soundness import Soundness
from meshlure.geometry.surface import Surface
from meshlure.geometry.topology import EdgePairs, paired


@dataclass(frozen=True, eq=False)
class Shape:
    """What a sound mesh encloses.

    Attributes
    ----------
    outer : Surface
        Outward skin, every cavity filled.
    pairs : EdgePairs
        Its edges.
    shells : tuple of Surface
        Parts of the outward skin that hang together.
    cavities : tuple of Surface
        Each outward.
    deficit, skin_deficit : float, m3
        What the facets leave out of the material, and of the outward skin alone.
    """

    outer: Surface
    pairs: EdgePairs
    shells: tuple[Surface, ...]
    cavities: tuple[Surface, ...]
    deficit: float
    skin_deficit: float


def solid_of(surface: Surface, piece: str, tag: int | None = None) -> Solid:
    """Return the solid inside a piece's skin.

    Raises
    ------
    InputError
        Where the solid library does not take it.
    """
    try:
        return Solid.of(surface, tag)
    except SolidError as error:
        raise InputError(
            Fault(
                what="the mesh is closed, but no solid that others can be cut from",
                where=piece,
                found=str(error),
                next_step="join its parts into one solid in CAD, or export it finer or coarser, and try again",
            )
        ) from error


def shape(sound: Soundness, piece: str) -> Shape:
    """Return the outer skin and the cavities of a sound mesh.

    Parameters
    ----------
    sound : Soundness
        That does not stop.
    piece : str
        Its name, for a message.

    Raises
    ------
    InputError
        Where the solid library does not take one of several shells.

    Notes
    -----
    Outward shells that share space are joined, so that an eye in its socket counts once. A shell that lies in a
    cavity makes the cavity smaller.
    """
    shells = sound.shells
    if len(shells) == 1:
        deficit = facet_deficit(sound.surface, sound.pairs)
        return Shape(sound.surface, sound.pairs, (sound.surface,), (), deficit, deficit)
    skins = [number for number, shell in enumerate(shells) if not shell.reversed and not _in_cavity(shells, number)]
    outer = _joined([shells[number] for number in skins], piece, any(a in skins and b in skins for a, b in sound.joins))
    pairs = paired(outer)
    hollows = (_cavity(shells, number, piece) for number, shell in enumerate(shells) if shell.reversed)
    cavities = tuple(cavity for cavity in hollows if cavity is not None)
    skin = facet_deficit(outer, pairs)
    parts = tuple(shell.surface for shell in split(outer, pairs))
    return Shape(outer, pairs, parts, cavities, skin - sum(facet_deficit(c, paired(c)) for c in cavities), skin)


def _in_cavity(shells: tuple[Shell, ...], number: int) -> bool:
    return any(shells[around].reversed for around in shells[number].around)


def _joined(shells: list[Shell], piece: str, share_space: bool) -> Surface:
    if share_space:
        first, *others = (solid_of(shell.surface, piece) for shell in shells)
        return first.joined(*others).surface()
    starts = np.cumsum([0, *(len(shell.surface.vertices) for shell in shells)])
    return Surface(
        np.concatenate([shell.surface.vertices for shell in shells]),
        np.concatenate([shell.surface.faces + start for shell, start in zip(shells, starts, strict=False)]),
    )


def _cavity(shells: tuple[Shell, ...], number: int, piece: str) -> Surface | None:
    hollow = solid_of(shells[number].surface.turned(), piece)
    islands = [solid_of(shell.surface, piece) for shell in shells if not shell.reversed and shell.parent == number]
    left = hollow.less(*islands) if islands else hollow
    return None if left.empty else left.surface()
