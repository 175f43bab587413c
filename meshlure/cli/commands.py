"""The commands, by the job that they do; a command's module has its name, its help and a function of its name."""

from __future__ import annotations

from types import ModuleType
from typing import Final

from meshlure.cli import (
    balance,
    balls,
    chamber,
    compare,
    hardware,
    inspect,
    materials,
    mould,
    new,
    pour,
    report,
    rods,
    sheet,
    waters,
)

JOBS: Final[dict[str, tuple[ModuleType, ...]]] = {
    "Begin": (new,),
    "Study a bait": (report, compare, inspect),
    "Change its design": (balance, chamber),
    "Make it": (mould, pour, sheet),
    "Look up stock": (materials, waters, hardware, balls, rods),
}
"""In the order in which a maker comes to them."""
