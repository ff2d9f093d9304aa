"""Roots of a second degree: the rule of signs against the roots that numbers have."""

from __future__ import annotations

import math
import random
from fractions import Fraction

import numpy as np
import pytest

from symnet.exact.polynomials import make_ring
from symnet.shape.given import NOTHING, Given
from symnet.shape.quadratic import quadratic_roots
from tests.shape.test_designing import coefficients, number

S, X, P, Q = make_ring(["x", "p", "q"]).gens

EQUATIONS = {
    "both signs sure": X**2 - P * X + Q,
    "last negative": X**2 + P * X - Q,
    "last negative, middle open": X**2 + (P - Q) * X - Q,
    "last open": X**2 - P * X + (P - Q),
    "all open": X**2 + (P - Q) * X + (2 * Q - P),
    "front negative": -X * X * P + X * Q - 1,
    "no middle": X**2 - P * Q,
    "none positive": X**2 + P * X + Q,
}


@pytest.mark.parametrize("case", EQUATIONS)
def test_positive_roots_are_those_of_the_numbers(case: str) -> None:
    equation = EQUATIONS[case]
    found = quadratic_roots([equation], NOTHING, [1])
    assert found is not None
    rng = random.Random(case)
    for _ in range(200):
        values = {"p": math.exp(rng.uniform(-2, 2)), "q": math.exp(rng.uniform(-2, 2)), "x": 1.0}
        told = []
        for tree, needs in found.roots:
            signs = [(sum(coefficients(p, values)), sign) for p, sign in needs]
            if all(value > 0 if sign == ">" else value >= 0 for value, sign in signs):
                told.append(number(tree, values))
        a, b, c = (sum(coefficients(part, values)) if part else 0.0 for part in found.coefficients)
        want = sorted(x.real for x in np.roots([a, b, c]) if abs(x.imag) < 1e-12 and x.real > 0)
        assert sorted(told) == pytest.approx(want, rel=1e-6)


def test_nothing_to_solve() -> None:
    assert quadratic_roots([X**3 - P], NOTHING, [1]) is None
    assert quadratic_roots([(P - Q) * X**2 - 1], NOTHING, [1]) is None
    assert quadratic_roots([X**2 - P], Given({1: Fraction(2)}), [1]) is None
