"""Inequalities that can be read say the same as the polynomial that must be positive."""

from __future__ import annotations

from fractions import Fraction
from typing import Any

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from symnet.exact.polynomials import make_ring
from symnet.quantities import NUMBER, OHM
from symnet.shape.closed import value_of
from symnet.shape.inequalities import inequality, put_numbers_in, sure_sign
from symnet.typeset.tree import evaluate
from symnet.typeset.writing import to_text

NAMES = ["R1", "R2", "K"]
DIMENSIONS = {"R1": OHM, "R2": OHM, "K": NUMBER}
RING = make_ring(NAMES)


def polynomials() -> st.SearchStrategy[Any]:
    exponents = st.tuples(st.just(0), *(st.integers(0, 2) for _ in NAMES))
    terms = st.dictionaries(exponents, st.integers(-5, 5).filter(bool), min_size=1, max_size=5)
    return terms.map(lambda found: RING.from_dict({m: RING.domain(c) for m, c in found.items()}))


@given(polynomials(), st.lists(st.fractions(Fraction(1, 9), 9), min_size=3, max_size=3))
@settings(max_examples=200, deadline=None)
def test_law_the_inequality_holds_where_the_polynomial_is_positive(
    polynomial: Any, point: list[Fraction]
) -> None:
    """What is dropped and divided by is positive for positive names, so that no sign can turn."""
    values = dict(zip(NAMES, point, strict=True))
    left, sign, right = inequality(polynomial, DIMENSIONS)
    one, other = (evaluate(side, values.__getitem__) for side in (left, right))
    held = one < other if sign == "<" else one > other
    value = value_of(polynomial, values)
    if value:
        assert held == (value > 0) or _is_square_away(polynomial)
    known = sure_sign(polynomial)
    if known is not None:
        assert known == (value > 0) - (value < 0)


def _is_square_away(polynomial: Any) -> bool:
    """A factor of even power was dropped, which is 0 somewhere but nowhere negative."""
    return any(times % 2 == 0 for _, times in polynomial.factor_list()[1])


@pytest.mark.parametrize(
    ("text", "said"),
    [
        (lambda R1, R2, K: R1 + R2 - K * R1, "K < 1 + R2/R1"),
        (lambda R1, R2, K: R1 * K - R2, "K > R2/R1"),
        (lambda R1, R2, K: 3 * K * (R1 - 2 * R2), "R1 > 2*R2"),
        (lambda R1, R2, _: R1**2 + R2**2 - 3 * R1 * R2, "R1^2 + R2^2 > 3*R1*R2"),
        (lambda R1, R2, K: 2 * R1 - K**2 * R2 - K * R2, "R1 > K*(1 + K)*R2/2"),
    ],
)
def test_how_it_reads(text: Any, said: str) -> None:
    left, sign, right = inequality(text(*RING.gens[1:]), DIMENSIONS)
    assert f"{to_text(left)} {sign} {to_text(right)}" == said


def test_numbers_put_in() -> None:
    R1, R2, K = RING.gens[1:]
    one, two = put_numbers_in((R1 + R2 * K, R1 * R2), {"R1": Fraction(1, 2), "R2": Fraction(3)})
    assert (one, two) == (1 + 6 * K, RING.one * 3)
    assert put_numbers_in((R1,), {}) == (R1,)
