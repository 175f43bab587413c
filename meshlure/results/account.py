"""The result tree's account of what was stated, what was assumed and from where, and what to mind."""

from __future__ import annotations

from collections.abc import Collection, Sequence
from math import degrees
from typing import Any

from meshlure.bait.pieces import Bait, Substance
from meshlure.physics.buoyancy import Reserve
from meshlure.results.numbers import GRAM, MM, plain
from meshlure.stock.cautions import cautions as kept_cautions
from meshlure.stock.waters import standard_air

Tree = dict[str, Any]


def stated(bait: Bait, reserve: Reserve, postures: Sequence[Tree], speed: float, pull: float) -> Tree:
    """Return line, cast at its speed (m/s) with the line's pull (N), retrieve and limits as they are taken."""
    plan = bait.plan
    return {
        "line": None if plan.line is None else {"tie_mm": plain(plan.line.tie, MM)},
        "cast": {
            "speed_m_s": speed,
            "angle_deg": degrees(plan.cast.angle),
            "height_m": plan.cast.height,
            "line_pull_n": pull,
            "wind_m_s": plan.cast.wind,
            "assumed": sorted(plan.cast.assumed),
        },
        "retrieve": {"speeds_m_s": list(plan.retrieve.speeds), "assumed": list(plan.retrieve.assumed)},
        "limits": _limits(bait, reserve, postures),
    }


def _limits(bait: Bait, reserve: Reserve, postures: Sequence[Tree]) -> list[Tree]:
    limits = bait.plan.limits
    if limits is None:
        return []
    rows = []
    if limits.reserve is not None:
        low, high = (value * GRAM for value in limits.reserve)
        value = reserve.reserve * GRAM
        rows.append({"what": "reserve, g", "low": low, "high": high, "value": value, "met": low <= value <= high})
    if limits.nose_up is not None:
        low, high = (degrees(value) for value in limits.nose_up)
        angle = headline(postures)["nose_up_deg"] if postures else None
        met = None if angle is None else low <= angle <= high
        rows.append({"what": "nose up, degrees", "low": low, "high": high, "value": angle, "met": met})
    return rows


def headline(postures: Sequence[Tree]) -> Tree:
    """Return the posture that heads the page: upright afloat, else the first."""
    afloat = [posture for posture in postures if posture["kind"] == "floating" and posture["upright"]]
    return (afloat or list(postures))[0]


def assumptions(bait: Bait, speed: float, pull: float) -> list[Tree]:
    """Return everything that the numbers rest on, what was assumed first.

    Parameters
    ----------
    bait : Bait
    speed : float, m/s
        Of the cast.
    pull : float, N
        Of the line in flight.
    """
    rows = [_substance(bait.body.name, bait.body.substance)]
    rows += [_substance(piece.name, piece.substance) for piece in bait.pieces if piece.substance is not None]
    rows += [_substance(f"balls in {balls.chamber}", balls.substance) for balls in bait.balls]
    for item in bait.hardware:
        value = f"{item.mass * GRAM:.2f} g ({item.low * GRAM:.2f} to {item.high * GRAM:.2f})"
        rows.append(_row(f"mass of {item.name}", value, item.source, item.assumed))
        if item.volume == 0:
            rows.append(_row(f"displacement of {item.name}", "none", "no material stated for it", assumed=True))
    if bait.coat is not None:
        rows.append(_substance("coat", bait.coat.substance))
    rows += _surroundings(bait, speed, pull)
    for piece in bait.pieces:
        if piece.substance is None:
            what = "fills with water" if piece.flooded else "stays dry and weighs nothing"
            rows.append(_row(piece.name, what, "stated", assumed=False))
    return sorted(rows, key=lambda row: not row["assumed"])


def _surroundings(bait: Bait, speed: float, pull: float) -> list[Tree]:
    plan, water, air = bait.plan, bait.water, standard_air()
    source = "TEOS-10 at sea pressure 0" if plan.water.density is None else "stated"
    rows = [_row("density of the water", f"{water.density:.2f} kg/m3", source, assumed=False)]
    for key, value in (("temperature", f"{water.temperature} °C"), ("salinity", f"{water.salinity} g/kg")):
        if key in plan.water.assumed:
            rows.append(_row(f"{key} of the water", value, "nothing stated", assumed=True))
    cast = plan.cast
    if cast.sinker is not None:
        rows.append(
            _row("speed of the cast", f"{speed:.1f} m/s", "settled by the sinker's measured distance", assumed=False)
        )
    elif "speed" in cast.assumed:
        rows.append(_row("speed of the cast", f"{speed:g} m/s", "a one-handed cast; from memory", assumed=True))
    for key, value in (
        ("angle", f"{degrees(cast.angle):.0f}°"),
        ("height", f"{cast.height:g} m"),
        ("line_pull", f"{pull:.3g} N"),
    ):
        if key in cast.assumed:
            what = {
                "angle": "angle of the cast",
                "height": "height of the release",
                "line_pull": "pull of the line in flight",
            }[key]
            rows.append(_row(what, value, "common practice, no source", assumed=True))
    if plan.retrieve.assumed:
        speeds = ", ".join(f"{speed:g}" for speed in plan.retrieve.speeds)
        rows.append(_row("speeds of the retrieve", f"{speeds} m/s", "common practice, no source", assumed=True))
    rows.append(_row("air", f"{air.density:.4f} kg/m3", "ISO 2533 standard atmosphere at sea level", assumed=False))
    return rows


def _substance(name: str, substance: Substance | None) -> Tree:
    assert substance is not None
    span = f"{substance.density / 1e3:.4g} g/cm3 ({substance.low / 1e3:.4g} to {substance.high / 1e3:.4g})"
    value = span if substance.name is None else f"{substance.name}, {span}"
    return _row(f"density of {name}", value, substance.source, substance.assumed)


def _row(what: str, value: str, source: str, assumed: bool) -> Tree:
    return {"what": what, "value": value, "source": source, "assumed": assumed}


def cautions(bait: Bait, more: Collection[str] = ()) -> list[Tree]:
    """Return the reminders that the bait's materials, hooks and balls call for, and those of further triggers."""
    substances = [bait.body.substance, *(piece.substance for piece in bait.pieces)]
    substances += [piece.glue for piece in bait.pieces]
    substances += [balls.substance for balls in bait.balls]
    substances += [item.substance for item in bait.hardware]
    if bait.coat is not None:
        substances.append(bait.coat.substance)
    triggers = {trigger for substance in substances if substance is not None for trigger in substance.triggers}
    triggers |= {trigger for item in bait.hardware for trigger in item.triggers}
    if bait.balls:
        triggers.add("small parts")
    triggers |= set(more)
    return [{"trigger": caution.trigger, "text": caution.text} for caution in kept_cautions(triggers)]
