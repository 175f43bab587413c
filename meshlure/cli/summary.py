"""The summary that a run prints: what a maker asks first."""

from __future__ import annotations

from collections.abc import Mapping
from pathlib import Path
from typing import Any, Final

OUNCE: Final = 28.349523125
"""g. The avoirdupois ounce, exact since 1959."""


def summary(results: Mapping[str, Any], out: Path | None) -> tuple[str, ...]:
    """Return whether to make it, mass, verdict, postures, findings and files, a line a thing.

    Parameters
    ----------
    results : mapping
        The tree of results.json.
    out : Path or None
        The folder that was written.
    """
    weight = results["weight"]
    mass = weight["mass_g"]
    place = f"centre of gravity {weight['from_nose_mm']:.1f} mm from the nose"
    ready = results["readiness"]
    lines = [
        str(results["name"]),
        f"  make it  {ready['words']}",
        *(f"  {'first' if number == 0 else '':7}  {step}" for number, step in enumerate(ready["first"])),
        f"  mass     {mass:.2f} g ({mass / OUNCE:.3f} oz), {place}",
        f"  verdict  {results['buoyancy']['verdict']}",
    ]
    lines += [f"  posture  {posture['words']}{_balls(posture)}" for posture in results["postures"]]
    flight = results["flight"]
    ratios = flight["ratios"]
    other = "" if flight["against"] is None else f", {ratios['against']:.2f} of '{flight['against']}'"
    lines.append(f"  flight   {flight['words']}")
    lines.append(
        f"           about {flight['distance_m']:.0f} m: {ratios['sphere']:.2f} of a sphere of its mass and bulk{other}"
    )
    lines.append(f"  water    {results['sinking']['words']}")
    counts = {level: sum(f["level"] == level for f in results["findings"]) for level in ("fault", "warning", "note")}
    lines.append("  found    " + ", ".join(f"{n} {level}{'' if n == 1 else 's'}" for level, n in counts.items()))
    lines += [f"           {f['level']}: {f['message']}" for f in results["findings"] if f["level"] != "note"]
    if out is not None:
        lines.append(f"  written  {', '.join(['results.json', *results['files']])} in {out}")
    return tuple(lines)


def _balls(posture: Mapping[str, Any]) -> str:
    """Say at which ends the balls lie; postures that differ by nothing else would read alike."""
    ends = [f"those of '{chamber}' at the {end}" for chamber, end in (posture["balls"] or {}).items()]
    return f" Balls: {', '.join(ends)}." if ends else ""
