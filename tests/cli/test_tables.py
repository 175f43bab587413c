"""Tables fitted to a terminal: nothing of a cell is ever lost, however narrow it is."""

from __future__ import annotations

import pytest

from meshlure.cli.tables import Column, Table

TABLE = Table(
    (Column("material"), Column("g/cm3", True), Column("what it rests on", words=True)),
    [("lead pure", "11.34", "handbook value, from memory"), ("oak [bold]", "0.7", "")],
)


def test_a_pipe_gets_a_row_a_line() -> None:
    assert TABLE.lines(None, "utf-8", False) == [
        "material    g/cm3  what it rests on",
        "lead pure   11.34  handbook value, from memory",
        "oak [bold]    0.7",
    ]


@pytest.mark.parametrize("wide", [120, 60, 44, 40, 36, 20, 10])
def test_no_word_is_lost_and_lines_fit_while_they_can(wide: int) -> None:
    lines = TABLE.lines(wide, "utf-8", False)
    said = " ".join(" ".join(lines).replace("─", "").split())
    for words in ("lead pure", "11.34", "oak [bold]", "0.7"):
        assert words in said
    assert all(word in said for word in ["handbook", "value,", "from", "memory", "what", "it", "rests", "on"])
    if wide >= 36:
        assert max(map(len, lines)) <= wide
    # Under that, every row is a block of its own, and the terminal breaks what is too long.
    assert (lines[0] == "lead pure") == (wide < 36)


def test_a_character_set_without_the_rule_goes_without_it() -> None:
    assert "─" not in "".join(TABLE.lines(60, "ascii", False))
    assert "─" in "".join(TABLE.lines(60, "utf-8", False))


def test_rows_are_set_off_in_colour_only_where_there_is_any() -> None:
    strong = Table(TABLE.columns, TABLE.rows, frozenset({1}))
    assert any("\x1b[1moak" in line for line in strong.lines(60, "utf-8", True))
    assert "\x1b" not in "".join(strong.lines(60, "utf-8", False))


def test_an_empty_table_has_its_head() -> None:
    assert Table(TABLE.columns, []).lines(None, "utf-8", False) == ["material  g/cm3  what it rests on"]
    assert Table(TABLE.columns, []).lines(60, "utf-8", False)[0].split()[0] == "material"


@pytest.mark.parametrize("wide", range(55, 120, 3))
def test_many_columns_of_numbers_beside_long_words_are_all_whole(wide: int) -> None:
    heads = ("from nose mm", "reserve g", "nose up", "lean", "points")
    cells = ("19.2", "+1.00", "+4.0", "-0.5", "0.15")
    table = Table(
        [Column(""), Column("ballast", words=True), *(Column(head, number=True) for head in heads)],
        [("1>", "tungsten heavy alloy 90% W rod 4 x 7.82 mm", *cells)],
    )
    lines = table.lines(wide, "utf-8", False)
    assert max(map(len, lines)) <= wide
    words = " ".join(lines).split()
    assert all(cell in words for cell in (*cells, "tungsten", "mm", "points", "reserve"))
