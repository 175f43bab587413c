"""Tables of the error budget: what slips and doubts do to reserve and posture, and what copies would be like."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

from meshlure.report.table import Table, table
from meshlure.report.wording import DASH, MINUS, THIN, band, earned, fixed, percent

Tree = Mapping[str, Any]


def rows(results: Tree) -> Table | None:
    """Return what one thing otherwise does."""
    found = results.get("budget")
    if found is None:
        return None
    lines = [
        (
            row["what"],
            row["change"].replace("-", MINUS),
            fixed(row["reserve_g"], 2, signed=True),
            row["state"],
            _turn(row["nose_up_deg"]),
            _turn(row["lean_deg"]),
        )
        for row in found["rows"]
    ]
    head = ("otherwise", "by", "reserve, g", "it then", "nose up, °", "lean, °")
    return table("One thing otherwise, everything else as it is: what changes", head, lines, (0, 1, 3))


def doubts(results: Tree) -> Table | None:
    """Return what the bands of reserve and posture are made of."""
    found = results.get("budget")
    if found is None:
        return None
    lines = [
        (
            row["what"],
            fixed(-row["reserve_low_g"], 2),
            fixed(row["reserve_high_g"], 2, signed=True),
            *(
                DASH if row[key] is None else fixed(sign * row[key], 1, signed=True)
                for key, sign in (
                    ("nose_up_low_deg", -1),
                    ("nose_up_high_deg", 1),
                    ("lean_low_deg", -1),
                    ("lean_high_deg", 1),
                )
            ),
        )
        for row in found["doubts"]
    ]
    head = ("doubt", "reserve, g", "to, g", "nose up, °", "to, °", "lean, °", "to, °")
    return table("What the bands are made of, by the root of the sum of squares", head, lines)


def copies(results: Tree) -> Table | None:
    """Return what copies drawn by lot would be like."""
    found = results.get("budget")
    if found is None:
        return None
    drawn = found["monte_carlo"]
    head = ("of the copies", *(f"{share:g} % below" for share in drawn["percent"]))
    lines = [("reserve, g", *(fixed(value, 2, signed=True) for value in drawn["reserve_g"]))]
    for name, key in (("nose up, °", "nose_up_deg"), ("lean, °", "lean_deg")):
        if drawn[key] is not None:
            lines.append((name, *(fixed(value, 1, signed=True) for value in drawn[key])))
    return table(f"{drawn['draws']:,} copies drawn by lot from these doubts".replace(",", "\u202f"), head, lines)


def words(results: Tree) -> list[str]:
    """Return what the budget comes to in a few sentences."""
    found = results.get("budget")
    if found is None:
        return []
    all_, drawn = found["band"], found["monte_carlo"]
    low, high = all_["reserve_low_g"], all_["reserve_high_g"]
    said = [f"All doubts together: reserve {band(low, high, 'g', earned(low, high), signed=True)}"]
    for name, key in (("nose up", "nose_up"), ("lean", "lean")):
        if all_[f"{key}_low_deg"] is not None and all_[f"{key}_high_deg"] is not None:
            said.append(f"{name} {_band(all_, key)}")
    states = [
        f"{_share(drawn[f'{name}_share'])} {verb}"
        for name, verb in (("floats", "float"), ("suspends", "suspend"), ("sinks", "sink"))
        if drawn[f"{name}_share"] > 0
    ]
    told = ["; ".join(said) + ".", f"Of the copies {_listed(states)}."]
    if drawn["left_share"] > 0:
        told.append(f"{_share(drawn['left_share']).capitalize()} leave the posture for another, or have none.")
    if passing(results):
        told.append(passing(results))
    return told


def passing(results: Tree) -> str:
    """Return what share of copies would be within the limits; empty where none are set or one has no value."""
    found = results.get("budget")
    share = None if found is None else found["monte_carlo"]["pass_share"]
    if found is None or share is None:
        return ""
    draws = f"{found['monte_carlo']['draws']:,}".replace(",", THIN)
    limits = [
        f"{row['what'].partition(',')[0]} {band(row['low'], row['high'], '', 0, signed=True)}°"
        if "degrees" in row["what"]
        else f"{row['what'].partition(',')[0]} {band(row['low'], row['high'], 'g', 2, signed=True)}"
        for row in results.get("limits") or []
    ]
    within = f"your limits ({', '.join(limits)})" if limits else "your limits"
    which = "none is" if share == 0 else "all are" if share == 1 else f"{_share(share)} are"
    return f"Of {draws} copies drawn by lot from these doubts, {which} within {within}."


def posture_band(results: Tree) -> str:
    """Return the bands of the posture's angles in words; empty where there are none."""
    found = results.get("budget")
    if found is None:
        return ""
    said = [
        f"{name} {_band(found['band'], key)}"
        for name, key in (("nose", "nose_up"), ("lean", "lean"))
        if found["band"][f"{key}_low_deg"] is not None and found["band"][f"{key}_high_deg"] is not None
    ]
    return "Band: " + ", ".join(said) if said else ""


def _band(all_: Tree, key: str) -> str:
    return band(all_[f"{key}_low_deg"], all_[f"{key}_high_deg"], "", 0, signed=True).replace("\u00a0", "") + "°"


def _turn(angle: float | None) -> str:
    return DASH if angle is None else fixed(angle, 1 if abs(angle) < 10 else 0, signed=True)


def _share(share: float) -> str:
    if share == 1:
        return "all"
    if 0 < share < 0.01:
        return "less than 1 %"
    if 0.99 < share < 1:
        return "more than 99 %"
    return percent(share).replace("\u00a0", " ")


def _listed(parts: list[str]) -> str:
    return parts[0] if len(parts) == 1 else f"{', '.join(parts[:-1])} and {parts[-1]}"
