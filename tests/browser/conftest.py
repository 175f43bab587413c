"""What the tests in a browser share."""

from __future__ import annotations

import sys
from collections.abc import Callable, Iterator
from pathlib import Path
from typing import Any

import pytest
from browsing import browser

sys.path.append(str(Path(__file__).parents[1] / "report"))  # where the invented baits stand


@pytest.fixture(scope="package")
def chromium() -> Iterator[Any]:
    """The browser, started once for all tests here."""
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
