"""Meshes of a bait mended on request, every step told as a finding of its piece."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from dataclasses import replace

from meshlure.files.reading import MeshFile
from meshlure.findings import Finding, Level
from meshlure.geometry.mending.mend import Done, Mended, mend
from meshlure.geometry.mending.steps import Wishes


def mended(files: Mapping[str, MeshFile], wishes: Wishes) -> dict[str, MeshFile]:
    """Return the meshes of a bait as mending leaves them; the files on disk stay as they are.

    Parameters
    ----------
    files : mapping of MeshFile
        By piece.
    wishes : Wishes
    """
    return {piece: _mended(file, piece, wishes) for piece, file in files.items()}


def _mended(file: MeshFile, piece: str, wishes: Wishes) -> MeshFile:
    made = mend(file.surface, wishes, piece)
    if not made.changed:
        return file
    return replace(
        file,
        surface=made.after.surface,
        findings=(*file.findings, *_told(made, piece, str(file.path))),
        parts=(),
    )


def _told(made: Mended, piece: str, path: str) -> Iterator[Finding]:
    for done in made.done:
        step = done.step
        moved = f", no place moved more than {step.moved * 1e3:.2g} mm" if step.moved else ""
        yield Finding(
            f"mended-{step.code}",
            Level.WARNING,
            f"mended as asked: {step.did}; {_change(done)}{moved}",
            piece,
            step.count,
            step.where,
            f"The file {path} is as it was: mend it in CAD, or write the mended mesh with meshlure inspect --mend.",
        )


def _change(done: Done) -> str:
    if done.after is None:
        return "it encloses no volume yet"
    if done.before is None:
        return f"it encloses {done.after * 1e9:.6g} mm3 now"
    return f"its volume went from {done.before * 1e9:.6g} to {done.after * 1e9:.6g} mm3"
