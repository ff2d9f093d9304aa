"""Where roots lie, counted by signs, against roots put there and roots found; Hurwitz' determinants by definition."""

from __future__ import annotations

from fractions import Fraction

import pytest
import sympy
from hypothesis import example, given, settings
from hypothesis import strategies as st

from symnet.errors import LimitError, UndefinedError
from symnet.exact import dense
from symnet.exact.polynomials import make_ring
from symnet.exact.roots import roots
from symnet.shape.routh import HalfPlanes, half_planes, hurwitz

#: Factors with whole coefficients and where their roots lie: left, on the jw axis, right.
FACTORS = [
    ((0, 1), (0, 1, 0)),
    ((1, 1), (1, 0, 0)),
    ((-2, 1), (0, 0, 1)),
    ((1, 0, 1), (0, 2, 0)),
    ((9, 0, 4), (0, 2, 0)),
    ((-4, 0, 1), (1, 0, 1)),
    ((5, 2, 1), (2, 0, 0)),
    ((5, -2, 1), (0, 0, 2)),
    ((1, 0, 0, 0, 1), (2, 0, 2)),
]


@given(st.lists(st.sampled_from(FACTORS), max_size=6), st.sampled_from([1, -3]))
@settings(max_examples=300, deadline=None)
def test_law_every_root_is_counted_where_it_was_put(factors: list[tuple], scale: int) -> None:  # type: ignore[type-arg]
    """The numbers of a product are the sums of those of its factors, zero rows and zeros in the first column included."""
    product: tuple[int, ...] = (scale,)
    for factor, _ in factors:
        product = dense.multiply(product, factor)
    left, axis, right = (sum(places[k] for _, places in factors) for k in range(3))
    on_axis = [tuple(factor) for factor, places in factors if places[1]]
    repeated = max((on_axis.count(factor) for factor in on_axis), default=0)
    assert half_planes(product) == HalfPlanes(left, axis, right, repeated)


@given(st.lists(st.integers(-5, 5), min_size=1, max_size=9).filter(any))
@example([1, 1, 1, 1, 1])
@settings(max_examples=300, deadline=None)
def test_law_counting_agrees_with_the_certified_roots(coefficients: list[int]) -> None:
    found = half_planes(coefficients)
    places = roots(coefficients)
    assert found.left == sum(root.multiplicity for root in places if root.real < 0)
    assert found.axis == sum(root.multiplicity for root in places if root.real == 0)
    assert found.right == sum(root.multiplicity for root in places if root.real > 0)


def test_zero_has_no_counts() -> None:
    with pytest.raises(UndefinedError):
        half_planes([0, 0])


@pytest.mark.parametrize("n", range(2, 7))
def test_determinants_are_those_of_hurwitz_matrix(n: int) -> None:
    """D_k is the leading minor of order k of the matrix a_(n - 1 - 2j + i) (A. Hurwitz, Math. Ann. 46, 1895)."""
    names = [f"a{k}" for k in range(n + 1)]
    a = make_ring(names).gens[1:]
    symbols = [sympy.Symbol(name) for name in names]
    determinants, mirrored = hurwitz(a)
    assert not mirrored
    assert len(determinants) == n - 1
    for k, found in enumerate(determinants, start=1):
        matrix = sympy.Matrix(
            k, k, lambda i, j: symbols[n - 1 - 2 * j + i] if 0 <= n - 1 - 2 * j + i <= n else 0
        )
        assert sympy.expand(matrix.det() - found.as_expr()) == 0


def test_a_row_of_zeros_and_a_zero_in_front_are_told_apart() -> None:
    R, C = make_ring(["R", "C"]).gens[1:]
    one = R**0
    assert hurwitz([one, R * C, R * C, R**2 * C**2]) == ((R * C, R * C * 0), True)  # (1 + s R C)(1 + s^2 R C)
    assert hurwitz([one, one, one, one, one]) == ((one, one * 0), False)


def test_too_long_is_said() -> None:
    names = [f"R{k}" for k in range(40)]
    gens = make_ring(names).gens[1:]
    many = sum((x * y for x in gens[:20] for y in gens[20:]), Fraction(0) + gens[0])
    with pytest.raises(LimitError, match="too long"):
        hurwitz([many, many + 1, many + 2, many + 3])
