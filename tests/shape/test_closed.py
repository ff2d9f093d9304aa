"""Quotients and roots of polynomials in part names: values, perfect powers, signs."""

from __future__ import annotations

from fractions import Fraction

import mpmath
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from symnet.exact.polynomials import make_ring
from symnet.quantities import OHM
from symnet.shape.closed import Closed, Figure, figure, nth_root, power_product, quotient, value_of
from symnet.typeset.writing import to_text

RING = make_ring(["R1", "R2", "C1", "C2", "L1"])
s, R1, R2, C1, C2, L1 = RING.gens
VALUES = {"R1": Fraction(3), "R2": Fraction(5), "C1": Fraction(7), "C2": Fraction(11), "L1": Fraction(13)}
HALF = Fraction(1, 2)


def text(closed: Closed) -> str:
    return to_text(closed.tree())


@pytest.mark.parametrize(
    ("closed", "expected"),
    [
        (power_product(RING.one, RING.one, {R1 * R2 * C1 * C2: -HALF}), "1/sqrt(R1*R2*C1*C2)"),
        (power_product(RING.one, RING.one, {R1**2 * C1**2: -HALF}), "1/(R1*C1)"),
        (power_product(RING.one, RING.one, {4 * R1**2 * C1 * C2: HALF}), "2*R1*sqrt(C1*C2)"),
        (power_product(L1, R1, {L1 * C1: -HALF}), "sqrt(L1/C1)/R1"),
        (power_product(RING.one, RING.one, {(R1 + R2) ** 2 * L1: HALF}), "(R1 + R2)*sqrt(L1)"),
        (power_product(RING.one, RING.one, {R1**2 * C1**2: Fraction(1, 4)}), "sqrt(R1*C1)"),
        (power_product(RING.one, RING.one, {R1: HALF, R2: -HALF}), "sqrt(R1/R2)"),
        (quotient(R1 * R2, R1 + R2), "R1||R2"),
        (quotient(RING(-6) * R1, RING(4) * R1 * R2), "-3/(2*R2)"),
        (power_product(Fraction(39, 5), Fraction(1), {Fraction(20, 13): HALF}), "6*sqrt(13/5)"),
        (power_product(Fraction(1), Fraction(1), {Fraction(9, 4): HALF}), "3/2"),
        (power_product(Fraction(-2), Fraction(1), {Fraction(2): HALF}), "-2*sqrt(2)"),
    ],
)
def test_written(closed: Closed, expected: str) -> None:
    assert text(closed) == expected


def test_square_of_a_difference_stays_under_the_root() -> None:
    # sqrt((R1 - R2)^2) is |R1 - R2|, so neither R1 - R2 nor R2 - R1 may come out
    closed = power_product(RING.one, RING.one, {(R1 - R2) ** 2 * L1: HALF})
    assert closed.num == 1
    assert closed.value(VALUES) == pytest.approx(2 * 13**0.5, rel=1e-15)


def test_figure_without_every_value() -> None:
    closed = quotient(R1, R1 + R2)
    assert figure(closed, {"R1": Fraction(1)}).value is None
    assert figure(closed, VALUES).value == 0.375
    assert repr(Figure(closed, None)) == "R1/(R1 + R2)"
    assert repr(Figure(quotient(R1, RING.one), 3.0, OHM)) == "R1 = 3 ohm"
    assert repr(Figure(None, None)) == "no value"


def test_long_closed_form_gives_way_to_its_number() -> None:
    long = quotient(Fraction(10**70 + 1, 10**70), Fraction(1))
    assert repr(Figure(long, 1.0)) == "1"


def test_value_of_a_ring_element_is_exact() -> None:
    assert value_of(2 * R1 * C1 - R2**2, VALUES) == 17
    with pytest.raises(KeyError):
        value_of(R1, {})


@given(st.fractions(0, 10**6), st.integers(1, 7))
@settings(max_examples=80, deadline=None)
def test_law_root_of_a_power(x: Fraction, degree: int) -> None:
    """The n-th root of x^n is x exactly; the n-th root of x is good to 40 digits."""
    assert nth_root(x**degree, degree) == x
    root = nth_root(x, degree)
    with mpmath.workdps(60):
        exact = mpmath.root(mpmath.mpf(x.numerator) / x.denominator, degree)
        assert (
            abs(mpmath.mpf(root.numerator) / root.denominator - exact) <= abs(exact) * mpmath.mpf(10) ** -40
        )


monomials = st.tuples(*(st.integers(0, 3) for _ in range(5))).map(
    lambda e: R1 ** e[0] * R2 ** e[1] * C1 ** e[2] * C2 ** e[3] * L1 ** e[4]
)


@given(
    monomials,
    monomials,
    monomials,
    st.integers(1, 12),
    st.sampled_from([HALF, -HALF, Fraction(2, 3), Fraction(-5, 4)]),
)
@settings(max_examples=60, deadline=None)
def test_law_taking_powers_out_does_not_change_the_value(
    num: object, den: object, base: object, number: int, exponent: Fraction
) -> None:
    whole = base * number + R1 * C2  # type: ignore[operator]
    closed = power_product(num, den, {whole: exponent, base: -exponent})
    outside = value_of(num, VALUES) / value_of(den, VALUES)
    under = float(value_of(whole, VALUES) / value_of(base, VALUES))
    if whole == base:
        return
    assert closed.value(VALUES) == pytest.approx(float(outside) * under ** float(exponent), rel=1e-12)
