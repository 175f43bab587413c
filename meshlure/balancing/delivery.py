"""What was found for a target, written as a bait of its own and held against its promise."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass, replace
from math import degrees
from pathlib import Path
from typing import Any, Final

import numpy as np

from meshlure.bait.loading import read_bait
from meshlure.bait.pieces import Bait
from meshlure.errors import Fault, InputError
from meshlure.examine import study
from meshlure.files.sections.inserts import InsertSection
from meshlure.files.sections.substance import Substance as Stated
from meshlure.files.source import ALL
from meshlure.geometry.moments import solid_moments
from meshlure.geometry.surface import Surface
from meshlure.making.balance.ballast import UNCUT, Ballast
from meshlure.making.balance.cut import Cut, cut
from meshlure.making.balance.ground import Ground
from meshlure.making.balance.halves import halves
from meshlure.making.balance.outcome import Outcome
from meshlure.making.variantfile import NewInsert, Variant, write_variant
from meshlure.results import balance as tree
from meshlure.results.study import Study

Tree = dict[str, Any]
Tell = Callable[[str], None]

KEPT_RESERVE: Final = 0.02e-3
"""kg. What was written must have the reserve promised within this."""
KEPT_ANGLE: Final = 0.2
"""degrees. What was written must rest as promised within this."""
KEPT_VOLUME: Final = 1e-4
"""Share within which the body read back must have its volume."""


@dataclass(frozen=True, eq=False)
class Balance:
    """What was found for a target, ready to be written.

    Attributes
    ----------
    bait : Bait
        As the bait file has it.
    ground : Ground
    taken : Ballast or None
        To be written; None where only the body's density changes, or no ballast can help.
    outcome : Outcome
        Promised.
    density : float or None, kg/m3
        Of the body, where that was solved for.
    met : bool
        Whether what is to be written meets the target.
    account : dict
        For results.json.
    """

    bait: Bait
    ground: Ground
    taken: Ballast | None
    outcome: Outcome
    density: float | None
    met: bool
    account: Tree

    def make(
        self, folder: Path, out: Path, parted: bool = False, tell: Tell = lambda _: None
    ) -> tuple[Study, list[str]]:
        """Write the bait's meshes, bait file and package into a folder, and study it from there.

        Parameters
        ----------
        folder : Path
            Empty.
        out : Path
            What the folder will be named in the end.
        parted : bool
            Whether to write the body's left and right halves too.
        tell : callable
            Told each phase.

        Raises
        ------
        InputError
            Where a mesh does not come back as promised, or the bait read back does not keep its reserve and posture.
        """
        tell("cutting the pocket")
        made = cut(self.ground, self.taken)
        further: list[tuple[str, Surface]] = []
        account = dict(self.account)
        if parted:
            two = halves(made.body, self.ground.frame, self._in_the_way())
            further = [("body left", two.left.surface()), ("body right", two.right.surface())]
            account["pins"] = [tree.pin(p.middle, p.axis, 2 * p.radius, p.length) for p in two.pins]
        variant = Variant(
            name=f"{self.bait.name}, balanced",
            body=made.body,
            inserts=self._inserts(made),
            dropped=tuple(piece.name for piece in self.ground.freed),
            further=tuple(further),
            body_density=self.density,
            # Weighed on the bait as it was.
            without=("measured",) if self.bait.plan.measured is not None else (),
        )
        names = write_variant(folder, "balanced", self.bait, variant)
        tell("reading back")
        again = read_bait(folder / "balanced.toml", ALL)
        found = study(again, tell=tell)
        self._check(found, again, made)
        tell("writing")
        results = dict(found.results)
        results["inputs"] = [row | {"file": str(out / Path(row["file"]).name)} for row in results["inputs"]]
        results["balance"] = account
        return replace(found, results=results), names

    def _in_the_way(self) -> list[Surface]:
        """What pins must leave alone: the other pieces, and the ballast where no pocket is cut for it."""
        return [*self.ground.neighbours, *(self.taken.rooms() if self.taken is not None else ())]

    def _inserts(self, made: Cut) -> tuple[NewInsert, ...]:
        ballast = self.taken
        if ballast is None:
            return ()
        taken = {insert.name.casefold() for insert in self.bait.plan.inserts} - {
            piece.name.casefold() for piece in self.ground.freed
        }
        taken |= {item.name.casefold() for item in self.bait.plan.hardware} | {"body"}
        kind = ballast.kind
        rows: list[NewInsert] = []
        glue: tuple[str, ...] = ()
        if kind.glue is not None and kind.fit > 0:
            names = [_free_name("glue", number, taken) for number in range(1, len(ballast.rooms()) + 1)]
            glue = tuple(names)
            rows += [
                NewInsert(_section(name, kind.glue.name), surface, made=False)
                for name, surface in zip(names, ballast.rooms(), strict=True)
            ]
        rows += [
            NewInsert(_section(_free_name("ballast", number, taken), kind.substance.name, glue), surface)
            for number, surface in enumerate(made.ballast, 1)
        ]
        if made.plug is not None:
            section = replace(_section(_free_name("plug", 1, taken), None), coated=True)
            rows.append(NewInsert(replace(section, substance=self.bait.plan.body.substance), made.plug.surface()))
        return tuple(rows)

    def _check(self, found: Study, again: Bait, made: Cut) -> None:
        """Refuse what was written where it does not keep its promise."""
        faults = []
        promised = self.outcome
        reserve = found.results["buoyancy"]["reserve_g"] * 1e-3
        if abs(reserve - promised.reserve) > KEPT_RESERVE:
            kept = f"{promised.reserve * 1e3:.3f} g within {KEPT_RESERVE * 1e3:g}"
            faults.append(_broken("reserve", f"{reserve * 1e3:.3f} g", kept))
        volume, whole = self._volume(made), _material(again)
        if abs(whole - volume) > KEPT_VOLUME * volume:
            faults.append(
                _broken("volume of the body", f"{whole * 1e9:.6g} mm3", f"{volume * 1e9:.6g} mm3 within 0.01%")
            )
        off = self._off(found)
        if off > KEPT_ANGLE:
            faults.append(_broken("posture", f"{off:.2f} degrees off", f"within {KEPT_ANGLE:g} degrees"))
        if faults:
            raise InputError(faults)

    def _volume(self, made: Cut) -> float:
        """Volume of body material promised, m3: what was drawn less the true room, whatever its mesh is."""
        volume = _material(self.bait)
        if self.taken is None or self.taken.kind.pocket == UNCUT:
            return volume
        return volume - self.taken.taken().amount - made.drilled

    def _off(self, found: Study) -> float:
        """By how many degrees the nearest posture differs from the one promised."""
        up = self.outcome.up
        ups = [np.array(posture["up"]) for posture in found.results["postures"] if posture["up"] is not None]
        if up is None:
            return 180.0 if ups else 0.0
        # Of postures that mirror each other the bait may come to rest in either.
        return min((degrees(float(np.arccos(np.clip(up @ other, -1.0, 1.0)))) for other in ups), default=180.0)


def _material(bait: Bait) -> float:
    """Volume of a body less its cavities, m3."""
    return solid_moments(bait.body.surface).amount - sum(solid_moments(hollow).amount for hollow in bait.body.cavities)


def _broken(what: str, found: str, allowed: str) -> Fault:
    return Fault(
        f"the bait that was written does not keep its {what}; it was not kept",
        "balanced.toml",
        found,
        allowed,
        "take another way with --take, or move what lies near the ballast",
    )


def _free_name(word: str, number: int, taken: set[str]) -> str:
    """Return a name for a new piece that nothing else has: "ballast-1"."""
    name, step = f"{word}-{number}", number
    while name.casefold() in taken:
        step += 1
        name = f"{word}-{step}"
    taken.add(name.casefold())
    return name


def _section(name: str, material: str | None, replaces: tuple[str, ...] = ()) -> InsertSection:
    substance = None if material is None else Stated(material=material)
    return InsertSection(name, Path(), substance, replaces=replaces)
