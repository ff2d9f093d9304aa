"""Lowest terms: what is certified, what is cancelled, what is kept as a hidden mode."""

from __future__ import annotations

from itertools import product
from random import Random
from typing import TYPE_CHECKING

import pytest

from symnet.errors import LimitError
from symnet.exact import products
from symnet.exact.lowest import LowestTerms, reduce
from symnet.exact.modular import SMALL_PRIME, weight_at
from symnet.exact.polynomials import begins_negative, make_ring
from symnet.exact.products import Product

from .test_unfolding import written_out

if TYPE_CHECKING:
    from sympy.polys.rings import PolyElement

RING = make_ring(["R", "C", "L"])
S, R, C, L = RING.gens


def lowest_terms(n: PolyElement, d: PolyElement) -> LowestTerms:
    return reduce(
        Product.of(RING.ngens, [written_out(n, RING)]),
        Product.of(RING.ngens, [written_out(d, RING)]),
        RING,
        lambda point: (weight_at(n, point, SMALL_PRIME), weight_at(d, point, SMALL_PRIME)),
    )


def random_polynomial(random: Random) -> PolyElement:
    total = RING.zero
    for exponents in product(range(2), repeat=4):
        if random.random() < 0.4:
            total += random.randint(-5, 5) * RING.from_dict({exponents: RING.domain.one})
    return total or RING.one


@pytest.mark.parametrize("seed", range(100))
def test_against_sympys_cancel(seed: int) -> None:
    """Law: N/D = n/d with gcd(n, d) = 1; sympy's ring cancel is the oracle."""
    random = Random(seed)
    common = random_polynomial(random) if seed % 2 else RING.one
    n, d = random_polynomial(random) * common, random_polynomial(random) * common
    found = lowest_terms(n, d)
    expected_n, expected_d = n.cancel(d)
    if begins_negative(expected_d):
        expected_n, expected_d = -expected_n, -expected_d
    assert (found.numerator, found.denominator) == (expected_n, expected_d)


def test_a_cancelled_factor_with_s_is_kept() -> None:
    mode = 1 + S * R * C
    found = lowest_terms(R * mode * (L + S), mode**2 * (L + R))
    assert found.hidden == (mode,)
    assert (found.numerator, found.denominator) == (R * (L + S), mode * (L + R))


def test_modes_at_the_origin_are_kept_and_factors_without_s_are_not() -> None:
    found = lowest_terms(6 * S**2 * R * (L + C), 4 * S**3 * R * (L + C))
    assert found.hidden == (S, S)
    assert (found.numerator, found.denominator) == (3, 2 * S)


def test_the_denominator_begins_with_plus() -> None:
    found = lowest_terms(R, -L - S * C)
    assert (found.numerator, found.denominator) == (-R, L + S * C)


def test_zero_over_anything_is_zero_over_one() -> None:
    found = lowest_terms(RING.zero, 1 + S * R)
    assert (found.numerator, found.denominator, found.hidden) == (0, 1, ())


def test_factors_are_compared_two_by_two() -> None:
    """Law: a product of factors in lowest terms is that of the product multiplied out."""
    mode, other = 1 + S * R * C, 1 + S * L + S**2 * C
    tops, bottoms = [R + S * L, mode * (L + R)], [mode * other, L + R + S]
    n, d = (Product.of(RING.ngens, [written_out(p, RING) for p in side]) for side in (tops, bottoms))
    found = reduce(
        n, d, RING, lambda point: tuple(weight_at(a * b, point, SMALL_PRIME) for a, b in (tops, bottoms))
    )
    assert found.hidden == (mode,)
    assert (found.numerator, found.denominator) == ((R + S * L) * (L + R), other * (L + R + S))
    assert found.terms == (4, 9)
    assert found.bottom.degrees() == (3, 1, 1, 2)
    point = [5, 7, 11, 13]
    assert found.bottom.modulo(point, SMALL_PRIME) == weight_at(found.denominator, point, SMALL_PRIME)


def test_a_product_too_long_to_be_multiplied_out_is_refused(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(products, "MOST_TERMS", 8)
    found = Product.of(RING.ngens, [written_out(p, RING) for p in (1 + S * R + C, 1 + S * L + R)])
    with pytest.raises(LimitError, match="up to 9 terms; the limit is 8"):
        found.to_element(RING)
    assert found.degrees() == (2, 2, 1, 1)
