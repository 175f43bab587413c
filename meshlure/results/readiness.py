"""The answer to the question before all others: make the bait as it is, or not yet, and what to do first."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import asdict
from typing import Any

from meshlure.files.sections.target import TargetSection
from meshlure.results.objections import Objection, objections

Tree = dict[str, Any]


def readiness(tree: Mapping[str, Any], target: TargetSection | None) -> Tree:
    """Return whether a bait is ready to be made, why not, what to do first, and what the answer rests on.

    Parameters
    ----------
    tree : mapping
        Of results.json, with everything else in it.
    target : TargetSection or None
        What the bait file asks for.

    Returns
    -------
    dict
        ``state`` is "not yet" where something stops it, "one first" where one copy, weighed, would settle what is in
        doubt, else "ready".
    """
    found = objections(tree, target)
    state = "not yet" if any(each.stops for each in found) else "one first" if found else "ready"
    return {
        "state": state,
        "words": _words(state, found, tree, target),
        "reasons": [asdict(each) for each in found],
        "first": _first(found, tree, target),
        "checked": _checked(tree, target),
    }


def _words(state: str, found: Sequence[Objection], tree: Mapping[str, Any], target: TargetSection | None) -> str:
    if state == "not yet":
        return f"Not yet: {found[0].words}{_more(found)}."
    if state == "one first":
        return f"Make one and weigh it before the rest: {found[0].words}{_more(found)}."
    asked = [words for words, is_so in (("its target", target is not None), ("your limits", tree["limits"])) if is_so]
    if asked:
        return f"Ready to make: no faults, and it meets {' and '.join(asked)}."
    return "Ready to make, if this is what you want: no faults, but the bait file sets no target and no limits."


def _more(found: Sequence[Objection]) -> str:
    return f", and {len(found) - 1} more reason{'s' if len(found) > 2 else ''}" if len(found) > 1 else ""


def _first(found: Sequence[Objection], tree: Mapping[str, Any], target: TargetSection | None) -> list[str]:
    """What to do first: the one or two steps that matter most, changes that do the same joined by "Or"."""
    kinds = {each.kind for each in found}
    steps = []
    if "fault" in kinds:
        advice = next((f["advice"] for f in tree["findings"] if f["level"] == "fault" and f["advice"]), "")
        steps.append(f"Put the fault right: {advice}." if advice else "Put the faults right.")
    sideways = [row["words"] for row in tree["changes"] if row["towards"] in ("left", "right")]
    fore_aft = [row["words"] for row in tree["changes"] if row["towards"] not in ("left", "right")]
    steps += [" Or: ".join(rows) for rows in (fore_aft, sideways) if rows]
    if target is not None and kinds & {"target", "behaviour"}:
        what = "the body's density" if target.vary == "body density" else "ballast"
        steps.append(f"`meshlure balance` looks for {what} that meets the whole target at once.")
    if "density" in kinds:
        steps.append("Weigh a piece of the real material and state its density: that narrows the band most.")
    if not found:
        steps.append("Weigh the first copy and put what the scale says under [measured]: the next is foretold from it.")
    return steps


def _checked(tree: Mapping[str, Any], target: TargetSection | None) -> str:
    draws = f"{tree['budget']['monte_carlo']['draws']:,}".replace(",", "\u202f")
    parts = ["the meshes", *(["the target"] * (target is not None)), *(["your limits"] * bool(tree["limits"]))]
    return (
        f"Checked: {', '.join(parts)}, the band of the reserve, and {draws} copies drawn by lot from its doubts. "
        "Not checked: how it swims, how strong it is, whether you like it."
    )
