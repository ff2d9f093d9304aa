"""Formulas in several lines of plain text, verbatim."""

from __future__ import annotations

from fractions import Fraction

from symnet.typeset.stacked import beside, fraction, stacked, words
from symnet.typeset.tree import ONE, Atom, Constant, Product, Quotient, Sum, Tree, plus

S, R1, R2, C = map(Atom, ("s", "R1", "R2", "C"))


def drawn(tree: Tree, width: int = 100) -> list[str]:
    block = stacked(tree, width)
    assert len({len(line) for line in block.lines}) == 1
    return [line.rstrip() for line in block.lines]


def test_fraction() -> None:
    assert drawn(Quotient(ONE, plus(ONE, Product((S, R1, C))))) == [
        "    1",
        "----------",
        "1 + s*R1*C",
    ]


def test_product_of_fractions_stands_on_one_line() -> None:
    tree = Product((Quotient(R2, plus(R1, R2)), Quotient(ONE, plus(ONE, Product((S, C))))))
    assert drawn(tree) == [
        "   R2        1",
        "------- * -------",
        "R1 + R2   1 + s*C",
    ]


def test_sign_of_a_fraction_is_apart_from_its_bar() -> None:
    assert drawn(Sum(((-1, Quotient(R2, R1)),))) == ["  R2", "- --", "  R1"]


def test_numbers() -> None:
    assert drawn(Constant(Fraction(1, 3))) == ["1", "-", "3"]
    assert drawn(Constant(Fraction(-1, 3))) == ["-1/3"]


def test_long_sums_are_broken_before_a_sign() -> None:
    lines = drawn(plus(*(Atom(f"R{k}") for k in range(10))), 20)
    assert lines == ["R0 + R1 + R2 + R3", "+ R4 + R5 + R6 + R7", "+ R8 + R9"]


def test_everything_else_is_one_line() -> None:
    assert drawn(Product((plus(R1, R2), C))) == ["(R1 + R2)*C"]


def test_what_is_too_long_says_so() -> None:
    tree = Quotient(ONE, plus(*(Product((Atom(f"R{k}"), C)) for k in range(2000))))
    assert "more terms" in "".join(drawn(tree))


def test_blocks_meet_at_their_middles() -> None:
    row = beside(words("x = "), fraction(words("a"), words("bbb")))
    assert row.lines == ("     a ", "x = ---", "    bbb")
    assert row.middle == 1
