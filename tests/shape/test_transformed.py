"""The low-pass behind a band-pass by exact arithmetic, and the equations of notch, all-pass and null."""

from __future__ import annotations

import random
from fractions import Fraction

import numpy as np
import pytest

from symnet.exact.polynomials import make_ring
from symnet.shape.transformed import all_pass_equations, low_pass_behind, notch_equations, null_equation

ONE = make_ring([]).one


def times(a: list[Fraction], b: list[Fraction]) -> list[Fraction]:
    total = [Fraction(0)] * (len(a) + len(b) - 1)
    for i, x in enumerate(a):
        for j, y in enumerate(b):
            total[i + j] += x * y
    return total


@pytest.mark.parametrize("m", [1, 2, 3, 4, 5])
def test_the_low_pass_comes_back(m: int) -> None:
    """sum of c_k (s^2 + w)^k s^(m-k), written out: the equations vanish and c is proportional to what was put in."""
    rng = random.Random(m)
    w = Fraction(rng.randint(2, 9), rng.randint(2, 9))
    c = [Fraction(rng.randint(1, 9)) for _ in range(m + 1)]
    a = [Fraction(0)] * (2 * m + 1)
    for k, x in enumerate(c):
        term = [x]
        for _ in range(k):
            term = times(term, [w, Fraction(0), Fraction(1)])
        for power, y in enumerate(term):
            a[power + m - k] += y
    equations, low = low_pass_behind(a)
    assert not any(equations)
    assert len(equations) == m - 1
    assert all(x * c[0] == y * low[0] for x, y in zip(low, c, strict=True))
    a[0] += 1
    if m > 1:
        assert any(low_pass_behind(a)[0])


def test_notch_equations() -> None:
    a = [Fraction(x) for x in (4, 3, 9, 3 * 1, 1)]
    a[1] = a[3] * 2  # w0^2 = 2
    top = [Fraction(x) for x in (4, 0, 4, 0, 1)]  # (s^2 + 2)^2
    assert not any(notch_equations(top, a))
    top[1] = Fraction(1)
    assert any(notch_equations(top, a))


def test_all_pass_equations() -> None:
    a = [Fraction(x) for x in (6, 5, 4, 1)]
    top = [Fraction(x) for x in (-12, 10, -8, 2)]
    assert not any(all_pass_equations(top, a))
    top[2] = Fraction(8)
    assert any(all_pass_equations(top, a))


@pytest.mark.parametrize("degree", [2, 3, 4])
def test_a_null_makes_the_equation_vanish(degree: int) -> None:
    """N = (s^2 + w^2) times positive factors."""
    rng = random.Random(degree)
    square = Fraction(rng.randint(1, 9), 4)
    other = [Fraction(rng.randint(1, 9)) for _ in range(degree - 1)]
    top = times([square, Fraction(0), Fraction(1)], other)
    found = null_equation(top)
    if degree == 2:
        assert found is None  # no odd power: nothing is needed
        return
    assert found is not None
    equation, (below, above) = found
    assert not equation
    assert Fraction(below) / Fraction(above) == square
    top[1] += 1
    moved = null_equation(top)
    assert moved is not None
    assert moved[0]
    assert min(abs(z.real) for z in np.roots([float(x) for x in top[::-1]])) > 1e-6


def test_other_degrees_have_no_short_equation() -> None:
    assert null_equation([Fraction(1)] * 6) is None
