"""Roots against 50-digit iteration by mpmath (which shares no code with them) and against roots put in by hand."""

from __future__ import annotations

import math
from collections.abc import Iterable, Sequence
from fractions import Fraction
from itertools import pairwise
from typing import Any

import mpmath
import pytest
from hypothesis import assume, given, settings
from hypothesis import strategies as st

from symnet.errors import LimitError, UndefinedError
from symnet.exact.roots import Root, roots
from symnet.exact.surds import Surd

DIGITS = 50


def product(*polynomials: Sequence[Fraction | int]) -> list[Fraction]:
    """The product of polynomials in ascending powers, by the schoolbook rule."""
    total = [Fraction(1)]
    for p in polynomials:
        longer = [Fraction(0)] * (len(total) + len(p) - 1)
        for i, a in enumerate(total):
            for k, b in enumerate(p):
                longer[i + k] += a * b
        total = longer
    return total


def with_roots(values: Iterable[Fraction | int]) -> list[Fraction]:
    return product(*([-Fraction(v), Fraction(1)] for v in values))


def oracle(coefficients: Sequence[Fraction | int]) -> list[Any]:
    """All roots to 50 digits by mpmath's Durand-Kerner iteration; for simple roots."""
    with mpmath.workdps(DIGITS):
        descending = [
            mpmath.mpf(Fraction(c).numerator) / Fraction(c).denominator for c in reversed(coefficients)
        ]
        return list(mpmath.polyroots(descending, maxsteps=400, extraprec=400))


def mp(root: Root) -> Any:
    return mpmath.mpc(
        mpmath.mpf(root.real.numerator) / root.real.denominator,
        mpmath.mpf(root.imag.numerator) / root.imag.denominator,
    )


def assert_agree(found: Sequence[Root], expected: Sequence[Any]) -> None:
    """Every expected root is met by one of the found ones within its proven radius, and none is left over."""
    assert len(found) == len(expected)
    left = list(found)
    with mpmath.workdps(DIGITS):
        for z in expected:
            best = min(left, key=lambda root: abs(mp(root) - z))
            left.remove(best)
            assert abs(mpmath.mpc(best.value) - z) <= best.radius + abs(z) * mpmath.mpf(10) ** (5 - DIGITS)
            assert abs(mp(best) - z) <= best.bound + abs(z) * mpmath.mpf(10) ** (5 - DIGITS)


def chebyshev_denominator(order: int, ripple_squared: Fraction) -> list[Fraction]:
    """1 + e^2 T_n(w)^2 with w^2 = -s^2, ascending in s: all poles of the ripple filter and their mirror images."""
    low, high = [Fraction(1)], [Fraction(0), Fraction(1)]
    for _ in range(order - 1):
        longer = product([0, 2], high)
        low, high = high, [a - (low[k] if k < len(low) else 0) for k, a in enumerate(longer)]
    squared = [ripple_squared * c for c in product(high, high)]
    squared[0] += 1
    return [c * (1, 0, -1, 0)[k % 4] for k, c in enumerate(squared)]


def test_triple_root_is_one_exact_root() -> None:
    (root,) = roots([1, 3, 3, 1])
    assert root.exact == -1
    assert (root.multiplicity, root.value, root.radius) == (3, -1 + 0j, 0.0)


def test_four_equal_rc_poles_stay_one_real_pole() -> None:
    # 4 sections of 1 kohm, 1 nF behind buffers: D = (1 + s*1us)^4
    tau = Fraction(1, 10**6)
    (root,) = roots([math.comb(4, k) * tau**k for k in range(5)])
    assert root.exact == -(10**6)
    assert root.multiplicity == 4


@pytest.mark.parametrize("order", [20, 40])
def test_wilkinson(order: int) -> None:
    # J. H. Wilkinson's polynomial (s-1)(s-2)...(s-n): the textbook case of ill-conditioned roots
    found = roots(with_roots(range(1, order + 1)))
    assert [root.exact for root in found] == list(range(1, order + 1))


def test_wilkinson_disturbed_in_the_last_bit() -> None:
    p = with_roots(range(1, 21))
    p[19] -= Fraction(1, 2**23)
    found = roots(p)
    assert_agree(found, oracle(p))
    # J. H. Wilkinson, The evaluation of the zeros of ill-conditioned polynomials, 1959: roots 16.73 +- 2.81j
    # (from memory)
    assert any(abs(root.value - (16.73073746 + 2.81262489j)) < 1e-8 for root in found)


@pytest.mark.parametrize("decades", [10, 20])
def test_roots_spread_over_decades(decades: int) -> None:
    p = [-(Fraction(10) ** k) for k in range(-decades // 2, decades // 2 + 1)]
    assert [root.exact for root in roots(with_roots(p))] == sorted(p, reverse=True)


@pytest.mark.parametrize("decades", [10, 20])
def test_irrational_roots_spread_over_decades(decades: int) -> None:
    # (s^2 + w s/2 + 2 w^2) for w = 1, 10, ...: |root| = w sqrt(2), none of them rational
    sizes = [Fraction(10) ** k for k in range(decades + 1)]
    found = roots(product(*([2 * w * w, w / 2, Fraction(1)] for w in sizes)))
    assert len(found) == 2 * len(sizes)
    for root, w in zip(found[::2], sizes, strict=True):
        assert root.closed == Surd(-w / 4, w * w / 16 - 2 * w * w, 1)
        assert root.radius < 2e-16 * w


def test_cluster_closer_than_doubles_can_tell() -> None:
    near = [Fraction(-(10**6)) + Fraction(k, 10**12) for k in range(4)]
    found = roots(with_roots(near))
    assert sorted(root.exact for root in found if root.exact is not None) == sorted(near)


def test_pair_that_is_complex_by_a_hair() -> None:
    hair = Fraction(1, 10**18)
    found = roots([1 + hair, 2, 1])
    assert [root.value for root in found] == [-1 + 1e-9j, -1 - 1e-9j]
    assert all(root.real == -1 for root in found)
    real = roots([1 - hair, 2, 1])
    assert all(root.is_real for root in real)
    assert len(real) == 2


@pytest.mark.parametrize("order", [2, 5, 11, 20])
def test_ripple_filter(order: int) -> None:
    """The poles are -sinh(a)sin(t) + j cosh(a)cos(t), a = asinh(1/e)/n (common practice, no source)."""
    found = roots(chebyshev_denominator(order, Fraction(1, 4)))
    assert sum(root.multiplicity for root in found) == 2 * order
    with mpmath.workdps(DIGITS):
        a = mpmath.asinh(2) / order
        angles = [mpmath.pi * (2 * k + 1) / (2 * order) for k in range(2 * order)]
        assert_agree(
            found,
            [mpmath.mpc(mpmath.sinh(a) * mpmath.sin(t), mpmath.cosh(a) * mpmath.cos(t)) for t in angles],
        )


def test_order_60_with_known_roots() -> None:
    """s^40 + 1 has the 40 roots exp(j(2k+1)pi/40); twenty rational ones beside them."""
    rational = [Fraction(-k, 7) for k in range(1, 21)]
    found = roots(product([1, *[0] * 39, 1], with_roots(rational)))
    with mpmath.workdps(DIGITS):
        circle = [mpmath.expjpi(mpmath.mpf(2 * k + 1) / 40) for k in range(40)]
        assert_agree(found, circle + [mpmath.mpf(r.numerator) / r.denominator for r in rational])
    assert {root.exact for root in found} - {None} == set(rational)


def test_order_60_in_part_values() -> None:
    """A 60-section RC ladder (invented values) has 60 real, negative, simple poles; D by the chain rule."""
    v, i = [Fraction(1)], [Fraction(0)]
    for k in range(60):
        r, c = Fraction(1000 + 37 * k), Fraction(10 + k % 7, 10**10)
        i = [a + b for a, b in zip([*i, Fraction(0)], [Fraction(0), *(c * x for x in v)], strict=False)]
        i += [c * v[-1]] if len(i) == len(v) else []
        v = [a + r * b for a, b in zip([*v, *[Fraction(0)] * (len(i) - len(v))], i, strict=True)]
    found = roots(v)
    assert len(found) == 60
    assert all(root.is_real and root.real < 0 and root.radius < 2e-16 * abs(root.value) for root in found)
    # Vieta: the sum of 1/root is -a1/a0, the product of the roots (-1)^n a0/an
    assert sum(1 / root.value.real for root in found) == pytest.approx(float(-v[1] / v[0]), rel=1e-14)
    logs = sum(math.log10(-root.value.real) for root in found)
    a0_over_an = v[0] / v[-1]
    assert logs == pytest.approx(
        math.log10(a0_over_an.numerator) - math.log10(a0_over_an.denominator), rel=1e-14
    )


def test_jw_axis_is_recognised_exactly() -> None:
    # (s^2 + 2)(s^2 + 3)^2 (s + 1): two pairs on the axis, one of them double, none of them rational
    found = roots(product([2, 0, 1], [3, 0, 1], [3, 0, 1], [1, 1]))
    on_axis = [(root.is_imaginary, root.multiplicity) for root in found]
    assert on_axis == [(False, 1), (True, 1), (True, 1), (True, 2), (True, 2)]
    assert found[1].closed == Surd(Fraction(0), Fraction(-2), 1)


def test_jw_axis_without_closed_form() -> None:
    # x^3 + 6x^2 + 9x + 1 in x = s^2 has three real negative roots, all irrational of degree 3
    found = roots(product([1, 0, 9, 0, 6, 0, 1], [1, 1, 1]))
    assert sorted(root.is_imaginary for root in found) == [False] * 2 + [True] * 6
    assert all(root.real == 0 for root in found if root.is_imaginary)
    assert_agree(found, oracle(product([1, 0, 9, 0, 6, 0, 1], [1, 1, 1])))


def test_symmetric_quadruple_is_symmetric_exactly() -> None:
    found = roots([1, 0, 1, 0, 1])
    places = {(root.real, root.imag) for root in found}
    assert len(places) == 4
    assert places == {(-x, y) for x, y in places} == {(x, -y) for x, y in places}


def test_tiny_real_part_keeps_its_digits() -> None:
    """Q = 10^9: s^2 + 1e-9 s + 1, multiplied by a factor that hides it from the quadratic formula."""
    found = roots(product([1, Fraction(1, 10**9), 1], [1, 1, 1, 1, 3]))
    high_q = min(found, key=lambda root: abs(root.value - 1j))
    assert high_q.value.real == -5e-10


def test_more_digits_on_request() -> None:
    root = roots([-2, 0, 1], digits=60)[1]
    with mpmath.workdps(80):
        assert abs(mp(root) - mpmath.sqrt(2)) < mpmath.mpf(10) ** -60
    assert root.bound < 2e-60


def test_order_of_the_roots() -> None:
    # Butterworth 5: all at distance 1; the real pole first, then rising Q, the upper one of each pair first
    found = roots([1, *[0] * 9, -1])
    left = [root for root in found if root.real < 0]
    assert [round(root.value.real, 6) for root in left] == [-1.0, -0.809017, -0.809017, -0.309017, -0.309017]
    assert [root.imag > 0 for root in left[1:]] == [True, False, True, False]


def test_closed_forms_are_found_in_products() -> None:
    p = product([1, 3, 1], [5, 2, 1], [Fraction(22, 7), 1], [1, 1, 0, 1])
    forms = [root.closed for root in roots(p)]
    assert forms.count(None) == 3  # s^3 + s + 1 has no factor over the rationals
    for surd in (
        Surd(Fraction(-3, 2), Fraction(5, 4), 1),
        Surd(Fraction(-3, 2), Fraction(5, 4), -1),
        Surd(Fraction(-1), Fraction(-4), 1),
        Surd(Fraction(-1), Fraction(-4), -1),
        Surd(Fraction(-22, 7)),
    ):
        assert surd in forms


def test_constant_has_no_roots_and_zero_is_refused() -> None:
    assert roots([5]) == ()
    with pytest.raises(UndefinedError, match="Every number is a root"):
        roots([0, 0])


@pytest.mark.parametrize("digits", [0, 1001])
def test_digits_are_bounded(digits: int) -> None:
    with pytest.raises(LimitError, match="digits"):
        roots([1, 1], digits=digits)


def test_degree_and_spread_are_bounded() -> None:
    with pytest.raises(LimitError, match="degree 601"):
        roots([1] * 602)
    with pytest.raises(LimitError, match="decades"):
        roots(with_roots([10**200, Fraction(1, 10**200), 3]))


coefficients = st.lists(st.integers(-(10**6), 10**6), min_size=2, max_size=9).map(
    lambda c: [Fraction(a) for a in c]
)


@given(coefficients)
@settings(max_examples=60, deadline=None)
def test_law_residual_vanishes_and_count_is_the_degree(p: list[Fraction]) -> None:
    """A polynomial of degree n has n roots, counted with multiplicity, and vanishes at each (Gauss)."""
    assume(p[-1])
    found = roots(p, digits=40)
    assert sum(root.multiplicity for root in found) == len(p) - 1
    for root in found:
        with mpmath.workdps(60):
            z = mp(root)
            value = mpmath.polyval([mpmath.mpf(c.numerator) / c.denominator for c in reversed(p)], z)
            slope = sum(abs(k * c) * abs(z) ** max(k - 1, 0) for k, c in enumerate(map(float, p)))
            assert abs(value) <= (root.bound + mpmath.mpf(10) ** -55) * (slope + 1) * 2
        if root.imag:
            assert root.conjugate() in found


@given(st.lists(st.fractions(-50, 50, max_denominator=30), min_size=1, max_size=8))
@settings(max_examples=60, deadline=None)
def test_law_rational_roots_come_back_exactly(values: list[Fraction]) -> None:
    found = roots(with_roots(values))
    assert sorted(
        value for root in found for value in [root.exact] * root.multiplicity if value is not None
    ) == sorted(values)


@given(st.lists(st.tuples(st.integers(1, 9), st.integers(-9, 9), st.integers(1, 9)), min_size=1, max_size=4))
@settings(max_examples=60, deadline=None)
def test_law_discs_hold_the_true_roots(quadratics: list[tuple[int, int, int]]) -> None:
    """Every disc holds its root: compared with the quadratic formula in 60 digits."""
    found = roots(product(*quadratics))
    with mpmath.workdps(60):
        for c, b, a in quadratics:
            for sign in (1, -1):
                z = (-b + sign * mpmath.sqrt(mpmath.mpc(b * b - 4 * a * c))) / (2 * a)
                assert any(
                    abs(mpmath.mpc(root.value) - z) <= root.radius + mpmath.mpf(10) ** -50 for root in found
                )


def test_sizes_rise() -> None:
    found = roots(with_roots([3, -1, 7, Fraction(1, 2), -20]))
    assert all(abs(a.value) <= abs(b.value) for a, b in pairwise(found))


def test_roots_that_nearly_meet_on_the_real_axis_are_told_apart() -> None:
    """(s - 1)^2 = e^2 and (s - 1)^2 = -e^2, e = 1e-13: starts that are mirror images must not hold them together."""
    e = Fraction(1, 10**13)
    for sign in (1, -1):
        p = [1 - sign * e**2, Fraction(-2), Fraction(1)]
        q = [p[0] * 3, p[0] + 3 * p[1], p[1] + 3 * p[2], p[2]]  # and a root at -3
        found = roots(q)
        assert len(found) == 3
        near = [root for root in found if root.value.real > 0]
        assert all(root.is_real == (sign > 0) for root in near)
        apart = near[0].real - near[1].real if sign > 0 else near[0].imag - near[1].imag
        assert abs(abs(float(apart)) - 2e-13) < 1e-20
