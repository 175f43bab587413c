"""A bait with something put into its body, weighed by sums alone: what displaces water stays as it was."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace

from meshlure.bait.chambers import BallRow
from meshlure.bait.composition import Composition, Part
from meshlure.bait.pieces import Role
from meshlure.geometry.moments import Moments


def altered(
    composition: Composition, taken: Moments, parts: Sequence[Part] = (), rows: Sequence[BallRow] = ()
) -> Composition:
    """Return a composition in which things lie wholly inside the body's own material.

    Parameters
    ----------
    composition : Composition
        Whose body has one density throughout.
    taken : Moments, m3
        Of the body's material that makes room.
    parts : sequence of Part
        What lies there instead; sealed air needs none.
    rows : sequence of BallRow
        Balls that run there.

    Notes
    -----
    Exact where all of ``taken`` is body material: mass and first and second moments are sums. The skin, the facets'
    deficit and the findings are those of the bait as it was.
    """
    body, *others = composition.parts
    assert body.role is Role.BODY
    assert body.substance is not None
    volume = body.volume - taken.amount
    mass = body.mass - taken * body.substance.density
    left = replace(body, volume=volume, mass=mass, centre=mass.centre)
    return replace(composition, parts=(left, *others, *parts), rows=(*composition.rows, *rows))
