"""Lets every test import what lies beside this file, and makes property tests repeatable."""

from __future__ import annotations

from pathlib import Path

import pytest
from command_bench import Bench
from hypothesis import settings

settings.register_profile("repeatable", derandomize=True, deadline=None, max_examples=25, print_blob=False)
settings.load_profile("repeatable")


@pytest.fixture
def bench(tmp_path: Path, monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]) -> Bench:
    """A folder with a body and a weight, in which the command is run."""
    return Bench(tmp_path, monkeypatch, capsys)
