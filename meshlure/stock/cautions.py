"""What to mind at the bench, by what sets it off; short reminders that defer to safety sheets and local rules."""

from __future__ import annotations

import functools
from collections.abc import Iterable
from dataclasses import dataclass

from meshlure.stock import shelf


@dataclass(frozen=True)
class Caution:
    """One reminder.

    Attributes
    ----------
    trigger : str
        What sets it off, such as "lead" or "hooks".
    text : str
    """

    trigger: str
    text: str


@functools.cache
def all_cautions() -> tuple[Caution, ...]:
    """All reminders, in the order that they are printed in."""
    return tuple(Caution(row["trigger"], row["text"]) for row in shelf.read_table("cautions.toml")["caution"])


def cautions(triggers: Iterable[str]) -> tuple[Caution, ...]:
    """Reminders that these triggers set off, each once, always in the same order.

    Parameters
    ----------
    triggers : iterable of str
        From ``Material.kinds`` and ``HardwareItem.kinds``; a bait with a ball chamber adds "small parts", a pressure
        casting adds "pressure".

    Raises
    ------
    ValueError
        For a trigger that the table does not hold: a fault of the program, for users do not write triggers.
    """
    asked = set(triggers)
    strange = asked - {caution.trigger for caution in all_cautions()}
    if strange:
        raise ValueError(f"no caution is kept for {', '.join(sorted(strange))}")
    return tuple(caution for caution in all_cautions() if caution.trigger in asked)
