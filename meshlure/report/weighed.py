"""Tables of a copy that was weighed: what it tells of body and coat, what explains it, and the bait foretold anew."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

from meshlure.report.subject import touchy
from meshlure.report.table import Table, table
from meshlure.report.wording import (
    DASH,
    band,
    banded_grams,
    cubic_centimetres,
    earned,
    fixed,
    grams,
    lean_words,
    nose_words,
    percent,
    significant,
)

Tree = Mapping[str, Any]


def facts(results: Tree) -> Table | None:
    """Return what the weighings tell of the copy, and the bait with it."""
    found = results.get("measured")
    if found is None:
        return None
    rows = []
    moved, body, coat = found.get("displaced"), found.get("body"), found.get("coat")
    if moved is not None:
        off = fixed(100 * moved["difference_share"], 1, signed=True)
        rows.append(
            (
                "displaces",
                f"{cubic_centimetres(moved['measured_mm3'])}, {off} % of what is drawn; density of the whole copy "
                f"{fixed(moved['bulk_density_g_cm3'], 3)} g/cm³",
            )
        )
    if body is not None:
        off = fixed(100 * body["difference_share"], 1, signed=True)
        rows.append(
            (
                "body's density",
                f"{fixed(body['density_g_cm3'], 3)} g/cm³, {off} % of the {fixed(body['predicted_g_cm3'], 3)} stated",
            )
        )
    if coat is not None:
        rows.append(
            (
                "coat",
                f"{grams(coat['mass_g'])}, so {fixed(coat['thickness_mm'], 2)} mm; {grams(coat['predicted_g'])} and "
                f"{fixed(coat['predicted_mm'], 2)} mm were stated",
            )
        )
    return table("What the weighings tell", (), rows, (0, 1))


def again(results: Tree) -> Table | None:
    """Return mass, reserve and posture as foretold and as weighed."""
    found = results.get("measured")
    if found is None or "weight" not in found:
        return None
    rows = [
        ("mass, g", fixed(results["weight"]["mass_g"], 2), fixed(found["weight"]["mass_g"], 2)),
        (
            "centre of gravity, mm from nose",
            fixed(results["weight"]["from_nose_mm"], 1),
            fixed(found["weight"]["from_nose_mm"], 1),
        ),
        ("reserve", _reserve(results["buoyancy"]), _reserve(found["buoyancy"])),
        ("it", results["buoyancy"]["state"], found["buoyancy"]["state"]),
        ("at rest", _posture(results["postures"]), _posture(found["postures"])),
    ]
    return table(
        "The bait foretold by the bait file, and with what was weighed", ("", "stated", "weighed"), rows, (0, 1, 2)
    )


def explanations(results: Tree) -> Table | None:
    """Return the single causes that could explain what was weighed."""
    found = results.get("measured")
    if found is None:
        return None
    rows = []
    for row in found.get("explanations") or []:
        unit = row["unit"].replace("cm3", "cm³")
        usual = band(row["usual_low"], row["usual_high"], "", _places(row), signed=True)
        rows.append(
            (
                row["what"],
                f"{significant(row['change'], 2, signed=True)} {unit}",
                f"{usual} {unit}",
                percent(max(row["explains_share"], 0.0)),
                _left(row["left_dry_g"]),
                _left(row["left_reserve_g"]),
                "likely" if row["likely"] else "",
            )
        )
    head = ("cause", "would be off by", "usual", "explains", "left of mass, g", "left of reserve, g", "")
    return table("Single causes, each alone as far as it fits best", head, rows, (0, 6))


def _reserve(found: Tree) -> str:
    low, high = found["reserve_low_g"], found["reserve_high_g"]
    return f"{banded_grams(found['reserve_g'], low, high)}, {band(low, high, '', earned(low, high), signed=True)}"


def _posture(postures: Any) -> str:
    afloat = [posture for posture in postures if posture["kind"] == "floating" and posture["upright"]]
    posture = (afloat or list(postures))[0]
    if posture["up"] is None:
        return "no attitude of its own"
    nose = nose_words(posture["nose_up_deg"], rounded=touchy(posture, "nose_up_deg"))
    lean = lean_words(posture["lean_deg"], rounded=touchy(posture, "lean_deg"), free=posture["free"] is not None)
    return f"{nose}, {lean}"


def _places(row: Tree) -> int:
    return 0 if row["unit"] == "%" and max(abs(row["usual_low"]), row["usual_high"]) >= 2 else 2


def _left(value: float | None) -> str:
    return DASH if value is None else fixed(value, 2, signed=True)
