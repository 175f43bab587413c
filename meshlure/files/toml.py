"""TOML text as a table of keys, or the line that is no TOML."""

from __future__ import annotations

import re
import tomllib
from pathlib import Path
from typing import Any, Final

from meshlure.errors import Fault, InputError
from meshlure.files.source import read_source

_LARGEST: Final = 1_000_000
"""Bytes. A bait file is some kilobytes; a mesh or a picture named by mistake is not worth parsing."""

_LINE: Final = re.compile(r"\s*\(at (?:line (?P<line>\d+), column (?P<column>\d+)|end of document)\)")


def read_toml(path: Path) -> dict[str, Any]:
    """Table of a TOML file.

    Raises
    ------
    InputError
        As `toml_text` and `toml_table`.
    """
    return toml_table(toml_text(path), path)


def toml_text(path: Path) -> str:
    """Text of a TOML file.

    Raises
    ------
    InputError
        The file cannot be read, is larger than a bait file can be, or no text (with the line).
    """
    data = read_source(path, "bait file")
    if len(data) > _LARGEST:
        found, allowed = f"{len(data):,} bytes", f"up to {_LARGEST:,} bytes"
        raise InputError(
            Fault("the file is too large for a bait file", str(path), found, allowed, "name the bait file")
        )
    try:
        return data.decode("utf-8-sig")
    except UnicodeDecodeError as error:
        line = data.count(b"\n", 0, error.start) + 1
        step = "save it as UTF-8 text; if it is a mesh, name the bait file in its place"
        raise InputError(
            Fault(
                "the bait file is no UTF-8 text",
                f"{path}, line {line}",
                repr(data[error.start : error.start + 1]),
                "",
                step,
            )
        ) from None


def toml_table(text: str, path: Path) -> dict[str, Any]:
    """Table of TOML text that was read from ``path``.

    Raises
    ------
    InputError
        It is no TOML (with the line).
    """
    try:
        return tomllib.loads(text)
    except tomllib.TOMLDecodeError as error:
        raise InputError(_fault(str(error), text, path)) from None
    except RecursionError:
        raise InputError(
            Fault("the bait file is nested too deeply", str(path), next_step="remove the superfluous brackets")
        ) from None


def _fault(message: str, text: str, path: Path) -> Fault:
    match = _LINE.search(message)
    lines = text.splitlines()
    number = int(match["line"]) if match and match["line"] else max(len(lines), 1)
    line = lines[number - 1].strip()[:60] if number <= len(lines) else ""
    shown = "".join(c if c.isprintable() else " " for c in line)
    what = _LINE.sub("", message)
    step = "correct the line; text stands in quotes, and a section's name in square brackets"
    if "\\" in line:
        step = "write / for \\ in the names of files, or put the name between single quotes"
    return Fault(f"the bait file is no TOML: {what[:1].lower()}{what[1:]}", f"{path}, line {number}", shown, "", step)
