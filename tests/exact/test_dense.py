"""Integer polynomials: gcd, square-free parts and the modular certificate."""

from __future__ import annotations

from fractions import Fraction
from functools import reduce

from hypothesis import given, settings
from hypothesis import strategies as st

from symnet.exact import dense
from symnet.exact.dense import PRIME, Integers
from symnet.exact.doubles import binary, double, scaled


def test_certificate_is_not_trusted_when_the_prime_divides_the_leading_coefficient() -> None:
    # modulo the prime both lose their leading term; the true gcd is 1 + PRIME*s
    p = dense.multiply((1, PRIME), (2, 1))
    q = dense.multiply((1, PRIME), (3, 1))
    assert not dense.coprime(p, q)
    assert dense.gcd(p, q)[0] == (1, PRIME)


def test_common_factor_that_exists_only_modulo_the_prime() -> None:
    # s + 1 and s + 1 + PRIME agree modulo the prime, yet have nothing in common
    p, q = (1, 1), (1 + PRIME, 1)
    assert not dense.coprime(p, q)
    assert dense.gcd(p, q) == ((1,), p, q)


def test_no_derivative_is_lost() -> None:
    assert dense.square_free((1, 2, 1)) == (((1, 1), 2),)
    assert dense.square_free((7,)) == ()


polynomials = (
    st.lists(st.integers(-9, 9), min_size=2, max_size=5).map(dense.trim).filter(lambda p: len(p) > 1)
)


def primitive(p: Integers) -> Integers:
    return dense.primitive([Fraction(c) for c in p])[1]


@given(polynomials, polynomials, polynomials)
@settings(max_examples=80, deadline=None)
def test_law_gcd_and_cofactors(a: Integers, b: Integers, c: Integers) -> None:
    """g*(p/g) = p, g*(q/g) = q, the cofactors have no common factor, and c divides g."""
    p, q = primitive(dense.multiply(a, c)), primitive(dense.multiply(b, c))
    g, f, h = dense.gcd(p, q)
    assert dense.multiply(g, f) == p
    assert dense.multiply(g, h) == q
    assert dense.gcd(primitive(f), primitive(h))[0] == (1,)
    assert dense.divide_exactly(g, primitive(c)) is not None


@given(polynomials, polynomials, polynomials)
@settings(max_examples=60, deadline=None)
def test_law_square_free_parts_multiply_back(a: Integers, b: Integers, c: Integers) -> None:
    p = primitive(reduce(dense.multiply, [a, b, b, c, c, c]))
    product: Integers = (1,)
    for part, multiplicity in dense.square_free(p):
        assert dense.gcd(primitive(part), primitive(dense.derivative(part)))[0] == (1,)
        for _ in range(multiplicity):
            product = dense.multiply(product, part)
    assert product in {p, tuple(-x for x in p)}


@given(st.fractions(), st.integers(-5, 5))
def test_law_value_at(x: Fraction, c: int) -> None:
    assert dense.value_at((c, 2, 1), x) == c + 2 * x + x * x


@given(st.fractions())
def test_law_binary_is_the_number(x: Fraction) -> None:
    mantissa, exponent = binary(x)
    assert abs(Fraction(mantissa) * Fraction(2) ** exponent - x) <= abs(x) / 2**53


def test_doubles_beyond_their_range() -> None:
    assert scaled(1, 5000) == float("inf")
    assert scaled(-1, 5000) == float("-inf")
    assert scaled(1, -5000) == 0.0
    assert double(Fraction(-(10**400))) == float("-inf")
    assert double(Fraction(1, 10**400)) == 0.0
