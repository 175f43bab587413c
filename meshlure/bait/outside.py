"""What of a bait lies outside its body: pieces that stick out, and hollows that are not closed."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from itertools import product

import numpy as np

from meshlure import tolerances
from meshlure.bait.overlaps import Filling
from meshlure.bait.pieces import MeshPiece, Role
from meshlure.bait.wording import middle, place_text, volume_text
from meshlure.findings import Finding, Level
from meshlure.geometry.clearance import nearest
from meshlure.geometry.phrasing import MOST_PLACES, counted
from meshlure.geometry.samples import scattered
from meshlure.geometry.solids import Solid
from meshlure.geometry.surface import Floats

_WAYS = np.array([way for way in product((-1.0, 0.0, 1.0), repeat=3) if any(way)])
"""Directions in which the farthest vertices of an outside part are asked how far they stand off the body."""

_FITTED = 0.02
"""Share of an insert that may lie in the body's material though it sits in a pocket: the facets of the two differ."""

_GAP = 1e-3
"""m. A wall farther than this from an insert is no wall of its pocket; common practice, no source."""

_NO_GAP = 5e-6
"""m. A gap below this is the facets' difference."""

_HELD = 0.3
"""Share of an insert's skin that lies near a wall where it sits in a pocket, and not on a skin: a half of it or more,
less where a pocket is shallow."""

_SPOTS = 2000
"""Places at which a gap is asked."""

_NAMED = 4
"""Outside parts named one by one in a message."""


def outside_findings(
    body: MeshPiece, pieces: Sequence[MeshPiece], filling: Filling, whole: Solid, outer: Solid
) -> list[Finding]:
    """Return what is to be said of pieces that cross the body's skin.

    Parameters
    ----------
    body : MeshPiece
    pieces : sequence of MeshPiece
    filling : Filling
    whole : Solid
        The body without regard to hollows and inserts.
    outer : Solid
        Body and pieces together, their closed-off spaces filled.
    """
    out = {piece.name: filling.solids[piece.name].less(whole) for piece in pieces if piece.role is Role.INSERT}
    out = {name: beyond for name, beyond in out.items() if beyond.volume > _rounding(filling.solids[name])}
    parts = {name: _parts(beyond) for name, beyond in out.items()}
    reach = _reach(body, parts)
    findings = []
    for piece in pieces:
        if piece.name not in out:
            continue
        beyond, drawn = out[piece.name], filling.solids[piece.name]
        if not np.isin(outer.sources(), drawn.sources()).any():
            continue  # in a pocket that other pieces close
        if drawn.volume - beyond.volume <= _FITTED * drawn.volume:
            findings.append(_sits_outside(piece, drawn, beyond, body))
        else:
            findings.append(_sticks_out(piece, beyond.volume, parts[piece.name], reach[piece.name]))
    for space in filling.spaces:
        if space.flooded or space.solid.empty:
            continue
        leak = space.solid.less(outer)
        if leak.volume > _rounding(space.solid):
            findings.append(_leaks(space.name, leak))
    return findings


def _rounding(solid: Solid) -> float:
    return tolerances.VOLUME_SHARE * solid.volume


def _parts(solid: Solid) -> list[Solid]:
    """Parts that hang together, the largest first, rounding left out."""
    parts = [part for part in solid.parts() if part.volume > _rounding(solid)]
    return sorted(parts, key=lambda part: -part.volume)


def _reach(body: MeshPiece, out: Mapping[str, Sequence[Solid]]) -> dict[str, float]:
    """How far each piece's outside parts stand off the body's skin, m; all asked at once."""
    points = {name: np.concatenate([_tips(part) for part in parts]) for name, parts in out.items()}
    if not points:
        return {}
    apart = nearest(body.surface, np.concatenate(list(points.values()))).distance
    ends = np.cumsum([len(p) for p in points.values()])
    return {name: float(apart[end - len(points[name]) : end].max()) for name, end in zip(points, ends, strict=True)}


def _tips(part: Solid) -> Floats:
    vertices = part.surface().vertices
    return np.asarray(vertices[(vertices @ _WAYS.T).argmax(axis=0)])


def _sits_outside(piece: MeshPiece, drawn: Solid, beyond: Solid, body: MeshPiece) -> Finding:
    where = middle(beyond)
    return Finding(
        code="sits-outside",
        level=Level.NOTE if piece.lip or piece.coated else Level.WARNING,
        piece=piece.name,
        message=f"all {volume_text(drawn.volume)} of '{piece.name}' lie outside the body's material, in an open "
        f"pocket drawn into it or on its skin, about {place_text(where)}; what is not closed off displaces water"
        + _gap_text(piece, body),
        where=(where,),
        advice="right for an insert in an open pocket or a glued-on part; else check its place",
    )


def _gap_text(piece: MeshPiece, body: MeshPiece) -> str:
    """What is left between an insert and the walls of its open pocket, by spots of even area on the insert."""
    surface = piece.surface
    apart = nearest(body.surface, scattered(surface, _SPOTS)).distance
    near = apart[apart <= _GAP]
    share = len(near) / len(apart)
    gap = float(np.median(near)) if len(near) else 0.0
    if share < _HELD or gap < _NO_GAP:
        return ""
    left = float(near.mean()) * share * surface.area
    return (
        f"; {gap * 1e3:.2f} mm of gap stay between it and the walls round {share:.0%} of its skin, "
        f"about {volume_text(left)} that count as water"
    )


def _sticks_out(piece: MeshPiece, volume: float, parts: Sequence[Solid], reach: float) -> Finding:
    places = [middle(part) for part in parts]
    head = f"{volume_text(volume)} of '{piece.name}' stick out of the body"
    far = f"by up to {reach * 1e3:.1f} mm"
    if len(parts) == 1:
        text = f"{head}, {far}, about {place_text(places[0])}"
    else:
        both = zip(parts, places, strict=True)
        named = [f"{volume_text(part.volume)} about {place_text(place)}" for part, place in both]
        more = [f"{len(parts) - _NAMED} more"] if len(parts) > _NAMED else []
        text = f"{head} at {counted(len(parts), 'place')}, {far}: {'; '.join([*named[:_NAMED], *more])}"
    return Finding(
        code="sticks-out",
        level=Level.NOTE if piece.lip else Level.WARNING,
        piece=piece.name,
        message=f"{text}; it displaces water there",
        count=len(parts),
        where=tuple(places[:MOST_PLACES]),
        advice="right for a lip, an eye or an exposed weight; else move it inward",
    )


def _leaks(name: str, leak: Solid) -> Finding:
    where = middle(leak)
    return Finding(
        code="sealed-void-open",
        level=Level.FAULT,
        piece=name,
        message=f"'{name}' is called sealed, but reaches the outside: {volume_text(leak.volume)} of it, "
        f"about {place_text(where)}, is not closed off and is counted as water",
        where=(where,),
        advice="leave a wall between it and the skin, close it with a plug as an insert, or call it flooded",
    )
