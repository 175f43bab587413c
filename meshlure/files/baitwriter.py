"""A bait file of a changed bait: the maker's own text, with what was changed written into it."""

from __future__ import annotations

import tomllib
from collections.abc import Mapping, MutableMapping, Sequence
from dataclasses import dataclass, replace
from decimal import Decimal
from pathlib import Path
from typing import Any, Final

from tomlkit.exceptions import TOMLKitError

from meshlure.files.baitfile import BaitFile, bait_of
from meshlure.files.sections.balls import BallsSection
from meshlure.files.sections.inserts import InsertSection
from meshlure.files.sections.substance import Substance
from meshlure.files.tomlblocks import Blocks, Document, Plain
from meshlure.units import G_PER_CM3, MM

_BODY: Final = "body"
_POINTS: Final = (
    ("hardware", "at"),
    ("line", "tie"),
    ("mould", "sprue", "at"),
    ("mould", "tab", "at"),
    ("mould", "vents"),
)
"""Where points in mesh coordinates stand: section, then key by key."""
_MADE: Final = "# Written by meshlure from"


@dataclass(frozen=True)
class Changes:
    """What of a bait is changed; all meshes are in mm afterwards.

    Attributes
    ----------
    meshes : mapping of str to str
        File in the new bait file's folder, with forward slashes, of "body" and of every insert that stays.
    name : str or None
        The bait's; None for the one it had.
    body_density : float or None, kg/m3
        In the place of the body's material, density or print.
    body_cavities : str or None
        "sealed" or "flooded": what the new body mesh's inner shells are.
    dropped : tuple of str
        Inserts that are left out, with the balls that lie in them.
    inserts : tuple of InsertSection
        New ones, put after the others; ``mesh`` is a file in the new bait file's folder.
    balls : tuple of BallsSection
        New ones, put after the others.
    without : tuple of str
        Sections that are left out, such as "measured".
    """

    meshes: Mapping[str, str]
    name: str | None = None
    body_density: float | None = None
    body_cavities: str | None = None
    dropped: tuple[str, ...] = ()
    inserts: tuple[InsertSection, ...] = ()
    balls: tuple[BallsSection, ...] = ()
    without: tuple[str, ...] = ()


def write_baitfile(path: Path, plan: BaitFile, changes: Changes) -> BaitFile:
    """Write the bait file of a changed bait, and return the bait that it describes.

    Parameters
    ----------
    path : Path
        The new file; meshes are named relative to its folder.
    plan : BaitFile
        The bait as it was stated. What is written comes from its `table` and `text`; its sections are not looked at.
    changes : Changes

    Raises
    ------
    InputError
        The changed bait has faults, such as two pieces of one name. Nothing is written.
    ValueError
        The changes do not fit the bait: a piece without a mesh, an insert or section to be left out that is not there.
    OSError
        The file cannot be written.

    Notes
    -----
    The unit of the file's coordinates becomes mm; points in it are converted as decimals. The maker's comments, order
    and spelling stay. Where a file is written so oddly that they cannot (sections as inline tables), the values alone
    are written, and a comment says so. Either way the text is parsed again and held against the changed values.
    """
    plain = Plain(plan.table)
    _change(plain, plan, changes)
    made = bait_of(plain.table, path.parent, path.stem, path)
    text = _text(plain, plan, changes)
    path.write_bytes(text.encode("utf-8"))
    return replace(made, table=tomllib.loads(text), text=text)


def _text(plain: Plain, plan: BaitFile, changes: Changes) -> str:
    if plan.path is None or not plan.text:
        return plain.text()
    file = plan.path.name if plan.path.name.isprintable() else "a bait file"
    try:
        blocks = Blocks(plan.text)
        _change(blocks, plan, changes)
        text = blocks.text()
        if tomllib.loads(text) == plain.table:
            kept = text.partition("\n")[2] if text.startswith(_MADE) else text
            return f"{_MADE} {file}. Its comments stand as they stood there.\n{kept}"
    except (ValueError, LookupError, TypeError, TOMLKitError):
        pass  # a spelling of TOML that cannot be changed in its place
    return f"{_MADE} {file}. Its comments could not be kept.\n\n{plain.text()}"


def _change(document: Document, plan: BaitFile, changes: Changes) -> None:
    """Make all changes in a document."""
    (bait,), (body,) = document.sections("bait"), document.sections("body")
    if plan.bait.metres != MM:
        for section, *keys in _POINTS:
            for table in document.sections(section):
                _convert(table, keys, plan.bait.metres)
        bait["length_unit"] = "mm"
    _put(bait, "name", changes.name or plan.bait.name)
    _put(body, "mesh", _mesh(changes, _BODY))
    if changes.body_cavities is not None:
        _put(body, "cavities", changes.body_cavities)
    if changes.body_density is not None:
        for key in ("material", "printed", "density"):
            body.pop(key, None)
        body["density"] = _written(changes.body_density, G_PER_CM3, "g/cm3")
    # New ones before old ones go, so that they come to stand in their place.
    for insert in changes.inserts:
        document.append("insert", _insert(insert))
    for balls in changes.balls:
        document.append("balls", _balls(balls))
    _drop(document, changes)
    for insert_table in document.sections("insert")[: -len(changes.inserts) or None]:
        _put(insert_table, "mesh", _mesh(changes, insert_table["name"].strip()))
    for section in changes.without:
        count = len(document.sections(section))
        if not count:
            raise ValueError(f"there is no section {section!r} to leave out")
        for _ in range(count):
            document.remove(section, 0)


def _drop(document: Document, changes: Changes) -> None:
    """Leave out inserts, the balls that lie in them, and what is said of them elsewhere."""
    names = [table["name"].strip() for table in document.sections("insert")]
    missing = [name for name in changes.dropped if name not in names]
    if missing:
        raise ValueError(f"there is no insert {', '.join(map(repr, missing))} to leave out")
    _remove(document, "insert", [name in changes.dropped for name in names])
    chambers = [table["chamber"].strip() for table in document.sections("balls")]
    _remove(document, "balls", [chamber in changes.dropped for chamber in chambers])
    for table in document.sections("insert"):
        replaced = table.get("replaces", [])
        left = [name for name in replaced if name.strip() not in changes.dropped]
        if replaced and not left:
            del table["replaces"]
        elif len(left) < len(replaced):
            table["replaces"] = left


def _remove(document: Document, section: str, goes: list[bool]) -> None:
    for number in reversed([number for number, one in enumerate(goes) if one]):
        document.remove(section, number)


def _mesh(changes: Changes, piece: str) -> str:
    if piece not in changes.meshes:
        raise ValueError(f"no mesh is named for {piece!r}")
    return changes.meshes[piece]


def _put(table: MutableMapping[str, Any], key: str, value: str) -> None:
    """Set a text; one that stands there already keeps its spelling."""
    if table.get(key) != value:
        table[key] = value


def _convert(table: MutableMapping[str, Any], keys: Sequence[str], metres: float) -> None:
    """Turn the points that stand at a key of a key, where they are stated, into mm."""
    first, *rest = keys
    if first in table and rest:
        _convert(table[first], rest, metres)
    elif first in table:
        table[first] = _in_mm(table[first], metres)


def _in_mm(value: Any, metres: float) -> Any:
    """Coordinates, in lists as deep as they come, in mm; words such as "tail" stay."""
    if isinstance(value, list):
        return [_in_mm(each, metres) for each in value]
    if isinstance(value, str):
        return value
    # As decimals, so that 4.1 cm are 41 mm and not 41.00000000000001.
    return float(Decimal(repr(float(value))) * Decimal(repr(metres)) * 1000)


def _written(value: float, size: float, unit: str) -> str:
    """Quantity with its unit, in as few digits as read back as the same number."""
    text = ""
    for digits in range(4, 18):
        text = f"{value / size:.{digits}g}"
        if float(Decimal(text) * Decimal(repr(size))) == value:
            break
    return f"{text} {unit}"


def _insert(insert: InsertSection) -> dict[str, object]:
    table: dict[str, object] = {"name": insert.name, "mesh": insert.mesh.as_posix()}
    table |= {"void": insert.void} if insert.void is not None else {}
    table |= _substance(insert.substance)
    table |= {"cavities": insert.cavities} if insert.cavities != "sealed" else {}
    table |= {"replaces": list(insert.replaces)} if insert.replaces else {}
    table |= {key: True for key in ("lip", "free", "pinned", "coated") if getattr(insert, key)}
    table |= {"fit": _written(insert.fit, MM, "mm")} if insert.fit else {}
    return table | ({"glue": insert.glue} if insert.glue is not None else {})


def _balls(balls: BallsSection) -> dict[str, object]:
    table: dict[str, object] = {"chamber": balls.chamber, "diameter": _written(balls.diameter, MM, "mm")}
    table |= {"count": balls.count} | _substance(balls.substance)
    return table | ({"at": balls.at} if balls.at is not None else {})


def _substance(substance: Substance | None) -> dict[str, object]:
    if substance is None:
        return {}
    if substance.material is not None:
        return {"material": substance.material}
    return {} if substance.density is None else {"density": _written(substance.density, G_PER_CM3, "g/cm3")}
