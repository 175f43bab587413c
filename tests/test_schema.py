"""The published schema of results.json: valid, complete, and met by what the samples give.

The validator is the independent library jsonschema; the schema itself is held against its metaschema (draft 2020-12).
"""

from __future__ import annotations

import copy
import json
import math
from collections.abc import Callable, Iterator
from typing import Any

import pytest
from jsonschema import Draft202012Validator
from studied import SAMPLES, sample

from meshlure.results import schema

Tree = dict[str, Any]

UNITS = {
    "kg_m3": "kg/m3",
    "g_cm3": "g/cm3",
    "g_kg": "g/kg",
    "g_mm2": "g mm2",
    "g_mm": "g mm",
    "m2_s": "m2/s",
    "m_s": "m/s",
    "mm3": "mm3",
    "mm2": "mm2",
    "g_per_mm": "g",
    "deg_per_mm": "degrees",
    "deg_per_0_1g_10mm": "degrees",
    "mm": "mm",
    "deg": "degrees",
    "g": "g",
    "c": "degrees celsius",
    "n": "n",
    "m": "m",
    "s": "s",
}
"""By the end of a key, the unit that its description must name; the longest end that fits counts."""


def nodes(node: Any, path: str = "$") -> Iterator[tuple[str, Tree]]:
    """Every schema within the schema with its path."""
    yield path, node
    for name, inner in node.get("properties", {}).items():
        yield from nodes(inner, f"{path}.{name}")
    if isinstance(node.get("items"), dict):
        yield from nodes(node["items"], f"{path}[]")
    for name, inner in node.get("$defs", {}).items():
        yield from nodes(inner, f"#{name}")


def keys() -> Iterator[tuple[str, str, Tree]]:
    """Every key of the tree: its path, its name, its schema."""
    for path, node in nodes(schema()):
        for name, inner in node.get("properties", {}).items():
            yield f"{path}.{name}", name, inner


def faults(tree: Any) -> list[str]:
    return [f"{error.json_path}: {error.message[:200]}" for error in Draft202012Validator(schema()).iter_errors(tree)]


def as_written(name: str) -> Tree:
    tree: Tree = json.loads(sample(name).to_json())
    return tree


def test_it_is_a_schema() -> None:
    Draft202012Validator.check_schema(schema())
    assert schema()["$schema"] == "https://json-schema.org/draft/2020-12/schema"


def test_every_copy_is_a_fresh_one() -> None:
    schema()["properties"].clear()
    assert schema()["properties"]


@pytest.mark.parametrize("name", SAMPLES)
def test_the_samples_meet_it(name: str) -> None:
    assert faults(as_written(name)) == []


def test_every_key_is_described() -> None:
    for path, _, node in keys():
        assert len(node.get("description", "")) >= 5, path


def test_every_key_with_a_unit_names_it_in_its_description() -> None:
    found = 0
    for path, name, node in keys():
        ends = [end for end in UNITS if name == end or name.endswith(f"_{end}")]
        if ends:
            found += 1
            said = f" {node['description'].casefold()} ".replace(".", " ").replace(",", " ").replace(";", " ")
            assert f" {UNITS[max(ends, key=len)]} " in said, path
    assert found >= 80


@pytest.mark.parametrize(
    ("table", "unit"), [("$.drag[].parts.", "mm2. "), ("$.timings_s.", "s. "), ("#metacentric.", "mm. ")]
)
def test_keys_that_share_a_unit_name_it_too(table: str, unit: str) -> None:
    shared = [node["description"] for path, _, node in keys() if path.startswith(table)]
    assert len(shared) >= 3
    assert all(description.startswith(unit) for description in shared), shared


OWN = {"balance", "chamber", "comparison", "hollow", "mould", "pour"}
"""Keys that stand only in what the command of that name wrote."""


def test_every_shape_of_ours_is_closed_and_its_keys_are_always_there() -> None:
    for path, node in nodes(schema()):
        if "properties" in node:
            assert node["additionalProperties"] is False, path
            own = OWN if path == "$" else set()
            assert sorted(node["required"]) == sorted(node["properties"].keys() - own), path


def test_every_list_says_what_is_in_it() -> None:
    for path, node in nodes(schema()):
        if node.get("type") == "array":
            assert node["items"], path


NULLS = {
    "$.findings[].piece", "$.findings[].count",
    "$.facets[].deficit_g",
    "$.pieces[].material", "$.pieces[].density_g_cm3",
    "$.hardware[].item",
    "$.buoyancy.water.temperature_c", "$.buoyancy.water.salinity_g_kg",
    "#posture.upright", "#posture.up", "#posture.nose_up_deg", "#posture.lean_deg", "#posture.free",
    "#posture.waterline_mm", "#posture.waterplane_mm2", "#posture.barrier_g_mm", "#posture.balls",
    "#metacentric.fore_aft", "#metacentric.sideways",
    "#sensitivity.deg_per_0_1g_10mm", "#sensitivity.deg_per_mm", "#sensitivity.g_per_mm",
    "#sensitivity.lean_deg_per_0_1g_10mm", "#sensitivity.lean_deg_per_mm",
    "$.balls[].nose_up_deg", "$.balls[].lean_deg",
    "$.flight.pressure_margin_mm", "$.flight.swing_hz", "$.flight.swings", "$.flight.ratios.against",
    "$.flight.against",
    "$.flight.balls", "$.flight.better", "$.flight.better.added_g",
    "$.readiness.reasons[].quantity", "$.readiness.reasons[].wanted", "$.readiness.reasons[].found",
    "$.sinking.seconds_to_1m", "$.sinking.seconds_to_3m",
    "$.sinking.starts[].seconds_to_1m", "$.sinking.starts[].seconds_to_3m",
    "$.budget.rows[].nose_up_deg", "$.budget.rows[].lean_deg", "$.budget.monte_carlo.nose_up_deg",
    "$.budget.monte_carlo.lean_deg", "$.budget.monte_carlo.limits[].share", "$.budget.monte_carlo.pass_share",
    "$.comparison.conditions.water.temperature_c", "$.comparison.conditions.water.salinity_g_kg",
    "$.comparison.rows[].differences[].by", "$.comparison.rows[].differences[].low",
    "$.comparison.rows[].differences[].high", "$.comparison.rows[].differences[].counts",
    "$.mould.undercut_at_mm", "$.mould.undercuts[].piece", "$.mould.sprue", "$.mould.box_mm",
    "$.mould.keys[].gap_mm", "$.mould.pieces[].file",
    "$.changes[].piece", "$.changes[].by_mm", "$.changes[].mass_g", "$.changes[].from_nose_mm", "$.changes[].reserve_g",
    "$.balance.target", "$.balance.target.sink_m_s", "$.balance.options[].length_mm",
    "$.balance.options[].spacing_mm", "$.balance.options[].glue", "$.balance.options[].nose_up_deg",
    "$.balance.options[].lean_deg", "$.balance.options[].clear_mm", "$.balance.options[].score",
    "$.balance.options[].sink_m_s", "$.balance.options[].flight.trim_deg", "$.balance.taken", "$.balance.body_density",
    "$.balance.body_density.mixes[].resin",
    "$.balance.body_density.mixes[].balloons", "$.balance.body_density.outcome",
    "$.balance.body_density.outcome.nose_up_deg",
    "$.balance.body_density.outcome.lean_deg", "$.changes[].towards",
    "$.chamber.taken", "$.chamber.options[].clear_mm", "$.chamber.options[].nearest",
    "$.chamber.options[].opening", "$.chamber.options[].tube", "$.chamber.options[].flooded.nose_up_deg",
    "#chamber_rest.nose_up_deg", "#chamber_rest.lean_deg", "#chamber_rest.bore_slope_deg", "#chamber_flight.trim_deg",
    "$.measured.displaced", "$.measured.body", "$.measured.coat",
    "$.measured.explanations[].left_dry_g", "$.measured.explanations[].left_reserve_g",
    "$.pour.mix", "$.pour.batch", "$.pour.shares", "$.pour.print", "$.pour.inserts[].material",
    "$.pour.wanted.density_g_cm3", "$.pour.print.target_g", "$.pour.print.rows[].infill_share",
    "#outcome.nose_up_deg", "#outcome.lean_deg",
    "$.line", "$.limits[].value", "$.limits[].met", "$.measured", "$.measured.water_c",
}  # fmt: skip


def test_null_is_allowed_only_where_a_value_may_have_no_meaning() -> None:
    allowed = set()
    for path, _, node in keys():
        kinds = node.get("type", [])
        branches = [branch.get("type") for branch in node.get("anyOf", [])]
        if "null" in kinds or "null" in branches or None in node.get("enum", []):
            allowed.add(path)
            assert "null" in node["description"], path
    assert allowed == NULLS


def _slip(tree: Tree) -> None:
    tree["weight"]["mas_g"] = tree["weight"]["mass_g"]


def _gone(tree: Tree) -> None:
    del tree["buoyancy"]["reserve_low_g"]


def _null(tree: Tree) -> None:
    tree["weight"]["mass_g"] = None


def _dry_waterline(tree: Tree) -> None:
    tree["postures"][0]["waterline_mm"] = None


def _flat(tree: Tree) -> None:
    tree["weight"]["centre_mm"] = [1.0, 2.0]


def _word(tree: Tree) -> None:
    tree["buoyancy"]["state"] = "hovers"


def _deep(tree: Tree) -> None:
    tree["postures"][0]["sensitivity"]["deg_per_cm"] = 1.0


@pytest.mark.parametrize("spoil", [_slip, _gone, _null, _dry_waterline, _flat, _word, _deep])
def test_a_slip_is_caught(spoil: Callable[[Tree], None]) -> None:
    tree = as_written("minnow/minnow.toml")
    spoiled = copy.deepcopy(tree)
    spoil(spoiled)
    assert len(faults(spoiled)) == 1


@pytest.mark.parametrize("name", SAMPLES)
def test_what_a_schema_cannot_say(name: str) -> None:
    tree = as_written(name)
    for table in ("rose", "stations"):
        assert len({len(column) for column in tree[table].values()}) == 1, table
    directions = [*tree["frame"].values(), *tree["rose"]["axis"], *(area["axis"] for area in tree["areas"])]
    directions += [*tree["weight"]["principal_axes"], *(p["up"] for p in tree["postures"] if p["up"] is not None)]
    for direction in directions:
        assert math.hypot(*direction) == pytest.approx(1.0, abs=1e-9)
    for curve in tree["righting"]:
        assert len(curve["heel_deg"]) == len(curve["arm_mm"])
        assert curve["heel_deg"] == sorted(curve["heel_deg"])
        assert tree["postures"][curve["posture"]]["kind"] == "floating"
    for row in tree["drag"]:
        assert sum(row["parts"].values()) == pytest.approx(row["drag_area_mm2"], rel=1e-9)
    levels = [finding["level"] for finding in tree["findings"]]
    assert levels == sorted(levels, key=["fault", "warning", "note"].index)
