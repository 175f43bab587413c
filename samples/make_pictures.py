"""Makes the pictures that the README shows: runs the commands on the samples and photographs their pages.

python samples/make_pictures.py

Needs Chromium (Debian's package) and what `pip install ".[test]"` brings. The pages are laid out at 1000 pixels.
"""

from __future__ import annotations

import shutil
import subprocess
import sys
import tempfile
from pathlib import Path

from playwright.sync_api import Browser, sync_playwright

HERE = Path(__file__).parent
PICTURES = HERE / "pictures"
WIDTH = 1000

RUNS = {
    "report": ("report", "minnow/minnow.toml"),
    "balance": ("balance", "minnow/minnow.toml"),
    "chamber": ("chamber", "lipless/lipless.toml"),
    "mould": ("mould", "minnow/minnow.toml"),
}
"""By the folder that is written: the command and its bait file."""

SHOTS = {
    "first_screen.png": ("report", "header.verdict"),
    "drawings.png": ("report", "#drawings"),
    "balanced.png": ("balance", "#drawings .view.side"),
    "chamber.png": ("chamber", "#drawings .view.side"),
    "boards.png": ("mould", "#mould .charts"),
}
"""By picture: the folder, and the part of its page."""


def main() -> None:
    """Run every command and take every picture."""
    PICTURES.mkdir(exist_ok=True)
    with tempfile.TemporaryDirectory() as place:
        for folder, (command, bait) in RUNS.items():
            out = Path(place) / folder
            program = str(Path(sys.executable).with_name("meshlure"))
            words = [program, command, str(HERE / bait), "--out", str(out), "--quiet"]
            subprocess.run(words, check=False)
            if not (out / "report.html").exists():
                raise SystemExit(f"{command} {bait} wrote no page")
        with sync_playwright() as player:
            browser = player.chromium.launch(executable_path=_chromium(), args=["--no-sandbox"])
            for name, (folder, part) in SHOTS.items():
                _shoot(browser, Path(place) / folder / "report.html", part, PICTURES / name)
            browser.close()


def _shoot(browser: Browser, page_file: Path, part: str, picture: Path) -> None:
    page = browser.new_page(viewport={"width": WIDTH, "height": 900})
    page.goto(page_file.as_uri())
    element = page.locator(part).last if part.endswith(".charts") else page.locator(part).first
    element.screenshot(path=str(picture))
    page.close()


def _chromium() -> str:
    found = shutil.which("chromium") or shutil.which("chromium-browser")
    if found is None:
        raise SystemExit("Chromium is not installed: apt-get install chromium")
    return found


if __name__ == "__main__":
    main()
