"""How a half comes off the mould: its faces by draft, and what of them hides under others."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Final

import numpy as np

from meshlure.geometry.surface import Bools, Floats
from meshlure.making.mould.cover import covered

VERTICAL: Final = np.radians(0.05)
"""rad. Draft within this of none is none: coordinates rounded to four bytes turn a wall of a millimetre by less."""

RANGES: Final = ("opens", "within", "vertical", "undercut")
"""More draft than the least asked for; some, but no more than that; none; hidden from the pull."""

SAMPLES: Final = 30_000
"""Points at most that are asked whether something hides them, besides one on every face."""

_MOST_ROWS: Final = 60

_HAIR: Final = 1e-5
"""Share of the half's extent by which points stand off a wall, and by which something above must clear them."""


@dataclass(frozen=True, eq=False)
class Draft:
    """The faces of one half, judged.

    Attributes
    ----------
    corners : (n, 3, 3) array, m
        Cut at the parting plane, the pull upwards.
    angle : (n,) array, rad
        Between each face and the pull: positive where it opens.
    area : (n,) array, m2
    hidden : (n,) array
        Share of each face that is hidden: all of one that looks down, and of any other what lies under such a face.
    area_by_range : dict of float, m2
        By `RANGES`; together the area of the half.
    trapped : float, m3
        Rubber between hidden faces and what hides them, or between the parting plane and what stands over it.
    trapped_error : float, m3
        By how much that may be off, for faces of which a part is hidden are asked at points.
    spacing : float, m
        Between those points, 0 where none were needed.

    Notes
    -----
    Draft is asin(n.d) of a face's normal n and the pull d. Whatever the pull sees of the solid comes free; what it does
    not see must bend. A face that looks away from the pull hides itself and all that is straight below it. Column by
    column, the trapped rubber is what the looking-away faces stand above the plane less what the hidden faces below
    them do: integrals over flat faces, exact for the mesh where a face is hidden wholly or not at all.
    """

    corners: Floats
    angle: Floats
    area: Floats
    hidden: Floats
    area_by_range: dict[str, float]
    trapped: float
    trapped_error: float
    spacing: float

    @property
    def undercut(self) -> float:
        """Area of what is hidden, m2."""
        return self.area_by_range["undercut"]

    @property
    def away(self) -> Bools:
        """Which faces look away from the pull, (n,) array."""
        return np.asarray(self.angle < -VERTICAL)


def draft(corners: Floats, least: float) -> Draft:
    """Return the faces of a half by their draft.

    Parameters
    ----------
    corners : (n, 3, 3) array, m
        From `halves.half`.
    least : float, rad
        Draft up to which a face counts as within the least.
    """
    double = np.cross(corners[:, 1] - corners[:, 0], corners[:, 2] - corners[:, 0])
    length = np.sqrt((double**2).sum(axis=1))
    # A face that the cut left without area has no draft.
    kept = length > 0
    corners, double, length = corners[kept], double[kept], length[kept]
    rise = double[:, 2] / length
    angle, area = np.arcsin(np.clip(rise, -1.0, 1.0)), length / 2
    away = angle < -VERTICAL
    hidden = away.astype(np.float64)
    projected = double[:, 2] / 2
    middle = corners[:, :, 2].mean(axis=1)
    trapped = float(-(projected * middle)[away].sum())
    error, spacing = 0.0, 0.0
    if away.any():
        hair = _HAIR * float(np.ptp(corners.reshape(-1, 3), axis=0).max())
        asked = _near(corners, away)
        spacing, rows = _rows(area[asked])
        share, lifted = _shares(corners[asked], double[asked] / length[asked, None], rows, corners[away], hair)
        hidden[asked] = share
        trapped -= float((projected[asked] * lifted).sum())
        split = (share > 0) & (share < 1)
        error = float((np.abs(projected[asked]) * middle[asked] / rows)[split].sum())
    seen = area * (1 - hidden)
    sums = (
        seen[angle > max(least, VERTICAL)].sum(),
        seen[(angle > VERTICAL) & (angle <= least)].sum(),
        seen[~away & (angle <= VERTICAL)].sum(),
        (area * hidden).sum(),
    )
    table = {name: float(value) for name, value in zip(RANGES, sums, strict=True)}
    return Draft(corners, angle, area, hidden, table, max(trapped, 0.0) + 0.0, error, spacing)


def _near(corners: Floats, away: Bools) -> Floats:
    """Faces that do not look away, and that the bounds of those that do leave some doubt about, as numbers."""
    over = corners[away].reshape(-1, 3)
    low, high = over.min(axis=0), over.max(axis=0)
    least, most = corners.min(axis=1), corners.max(axis=1)
    in_reach = (least[:, :2] <= high[:2]).all(axis=1) & (most[:, :2] >= low[:2]).all(axis=1)
    return np.asarray(np.flatnonzero(~away & in_reach & (least[:, 2] < high[2])))


def _rows(area: Floats) -> tuple[float, Floats]:
    """Spacing of the points, m, and into how many rows each face is cut for them."""
    spacing = float(np.sqrt(area.sum() / SAMPLES)) if len(area) else 0.0
    rows = np.ceil(np.sqrt(area / spacing**2)) if spacing else np.ones(len(area))
    return spacing, np.asarray(np.clip(rows, 1, _MOST_ROWS))


def _shares(corners: Floats, normals: Floats, rows: Floats, over: Floats, hair: float) -> tuple[Floats, Floats]:
    """Hidden share of faces, and the mean over each face of its height where hidden, 0 elsewhere."""
    share, lifted = np.zeros(len(corners)), np.zeros(len(corners))
    for count in np.unique(rows):
        some = np.flatnonzero(rows == count)
        weights = lattice(int(count))
        points = np.einsum("pk,fkx->fpx", weights, corners[some])
        # Off the face, so that a wall stands beside what rises from it and not in it.
        off = points + hair * normals[some, None]
        under = covered(off.reshape(-1, 3), over, hair).reshape(len(some), -1)
        share[some] = under.mean(axis=1)
        lifted[some] = (under * points[:, :, 2]).mean(axis=1)
    return share, lifted


def lattice(rows: int) -> Floats:
    """Return places in a triangle: the middles of the equal triangles that it is cut into.

    Parameters
    ----------
    rows : int
        1 or more.

    Returns
    -------
    (rows**2, 3) array
        Barycentric coordinates.
    """
    i, j = np.meshgrid(np.arange(rows), np.arange(rows), indexing="ij")
    upright = np.column_stack([i[i + j < rows], j[i + j < rows]]) + 1 / 3
    turned = np.column_stack([i[i + j < rows - 1], j[i + j < rows - 1]]) + 2 / 3
    first = np.concatenate([upright, turned]) / rows
    return np.column_stack([first, 1 - first.sum(axis=1)])
