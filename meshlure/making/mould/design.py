"""A mould designed from a bait: plug, parting, runners, keys and the pieces to print."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass, replace
from enum import StrEnum
from typing import Final

import numpy as np

from meshlure.bait.pieces import Bait
from meshlure.errors import Fault, InputError
from meshlure.files.sections.mould import MouldSection
from meshlure.findings import Finding, Level
from meshlure.geometry.solids import Solid
from meshlure.geometry.surface import Surface
from meshlure.making.mould.bed import bed_findings
from meshlure.making.mould.bench import FLIP, Bench
from meshlure.making.mould.boards import Halves, Printed
from meshlure.making.mould.box import Box
from meshlure.making.mould.fittings import Holding
from meshlure.making.mould.flat import LEVEL, flat_back, footed
from meshlure.making.mould.floor import Floor
from meshlure.making.mould.gate import lay_sprue
from meshlure.making.mould.halves import HALVES
from meshlure.making.mould.keys import BOTTOM, Keys, lay_keys
from meshlure.making.mould.lathe import block
from meshlure.making.mould.master import master
from meshlure.making.mould.pins import Pins, lay_pins
from meshlure.making.mould.plug import Plug, plug
from meshlure.making.mould.runners import Runner
from meshlure.making.mould.shadow import Shadow
from meshlure.making.mould.study import PullStudy, pull_study
from meshlure.making.mould.vents import Vents, high_points, lay_vents

_COLUMNS: Final = 500
"""Columns along the plug's greatest extent, to find the parting height by."""

_WIDENED: Final = np.arange(0.0, 25e-3, 2e-3)
"""m by which the box is widened, the first that leaves room for the keys."""

_FOR_CORNERS: Final = 4
"""Widenings that are tried for keys near the corners, before keys elsewhere are."""

LEAST_BOARD: Final = 3e-3
"""m. A thinner board has no depth for keys."""

Progress = Callable[[str], None]


class Kind(StrEnum):
    """What is made."""

    HALVES = "two halves"
    ONE_PIECE = "one piece"
    MASTER = "master"


@dataclass(frozen=True, eq=False)
class Mould:
    """A mould.

    Attributes
    ----------
    kind : Kind
    section : MouldSection
    plug : Plug
        Its bench has the parting plane.
    study : PullStudy
    sprue : Runner or None
    sprue_name : str or None
        The place that it is at.
    vents : tuple of Runner
    pins : Pins
    halves : Halves or None
        None for a master.
    pieces : tuple of Printed
        To print.
    findings : tuple of Finding
    """

    kind: Kind
    section: MouldSection
    plug: Plug
    study: PullStudy
    sprue: Runner | None
    sprue_name: str | None
    vents: tuple[Runner, ...]
    pins: Pins
    halves: Halves | None
    pieces: tuple[Printed, ...]
    findings: tuple[Finding, ...]

    @property
    def runners(self) -> tuple[Runner, ...]:
        """What the resin fills outside the plug: sprue and vents."""
        return self.vents if self.sprue is None else (self.sprue, *self.vents)


NO_PINS: Final = Pins((), (), ())


def design(
    bait: Bait, section: MouldSection, kind: Kind, tab: bool, where: str, progress: Progress, lean: bool = True
) -> Mould:
    """Return a bait's mould.

    Parameters
    ----------
    bait : Bait
    section : MouldSection
    kind : Kind
    tab : bool
        Whether a master has a tab to hang it by.
    where : str
        The mould section's name in messages.
    progress : callable
        Is told what is done next.
    lean : bool
        Whether to look for a pull near the one asked for that would trap less.

    Raises
    ------
    InputError
        Where something stated does not fit the body.
    """
    progress("building the plug")
    bench = Bench.of(section, bait.frame)
    made = plug(bait, bench)
    if kind is Kind.ONE_PIECE:
        made = _on_its_back(bait, made, where)
    else:
        shadow = Shadow.of(made.surface, float(np.ptp(made.whole.bounds, axis=0).max()) / _COLUMNS)
        middle = float(made.body.bounds[:, 2].mean())
        made = made.lowered(shadow.best_height(middle, made.whole.volume))
    progress("studying how it parts")
    findings = [*bench.scale.findings(), *_hollow_findings(bait, made), *_loose_findings(made, kind)]
    if kind is Kind.ONE_PIECE:
        study = pull_study(made.lowered(LEVEL), section.draft_least, HALVES[:1], lean=False)
    else:
        study = pull_study(made, section.draft_least, lean=lean)
    findings += study.findings
    blank = Mould(kind, section, made, study, None, None, (), NO_PINS, None, (), ())
    if kind is Kind.MASTER:
        lone = master(made, section.tab if tab else None, bait.frame, where)
        done = replace(blank, pieces=(lone,))
    elif kind is Kind.ONE_PIECE:
        done = _open_mould(blank)
    else:
        done = _two_halves(blank, bait, where, progress)
    findings += done.findings
    if section.bed is not None:
        findings += bed_findings(done.pieces, section.bed)
    return replace(done, findings=tuple(findings))


def _on_its_back(bait: Bait, made: Plug, where: str) -> Plug:
    """The plug on its flat back, turned over where that looks along the pull."""
    covered = Shadow.of(made.body.surface(), float(np.ptp(made.body.bounds, axis=0).max()) / _COLUMNS)
    area = len(covered.cell) * covered.pitch**2
    flat = flat_back(made.body.surface(), area, f"{where}.pull")
    if flat.way < 0:
        made = plug(bait, replace(made.bench, turn=FLIP @ made.bench.turn))
    return made.lowered(flat.way * flat.height)


def _open_mould(blank: Mould) -> Mould:
    section, made = blank.section, blank.plug
    sink = section.board / 2
    foot = Solid.of(footed(made.body.surface(), sink))
    proud = made.standing(foot)
    box = Box.round_about(made.whole.bounds, section.wall)
    halves = Halves(proud, _no_keys(), box, section.board, section.wall, ("board",))
    pieces = halves.printed()
    return replace(blank, halves=halves, pieces=pieces, findings=tuple(_loop_findings(pieces, made, halves)))


def _two_halves(blank: Mould, bait: Bait, where: str, progress: Progress) -> Mould:
    section, made = blank.section, blank.plug
    progress("laying out sprue, vents and keys")
    if section.keys and section.board < LEAST_BOARD:
        raise InputError(
            Fault(
                what="the board is too thin for keys",
                where=f"{where}.board",
                found=f"{section.board * 1e3:g} mm",
                allowed=f"{LEAST_BOARD * 1e3:g} mm or more, of which {BOTTOM * 1e3:g} mm stay under a dimple",
                next_step="make it thicker, or write keys = 0",
            )
        )
    laid = _laid_out(made, bait, section, where)
    progress("building the boards")
    prism = _prism(laid.box, made)
    runners = [runner.solid.met(prism) for runner in (laid.sprue, *laid.vents.runners, *laid.pins.runners)]
    halves = Halves(
        made.whole.joined(*runners), laid.keys, laid.box, section.board, section.wall, ("board A", "board B")
    )
    pieces = halves.printed()
    findings = [*laid.findings, *_loop_findings(pieces, made, halves)]
    return replace(
        blank,
        sprue=laid.sprue,
        sprue_name=laid.sprue_name,
        vents=laid.vents.runners,
        pins=laid.pins,
        halves=halves,
        pieces=pieces,
        findings=tuple(findings),
    )


@dataclass(frozen=True, eq=False)
class _Laid:
    box: Box
    sprue: Runner
    sprue_name: str
    vents: Vents
    pins: Pins
    keys: Keys
    findings: tuple[Finding, ...]


def _laid_out(made: Plug, bait: Bait, section: MouldSection, where: str) -> _Laid:
    """Runners and keys in the smallest box that has room for them."""
    floor = Floor.of(made, bait.frame)
    high = None
    for spread, widened in [(True, more) for more in _WIDENED[:_FOR_CORNERS]] + [(False, more) for more in _WIDENED]:
        box = Box.round_about(made.whole.bounds, section.wall, float(widened))
        spot, sprue, said = lay_sprue(floor, section, box, where)
        high = high_points(floor, sprue) if high is None else high
        vents = lay_vents(floor, section, box, sprue, high, where)
        pins = lay_pins(floor, box, (sprue, *vents.runners))
        runners = (sprue, *vents.runners, *pins.runners)
        keys = lay_keys(floor, box, runners, section.keys, section.board, spread)
        if keys is not None:
            more = [_widened(float(widened), section)] if widened else []
            findings = (*said, *vents.findings, *pins.findings, *more)
            return _Laid(box, sprue, spot.name, vents, pins, keys, findings)
    raise InputError(
        Fault(
            what="the keys find no room round the part",
            where=f"{where}.keys",
            found=f"{section.keys} keys, even with {(section.wall + _WIDENED[-1]) * 1e3:.0f} mm of rubber round it",
            allowed="as many as fit, a few millimetres from cavity, sprue, vents and box",
            next_step="ask for fewer keys or a thicker wall",
        )
    )


def _prism(box: Box, made: Plug) -> Solid:
    low, high = made.whole.bounds[:, 2]
    reach = float(high - low) + 0.1
    return Solid.of(block((*box.low, low - reach), (*box.high, high + reach)))


def _no_keys() -> Keys:
    return Keys(np.empty((0, 2)), 0.0, 0.0)


def _widened(more: float, section: MouldSection) -> Finding:
    return Finding(
        code="box-widened",
        level=Level.NOTE,
        message=f"the box leaves {(section.wall + more) * 1e3:.0f} mm round the part instead of "
        f"{section.wall * 1e3:g} mm, to have room for {section.keys} keys",
        advice="fewer keys need less rubber",
    )


def _hollow_findings(bait: Bait, made: Plug) -> list[Finding]:
    names = [fitting.piece.name for fitting in made.fittings if fitting.holding is Holding.HOLLOW]
    found = [
        Finding(
            code="mould-hollow",
            level=Level.WARNING,
            piece=name,
            message=f"'{name}' is a closed hollow, which one pour cannot form; its room is left out of the resin",
            advice="hold a closed shell of it in the mould, such as a plugged tube, or cast two halves and join them",
        )
        for name in names
    ]
    if bait.body.cavities:
        found.append(
            Finding(
                code="mould-hollow",
                level=Level.WARNING,
                piece=bait.body.name,
                message="the body's mesh has closed hollows, which one pour cannot form; their room is left out of the "
                "resin",
                count=len(bait.body.cavities),
                advice="draw the body solid if it is to be cast in one pour",
            )
        )
    return found


def _loose_findings(made: Plug, kind: Kind) -> list[Finding]:
    """Tell of what lies inside without anything of the mould that holds it; an open mould has no seats for pins."""
    loose = {Holding.EMBEDDED, Holding.PINNED} if kind is Kind.ONE_PIECE else {Holding.EMBEDDED}
    held = "it hangs on a wire, or is cast into a second pour"
    if kind is not Kind.ONE_PIECE:
        held = f"pinned = true gives it seats for pins; or {held}"
    return [
        Finding(
            code="mould-loose",
            level=Level.NOTE,
            piece=fitting.piece.name,
            message=f"'{fitting.piece.name}' lies inside, and nothing of the mould holds it in its place",
            advice=held,
        )
        for fitting in made.fittings
        if fitting.holding in loose and kind is not Kind.MASTER
    ]


def _loop_findings(pieces: Sequence[Printed], made: Plug, halves: Halves) -> list[Finding]:
    """Warn of bridges: openings across the pull through which the rubber closes on itself."""
    found = []
    for piece, way in zip(pieces[: len(halves.names)], (1.0, -1.0), strict=False):
        count = piece.solid.genus
        if count <= 0:
            continue
        names = [seat.piece.name for seat in made.seats if _bridges(seat.shape, way)]
        told = f" of {' and '.join(repr(name) for name in names)}" if names else ""
        found.append(
            Finding(
                code="rubber-loop",
                level=Level.WARNING,
                piece=names[0] if len(names) == 1 else None,
                message=f"on {piece.name} the rubber closes through {count} opening{'' if count == 1 else 's'}{told} "
                "and does not come off without being cut there",
                count=count,
                advice="turn the eye into the parting plane, fill its opening with clay, or slit the rubber there",
            )
        )
    return found


def _bridges(seat: Solid, way: float) -> bool:
    """Whether a seat arches over the parting plane."""
    from meshlure.making.mould.boards import UP

    low, high = seat.bounds
    depth = float(high[2] - low[2]) + 1e-3
    kept = seat.split(way * UP, -depth / 10)[0]
    ends = sorted((0.0, -way * depth))
    slab = Solid.of(block((*(low[:2] - 1e-3), ends[0]), (*(high[:2] + 1e-3), ends[1])))
    return slab.joined(kept).genus > 0


def resin_outside(mould: Mould) -> float:
    """Volume of sprue and vents, m3, in the master's size: what of them lies in the box and outside the plug."""
    if mould.halves is None or not mould.runners:
        return 0.0
    prism = _prism(mould.halves.box, mould.plug)
    solids = [runner.solid.met(prism) for runner in mould.runners]
    return solids[0].joined(*solids[1:]).less(mould.plug.whole).volume


def surfaces(mould: Mould) -> list[tuple[str, Surface]]:
    """Return the pieces to print with their names, each in its file's coordinates."""
    return [(piece.name, piece.solid.surface()) for piece in mould.pieces]
