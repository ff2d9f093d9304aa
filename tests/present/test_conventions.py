"""The table of conventions prints what is asked for, in its own order."""

from __future__ import annotations

import pytest

from symnet.present.conventions import WORDS, conventions


def test_rows_in_the_order_of_the_table() -> None:
    table = conventions({"tolerance", "H", "Q, zeta"})
    assert [row[0] for row in table.rows] == ["H", "Q, zeta", "tolerance"]


def test_unknown_word() -> None:
    with pytest.raises(KeyError):
        conventions({"impedance"})


def test_every_meaning_is_said() -> None:
    assert all(WORDS.values())
