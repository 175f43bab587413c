"""Where the stock's tables lie, and which name of a table a user may have meant."""

from __future__ import annotations

import difflib
import re
from collections.abc import Mapping
from typing import Any

from meshlure.errors import Fault, InputError

_BY = re.compile(r"(?<=\d)\s*[x×]\s*(?=\d)")
_NUMBER = re.compile(r"\d+\.\d+")
_MARKS = re.compile(r"[#_\-\s]+")


def read_table(name: str) -> dict[str, Any]:
    """Contents of one of the stock's TOML tables.

    Parameters
    ----------
    name : str
        File name, such as ``materials.toml``.
    """
    import importlib.resources
    import tomllib

    return tomllib.loads((importlib.resources.files("meshlure.stock") / name).read_text(encoding="utf-8"))


def plain(name: str) -> str:
    """Name without what does not matter in it: case, spaces, hyphens, hashes, trailing zeros of a decimal."""
    words = _BY.sub(" x ", name.casefold().strip())
    words = _NUMBER.sub(lambda match: f"{float(match[0]):g}", words)
    return _MARKS.sub(" ", words).strip()


def unknown(what: str, name: str, where: str, known: Mapping[str, str], table: str, next_step: str) -> InputError:
    """Refusal of a name that is not in a table, with the names nearest to it.

    Parameters
    ----------
    what : str
        What the table holds, such as "material".
    name, where : str
        The name found, and the key or option that it stands at.
    known : mapping
        Plain spelling (see `plain`) to the name as the table has it.
    table : str
        File name of the table, told where no name is near.
    next_step : str
        What else the user can do.
    """
    asked = plain(name)
    close = difflib.get_close_matches(asked, known, n=5, cutoff=0.6)
    held = [] if close else sorted(key for key in known if set(asked.split()) & set(key.split()))
    near = list(dict.fromkeys(known[key] for key in close + held))[:5]
    allowed = f"near it are: {', '.join(near)}" if near else f"one of the names in meshlure/stock/{table}"
    return InputError(Fault(f"no {what} of this name is in stock", where, name, allowed, next_step))
