"""A handful of the blows that `run.py` deals by the hundred: a result is the older one whole or the newer one whole."""

from __future__ import annotations

import random
import sys
from pathlib import Path

import pytest
from faults.blows import AIMS, Ground, full, killed, two_at_once, vanished
from faults.blows import ground as prepared
from faults.jobs import JOBS, Job, put_back, strays

from meshlure.files import exchange
from meshlure.files.single import put_file

WRITER = Job("writer", ("AGE",), program=(sys.executable, str(Path(__file__).with_name("writer.py"))))
"""Stands for the commands, which take a hundred times as long to have something to write."""


@pytest.fixture(scope="module")
def ground(tmp_path_factory: pytest.TempPathFactory) -> Ground:
    """Results of both ages, from runs that nobody disturbed."""
    return prepared(tmp_path_factory.mktemp("ground"), WRITER)


@pytest.mark.parametrize("aim", AIMS)
def test_killed(ground: Ground, aim: str) -> None:
    for number in range(3):
        outcome = killed(ground, random.Random(f"{aim} {number}"), aim)
        assert outcome.wrong == ""
        assert outcome.left in ("old", "new")


def test_killed_where_the_folder_stands_ready(ground: Ground) -> None:
    """Everything but the exchange is done: what is left beside is cleared away by the next run."""
    ground.lay()
    beside = exchange.new_name(ground.folder / "out", "dead")
    beside.mkdir()
    for name, content in ground.new.items():
        (beside / name).write_bytes(content)
    assert strays(ground.folder) == [beside.name]
    assert ground.look() == "old"
    assert ground.next_run() == ""


def test_a_file_that_may_not_grow(ground: Ground) -> None:
    outcome = full(ground, random.Random(2), "any")
    assert (outcome.left, outcome.wrong) == ("old", "")


def test_what_it_builds_is_taken_away(ground: Ground) -> None:
    outcome = vanished(ground, random.Random(2), "writing")
    assert outcome.wrong == ""


def test_two_runs_into_one_folder(ground: Ground) -> None:
    outcome = two_at_once(ground, random.Random(1), "any")
    assert (outcome.left, outcome.wrong) == ("new", "")


def test_a_mixture_is_seen(ground: Ground) -> None:
    """The look itself: files of both runs, a file cut short, one too many and one too few are all told."""
    old, new = dict(ground.old or {}), dict(ground.new)
    new["results.json"] = new["results.json"][:-40]
    for wrong in (new, old | {"part-3.stl": b""}, {}):
        put_back(ground.folder, WRITER, wrong)
        assert ground.look() not in ("old", "new")


def test_a_single_file_that_a_killed_run_began(tmp_path: Path) -> None:
    """It is hidden, in nobody's way, and goes with the next run; that of a run at work stays."""
    place = tmp_path / ("\N{SNOWMAN}" * 60 + ".toml")  # 184 bytes: what lies beside may be no longer than 255
    put_file(place, b"first", replace=True)
    dead, busy = (exchange.new_name(Path(tmp_path, "\N{SNOWMAN}" * 40), token) for token in ("dead", "busy"))
    dead.write_bytes(b"half")
    busy.write_bytes(b"half")
    with exchange.locked(busy, wait=False):
        put_file(place, b"second", replace=True)
    assert place.read_bytes() == b"second"
    assert strays(tmp_path) == [busy.name]
    with pytest.raises(FileExistsError):
        put_file(place, b"third")
    assert (place.read_bytes(), strays(tmp_path)) == (b"second", [])


def test_every_command_that_writes_is_dealt_blows() -> None:
    assert {job.words[0] for job in JOBS.values()} == {
        "report", "balance", "chamber", "mould", "pour", "sheet", "compare", "new", "inspect",
    }  # fmt: skip
