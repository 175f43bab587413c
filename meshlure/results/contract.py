"""The contracts of results.json and of inspections: which keys they have, their units and meaning, as JSON Schemas."""

from __future__ import annotations

import json
from importlib.resources import files
from typing import Any


def schema() -> dict[str, Any]:
    """Return the JSON Schema (draft 2020-12) of results.json.

    Returns
    -------
    dict
        A fresh copy. Every key has a description with its unit; unknown keys are not allowed, so that a slip in a
        script that writes or reads them is found. Later versions of the package may add keys.

    Examples
    --------
    >>> from meshlure.results import schema
    >>> schema()["properties"]["skin_mm2"]["description"]
    "mm2. The body's own skin, which takes the coat."
    """
    return _read("schema.json")


def inspection_schema() -> dict[str, Any]:
    """Return the JSON Schema (draft 2020-12) of what `meshlure inspect --json` prints.

    Returns
    -------
    dict
        A fresh copy; as `schema`.

    Examples
    --------
    >>> from meshlure.results import inspection_schema
    >>> inspection_schema()["properties"]["meshes"]["items"]["properties"]["area_mm2"]["description"]
    "mm2. Sum of the faces; null where the file could not be read."
    """
    return _read("inspection.json")


def _read(name: str) -> dict[str, Any]:
    loaded: dict[str, Any] = json.loads(files("meshlure.results").joinpath(name).read_text(encoding="utf-8"))
    return loaded
