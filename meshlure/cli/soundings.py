"""The lines that an inspection prints: one mesh in full, or many as a table."""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from typing import Any

from meshlure.cli.tables import Column, Table

Tree = Mapping[str, Any]


def lines(row: Tree) -> Iterator[str]:
    """Yield what there is to say of one mesh."""
    yield str(row["file"])
    if row["verdict"] == "unreadable":
        for fault in row["faults"]:
            where = fault["where"].removeprefix(str(row["file"])).lstrip(", :")
            yield f"  unread   {where + ': ' if where else ''}{fault['what']}"
            for key, words in (("found", "found"), ("allowed", "allowed"), ("next", "next_step")):
                if fault[words]:
                    yield f"           {key}: {fault[words]}"
        return
    counts = f"{row['triangles']:,} triangles, {row['bytes']:,} bytes"
    yield f"  format   {row['format']}, {counts}, read in {row['length_unit']}"
    yield f"  size     {_size(row['size_mm'])}, {_span(row)}"
    yield from _volume(row)
    if len(row["parts"]) > 1:
        yield f"  parts    {_listed([part['name'] or 'without a name' for part in row['parts']])}"
    yield from _shells(row["shells"])
    yield from _findings(row["findings"], "  ")
    if row["mending"] is not None:
        yield from _mending(row["mending"])
    made = row["mending"]
    mended = "" if made is None or not made["file"] else f" as it was; {_verdict(made['findings'])} as mended"
    yield f"  verdict  {_verdict(row['findings'])}{mended}"


def _size(size: Sequence[float]) -> str:
    return " x ".join(f"{length:.4g}" for length in size) + " mm"


def _span(row: Tree) -> str:
    ends = zip("xyz", row["low_mm"], row["high_mm"], strict=True)
    return ", ".join(f"{axis} {low:.4g} to {high:.4g}" for axis, low, high in ends)


def _volume(row: Tree) -> Iterator[str]:
    volume = row["volume_mm3"]
    if volume is None:
        yield "  volume   undefined"
        return
    summed = row["summed_volume_mm3"]
    shared = f"; summed shell by shell {summed:.6g} mm3" if abs(summed - volume) > 1e-6 * abs(volume) else ""
    yield f"  volume   {volume:.6g} mm3 ({volume / 1000:.4g} cm3){shared}"
    exact = row["exact_volume_mm3"]
    if exact is not None:
        share = f", {volume / exact - 1:+.2%} in the facets" if exact else ""
        yield f"  exact    {exact:.6g} mm3 by the smooth solid in the file{share}"
    deficit = row["deficit_mm3"]
    share = f" ({deficit / volume:.2%})" if volume else ""
    yield f"  facets   leave out about {deficit:.3g} mm3{share} of the smooth part"


def _shells(rows: Sequence[Tree]) -> Iterator[str]:
    if len(rows) < 2:
        return
    for number, row in enumerate(rows[:20], 1):
        name = f" '{row['part']}'" if row["part"] else ""
        ball = f", a ball of {row['ball_mm']:.3g} mm" if row["ball_mm"] is not None else ""
        inside = f", inside {row['inside'] + 1}" if row["inside"] is not None else ""
        meets = f", meets {_listed([str(other + 1) for other in row['meets']])}" if row["meets"] else ""
        yield (
            f"  {row['kind']:<8} {number}{name}: {row['volume_mm3']:.4g} mm3, {_size(row['size_mm'])}, "
            f"{row['triangles']:,} triangles{ball}{inside}{meets}"
        )
    if len(rows) > 20:
        yield f"           and {len(rows) - 20:,} more shells"


def _findings(rows: Sequence[Tree], indent: str) -> Iterator[str]:
    for row in rows:
        yield f"{indent}{row['level']}: {row['message']} [{row['code']}]"
        if row["advice"]:
            yield f"{indent}  next: {row['advice']}"


def _mending(made: Tree) -> Iterator[str]:
    written = made["file"]
    word = "mended  " if written else "would   "
    if not made["steps"]:
        nothing = "nothing" if written else "do nothing"
        yield f"  {word} {nothing}: there is nothing to mend, or nothing that these steps can"
    for step in made["steps"]:
        # Of a new skin its own words say how far it lies, and where that was measured.
        told = step["moved_mm"] and step["code"] != "remake"
        moved = f"; nothing moved more than {step['moved_mm']:.2g} mm" if told else ""
        yield f"  {word} {step['did']}{moved}"
        yield f"           volume {_change(step['before_mm3'], step['after_mm3'])}"
    for left in made["left"]:
        yield f"  left     {left['what']}"
        if left["advice"]:
            yield f"           next: {left['advice']}"
    for offer in made["offers"]:
        yield f"  offer    {offer['option']} would close it, with {offer['volume_mm3']:.6g} mm3"
    state = f"closed, {made['volume_mm3']:.6g} mm3, {_size(made['size_mm'])}" if made["closed"] else "still not closed"
    yield f"  after    {state}, {made['triangles']:,} triangles"
    if made["closed"]:
        yield from _findings([row for row in made["findings"] if row["level"] != "note"], "    ")
    if written:
        merged = f"; corners up to {made['merged_mm']:.2g} mm apart were merged" if made["merged_mm"] else ""
        yield f"  written  {written}{merged}"


def _change(before: float | None, after: float | None) -> str:
    if before is None:
        return "stays undefined" if after is None else f"was undefined, is now {after:.6g} mm3"
    if after is None:
        return f"was {before:.6g} mm3, is now undefined"
    return f"{before:.6g} mm3 to {after:.6g} mm3 ({after - before:+.4g} mm3)"


def _verdict(rows: Sequence[Tree]) -> str:
    counts = {level: sum(row["level"] == level for row in rows) for level in ("fault", "warning", "note")}
    if not counts["fault"] and not counts["warning"]:
        return "sound"
    return ", ".join(f"{n} {level}{'' if n == 1 else 's'}" for level, n in counts.items())


def _listed(words: Sequence[str]) -> str:
    return ", ".join(words[:10]) + (f" and {len(words) - 10:,} more" if len(words) > 10 else "")


def table(rows: Sequence[Tree]) -> Table:
    """Return many meshes as a table, a line each."""
    columns = (
        Column("file", words=True),
        Column("format"),
        Column("unit"),
        Column("size mm"),
        Column("triangles", number=True),
        Column("shells", number=True),
        Column("volume mm3", number=True),
        Column("verdict", words=True),
    )
    return Table(columns, [_cells(row) for row in rows])


def _cells(row: Tree) -> tuple[str, ...]:
    if row["verdict"] == "unreadable":
        return (str(row["file"]), "-", "-", "-", "-", "-", "-", f"unreadable: {row['faults'][0]['what']}")
    volume = "undefined" if row["volume_mm3"] is None else f"{row['volume_mm3']:.5g}"
    graver = [f["code"] for f in row["findings"] if f["level"] != "note"]
    return (
        str(row["file"]),
        row["format"],
        row["length_unit"],
        " x ".join(f"{length:.4g}" for length in row["size_mm"]),
        f"{row['triangles']:,}",
        str(len(row["shells"]) or "-"),
        volume,
        ", ".join(graver) or "sound",
    )
