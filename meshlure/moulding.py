"""A mould from end to end: the bait studied, its mould designed, written, read back and accounted for."""

from __future__ import annotations

import time
from dataclasses import dataclass, replace
from pathlib import Path
from typing import Any, Final

from meshlure.bait.pieces import Bait
from meshlure.examine import study
from meshlure.files.sections.mould import MouldSection
from meshlure.files.threemf import write_3mf
from meshlure.making.mould.boards import FRAME, beside
from meshlure.making.mould.check import Checked, check
from meshlure.making.mould.design import Kind, Mould, Progress, design, resin_outside
from meshlure.making.mould.draftmap import DraftMap, draft_map
from meshlure.making.written import file_name, write_solid
from meshlure.results import mould as tree
from meshlure.results import pieces
from meshlure.results.pictures import half_maps, reliefs
from meshlure.results.study import Study
from meshlure.stock.cautions import cautions
from meshlure.stock.materials import Material, material

RUBBER: Final = "silicone mould rubber"

SPARE: Final = 0.15
"""Share of rubber that is mixed on top, for what stays in the cup: 10 to 15%. Common practice, no source."""

LIGHT: Final = 950.0
"""kg/m3. No casting resin is as light by itself: a lighter body of no named material holds microballoons."""

PACKAGE: Final = "mould.3mf"

_RESINS: Final = frozenset({"polyurethane", "epoxy", "polyester"})

_STEP: Final = "move what lies close to the parting plane or to another skin a little, or draw it in CAD"


@dataclass(frozen=True, eq=False)
class Moulded:
    """A mould with everything that is known of it.

    Attributes
    ----------
    bait : Bait
    study : Study
        The bait's, with ``mould`` in its results.
    design : Mould
    maps : tuple of DraftMap
        Per half, for drawing: draft by regions, and where rubber is held.
    quantities : tree.Quantities
    rubber : Material
    """

    bait: Bait
    study: Study
    design: Mould
    maps: tuple[DraftMap, ...]
    quantities: tree.Quantities
    rubber: Material


def mould(bait: Bait, kind: Kind = Kind.HALVES, tab: bool = False, progress: Progress = lambda _: None) -> Moulded:
    """Return the mould of a bait.

    Parameters
    ----------
    bait : Bait
        From `read_bait`.
    kind : Kind
    tab : bool
        Whether a master has a tab to hang it by.
    progress : callable
        Is told what is done next.

    Raises
    ------
    InputError
        Where a mass or a volume is left undefined, or something stated does not fit the body.
    """
    section = bait.plan.mould or MouldSection()
    start = time.perf_counter()
    where = f"{bait.plan.path.name}: mould" if bait.plan.path is not None else "mould"
    # First, for what a mould cannot be made of is told before the bait is weighed.
    made = design(bait, section, kind, tab, where, progress)
    rubber = material(RUBBER, "mould")
    assert bait.body.substance is not None
    outside = resin_outside(made) / made.plug.bench.scale.volume
    quantities = tree.Quantities(
        rubber=() if made.halves is None else made.halves.rubber,
        rubber_density=rubber.density,
        spare=SPARE,
        resin=made.plug.resin + outside,
        resin_outside=outside,
        resin_density=bait.body.substance.density,
    )
    progress("drawing the maps")
    maps = tuple(draft_map(made.plug.surface, one.name, section.draft_least) for one in made.study.halves)
    spent = time.perf_counter() - start
    progress("weighing the bait")
    found = study(bait)
    whole = Moulded(bait, found, made, maps, quantities, rubber)
    results = _results(whole, None, {})
    results["timings_s"] = results["timings_s"] | {"mould": spent}
    shown = reliefs([(piece.name, piece.solid.surface()) for piece in made.pieces if piece.name != FRAME])
    return replace(whole, study=replace(found, results=results, maps=half_maps(maps), reliefs=shown))


def write(made: Moulded, folder: Path, progress: Progress = lambda _: None) -> tuple[Study, list[str]]:
    """Write a mould's pieces as STL in mm and in one 3MF, read them back and hold them against what was designed.

    Parameters
    ----------
    made : Moulded
    folder : Path
        Exists.
    progress : callable
        Is told what is done next.

    Returns
    -------
    Study
        With what the files hold.
    list of str
        Names of the files.

    Raises
    ------
    InputError
        Where a piece comes back open, in several parts or with another volume, the halves do not add up to the plug,
        or a key does not mate.
    """
    start = time.perf_counter()
    progress("writing the pieces")
    used: set[str] = set()
    files = {piece.name: file_name(piece.name, used) for piece in made.design.pieces}
    written = {piece.name: write_solid(piece.solid, folder / files[piece.name], _STEP) for piece in made.design.pieces}
    progress("checking what was written")
    checked = check(made.design, written)
    write_3mf(folder / PACKAGE, beside(list(written.items())))
    names = [*files.values(), PACKAGE]
    results = dict(made.study.results)
    results["mould"] = tree.mould(made.design, made.quantities, checked, files)
    results["mould"]["files"] = sorted(names)
    spent = results["timings_s"]["mould"] + time.perf_counter() - start
    results["timings_s"] = results["timings_s"] | {"mould": spent}
    return replace(made.study, results=results), names


def _results(made: Moulded, checked: Checked | None, files: dict[str, str]) -> dict[str, Any]:
    """The bait's results with those of its mould."""
    results = dict(made.study.results)
    order = {"fault": 0, "warning": 1, "note": 2}
    found = [*results["findings"], *pieces.findings(made.design.findings)]
    results["findings"] = sorted(found, key=lambda finding: order[finding["level"]])
    rows = [*results["assumptions"], *tree.assumptions(made.design, made.rubber)]
    results["assumptions"] = sorted(rows, key=lambda row: not row["assumed"])
    results["cautions"] = _cautions(made, {row["trigger"] for row in results["cautions"]})
    results["mould"] = tree.mould(made.design, made.quantities, checked, files)
    return results


def _cautions(made: Moulded, triggers: set[str]) -> list[dict[str, str]]:
    """The bait's cautions with those of printing a master, of rubber and of the resin."""
    substance = made.bait.body.substance
    assert substance is not None
    asked = triggers | set(made.rubber.kinds) | {"photopolymer", "sanding"}
    if made.design.kind is not Kind.MASTER and not asked & _RESINS:
        # The body's resin has no name: the usual one is taken.
        asked |= {"polyurethane"}
    if substance.name is None and substance.density < LIGHT:
        asked |= {"fine dust"}
    return [{"trigger": caution.trigger, "text": caution.text} for caution in cautions(asked)]
