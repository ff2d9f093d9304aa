"""Packed polynomials: arithmetic against exponent tuples and sympy's ring, factors that multiply back."""

from __future__ import annotations

from functools import reduce
from operator import mul
from typing import Any

from hypothesis import given, settings
from hypothesis import strategies as st

from symnet.exact.polynomials import make_ring
from symnet.exact.readable.packed import LONGEST_GROUPED, Polynomial, Space

RING = make_ring(["R1", "R2", "R3", "R4", "L1", "L2", "C1", "C2", "C3", "C4", "K"])
s, R1, R2, R3, R4, L1, L2, C1, C2, C3, C4, K = RING.gens
NAMES = [str(symbol) for symbol in RING.symbols]


def packed(p: Any) -> tuple[Space, Polynomial]:
    space = Space(NAMES, max((e for m in p for e in m), default=1))
    return space, {space.pack(m): int(c) for m, c in p.items()}


def polynomials(names: list[Any], *, linear: bool = False) -> st.SearchStrategy[Any]:
    monomial = st.lists(st.sampled_from(names), max_size=3, unique=linear).map(
        lambda chosen: reduce(mul, chosen, RING.one)
    )
    terms = st.lists(st.tuples(st.sampled_from([1, 1, 1, -1, 2, -3]), monomial), max_size=6)
    return terms.map(lambda pairs: sum((c * m for c, m in pairs), RING.zero))


SOME = polynomials([R1, R2, R3, C1, C2, K])


@settings(deadline=None)
@given(
    polynomials([R1, R2, R3], linear=True),
    polynomials([C1, C2, K], linear=True),
    polynomials([R4, L1, L2], linear=True),
)
def test_factors_without_a_name_in_common_are_found(a: Any, b: Any, c: Any) -> None:
    """Law: p = coefficient * monomial * factors, and no factor mixes the names of two of the polynomials put in."""
    p = a * b * c
    if not p or len(p) > LONGEST_GROUPED:
        return
    space, q = packed(p)
    coefficient, monomial, factors = space.factors(q)
    product = reduce(space.multiply, (f for f, e in factors for _ in range(e)), {monomial: coefficient})
    assert product == q
    groups = [
        {NAMES.index(name) for name in group}
        for group in (("R1", "R2", "R3"), ("C1", "C2", "K"), ("R4", "L1", "L2"))
    ]
    assert all(any(set(space.used(f)) <= group for group in groups) for f, _ in factors)


@settings(deadline=None)
@given(SOME, SOME)
def test_factors_multiply_back(a: Any, b: Any) -> None:
    """Law: p = coefficient * monomial * factors, also with powers, and each leading term is positive."""
    p = a * b
    if not p:
        return
    space, q = packed(p)
    coefficient, monomial, factors = space.factors(q)
    assert reduce(space.multiply, (f for f, e in factors for _ in range(e)), {monomial: coefficient}) == q
    assert all(f[max(f)] > 0 and len(f) > 1 for f, _ in factors)


@settings(deadline=None)
@given(SOME, SOME)
def test_division_leaves_terms_of_the_dividend(a: Any, b: Any) -> None:
    """Law: p = d*q + r, r made of terms of p only, and no term made twice."""
    if not a or not b:
        return
    p = a * b + R4 * C3
    space, packed_p = packed(p)
    d = {space.pack(m): int(c) for m, c in b.items()}
    q, r = space.divide(packed_p, d)
    made = space.multiply(d, q)
    assert set(r.items()) <= set(packed_p.items())
    assert {**made, **r} == packed_p
    assert len(made) == len(d) * len(q)


@settings(deadline=None)
@given(
    st.lists(st.integers(0, 7), min_size=4, max_size=4),
    st.lists(st.integers(0, 7), min_size=4, max_size=4),
)
def test_packed_monomials_are_exponents(a: list[int], b: list[int]) -> None:
    """Law: divides, common part and product agree with the same done exponent by exponent."""
    space = Space(["w", "x", "y", "z"], 7)
    m, n = space.pack(a), space.pack(b)
    assert space.unpack(m) == tuple(a)
    assert space.divides(m, n) == all(i <= j for i, j in zip(a, b, strict=True))
    assert space.unpack(space.common((m, n))) == tuple(map(min, a, b))
    assert space.unpack(m + n) == tuple(i + j for i, j in zip(a, b, strict=True))


def test_a_factor_with_a_power_and_a_sign() -> None:
    p = -((R1 - R2) ** 3) * (C1 + C2) * K**2
    space, q = packed(p)
    coefficient, monomial, factors = space.factors(q)
    assert (coefficient, monomial) == (-1, 2 * space.unit(NAMES.index("K")))
    assert sorted(e for _, e in factors) == [1, 3]


def test_very_long_sums_are_not_factored() -> None:
    p = (R1 + R2 + R3 + R4) * (L1 + L2 + K + s) * (C1 + C2 + C3 + C4)
    space, q = packed(p)
    assert len(q) == 64 > LONGEST_GROUPED
    assert space.factors(q) == (1, 0, [(q, 1)])


def test_equal_factors_are_counted_together_whatever_their_sign() -> None:
    """Found by random forms: the sign of the whole stood with one of two equal factors, and both were cancelled."""
    space, p = packed((R3 + R4) ** 2 * (1 - R1 * R2))
    _, _, found = space.factors(p)
    assert sorted(exponent for _, exponent in found) == [1, 2]
