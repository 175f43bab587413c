"""What the page lets a maker save: read back with the standard library's csv (RFC 4180) and held against the tree."""

from __future__ import annotations

import base64
import csv
import io
from typing import Any

import invented_baits as baits
import pytest

from meshlure.report.saved import csv_rows, file_name, text, with_files
from meshlure.report.table import Table


def read(address: str) -> list[dict[str, str]]:
    kind, _, packed = address.partition(",")
    assert kind == "data:text/csv;charset=utf-8;base64"
    content = base64.b64decode(packed, validate=True).decode("utf-8-sig")
    rows = list(csv.reader(io.StringIO(content, newline="")))
    assert {len(row) for row in rows} == {len(rows[0])}
    assert len(set(rows[0])) == len(rows[0])
    return [dict(zip(rows[0], row, strict=True)) for row in rows[1:]]


@pytest.fixture(scope="module")
def saved() -> dict[str, list[dict[str, str]]]:
    results = baits.minnow_results()
    shown = {name: Table(name, (), (("",),)) for name in csv_rows(results)}
    tables = with_files(shown, results)
    return {name: read(table.saved.address) for name, table in tables.items() if table is not None and table.saved}


def numbers(rows: list[dict[str, str]], key: str) -> list[float]:
    return [float(row[key]) for row in rows]


def test_every_number_comes_back_to_its_last_digit(saved: dict[str, list[dict[str, str]]]) -> None:
    tree = baits.minnow_results()
    for key in tree["stations"]:
        assert numbers(saved["stations"], key) == tree["stations"][key]
    assert numbers(saved["waters"], "reserve_g") == [row["reserve_g"] for row in tree["waters"]]
    assert numbers(saved["rose"], "area_mm2") == tree["rose"]["area_mm2"]
    assert numbers(saved["rose"], "axis_y") == [axis[1] for axis in tree["rose"]["axis"]]
    assert numbers(saved["drag"], "drag_area_mm2") == [row["drag_area_mm2"] for row in tree["drag"]]
    assert numbers(saved["parts"], "hooks_mm2") == [row["parts"]["hooks"] for row in tree["drag"]]
    assert numbers(saved["launch"], "distance_m") == tree["flight"]["launch"]["distance_m"]
    assert numbers(saved["buoyancy"], "reserve_low_g") == [tree["buoyancy"]["reserve_low_g"]]
    paths = [value for path in tree["flight"]["paths"] for value in path["y_m"]]
    assert numbers(saved["paths"], "y_m") == paths
    arms = [arm for curve in tree["righting"] if curve["plane"] == "sideways" for arm in curve["arm_mm"]]
    assert [row["arm_mm"] for row in saved["righting_sideways"]] == ["" if arm is None else repr(arm) for arm in arms]


def test_pieces_without_a_value_leave_their_cell_empty(saved: dict[str, list[dict[str, str]]]) -> None:
    hollow = next(row for row in saved["pieces"] if row["role"] == "void")
    assert hollow["density_g_cm3"] == ""
    assert hollow["name"] == "rattle chamber"


def test_columns_carry_their_units(saved: dict[str, list[dict[str, str]]]) -> None:
    units = ("_g", "_mm", "_mm2", "_mm3", "_deg", "_m", "_m_s", "_n", "_c", "_kg_m3", "_g_cm3", "_n_mm", "_g_kg",
             "_m2_s", "_gf", "_x", "_y", "_z")  # fmt: skip
    bare = {"cd", "cd_low", "cd_high", "reynolds_length", "reynolds_diameter", "posture"}
    for name, rows in saved.items():
        for key, value in rows[0].items():
            if value and value.replace(".", "").replace("-", "").isdigit():
                assert key.endswith(units) or key in bare, (name, key)


def test_a_name_cannot_become_a_formula() -> None:
    rows: list[dict[str, Any]] = [{"name": "=1+1", "mass_g": -1.5}, {"name": 'a "b", c', "mass_g": None}]
    found = list(csv.reader(io.StringIO(text(rows), newline="")))
    assert found == [["name", "mass_g"], ["'=1+1", "-1.5"], ['a "b", c', ""]]


def test_file_names_are_plain() -> None:
    assert file_name("Quillmere minnow 95", "righting_fore_aft") == "quillmere-minnow-95-righting-fore-aft.csv"
    assert file_name("../../ \u202eß", "rose") == "bait-rose.csv"
    assert file_name(None, "rose") == "bait-rose.csv"
