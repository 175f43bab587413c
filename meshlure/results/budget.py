"""The result tree's account of the error budget."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

import numpy as np

from meshlure.files.sections.limits import LimitsSection
from meshlure.geometry.surface import Floats
from meshlure.physics.budget import Budget
from meshlure.physics.buoyancy import Reserve, behaviour
from meshlure.physics.draws import COUNT, DEVIATIONS, PERCENTS, SEED
from meshlure.results.numbers import GRAM, degrees, plain

Tree = dict[str, Any]


def budget(found: Budget, held: Reserve, limits: LimitsSection | None, free: str | None) -> Tree:
    """Return the tree of an error budget.

    Parameters
    ----------
    found : Budget
    held : Reserve
        Whose band it is.
    limits : LimitsSection or None
        That copies are held against.
    free : str or None
        The angle that nothing holds in the posture: "nose_up", "lean" or "both".
    """
    nose, lean = free not in ("nose_up", "both"), free not in ("lean", "both")

    def angle(value: float | None, known: bool) -> float | None:
        return degrees(value) if known else None

    band = found.band
    return {
        "rows": [
            {
                "what": row.whatif.what,
                "change": row.whatif.change,
                "reserve_g": row.reserve * GRAM + 0.0,
                "state": str(behaviour(row.left, held.threshold)),
                "nose_up_deg": angle(row.nose_up, nose),
                "lean_deg": angle(row.lean, lean),
            }
            for row in found.rows
        ],
        "doubts": [
            {
                "what": doubt.what,
                "reserve_low_g": doubt.low * GRAM,
                "reserve_high_g": doubt.high * GRAM,
                "nose_up_low_deg": angle(extent.nose_up_low, nose),
                "nose_up_high_deg": angle(extent.nose_up_high, nose),
                "lean_low_deg": angle(extent.lean_low, lean),
                "lean_high_deg": angle(extent.lean_high, lean),
            }
            for doubt, extent in found.doubts
        ],
        "band": {
            "reserve_low_g": held.low * GRAM,
            "reserve_high_g": held.high * GRAM,
            "nose_up_low_deg": angle(_end(found.nose_up, band.nose_up_low, -1), nose),
            "nose_up_high_deg": angle(_end(found.nose_up, band.nose_up_high, 1), nose),
            "lean_low_deg": angle(_end(found.lean, band.lean_low, -1), lean),
            "lean_high_deg": angle(_end(found.lean, band.lean_high, 1), lean),
        },
        "monte_carlo": _draws(found, held, limits, nose, lean),
        "miss_deg": degrees(found.stance.miss),
        "looks": 0 if found.stance.locus is None else len(found.stance.locus.looks),
    }


def _end(angle: float | None, extent: float | None, sign: int) -> float | None:
    return None if angle is None or extent is None else angle + sign * extent


def _draws(found: Budget, held: Reserve, limits: LimitsSection | None, nose: bool, lean: bool) -> Tree:
    draws = found.draws
    states = [str(behaviour(float(value), held.threshold)) for value in draws.reserve]
    return {
        "draws": COUNT,
        "seed": SEED,
        "deviations": DEVIATIONS,
        "percent": list(PERCENTS),
        "reserve_g": plain(np.percentile(draws.reserve, PERCENTS), GRAM),
        "nose_up_deg": _angles(draws.percentiles(draws.nose_up)) if nose else None,
        "lean_deg": _angles(draws.percentiles(draws.lean)) if lean else None,
        "floats_share": states.count("floats") / len(states),
        "suspends_share": states.count("suspends") / len(states),
        "sinks_share": states.count("sinks") / len(states),
        "left_share": float(np.isnan(draws.nose_up).mean()),
        **_passing(found, limits, nose),
    }


def _angles(values: Floats | None) -> list[float] | None:
    return None if values is None else plain(np.degrees(values))


def _passing(found: Budget, limits: LimitsSection | None, nose: bool) -> Tree:
    """Shares of the copies that meet each limit and all of them; none where no limit is set or an angle is free."""
    draws, rows = found.draws, []
    every = np.ones(len(draws.reserve), dtype=np.bool_)
    known = limits is not None
    asked: Sequence[tuple[str, tuple[float, float] | None, Floats, bool]] = (
        ("reserve", None if limits is None else limits.reserve, draws.reserve, True),
        ("nose up", None if limits is None else limits.nose_up, draws.nose_up, nose),
    )
    for what, pair, values, told in asked:
        if pair is None:
            continue
        met = (values >= pair[0]) & (values <= pair[1])
        every &= met
        known = known and told
        rows.append({"what": what, "share": float(met.mean()) if told else None})
    return {"limits": rows, "pass_share": float(every.mean()) if known else None}
