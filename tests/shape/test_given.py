"""Numbers put into polynomials: exact, and with the sign that the polynomial has there."""

from __future__ import annotations

from fractions import Fraction

import pytest

from symnet.exact.polynomials import make_ring
from symnet.shape.given import NOTHING, Given
from symnet.shape.solving import solve, vanishing

S, X, Y, Z = make_ring(["x", "y", "z"]).gens


def test_nothing_given() -> None:
    assert NOTHING.at(X - Y) == X - Y
    assert NOTHING.sign(X - Y) is None
    assert 1 not in NOTHING


@pytest.mark.parametrize("y", [Fraction(1, 3), Fraction(7, 10**9), Fraction(12)])
def test_at_is_the_value_but_for_a_positive_factor(y: Fraction) -> None:
    p = X**2 * Y - 3 * X * Y**2 + 5
    there = Given({2: y}).at(p)
    ratio = {m: Fraction(int(c)) for m, c in there.items()}
    scale = ratio[0, 0, 0, 0] / 5
    assert scale > 0
    assert ratio[0, 2, 0, 0] == scale * y
    assert ratio[0, 1, 0, 0] == -3 * scale * y**2


def test_squares_stay_exact() -> None:
    """Q^2 = 1/2: 4 Q^2 - 2 is 0, and Q^3 is Q/2."""
    given = Given(squares={3: Fraction(1, 2)})
    assert not given.at(4 * Z**2 - 2)
    assert given.at(Z**3 * X) == Z * X
    assert given.value(Z**2 + 1) == Fraction(3, 2)
    assert given.value(Z) is None


def test_told() -> None:
    given = Given({1: Fraction(1, 10**8), 2: Fraction(2)}, {"x": "F"})
    assert given.told(X - Y * Z) == "x = 10 nF, y = 2"
    assert given.value(X * Y) == Fraction(2, 10**8)
    assert given.value(X * Z) is None


def test_factors_judged_where_the_numbers_are() -> None:
    given = Given({1: Fraction(1), 2: Fraction(2)})
    assert vanishing((X - Y) * (X + Z - Y), given) == (X - Y + Z,)
    assert vanishing(X - Y, given) == ()


def test_a_square_that_the_numbers_make_is_solved() -> None:
    """(x + z)^2 = 4 x z y has no linear solution in symbols; with y = 1 it says x = z."""
    (branch,) = solve([(X + Z) ** 2 - 4 * X * Z * Y], Given({2: Fraction(1)}))
    (found,) = branch.solved
    assert {found.numerator, found.denominator} == {found.numerator, S.ring.one}
    assert found.numerator in {X, Z}


def test_names_with_a_number_are_not_solved_for() -> None:
    (branch,) = solve([X - 2 * Y], Given({1: Fraction(3)}))
    assert [s.index for s in branch.solved] == [2]


def test_a_denominator_that_the_numbers_make_zero_is_not_used() -> None:
    """z (x - y) = x y: with x = y there is no z."""
    assert solve([Z * (X - Y) - X * Y], Given({1: Fraction(2), 2: Fraction(2)})) == ()


def test_only_wanted_symbols_are_solved_for() -> None:
    (branch,) = solve([X - 2 * Y], wanted=[2])
    assert [s.index for s in branch.solved] == [2]
    (branch,) = solve([X - 2 * Y], wanted=[3])
    assert branch.left == (X - 2 * Y,)
