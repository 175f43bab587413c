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
from meshlure.making.balance.ballast import Ballast
from meshlure.making.balance.cut import Cut, cut
from meshlure.making.balance.ground import Ground
from meshlure.making.balance.halves import halves
from meshlure.making.balance.outcome import Outcome
from meshlure.making.variantfile import NewInsert, Variant, write_variant
from meshlure.results import balance as tree
from meshlure.results.account import headline
from meshlure.results.study import Study

Tree = dict[str, Any]
Tell = Callable[[str], None]

KEPT_RESERVE: Final = 0.02e-3
"""kg. What was written must have the reserve promised within this."""
KEPT_ANGLE: Final = 0.2
"""degrees. What was written must rest as promised within this."""


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
    outcome : Outcome or None
        Promised.
    density : float or None, kg/m3
        Of the body, where that was solved for.
    reachable : bool
    account : dict
        For results.json.
    """

    bait: Bait
    ground: Ground
    taken: Ballast | None
    outcome: Outcome | None
    density: float | None
    reachable: bool
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
        tell("cutting")
        made = cut(self.ground.bait, self.taken)
        further: list[tuple[str, Any]] = []
        account = dict(self.account)
        if parted:
            found = halves(made.body, self.ground.frame, self._neighbours())
            further = [("body left", found.left.surface()), ("body right", found.right.surface())]
            account["pins"] = [tree.pin(p.middle, p.axis, 2 * p.radius, p.length) for p in found.pins]
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
        found_again = study(read_bait(folder / "balanced.toml"))
        self._check(found_again)
        results = dict(found_again.results)
        results["inputs"] = [row | {"file": str(out / Path(row["file"]).name)} for row in results["inputs"]]
        results["balance"] = account
        return replace(found_again, results=results), names

    def _neighbours(self) -> list[Any]:
        return [piece.surface for piece in self.ground.bait.pieces]

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
            body = self.bait.plan.body
            substance = replace(body.substance) if body.substance is not None else None
            name = _free_name("plug", 1, taken)
            rows.append(NewInsert(replace(_section(name, None), substance=substance), made.plug.surface()))
        return tuple(rows)

    def _check(self, found: Study) -> None:
        """Refuse what was written where it does not keep its promise."""
        promised = self.outcome
        if promised is None:
            return
        faults = []
        reserve = found.results["buoyancy"]["reserve_g"] * 1e-3
        if abs(reserve - promised.reserve) > KEPT_RESERVE:
            faults.append(_broken("reserve", f"{reserve * 1e3:.3f} g", f"{promised.reserve * 1e3:.3f} g within 0.02"))
        posture = headline(found.results["postures"])
        up = posture["up"]
        if promised.up is not None and up is not None:
            off = degrees(float(np.arccos(np.clip(promised.up @ np.array(up), -1.0, 1.0))))
            if off > KEPT_ANGLE:
                faults.append(_broken("posture", f"{off:.2f} degrees off", "within 0.2 degrees"))
        if faults:
            raise InputError(faults)


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
    return InsertSection(
        name,
        Path("x.stl"),
        substance,
        None,
        "sealed",
        replaces,
        lip=False,
        free=False,
        pinned=False,
        fit=0.0,
        glue=None,
    )
