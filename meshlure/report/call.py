"""The answer that heads the page: make it or not yet, why, and what to do first."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Any

TITLES = {"ready": "Ready to make", "one first": "Make one first", "not yet": "Not yet"}
SIGNS = {"ready": "✓", "one first": "1", "not yet": "✕"}
"""Told apart without colour."""
MOST = 5
"""Reasons that stand on the first screen."""


@dataclass(frozen=True)
class Reason:
    """One reason in words, and whether it says no by itself."""

    words: str
    stops: bool


@dataclass(frozen=True)
class Call:
    """The answer.

    Attributes
    ----------
    look : str
        Name of its style.
    sign, title, sentence : str
    reasons : tuple of Reason
    heading : str
        Over what to do first.
    first : tuple of tuples of str
        Each step in stretches, every second one a command.
    checked : str
        What the answer rests on.
    """

    look: str
    sign: str
    title: str
    sentence: str
    reasons: tuple[Reason, ...]
    heading: str
    first: tuple[tuple[str, ...], ...]
    checked: str


def call(results: Mapping[str, Any]) -> Call:
    """Return the answer of a study's readiness."""
    found = results["readiness"]
    state, rows = found["state"], found["reasons"]
    reasons = [Reason(_sentence(row["words"]), row["stops"]) for row in rows[:MOST]]
    if len(rows) > MOST:
        reasons.append(Reason(f"{len(rows) - MOST} more in results.json", stops=False))
    heading = "To change it" if state == "ready" and results["changes"] else "Then" if state == "ready" else "Do first"
    return Call(
        look=state.replace(" ", "-"),
        sign=SIGNS[state],
        title=TITLES[state],
        sentence=found["words"].partition(": ")[2].capitalize() or found["words"],
        reasons=tuple(reasons),
        heading=heading,
        first=tuple(tuple(words.split("`")) for words in found["first"]),
        checked=found["checked"],
    )


def _sentence(words: str) -> str:
    return words[:1].upper() + words[1:] + "."
