"""A body made a shell: weighed sealed and flooded, written as a bait of its own and held against its promise."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass, replace
from pathlib import Path
from typing import Any, Final

from meshlure import tolerances
from meshlure.bait.composition import compose
from meshlure.bait.loading import read_bait
from meshlure.bait.meshpiece import solid_of
from meshlure.bait.pieces import Bait, Role
from meshlure.bait.refusals import refuse
from meshlure.chambering.delivery import KEPT_RESERVE, KEPT_VOLUME
from meshlure.errors import Fault, InputError
from meshlure.examine import study
from meshlure.files.source import ALL
from meshlure.geometry.blocks import BlockIndex
from meshlure.geometry.moments import solid_moments
from meshlure.making.hollow import Hollow, closed, hollow, read_wish, shelled
from meshlure.making.variantfile import Variant, write_variant
from meshlure.physics.repose import Vessel
from meshlure.results import hollow as tree
from meshlure.results.study import Study

Tree = dict[str, Any]
Tell = Callable[[str], None]

STEM: Final = "hollow"


@dataclass(frozen=True, eq=False)
class Hollowed:
    """A bait with a hollow body, ready to be written.

    Attributes
    ----------
    bait : Bait
        As the bait file has it.
    made : Hollow
    reserve : float, kg
        Promised of what is written: sealed, or flooded where it is drained.
    account : dict
        For results.json.
    """

    bait: Bait
    made: Hollow
    reserve: float
    account: Tree

    reachable = True

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

        Raises
        ------
        InputError
            Where a mesh does not come back as promised, or the bait read back does not keep its promise.
        """
        tell("cutting")
        body = self.made.body
        variant = Variant(
            name=f"{self.bait.name}, hollow",
            body=body,
            without=("measured",) if "measured" in self.bait.plan.table else (),
        )
        files = write_variant(folder, STEM, self.bait, variant)
        tell("reading back")
        again = read_bait(folder / f"{STEM}.toml", ALL)
        found = study(again)
        faults = []
        reserve = found.results["buoyancy"]["reserve_g"] * 1e-3
        if abs(reserve - self.reserve) > KEPT_RESERVE:
            promised = f"{self.reserve * 1e3:.3f} g within {KEPT_RESERVE * 1e3:g}"
            faults.append(_broken("reserve", f"{reserve * 1e3:.3f} g", promised))
        volume = solid_moments(again.body.surface).amount - sum(solid_moments(c).amount for c in again.body.cavities)
        if abs(volume - body.volume) > KEPT_VOLUME * body.volume:
            promised = f"{body.volume * 1e9:.6g} mm3 within 0.01%"
            faults.append(_broken("volume", f"{volume * 1e9:.6g} mm3", promised))
        if faults:
            raise InputError(faults)
        results = dict(found.results)
        results["inputs"] = [row | {"file": str(out / Path(row["file"]).name)} for row in results["inputs"]]
        results["hollow"] = self.account
        return replace(found, results=results), files


def hollowed(bait: Bait, words: str, tell: Tell = lambda _: None) -> Hollowed:
    """Return a bait whose body is a shell.

    Parameters
    ----------
    bait : Bait
    words : str
        "wall 1.6 mm", or "wall 1.6 mm, drain 3 mm at 12,0,-4 and 80,0,-3" in the bait file's coordinates.
    tell : callable
        Told each phase.

    Raises
    ------
    InputError
        As `read_wish` and `hollow`, and where the hollowed bait leaves a mass or a volume undefined.
    """
    wish = read_wish(words, bait.plan.bait.metres)
    tell("hollowing")
    made = hollow(bait, wish)
    tell("weighing")
    written = _weighed(shelled(bait, made))
    if made.drains:
        sealed, flooded = _weighed(closed(bait, made)).reserve, written.reserve
    else:
        before = sum(solid_moments(cavity).amount for cavity in bait.body.cavities)
        sealed, flooded = written.reserve, written.reserve - (written.cavities - before) * bait.water.density
    account = tree.hollow(
        made,
        shell_mass=made.body.volume * (0.0 if bait.body.substance is None else bait.body.substance.density),
        mass=written.mass,
        sealed=sealed,
        flooded=flooded,
        inside=_inside(bait, made),
        coated=bait.coat is not None,
    )
    return Hollowed(bait, made, written.reserve, account)


@dataclass(frozen=True)
class _Weighed:
    """Mass and reserve of a bait, kg, and what stays hollow in its body, m3."""

    mass: float
    reserve: float
    cavities: float


def _weighed(bait: Bait) -> _Weighed:
    """Weigh a bait, its balls where they lie."""
    composition = compose(bait)
    refuse(composition.findings, {})
    index = BlockIndex.build(composition.skin.surface, composition.skin.thickness)
    vessel = Vessel(composition, index, bait.hardware, bait.frame, bait.water.density)
    ends = vessel.settings()[0]
    mass = composition.mass(ends).amount
    voids = {piece.name for piece in bait.pieces if piece.role is Role.VOID}
    hollow = sum(part.volume for part in composition.parts if part.role is Role.VOID and part.name not in voids)
    return _Weighed(mass, vessel.hull(ends).volume * bait.water.density - mass, hollow)


def _inside(bait: Bait, made: Hollow) -> list[str]:
    """Names of the inserts that stand in the hollow."""
    names = []
    for piece in bait.pieces:
        if piece.role is Role.INSERT:
            own = solid_of(piece.surface, piece.name)
            if any(own.met(part).volume > tolerances.VOLUME_SHARE * own.volume for part in made.inside):
                names.append(piece.name)
    return names


def _broken(what: str, found: str, allowed: str) -> Fault:
    return Fault(
        f"the hollow bait that was written does not keep its {what}; it was not kept",
        f"{STEM}.toml",
        found,
        allowed,
        "take another wall",
    )
