"""A tree as JSON text that is harmless wherever it is shown."""

from __future__ import annotations

import json
import re
from collections.abc import Mapping
from typing import Any, Final

_STRANGE: Final = re.compile(r"[^\n\x20-\x7e]")


def json_text(tree: Mapping[str, Any]) -> str:
    """Return a tree as JSON, a line's end behind it.

    Parameters
    ----------
    tree : mapping

    Raises
    ------
    ValueError
        A number in it is not finite.

    Notes
    -----
    Letters stand as they are. What is no printable character (RFC 8259 only asks it of the first thirty-two) is written
    by its number, as JSON allows of every one: a name with a terminal's control characters in it, or one that turns the
    direction of writing, steers nothing where the text is printed, and reads the same for a program. So are the
    stand-ins for bytes of a file's name that are no UTF-8, which could not be written at all.
    """
    text = json.dumps(tree, indent=1, allow_nan=False, ensure_ascii=False) + "\n"
    return _STRANGE.sub(lambda found: found[0] if found[0].isprintable() else json.dumps(found[0])[1:-1], text)
