"""The result tree's comparison of baits: what each shows, the differences from the first, and which of them count."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from string import ascii_uppercase
from typing import Any, Final

from meshlure.results import difference
from meshlure.results.difference import Band
from meshlure.results.measures import Measure, main_posture, measures

Tree = dict[str, Any]

MOST: Final = 8
"""Baits that are told apart on one page."""
LETTERS: Final = ascii_uppercase[:MOST]

EXACT: Final = 1e-6
"""Share of a value within which two exact values are one: rounding."""


def comparison(trees: Sequence[Tree], files: Sequence[str], conditions: Tree) -> Tree:
    """Return the comparison of studies, the first of which the others are held against.

    Parameters
    ----------
    trees : sequence of dict
        Result trees, two to eight.
    files : sequence of str
        The bait files.
    conditions : dict
        From `meshlure.comparing`: water, throw and retrieve.
    """
    return {
        "baits": [
            {
                "letter": letter,
                "name": tree["name"],
                "file": file,
                "inputs": tree["inputs"],
                "faults": sum(found["level"] == "fault" for found in tree["findings"]),
                "warnings": sum(found["level"] == "warning" for found in tree["findings"]),
            }
            for letter, tree, file in zip(LETTERS, trees, files, strict=False)
        ],
        "conditions": conditions,
        "rows": [row for measure in measures(trees[0]) if (row := _row(measure, trees)) is not None],
        "words": [{"key": key, "what": what, "values": [say(tree) for tree in trees]} for key, what, say in _WORDS],
    }


def _row(measure: Measure, trees: Sequence[Tree]) -> Tree | None:
    values = [measure.value(tree) for tree in trees]
    if all(value is None for value in values):
        return None
    first = values[0]
    differences: list[Tree] = []
    for tree, value in zip(trees[1:], values[1:], strict=True):
        if first is None or value is None:
            differences.append({"by": None, "low": None, "high": None, "counts": None})
            continue
        by = value - first
        band = None if measure.band is None else measure.band(trees[0], tree)
        if band is not None and max(band.below, band.above) < EXACT * abs(first):
            band = Band(EXACT * abs(first), EXACT * abs(first))
        differences.append(
            {
                "by": by,
                "low": None if band is None else by - band.below,
                "high": None if band is None else by + band.above,
                "counts": difference.counts(by, band),
            }
        )
    return {
        "key": measure.key,
        "what": measure.what,
        "unit": measure.unit,
        "group": measure.group,
        "decimals": measure.digits,
        "values": values,
        "differences": differences,
    }


def _rests(tree: Tree) -> str:
    return str(main_posture(tree).get("words") or "no resting posture was found")


_WORDS: Final[tuple[tuple[str, str, Callable[[Tree], str]], ...]] = (
    ("state", "under water it", lambda tree: str(tree["buoyancy"]["state"])),
    ("rests", "at rest", _rests),
    ("flies", "in flight", lambda tree: f"{tree['flight']['verdict']}, {tree['flight']['leads']} first"),
    ("moves", "let go under water", lambda tree: str(tree["sinking"]["words"])),
)
