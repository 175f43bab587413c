"""The variant to make: the body with pockets cut for its inserts, and each insert, as meshes checked once written."""

from __future__ import annotations

from dataclasses import dataclass
from pathlib import Path

from meshlure.bait.composition import inserts_left
from meshlure.bait.meshpiece import solid_of
from meshlure.bait.pieces import Bait, MeshPiece, Role
from meshlure.geometry.offset import grown
from meshlure.geometry.solids import Solid
from meshlure.making.written import file_name, write_solid


@dataclass(frozen=True, eq=False)
class Cutting:
    """One mesh to write.

    Attributes
    ----------
    name : str
        File name.
    solid : Solid
    """

    name: str
    solid: Solid


def cuttings(bait: Bait) -> tuple[Cutting, ...]:
    """Return the body with its pockets and voids cut out, and every insert.

    Notes
    -----
    A pocket is its insert grown by ``fit`` on every side, in the body and in the inserts that it replaces; voids are
    cut as drawn. Coordinates are those of CAD.
    """
    body = solid_of(bait.body.surface, bait.body.name)
    pockets = {piece.name: _pocket(piece) for piece in bait.pieces}
    taken = [*(Solid.of(cavity) for cavity in bait.body.cavities), *pockets.values()]
    left = inserts_left(bait)
    for piece in bait.pieces:
        for earlier in left.keys() & set(piece.replaces):
            left[earlier] = left[earlier].less(pockets[piece.name])
    used = {"body.stl"}
    parts = [Cutting("body.stl", body.less(*taken) if taken else body)]
    parts += [Cutting(file_name(name, used), solid) for name, solid in left.items()]
    return tuple(parts)


def _pocket(piece: MeshPiece) -> Solid:
    return solid_of(grown(piece.surface, piece.fit if piece.role is Role.INSERT else 0.0), piece.name)


def write_cuttings(bait: Bait, folder: Path) -> list[str]:
    """Write body and inserts as STL in mm, read them back and hold them against what was promised.

    Parameters
    ----------
    bait : Bait
    folder : Path
        Exists.

    Returns
    -------
    list of str
        Names of the files.

    Raises
    ------
    InputError
        Where a mesh comes back open or its volume is off by more than 0.01%.
    """
    made = cuttings(bait)
    for cutting in made:
        write_solid(cutting.solid, folder / cutting.name)
    return [cutting.name for cutting in made]
