"""All meshes that a bait file names, or every fault in them."""

from __future__ import annotations

from collections.abc import Mapping
from types import MappingProxyType

from meshlure.errors import Fault, InputError
from meshlure.files.baitfile import BaitFile
from meshlure.files.reading import MeshFile, read_mesh
from meshlure.files.source import LARGEST


def read_meshes(bait: BaitFile, largest: int = LARGEST) -> Mapping[str, MeshFile]:
    """Meshes of a bait by piece, the body's first, then the inserts' in the bait file's order.

    Parameters
    ----------
    bait : BaitFile
    largest : int
        Bytes beyond which a file is not read.

    Raises
    ------
    InputError
        With the faults of every mesh that cannot be read, not only the first one's.
    """
    read: dict[str, MeshFile] = {}
    faults: list[Fault] = []
    for mesh in bait.meshes():
        try:
            read[mesh.piece] = read_mesh(mesh.path, bait.bait.length_unit, mesh.piece, mesh.where, largest)
        except InputError as error:
            faults.extend(error.faults)
    if faults:
        raise InputError(faults)
    return MappingProxyType(read)
