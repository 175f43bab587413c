"""A chamber that was tried, as results.json has it."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

from meshlure.chambering.ranking import Ranked
from meshlure.chambering.trial import Leak, Rested, flown, leaked
from meshlure.flying import Flown
from meshlure.making.chamber.site import Site
from meshlure.results import chamber as tree
from meshlure.results.numbers import GRAM, MM, degrees, plain

Tree = dict[str, Any]


def told(site: Site, row: Ranked, kind: str, slope: float, tip: float) -> Tree:
    """Return one way to make a chamber, flown and flooded.

    Parameters
    ----------
    site : Site
    row : Ranked
    kind : str
        longest or steady.
    slope : float, rad
        Of the bore, bait level.
    tip : float, m
        Of the nose along the nose direction.
    """
    trial = row.trial
    frame = site.bait.frame
    extra = {
        "kind": kind,
        "shift_mm": float(abs(trial.shift @ frame.nose)) * MM,
        "shift_vector_mm": plain(trial.shift, MM),
        "slope_deg": degrees(slope),
        "postures": {end: _rest(rested) for end, rested in trial.rested.items()},
        "posture_change_deg": degrees(trial.change),
        "flight": _flight(flown(site, trial.option)),
        "reserve_g": trial.reserve * GRAM,
        "flooded": _leak(leaked(site, trial)),
        "score": row.score,
    }
    return tree.option(trial.option, frame.nose, tip, extra)


def _rest(rested: Rested) -> Tree:
    angles = rested.angles
    return {
        "nose_up_deg": None if angles is None else degrees(angles.nose_up),
        "lean_deg": None if angles is None else degrees(angles.lean),
        "bore_slope_deg": degrees(rested.slope),
        "returns": rested.returns,
    }


def _flight(flights: Mapping[str, Flown]) -> Tree:
    return {
        end: {
            "leads": one.flight.bearing.end,
            "verdict": one.flight.bearing.verdict,
            "trim_deg": degrees(one.flight.bearing.trim),
            "distance_m": one.flight.path.distance,
        }
        for end, one in ((end, flights[end]) for end in ("nose", "tail"))
    }


def _leak(leak: Leak) -> Tree:
    return {
        "reserve_g": leak.reserve * GRAM,
        "state": leak.state.value,
        "nose_up_deg": None if leak.rested.angles is None else degrees(leak.rested.angles.nose_up),
        "balls": leak.end,
    }
