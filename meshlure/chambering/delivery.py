"""A chamber written as a bait of its own and held against its promise."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass, replace
from math import cos, radians
from pathlib import Path
from typing import Any, Final

from meshlure.bait.composition import compose
from meshlure.bait.loading import read_bait
from meshlure.bait.pieces import Bait
from meshlure.chambering.trial import Trial, ends_of
from meshlure.errors import Fault, InputError
from meshlure.examine import study
from meshlure.files.sections.balls import BallsSection
from meshlure.files.sections.inserts import InsertSection
from meshlure.files.sections.substance import Substance as Stated
from meshlure.files.source import ALL
from meshlure.geometry.blocks import BlockIndex
from meshlure.geometry.moments import solid_moments
from meshlure.making.chamber.option import CHAMBER
from meshlure.making.chamber.pieces import Pieces, pieces
from meshlure.making.chamber.site import Site
from meshlure.making.variantfile import NewInsert, Variant, write_variant
from meshlure.physics.posture import attitude
from meshlure.physics.repose import Vessel
from meshlure.results.numbers import degrees
from meshlure.results.study import Study

Tree = dict[str, Any]
Tell = Callable[[str], None]

STEM: Final = "chambered"
KEPT_RESERVE: Final = 0.02e-3
"""kg. What was written must have the reserve promised within this."""
KEPT_ANGLE: Final = 0.2
"""degrees. What was written must rest as promised within this."""
KEPT_VOLUME: Final = 1e-4
"""Share within which the body read back must have its volume."""


@dataclass(frozen=True, eq=False)
class Chambered:
    """What was found for a bait's chamber, ready to be written.

    Attributes
    ----------
    bait : Bait
        As the bait file has it.
    site : Site
    taken : Trial or None
        To be written; None where nothing fits.
    account : dict
        For results.json.
    """

    bait: Bait
    site: Site
    taken: Trial | None
    account: Tree

    @property
    def reachable(self) -> bool:
        """Whether a bore fits."""
        return self.taken is not None

    def make(self, folder: Path, out: Path, tell: Tell = lambda _: None) -> tuple[Study, list[str]]:
        """Write the bait's meshes, bait file and package into a folder, and study it from there.

        Parameters
        ----------
        folder : Path
            Empty.
        out : Path
            What the folder will be named in the end.
        tell : callable
            Told each phase.

        Returns
        -------
        Study, list of str
            Of the bait as read back, and the names of the files. Where nothing fits, of the bait as it was, and none.

        Raises
        ------
        InputError
            Where a mesh does not come back as promised, or the bait read back does not keep its promise.
        """
        if self.taken is None:
            tell("the bait as it is")
            found = study(self.bait)
            return replace(found, results={**found.results, "chamber": self.account}), []
        tell("cutting")
        option = self.taken.option
        made = pieces(self.site.bait, option)
        names = self._names()
        variant = Variant(
            name=f"{self.bait.name}, chambered",
            body=made.body,
            inserts=self._inserts(made, names),
            balls=(self._balls(names[CHAMBER]),),
            dropped=self.site.replaced,
            further=tuple((f"balls {end}", surface) for end, surface in made.balls.items()),
            without=tuple(key for key in ("chamber", "measured") if key in self.bait.plan.table),
        )
        files = write_variant(folder, STEM, self.bait, variant)
        tell("reading back")
        again = read_bait(folder / f"{STEM}.toml", ALL)
        found = study(again)
        self._check(found, again, made, names[CHAMBER])
        results = dict(found.results)
        results["inputs"] = [row | {"file": str(out / Path(row["file"]).name)} for row in results["inputs"]]
        results["chamber"] = self.account
        return replace(found, results=results), files

    def _names(self) -> dict[str, str]:
        """Names for the new pieces that nothing else has."""
        plan = self.bait.plan
        used = {"body"} | {item.name.casefold() for item in plan.hardware}
        used |= {insert.name.casefold() for insert in plan.inserts if insert.name not in self.site.replaced}
        names = {}
        for word in (CHAMBER, "tube", "plug-1"):
            name, number = word, 2
            while name.casefold() in used:
                name, number = f"{word.removesuffix('-1')}-{number}", number + 1
            used.add(name.casefold())
            names[word] = name
        return names

    def _inserts(self, made: Pieces, names: dict[str, str]) -> tuple[NewInsert, ...]:
        assert self.taken is not None
        rows = []
        if made.tube is not None:
            lining = self.taken.option.lining
            assert lining is not None
            section = InsertSection(names["tube"], Path(), substance=Stated(material=lining.substance.name))
            rows.append(NewInsert(section, made.tube))
        rows.append(NewInsert(InsertSection(names[CHAMBER], Path(), void="sealed"), made.hollow, made=False))
        if made.plug is not None:
            over = () if made.tube is None else (names["tube"],)
            substance = self.bait.plan.body.substance
            section = InsertSection(names["plug-1"], Path(), substance=substance, replaces=over, coated=True)
            rows.append(NewInsert(section, made.plug.surface()))
        return tuple(rows)

    def _balls(self, chamber: str) -> BallsSection:
        assert self.taken is not None
        choice = self.taken.option.choice
        return BallsSection(chamber, choice.diameter, choice.count, Stated(material=choice.substance.name))

    def _check(self, found: Study, again: Bait, made: Pieces, chamber: str) -> None:
        """Refuse what was written where it does not keep its promise."""
        assert self.taken is not None
        faults = []
        reserve = found.results["buoyancy"]["reserve_g"] * 1e-3
        if abs(reserve - self.taken.reserve) > KEPT_RESERVE:
            promised = f"{self.taken.reserve * 1e3:.3f} g within {KEPT_RESERVE * 1e3:g}"
            faults.append(_broken("reserve", f"{reserve * 1e3:.3f} g", promised))
        volume = solid_moments(again.body.surface).amount - sum(solid_moments(c).amount for c in again.body.cavities)
        if abs(volume - made.body.volume) > KEPT_VOLUME * made.body.volume:
            promised = f"{made.body.volume * 1e9:.6g} mm3 within 0.01%"
            faults.append(_broken("volume of the body", f"{volume * 1e9:.6g} mm3", promised))
        rows = [row for row in found.results["balls"] if row["chamber"] == chamber]
        if any(self._off(row) > KEPT_ANGLE for row in rows):
            # From back up it may have come to rest on another side: what counts is that it rests as promised too.
            rows = self._followed(again, chamber)
        for row in rows:
            off = self._off(row)
            if off > KEPT_ANGLE:
                what = f"posture with the balls at the {row['end']}"
                faults.append(_broken(what, f"{off:.2f} degrees off", f"within {KEPT_ANGLE:g} degrees"))
        if faults:
            raise InputError(faults)

    def _followed(self, again: Bait, chamber: str) -> list[Tree]:
        """The postures that are nearest to those promised."""
        assert self.taken is not None
        composition = compose(again)
        index = BlockIndex.build(composition.skin.surface, composition.skin.thickness)
        vessel = Vessel(composition, index, again.hardware, again.frame, again.water.density)
        rows = []
        for end, promised in self.taken.rested.items():
            ends = ends_of(self.site, end)
            ends[chamber] = ends.pop(CHAMBER)
            repose = None if promised.up is None else vessel.reposed(ends, promised.up)
            up = vessel.dangle(ends).hang.up if repose is None else repose.rest.state.up
            angles = None if up is None else attitude(up, again.frame.nose, again.frame.back, again.frame.side)
            rows.append(
                {
                    "end": end,
                    "nose_up_deg": None if angles is None else degrees(angles.nose_up),
                    "lean_deg": None if angles is None else degrees(angles.lean),
                }
            )
        return rows

    def _off(self, row: Tree) -> float:
        """By how many degrees a posture differs from the one promised for that end."""
        assert self.taken is not None
        angles = self.taken.rested[row["end"]].angles
        if angles is None or row["nose_up_deg"] is None:
            return 0.0
        nose_up = abs(float(row["nose_up_deg"]) - (degrees(angles.nose_up) or 0.0))
        if angles.lean is None or row["lean_deg"] is None:
            return nose_up
        # Near the vertical a turn about the long axis hardly moves anything.
        lean = (float(row["lean_deg"]) - (degrees(angles.lean) or 0.0) + 180) % 360 - 180
        return max(nose_up, abs(lean) * cos(radians(float(row["nose_up_deg"]))))


def _broken(what: str, found: str, allowed: str) -> Fault:
    return Fault(
        f"the bait that was written does not keep its {what}; it was not kept",
        f"{STEM}.toml",
        found,
        allowed,
        "take another way with --take, or move what lies near the bore",
    )
