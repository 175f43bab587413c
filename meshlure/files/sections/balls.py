"""[[balls]]: balls that run in a hollow space."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from meshlure.files.keys import Keys
from meshlure.files.nearness import did_you_mean
from meshlure.files.sections.inserts import InsertSection
from meshlure.files.sections.substance import Substance, read_substance

MOST_BALLS = 200
LARGEST_BALL = 0.1
"""m."""


@dataclass(frozen=True)
class BallsSection:
    """Equal balls in a row along their chamber's long axis, against one of its end walls.

    Attributes
    ----------
    chamber : str
        Name of a void insert.
    diameter : float, m
    count : int
    substance : Substance
    at : str or None
        End where they lie, "nose" or "tail"; None for the one that is lower in each posture.
    """

    chamber: str
    diameter: float
    count: int
    substance: Substance
    at: str | None = None


def read_balls(keys: Keys, inserts: Sequence[InsertSection], filled: Sequence[str]) -> BallsSection:
    """Read one [[balls]].

    Parameters
    ----------
    keys : Keys
    inserts : sequence of InsertSection
        All of them; the chamber must be one that is a void.
    filled : sequence of str
        Chambers that earlier balls lie in.
    """
    section = BallsSection(
        keys.asked_text("chamber", "rattle chamber"),
        keys.asked_quantity("diameter", "length", "6 mm", positive=True, most=LARGEST_BALL),
        keys.whole("count", 1, MOST_BALLS),
        read_substance(keys) or Substance(),
        keys.choice("at", ("nose", "tail")),
    )
    voids = [insert.name for insert in inserts if insert.void is not None]
    if not section.chamber:
        pass  # already told: it is missing or no text
    elif section.chamber in filled:
        step = "put the balls of one chamber into one [[balls]], or draw two chambers"
        keys.fault(
            "chamber", "other balls lie in this chamber already", repr(section.chamber), "one [[balls]] a chamber", step
        )
    elif section.chamber not in voids:
        solid = any(insert.name == section.chamber for insert in inserts)
        what = "balls run only in a hollow space, and this insert is solid" if solid else "no insert of this name"
        step = (
            "give the insert void = 'sealed' in place of its material" if solid else "add the chamber as an [[insert]]"
        )
        allowed = ", ".join(repr(name) for name in voids) or "a void insert; the file has none"
        keys.fault("chamber", what, repr(section.chamber), allowed, did_you_mean(section.chamber, voids, step))
    keys.close()
    return section
