"""[[insert]]: ballast, wire, lips, eyes and hollow spaces, each a mesh of its own."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from pathlib import Path

from meshlure.files.keys import Keys
from meshlure.files.nearness import did_you_mean
from meshlure.files.sections.body import SPACES
from meshlure.files.sections.substance import Substance, read_substance

WIDEST_GAP = 5e-3
"""m. A pocket with a gap beyond this around its insert is no fit."""


@dataclass(frozen=True)
class InsertSection:
    """One insert; either its substance or ``void`` is there, the other is None.

    Attributes
    ----------
    name : str
    mesh : Path
        Joined to the bait file's folder.
    substance : Substance or None
    void : str or None
        A hollow space: "sealed" (it displaces, and weighs as air) or "flooded".
    cavities : str
        What the mesh's inner shells are: "sealed" or "flooded".
    replaces : tuple of str
        Earlier inserts that this one may take space from.
    lip : bool
        It is a diving lip: in the areas, but no part of the form that drag is estimated from.
    free : bool
        Balancing may move it.
    pinned : bool
        It has a seat in the mould.
    fit : float, m
        Gap on every side between it and its pocket.
    glue : str or None
        Material that fills the gap; None leaves sealed air there.
    coated : bool
        The coat goes over it where it shows, as over the body: a plug, set in before painting.
    """

    name: str
    mesh: Path
    substance: Substance | None = None
    void: str | None = None
    cavities: str = "sealed"
    replaces: tuple[str, ...] = ()
    lip: bool = False
    free: bool = False
    pinned: bool = False
    fit: float = 0.0
    glue: str | None = None
    coated: bool = False


def read_insert(keys: Keys, folder: Path, earlier: Sequence[str], later: Sequence[str]) -> InsertSection:
    """Read one [[insert]].

    Parameters
    ----------
    keys : Keys
    folder : Path
        The bait file's.
    earlier, later : sequence of str
        Names of the inserts before and after it.
    """
    name = keys.asked_text("name", "belly weight")
    substance = read_substance(keys, "void")
    void = keys.choice("void", SPACES)
    fit = keys.quantity("fit", "length", least=0.0, most=WIDEST_GAP)
    section = InsertSection(
        name,
        folder / keys.asked_text("mesh", "belly.stl"),
        substance,
        void,
        keys.choice("cavities", SPACES) or "sealed",
        keys.names("replaces"),
        keys.flag("lip"),
        keys.flag("free"),
        keys.flag("pinned"),
        fit or 0.0,
        keys.text("glue"),
        keys.flag("coated"),
    )
    _check_replaced(keys, section, earlier, later)
    if section.glue is not None and fit in {None, 0.0}:
        keys.fault(
            "glue",
            "there is no gap for the glue",
            allowed="a fit above 0",
            next_step="add fit = '0.2 mm' or remove glue",
        )
    if void is not None and section.lip:
        keys.fault("lip", "a hollow space is no lip", f"void = {void!r}", next_step="remove one of the two keys")
    if void is not None and section.coated:
        keys.fault("coated", "a hollow space is not coated", f"void = {void!r}", next_step="remove one of the two keys")
    keys.close()
    return section


def _check_replaced(keys: Keys, section: InsertSection, earlier: Sequence[str], later: Sequence[str]) -> None:
    for replaced in section.replaces:
        if replaced in earlier:
            continue
        allowed = ", ".join(repr(name) for name in earlier) or "no insert stands before this one"
        if replaced == section.name:
            what, step = "an insert cannot replace itself", "name an insert before this one"
        elif replaced in later:
            what, step = "an insert can only replace one before it", f"move this insert below {replaced!r}"
        elif replaced == "body":
            what, step = "every insert replaces the body, without being told to", "remove 'body' from the list"
        else:
            what, step = "no insert of this name", did_you_mean(replaced, earlier, "name an insert before this one")
        keys.fault("replaces", what, repr(replaced), allowed, step)
