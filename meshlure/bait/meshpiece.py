"""A piece's mesh made ready: its shells sorted into outer skin and cavities, overlapping ones joined."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from meshlure.geometry.deficit import facet_deficit
from meshlure.geometry.shells import Shell
from meshlure.geometry.solids import Solid
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
    cavities : tuple of Surface
        Each outward.
    deficit : float, m3
        What the facets leave out.
    """

    outer: Surface
    pairs: EdgePairs
    cavities: tuple[Surface, ...]
    deficit: float


def shape(sound: Soundness) -> Shape:
    """Return the outer skin and the cavities of a sound mesh.

    Parameters
    ----------
    sound : Soundness
        That does not stop.

    Notes
    -----
    Outward shells that share space are joined, so that an eye in its socket counts once. A shell that lies in a
    cavity makes the cavity smaller.
    """
    deficit = facet_deficit(sound.surface, sound.pairs)
    shells = sound.shells
    if len(shells) == 1:
        return Shape(sound.surface, sound.pairs, (), deficit)
    skins = [number for number, shell in enumerate(shells) if not shell.reversed and not _in_cavity(shells, number)]
    outer = _joined([shells[number] for number in skins], any(a in skins and b in skins for a, b in sound.joins))
    cavities = [_cavity(shells, number) for number, shell in enumerate(shells) if shell.reversed]
    return Shape(outer, paired(outer), tuple(cavity for cavity in cavities if cavity is not None), deficit)


def _in_cavity(shells: tuple[Shell, ...], number: int) -> bool:
    return any(shells[around].reversed for around in shells[number].around)


def _joined(shells: list[Shell], share_space: bool) -> Surface:
    if share_space:
        first, *others = (Solid.of(shell.surface) for shell in shells)
        return first.joined(*others).surface()
    starts = np.cumsum([0, *(len(shell.surface.vertices) for shell in shells)])
    return Surface(
        np.concatenate([shell.surface.vertices for shell in shells]),
        np.concatenate([shell.surface.faces + start for shell, start in zip(shells, starts, strict=False)]),
    )


def _cavity(shells: tuple[Shell, ...], number: int) -> Surface | None:
    hollow = Solid.of(shells[number].surface.turned())
    islands = [Solid.of(shell.surface) for shell in shells if not shell.reversed and shell.parent == number]
    left = hollow.less(*islands) if islands else hollow
    return None if left.empty else left.surface()
