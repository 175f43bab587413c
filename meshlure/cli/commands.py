"""The commands, by the job that they do; a command's module has its name, its help and a function of its name."""

from __future__ import annotations

from types import ModuleType
from typing import Final

from meshlure.cli import balance, chamber, mould, pour, report

JOBS: Final[dict[str, tuple[ModuleType, ...]]] = {
    "Study a bait": (report,),
    "Change its design": (balance, chamber),
    "Make it": (mould, pour),
}
"""In the order in which a maker comes to them."""
