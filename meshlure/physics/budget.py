"""The error budget: what doubts and slips do to reserve and posture, each alone and all together."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from meshlure.bait.composition import Part, Skin
from meshlure.bait.pieces import Bait
from meshlure.bait.printed import Core
from meshlure.geometry.surface import Floats
from meshlure.physics.buoyancy import Reserve
from meshlure.physics.changes import Changes
from meshlure.physics.doubtful import Doubtful, doubtful
from meshlure.physics.draws import Draws, drawn
from meshlure.physics.layers import layers
from meshlure.physics.stance import Stance
from meshlure.physics.whatifs import Whatif, whatifs


@dataclass(frozen=True)
class Extent:
    """How far a doubt, or all together, moves the posture below and above what is predicted; rad, both positive.

    None where the bait would leave the posture, or where the angle has no meaning.
    """

    nose_up_low: float | None
    nose_up_high: float | None
    lean_low: float | None
    lean_high: float | None


@dataclass(frozen=True, eq=False)
class Row:
    """One thing otherwise, and what that does.

    Attributes
    ----------
    whatif : Whatif
    reserve : float, kg
        Change of the reserve.
    left : float, kg
        Reserve after it.
    nose_up, lean : float or None, rad
        Change of the posture; None where the bait comes to float instead of hanging or the other way round, leaves the
        posture, or where the angle has no meaning.
    """

    whatif: Whatif
    reserve: float
    left: float
    nose_up: float | None
    lean: float | None


@dataclass(frozen=True, eq=False)
class Budget:
    """The error budget of a bait in the posture that it is known by.

    Attributes
    ----------
    rows : tuple of Row
    doubts : tuple of (Doubtful, Extent)
        Those of the reserve's band, then those of places, which move the posture alone.
    band : Extent
        Root of the sum of squares.
    nose_up, lean : float or None, rad
        Of the posture itself.
    draws : Draws
        What copies would be like.
    stance : Stance
    """

    rows: tuple[Row, ...]
    doubts: tuple[tuple[Doubtful, Extent], ...]
    band: Extent
    nose_up: float | None
    lean: float | None
    draws: Draws
    stance: Stance


def budget(
    bait: Bait,
    parts: Sequence[Part],
    skin: Skin,
    held: Reserve,
    stance: Stance,
    dry: Sequence[str] = (),
    core: Core | None = None,
) -> Budget:
    """Return the error budget of a bait.

    Parameters
    ----------
    bait : Bait
    parts : sequence of Part
        What weighs, balls included.
    skin : Skin
    held : Reserve
        With its doubts: the same make up the band here.
    stance : Stance
        In the posture that the bait is known by.
    dry : sequence of str
        Names of hardware that is out of the water in it.
    core : Core or None
        Of a printed body.

    Notes
    -----
    The reserve answers to everything exactly, in proportion. The posture is solved anew after every change, the hull's
    buoyancy taken from cuts of the full mesh round the posture (`Locus`), or where that does not reach by a descent on
    the full mesh; ``stance.miss`` says how far some copies were off. Left out: the doubts do not know of each other,
    balls stay at their ends, hooks stay wet or dry, and a bait that hangs is taken to hang still where a change would
    lift it to the surface.
    """
    up = None if stance.locus is None else stance.locus.up
    layer = layers(skin, bait.frame.side, up, stance.height)
    asked = whatifs(bait, parts, layer, dry, core)
    doubted = doubtful(bait, parts, held.doubts, layer, stance.water, dry)
    lot = drawn(doubted, stance.water)
    ends = [change for one in doubted for change in (one.under, one.over)]
    single = Changes.joined([stance.still(), *(c for one in asked for c in (one.before, one.after)), *ends])
    known = stance.learned(single, lot)
    reserves, ups = known.reserve(single), known.ups(single)
    if known.locus is not None:
        for lost in np.flatnonzero(np.isnan(ups[:, 0]) & (reserves > 0)):
            ups[lost] = known.descended(single.taken(slice(lost, lost + 1)))
    nose_up, lean = known.angles(ups)
    count = 1 + 2 * len(asked)
    rows = []
    for number, one in enumerate(asked):
        a, b = 1 + 2 * number, 2 + 2 * number
        alike = known.locus is None or (reserves[a] > 0) == (reserves[b] > 0)
        rows.append(
            Row(
                one,
                float(reserves[b] - reserves[a]),
                float(reserves[b]),
                _told(nose_up[b] - nose_up[a]) if alike else None,
                _told(_wrapped(lean[b] - lean[a]).item()) if alike else None,
            )
        )
    tilts = (nose_up[count:] - nose_up[0]).reshape(-1, 2)
    leans = _wrapped(lean[count:] - lean[0]).reshape(-1, 2)
    extents = [_extent(a, b) for a, b in zip(tilts, leans, strict=True)]
    band = Extent(
        _root([e.nose_up_low for e in extents], nose_up[0]),
        _root([e.nose_up_high for e in extents], nose_up[0]),
        _root([e.lean_low for e in extents], lean[0]),
        _root([e.lean_high for e in extents], lean[0]),
    )
    return Budget(
        tuple(rows),
        tuple(zip(doubted, extents, strict=True)),
        band,
        _told(nose_up[0]),
        _told(lean[0]),
        Draws.of(known, lot),
        known,
    )


def _extent(tilt: Floats, lean: Floats) -> Extent:
    """How far the two ends of a doubt move the posture either way."""
    return Extent(_below(tilt), _below(-tilt), _below(lean), _below(-lean))


def _below(ends: Floats) -> float | None:
    return None if np.isnan(ends).any() else float(max(-ends.min(), 0.0))


def _root(extents: Sequence[float | None], angle: float) -> float | None:
    if np.isnan(angle):
        return None
    known = [extent for extent in extents if extent is not None]
    return float(np.sqrt(np.sum(np.square(known)))) if len(known) == len(extents) else None


def _told(angle: float) -> float | None:
    return None if np.isnan(angle) else float(angle)


def _wrapped(angle: Floats) -> Floats:
    """Angles in the half turn either way."""
    return np.asarray((angle + np.pi) % (2 * np.pi) - np.pi)
