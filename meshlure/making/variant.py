"""The variant to make: the body with pockets cut for its inserts, and each insert, as meshes checked once written."""

from __future__ import annotations

from dataclasses import dataclass
from pathlib import Path

from meshlure.bait.composition import inserts_left
from meshlure.bait.meshpiece import solid_of
from meshlure.bait.pieces import Bait, MeshPiece, Role
from meshlure.errors import Fault, InputError
from meshlure.files.reading import read_mesh
from meshlure.files.stl import write_stl
from meshlure.geometry.moments import solid_moments
from meshlure.geometry.offset import grown
from meshlure.geometry.solids import Solid
from meshlure.geometry.soundness import examine
from meshlure.geometry.surface import Surface

AGREES = 1e-4
"""Share of the volume promised within which what was written must come back."""

_SLACKS = (1e-6, 3e-6, 1e-5)
"""m. Vertices closer than this are merged before writing: an STL rounds a 100 mm part to some hundred-millionths of a
metre, and seams finer than that would come back open. The coarser ones are tried where the finer one does."""


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
    parts += [Cutting(_file_name(name, used), solid) for name, solid in left.items()]
    return tuple(parts)


def _pocket(piece: MeshPiece) -> Solid:
    return solid_of(grown(piece.surface, piece.fit if piece.role is Role.INSERT else 0.0), piece.name)


def _file_name(piece: str, used: set[str]) -> str:
    """Return a file name of letters, digits and dashes that no other piece has."""
    stem = "-".join("".join(c if c.isascii() and c.isalnum() else " " for c in piece.lower()).split()) or "insert"
    name, number = f"{stem}.stl", 2
    while name in used:
        name, number = f"{stem}-{number}.stl", number + 1
    used.add(name)
    return name


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
        _write(cutting, folder / cutting.name)
    return [cutting.name for cutting in made]


def _write(cutting: Cutting, path: Path) -> None:
    promised = cutting.solid.volume
    if cutting.solid.empty:
        raise InputError(
            Fault(
                what="nothing is left of it once the pockets are cut",
                where=path.name,
                next_step="check that the inserts are smaller than what they lie in",
            )
        )
    trouble = ""
    for slack in _SLACKS:
        write_stl(path, cutting.solid.simplified(slack).surface())
        came_back = examine(read_mesh(path, "mm").surface, path.name)
        if came_back.volume is None:
            trouble = came_back.findings[0].message
            continue
        volume = _volume(came_back.surface)
        if abs(volume - promised) <= AGREES * promised:
            return
        trouble = f"{volume * 1e9:.6g} mm3"
    raise InputError(
        Fault(
            what="the mesh written does not keep its promise once read back",
            where=path.name,
            found=trouble,
            allowed=f"closed, {promised * 1e9:.6g} mm3 within 0.01%",
            next_step="move the insert's skin a little off the body's, or draw the pocket in CAD",
        )
    )


def _volume(surface: Surface) -> float:
    return solid_moments(surface).amount
