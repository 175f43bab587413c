"""The contract of results.json: which keys it has, their units and meaning, as a JSON Schema."""

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
    text = files("meshlure.results").joinpath("schema.json").read_text(encoding="utf-8")
    loaded: dict[str, Any] = json.loads(text)
    return loaded
