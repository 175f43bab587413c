"""Weighs, floats, measures and cuts hard fishing baits from their meshes.

`read_bait` reads a bait file with its meshes, `study` examines it:

>>> import meshlure
>>> found = meshlure.study(meshlure.read_bait("samples/minnow/minnow.toml"))  # doctest: +SKIP
>>> found.results["buoyancy"]["verdict"]  # doctest: +SKIP

`estimate_drag` estimates the drag of any closed mesh in any direction.
"""

from __future__ import annotations

from typing import TYPE_CHECKING

from meshlure.version import VERSION as __version__

if TYPE_CHECKING:
    from os import PathLike

    from meshlure.bait.pieces import Bait
    from meshlure.geometry.surface import Surface
    from meshlure.physics.drag import Layer
    from meshlure.physics.estimate import Direction, DragEstimate
    from meshlure.results.study import Study

__all__ = ["__version__", "estimate_drag", "read_bait", "study"]


def read_bait(path: str | PathLike[str]) -> Bait:
    """Return a bait from its bait file, its meshes read and examined.

    Parameters
    ----------
    path : path
        Of a bait file (TOML); mesh paths in it are relative to its folder.

    Raises
    ------
    InputError
        With every fault of the file, or of its meshes, at once.
    """
    from meshlure.bait.loading import read_bait

    return read_bait(path)


def study(bait: Bait, against: Bait | None = None) -> Study:
    """Return everything that one examination of a bait finds.

    Parameters
    ----------
    bait : Bait
        From `read_bait`.
    against : Bait, optional
        Another one, whose flight this one's is held against.

    Returns
    -------
    Study
        ``results`` is the tree of results.json (mm, g, degrees by its keys), ``to_json()`` its text.

    Raises
    ------
    InputError
        Where a mass or a volume is left undefined.
    """
    from meshlure.examine import study

    return study(bait, against)


def estimate_drag(
    mesh: str | PathLike[str] | Surface,
    leads: Direction = (-1.0, 0.0, 0.0),
    axis: Direction | None = None,
    reynolds: float = 1e5,
    layer: Layer | None = "tripped",
) -> DragEstimate:
    """Return the drag of a closed mesh that moves in a direction, as coefficient and area.

    Parameters
    ----------
    mesh : path or Surface
        STL or OBJ, or vertices and faces; closed, in any unit.
    leads : three float
        Direction that goes first.
    axis : three float, optional
        The body's own long axis, of either sign: it tells end-on from broadside. Left out, the principal axis whose
        moment of inertia stands apart most from the other two; ties go to `leads`.
    reynolds : float
        Speed x diameter / kinematic viscosity, the diameter that of the circle as large as the greatest section across
        the axis.
    layer : {"laminar", "tripped", None}
        State of the boundary layer; None lets the model choose it by the Reynolds number and the front.

    Returns
    -------
    DragEstimate
        cd with its band cd_low to cd_high, on frontal_area (square of the mesh's unit), and the drag areas by parts.

    Raises
    ------
    InputError
        Where the mesh cannot be read or encloses no volume, a direction has no length, the Reynolds number is not
        positive, or the layer's name is unknown.
    """
    from meshlure.physics.estimate import estimate_drag

    return estimate_drag(mesh, leads, axis, reynolds, layer)
