"""The comparison on the page holds the published table's own values, and what the estimate makes of them today."""

from __future__ import annotations

import csv
from pathlib import Path

import pytest

from meshlure import estimate_drag
from meshlure.geometry.surface import Surface
from meshlure.report import compared

TABLE = Path(__file__).parent.parent / "authorities" / "drag_table.csv"


def test_every_scored_row_of_the_published_table_is_shown() -> None:
    text = [line for line in TABLE.read_text(encoding="utf-8").splitlines() if not line.startswith("#")]
    scored = sorted(float(row["cd"]) for row in csv.DictReader(text) if row["scored"] == "1")
    assert len(scored) == 30
    assert sorted(row["published"] for row in compared.rows()) == pytest.approx(scored)


def test_the_estimates_shown_are_those_of_today() -> None:
    import trimesh

    ball = trimesh.creation.icosphere(subdivisions=5)
    shown = next(row for row in compared.rows() if row["body"] == "smooth sphere" and row["published"] == 0.48)
    found = estimate_drag(Surface(ball.vertices, ball.faces), leads=(1, 0, 0), reynolds=1e5, layer="laminar")
    assert found.cd == pytest.approx(shown["estimate"], rel=0.02)
