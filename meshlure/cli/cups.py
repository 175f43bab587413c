"""The lines that a pour prints: what goes into the cups, and what comes out."""

from __future__ import annotations

from collections.abc import Mapping
from pathlib import Path
from typing import Any

Tree = Mapping[str, Any]


def pour_lines(results: Tree, out: Path | None) -> tuple[str, ...]:
    """Return the mix, the cups, the bait with it and with batches off, or the print's table, a line a thing."""
    pour = results["pour"]
    lines = [str(results["name"])]
    lines += _cast(pour) if pour["print"] is None else _print(pour)
    lines += [f"  {f['level']}: {f['message']}; {f['advice']}" for f in results["findings"] if f["level"] == "fault"]
    lines += [f"  warning: {f['message']}" for f in results["findings"] if f["code"] == "stiff-mix"]
    assumed = [row["what"] for row in pour["assumptions"] if row["assumed"]]
    if assumed:
        lines.append(f"  assumed  {'; '.join(assumed)}")
    lines += [f"  caution  {row['text']}" for row in results["cautions"] if row["trigger"] not in ("hooks", "sanding")]
    if out is not None:
        lines.append(f"  written  {', '.join(['results.json', *results['files']])} in {out}")
    return tuple(lines)


def _cast(pour: Tree) -> list[str]:
    mix, cups, bait = pour["mix"], pour["batch"], pour["bait"]
    made = f"{mix['share']:.2f} of the volume balloons ({mix['mass_share']:.1%} by mass)"
    low, high = mix["density_low_g_cm3"], mix["density_high_g_cm3"]
    a, b = cups["ratio"]
    ratio = f"{a:g}:{b:g} by {cups['by']}"
    of = f"{cups['baits']} bait{'' if cups['baits'] == 1 else 's'} of {cups['body_mm3'] / 1000:.2f} cm3"
    parts = f"part A {cups['part_a_g']:.2f} g, part B {cups['part_b_g']:.2f} g"
    return [
        f"  mix      {mix['resin']['name']} with {mix['balloons']['name']}: {made}, {mix['flow']}",
        f"           {mix['density_g_cm3']:.3f} g/cm3 cured ({low:.3f} to {high:.3f}), "
        f"{mix['cups']:.2f} tapped cups of balloons to a cup of resin",
        f"  cups     for {of} and {cups['waste_share']:.0%} waste, {ratio}:",
        f"           {parts}, balloons {cups['balloons_g']:.2f} g ({cups['balloons_ml']:.1f} ml tapped)",
        f"  casting  {bait['bare_g']:.2f} g with its inserts, before coat and hooks",
        f"  bait     {outcome_words(bait)}",
        *(f"  {row['off_share']:+.0%} off  {outcome_words(row)}" for row in pour["off"]),
    ]


def _print(pour: Tree) -> list[str]:
    found, bait = pour["print"], pour["bait"]
    head = "  ".join(f"{100 * infill:5.0f} %" for infill in found["infills"])
    asked = found["target_g"] is not None
    lines = [
        f"  print    {found['material']['name']}, wall {found['wall_mm']:.4g} mm, infill {found['infill_share']:.0%}: "
        f"{found['shell_mm3'] / 1000:.2f} cm3 of wall, {found['core_mm3'] / 1000:.2f} cm3 within it",
        f"  bait     {outcome_words(bait)}",
        *(f"  {row['off_share']:+.0%} off  {outcome_words(row)}" for row in pour["off"]),
        f"  flooded  {outcome_words(found['flooded'])}: {found['flooded_water_g']:.2f} g of water in the infill",
        f"  walls    mass of the whole bait, g, by infill{'; last, the infill that makes ' if asked else ''}"
        + (f"{found['target_g']:.2f} g" if asked else ""),
        f"           wall mm  lines  {head}",
    ]
    for row in found["rows"]:
        masses = "  ".join(f"{mass:7.2f}" for mass in row["bait_g"])
        wanted = "out of reach" if row["infill_share"] is None else f"{row['infill_share']:.1%}"
        lines.append(f"           {row['wall_mm']:7.2f}  {row['lines']:5.1f}  {masses}{f'  {wanted}' if asked else ''}")
    return lines


def outcome_words(row: Tree) -> str:
    """Return mass, reserve, state and posture of a bait."""
    nose = "no attitude" if row["nose_up_deg"] is None else f"nose up {row['nose_up_deg']:+.0f} deg"
    lean = "" if row["lean_deg"] is None else f", lean {row['lean_deg']:+z.0f} deg"
    return f"{row['mass_g']:.2f} g, {row['state']}, reserve {row['reserve_g']:+.2f} g, {nose}{lean}"
