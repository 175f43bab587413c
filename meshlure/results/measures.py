"""What baits are compared by: the quantities in the order of the page, each with the band of a difference in it."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from typing import Any

from meshlure.results import difference
from meshlure.results.account import headline
from meshlure.results.difference import Band, Doubts

Tree = dict[str, Any]
Value = Callable[[Tree], float | None]
Differ = Callable[[Tree, Tree], Band | None]


@dataclass(frozen=True)
class Measure:
    """One quantity.

    Attributes
    ----------
    key, what, unit : str
    group : str
        Heading that it stands under.
    digits : int
        Decimals that it is shown with.
    value : callable
        Of a result tree; None where it has no meaning.
    band : callable or None
        Of the first tree and another: how sure their difference is. None where that is not known.
    """

    key: str
    what: str
    unit: str
    group: str
    digits: int
    value: Value
    band: Differ | None = None


def measures(first: Tree) -> list[Measure]:
    """Return the quantities, in the order of the page; speeds are the first bait's."""
    slow, fast = min(first["retrieve"]["speeds_m_s"]), max(first["retrieve"]["speeds_m_s"])
    return [*_size(), *_weight(), *_rest(), *_areas(), *_drags(slow, fast), *_motion()]


def _size() -> list[Measure]:
    def row(key: str, what: str) -> Measure:
        def size(tree: Tree) -> float:
            return float(tree["size"][f"{key}_mm"])

        return Measure(f"{key}_mm", what, "mm", "Size", 1, size, _faceted(size, 1))

    return [row("length", "length of the body"), row("depth", "depth"), row("width", "width")]


def _weight() -> list[Measure]:
    def displaced(tree: Tree) -> float:
        return float(tree["buoyancy"]["displaced_mm3"])

    def row(key: str, what: str, unit: str, digits: int, value: Value, band: Differ | None) -> Measure:
        return Measure(key, what, unit, "Weight", digits, value, band)

    centre = "centre of gravity from the nose"
    return [
        row("mass_g", "mass", "g", 2, lambda tree: tree["weight"]["mass_g"], _doubted(difference.mass)),
        row("from_nose_mm", centre, "mm", 1, lambda tree: tree["weight"]["from_nose_mm"], None),
        row("displaced_mm3", "displaced water", "mm3", 0, displaced, _faceted(displaced, 3)),
    ]


def _rest() -> list[Measure]:
    def row(key: str, what: str, unit: str, digits: int, value: Value, band: Differ | None = None) -> Measure:
        return Measure(key, what, unit, "At rest", digits, value, band)

    def main(key: str) -> Value:
        return lambda tree: main_posture(tree).get(key)

    def height(key: str) -> Value:
        return lambda tree: (main_posture(tree).get("metacentric_mm") or {}).get(key)

    return [
        row("reserve_g", "reserve", "g", 2, lambda tree: tree["buoyancy"]["reserve_g"], _doubted(difference.reserve)),
        row("nose_up_deg", "nose up", "deg", 1, main("nose_up_deg"), _posed("nose_up")),
        row("lean_deg", "lean to its right", "deg", 1, main("lean_deg"), _posed("lean")),
        row("submerged_share", "share under water", "", 3, main("submerged_share")),
        row("fore_aft_mm", "metacentric height, fore-aft", "mm", 2, height("fore_aft")),
        row("sideways_mm", "metacentric height, sideways", "mm", 2, height("sideways")),
    ]


def _areas() -> list[Measure]:
    def row(name: str, words: str) -> Measure:
        area = _area(name)
        return Measure(f"{name}_mm2", f"silhouette {words}", "mm2", "Areas", 0, area, _faceted(area, 2))

    return [row("side", "from the side"), row("top", "from above"), row("front", "from the front")]


def _drags(slow: float, fast: float) -> list[Measure]:
    def row(key: str, what: str, of: Callable[[Tree], Tree | None]) -> Measure:
        band = _estimated(_drag_band(of), shared_body=True)
        return Measure(key, f"drag area {what}", "mm2", "Drag", 0, _drag_area(of), band)

    pull = f"pull when drawn at {fast:g} m/s"
    return [
        row("drag_water_mm2", f"in water, nose first, {slow:g} m/s", _drag("water", "nose", slow)),
        row("drag_air_nose_mm2", "in air, nose first", _drag("air", "nose", None)),
        row("drag_air_tail_mm2", "in air, tail first", _drag("air", "tail", None)),
        Measure("tow_gf", pull, "gf", "Drag", 1, _tow(fast), _estimated(_tow_band(fast), shared_body=True)),
    ]


def _motion() -> list[Measure]:
    def row(key: str, what: str, unit: str, digits: int, value: Value, band: Differ | None = None) -> Measure:
        return Measure(key, what, unit, "In motion", digits, value, band)

    def flight(key: str) -> Value:
        return lambda tree: tree["flight"][key]

    def sinks(tree: Tree) -> float:
        return float(tree["sinking"]["speed_m_s"]) * 100

    return [
        row("reach_m", "reach of the throw", "m", 1, flight("distance_m"), _estimated(_reach_band)),
        row("reach_of_sphere", "reach over a sphere's", "", 2, lambda tree: tree["flight"]["ratios"]["sphere"]),
        row("sinks_cm_s", "sinks (rises: below 0)", "cm/s", 1, sinks, _estimated(_sink_band)),
        row("sinks_nose_up_deg", "nose up meanwhile", "deg", 0, lambda tree: tree["sinking"]["attitude_nose_up_deg"]),
    ]


def same_body(first: Tree, other: Tree) -> bool:
    """Tell whether two baits are of one body: the same bytes of mesh."""
    return bool(first["inputs"][0]["sha256"] == other["inputs"][0]["sha256"])


def _doubted(doubts: Callable[[Tree], Doubts]) -> Callable[[Tree, Tree], Band | None]:
    return lambda first, other: difference.apart(doubts(first), doubts(other))


def _faceted(value: Callable[[Tree], float], dimension: int) -> Callable[[Tree, Tree], Band | None]:
    return _doubted(lambda tree: difference.facets(tree, value(tree), dimension))


def _posed(key: str) -> Callable[[Tree, Tree], Band | None]:
    def band(first: Tree, other: Tree) -> Band | None:
        alike = same_body(first, other)
        one, two = (difference.angle(tree, key, alike) for tree in (first, other))
        return None if one is None or two is None else difference.apart(one, two)

    return band


def _estimated(own: Callable[[Tree], Band | None], shared_body: bool = False) -> Callable[[Tree, Tree], Band | None]:
    def band(first: Tree, other: Tree) -> Band | None:
        if shared_body and same_body(first, other):
            return Band(0.0, 0.0)
        one, two = own(first), own(other)
        return None if one is None or two is None else Band.root([one.turned, two])

    return band


def main_posture(tree: Tree) -> Tree:
    """Return the posture that a bait is known by, empty where it has none."""
    return headline(tree["postures"]) if tree["postures"] else {}


def _area(name: str) -> Callable[[Tree], float]:
    return lambda tree: float(next(row["area_mm2"] for row in tree["areas"] if row["name"] == name))


def _drag(fluid: str, leads: str, speed: float | None) -> Callable[[Tree], Tree | None]:
    def found(tree: Tree) -> Tree | None:
        rows = [row for row in tree["drag"] if (row["fluid"], row["leads"], row["headline"]) == (fluid, leads, True)]
        return next((row for row in rows if speed is None or row["speed_m_s"] == speed), None)

    return found


def _drag_area(row: Callable[[Tree], Tree | None]) -> Callable[[Tree], float | None]:
    def value(tree: Tree) -> float | None:
        found = row(tree)
        return None if found is None else float(found["drag_area_mm2"])

    return value


def _drag_band(row: Callable[[Tree], Tree | None]) -> Callable[[Tree], Band | None]:
    def band(tree: Tree) -> Band | None:
        found = row(tree)
        return None if found is None else difference.scattered(found["drag_area_mm2"], 0.0, 0.0)

    return band


def _cd(row: Tree) -> tuple[float, float, float]:
    return row["cd"], row["cd_low"], row["cd_high"]


def _reach_band(tree: Tree) -> Band | None:
    flight = tree["flight"]
    row = _drag("air", flight["leads"], None)(tree)
    if row is None:
        return None
    return difference.scattered(flight["distance_m"], flight["distance_low_m"], flight["distance_high_m"], _cd(row))


def _sink_band(tree: Tree) -> Band | None:
    """By the drag, and by the reserve: the speed grows with its root."""
    sinking, buoyancy = tree["sinking"], tree["buoyancy"]
    row = _drag("water", "nose", None)(tree)
    if row is None:
        return None
    speed = sinking["speed_m_s"] * 100
    low, high = sorted((sinking["speed_low_m_s"] * 100, sinking["speed_high_m_s"] * 100))
    drag = difference.scattered(speed, low, high, _cd(row))
    half = max(buoyancy["reserve_high_g"] - buoyancy["reserve_g"], buoyancy["reserve_g"] - buoyancy["reserve_low_g"])
    loose = abs(speed) * min(1.0, half / abs(buoyancy["reserve_g"]) / 2) if buoyancy["reserve_g"] else abs(speed)
    return Band.root([drag, Band(loose, loose)])


def _tow(speed: float) -> Callable[[Tree], float | None]:
    def value(tree: Tree) -> float | None:
        return next((row["drag_gf"] for row in tree["sinking"]["tow"] if row["speed_m_s"] == speed), None)

    return value


def _tow_band(speed: float) -> Callable[[Tree], Band | None]:
    pull = _tow(speed)

    def band(tree: Tree) -> Band | None:
        value = pull(tree)
        return None if value is None else difference.scattered(value, 0.0, 0.0)

    return band
