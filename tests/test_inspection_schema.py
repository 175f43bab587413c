"""The published schema of an inspection's JSON: valid, complete, and met by what every mesh file of the tests gives.

The validator is the independent library jsonschema; the schema itself is held against its metaschema (draft 2020-12).
"""

from __future__ import annotations

import json
from collections.abc import Iterator
from functools import cache
from pathlib import Path
from typing import Any

import pytest
from jsonschema import Draft202012Validator

from meshlure.files.formats import FORMATS
from meshlure.geometry.mending.steps import Wishes
from meshlure.inspecting import account, inspect
from meshlure.results import inspection_schema

TESTS = Path(__file__).parent
FILES = sorted(
    path
    for folder in ("bad_meshes", "formats")
    for path in (TESTS / folder).iterdir()
    if path.suffix in FORMATS and path.suffix != ".step"
)

Tree = dict[str, Any]


@cache
def tree(path: Path) -> Tree:
    """What is printed of a file that is inspected and mended, as it is read from JSON."""
    found = inspect(path, "mm", Wishes(mirror=True))
    made: Tree = json.loads(json.dumps(account([found]), allow_nan=False))
    return made


def faults(found: Tree) -> list[str]:
    validator = Draft202012Validator(inspection_schema())
    return [f"{error.json_path}: {error.message[:200]}" for error in validator.iter_errors(found)]


def nodes(node: Any, path: str = "$") -> Iterator[tuple[str, Tree]]:
    yield path, node
    for name, inner in (node.get("properties", {}) | node.get("$defs", {})).items():
        yield from nodes(inner, f"{path}.{name}")
    if isinstance(node.get("items"), dict):
        yield from nodes(node["items"], f"{path}[]")


def test_it_is_a_schema() -> None:
    Draft202012Validator.check_schema(inspection_schema())
    inspection_schema()["properties"].clear()
    assert inspection_schema()["properties"], "every copy is a fresh one"


def test_every_file_meets_it() -> None:
    assert len(FILES) > 120
    assert {path.name: faults(tree(path)) for path in FILES if faults(tree(path))} == {}
    verdicts = {tree(path)["meshes"][0]["verdict"] for path in FILES}
    assert verdicts == {"sound", "findings", "unreadable"}


def test_every_shape_is_closed_and_every_key_is_described_with_its_unit() -> None:
    for path, node in nodes(inspection_schema()):
        if "properties" in node:
            assert node["additionalProperties"] is False, path
            assert node["required"] == list(node["properties"]), path
            assert node["description"], path
        for name, inner in node.get("properties", {}).items():
            assert len(inner["description"]) >= 5, f"{path}.{name}"
            unit = next((unit for unit in ("mm3", "mm2", "mm") if name.endswith(f"_{unit}")), None)
            assert unit is None or inner["description"].startswith(f"{unit}. "), f"{path}.{name}"


NULLS = ("type", "anyOf", "enum")


def test_every_null_that_is_allowed_is_explained() -> None:
    for path, node in nodes(inspection_schema()):
        for name, inner in node.get("properties", {}).items():
            kinds = json.dumps([inner.get(key) for key in NULLS])
            if '"null"' in kinds or (inner.get("enum") or [0])[-1] is None:
                assert "null" in inner["description"], f"{path}.{name}"


@pytest.mark.parametrize("slip", ["a key too many", "a key too few", "a word for a number", "an unknown verdict"])
def test_a_slip_is_found(slip: str) -> None:
    found = json.loads(json.dumps(tree(TESTS / "bad_meshes" / "half_body.stl")))
    assert faults(found) == []
    row = found["meshes"][0]
    if slip == "a key too many":
        row["volume"] = 1.0
    elif slip == "a key too few":
        del row["mending"]["closed"]
    elif slip == "a word for a number":
        row["mending"]["steps"][0]["moved_mm"] = "little"
    else:
        row["verdict"] = "fine"
    assert len(faults(found)) == 1
