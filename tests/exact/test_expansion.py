"""Writing determinants out: against plain ring arithmetic on the same diagram."""

from __future__ import annotations

from random import Random
from typing import TYPE_CHECKING

import pytest

from symnet.exact.expansion import Expansion, Fields, Primitive, expand
from symnet.exact.modular import SMALL_PRIME, weight_at
from symnet.exact.polynomials import begins_negative, make_ring
from symnet.exact.trees import Piece, build

from .test_trees import random_pieces

if TYPE_CHECKING:
    from sympy.polys.rings import PolyElement, PolyRing


def written_out(polynomial: PolyElement, ring: PolyRing) -> Expansion:
    """A ring element as an expansion: one piece whose weight it is."""
    return expand(build(1, [Piece(0, None, 0, None)]), ring.one, [polynomial], [ring.one])


@pytest.mark.parametrize("seed", range(80))
def test_equals_ring_arithmetic(seed: int) -> None:
    """Law: expanding and evaluating the diagram over the ring are the same reading of it."""
    random = Random(seed)
    names = ["a", "b", "c", "d", "e", "f"] if seed % 2 else [f"p{k}" for k in range(40)]
    ring = make_ring(names)

    def weight() -> PolyElement:
        kind = random.random()
        if kind < 0.3:
            return ring.one
        if kind < 0.7:
            return random.choice(ring.gens)
        total = ring.zero
        for _ in range(random.randint(1, 3)):
            total += random.choice([1, -1, 2, 10**12]) * random.choice(ring.gens) ** random.randint(0, 3)
        return total or ring.one

    size = random.randint(1, 4)
    pieces = random_pieces(random, size, size + random.randint(0, 5), 0.5)
    take, leave = [weight() for _ in pieces], [weight() for _ in pieces]
    factor = weight()
    diagram = build(size, pieces)
    expected = factor * diagram.evaluate(take, leave, ring.one)
    assert expand(diagram, factor, take, leave).to_element(ring) == expected


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


def test_coefficients_beyond_a_machine_word_stay_exact() -> None:
    ring = make_ring(["R"])
    _, r = ring.gens
    pieces = [Piece(k, None, k, None) for k in range(6)]
    weight = 10**12 * r + 1
    written = expand(build(6, pieces), ring.one, [weight] * 6, [ring.one] * 6)
    assert written.to_element(ring) == weight**6


def test_fields_do_not_run_into_each_other() -> None:
    fields = Fields.for_degrees([1] * 100 + [1000])
    assert fields.words == 2
    assert len({(word, shift) for word, shift, _ in fields.places}) == 101


def test_terms_of_a_weight_fall_together_where_no_path_parts() -> None:
    """Found by a random network: (1 + a)*(1 + a) on one forced path each has the term 2a."""
    ring = make_ring(["a"])
    _, a = ring.gens
    pieces = [Piece(0, None, 0, None), Piece(1, None, 1, None)]
    written = expand(build(2, pieces), ring.one, [1 + a, 1 + a], [ring.one, ring.one])
    assert len(written) == 3
    assert written.to_element(ring) == (1 + a) ** 2


def test_terms_can_be_read_one_by_one() -> None:
    ring = make_ring(["R", "C"])
    s, r, c = ring.gens
    polynomial = 2 * s * r - 3 * c**2 + 1
    assert {exponents: number for number, exponents in written_out(polynomial, ring)} == dict(polynomial)


def test_two_million_terms_stay_far_below_a_gigabyte() -> None:
    """A 15-section ladder of different parts and a load: the arrays of its terms, and what making them takes."""
    import tracemalloc

    import symnet as sn

    chain = [f"n{k} -- R{k + 1} -- n{k + 1} -- C{k + 1} -- gnd" for k in range(15)]
    H = sn.derive(sn.network("\n".join([*chain, "n15 -- RL -- gnd", "drive n0", "read n15"])))
    tracemalloc.start()
    written = H.quotient.denominator.written(most=5_000_000)
    peak = tracemalloc.get_traced_memory()[1]
    tracemalloc.stop()
    assert len(written) == H.terms[1] == 2_178_309  # F(32)
    assert peak < 200_000_000
