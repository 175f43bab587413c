"""What is said when a job cannot be done: what, where, the value found, what is allowed, the next step."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass


@dataclass(frozen=True)
class Fault:
    """One thing wrong with the input.

    Attributes
    ----------
    what : str
        What is wrong, as a sentence without its full stop.
    where : str
        File, face, key or option; empty where the whole run is meant.
    found : str
        The value found; empty where nothing was found.
    allowed : str
        What would have been accepted; empty where the sentence already says it.
    next_step : str
        What the user can do about it.
    """

    what: str
    where: str = ""
    found: str = ""
    allowed: str = ""
    next_step: str = ""

    def __str__(self) -> str:
        parts = [f"{self.where}: {self.what}" if self.where else self.what]
        if self.found:
            parts.append(f"found: {self.found}")
        if self.allowed:
            parts.append(f"allowed: {self.allowed}")
        if self.next_step:
            parts.append(f"next: {self.next_step}")
        return "\n  ".join(parts)


class InputError(Exception):
    """The input cannot be used; carries every fault found, not only the first.

    Parameters
    ----------
    faults : Fault or sequence of Fault
        At least one.
    """

    def __init__(self, faults: Fault | Sequence[Fault]) -> None:
        self.faults: tuple[Fault, ...] = (faults,) if isinstance(faults, Fault) else tuple(faults)
        super().__init__("\n".join(map(str, self.faults)))
