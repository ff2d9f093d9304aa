"""Legendre-Papoulis against the printed polynomials and what makes it optimum."""

from __future__ import annotations

import math
import random
from fractions import Fraction

import mpmath
import numpy as np
import pytest

from symnet.shape.families.butterworth import butterworth
from symnet.shape.families.legendre import LEGENDRE, legendre, optimum_polynomial
from tests.reference import families_legendre_linear_phase as published
from tests.reference.families import Polynomial

ORDERS = [*range(1, 13), 20, 31, 60]


@pytest.mark.parametrize("row", published.OPTIMUM, ids=lambda row: row.id)
def test_printed_polynomials(row: published.Optimum) -> None:
    assert optimum_polynomial(row.order) == row.coefficients


@pytest.mark.parametrize("row", published.DENOMINATORS, ids=lambda row: row.id)
def test_printed_denominators(row: Polynomial) -> None:
    # printed to three places of which the last is cut off: 1.3107 stands as 1.31
    assert legendre(row.order).denominator() == pytest.approx(row.coefficients, abs=1e-3)


@pytest.mark.parametrize("order", ORDERS)
def test_poles_satisfy_the_definition(order: int) -> None:
    """D(s) D(-s) = 1 + L_n(-s^2), to 25 of 30 digits, and doubles are those digits rounded."""
    made = legendre(order)
    poles, _ = made.precise(30)
    assert all(p.real < 0 for p in poles)
    assert [complex(p) for p in poles] == pytest.approx(made.poles, rel=1e-15, abs=0)
    with mpmath.workdps(80):
        for p in poles:
            terms = [c * (-(mpmath.mpc(p) ** 2)) ** k for k, c in enumerate(optimum_polynomial(order))]
            assert abs(1 + mpmath.fsum(terms)) < 1e-25 * max(map(abs, terms)) * order


@pytest.mark.parametrize("order", ORDERS)
def test_normalisation_and_slope(order: int) -> None:
    """L_n(0) = 0, L_n(1) = 1, L_n'(1) = ((n+1)/2)^2 for odd n and n(n+2)/4 for even n (Papoulis 1958, Fukada 1959)."""
    found = optimum_polynomial(order)
    assert found[0] == 0
    assert sum(found) == 1
    slope = sum(k * c for k, c in enumerate(found))
    assert slope == ((order + 1) ** 2 // 4 if order % 2 else order * (order + 2) // 4)
    assert slope >= order


@pytest.mark.parametrize("order", ORDERS)
def test_never_rises(order: int) -> None:
    """L_n'(x) >= 0 for x >= 0, exactly, at 200 points of the pass band and beyond."""
    derivative = [k * c for k, c in enumerate(optimum_polynomial(order))][1:]
    for i in range(201):
        x = Fraction(i, 160)
        assert sum(c * x**k for k, c in enumerate(derivative)) >= 0


@pytest.mark.parametrize("order", [3, 5, 9])
def test_no_other_monotonic_polynomial_is_steeper(order: int) -> None:
    """Of L(x) = integral of v(x)^2 from 0 to x with L(1) = 1, deg v = (n - 1)/2, none has a larger v(1)^2."""
    dice = random.Random(order)
    best = sum(k * c for k, c in enumerate(optimum_polynomial(order)))
    for _ in range(300):
        v = [Fraction(dice.randint(-50, 50), 10) for _ in range((order + 1) // 2)]
        area = sum(a * b / (i + j + 1) for i, a in enumerate(v) for j, b in enumerate(v))
        assert not area or sum(v) ** 2 / area <= best


@pytest.mark.parametrize("order", range(3, 11))
def test_steeper_than_butterworth_at_the_edge(order: int) -> None:
    made, other = legendre(order), butterworth(order)
    assert made.decibels(1.0) == pytest.approx(-10 * math.log10(2), abs=1e-12)
    assert made.decibels(1.01) < other.decibels(1.01)
    assert max(np.diff([made.decibels(w) for w in np.linspace(0, 3, 1500)])) <= 1e-13


def test_the_definition_is_written_out() -> None:
    assert legendre(1).equation == "|H(jw)|^2 = 1/(1 + w^2)"
    assert legendre(5).equation == "|H(jw)|^2 = 1/(1 + w^2 - 8 w^4 + 28 w^6 - 40 w^8 + 20 w^10)"
    assert legendre(4).equation == "|H(jw)|^2 = 1/(1 + 3 w^4 - 8 w^6 + 6 w^8)"
    assert legendre(20).equation == "|H(jw)|^2 = 1/(1 + L_20(w^2))"


def test_orders_1_and_2_are_butterworth() -> None:
    assert legendre(1).exact == butterworth(1).exact
    assert legendre(2).exact == butterworth(2).exact
    assert legendre(2).poles == pytest.approx(butterworth(2).poles, rel=1e-15)


@pytest.mark.parametrize("order", range(2, 12))
def test_conditions_vanish_for_members_only(order: int) -> None:
    """Exactly where D is exact; otherwise to the digits that 60-digit coefficients leave."""
    poles, _ = legendre(order).precise(60)
    with mpmath.workdps(60):
        d = [mpmath.mpc(1)]
        for p in poles:
            d = [
                a - mpmath.mpc(p) / 3 * b
                for a, b in zip([mpmath.mpc(0), *d], [*d, mpmath.mpc(0)], strict=True)
            ]
        coefficients = [c.real for c in d]
        conditions = LEGENDRE.conditions(coefficients)
        assert len(conditions) == order - 1
        size = max(coefficients) ** (2 * order)
        assert all(abs(c) < mpmath.mpf(10) ** -45 * size for c in conditions)
        assert all(p > 0 for p in LEGENDRE.positives(coefficients))
        moved = [c * (mpmath.mpf("1.02") if k == 1 else 1) for k, c in enumerate(coefficients)]
        assert max(map(abs, LEGENDRE.conditions(moved))) > mpmath.mpf(10) ** -40 * size or order == 2
