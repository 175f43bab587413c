"""How a plug parts: both halves' draft and undercuts, the parting curve, the pull that would trap least."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Final

import numpy as np

from meshlure.bait.wording import place_text, volume_text
from meshlure.findings import Finding, Level, Point
from meshlure.geometry.clearance import nearest
from meshlure.geometry.surface import Floats, Surface
from meshlure.making.mould.bench import FLIP, Bench
from meshlure.making.mould.draft import Draft, draft
from meshlure.making.mould.fittings import Fitting
from meshlure.making.mould.halves import HALVES, half
from meshlure.making.mould.lean import Pull, best_pull
from meshlure.making.mould.parting import parting
from meshlure.making.mould.plug import Plug
from meshlure.making.mould.undercuts import Undercut, undercuts

SOFT: Final = (1e-3, 3e-3)
"""m. Soft silicone comes off undercuts of up to 1 mm by itself and pulls off 3 mm on round corners: common practice,
no source."""

_NEAR: Final = 0.05e-3
"""m from the skin of a seat or a slot within which an undercut is its own."""


@dataclass(frozen=True, eq=False)
class Half:
    """How one half parts.

    Attributes
    ----------
    name : str
        A, pulled along the pull, or B, against it.
    draft : Draft
    undercuts : tuple of Undercut
        The deepest first, places on the bench.
    pieces : tuple of (str or None)
        For each undercut, the piece of whose slot or seat it is.
    """

    name: str
    draft: Draft
    undercuts: tuple[Undercut, ...]
    pieces: tuple[str | None, ...]


@dataclass(frozen=True, eq=False)
class PullStudy:
    """How a mould parts.

    Attributes
    ----------
    halves : tuple of Half
    rings : tuple of (n, 3) arrays, m
        The parting curve, on the bench.
    best : Pull
        On the bench: what traps least near the pull asked for.
    findings : tuple of Finding
    """

    halves: tuple[Half, ...]
    rings: tuple[Floats, ...]
    best: Pull
    findings: tuple[Finding, ...]

    @property
    def trapped(self) -> float:
        """Rubber that both halves hold, m3."""
        return sum(one.draft.trapped for one in self.halves)


def pull_study(plug: Plug, least: float, names: Sequence[str] = HALVES, lean: bool = True) -> PullStudy:
    """Return how a plug parts at z = 0 along z.

    Parameters
    ----------
    plug : Plug
    least : float, rad
        Draft that was asked for.
    names : sequence of str
        Halves to look at.
    lean : bool
        Whether to look for a better pull; else the one asked for counts as the best.
    """
    solid = plug.surface
    made = tuple(_half(solid, name, least, plug) for name in names)
    trapped = sum(one.draft.trapped for one in made)
    best = Pull(np.array([0.0, 0.0, 1.0]), 0.0, trapped, 0.0)
    if lean:
        best = best_pull(solid, plug.whole.volume)
    findings = [*_undercut_findings(made, plug.bench), *_lean_findings(best, trapped, plug)]
    if least > 0:
        findings += _draft_findings(made, least)
    return PullStudy(made, tuple(parting(solid)), best, tuple(findings))


def _half(solid: Surface, name: str, least: float, plug: Plug) -> Half:
    own = solid if name == HALVES[0] else solid.moved(rotation=FLIP)
    found = draft(half(solid, name), least)
    turn = np.eye(3) if name == HALVES[0] else FLIP
    under = tuple(Undercut(one.area, one.depth, turn @ one.at) for one in undercuts(own, found))
    return Half(name, found, under, tuple(_piece(one.at, plug.fittings) for one in under))


def _piece(at: Floats, fittings: Sequence[Fitting]) -> str | None:
    """Name of the piece in whose seat or slot a place lies; None on the body itself."""
    apart = {
        fitting.piece.name: float(nearest(fitting.shape.surface(), at[None]).distance[0])
        for fitting in fittings
        if fitting.makes and (np.abs(at - np.clip(at, *fitting.shape.bounds)) <= _NEAR).all()
    }
    name = min(apart, key=lambda each: apart[each], default=None)
    return name if name is not None and apart[name] <= _NEAR else None


def _point(bench: Bench, at: Floats) -> Point:
    x, y, z = bench.drawn(at).tolist()
    return x, y, z


def _undercut_findings(halves: Sequence[Half], bench: Bench) -> list[Finding]:
    found = []
    for one in halves:
        if not one.undercuts or one.undercuts[0].depth < SOFT[0]:
            continue
        worst, piece = one.undercuts[0], one.pieces[0]
        at = _point(bench, worst.at)
        place = "" if piece is None else f" at '{piece}'"
        advice = "move the parting plane or the pull, or split the rubber there"
        if piece is not None:
            advice = "where it is a slot, pinned = true gives the piece a seat instead, or saw the slot after casting"
        found.append(
            Finding(
                code="undercut",
                level=Level.WARNING if worst.depth > SOFT[1] else Level.NOTE,
                piece=piece,
                message=f"half {one.name} holds {volume_text(one.draft.trapped)} of rubber; it reaches "
                f"{worst.depth * 1e3:.1f} mm under{place}, at {place_text(at)}",
                count=len(one.undercuts),
                where=(at,),
                advice=advice,
            )
        )
    return found


def _lean_findings(best: Pull, trapped: float, plug: Plug) -> list[Finding]:
    if best.direction[2] >= 1.0 or trapped <= best.trapped:
        return []
    way = plug.bench.turn.T @ best.direction
    angle = np.degrees(np.arccos(np.clip(best.direction[2], -1.0, 1.0)))
    text = "[" + ", ".join(f"{value + 0.0:.3f}" for value in np.round(way, 3)) + "]"
    return [
        Finding(
            code="better-pull",
            level=Level.NOTE,
            message=f"a pull along {text}, {angle:.1f} degrees from this one, would hold "
            f"{volume_text(best.trapped)} of rubber instead of {volume_text(trapped)}",
            advice=f"to use it, write pull = {text}",
        )
    ]


def _draft_findings(halves: Sequence[Half], least: float) -> list[Finding]:
    short = sum(one.draft.area_by_range[name] for one in halves for name in ("within", "vertical"))
    if not short:
        return []
    return [
        Finding(
            code="little-draft",
            level=Level.NOTE,
            message=f"{short * 1e6:.0f} mm2 have no more than the {np.degrees(least):.3g} degrees of draft asked for",
            advice="soft rubber needs none; a rigid mould would want 1 to 2 degrees there",
        )
    ]
