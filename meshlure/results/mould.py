"""The result tree's account of a mould: scale, parting, runners and keys, the pieces to print, rubber and resin."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Any

import numpy as np

from meshlure.geometry.surface import Floats
from meshlure.making.mould.bench import Bench
from meshlure.making.mould.check import Checked
from meshlure.making.mould.design import Mould
from meshlure.making.mould.draft import RANGES
from meshlure.making.mould.keys import CLEARANCE
from meshlure.making.mould.runners import Runner
from meshlure.making.mould.study import Half
from meshlure.results.numbers import GRAM, MM, MM2, MM3, plain
from meshlure.stock.materials import Material

Tree = dict[str, Any]

CM3 = 1e6


@dataclass(frozen=True)
class Quantities:
    """What is weighed out for a mould and for one casting.

    Attributes
    ----------
    rubber : tuple of float, m3
        Over each board, without spare.
    rubber_density : float, kg/m3
    spare : float
        Share that is mixed on top of it.
    resin : float, m3
        Of one casting with sprue and vents, as it is cast.
    resin_outside : float, m3
        Sprue and vents of it.
    resin_density : float, kg/m3
    """

    rubber: tuple[float, ...]
    rubber_density: float
    spare: float
    resin: float
    resin_outside: float
    resin_density: float


def mould(made: Mould, quantities: Quantities, checked: Checked | None, files: Mapping[str, str]) -> Tree:
    """Return a mould as results.json has it.

    Parameters
    ----------
    made : Mould
    quantities : Quantities
    checked : Checked or None
        What the files hold; None where none were written.
    files : mapping of str
        By piece: its file.

    Notes
    -----
    Every place is one of the drawing: it is divided by the scale and turned back from the bench.
    """
    bench, scale = made.plug.bench, made.plug.bench.scale
    form = made.plug.form.volume
    return {
        "kind": str(made.kind),
        "scale": scale.linear,
        "scale_axes": plain(scale.part),
        "seat_scale_axes": plain(scale.seat),
        "volume_drawn_mm3": form / scale.volume * MM3,
        "volume_moulded_mm3": form * MM3,
        "volume_cast_mm3": form * _shrunk(made) * MM3,
        **_parting(made),
        "fittings": [
            {
                "piece": fitting.piece.name,
                "holding": str(fitting.holding),
                "clearance_mm": fitting.clearance * MM,
            }
            for fitting in made.plug.fittings
        ],
        "sprue": None if made.sprue is None else {"place": made.sprue_name, **_runner(made.sprue, bench)},
        "vents": [_runner(vent, bench) for vent in made.vents],
        "pins": [
            {"piece": piece, **_runner(pin, bench)}
            for piece, pin in zip(made.pins.held, made.pins.runners, strict=True)
        ],
        "keys": _keys(made, checked),
        "box_mm": None if made.halves is None else plain(made.halves.box.size, MM),
        "fill_mm": [] if made.halves is None else plain(made.halves.fill, MM),
        "rubber_cm3": plain(quantities.rubber, CM3),
        "rubber_spare": quantities.spare,
        "rubber_g": plain(quantities.rubber, quantities.rubber_density * (1 + quantities.spare) * GRAM),
        "resin_cm3": quantities.resin * CM3,
        "resin_outside_cm3": quantities.resin_outside * CM3,
        "resin_g": quantities.resin * quantities.resin_density * GRAM,
        "pieces": [
            {
                "name": piece.name,
                "file": files.get(piece.name),
                "size_mm": plain(piece.size, MM),
                "volume_mm3": piece.solid.volume * MM3,
                "turn": plain(piece.turn @ bench.turn),
                "shift_mm": plain(piece.shift - piece.turn @ np.array([0.0, 0.0, bench.height]), MM),
            }
            for piece in made.pieces
        ],
        "halves_mm3": [] if checked is None else plain(checked.halves, MM3),
        "files": sorted(set(files.values())),
    }


def _shrunk(made: Mould) -> float:
    """Volume of a casting over that of the master."""
    section = made.section
    kept = [
        float(np.prod(1 - np.array(share)))
        for share in (section.shrink_print, section.shrink_silicone, section.shrink_resin)
    ]
    return float(np.prod(kept))


def _parting(made: Mould) -> Tree:
    study, bench = made.study, made.plug.bench
    deepest = max(
        ((one.undercuts[0].depth, one.undercuts[0].at) for one in study.halves if one.undercuts),
        key=lambda each: each[0],
        default=None,
    )
    pull, offset = _plane(bench)
    best = study.best
    way = bench.turn.T @ best.direction
    lean = float(np.degrees(np.arccos(np.clip(best.direction[2], -1.0, 1.0)))) + 0.0
    return {
        "pull": plain(pull),
        "plane_mm": offset * MM,
        "parting_mm": [plain(bench.drawn(ring), MM) for ring in study.rings],
        "draft_least_deg": float(np.degrees(made.section.draft_least)) + 0.0,
        "draft": [
            {"half": one.name, "range": name, "area_mm2": one.draft.area_by_range[name] * MM2}
            for one in study.halves
            for name in RANGES
        ],
        "undercut_mm2": sum(one.draft.undercut for one in study.halves) * MM2,
        "undercut_depth_mm": 0.0 if deepest is None else deepest[0] * MM,
        "undercut_at_mm": None if deepest is None else plain(bench.drawn(deepest[1]), MM),
        "undercuts": [row for one in study.halves for row in _undercuts(one, bench)],
        "trapped_mm3": study.trapped * MM3,
        "trapped_error_mm3": sum(one.draft.trapped_error for one in study.halves) * MM3,
        "best_pull": {
            "direction": plain(way),
            "lean_deg": lean,
            "plane_mm": (best.height + float(best.direction[2]) * bench.height) / _stretch(way, bench) * MM,
            "trapped_mm3": best.trapped * MM3,
            "pitch_mm": best.pitch * MM,
        },
    }


def _plane(bench: Bench) -> tuple[Floats, float]:
    """Return the pull, and the parting plane's offset along it in the drawing, m."""
    return bench.pull, bench.height / _stretch(bench.pull, bench)


def _stretch(way: Floats, bench: Bench) -> float:
    """Length in the master of a unit along a direction of the drawing.

    Where the axes' scales differ, a plane that is square to a direction in the master is so in the drawing to within
    their difference.
    """
    return float(np.linalg.norm(way * bench.scale.part))


def _undercuts(one: Half, bench: Bench) -> list[Tree]:
    return [
        {
            "half": one.name,
            "piece": piece,
            "area_mm2": under.area * MM2,
            "depth_mm": under.depth * MM,
            "at_mm": plain(bench.drawn(under.at), MM),
        }
        for under, piece in zip(one.undercuts, one.pieces, strict=True)
    ]


def _runner(runner: Runner, bench: Bench) -> Tree:
    return {
        "at_mm": plain(bench.drawn(np.append(runner.at, 0.0)), MM),
        "direction": plain(bench.turn.T @ np.append(runner.direction, 0.0)),
        "diameter_mm": runner.diameter * MM,
        "gate_mm": runner.gate * MM,
        "length_mm": runner.length * MM,
    }


def _keys(made: Mould, checked: Checked | None) -> list[Tree]:
    if made.halves is None:
        return []
    keys, bench = made.halves.keys, made.plug.bench
    return [
        {
            "at_mm": plain(bench.drawn(np.append(place, 0.0)), MM),
            "diameter_mm": keys.diameter * MM,
            "height_mm": keys.height * MM,
            "clearance_mm": CLEARANCE * MM,
            "gap_mm": None if checked is None else checked.key_gaps[number] * MM,
        }
        for number, place in enumerate(keys.places)
    ]


_STAGE: Tree = {
    "what": "stage of the mesh",
    "value": "as drawn, not scaled for shrinkage yet",
    "source": "no mesh says it: where it was scaled in CAD, state shrinkages of 0 %",
    "assumed": True,
}


def assumptions(made: Mould, rubber: Material) -> list[Tree]:
    """Return what a mould's numbers rest on that nobody stated.

    Parameters
    ----------
    made : Mould
    rubber : Material
    """
    section = made.section
    usual = "common practice, no source"
    told = {
        "shrink": ("shrinkage of print, rubber and resin", "none", "nothing stated"),
        "pull": ("pull of the mould", str(section.pull), usual),
        "wall": ("rubber around the part", f"{section.wall * MM:g} mm", usual),
        "keys": ("keys of the mould", str(section.keys), usual),
        "sprue": ("sprue", f"{section.sprue.diameter * MM:g} mm at the {made.sprue_name}", usual),
        "vents": ("vents", "at every high point of the cavity", usual),
        "board": ("boards of the mould", f"{section.board * MM:g} mm", usual),
    }
    rows = [] if (made.plug.bench.scale.part == 1.0).all() else [_STAGE]
    left_out = {"sprue", "vents", "keys"} if made.sprue is None else set()
    if made.halves is None:
        left_out |= {"wall", "board"}
    rows += [
        {"what": what, "value": value, "source": source, "assumed": True}
        for key, (what, value, source) in told.items()
        if key in section.assumed and key not in left_out
    ]
    if made.halves is None:
        return rows
    low, high = rubber.low / 1e3, rubber.high / 1e3
    value = f"{rubber.name}, {rubber.density / 1e3:.4g} g/cm3 ({low:.4g} to {high:.4g})"
    rows.append({"what": "density of the mould", "value": value, "source": rubber.source, "assumed": rubber.assumed})
    return rows
