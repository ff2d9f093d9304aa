"""The measure of what is readable: its order is what counts."""

from __future__ import annotations

from symnet.typeset.length import length
from symnet.typeset.tree import (
    Atom,
    Omitted,
    Parallel,
    Power,
    Root,
    Sum,
    Tree,
    minus,
    number,
    over,
    plus,
    power,
    times,
)

R1, R2, R3, C1, C2 = (Atom(name) for name in ("R1", "R2", "R3", "C1", "C2"))


def shorter(a: Tree, b: Tree) -> bool:
    return length(a) < length(b)


def test_what_designers_prefer_is_shorter() -> None:
    assert shorter(
        plus(times(R1, C1), times(plus(R1, R2), C2)), plus(times(R1, C1), times(R1, C2), times(R2, C2))
    )
    assert shorter(Parallel((R1, R2)), over(times(R1, R2), plus(R1, R2)))
    assert shorter(plus(number(1), over(R2, R1)), over(plus(R1, R2), R1))
    assert shorter(power(plus(R1, R2), 2), times(plus(R1, R2), plus(R1, R2)))


def test_brackets_inside_brackets_cost_more() -> None:
    side_by_side = plus(times(R1, plus(R2, R3)), times(C1, plus(R1, C2)))
    nested = times(R1, plus(R2, times(R3, plus(C1, C2))))
    assert length(nested) + length(R1) > length(side_by_side) - 2 * length(R1) + 3


def test_signs_numbers_and_exponents_count_little() -> None:
    assert length(R1) == 10
    assert 0 < length(minus(R1)) - length(R1) < 3
    assert length(number(1)) < length(number(2)) < length(R1) < length(number(1000))
    assert length(over(number(1), number(3))) > length(number(3))
    assert 0 < length(Power(R1, 2)) - length(R1) < 10
    assert 0 < length(Root(R1)) - length(R1) < 10
    assert length(Sum(((1, R1), (1, Omitted(5))))) == 21
