"""Lets every test import what lies beside this file, makes property tests repeatable, and gives what several share."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from pathlib import Path
from typing import Any

import pytest
from command_bench import Bench
from hypothesis import settings

settings.register_profile("repeatable", derandomize=True, deadline=None, max_examples=25, print_blob=False)
settings.load_profile("repeatable")


@pytest.fixture
def bench(tmp_path: Path, monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]) -> Bench:
    """A folder with a body and a weight, in which the command is run."""
    return Bench(tmp_path, monkeypatch, capsys)


@pytest.fixture(scope="package")
def chromium() -> Iterator[Any]:
    """The browser, started once for all tests of a folder."""
    from browsing import browser

    with browser() as started:
        yield started


@pytest.fixture(scope="session")
def axe() -> Callable[[], Any]:
    """Give a maker of axe runners, or skip where axe is not installed."""
    found = pytest.importorskip(
        "axe_playwright_python.sync_playwright", reason="axe-playwright-python is not installed"
    )
    made: Callable[[], Any] = found.Axe
    return made
