"""Balances of the samples, and of bodies drawn at random: what is promised is what the files read back say.

Authority: the study of the files alone, which knows nothing of the search; centres of gravity and buoyancy added up by
hand from its pieces.
"""

from __future__ import annotations

from dataclasses import replace
from pathlib import Path
from typing import Any

import numpy as np
import pytest
import shapes
from hypothesis import given, settings
from hypothesis import strategies as st
from workbench import bait, hardware, insert

from meshlure.bait.loading import load, read_bait
from meshlure.bait.pieces import Bait
from meshlure.balancing.finding import balance
from meshlure.balancing.flights import Flights
from meshlure.files.baitfile import read_baitfile
from meshlure.files.keys import Keys
from meshlure.files.sections.ballast import read_ballast
from meshlure.files.sections.target import read_target
from meshlure.results.study import Study

SAMPLES = Path(__file__).parents[2] / "samples"
FLIGHT = {"leads": "tail", "verdict": "steady", "trim_deg": 0.0, "distance_m": 40.0}


@pytest.fixture(autouse=True)
def _grounded(monkeypatch: pytest.MonkeyPatch) -> None:
    """Flights take a third of a balance's time and change nothing of what is written."""
    monkeypatch.setattr(Flights, "of", lambda *_: {"flight": FLIGHT, "distance_ratio": 1.0})


def sample(name: str, target: dict[str, Any]) -> Bait:
    """A sample with a target of the test's, and rods of lead and tungsten to meet it with."""
    ballast = read_ballast(
        Keys({"materials": ["lead", "tungsten heavy alloy 90% W"], "shapes": ["rod"]}, "ballast", [])
    )
    plan = read_baitfile(SAMPLES / name)
    return load(replace(plan, target=read_target(Keys(target, "target", [])), ballast=ballast))


def plumb(study: Study) -> float:
    """Degrees between up and the way from the centre of gravity to that of buoyancy, of a bait under water."""
    results = study.results
    weight = np.array(results["weight"]["centre_mm"])
    way = np.array(results["buoyancy"]["centre_mm"]) - weight
    up = np.array(results["postures"][0]["up"])
    return float(np.degrees(np.arccos(np.clip(way @ up / np.linalg.norm(way), -1, 1))))


@pytest.mark.parametrize(
    ("name", "target"),
    [
        ("minnow/minnow_coarse.toml", {"behaviour": "floats", "reserve": "1.0 g", "nose_up": "4 deg"}),
        ("minnow/minnow_coarse.toml", {"behaviour": "sinks", "reserve": "-3 g", "nose_up": "6 deg"}),
        ("lipless/lipless.toml", {"behaviour": "sinks", "reserve": "-5 g", "nose_up": "-8 deg"}),
        ("lipless/lipless.toml", {"behaviour": "sinks", "reserve": "-6 g", "nose_up": "-16 deg"}),
        ("stick/stick.toml", {"behaviour": "suspends", "nose_up": "0 deg"}),
        ("stick/stick.toml", {"submerged": 0.7, "nose_up": "20 deg"}),
    ],
)
def test_a_sample(name: str, target: dict[str, Any], tmp_path: Path) -> None:
    found = balance(sample(name, target))
    assert found.met, found.account["in_the_way"]
    study, _ = found.make(tmp_path, tmp_path)
    results, row = study.results, found.account["options"][0]
    reserve, wanted = results["buoyancy"]["reserve_g"], found.account["target"]
    assert reserve == pytest.approx(wanted["reserve_g"], abs=0.02)
    assert row["cover_mm"] >= 1.5 - 0.003
    assert row["clear_mm"] >= 1.0 - 0.003
    up, nose = np.array(results["postures"][0]["up"]), np.array(results["frame"]["nose"])
    assert np.degrees(np.arcsin(up @ nose)) == pytest.approx(wanted["nose_up_deg"], abs=0.2)
    if reserve < -0.5:
        assert plumb(study) < 0.01


def test_a_speed_of_sinking() -> None:
    found = balance(sample("lipless/lipless.toml", {"behaviour": "sinks", "sink": "0.55 m/s", "nose_up": "-10 deg"}))
    assert found.met, found.account["in_the_way"]
    assert found.account["options"][0]["sink_m_s"] == pytest.approx(0.55, rel=0.03)


def test_a_speed_that_it_sinks_beyond_without_ballast() -> None:
    found = balance(sample("lipless/lipless.toml", {"behaviour": "sinks", "sink": "0.2 m/s", "nose_up": "-10 deg"}))
    assert not found.met
    assert "for 20.0 cm/s" in found.account["in_the_way"][0]


@settings(max_examples=4)
@given(st.integers(0, 10_000))
def test_any_body_keeps_its_promise(tmp_path_factory: pytest.TempPathFactory, seed: int) -> None:
    random = np.random.default_rng(seed)
    half = np.array([random.uniform(0.035, 0.055), random.uniform(0.009, 0.012), random.uniform(0.012, 0.017)])
    body = shapes.ellipsoid(half.tolist(), 3)
    # A hump on the back, off the middle, so that nothing is alike ahead and astern.
    where = body.vertices[:, 0] / half[0] - random.uniform(-0.5, 0.5)
    body = replace(body, vertices=body.vertices + np.exp(-8 * where**2)[:, None] * np.array([0, 0, 0.002]))
    eye = insert("eye", shapes.box((0.003, 0.002, 0.002), (-half[0] / 2, 0.0, half[2] / 3)), 7.9)
    hooks = [
        hardware(name, round(random.uniform(0.4, 1.0), 3), (at * half[0], 0.0, low * half[2]), 7.8)
        for name, at, low in (("hook", random.uniform(-0.4, 0.4), -1.0), ("tail hook", 1.0, 0.0))
    ]
    reserve = random.uniform(-2.0, -0.5)
    made = bait(
        body,
        eye,
        density=random.uniform(0.6, 0.8),
        hardware=hooks,
        target={"reserve": f"{reserve:.3f} g", "nose_up": f"{random.uniform(-8, 8):.2f} deg"},
        ballast={"materials": ["lead"], "shapes": ["rod"], "fit": f"{random.choice([0.0, 0.2])} mm"},
    )
    found = balance(made)
    folder = tmp_path_factory.mktemp("any")
    study, _ = found.make(folder, folder)
    row = found.account["options"][0]
    assert study.results["buoyancy"]["reserve_g"] == pytest.approx(row["reserve_g"], abs=0.02)
    assert row["reserve_g"] == pytest.approx(reserve, abs=0.001)
    assert plumb(study) < 0.01
    up, nose = np.array(study.results["postures"][0]["up"]), np.array(study.results["frame"]["nose"])
    assert np.degrees(np.arcsin(up @ nose)) == pytest.approx(row["nose_up_deg"], abs=0.2)
    assert shapes.as_trimesh(read_bait(folder / "balanced.toml").body.surface).is_watertight
