"""A headless browser for the tests, and what they ask a page: words over each other, things cut off, requests made."""

from __future__ import annotations

import shutil
from collections.abc import Iterator
from contextlib import contextmanager
from dataclasses import dataclass, field
from pathlib import Path
from typing import Any

import pytest

NAMES = ("chromium", "chromium-browser", "google-chrome", "google-chrome-stable")
"""What the browser's program is called where."""

SETTINGS = (
    "--no-sandbox",  # a container's root may start it
    "--use-angle=swiftshader",  # WebGL without a graphics card
    "--enable-unsafe-swiftshader",
    "--disable-gpu-compositing",  # or the rest of the page would be drawn by that, too, and slowly
)


@contextmanager
def browser() -> Iterator[Any]:
    """Give the browser, or skip the test where there is none."""
    found = next((path for name in NAMES if (path := shutil.which(name))), None)
    if found is None:
        pytest.skip(f"no browser: none of {', '.join(NAMES)} is installed")
    sync_api = pytest.importorskip("playwright.sync_api", reason="playwright is not installed")
    with sync_api.sync_playwright() as driver:
        started = driver.chromium.launch(executable_path=found, args=list(SETTINGS))
        yield started
        started.close()


@dataclass
class Opened:
    """A page with all that it said and asked for."""

    page: Any
    path: Path
    said: list[str] = field(default_factory=list)
    asked: list[str] = field(default_factory=list)

    def wide(self, width: int) -> None:
        """Give the window a width in pixels, and let the page come to rest."""
        self.page.set_viewport_size({"width": width, "height": 900})
        self.rest()

    def rest(self) -> None:
        """Wait until what is to be drawn has been drawn."""
        self.page.evaluate("() => new Promise(done => requestAnimationFrame(() => requestAnimationFrame(done)))")

    def open_all(self) -> None:
        """Open everything that is folded."""
        self.page.evaluate("() => document.querySelectorAll('details').forEach(each => { each.open = true; })")

    def pixels(self, selector: str) -> bytes:
        """Return a part of the page as a PNG."""
        shot: bytes = self.page.locator(selector).screenshot()
        return shot


@contextmanager
def opened(started: Any, path: Path, width: int = 1440, before: str = "", **options: Any) -> Iterator[Opened]:
    """Open a file of the disk in a window of its own; ``before`` is a script that runs before the page's."""
    context = started.new_context(viewport={"width": width, "height": 900}, reduced_motion="reduce", **options)
    page = context.new_page()
    found = Opened(page, path)
    page.on("console", lambda message: found.said.append(f"{message.type}: {message.text}"))
    page.on("pageerror", lambda error: found.said.append(f"error: {error}"))
    page.on("request", lambda request: found.asked.append(request.url))
    if before:
        page.add_init_script(before)
    page.goto(path.as_uri())
    yield found
    context.close()


def amiss(window: Opened, axe: Any) -> list[Any]:
    """What axe-core finds amiss in a page with all of it open; for the last test of a window, which loses rows."""
    window.open_all()
    # A table's rows are all of one make: two of each stand for the rest.
    window.page.evaluate(
        "() => document.querySelectorAll('tbody').forEach(body => [...body.rows].slice(2).forEach(row => row.remove()))"
    )
    found = axe.run(window.page, options={"resultTypes": ["violations"]}).response
    return [(v["id"], v["help"], [n["html"][:200] for n in v["nodes"]]) for v in found["violations"]]


OVERLAPS = """() => {
  // Every line of words that shows, cut to the boxes that cut it; then all pairs that cover each other.
  const lines = [], walker = document.createTreeWalker(document.body, NodeFilter.SHOW_TEXT);
  const cutting = new Map();
  function cuts(element) {
    if (!element || element === document.documentElement) return [];
    if (!cutting.has(element)) {
      const style = getComputedStyle(element), above = cuts(element.parentElement);
      const open = style.overflowX === 'visible' && style.overflowY === 'visible';
      cutting.set(element, open ? above : [...above, element]);
    }
    return cutting.get(element);
  }
  while (walker.nextNode()) {
    const node = walker.currentNode, parent = node.parentElement;
    if (!node.data.trim() || !parent.checkVisibility({visibilityProperty: true}) || parent.closest('.unseen')) continue;
    if (getComputedStyle(parent).clipPath !== 'none') continue;
    const range = document.createRange();
    range.selectNodeContents(node);
    for (const box of range.getClientRects()) {
      let left = box.left, right = box.right, top = box.top, bottom = box.bottom;
      for (const element of cuts(parent)) {
        const edge = element.getBoundingClientRect();
        left = Math.max(left, edge.left); right = Math.min(right, edge.right);
        top = Math.max(top, edge.top); bottom = Math.min(bottom, edge.bottom);
      }
      if (right - left > 1 && bottom - top > 1) lines.push({left, right, top, bottom, text: node.data.trim(), node});
    }
  }
  lines.sort((a, b) => a.top - b.top);
  const found = [];
  for (let i = 0; i < lines.length; i++) {
    const a = lines[i];
    if (a.right > document.documentElement.clientWidth + 1 || a.left < -1) found.push('off the page: ' + a.text);
    for (let j = i + 1; j < lines.length && lines[j].top < a.bottom - 3; j++) {
      const b = lines[j];
      if (a.node !== b.node && Math.min(a.right, b.right) - Math.max(a.left, b.left) > 2) {
        found.push(a.text.slice(0, 40) + ' | ' + b.text.slice(0, 40));
      }
    }
  }
  return found;
}"""

OVERFLOWS = """() => {
  // Elements whose content is wider than they are, and that neither scroll nor hide it on purpose.
  const found = [];
  if (document.documentElement.scrollWidth > document.documentElement.clientWidth) found.push('the page itself');
  for (const element of document.body.querySelectorAll('*')) {
    if (!element.checkVisibility() || element.closest('.unseen') || element instanceof SVGElement) continue;
    const style = getComputedStyle(element);
    if (style.display === 'inline' || style.overflowX !== 'visible') continue;
    if (element.scrollWidth > element.clientWidth + 1 && element.clientWidth > 0) {
      found.push(element.tagName + '.' + element.className + ': ' + element.textContent.trim().slice(0, 40));
    }
  }
  return found;
}"""

PICTURES = """selector => {
  // Pictures' SVG laid out by the browser: words cut or over words, leaders over words, leaders across leaders.
  const found = [];
  let leaders = 0, named = 0;
  const apart = 0.15;  // px that edges may share by rounding
  for (const image of document.querySelectorAll(selector)) {
    const bytes = Uint8Array.from(atob(image.src.split(',')[1]), letter => letter.charCodeAt(0));
    const held = document.createElement('div');
    held.style.cssText = 'position:absolute;left:0;top:0;width:2000px';
    const tree = new DOMParser().parseFromString(new TextDecoder().decode(bytes), 'image/svg+xml');
    held.append(document.importNode(tree.documentElement, true));
    document.body.append(held);
    const svg = held.firstElementChild, size = svg.viewBox.baseVal;
    svg.setAttribute('width', size.width); svg.setAttribute('height', size.height);
    const zero = svg.getBoundingClientRect();
    const words = [...svg.querySelectorAll('g[id^=text_], g[id^=name-]')].map(each => {
      const box = each.getBoundingClientRect();
      return {id: each.id, left: box.left - zero.left, right: box.right - zero.left,
              top: box.top - zero.top, bottom: box.bottom - zero.top};
    }).filter(box => box.right > box.left);
    const over = (a, b) => Math.min(a.right, b.right) - Math.max(a.left, b.left) > apart
      && Math.min(a.bottom, b.bottom) - Math.max(a.top, b.top) > apart;
    for (let i = 0; i < words.length; i++) {
      const box = words[i];
      if (box.left < 0 || box.top < 0 || box.right > size.width || box.bottom > size.height) {
        found.push(`${image.alt.slice(0, 30)}: ${box.id} is cut`);
      }
      for (let j = i + 1; j < words.length; j++) {
        if (over(box, words[j])) found.push(`${image.alt.slice(0, 30)}: ${box.id} over ${words[j].id}`);
      }
    }
    const lines = [...svg.querySelectorAll('g[id^=leader-]')].map(each => {
      const numbers = each.querySelector('path').getAttribute('d').match(/-?[\\d.]+(e-?\\d+)?/g).map(Number);
      const points = [];
      for (let k = 0; k < numbers.length; k += 2) points.push([numbers[k], numbers[k + 1]]);
      const segments = [];
      for (let k = 0; k < points.length; k += 2) segments.push([points[k], points[k + 1]]);
      return {id: each.id, segments};
    });
    leaders += lines.length;
    named += words.length;
    const side = (a, b, p) => (b[0] - a[0]) * (p[1] - a[1]) - (b[1] - a[1]) * (p[0] - a[0]);
    const parts = (a, b) => side(...a, b[0]) * side(...a, b[1]) < -1e-6;
    const crosses = (a, b) => parts(a, b) && parts(b, a);
    function hits(segment, box) {
      // By halving: what of the segment lies within the box (Liang & Barsky 1984).
      const [[x0, y0], [x1, y1]] = segment;
      let first = 0, last = 1;
      for (const [p, q] of [[x0 - x1, x0 - box.left], [x1 - x0, box.right - x0],
                            [y0 - y1, y0 - box.top], [y1 - y0, box.bottom - y0]]) {
        if (p === 0) { if (q < 0) return false; continue; }
        if (p < 0) first = Math.max(first, q / p); else last = Math.min(last, q / p);
      }
      return (last - first) * Math.hypot(x1 - x0, y1 - y0) > apart;
    }
    lines.forEach((line, i) => {
      const own = line.id.replace('leader', 'name') + '-';
      for (const box of words) {
        if (!box.id.startsWith(own) && line.segments.some(each => hits(each, box))) {
          found.push(`${image.alt.slice(0, 30)}: ${line.id} over ${box.id}`);
        }
      }
      for (const other of lines.slice(i + 1)) {
        if (line.segments.some(a => other.segments.some(b => crosses(a, b)))) {
          found.push(`${image.alt.slice(0, 30)}: ${line.id} across ${other.id}`);
        }
      }
    });
    held.remove();
  }
  return {found, leaders, words: named};
}"""
