"""What a run that makes a mould prints: scale, parting, what to mix, what was written."""

from __future__ import annotations

from collections.abc import Mapping
from pathlib import Path
from typing import Any, Final

NOTHING: Final = 1e-4
"""Share of the body's volume below which held rubber is a matter of facets, not worth a word."""


def mould_lines(results: Mapping[str, Any], out: Path | None) -> tuple[str, ...]:
    """Return scale, parting, rubber, resin, findings and files, a line a thing.

    Parameters
    ----------
    results : mapping
        The tree of results.json.
    out : Path or None
        The folder that was written.
    """
    found = results["mould"]
    lines = [str(results["name"]), f"  scale    {_scale(found)}", f"  parting  {_parting(found)}"]
    if found["sprue"] is not None:
        sprue, vents, keys = found["sprue"], len(found["vents"]), len(found["keys"])
        lines.append(
            f"  pour     sprue of {sprue['diameter_mm']:g} mm at the {sprue['place']}, {_count(vents, 'vent')}, "
            f"{_count(keys, 'key')}"
        )
    if found["rubber_cm3"]:
        each = " and ".join(f"{volume:.0f}" for volume in found["rubber_cm3"])
        grams = " and ".join(f"{mass:.0f}" for mass in found["rubber_g"])
        lines.append(f"  rubber   {each} cm3; with {found['rubber_spare']:.0%} to spare mix {grams} g")
    more = f", {found['resin_outside_cm3']:.1f} of it in sprue and vents" if found["sprue"] is not None else ""
    lines.append(f"  resin    {found['resin_cm3']:.1f} cm3{more}: {found['resin_g']:.1f} g a casting")
    counts = {level: sum(f["level"] == level for f in results["findings"]) for level in ("fault", "warning", "note")}
    lines.append("  found    " + ", ".join(_count(n, level) for level, n in counts.items()))
    lines += [f"           {f['level']}: {f['message']}" for f in results["findings"] if f["level"] != "note"]
    if out is not None:
        lines.append(f"  written  {', '.join(['results.json', *results['files']])} in {out}")
    return tuple(lines)


def _scale(found: Mapping[str, Any]) -> str:
    axes = found["scale_axes"]
    each = f"{found['scale']:.4f}" if max(axes) == min(axes) else ", ".join(f"{k:.4f}" for k in axes) + " along x, y, z"
    drawn, moulded = found["volume_drawn_mm3"] / 1e3, found["volume_moulded_mm3"] / 1e3
    cast = found["volume_cast_mm3"] / 1e3
    return f"{each} times the drawing: {drawn:.2f} cm3 drawn, {moulded:.2f} cm3 moulded, {cast:.2f} cm3 cast"


def _parting(found: Mapping[str, Any]) -> str:
    way = "[" + ", ".join(f"{value + 0.0:.3g}" for value in found["pull"]) + "]"
    held = f"{found['trapped_mm3']:.3g} mm3 held, up to {found['undercut_depth_mm']:.1f} mm under"
    free = found["trapped_mm3"] <= NOTHING * found["volume_moulded_mm3"]
    return f"along {way} at {round(found['plane_mm'], 2) + 0.0:.2f} mm: {'nothing is held' if free else held}"


def _count(number: int, noun: str) -> str:
    return f"{number} {noun}{'' if number == 1 else 's'}"
