"""Files changed as accidents and malice change them: within what a format's structure lets through, and beyond it."""

from __future__ import annotations

import io
import json
import math
import random
import re
import struct
import warnings
import zipfile
import zlib
from collections.abc import Callable, Sequence
from typing import Any, Final

NUMBERS: Final = (
    b"0", b"-0", b"1", b"-1", b"nan", b"inf", b"-inf", b"1e30", b"1e308", b"-1e308", b"1e309", b"1e-30", b"5e-324",
    b"1e-320", b"4294967295", b"4294967296", b"2147483648", b"-2147483649", b"9223372036854775808", b"1" * 400,
    b"1_0", b"0x10", b"1,5", b"1.2.3", b"--1", b".", b"1e", b"+1", b"\xd9\xa1", b"\xc2\xbd", b"", b"0.1", b"16777217",
)  # fmt: skip
WORDS: Final = tuple(
    struct.pack("<I", value) for value in (0, 1, 0x7FFFFFFF, 0x80000000, 0xFFFFFFFF, 0x7FC00000, 0x7F800000, 0xFF800000,
                                           0x00000001, 0x71C9F2CA, 0x7F7FFFFF, 0x01000000, 65535, 65536)
)  # fmt: skip
"""Of four bytes: greatest and least counts, and as numbers nan, both infinities, a denormal, 2e30 and the greatest."""
TEXTS: Final = (
    "", " ", "x", "<b>&amp;\"'</b>", "</script>", "\u202e", "\x1b[31m", "\0", "a" * 300, "../../../etc/passwd",
    "/dev/zero", "1 mm", "-1 mm", "nan mm", "1e400 g", "0 g/cm3", "1e-300 g/cm3", "1e300 g/cm3", "100 %", "-5 %",
    "1 furlong", "1 mm mm", "1 kg/m^99", "(1+1) mm", "1 degC", "-300 degC", "1/0 g", "\u00bd in", "9" * 400 + " mm",
    "mm", "+x", "0,0,0", "1,2", "lead", "treble 6", "tail", "sealed", "flooded",
)  # fmt: skip
VALUES: Final[tuple[Any, ...]] = (
    None, True, False, 0, 1, -1, 10**30, -(10**30), 2**63, 0.5, 1e300, -1e300, 1e-310, math.nan, math.inf, [], [[]], {},
    [0], [1, 2, 3], ["x"], {"a": 1}, [0.0, 0.0, 0.0], [math.nan, 0.0, 0.0], [1e300, 1e300, 1e300], *TEXTS,
)  # fmt: skip

FACTORS: Final = (0.0, 1e-9, 1e-3, 0.1, 0.5, 0.9, 1.1, 2.0, 5.0, 10.0, 1e3, 1e9, -1.0)
"""By which a value that is meant is mistaken."""
_QUANTITY: Final = re.compile(r"([+-]?\d+(?:\.\d+)?)( .+)")

Others = Sequence[bytes]
_LOST: Final = (
    ValueError, LookupError, TypeError, AttributeError, OverflowError, RecursionError, NotImplementedError,
    RuntimeError, EOFError, OSError, struct.error, zlib.error, zipfile.BadZipFile,
)  # fmt: skip
"""What the libraries raise where a file's structure is gone, and they are to take it apart."""
_NUMBER: Final = re.compile(rb"-?\d+(?:\.\d+)?(?:[eE][+-]?\d+)?")
_TOKEN: Final = re.compile(rb"[^\s<>=\"]+")


def changed(kind: str, data: bytes, others: Others, lot: random.Random) -> bytes:
    """A file of a format, changed a few times; now and then a part of another one is put into it."""
    for _ in range(lot.choice((1, 1, 1, 1, 2, 2) if kind == "bait" else (1, 1, 1, 2, 3, 6))):
        way: Callable[[bytes, Others, random.Random], bytes] = lot.choice(_WAYS[kind])
        try:
            data = way(data, others, lot)
        except _LOST:
            # So broken by now that its structure is gone, or not to be written in it.
            data = worded(data, others, lot) if kind == "bait" else raw(data, others, lot)
    return data


def raw(data: bytes, others: Others, lot: random.Random) -> bytes:
    """Bytes, whatever they mean."""
    at, end = sorted((lot.randrange(len(data) + 1), lot.randrange(len(data) + 1)))
    end = min(end, at + 200)
    match lot.randrange(8):
        case 0:
            return data[:at]
        case 1:
            return data[:at] + data[end:]
        case 2:
            return data[:end] + data[at:end] * lot.choice((1, 2, 50)) + data[end:]
        case 3:
            return data[:at] + lot.randbytes(lot.randrange(1, 9)) + data[at:]
        case 4:
            other = lot.choice(others)
            start = lot.randrange(len(other) + 1)
            return data[:at] + other[start : start + lot.randrange(400)] + data[end:]
        case 5:
            return data[: at // 4 * 4] + lot.choice(WORDS) + data[at // 4 * 4 + 4 :]
        case 6:
            return data[:at] + lot.choice(WORDS) + data[at + 4 :]
        case _:
            return data[:at] + bytes([data[at] ^ 1 << lot.randrange(8)]) + data[at + 1 :] if at < len(data) else data


def counted(data: bytes, others: Others, lot: random.Random) -> bytes:
    """Binary STL whose count and length agree, its numbers changed."""
    del others
    count = (len(data) - 84) // 50
    if count < 1:
        return data
    records = [data[84 + 50 * number : 134 + 50 * number] for number in range(count)]
    for _ in range(lot.choice((1, 2, 9))):
        number, word = lot.randrange(len(records)), lot.randrange(12)
        match lot.randrange(4):
            case 0:
                records[number] = records[number][: 4 * word] + lot.choice(WORDS) + records[number][4 * word + 4 :]
            case 1:
                records.append(records[number])
            case 2 if len(records) > 1:
                del records[number]
            case _:
                records[number] = records[number][:12] + lot.choice(records)[12:24] + records[number][24:]
    return data[:80] + struct.pack("<I", len(records)) + b"".join(records)


def worded(data: bytes, others: Others, lot: random.Random) -> bytes:
    """Text, by its numbers, words and lines."""
    lines = data.split(b"\n")
    number = lot.randrange(len(lines))
    match lot.randrange(8):
        case 0 | 1:
            return _swapped(_NUMBER, data, lambda _: lot.choice(NUMBERS), lot)
        case 2:
            return _swapped(_TOKEN, data, lambda _: lot.choice((b"", b"x", *NUMBERS)), lot)
        case 3:
            tokens = _TOKEN.findall(data) or [b""]
            return _swapped(_TOKEN, data, lambda _: lot.choice(tokens), lot)
        case 4:
            del lines[number]
        case 5:
            lines[number:number] = [lines[lot.randrange(len(lines))]] * lot.choice((1, 2, 40))
        case 6:
            other = lot.choice(others).split(b"\n")
            lines[number:number] = other[lot.randrange(len(other)) :][: lot.randrange(1, 6)]
        case _:
            lot.shuffle(lines)
    return b"\n".join(lines)


def _swapped(pattern: re.Pattern[bytes], data: bytes, by: Callable[[bytes], bytes], lot: random.Random) -> bytes:
    found = list(pattern.finditer(data))
    if not found:
        return data
    one = lot.choice(found)
    return data[: one.start()] + by(one[0]) + data[one.end() :]


def tagged(data: bytes, others: Others, lot: random.Random) -> bytes:
    """XML, by its elements and attributes."""
    tags = list(re.finditer(rb"<[^>]*>", data))
    if not tags:
        return worded(data, others, lot)
    one, other = lot.choice(tags), lot.choice(tags)
    match lot.randrange(6):
        case 0:
            return data[: one.start()] + data[one.end() :]
        case 1:
            return data[: one.end()] + other[0] * lot.choice((1, 3)) + data[one.end() :]
        case 2:
            return (
                data[: one.start()]
                + lot.choice((b"<!DOCTYPE a>", b"<![CDATA[x]]>", b"&a;", b"&#0;", b"<!--", b"<?x?>"))
                + data[one.start() :]
            )
        case 3:
            value = lot.choice((*TEXTS, "model", "other", "support", "inch", "micron", "1 0 0 0 1 0 0 0 1 0 0 1e300"))
            plain = value.replace("&", "&amp;").replace('"', "&quot;").replace("<", "&lt;").encode("utf-8")
            return _swapped(re.compile(rb'"[^"]*"'), data, lambda _: b'"' + plain + b'"', lot)
        case _:
            return worded(data, others, lot)


def packed(data: bytes, others: Others, lot: random.Random) -> bytes:
    """3MF: a part of the package changed, and packed again as it should be."""
    with zipfile.ZipFile(io.BytesIO(data)) as package:
        parts = [(info.filename, package.read(info)) for info in package.infolist()]
    number = lot.choice([*range(len(parts)), *[n for n, (name, _) in enumerate(parts) if name.endswith(".model")] * 3])
    name, content = parts[number]
    match lot.randrange(10):
        case 0:
            del parts[number]
        case 1:
            parts.append((lot.choice((name, name.upper(), "/" + name, "../x", "", "a" * 300)), content))
        case _:
            parts[number] = (name, tagged(content, [content, b"<a/>"], lot))
    paper = io.BytesIO()
    with warnings.catch_warnings(), zipfile.ZipFile(paper, "w", zipfile.ZIP_DEFLATED, compresslevel=1) as package:
        warnings.simplefilter("ignore")  # of a name that is there twice
        for name, content in parts:
            package.writestr(name, content)
    return paper.getvalue()


def chunked(data: bytes, others: Others, lot: random.Random) -> bytes:
    """GLB: its JSON or its buffer changed, and put together again with lengths that agree."""
    length = struct.unpack_from("<I", data, 12)[0]
    tree, rest = json.loads(data[20 : 20 + length]), data[20 + length :]
    binary = rest[8:]
    if lot.random() < 0.75:
        tree = grown(tree, lot)
    else:
        binary = raw(binary, others, lot)
    text = json.dumps(tree).encode()
    text += b" " * (-len(text) % 4)
    binary += b"\0" * (-len(binary) % 4)
    chunks = struct.pack("<I4s", len(text), b"JSON") + text + struct.pack("<I4s", len(binary), b"BIN\0") + binary
    return b"glTF" + struct.pack("<II", 2, 12 + len(chunks)) + chunks


def stated(data: bytes, others: Others, lot: random.Random) -> bytes:
    """TOML: a value, a key or a section changed, and written again as TOML."""
    import tomllib

    import tomlkit

    tree = grown(tomllib.loads(data.decode()), lot)
    if lot.random() < 0.3:
        other = tomllib.loads(lot.choice(others).decode())
        key = lot.choice(list(other))
        tree[key] = other[key]
    return tomlkit.dumps(_without_none(tree)).encode("utf-8", "surrogatepass")


def _without_none(tree: Any) -> Any:
    if isinstance(tree, dict):
        return {key: _without_none(value) for key, value in tree.items() if value is not None}
    if isinstance(tree, list):
        return [_without_none(value) for value in tree if value is not None]
    return tree


def grown(tree: Any, lot: random.Random) -> Any:
    """A tree of lists and tables with one of its branches changed."""
    if isinstance(tree, (dict, list)) and tree and lot.random() < 0.85:
        key: Any = lot.choice(list(tree)) if isinstance(tree, dict) else lot.randrange(len(tree))
        chance = lot.random()
        copy: Any = dict(tree) if isinstance(tree, dict) else list(tree)
        if chance < 0.08:
            del copy[key]
        elif chance < 0.14 and isinstance(copy, list):
            copy += [copy[key]] * lot.choice((1, 2, 100))
        elif chance < 0.14:
            copy[lot.choice((f"{key}x", "name", "mesh", "material", "", key[1:]))] = copy[key]
        elif chance < 0.2:
            copy[key] = lot.choice(list(copy.values()) if isinstance(copy, dict) else copy)
        else:
            copy[key] = grown(copy[key], lot)
        return copy
    if isinstance(tree, str) and (number := _QUANTITY.match(tree)) and lot.random() < 0.7:
        return f"{float(number[1]) * lot.choice(FACTORS):.6g}{number[2]}"
    if isinstance(tree, str) and lot.random() < 0.4:
        return worded(tree.encode("utf-8", "surrogatepass"), [b"lead", b"5 mm"], lot).decode("utf-8", "replace")
    if isinstance(tree, (int, float)) and not isinstance(tree, bool) and lot.random() < 0.6:
        return tree + 1 if isinstance(tree, int) else tree * lot.choice(FACTORS)
    return lot.choice(VALUES)


_WAYS: Final[dict[str, Sequence[Callable[[bytes, Others, random.Random], bytes]]]] = {
    "stl": (raw, counted, counted, worded),
    "obj": (worded, worded, worded, raw),
    "off": (worded, worded, worded, raw),
    "ply": (worded, worded, raw, raw),
    "3mf": (packed, packed, packed, packed, raw),
    "glb": (chunked, chunked, chunked, raw),
    "bait": (*(stated,) * 12, worded, raw),
}
