"""Writing determinants out: against plain ring arithmetic on the same diagram."""

from __future__ import annotations

from collections.abc import Sequence
from random import Random
from typing import TYPE_CHECKING

import pytest

from symnet.exact.expansion import Expansion
from symnet.exact.polynomials import make_ring, sparse_terms
from symnet.exact.trees import Diagram, Piece, build
from symnet.exact.unfolding import unfold

from .test_trees import random_pieces

if TYPE_CHECKING:
    from sympy.polys.rings import PolyElement, PolyRing


def expand(
    diagram: Diagram, factor: PolyElement, take: Sequence[PolyElement], leave: Sequence[PolyElement]
) -> Expansion:
    """``factor`` times the determinant, written out, for weights that are ring elements."""
    takes, leaves = ([sparse_terms(weight) for weight in side] for side in (take, leave))
    return unfold(diagram, factor.ring.ngens, sparse_terms(factor), takes, leaves)


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


def test_coefficients_beyond_a_machine_word_stay_exact() -> None:
    ring = make_ring(["R"])
    _, r = ring.gens
    pieces = [Piece(k, None, k, None) for k in range(6)]
    weight = 10**12 * r + 1
    written = expand(build(6, pieces), ring.one, [weight] * 6, [ring.one] * 6)
    assert written.to_element(ring) == weight**6


def test_terms_of_a_weight_fall_together_where_no_path_parts() -> None:
    """Found by a random network: (1 + a)*(1 + a) on one forced path each has the term 2a."""
    ring = make_ring(["a"])
    _, a = ring.gens
    pieces = [Piece(0, None, 0, None), Piece(1, None, 1, None)]
    written = expand(build(2, pieces), ring.one, [1 + a, 1 + a], [ring.one, ring.one])
    assert len(written) == 3
    assert written.to_element(ring) == (1 + a) ** 2


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
