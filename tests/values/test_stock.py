"""A stock list is data: what it says is read exactly, and what is no list is refused with its place."""

from __future__ import annotations

from fractions import Fraction
from pathlib import Path

import pytest
from hypothesis import given
from hypothesis import strategies as st

from symnet.errors import LimitError, NotationError, SymnetError
from symnet.values.stock import load_stock, read_stock


def test_columns_in_any_order_and_any_separator() -> None:
    for separator in ",;\t":
        rows = [["Name", "price", "VALUE"], ["R-1", "0.02", "4K7"], ["", "1", "22 nF"], ["L-1", "2", "10 mH"]]
        lists = read_stock("\r\n".join(separator.join(row) for row in rows))
        assert {letter: each.values for letter, each in lists.items()} == {
            "R": (Fraction(4700),),
            "C": (Fraction(22, 10**9),),
            "L": (Fraction(1, 100),),
        }
        assert lists["R"].entries[0].labels == ("R-1",)
        assert lists["C"].entries[0].labels == ()


def test_a_kind_says_the_unit() -> None:
    lists = read_stock("kind,value\nR,4700\nC,100n\nc,4n7\n")
    assert lists["C"].values == (Fraction(47, 10**10), Fraction(1, 10**7))
    assert lists["R"].values == (Fraction(4700),)


def test_quoted_cells_hold_the_separator_and_one_value_keeps_its_first_name() -> None:
    lists = read_stock('value,name\n"1 kohm","film, ""blue"""\n1000 ohm,again\n')
    assert lists["R"].entries[0].labels == ('film, "blue"',)
    assert len(lists["R"]) == 1


HOSTILE = {
    "no header": ("4.7 kohm\n10 kohm\n", "no column of this list is called value", None),
    "empty": ("", "called value", None),
    "header only": ("name,value\n", "lists no value", None),
    "formula": ("value\n=1+1\n", "not a quantity", "line 2, column 1"),
    "command": ("name,value\nx,=cmd|' /C calc'!A0\n", "not a quantity", "line 2, column 3"),
    "script": ("name,value\nx,__import__('os')\n", "not a quantity", "line 2, column 3"),
    "no unit": ("name,value\nx,4700\n", "has no unit", "line 2, column 3"),
    "other unit": ("name,value\nx,10 V\n", "is in V", "line 2, column 3"),
    "wrong kind": ("kind,value\nC,10 kohm\n", "ohm", "line 2, column 3"),
    "unknown kind": ("kind,value\nQ,10 kohm\n", "a kind is R, C or L", "line 2, column 1"),
    "negative": ("value\n1 kohm\n-2 kohm\n", "positive", "line 3, column 1"),
    "zero": ("value\n0 ohm\n", "positive", "line 2, column 1"),
    "too few cells": ("name,value\nonly\n", "this row has 1 cells", "line 2, column 1"),
    "decimal comma": ("name,value\nx,4,7 kohm\n", "this row has 3 cells", "line 2, column 1"),
    "open quote": ('name,value\n"x,1 kohm\n', "not closed", "line 2, column 1"),
    "control character": ("name,value\nx,1\x00 kohm\n", "U\\+0000", "line 2, column 4"),
    "turned writing": ("name,value\nx\u202e,1 kohm\n", "U\\+202E", "line 2, column 2"),
    "huge exponent": ("value\n1e999999999 ohm\n", "power of ten", "line 2, column 1"),
}


@pytest.mark.parametrize(("text", "message", "place"), HOSTILE.values(), ids=HOSTILE.keys())
def test_what_is_no_list_is_refused_with_its_place(text: str, message: str, place: str | None) -> None:
    with pytest.raises(SymnetError, match=message) as caught:
        read_stock(text)
    if place is not None:
        assert place in str(caught.value)


def test_size_is_bounded() -> None:
    with pytest.raises(LimitError, match="rows"):
        read_stock("value\n" + "1 ohm\n" * 20_001)
    with pytest.raises(LimitError, match="characters") as caught:
        read_stock("value\n" + "9" * 100_000 + " ohm\n")
    assert "line 2" in str(caught.value)


def test_all_faults_of_a_list_are_told_together() -> None:
    with pytest.raises(NotationError) as caught:
        read_stock("value\n1 kohm\nx\ny\n")
    assert [fault.span.start for fault in caught.value.faults if fault.span] == [13, 15]


def test_files(tmp_path: Path) -> None:
    file = tmp_path / "drawer.csv"
    file.write_bytes("\ufeffvalue\n4.7 kΩ\n".encode())
    lists = load_stock(file)
    assert (lists["R"].name, lists["R"].values) == ("drawer.csv", (Fraction(4700),))
    with pytest.raises(NotationError, match="cannot be read"):
        load_stock(tmp_path / "none.csv")
    with pytest.raises(NotationError, match="cannot be read"):
        load_stock(tmp_path)
    file.write_bytes(b"value\n\xff\xfe 1 ohm")
    with pytest.raises(NotationError, match="UTF-8 text at byte 6"):
        load_stock(file)
    file.write_bytes(b"value\n" + b"1 ohm\n" * 400_000)
    with pytest.raises(LimitError, match="larger than 2 MB"):
        load_stock(file)


@given(st.text(alphabet='value,;"\t\n\r 1e9kohmnF=-\x00', max_size=60))
def test_any_text_is_read_or_refused(text: str) -> None:
    try:
        lists = read_stock("value\n" + text)
    except SymnetError:
        return
    assert all(value > 0 for each in lists.values() for value in each.values)
