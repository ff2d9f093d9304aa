"""Arithmetic that gives up: the same values as the ring, and a refusal before a product is multiplied out."""

from __future__ import annotations

import pytest

from symnet.errors import LimitError
from symnet.exact.polynomials import make_ring
from symnet.shape.bounded import Bounded
from symnet.shape.families import CATALOGUE

S, *PARTS = make_ring([f"x{k}" for k in range(12)]).gens


@pytest.mark.parametrize("order", [2, 3, 4])
def test_families_get_the_values_of_the_ring(order: int) -> None:
    low = [PARTS[k] + PARTS[k + 1] for k in range(order + 1)]
    for family in CATALOGUE:
        if family.has_order(order) and not family.finite_zeros(order):
            plain = family.conditions(low)
            bounded = family.conditions([Bounded(c) for c in low])
            assert (plain is None) == (bounded is None)
            assert [b.element for b in bounded or ()] == list(plain or ())


def test_long_products_are_refused() -> None:
    long = Bounded(sum(PARTS, S.ring.zero))
    assert len((long**2).element) == 78
    with pytest.raises(LimitError, match="a product of"):
        long**6
