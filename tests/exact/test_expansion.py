"""Polynomials as arrays of packed monomials: against the ring elements they stand for."""

from __future__ import annotations

from random import Random

import pytest

from symnet.exact.expansion import Fields, Primitive
from symnet.exact.modular import SMALL_PRIME, weight_at
from symnet.exact.polynomials import begins_negative, make_ring
from symnet.exact.trees import build

from .test_unfolding import expand, written_out


@pytest.mark.parametrize("names", [3, 30, 90])
def test_the_value_modulo_a_prime_is_that_of_the_ring_element(names: int) -> None:
    random = Random(names)
    ring = make_ring([f"p{k}" for k in range(names)])
    polynomial = ring.zero
    for _ in range(200):
        term = ring(random.choice([1, -1, 7, 10**20]))
        for _ in range(4):
            term *= random.choice(ring.gens) ** random.randint(0, 5)
        polynomial += term
    point = [random.randrange(SMALL_PRIME) for _ in ring.gens]
    expected = weight_at(polynomial, point, SMALL_PRIME)
    assert written_out(polynomial, ring).modulo(point, SMALL_PRIME) == expected


def test_content_degrees_and_sign_are_those_of_the_polynomial() -> None:
    ring = make_ring(["R", "C"])
    s, r, c = ring.gens
    polynomial = -6 * s * r**2 * c + 9 * s**3 * r**5
    expansion = written_out(polynomial, ring)
    assert expansion.content() == (3, (1, 2, 0))
    assert expansion.degrees() == (3, 5, 1)
    assert expansion.begins_negative()
    assert begins_negative(polynomial)
    primitive = Primitive.of(expansion)
    assert primitive.number == -3
    assert primitive.part.to_element(ring) == 2 * c - 3 * s**2 * r**3
    assert primitive.part.times(-3, (1, 2, 0)).to_element(ring) == polynomial


def test_zero_has_no_content() -> None:
    ring = make_ring(["R"])
    zero = expand(build(1, []), ring.one, [], [])
    assert len(zero) == 0
    assert zero.content() == (0, (0, 0))
    assert zero.to_element(ring) == 0
    assert Primitive.of(zero).number == 0


def test_fields_do_not_run_into_each_other() -> None:
    fields = Fields.for_degrees([1] * 100 + [1000])
    assert fields.words == 2
    assert len({(word, shift) for word, shift, _ in fields.places}) == 101


def test_terms_can_be_read_one_by_one() -> None:
    ring = make_ring(["R", "C"])
    s, r, c = ring.gens
    polynomial = 2 * s * r - 3 * c**2 + 1
    assert {exponents: number for number, exponents in written_out(polynomial, ring)} == dict(polynomial)
