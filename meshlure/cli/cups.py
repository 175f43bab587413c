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
    lines += _cast(pour) if pour["print"] is None else _print(pour["print"])
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
    return [
        f"  mix      {mix['resin']['name']} with {mix['balloons']['name']}: {made}, {mix['flow']}",
        f"           {mix['density_g_cm3']:.3f} g/cm3 cured ({low:.3f} to {high:.3f}); {mix['cups']:.2f} tapped cups of "
        "balloons to a cup of resin",
        f"  cups     for {cups['baits']} bait{'' if cups['baits'] == 1 else 's'} of {cups['body_mm3'] / 1000:.2f} cm3 and "
        f"{cups['waste_share']:.0%} waste, {ratio}:",
        f"           part A {cups['part_a_g']:.2f} g, part B {cups['part_b_g']:.2f} g, balloons {cups['balloons_g']:.2f} g "
        f"({cups['balloons_ml']:.1f} ml tapped)",
        f"  casting  {bait['bare_g']:.2f} g with its inserts, before coat and hooks",
        f"  bait     {outcome_words(bait)}",
        *(f"  {row['off_share']:+.0%} off  {outcome_words(row)}" for row in pour["off"]),
    ]


def _print(found: Tree) -> list[str]:
    raise NotImplementedError


def outcome_words(row: Tree) -> str:
    """Return mass, reserve, state and posture of a bait."""
    nose = "no attitude" if row["nose_up_deg"] is None else f"nose up {row['nose_up_deg']:+.0f} deg"
    lean = "" if row["lean_deg"] is None else f", lean {row['lean_deg']:+.0f} deg"
    return f"{row['mass_g']:.2f} g, {row['state']}, reserve {row['reserve_g']:+.2f} g, {nose}{lean}"
