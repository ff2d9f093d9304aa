"""Determinants with equal parts, counted by kind: against the same diagram written out path by path."""

from __future__ import annotations

from random import Random

import pytest

import symnet as sn
from symnet.exact.digits import packed, unpacked
from symnet.exact.kinds import Kinds
from symnet.exact.polynomials import ONE, Generators, Terms
from symnet.exact.trees import build
from symnet.exact.unfolding import unfold
from tests.speed.engine import rc_ladder

from .test_trees import random_pieces

NAMES = Generators(("s", "R", "C"))


def weight(random: Random) -> tuple[Terms, Terms]:
    """Take and leave of a kind: R, C, their inverse, or an integer before a product."""
    return random.choice(
        [
            (ONE, ((1, ((1, 1),)),)),
            (((1, ((0, 1), (2, 1))),), ONE),
            (((1, ((1, 1),)),), ONE),
            (((-3, ((1, 2), (2, 1))),), ((2, ((0, 1),)),)),
            (ONE, ONE),
        ]
    )


@pytest.mark.parametrize("seed", range(60))
def test_counting_is_writing_out(seed: int) -> None:
    """Law: both are the sum over all common trees, times the factor."""
    random = Random(seed)
    size = random.randint(1, 4)
    pieces = random_pieces(random, size, size + random.randint(0, 6), 0.7)
    take, leave = zip(*(weight(random) for _ in pieces), strict=True)
    factor = random.choice([ONE, ((2, ((1, 1),)), (-1, ()))])
    diagram = build(size, pieces)
    kinds = Kinds.of(diagram, take, leave)
    assert kinds is not None
    if diagram.is_zero:
        return
    counted = kinds.expansion(len(NAMES), factor, diagram.count())
    expected = unfold(diagram, len(NAMES), factor, take, leave).to_element(NAMES.ring)
    assert counted.to_element(NAMES.ring) == expected
    assert len(expected) <= kinds.counts * len(factor)


def test_equal_sections_are_counted_and_not_written_out() -> None:
    """D of n equal RC sections has the coefficients C(n + k, 2k) of (s*R*C)^k (Morgan-Voyce polynomials).

    A. M. Morgan-Voyce, "Ladder-network analysis using Fibonacci numbers", IRE Trans. Circuit Theory 6 (1959),
    321-322 (from memory).
    """
    from math import comb

    n = 200
    ties = [", ".join(f"{kind}{k + 1}" for k in range(n)) + f" = {kind}" for kind in "RC"]
    H = sn.derive(sn.network("\n".join([rc_ladder(n), *ties])))
    assert H.terms == (1, n + 1)
    assert dict(H.denominator) == {(k, k, k): comb(n + k, 2 * k) for k in range(n + 1)}


@pytest.mark.parametrize("seed", range(20))
def test_digits_are_coefficients(seed: int) -> None:
    random = Random(seed)
    coefficients = [random.randint(-(2**40), 2**40) for _ in range(random.randint(0, 50))] + [1]
    assert unpacked(packed(coefficients, 43), 43) == coefficients
