"""Findings that leave a mass or a volume undefined, turned into the message that stops the run."""

from __future__ import annotations

from collections.abc import Mapping, Sequence

from meshlure.errors import Fault, InputError
from meshlure.findings import Finding


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
    where = places.get(finding.piece or "", finding.piece or "")
    return Fault(what=finding.message, where=where, next_step=finding.advice)
