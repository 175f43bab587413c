"""The bench sheet: what goes into the cups or onto the printer's plate, where inserts lie, and what to mind."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

from meshlure.report import origin, wording
from meshlure.report.table import Table, table
from meshlure.report.wording import DASH, degrees, fixed, grams, percent, point, significant
from meshlure.results import Study

Tree = Mapping[str, Any]

SHOWN = 400
"""Characters of a bait's name that the sheet shows."""


def bench(study: Study) -> str:
    """Return the bench sheet of a study with a pour as one HTML page that prints on A4.

    Parameters
    ----------
    study : Study
        Its results hold a pour.

    Returns
    -------
    str
        HTML that needs no other file, no network and no script.
    """
    from jinja2 import Environment, PackageLoader, StrictUndefined

    results = wording.cleaned(study.results)
    pour = results["pour"]
    templates = Environment(
        loader=PackageLoader("meshlure.report", "templates"),
        autoescape=True,
        undefined=StrictUndefined,
        trim_blocks=True,
        lstrip_blocks=True,
    )
    told = [found for found in origin.findings(results) if found.code in _TOLD]
    common: dict[str, Any] = {
        "r": results,
        "name": wording.clipped(results["name"] or "Bait without a name", SHOWN),
        "inserts": inserts(pour),
        "outcomes": outcomes(pour),
        "assumed": [row for row in pour["assumptions"] if row["assumed"]],
        "cautions": results["cautions"],
        "findings": told,
    }
    own = _cast(pour) if pour["print"] is None else _print(pour)
    return templates.get_template("bench.html").render(**common, **own)


_TOLD = ("mix-out-of-reach", "mass-out-of-reach", "stiff-mix", "printed-solid", "printed-leaks")


def _cast(pour: Tree) -> dict[str, Any]:
    cups = pour["batch"]
    number = "one bait" if cups["baits"] == 1 else f"{cups['baits']} baits"
    return {
        "title": "Bench sheet, pour",
        "subtitle": f"{number} of {fixed(cups['body_mm3'] / 1000, 2)} cm³ of mix each",
        "heading": "Mix",
        "sentence": mix_words(pour),
        "cups": cups_table(pour),
        "walls": None,
        "bare": f"A casting with its inserts, before coat and hooks: {grams(pour['bait']['bare_g'])}. Weigh the first "
        "one; what it is off by is best put down to the mix.",
    }


def _print(pour: Tree) -> dict[str, Any]:
    found = pour["print"]
    wall, infill = significant(found["wall_mm"], 3), percent(found["infill_share"])
    return {
        "title": "Bench sheet, print",
        "subtitle": f"wall {wall} mm, infill {infill}",
        "heading": "Wall and infill",
        "sentence": f"{found['material']['name']}, {fixed(found['solid_g_cm3'], 3)} g/cm³ where it is solid: "
        f"{fixed(found['shell_mm3'] / 1000, 2)} cm³ of wall, {fixed(found['core_mm3'] / 1000, 2)} cm³ within it.",
        "cups": None,
        "walls": walls_table(pour),
        "bare": f"A print with its inserts, before coat and hooks: {grams(pour['bait']['bare_g'])}. Weigh the first "
        "one, dry and after a night under water: what it gains has leaked in.",
    }


def walls_table(pour: Tree) -> Table | None:
    """Return the mass of the whole bait by wall and infill, and the infill that makes the mass wanted."""
    found = pour["print"]
    asked = found["target_g"] is not None
    rows = []
    for row in found["rows"]:
        cells = [fixed(row["wall_mm"], 2), fixed(row["lines"], 1), *(fixed(mass, 2) for mass in row["bait_g"])]
        if asked:
            cells.append(DASH if row["infill_share"] is None else fixed(100 * row["infill_share"], 1) + " %")
        rows.append(cells)
    head = ["wall, mm", "lines", *(f"{fixed(100 * share, 0)} %" for share in found["infills"])]
    if asked:
        head.append(f"for {grams(found['target_g'])}")
    line = fixed(found["line_mm"], 2)
    return table(f"Mass of the whole bait, g, by wall and infill; lines of {line} mm", head, rows, ())


def mix_words(pour: Tree) -> str:
    """Return the mix as a sentence."""
    mix = pour["mix"]
    if mix["share"] == 0:
        return f"{mix['resin']['name']} without balloons: {fixed(mix['density_g_cm3'], 3)} g/cm³."
    low, high = mix["density_low_g_cm3"], mix["density_high_g_cm3"]
    return (
        f"{mix['resin']['name']} with {fixed(100 * mix['share'], 1)} % of its volume {mix['balloons']['name']}: "
        f"{fixed(mix['cups'], 2)} tapped cups to a cup of resin, {fixed(mix['density_g_cm3'], 3)} g/cm³ cured "
        f"({fixed(low, 3)} to {fixed(high, 3)}). It {_FLOW[mix['flow']]}."
    )


_FLOW = {"pours": "pours", "stiff": "is stiff", "does not pour": "does not pour"}


def cups_table(pour: Tree) -> Table | None:
    """Return what goes into the cups."""
    cups = pour["batch"]
    a, b = cups["ratio"]
    rows = [
        ("part A", fixed(cups["part_a_g"], 2), fixed(cups["part_a_ml"], 1)),
        ("part B", fixed(cups["part_b_g"], 2), fixed(cups["part_b_ml"], 1)),
        ("balloons, tapped", fixed(cups["balloons_g"], 2), fixed(cups["balloons_ml"], 1)),
        ("all together", fixed(cups["mass_g"], 2), fixed(cups["volume_ml"], 1)),
    ]
    caption = (
        f"Into the cups, {percent(cups['waste_share'])} waste in it; A to B {a:g} : {b:g} by {cups['by']}. "
        "Cured volumes; the balloons' is that of the tapped cup"
    )
    return table(caption, ("", "g", "ml"), rows, last_is_sum=True)


def inserts(pour: Tree) -> Table | None:
    """Return what lies in the body, with its place."""
    rows = [
        (
            row["name"],
            row["material"] or ("hollow" if not row["mass_g"] else DASH),
            fixed(row["mass_g"], 2),
            fixed(row["from_nose_mm"], 1),
            point(row["centre_mm"], 2),
            "on a pin" if row["pinned"] else "",
        )
        for row in pour["inserts"]
    ]
    head = ("insert", "material", "g", "mm from nose", "centre x, y, z, mm", "seat")
    return table("Inserts by their centres", head, rows, (0, 1, 5))


def outcomes(pour: Tree) -> Table | None:
    """Return the whole bait with this batch and with batches off."""
    rows = [_outcome("as made", pour["bait"])] if pour["bait"] is not None else []
    rows += [_outcome(f"{fixed(100 * row['off_share'], 0, signed=True)} %", row) for row in pour["off"]]
    if pour["print"] is not None:
        rows.append(_outcome("infill full of water", pour["print"]["flooded"]))
    head = ("body's density", "g/cm³", "g, ready to fish", "reserve, g", "it", "nose up", "lean")
    return table("The whole bait, with batches 3 % lighter and denser beside", head, rows, (0, 4))


def _outcome(name: str, row: Tree) -> tuple[str, ...]:
    return (
        name,
        significant(row["density_g_cm3"], 3),
        fixed(row["mass_g"], 2),
        fixed(row["reserve_g"], 2, signed=True),
        row["state"],
        degrees(row["nose_up_deg"]),
        degrees(row["lean_deg"]),
    )
