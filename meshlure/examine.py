"""One call that examines a whole bait: weight, buoyancy, postures, areas, form and drag."""

from __future__ import annotations

import time
import uuid
from collections.abc import Callable, Iterator, Mapping, Sequence
from contextlib import contextmanager
from typing import Any

import numpy as np

from meshlure import flying
from meshlure.bait.composition import Composition, Part, compose, weighed
from meshlure.bait.pieces import Bait
from meshlure.bait.refusals import refuse
from meshlure.errors import Fault, InputError
from meshlure.geometry.blocks import BlockIndex
from meshlure.geometry.moments import Moments, solid_moments
from meshlure.geometry.stations import stations
from meshlure.physics.areas import rose, silhouettes
from meshlure.physics.budget import budget
from meshlure.physics.buoyancy import Reserve, doubts, reserve
from meshlure.physics.drag import Drag
from meshlure.physics.passage import LAYERS, LEADS, Passage, passage
from meshlure.physics.repose import Repose, Vessel
from meshlure.physics.sinking import sinking, submerged
from meshlure.physics.stance import Stance
from meshlure.physics.tow import tow
from meshlure.posing import pose
from meshlure.results import account, pieces, shape, water
from meshlure.results import budget as budget_tree
from meshlure.results import passage as passage_tree
from meshlure.results import sinking as sinking_tree
from meshlure.results.changes import changes
from meshlure.results.readiness import readiness
from meshlure.results.scene import scene
from meshlure.results.study import Study
from meshlure.stock.waters import standard_air
from meshlure.version import VERSION
from meshlure.weighing import weigh

Tree = dict[str, Any]

PHASES = (
    "reading",
    "soundness",
    "weight",
    "posture",
    "budget",
    "areas",
    "measured",
    "drag",
    "flight",
    "sinking",
    "page",
    "mould",
)


TOLD: Mapping[str, str] = {
    "weight": "weighing",
    "posture": "finding postures",
    "budget": "adding up doubts",
    "areas": "measuring areas",
    "drag": "estimating drag",
    "flight": "flying it",
    "sinking": "sinking it",
}
"""What a caller is told as a phase begins."""


class Clock:
    """Seconds spent by phase, each told as it begins."""

    def __init__(self, spent: dict[str, float], tell: Callable[[str], None]) -> None:
        self.spent = dict.fromkeys(PHASES, 0.0) | spent
        self._tell = tell

    @contextmanager
    def phase(self, name: str) -> Iterator[None]:
        """Add the time of a block to a phase."""
        self._tell(TOLD.get(name, name))
        start = time.perf_counter()
        try:
            yield
        finally:
            self.spent[name] += time.perf_counter() - start


def study(bait: Bait, against: Bait | None = None, tell: Callable[[str], None] = lambda _: None) -> Study:
    """Return everything that one examination of a bait finds.

    Parameters
    ----------
    bait : Bait
        From `read_bait`.
    against : Bait, optional
        Another one, whose flight the distance is held against.
    tell : callable
        Told each phase in a word or two as it begins.

    Returns
    -------
    Study
        The tree of results.json and the outlines to draw.

    Raises
    ------
    InputError
        Where a mass or a volume is left undefined: every fault that leaves it so.
    """
    clock = Clock(bait.timings, tell)
    frame = bait.frame
    with clock.phase("weight"):
        composition = compose(bait)
        skin = composition.skin
        pieces_read = zip((bait.body, *bait.pieces), bait.files, strict=True)
        refuse(composition.findings, {piece.name: str(file.path) for piece, file in pieces_read})
        _lips(bait, composition)
        index = BlockIndex.build(skin.surface, skin.thickness)
    with clock.phase("posture"):
        vessel = Vessel(composition, index, bait.hardware, frame, bait.water.density)
        posed = pose(vessel, bait.plan.bait.suspends_within)
    with clock.phase("weight"):
        mass = composition.mass(posed.ends)
        hull = vessel.hull(posed.ends)
        parts = weighed(composition, posed.ends)
        held = _reserve(bait, composition, parts, mass, hull.volume)
    with clock.phase("budget"):
        main = posed.main
        up = main.rest.state.up if isinstance(main, Repose) else main.hang.up
        dry = posed.main.dry if isinstance(posed.main, Repose) else ()
        spent = budget(bait, parts, skin, held, Stance.of(vessel, posed.main), dry, composition.core)
    with clock.phase("areas"):
        outer = index if skin.outer is skin.surface else BlockIndex.build(skin.outer)
        seen = silhouettes(skin.outer, skin.outer_pairs, frame, bait.axes)
        turned = rose(skin.outer, skin.outer_pairs, frame)
        cuts = stations(outer, frame.nose, (frame.side, frame.back))
        tip = pieces.nose_tip(bait.body.surface, frame)
        rows = [
            (f"balls in {r.balls.chamber}", r.balls.diameter, r.places[posed.ends[r.balls.chamber]])
            for r in composition.rows
        ]
        views = shape.views(seen, shape.drawn_pieces(bait.pieces), frame, tip, rows)
    with clock.phase("measured"):
        copy, odd = weigh(bait, vessel, posed, held, tip)
    with clock.phase("drag"):
        way = passage(skin, bait.hardware, frame, cuts, outer)
        speed, pull = flying.launch(bait, mass.amount), flying.line_pull(bait, mass.amount)
        drags = _drags(bait, way, speed)
    with clock.phase("flight"):
        flight = flying.flight(
            bait, composition, way, seen, hull.volume, tip, None if against is None else flying.reference(against)
        )
    with clock.phase("sinking"):
        viscosity = bait.water.viscosity
        below = sinking(submerged(vessel, posed.ends, way, viscosity), way, viscosity, bait.plan.bait.suspends_within)
        pulls = tow(way, bait.plan.retrieve.speeds, bait.water.density, viscosity)
    nearer = changes(bait.plan, vessel, posed.ends, up, float(np.ptp(bait.body.surface.vertices @ frame.nose)), tip)
    tree: Tree = {
        "format": 1,
        "run": uuid.uuid4().hex,
        "tool": {"name": "meshlure", "version": VERSION},
        "name": bait.name,
        "inputs": pieces.inputs(bait),
        "files": [],
        "frame": pieces.frame(frame),
        "findings": pieces.findings([*bait.findings, *composition.findings, *posed.findings, *odd]),
        "size": pieces.size(bait.body.surface, frame),
        "facets": pieces.facets((bait.body, *bait.pieces), _mesh_volumes(bait)),
        "pieces": pieces.pieces(composition, posed.ends),
        "weight": pieces.weight(mass, frame, tip),
        "hardware": pieces.hardware(bait),
        "buoyancy": water.buoyancy(held, bait.water, hull.volume, hull.centre, mass.amount),
        "budget": budget_tree.budget(spent, held, bait.plan.limits, account.headline(posed.trees)["free"]),
        "smooth": water.smooth(composition.deficit, mass.amount, hull.volume, bait.water),
        "waters": water.waters(mass.amount, hull.volume, bait.plan.bait.suspends_within),
        "postures": posed.trees,
        "changes": nearer,
        "righting": posed.righting,
        "balls": [row | {"reserve_g": held.reserve * 1e3} for row in posed.balls],
        "areas": shape.areas(seen),
        "rose": shape.rose(turned),
        "stations": shape.stations(cuts, tip),
        "skin_mm2": skin.painted * 1e6,
        "form": passage_tree.form(way, skin.outer, outer.volume, _trailing(drags)),
        "drag": passage_tree.drag(drags),
        "flight": flight,
        "sinking": sinking_tree.sinking(below, pulls),
        "measured": copy,
        **account.stated(bait, held, posed.trees, speed, pull),
        "assumptions": account.assumptions(bait, speed, pull),
        "cautions": account.cautions(bait),
        "timings_s": clock.spent,
    }
    tree["readiness"] = readiness(tree, bait.plan.target)
    return Study(tree, views, scene=scene(bait, composition.rows, posed.ends, account.headline(posed.trees)))


def _lips(bait: Bait, composition: Composition) -> None:
    """Refuse lips that show nothing outside the body."""
    hidden = [piece for piece in bait.pieces if piece.lip and piece.name not in composition.skin.lips]
    if hidden:
        raise InputError(
            [
                Fault(
                    what="the lip has no area outside the body",
                    where=f"insert '{piece.name}'",
                    found="all of it lies inside",
                    allowed="a part that stands out into the water",
                    next_step="check its place, or remove lip = true",
                )
                for piece in hidden
            ]
        )


def _reserve(bait: Bait, composition: Composition, parts: Sequence[Part], mass: Moments, displaced: float) -> Reserve:
    density = bait.water.density
    facets = composition.deficit.reserve(density)
    doubted = doubts(parts, facets, bait.hardware, bait.coat, composition.skin.painted, density)
    return reserve(mass.amount, displaced, density, bait.plan.bait.suspends_within, doubted)


def _mesh_volumes(bait: Bait) -> dict[str, float]:
    """Volume that each piece's mesh encloses, its cavities left out."""
    return {
        piece.name: solid_moments(piece.surface).amount - sum(solid_moments(c).amount for c in piece.cavities)
        for piece in (bait.body, *bait.pieces)
    }


def _drags(bait: Bait, way: Passage, speed: float) -> list[tuple[str, str, bool, Drag]]:
    air = standard_air()
    flows = [("air", speed, air.density, air.viscosity)]
    flows += [("water", s, bait.water.density, bait.water.viscosity) for s in bait.plan.retrieve.speeds]
    return [
        (fluid, leads, layer is None, way.drag(leads, v, density, viscosity, layer))
        for fluid, v, density, viscosity in flows
        for leads in LEADS
        for layer in LAYERS
    ]


def _trailing(drags: list[tuple[str, str, bool, Drag]]) -> dict[str, float]:
    """Trailing bluffness of the headline at the first retrieve, by the end that leads."""
    return {
        leads: next(d.trailing_bluffness for fluid, end, head, d in drags if fluid == "water" and end == leads and head)
        for leads in LEADS
    }
