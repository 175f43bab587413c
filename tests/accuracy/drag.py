"""Compares the drag estimate with published values: writes tables and figure, and the README's part of them.

python tests/accuracy/drag.py            everything, with the refits that leave a family out (minutes)
python tests/accuracy/drag.py --quick    without the refits: prints the counts, writes nothing
"""

from __future__ import annotations

import json
import re
import sys
from collections.abc import Sequence
from dataclasses import dataclass
from pathlib import Path

import numpy as np

HERE = Path(__file__).parent
ROOT = HERE.parents[1]
sys.path[:0] = [str(HERE), str(HERE.parent / "physics")]

from figure import draw  # noqa: E402  the script finds its neighbours only now
from published_bodies import Row, leads, meshed, rows  # noqa: E402
from refit import CONSTANTS, left_out, values  # noqa: E402
from remembered_bodies import BODIES, remembered  # noqa: E402
from scipy.stats import spearmanr  # noqa: E402

from meshlure import estimate_drag  # noqa: E402

ROUNDED = ("sphere", "spheroid", "hemisphere", "teardrop", "streamlined")


@dataclass(frozen=True)
class Compared:
    """A row with what the estimate makes of it: layer as in the source, and chosen by the model."""

    row: Row
    given: float
    chosen: float

    @property
    def ratios(self) -> tuple[float, float]:
        return self.given / self.row.cd, self.chosen / self.row.cd


def published() -> list[Compared]:
    """Return the scored rows of the table."""
    found = []
    for row in rows():
        if row.scored:
            mesh = meshed(row.case)
            cds = [estimate_drag(mesh, leads(row.case), None, row.reynolds, layer).cd for layer in (row.given, None)]
            found.append(Compared(row, *cds))
    return found


def further() -> list[Compared]:
    """Return the rows written down from memory."""
    found = []
    for row in remembered():
        mesh, ahead = BODIES[row.case]()
        cds = [estimate_drag(mesh, ahead, None, row.reynolds, layer).cd for layer in (row.given, None)]
        found.append(Compared(row, *cds))
    return found


def counts(ratios: Sequence[float]) -> list[str]:
    """Return rows, median |ln|, worst |ln|, how many within 25% and 50%."""
    r = np.asarray(ratios)
    off = np.abs(np.log(r))
    near = [int(np.count_nonzero(np.abs(r - 1) <= share)) for share in (0.25, 0.5)]
    return [f"{len(r)}", f"{np.median(off):.3f}", f"{off.max():.2f}", *(f"{n} of {len(r)}" for n in near)]


def table(head: Sequence[str], lines: Sequence[Sequence[str]]) -> str:
    return "\n".join("| " + " | ".join(line) + " |" for line in (head, ["---"] * len(head), *lines))


def summary(found: Sequence[Compared], extra: Sequence[Compared], refits: dict[str, float] | None) -> str:
    """Return the table of counts."""
    rounded = [c for c in found if c.row.family in ROUNDED]
    lines = [
        ["published, layer as in the source", *counts([c.ratios[0] for c in found])],
        ["the rounded and streamlined of them", *counts([c.ratios[0] for c in rounded])],
        ["published, layer chosen by the model", *counts([c.ratios[1] for c in found])],
    ]
    if refits is not None:
        lines.append(
            ["along the flow, refitted without the row's family", *counts(np.exp(list(refits.values())).tolist())]
        )
    lines.append(["further bodies, values from memory", *counts([c.ratios[0] for c in extra])])
    return table(["set", "rows", "median abs ln ratio", "worst", "within 25%", "within 50%"], lines)


def order(found: Sequence[Compared]) -> float:
    """Return the rank correlation of estimate and published value, the layer chosen by the model."""
    return float(spearmanr([c.row.cd for c in found], [c.chosen for c in found]).statistic)


def short(found: Sequence[Compared]) -> str:
    """Return the README's table: one line a row."""
    lines = [
        [words(c.row), number(c.row.reynolds), c.row.layer, f"{c.row.cd:g}",
         *(f"{value:.2g} ({ratio:.2f})" for value, ratio in zip((c.given, c.chosen), c.ratios, strict=True))]
        for c in found
    ]  # fmt: skip
    return table(["body, what leads", "Re", "layer there", "published", "estimate (ratio)", "layer chosen"], lines)


def number(reynolds: float) -> str:
    mantissa, power = f"{reynolds:.3e}".split("e")
    return f"{float(mantissa):g}e{int(power)}"


def words(row: Row) -> str:
    return f"{row.shape}, {row.orientation}" if row.orientation not in ("", "any") else row.shape


def full(found: Sequence[Compared], refits: dict[str, float] | None) -> str:
    """Return the long table with sources."""
    lines = []
    for c in found:
        alone = "" if refits is None else f"{np.exp(refits[c.row.case]):.2f}" if c.row.case in refits else "not fitted"
        lines.append([
            words(c.row), c.row.family, number(c.row.reynolds), c.row.layer, f"{c.row.cd:g}",
            f"{c.given:.3g}", *(f"{ratio:.2f}" for ratio in c.ratios), *([alone] if alone else []), c.row.source,
        ])  # fmt: skip
    head = ["body", "family", "Re", "layer", "published", "estimate", "ratio", "ratio, layer chosen"]
    head += ["ratio, family left out"] if refits is not None else []
    return table([*head, "source"], lines)


def constants(sets: dict[str, np.ndarray]) -> str:
    """Return the constants as used, refitted on all rows, and the range over the refits."""
    lines = []
    for number, constant in enumerate(CONSTANTS):
        refits = [fit[number] for name, fit in sets.items() if name != "none"]
        lines.append([
            f"`{constant.name}`", constant.words, f"{values()[number]:.3g}", f"{sets['none'][number]:.3g}",
            f"{min(refits):.3g} to {max(refits):.3g}", constant.rows,
        ])  # fmt: skip
    head = ["constant", "what", "used", "fitted on all rows", "with a family left out", "rows that decide it"]
    return table(head, lines)


PAGE = """# Drag: estimate and published values

Written by `python tests/accuracy/drag.py`. Every row is a mesh that goes through `meshlure.estimate_drag`; a ratio is
estimate over published value.

{summary}

Rank correlation of estimate and published value, layer chosen: {order:.3f}.

![estimate over published drag coefficient](drag.svg)

## Published rows

The estimate's constants were set by hand with these rows in sight: they calibrate, they do not prove. "Family left
out": the six constants below refitted by a machine on all rows along the flow but those of the family (soft least
squares of ln ratio, weighed against what is known of each without the table), then tried on it. Crosswise rows set none
of them.

{rows}

## Constants set with the table in sight

{constants}

## Further bodies, values from memory

Textbook values written down from memory: a view, no authority. Those of the family "endless" set the suction of
sections across the flow (`meshlure/physics/prism.py`), the cube set `BAR_RELIEF` there; the others set nothing.

{further}
"""

README = """<!-- drag -->
![Estimate over published drag coefficient, one mark a body: {near} are within 25% with the layer that the source \
says](tests/accuracy/drag.svg)

{summary}

Rank correlation of estimate and published value, layer chosen: {order:.3f}. The constants were set with the published
rows in sight; the refits show what becomes of a family that was not. Sources, constants and further bodies:
`tests/accuracy/drag.md`, written like this part by `python tests/accuracy/drag.py`.

{rows}
<!-- /drag -->"""


def keep(found: Sequence[Compared], path: Path) -> None:
    """Write the rows that the page of every report shows in small."""
    rows = [
        {
            "body": words(c.row),
            "layer": c.row.layer,
            "published": c.row.cd,
            "estimate": round(c.row.cd * c.ratios[0], 3),
        }
        for c in found
    ]
    lines = ",\n".join(json.dumps(row, ensure_ascii=False) for row in rows)
    path.write_text(f"[\n{lines}\n]\n", encoding="utf-8")


def main(*, quick: bool) -> None:
    """Print the counts, and unless quick write the page, the figure and the README's part."""
    found, extra = published(), further()
    if quick:
        print(summary(found, extra, None))
        print(f"rank correlation {order(found):.3f}")
        print(short(found))
        return
    refits, sets = left_out([c.row for c in found])
    counted = summary(found, extra, refits)
    page = PAGE.format(
        summary=counted,
        order=order(found),
        rows=full(found, refits),
        constants=constants(sets),
        further=full(extra, None),
    )
    (HERE / "drag.md").write_text(page, encoding="utf-8")
    draw([(c.row, c.ratios) for c in found], [(c.row, c.ratios) for c in extra], HERE / "drag.svg")
    keep(found, ROOT / "meshlure" / "report" / "compared.json")
    readme = ROOT / "README.md"
    text = readme.read_text(encoding="utf-8")
    near = counts([c.ratios[0] for c in found])[3]
    part = README.format(near=near, summary=counted, order=order(found), rows=short(found))
    text, places = re.subn(r"<!-- drag -->.*<!-- /drag -->", lambda _: part, text, flags=re.DOTALL)
    if places != 1:
        sys.exit("README.md has lost its marks <!-- drag --> and <!-- /drag -->")
    readme.write_text(text, encoding="utf-8")
    print(counted)


if __name__ == "__main__":
    main(quick="--quick" in sys.argv[1:])
