"""Baits held against each other: each studied under the same conditions, the differences from the first told."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass, replace
from typing import Any

import numpy as np

from meshlure.bait.loading import load
from meshlure.bait.pieces import Bait
from meshlure.errors import Fault, InputError
from meshlure.examine import study
from meshlure.files.baitfile import BaitFile
from meshlure.files.source import LARGEST
from meshlure.geometry.surface import Floats
from meshlure.results.comparison import MOST, comparison
from meshlure.results.study import Study

Tree = dict[str, Any]

NOSE_SHARE = 0.005
"""Share of the length from the nose tip within which the middle of the tip is taken."""


@dataclass(frozen=True, eq=False)
class Comparison:
    """Baits beside each other.

    Attributes
    ----------
    study : Study
        That of the first, with the comparison in its results.
    studies : tuple of Study
        Of all, the first among them.
    tips : tuple of (3,) arrays, mm
        The middle of each body's nose tip, in its own mesh coordinates.
    """

    study: Study
    studies: tuple[Study, ...]
    tips: tuple[Floats, ...]


def compare(
    plans: Sequence[BaitFile],
    as_stated: bool = False,
    tell: Callable[[str], None] = lambda _: None,
    largest: int = LARGEST,
) -> Comparison:
    """Return baits beside each other.

    Parameters
    ----------
    plans : sequence of BaitFile
        Two to eight; the others are held against the first.
    as_stated : bool
        Whether each stays in its own water, throw and retrieve; else all are taken in those of the first, for nothing
        else can be told from a difference.
    tell : callable
        Told each phase.
    largest : int
        Bytes beyond which a mesh is not read.

    Raises
    ------
    InputError
        With every fault of how many there are, or of the bait that has them.
    """
    if not 2 <= len(plans) <= MOST:
        raise InputError(
            Fault("baits are compared by twos and more", "", f"{len(plans)}", f"2 to {MOST}", "name more, or fewer")
        )
    first = plans[0]
    taken = [
        plan if as_stated else replace(plan, water=first.water, cast=first.cast, retrieve=first.retrieve)
        for plan in plans
    ]
    studies, tips = [], []
    for number, plan in enumerate(taken, 1):

        def said(phase: str, number: int = number, name: str = plan.bait.name) -> None:
            tell(f"{number} of {len(taken)}, {name}: {phase}")

        said("reading the meshes")
        bait = load(plan, largest=largest)
        studies.append(study(bait, tell=said))
        tips.append(_tip(bait))
    trees = [dict(one.results) for one in studies]
    files = [str(plan.path or plan.bait.name) for plan in plans]
    tree = trees[0] | {"comparison": comparison(trees, files, _conditions(plans, trees[0], as_stated))}
    return Comparison(replace(studies[0], results=tree), tuple(studies), tuple(tips))


def _tip(bait: Bait) -> Floats:
    """The middle of the nose tip, mm: of what lies within a little of the foremost."""
    vertices, frame = bait.body.surface.vertices, bait.frame
    ahead = vertices @ frame.nose
    near = vertices[ahead >= ahead.max() - NOSE_SHARE * np.ptp(ahead)]
    across = [(np.min(near @ way) + np.max(near @ way)) / 2 * way for way in (frame.back, frame.side)]
    return np.asarray((ahead.max() * frame.nose + across[0] + across[1]) * 1e3)


def _conditions(plans: Sequence[BaitFile], first: Tree, as_stated: bool) -> Tree:
    """What all were taken in, and whose bait file says otherwise."""
    others = []
    for plan in plans[1:]:
        differs = [
            what
            for what, own, taken in (
                ("water", plan.water, plans[0].water),
                ("throw", plan.cast, plans[0].cast),
                ("retrieve", plan.retrieve, plans[0].retrieve),
            )
            if replace(own, assumed=()) != replace(taken, assumed=())
        ]
        others.append({"name": plan.bait.name, "differs": differs})
    water = first["buoyancy"]["water"]
    return {
        "as_stated": as_stated,
        "water": {key: water[key] for key in ("density_kg_m3", "temperature_c", "salinity_g_kg")},
        "cast_speed_m_s": first["cast"]["speed_m_s"],
        "others": others,
    }
