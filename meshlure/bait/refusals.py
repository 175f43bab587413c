"""Findings that leave a mass or a volume undefined, turned into the message that stops the run."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from typing import Final

from meshlure import tolerances
from meshlure.errors import Fault, InputError
from meshlure.findings import Finding

_CLOSED: Final = "a closed surface: two faces at every edge, both wound so that they look outwards"

_ALLOWED: Final = {
    "open-edges": _CLOSED,
    "mixed-winding": _CLOSED,
    "crowded-edges": _CLOSED,
    "duplicate-faces": _CLOSED,
    "flat-shells": _CLOSED,
    "cavity-crossing": "cavities wholly inside the solid, and solids that look outwards",
    "nothing-left": "inserts and hollows that leave some of the body",
    "inserts-overlap": "inserts that share no space, or a later one that says replaces",
    "touches-nothing": f"at most {tolerances.TOUCH_GAP * 1e3:g} mm from the body or from a piece that touches it",
}
"""By the finding's code: what would not have stopped the run."""


def refuse(findings: Sequence[Finding], places: Mapping[str, str]) -> None:
    """Stop where findings leave something undefined.

    Parameters
    ----------
    findings : sequence of Finding
    places : mapping
        By piece name: the file that it came from.

    Raises
    ------
    InputError
        With every finding that stops, not only the first.
    """
    stops = [finding for finding in findings if finding.stops]
    if stops:
        raise InputError([_fault(finding, places) for finding in stops])


def _fault(finding: Finding, places: Mapping[str, str]) -> Fault:
    piece = finding.piece or ""
    return Fault(
        what=finding.message,
        where=places.get(piece, piece),
        allowed=_ALLOWED.get(finding.code, ""),
        next_step=_step(finding.advice),
    )


def _step(advice: str) -> str:
    """Return advice as it stands behind "next:", like those of all other faults."""
    return advice[:1].lower() + advice[1:].removesuffix(".")
