"""Gives every test of the command line its workbench."""

from __future__ import annotations

from pathlib import Path

import pytest
from command_bench import Workbench


@pytest.fixture
def bench(tmp_path: Path, monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]) -> Workbench:
    return Workbench(tmp_path, monkeypatch, capsys)
