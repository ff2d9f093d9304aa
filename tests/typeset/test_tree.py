"""The display tree: builders tidy up without rearranging, values are exact."""

from __future__ import annotations

from fractions import Fraction

import pytest

from symnet.errors import LimitError
from symnet.typeset.tree import (
    ONE,
    ZERO,
    Atom,
    Omitted,
    Parallel,
    Product,
    Quotient,
    Root,
    Sum,
    evaluate,
    minus,
    number,
    over,
    plus,
    power,
    times,
)

a, b, c = Atom("a"), Atom("b"), Atom("c")


def test_sums_are_joined_and_zeros_dropped() -> None:
    assert plus(a, ZERO, plus(b, minus(c)), number(-2)) == Sum(((1, a), (1, b), (-1, c), (-1, number(2))))
    assert plus() == ZERO
    assert plus(ZERO, a) == a
    assert plus(minus(a)) == Sum(((-1, a),))


def test_products_are_joined_and_signs_go_in_front() -> None:
    assert times(a, ONE, times(b, c)) == Product((a, b, c))
    assert times(minus(a), b) == minus(Product((a, b)))
    assert times(minus(a), number(-2)) == Product((a, number(2)))
    assert times(a, ZERO) == ZERO
    assert times() == ONE
    assert times(number(-1)) == number(-1)


def test_fractions() -> None:
    assert over(a, ONE) == a
    assert over(minus(a), b) == minus(Quotient(a, b))
    assert over(number(-1), minus(b)) == Quotient(ONE, b)
    assert over(ZERO, b) == ZERO


def test_powers_and_signs() -> None:
    assert power(a, 0) == ONE
    assert power(a, 1) == a
    assert minus(minus(a)) == a
    assert minus(number(3)) == number(-3)


def test_values_are_exact() -> None:
    values = {"a": Fraction(1, 3), "b": Fraction(1, 7), "c": Fraction(2)}.__getitem__
    assert evaluate(Parallel((a, b, c)), values) == 1 / (3 + 7 + Fraction(1, 2))
    assert evaluate(Quotient(plus(a, b), power(c, -2)), values) == Fraction(40, 21)
    assert evaluate(Root(number(9)), values) == 3.0


def test_a_formula_with_terms_left_out_has_no_value() -> None:
    with pytest.raises(LimitError, match="581 terms were left out"):
        evaluate(plus(a, Omitted(581)), {"a": Fraction(1)}.__getitem__)


def test_trees_are_values() -> None:
    assert hash(plus(a, b)) == hash(plus(a, b))
    assert {times(a, b), times(a, b), times(b, a)} == {Product((a, b)), Product((b, a))}
