"""A new closed skin drawn round what a broken surface winds round, where nothing else closes it."""

from __future__ import annotations

import importlib.util
from typing import Final

import numpy as np

from meshlure.geometry.clearance import nearest
from meshlure.geometry.lattice import MARGIN, Skin, skin
from meshlure.geometry.mending.steps import Left, Step
from meshlure.geometry.phrasing import counted, millimetres
from meshlure.geometry.samples import scattered, spread
from meshlure.geometry.shells import measures
from meshlure.geometry.surface import Bools, Floats, Surface
from meshlure.geometry.topology import paired

NODES: Final = 8_000_000
"""Places of the grid, at most: a quarter of them are asked, which takes about ten seconds a million."""

_LIBRARY: Final = "igl"

_HALF: Final = 0.5
"""Winding number from which on a place is inside."""

_HALVINGS: Final = 10
"""Times that a lattice edge is halved to find the skin on it: to a thousandth of the step."""

_AT_ONCE: Final = 500_000
_BORDER: Final = 3
"""Half steps of the lattice round the surface's bounds; the outermost two lie outside."""

_DRAWN: Final = 20_000
"""Places of the new skin, drawn by lot from its area, that tell how much of it lies how far off."""

_SPOTS: Final = 200_000
"""Places of the old skin, about, whose distance to the new one is measured."""


def remade(surface: Surface, step: float) -> tuple[Step | None, Left | None]:
    """Return a closed skin round the places that a surface winds round more than half, or why there is none.

    Parameters
    ----------
    surface : Surface
        Open, crossing itself or double as it may be; its faces wound alike where they can be.
    step : float, m
        Of the lattice on which the skin is drawn; details smaller than that are lost.

    Notes
    -----
    The generalized winding number is the sum of the solid angles of all faces over 4 pi: near a closed skin a whole
    number, over a hole it passes evenly from one to nought. It is asked at the nodes of a body-centred cubic lattice,
    cut between nodes above a half and others (`lattice.skin`), and each corner is brought to the half by halving its
    lattice edge. Whatever comes out is closed. How far it lies from the old skin is measured and told: from
    the new one's corners and middles, and back from spots on the old one; between them it may lie farther by as much as
    they are apart. Edges are cut across by the lattice.

    References
    ----------
    A. Jacobson, L. Kavan, O. Sorkine-Hornung (2013), Robust inside-outside segmentation using generalized winding
    numbers, ACM Trans. Graphics 32(4). G. Barill et al. (2018), Fast winding numbers for soups and clouds, ACM Trans.
    Graphics 37(4): the approximation that is used, by the libigl library.
    """
    if importlib.util.find_spec(_LIBRARY) is None:
        return None, Left(
            "a new skin takes the libigl library, which is not installed",
            (),
            'Install it with: pip install "meshlure[remake]".',
        )
    half = step / 2
    low, high = surface.bounds
    shape = np.ceil((high - low) / half).astype(np.int64) + 2 * _BORDER
    shape += 1 - shape % 2
    if float(np.prod(shape.astype(np.float64))) > NODES:
        least = 2 * float((np.prod(high - low) / NODES) ** (1 / 3)) * 1.1
        return None, Left(
            f"a new skin in steps of {millimetres(step)} would take too many places",
            (),
            f"Ask for steps of {millimetres(least)} or more.",
        )
    origin = (low + high) / 2 - (shape - 1) * (half / 2)
    ask = _Winding(surface)
    values = np.full(tuple(shape.tolist()), -1.0)
    asked = _nodes(values.shape)
    values[asked] = ask(origin + half * np.argwhere(asked)) - _HALF
    rind = np.ones(values.shape, dtype=np.bool_)
    rind[2:-2, 2:-2, 2:-2] = False
    values[rind] = -1.0
    cut = skin(values)
    if not len(cut.faces):
        return None, Left("the surface winds round nothing: there is no inside to draw a skin round", (), "Redraw it.")
    made = Surface(_settled(cut, origin, half, ask), cut.faces)
    drawn = scattered(made, _DRAWN)
    near = nearest(surface, np.concatenate([drawn, made.vertices, made.corners.mean(axis=1)])).distance
    by_area = near[:_DRAWN]
    apart = max(step, float(np.sqrt(2 * surface.area / _SPOTS)))
    back = nearest(made, spread(surface, apart)).distance
    farthest = millimetres(float(near.max()))
    over = " (over what was open)" if not paired(surface).closed else ""
    did = (
        f"drew a new skin of {counted(len(made.faces), 'face')} in steps of {millimetres(step)}; half of it lies "
        f"within {millimetres(float(np.median(by_area)))} of the old one, 95% within "
        f"{millimetres(float(np.quantile(by_area, 0.95)))}, the farthest corner or middle of a face {farthest} off"
        f"{over}; of places on the old skin, one every {millimetres(apart)}, none is farther than "
        f"{millimetres(float(back.max()))} from the new one"
    )
    return Step("remake", did, made, len(made.faces), float(max(near.max(), back.max()))), None


class _Winding:
    """How many times a surface winds round places."""

    def __init__(self, surface: Surface) -> None:
        # The library works in any unit; sizes of about 1 keep its tolerances small.
        self._middle = surface.bounds.mean(axis=0)
        self._scale = 1 / float(np.ptp(surface.bounds, axis=0).max())
        self._vertices = np.ascontiguousarray((surface.vertices - self._middle) * self._scale)
        faces = surface.faces if measures(surface)[0].sum() >= 0 else surface.faces[:, ::-1]
        self._faces = np.ascontiguousarray(faces, dtype=np.int64)

    def __call__(self, points: Floats) -> Floats:
        # The library's core only: beside it the package ships a module under another licence.
        from igl import fast_winding_number

        found = np.empty(len(points))
        for at in range(0, len(points), _AT_ONCE):
            some = np.ascontiguousarray((points[at : at + _AT_ONCE] - self._middle) * self._scale)
            found[at : at + _AT_ONCE] = fast_winding_number(self._vertices, self._faces, some)
        return found


def _settled(cut: Skin, origin: Floats, half: float, ask: _Winding) -> Floats:
    """Corners of a cut lattice brought to a winding number of a half along their edges, (n, 3) array, m."""
    inner, outer = origin + half * cut.inner, origin + half * cut.outer
    low, high = np.zeros(len(inner)), np.ones(len(inner))
    for _ in range(_HALVINGS):
        middle = (low + high) / 2
        inside = ask(inner + middle[:, None] * (outer - inner)) > _HALF
        low, high = np.where(inside, middle, low), np.where(inside, high, middle)
    share = np.clip((low + high) / 2, MARGIN, 1 - MARGIN)[:, None]
    return np.asarray(inner + share * (outer - inner))


def _nodes(shape: tuple[int, ...]) -> Bools:
    """Which places of a grid belong to the lattice: all indices even, or all odd."""
    i, j, k = np.ogrid[tuple(slice(size) for size in shape)]
    return np.asarray(((i + j) % 2 == 0) & ((j + k) % 2 == 0))
