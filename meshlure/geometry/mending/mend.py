"""Mending a surface: the steps in their order, and what is left when they are done."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass, replace

import numpy as np

from meshlure.geometry.mending.caps import capped
from meshlure.geometry.mending.doubles import undoubled, without_needles
from meshlure.geometry.mending.fins import without_fins
from meshlure.geometry.mending.loose import without_small
from meshlure.geometry.mending.mirror import mirrored
from meshlure.geometry.mending.near import stitched, welded
from meshlure.geometry.mending.remake import remade
from meshlure.geometry.mending.steps import Left, Step, Wishes
from meshlure.geometry.mending.union import united
from meshlure.geometry.mending.winding import consistent
from meshlure.geometry.shells import enclosed_volume
from meshlure.geometry.soundness import Soundness, examine
from meshlure.geometry.surface import Surface
from meshlure.geometry.topology import paired


@dataclass(frozen=True, eq=False)
class Done:
    """A step with the volumes round it.

    Attributes
    ----------
    step : Step
    before, after : float or None, m3
        What the surface enclosed; None where it was not closed.
    """

    step: Step
    before: float | None
    after: float | None


@dataclass(frozen=True, eq=False)
class Mended:
    """What mending came to.

    Attributes
    ----------
    before, after : Soundness
        Of the surface as it came, and as it is now.
    done : tuple of Done
        In the order in which it was done.
    left : tuple of Left
        What could not be put right by these steps.
    """

    before: Soundness
    after: Soundness
    done: tuple[Done, ...]
    left: tuple[Left, ...]

    @property
    def changed(self) -> bool:
        """Whether anything was done."""
        return bool(self.done)


def mend(surface: Surface, wishes: Wishes, piece: str, first: Sequence[Step] = ()) -> Mended:
    """Return a surface mended as far as it goes.

    Parameters
    ----------
    surface : Surface
        Welded on equality; stays as it is.
    wishes : Wishes
    piece : str
        Its name, for the findings.
    first : sequence of Step
        Done before on request, in order, on this surface.

    Notes
    -----
    In order: copies of faces and faces without area go, open edges are sewn, faces turned to look alike, a half body is
    mirrored where that is wished, flat holes are closed, shells that touch or overlap are joined. Every step is done
    only where it is needed, so that a sound surface comes out as it went in. Where the surface is still open, a new
    skin is drawn where that is wished.
    """
    work = _Work(surface, piece, first)
    work.do(lambda s: without_small(s, wishes.smallest))
    work.do(undoubled)
    if not work.closed:
        work.do(lambda s: welded(s, wishes.weld))
        work.do(lambda s: stitched(s, wishes.weld))
        work.do(undoubled)
    while work.do(without_needles):
        work.do(lambda s: stitched(s, wishes.weld))
    if not work.closed:
        work.do(without_fins)
    work.ask(consistent)
    if wishes.mirror:
        work.ask(mirrored, lasting=True)
        work.do(undoubled)
    if not work.closed:
        work.close(lambda s: capped(s, wishes.cap))
        work.ask(consistent)
    if work.sound.volume is not None:
        work.ask(lambda _: united(work.sound), lasting=True)
    if wishes.remake is not None and (work.sound.stops or _crosses(work.sound)):
        pitch = wishes.remake
        work.ask(lambda s: remade(s, pitch), lasting=True)
    return work.mended()


_PUT_RIGHT = frozenset({"inside-out", "inside-out-shell", "flat-shells"})
"""Findings about what an examination puts right by itself."""


_CROSSING = "self-crossing"
_NEW_SKIN = 'As a last resort a new skin can be drawn round it: --remake "0.3 mm".'


def _crosses(sound: Soundness) -> bool:
    return any(finding.code == _CROSSING for finding in sound.findings)


class _Work:
    """A surface on the bench, with what was done to it."""

    def __init__(self, surface: Surface, piece: str, first: Sequence[Step]) -> None:
        self._piece = piece
        surface = _used(surface)
        self._before = examine(surface, piece)
        self._sound: Soundness | None = self._before
        self._surface = surface
        self._done: list[Done] = []
        self._left: list[Left] = []
        self._lasting: list[Left] = []
        for step in first:
            self._take(step)

    @property
    def closed(self) -> bool:
        return paired(self._surface).closed

    @property
    def sound(self) -> Soundness:
        """What there is to say of the surface as it is now."""
        if self._sound is None:
            self._sound = examine(self._surface, self._piece)
        return self._sound

    def do(self, act: Callable[[Surface], Step | None]) -> bool:
        """Do a step, if there is something to do."""
        step = act(self._surface)
        if step is not None:
            self._take(step)
        return step is not None

    def ask(self, act: Callable[[Surface], tuple[Step | None, Left | None]], lasting: bool = False) -> None:
        """Do a step that may have to leave something; lasting where no other step can make up for it."""
        step, left = act(self._surface)
        if step is not None:
            self._take(step)
        if left is not None:
            (self._lasting if lasting else self._left).append(left)

    def close(self, act: Callable[[Surface], tuple[Step | None, list[Left]]]) -> None:
        """Do a step that may have to leave several things."""
        step, left = act(self._surface)
        if step is not None:
            self._take(step)
        self._left += left

    def _take(self, step: Step) -> None:
        before = _volume(self._surface)
        self._surface = _used(step.surface)
        self._sound = None
        self._done.append(Done(replace(step, surface=self._surface), before, _volume(self._surface)))

    def mended(self) -> Mended:
        """Return what it all came to, with shells turned that looked inwards."""
        turned = [finding for finding in self.sound.findings if finding.code in _PUT_RIGHT]
        if turned and not self.sound.stops:
            count = sum(finding.count or 1 for finding in turned)
            did = "; ".join(finding.message for finding in turned)
            self._take(Step("outward", did, self.sound.surface, count, 0.0, turned[0].where))
        return Mended(self._before, self.sound, tuple(self._done), tuple(self._remains()))

    def _remains(self) -> Iterator[Left]:
        """Yield what is still wrong: as the steps said it, else as the examination does."""
        yield from dict.fromkeys(self._lasting)
        if not self.sound.stops:
            for finding in self.sound.findings:
                if finding.code == _CROSSING:
                    yield Left(finding.message, finding.where, f"{finding.advice} {_NEW_SKIN}")
            return
        yield from dict.fromkeys(self._left)
        said = bool(self._left or self._lasting)
        for finding in self.sound.findings:
            if finding.stops and not (said and finding.code in ("open-edges", "mixed-winding")):
                yield Left(finding.message, finding.where, finding.advice)


def _volume(surface: Surface) -> float | None:
    return abs(enclosed_volume(surface)) if paired(surface).closed and len(surface.faces) else None


def _used(surface: Surface) -> Surface:
    """Leave out the vertices that no face names."""
    named = np.zeros(len(surface.vertices), dtype=np.bool_)
    named[surface.faces.ravel()] = True
    if named.all():
        return surface
    return Surface(surface.vertices[named], (np.cumsum(named, dtype=np.intp) - 1)[surface.faces])
