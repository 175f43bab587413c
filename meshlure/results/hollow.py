"""The result tree's account of a hollow body: its volumes, its mass, and what it does sealed and flooded."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

from meshlure.making.hollow import Hollow
from meshlure.results.numbers import GRAM, MM, MM3, plain

Tree = dict[str, Any]


def hollow(
    made: Hollow,
    *,
    shell_mass: float,
    mass: float,
    sealed: float,
    flooded: float,
    inside: Sequence[str],
    coated: bool,
) -> Tree:
    """Return the account of a hollow body.

    Parameters
    ----------
    made : Hollow
    shell_mass : float, kg
        Of the body's material.
    mass : float, kg
        Of the bait with all that it carries.
    sealed, flooded : float, kg
        Its reserve with air and with water in the hollow.
    inside : sequence of str
        Inserts that stand in the hollow.
    coated : bool
        Whether the bait has a coat.
    """
    return {
        "wall_mm": made.wall * MM,
        "whole_mm3": made.whole.volume * MM3,
        "shell_mm3": made.body.volume * MM3,
        "inside_mm3": sum(part.volume for part in made.inside) * MM3,
        "hollows": len(made.inside),
        "shell_g": shell_mass * GRAM,
        "mass_g": mass * GRAM,
        "drained": bool(made.drains),
        "reserve_sealed_g": sealed * GRAM,
        "reserve_flooded_g": flooded * GRAM,
        "drains": [
            {
                "at_mm": plain(drain.at, MM),
                "axis": plain(drain.hole.axis),
                "diameter_mm": 2 * drain.hole.radius * MM,
            }
            for drain in made.drains
        ],
        "inserts_inside": list(inside),
        "words": _words(made, inside, coated),
    }


def _words(made: Hollow, inside: Sequence[str], coated: bool) -> str:
    """Say what to know of the hollow in a sentence or two."""
    count = len(made.inside)
    says = [f"{'One hollow' if count == 1 else f'{count} hollows'} behind a wall of {made.wall * MM:g} mm."]
    if inside:
        named = ", ".join(f"'{name}'" for name in inside)
        stands = "stands" if len(inside) == 1 else "stand"
        says.append(
            f"In it {stands} {named}, as drawn: where shell and insert meet they are one, where they do not the insert "
            "needs a seat."
        )
    if made.drains and coated:
        says.append("The coat is counted on the skin of the hollow as well, as dipping leaves it.")
    if not made.drains:
        says.append("It is closed: a print of it keeps its powder or resin inside unless it is drained first.")
    return " ".join(says)
