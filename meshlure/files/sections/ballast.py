"""[ballast]: what ballast may be made of, its shape, and where it may lie."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Final

from meshlure.files.defaults import BALLAST_CLEAR, BALLAST_COVER, BALLAST_MATERIALS
from meshlure.files.keys import Keys
from meshlure.files.sections.inserts import WIDEST_GAP

SHAPES: Final = ("rod", "ball")
POCKETS: Final = ("embedded", "from belly", "none")
_THICKEST = 50e-3
_LONGEST = 2.0


@dataclass(frozen=True)
class BallastSection:
    """What may be put into the body to weigh it down.

    Attributes
    ----------
    materials : tuple of str
        In the order of the maker's liking; whether the stock knows them is not asked here.
    shapes : tuple of str
        Of "rod" and "ball".
    cover : float, m
        Least body material left outside of the ballast.
    keep_clear : float, m
        Least distance to other inserts and to hardware.
    between : (float, float) or None, m
        Least and greatest distance behind the nose within which it must lie; None for the whole body.
    pocket : str
        "embedded", "from belly" or "none".
    fit : float, m
        Gap on every side between it and its pocket; 0 where it is cast in.
    glue : str or None
        Material that fills the gap; None leaves sealed air there.
    assumed : tuple of str
        Keys that were not stated and stand at their defaults.
    """

    materials: tuple[str, ...]
    shapes: tuple[str, ...]
    cover: float
    keep_clear: float
    between: tuple[float, float] | None
    pocket: str
    fit: float
    glue: str | None
    assumed: tuple[str, ...]


def read_ballast(keys: Keys) -> BallastSection:
    """Read [ballast]; an empty one has the usual choices."""
    section = BallastSection(
        keys.names("materials") or keys.assume("materials", BALLAST_MATERIALS),
        keys.choices("shapes", SHAPES) or keys.assume("shapes", SHAPES),
        keys.assumed_quantity("cover", "length", BALLAST_COVER, least=0.0, most=_THICKEST),
        keys.assumed_quantity("keep_clear", "length", BALLAST_CLEAR, least=0.0, most=_THICKEST),
        keys.pair("between", "length", '["20 mm", "75 mm"]', least=0.0, most=_LONGEST),
        keys.choice("pocket", POCKETS) or keys.assume("pocket", "embedded"),
        keys.quantity("fit", "length", least=0.0, most=WIDEST_GAP) or 0.0,
        keys.text("glue"),
        tuple(keys.assumed),
    )
    if len({name.casefold() for name in section.materials}) < len(section.materials):
        found = ", ".join(repr(name) for name in section.materials)
        keys.fault("materials", "the list says the same twice", found, "each material once", "remove one")
    if section.between is not None and section.between[0] == section.between[1]:
        found = f"twice {section.between[0] * 1e3:g} mm"
        keys.fault("between", "no ballast lies within a stretch without length", found, "", "put its ends apart")
    if section.glue is not None and section.fit == 0.0:
        step = "add fit = '0.2 mm' or remove glue"
        keys.fault("glue", "there is no gap for the glue", allowed="a fit above 0", next_step=step)
    keys.close()
    return section
