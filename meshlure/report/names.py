"""What is named in a drawing, and in how many letters, so that all names find room."""

from __future__ import annotations

import textwrap
from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from meshlure.report.figures import drawable, text_width
from meshlure.report.leaders import Named, Placed, arrange
from meshlure.report.outlines import inner_point
from meshlure.report.subject import Subject
from meshlure.report.wording import fixed
from meshlure.results import View

POINTS, LINE = 6.8, 2.9
"""Type size of names, and mm from one line of text to the next."""
ASTRAY = 2.5
"""mm that a leader's end may stand beside what it points to, to keep clear of its neighbour."""
UNNAMED = ("skin", "body", "coat")
"""Roles that a drawing shows without a leader."""


@dataclass(frozen=True)
class Thing:
    """Something to be named: number, name, where its leader ends in the drawing, and how far from the nose it lies."""

    number: int | None
    name: str
    spot: tuple[float, float]
    from_nose: float


def things(view: View, subject: Subject) -> list[Thing]:
    """Return all that is named in a view: pieces inside, hardware, the line tie; mm of the bait."""
    found = []
    for piece in view.pieces:
        if piece.role in UNNAMED or not piece.rings:
            continue
        spot = inner_point(piece)
        centre = subject.centres_of_pieces.get(piece.name)
        from_nose = spot[0] if centre is None else view.place(centre)[0]
        found.append(Thing(subject.numbers.get(piece.name), piece.name, spot, from_nose))
    drawn = {piece.name for piece in view.pieces}
    for row in subject.balls:
        if row.name not in drawn:
            spot = view.place(row.at)
            found.append(Thing(subject.numbers.get(row.name), row.name, spot, view.place(row.at)[0]))
    for hook in subject.hardware:
        spot = view.place(hook.at)
        found.append(Thing(hook.number, hook.name, spot, spot[0]))
    if subject.tie is not None:
        spot = view.place(subject.tie)
        found.append(Thing(None, "line tie", spot, spot[0]))
    return found


def placed_names(
    view: View, subject: Subject, scale: float, across: float, middle: float, row: tuple[float, float]
) -> list[Placed]:
    """Return the names with their places: shorter the less room there is, numbers alone at the last.

    Only the side view has names and distances from the nose; the others have the numbers of the table of pieces.

    Parameters
    ----------
    scale, across, middle : float
        Paper mm per mm; where the drawing's x = 0 lies across the paper; half way up what is drawn, from its y = 0.
    row : two floats
        The ends of the rows of names, paper mm.
    """

    def named(lines: tuple[str, ...], spot: tuple[float, float]) -> Named:
        width = max(text_width(line, POINTS) for line in lines)
        return Named(lines, width, across + scale * spot[0], scale * spot[1])

    def straight(placed: Sequence[Placed]) -> bool:
        return all(abs(p.drop_x - p.named.x) < ASTRAY for p in placed)

    wanted, side = things(view, subject), view.name == "side"
    for letters in (18, 12, 8, 0) if side else (0,):
        tried = []
        for thing in wanted:
            lines = name_lines(thing.number, thing.name, letters)
            tried.append(named((*lines, fixed(thing.from_nose, 1)) if side else lines, thing.spot))
        placed = arrange(tried, middle, *row)
        if placed is not None and straight(placed):
            return placed
    # Crowded: things at one place share a leader, and places are drawn together until all fit.
    for reach in (1.0, 2.0, 4.0, 8.0, 16.0, 32.0, 64.0, 128.0, np.inf):
        groups = together(wanted, reach / scale)
        tried = [named((numbers_text([t.number for t in group]),), group[len(group) // 2].spot) for group in groups]
        placed = arrange(tried, middle, *row)
        if placed is not None and (straight(placed) or reach == np.inf):
            return placed
    return []


def together(wanted: Sequence[Thing], reach: float) -> list[list[Thing]]:
    """Return things in groups that lie within a reach, mm of the bait, of their group's first."""
    groups: list[list[Thing]] = []
    for thing in sorted(wanted, key=lambda t: (t.spot, t.number or 0)):
        if groups and float(np.hypot(*np.subtract(thing.spot, groups[-1][0].spot))) < reach:
            groups[-1].append(thing)
        else:
            groups.append([thing])
    return groups


def name_lines(number: int | None, name: str, letters: int) -> tuple[str, ...]:
    """Return a name in two lines of so many letters at most, or its number alone where there is no room or no type."""
    if number is not None and (letters <= 0 or not drawable(name)):
        return (str(number),)
    text = name if number is None else f"{number} {name}"
    lines = textwrap.wrap(text, max(letters, 9), max_lines=2, placeholder="…", break_long_words=True)
    return tuple(lines) or (str(number or ""),)


def numbers_text(numbers: Sequence[int | None]) -> str:
    """Return the numbers of things at one place, runs of them as "4–9"; the line tie has its name for a number."""
    runs: list[list[int]] = []
    for number in sorted({n for n in numbers if n is not None}):
        if runs and number == runs[-1][-1] + 1:
            runs[-1].append(number)
        else:
            runs.append([number])
    texts = ["tie"] * (None in numbers) + [str(run[0]) if len(run) == 1 else f"{run[0]}–{run[-1]}" for run in runs]
    return ", ".join(texts[:6]) + (" …" if len(texts) > 6 else "")
