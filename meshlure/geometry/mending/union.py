"""Shells that touch or overlap made one solid."""

from __future__ import annotations

from typing import Final

from meshlure.geometry.mending.steps import Left, Step
from meshlure.geometry.phrasing import counted, places
from meshlure.geometry.shellflaws import shell_text
from meshlure.geometry.shells import enclosed_volume
from meshlure.geometry.solids import Solid, SolidError
from meshlure.geometry.soundness import Soundness
from meshlure.geometry.surface import Surface
from meshlure.geometry.welding import weld

_ROUNDING: Final = 1e-9
"""Share of the volume that a union moves by rounding."""


def united(sound: Soundness) -> tuple[Step | None, Left | None]:
    """Return the surface with shells that share space or touch made one, or why that cannot be.

    Parameters
    ----------
    sound : Soundness
        Of a closed surface, not stopped.

    Notes
    -----
    From the outermost inwards every outward shell is joined to the solid and every cavity taken from it, so that a
    shell in a cavity stays, and space that two shells share counts once.
    """
    if not sound.joins or sound.stops:
        return None, None
    shells = sorted(sound.shells, key=lambda shell: shell.depth)
    named = sorted({number for pair in sound.joins for number in pair})
    try:
        solid = Solid.of(shells[0].surface)
        for shell in shells[1:]:
            other = Solid.of(shell.surface.turned() if shell.reversed else shell.surface)
            solid = solid.less(other) if shell.reversed else solid.joined(other)
    except SolidError as error:
        return None, Left(
            f"{counted(len(named), 'shell')} that touch or overlap could not be joined: {error}",
            places(sound.shells[number].centre for number in named),
            "Join them in CAD.",
        )
    if len(solid.parts()) == len(shells):
        return None, Left(
            f"{counted(len(named), 'shell')} that touch along an edge or at a corner only: nothing joins them there",
            places(sound.shells[number].centre for number in named),
            "Let them overlap by a tenth of a millimetre in CAD, or keep them as far apart.",
        )
    # The solid library keeps places apart that a file writes as one.
    made: Surface = weld(solid.surface().corners).surface
    counted_twice = enclosed_volume(sound.surface) - enclosed_volume(made)
    listed = "; ".join(shell_text(sound.shells[number]) for number in named[:3])
    more = f"; and {len(named) - 3:,} more" if len(named) > 3 else ""
    shared = f"{counted_twice * 1e9:.4g} mm3" if counted_twice > _ROUNDING * enclosed_volume(made) else "nothing"
    did = (
        f"joined {counted(len(named), 'shell')} that touched or overlapped ({listed}{more}); {shared} had counted twice"
    )
    return Step("join", did, made, len(named), 0.0, places(sound.shells[n].centre for n in named)), None
