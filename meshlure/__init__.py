"""Weighs, floats, measures and cuts hard fishing baits from their meshes.

`read_bait` reads a bait file with its meshes, `study` examines it:

>>> import meshlure
>>> found = meshlure.study(meshlure.read_bait("samples/minnow/minnow.toml"))  # doctest: +SKIP
>>> found.results["buoyancy"]["verdict"]  # doctest: +SKIP
"""

from __future__ import annotations

from typing import TYPE_CHECKING

from meshlure.version import VERSION as __version__

if TYPE_CHECKING:
    from os import PathLike

    from meshlure.bait.pieces import Bait
    from meshlure.results.study import Study

__all__ = ["__version__", "read_bait", "study"]


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


def study(bait: Bait) -> Study:
    """Return everything that one examination of a bait finds.

    Parameters
    ----------
    bait : Bait
        From `read_bait`.

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

    return study(bait)
