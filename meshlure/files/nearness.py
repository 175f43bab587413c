"""What a mistyped name was probably meant to be."""

from __future__ import annotations

import difflib
from collections.abc import Iterable


def nearest(name: str, known: Iterable[str], most: int = 3) -> tuple[str, ...]:
    """Known names that read like ``name``, the likest first; capitals, blanks, hyphens and underscores do not count.

    Parameters
    ----------
    name : str
        What was written.
    known : iterable of str
        What would have been understood.
    most : int
        How many are given at most.
    """
    plain: dict[str, str] = {}
    for word in known:
        plain.setdefault(_plain(word), word)
    return tuple(plain[word] for word in difflib.get_close_matches(_plain(name), plain, n=most, cutoff=0.6))


def did_you_mean(name: str, known: Iterable[str], otherwise: str) -> str:
    """Advice that offers the nearest known names, or ``otherwise`` where none is near."""
    near = nearest(name, known)
    return f"did you mean {' or '.join(repr(word) for word in near)}?" if near else otherwise


def _plain(name: str) -> str:
    return name.casefold().replace("_", "").replace("-", "").replace(" ", "")
