"""The pages of the other commands in a real browser: balance, chamber, mould, compare and the sheet for the bench.

Authorities: Chromium opens and lays them out; axe-core judges what people need to read them.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator
from pathlib import Path
from typing import Any

import pytest
from browsing import OVERFLOWS, OVERLAPS, Opened, amiss, opened
from command_bench import BAIT, box

from meshlure.cli import main

ASKED = """\
[target]
reserve = "-2.2 g"
[chamber]
balls = [{ diameter = "4 mm", count = 1, material = "bearing steel" }]
[mould]
pull = "+y"
[pour]
resin = "1.3 g/cm3"
balloons = "125 kg/m3"
"""

COMMANDS: dict[str, tuple[str, ...]] = {
    "balance": ("balance", "bait.toml", "--ballast", "lead rod 5 mm x 8 mm at 21,5,8"),
    "chamber": ("chamber", "bait.toml"),
    "mould": ("mould", "bait.toml"),
    "pour": ("pour", "bait.toml"),
    "compare": ("compare", "bait.toml", "other.toml"),
}


@pytest.fixture(scope="module")
def folder(tmp_path_factory: pytest.TempPathFactory) -> Path:
    made: Path = tmp_path_factory.mktemp("block")
    (made / "body.stl").write_bytes(box((0, 0, 0), (40, 10, 16)))
    (made / "bait.toml").write_text(BAIT + ASKED, encoding="utf-8")
    (made / "other.toml").write_text(BAIT.replace("1.2 g", "1.3 g").replace("minnow", "block"), encoding="utf-8")
    return made


@pytest.fixture(scope="module", params=list(COMMANDS))
def window(request: pytest.FixtureRequest, chromium: Any, folder: Path) -> Iterator[Opened]:
    """The page that a command wrote, in a window that all its tests share."""
    out = folder / f"out-{request.param}"
    with pytest.MonkeyPatch.context() as here:
        here.chdir(folder)
        here.setattr("sys.argv", ["meshlure", *COMMANDS[request.param], "--out", str(out), "--quiet"])
        with pytest.raises(SystemExit):
            main.main()
    (page,) = out.glob("*.html")
    with opened(chromium, page) as found:
        yield found


def test_it_opens_without_a_complaint_and_asks_for_nothing(window: Opened) -> None:
    assert window.said == []
    assert [url for url in window.asked if not url.startswith("data:")] == [window.path.as_uri()]


@pytest.mark.parametrize("width", [360, 768, 1440])
def test_no_words_lie_over_others_and_nothing_is_wider_than_its_place(window: Opened, width: int) -> None:
    window.wide(width)
    window.open_all()
    assert window.page.evaluate(OVERLAPS) == []
    assert window.page.evaluate(OVERFLOWS) == []


def test_axe_finds_nothing_amiss(window: Opened, axe: Callable[[], Any]) -> None:
    window.wide(360)
    assert amiss(window, axe()) == []
