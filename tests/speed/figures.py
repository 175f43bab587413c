"""One figure of the table: what was measured on either side, the ratio, and the bar it is held to."""

from __future__ import annotations

from dataclasses import dataclass

WIDTH = 56


@dataclass(frozen=True)
class Figure:
    """A comparison.

    Attributes
    ----------
    what : str
        Ours / theirs.
    ours, theirs : float, s
        Processor time.
    bar : float
        That the ratio is held to.
    faster : bool
        The ratio is theirs / ours and at least the bar; otherwise ours / theirs and at most the bar.
    note : str
    agree : bool
        Whether both sides gave the same answer; where they did not, nothing is met.
    """

    what: str
    ours: float
    theirs: float
    bar: float
    faster: bool
    note: str = ""
    agree: bool = True

    @property
    def ratio(self) -> float:
        """Of the two times."""
        return self.theirs / self.ours if self.faster else self.ours / self.theirs

    @property
    def met(self) -> bool:
        """Whether the bar is met and the answers agree."""
        return self.agree and (self.ratio >= self.bar if self.faster else self.ratio <= self.bar)

    def line(self) -> str:
        """Return the table's line."""
        bar = f"{'>=' if self.faster else '<='} {self.bar:g}"
        verdict = "met" if self.met else "MISSED" if self.agree else "ANSWERS DIFFER"
        times = f"{_seconds(self.ours):>10} {_seconds(self.theirs):>10}"
        return f"{self.what:{WIDTH}}{times} {self.ratio:8.2f} {bar:>7}  {verdict:7} {self.note}".rstrip()


def heading() -> str:
    """Return the table's heading."""
    return f"{'ours / theirs':{WIDTH}}{'ours':>10} {'theirs':>10} {'ratio':>8} {'bar':>7}"


def _seconds(value: float) -> str:
    return f"{value * 1e3:.2f} ms" if value < 1 else f"{value:.2f} s"
