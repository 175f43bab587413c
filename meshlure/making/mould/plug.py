"""The solid that stands proud of the boards: the scaled body with its slots and with seats for what is cast in."""

from __future__ import annotations

from dataclasses import dataclass, replace
from functools import cached_property

import numpy as np

from meshlure.bait.meshpiece import solid_of
from meshlure.bait.pieces import Bait
from meshlure.geometry.solids import Solid
from meshlure.geometry.surface import Surface
from meshlure.making.mould.bench import Bench
from meshlure.making.mould.fittings import Fitting, Holding, fittings

_CUT = (Holding.SLOT, Holding.OPEN)


@dataclass(frozen=True, eq=False)
class Plug:
    """What a mould is made around, on the bench.

    Attributes
    ----------
    bench : Bench
    body : Solid
        The scaled body's outside, without regard to inserts.
    form : Solid
        What the cavity has of it: slots and open hollows cut out.
    whole : Solid
        The form with the seats joined to it.
    resin : float, m3
        What of the form the resin fills once the inserts are in, in the drawing's size: as it is cast.
    fittings : tuple of Fitting
    """

    bench: Bench
    body: Solid
    form: Solid
    whole: Solid
    resin: float
    fittings: tuple[Fitting, ...]

    def lowered(self, height: float) -> Plug:
        """Return the plug with the parting plane moved up by ``height``, m: all comes to lie lower on the bench."""
        shift = np.array([0.0, 0.0, -height])
        held = tuple(
            replace(fitting, shape=fitting.shape.shifted(shift), drawn=fitting.drawn.shifted(shift))
            for fitting in self.fittings
        )
        body, form, whole = (solid.shifted(shift) for solid in (self.body, self.form, self.whole))
        return Plug(self.bench.at(height), body, form, whole, self.resin, held)

    def standing(self, body: Solid) -> Solid:
        """Return the whole as it would be with another body: slots cut out, seats joined to it."""
        cut = [fitting.shape for fitting in self.fittings if fitting.holding in _CUT]
        form = body.less(*cut) if cut else body
        return form.joined(*(seat.shape for seat in self.seats)) if self.seats else form

    @cached_property
    def surface(self) -> Surface:
        """The whole's skin."""
        return self.whole.surface()

    @property
    def seats(self) -> tuple[Fitting, ...]:
        """What lies in seats."""
        return tuple(fitting for fitting in self.fittings if fitting.holding is Holding.SEAT)


def plug(bait: Bait, bench: Bench) -> Plug:
    """Return the plug of a bait on a bench.

    Parameters
    ----------
    bait : Bait
    bench : Bench

    Notes
    -----
    What the resin forms is scaled for all three shrinkages, seats for real pieces for those of print and rubber alone.
    Closed hollows inside are no matter of the mould: they take resin away and show nowhere on its skin.
    """
    body = solid_of(bench.part(bait.body.surface), bait.body.name)
    held = tuple(fittings(bait, bench, body))
    cut = [fitting.shape for fitting in held if fitting.holding in _CUT]
    form = body.less(*cut) if cut else body
    seats = [fitting.shape for fitting in held if fitting.holding is Holding.SEAT]
    whole = form.joined(*seats) if seats else form
    taken = [fitting.drawn for fitting in held if fitting.holding not in (*_CUT, Holding.LATER)]
    taken += [solid_of(bench.part(cavity), bait.body.name) for cavity in bait.body.cavities]
    left = form.less(*taken) if taken else form
    return Plug(bench, body, form, whole, left.volume / bench.scale.volume, held)
