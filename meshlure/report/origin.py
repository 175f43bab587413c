"""Tables of where the numbers come from: assumptions, files read, time taken; and the findings in order."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Any

from meshlure.report.table import Table, table
from meshlure.report.wording import MINUS, fixed, point

Results = Mapping[str, Any]
LEVELS = ("fault", "warning", "note")
USUAL = ("sticks-out",)
MANY = 2
"""Warnings of a usual kind from which on the first screen tells them as one."""
PLACES = 3
"""Places of one finding that are written out."""


@dataclass(frozen=True)
class Found:
    """One finding in words: its level, the piece, what was found, where, and what to do."""

    level: str
    code: str
    piece: str
    message: str
    where: str
    advice: str


def findings(results: Results) -> list[Found]:
    """Return all findings, faults first, in the order they were found."""
    rows = []
    for row in results["findings"]:
        places = row["where_mm"] or []
        places = [place for place in places if unsigned(point(place)) not in unsigned(row["message"])]
        where = "; ".join(f"({point(place)})" for place in places[:PLACES])
        if len(places) > PLACES:
            where += f" and {len(places) - PLACES} more"
        rows.append(
            Found(
                row["level"],
                row["code"],
                row["piece"] or "",
                row["message"],
                where and f"at {where} mm",
                sentence(row["advice"] or ""),
            )
        )
    return sorted(rows, key=lambda found: LEVELS.index(found.level) if found.level in LEVELS else len(LEVELS))


def gathered(found: list[Found]) -> list[Found]:
    """Return findings for the first screen: those of one usual kind as one, which have their places further down."""
    usual = [f for f in found if f.code in USUAL and f.level == "warning"]
    if len(usual) < MANY:
        return found
    words = (
        "stick out of the body and displace water there, as eyes and hangers should; each with its place under Findings"
    )
    one = Found("warning", usual[0].code, ", ".join(f.piece for f in usual), words, "", "")
    return [f for f in found if f not in usual] + [one]


def unsigned(text: str) -> str:
    """Return a text with plain minus signs and no minus before zero, to find places that a message already tells."""
    return text.replace(MINUS, "-").replace("-0.0,", "0.0,")


def sentence(text: str) -> str:
    """Return advice as a sentence."""
    return text[:1].upper() + text[1:] + ("." if text and text[-1] not in ".!?" else "")


def counted(found: list[Found]) -> str:
    """Return how many faults and warnings there are, in words."""
    faults, warnings = (sum(f.level == level for f in found) for level in LEVELS[:2])
    return f"{_count(faults, 'fault')}, {_count(warnings, 'warning')}"


def _count(number: int, word: str) -> str:
    return f"{number or 'no'} {word}{'' if number == 1 else 's'}"


def assumptions(results: Results) -> Table | None:
    """Return what was taken as given: the value, where it comes from, and whether anyone stated it."""
    rows = [
        (row["what"], str(row["value"]), row["source"] or "", "assumed" if row["assumed"] else "given")
        for row in sorted(results.get("assumptions") or [], key=lambda row: not row["assumed"])
    ]
    return table("What was assumed, and what was given", ("what", "value", "from", ""), rows, (0, 1, 2, 3))


def inputs(results: Results) -> Table | None:
    """Return the files read, with their fingerprints."""
    rows = [
        (row["piece"], row["file"], fixed(row["triangles"], 0), row["length_unit"], row["sha256"])
        for row in results["inputs"]
    ]
    return table("Files read", ("piece", "file", "triangles", "unit", "SHA-256"), rows, (0, 1, 3, 4))


def timings(results: Results) -> str:
    """Return how long each phase took, in one line."""
    return ", ".join(
        f"{phase} {fixed(seconds, 2)}" for phase, seconds in results["timings_s"].items() if seconds is not None
    )
