"""Integrals over all frequencies against the published table, and over a band against closed forms and quadrature."""

from __future__ import annotations

import math
import random
from fractions import Fraction
from typing import Any

import mpmath
import pytest
from sympy import QQ, ring

from symnet.errors import UndefinedError
from symnet.exact.ratio import Ratio
from symnet.response.axis import added, product, squared
from symnet.response.noise_integrals import antiderivative_between, moments


def tabled(c: Any, d: Any) -> Any:
    """(1/2 pi) * integral of |c(jw)/d(jw)|^2 over w, ascending coefficients, orders 1 to 4.

    H. M. James, N. B. Nichols, R. S. Phillips, Theory of Servomechanisms, McGraw-Hill 1947, appendix; G. C. Newton, L. A.
    Gould, J. F. Kaiser, Analytical Design of Linear Feedback Controls, Wiley 1957, appendix E. From memory.
    """
    if len(d) == 2:
        return c[0] ** 2 / (2 * d[0] * d[1])
    if len(d) == 3:
        return (c[1] ** 2 * d[0] + c[0] ** 2 * d[2]) / (2 * d[0] * d[1] * d[2])
    if len(d) == 4:
        top = c[2] ** 2 * d[0] * d[1] + (c[1] ** 2 - 2 * c[0] * c[2]) * d[0] * d[3] + c[0] ** 2 * d[2] * d[3]
        return top / (2 * d[0] * d[3] * (d[1] * d[2] - d[0] * d[3]))
    top = (
        c[3] ** 2 * (d[0] * d[1] * d[2] - d[0] ** 2 * d[3])
        + (c[2] ** 2 - 2 * c[1] * c[3]) * d[0] * d[1] * d[4]
        + (c[1] ** 2 - 2 * c[0] * c[2]) * d[0] * d[3] * d[4]
        + c[0] ** 2 * (d[2] * d[3] * d[4] - d[1] * d[4] ** 2)
    )
    return top / (2 * d[0] * d[4] * (d[1] * d[2] * d[3] - d[0] * d[3] ** 2 - d[1] ** 2 * d[4]))


@pytest.mark.parametrize("order", [1, 2, 3, 4])
def test_the_table_in_symbols(order: int) -> None:
    polynomials, *names = ring([*(f"d{k}" for k in range(order + 1)), *(f"c{k}" for k in range(order))], QQ)
    field = polynomials.to_field()
    d, c = ([field(name) for name in part] for part in (names[: order + 1], names[order + 1 :]))
    found = sum((a * m for a, m in zip(squared(c), moments(d), strict=True)), field.zero)
    assert found == tabled(c, d)


def stable(rng: random.Random, order: int) -> list[Fraction]:
    """A polynomial with all its roots to the left: a product of such sections."""
    d = [Fraction(1)]
    while len(d) < order:
        d = product(
            d, [Fraction(rng.randint(1, 40)), Fraction(rng.randint(1, 20)), Fraction(rng.randint(1, 9), 3)]
        )
    if len(d) <= order:
        d = product(d, [Fraction(rng.randint(1, 9)), Fraction(rng.randint(1, 9))])
    return d


@pytest.mark.parametrize("seed", range(10))
def test_the_table_in_numbers(seed: int) -> None:
    rng = random.Random(seed)
    order = 1 + seed % 4
    d, c = stable(rng, order), [Fraction(rng.randint(-9, 9)) for _ in range(order)]
    found = sum((a * m for a, m in zip(squared(c), moments(d), strict=False)), Fraction(0))
    assert found == tabled(c, d)


def test_butterworth_of_any_order() -> None:
    """Integral of 1/(1 + w^(2n)) over w from 0 up: (pi/2n)/sin(pi/2n); order 3 exactly, order 9 from its sections."""
    three = moments([Fraction(c) for c in (1, 2, 2, 1)])[0]
    assert three == Fraction(1, 3)  # (1/2 pi) * 2 * (pi/6)/sin(pi/6)
    d = [Fraction(1), Fraction(1)]
    for k in range(1, 5):
        d = product(d, [Fraction(1), Fraction(2 * math.cos(k * math.pi / 9)), Fraction(1)])
    assert float(moments(d)[0]) == pytest.approx(1 / 18 / math.sin(math.pi / 18), rel=1e-12)


def test_a_root_on_the_axis_divides_by_zero() -> None:
    with pytest.raises(ZeroDivisionError):
        moments([Fraction(1), Fraction(0), Fraction(1)])


def test_over_a_band_by_closed_forms() -> None:
    """Arc tangent, logarithm, a power, a repeated pair: integrals of any table."""
    half = Ratio.of([1], [4, 0, 1])
    assert float(antiderivative_between(half, Fraction(1), Fraction(3))) == pytest.approx(
        (math.atan(1.5) - math.atan(0.5)) / 2, rel=1e-15
    )
    log = Ratio.of([1], [0, 1])
    assert float(antiderivative_between(log, Fraction(2), Fraction(6))) == pytest.approx(
        math.log(3), rel=1e-15
    )
    power = Ratio.of([0, 0, 3], [1])
    assert antiderivative_between(power, Fraction(1), Fraction(2)) == pytest.approx(7, rel=1e-18)
    repeated = Ratio.of([1], [1, 0, 2, 0, 1])  # 1/(1 + t^2)^2: (atan t + t/(1 + t^2))/2
    assert float(antiderivative_between(repeated, Fraction(0), Fraction(1))) == pytest.approx(
        (math.pi / 4 + 0.5) / 2, rel=1e-15
    )
    assert float(antiderivative_between(repeated, Fraction(0), None)) == pytest.approx(math.pi / 4, rel=1e-15)


@pytest.mark.parametrize("seed", range(12))
def test_a_band_without_end_is_the_integral_over_all(seed: int) -> None:
    """Two ways that share no step: the scheme of Routh, and logarithms at the roots."""
    rng = random.Random(seed)
    order = 1 + seed % 6
    d, c = stable(rng, order), [Fraction(rng.randint(-9, 9)) for _ in range(order - 1)] + [Fraction(1)]
    both = [[x if k == 0 else Fraction(0) for x in squared(p) for k in (0, 1)][:-1] for p in (c, d)]
    by_logarithms = antiderivative_between(Ratio.of(*both), Fraction(0), None)
    exact = sum((a * m for a, m in zip(squared(c), moments(d), strict=False)), Fraction(0))
    assert float(by_logarithms) / math.pi == pytest.approx(float(exact), rel=1e-15)


def test_close_roots_lose_no_digits() -> None:
    """Five pairs within 1e-8 of each other, against quadrature with 60 digits."""
    d = [Fraction(1)]
    for k in range(5):
        d = product(d, [Fraction(1) + Fraction(k, 10**8), Fraction(0), Fraction(1)])
    ratio = Ratio.of([1], d)
    with mpmath.workdps(60):
        expected = mpmath.quad(
            lambda t: 1 / mpmath.fprod(1 + mpmath.mpf(k) / 10**8 + t**2 for k in range(5)), [0, 1, 2, 5]
        )
        found = antiderivative_between(ratio, Fraction(0), Fraction(5))
        assert abs(mpmath.mpf(found.numerator) / found.denominator / expected - 1) < mpmath.mpf("1e-18")


def test_what_diverges_is_refused() -> None:
    with pytest.raises(UndefinedError, match="diverges"):
        antiderivative_between(Ratio.of([1], [0, 1]), Fraction(0), Fraction(1))
    with pytest.raises(UndefinedError, match="upper end"):
        antiderivative_between(Ratio.of([1], [1, 1]), Fraction(0), None)
    assert added([], []) == []
