"""The diagram in floating point: against exact evaluation, against its laws, and beyond the range of floats."""

from __future__ import annotations

from fractions import Fraction
from random import Random

import numpy as np
import pytest

from symnet.exact.sweeps import Scaled, shares, sweep
from symnet.exact.trees import Piece, build

from .test_trees import ladder, random_pieces


@pytest.mark.parametrize("seed", range(60))
def test_values_are_those_of_exact_evaluation(seed: int) -> None:
    random = Random(seed)
    size = random.randint(1, 5)
    pieces = random_pieces(random, size, size + random.randint(0, 6), 0.6)
    take = [[random.randint(-30, 30) for _ in range(4)] for _ in pieces]
    leave = [[random.randint(-30, 30) for _ in range(4)] for _ in pieces]
    diagram = build(size, pieces)
    found = sweep(diagram, np.array(take, dtype=float), np.array(leave, dtype=float)).plain()
    for k in range(4):
        exact = diagram.evaluate([t[k] for t in take], [m[k] for m in leave])
        scale = diagram.bound([abs(t[k]) for t in take], [abs(m[k]) for m in leave])
        assert abs(found[k] - exact) <= 1e-13 * scale


@pytest.mark.parametrize("seed", range(30))
def test_shares_are_the_paths_that_take_a_piece(seed: int) -> None:
    """Law: D = T_i + L_i, with T_i linear in the take of piece i: T_i/D = 1 - D(take_i = 0)/D."""
    random = Random(seed)
    size = random.randint(1, 4)
    pieces = random_pieces(random, size, size + 4, 0.6)
    take = [random.randint(1, 30) for _ in pieces]
    leave = [random.randint(1, 30) for _ in pieces]
    diagram = build(size, pieces)
    whole = diagram.evaluate(take, leave)
    if not whole:
        pytest.skip("this determinant is zero")
    columns = (np.array([[float(x)] for x in side]) for side in (take, leave))
    _, found = shares(diagram, *columns)
    for i in range(len(pieces)):
        without = diagram.evaluate([0 if k == i else t for k, t in enumerate(take)], leave)
        assert found[i, 0] == pytest.approx(float(1 - Fraction(without, whole)), abs=1e-9)


def test_a_long_ladder_neither_overflows_nor_underflows() -> None:
    """400 factors of 1e12 and 1e-12: the logarithm is exact where the number itself is out of range."""
    diagram = build(200, ladder(200))
    one = np.ones((400, 1))
    for factor in (1e12, 1e-12):
        value = sweep(diagram, one * factor, one * factor)
        expected = np.log2(float(diagram.count() / 10**80)) + 80 * np.log2(10.0) + 400 * np.log2(factor)
        assert value.log2()[0] == pytest.approx(expected, rel=1e-12)
    assert sweep(diagram, one * 1e12, one * 1e12).plain()[0] == np.inf
    assert sweep(diagram, one * 1e-12, one * 1e-12).plain()[0] == 0


def test_complex_points() -> None:
    diagram = build(1, [Piece(0, None, 0, None), Piece(0, None, 0, None)])
    take = np.array([[1.0 + 0j, 2j], [1j, 1.0]])
    leave = np.array([[2.0 + 0j, 1.0], [1.0, 1.0]])
    assert np.allclose(sweep(diagram, take, leave).plain(), [1 + 2j, 1 + 2j])


def test_a_determinant_that_is_zero_for_every_value() -> None:
    diagram = build(2, [Piece(0, 1, 0, 1)])
    value, found = shares(diagram, np.ones((1, 3)), np.ones((1, 3)))
    assert value.plain().tolist() == [0, 0, 0]
    assert found.tolist() == [[0, 0, 0]]


def test_quotients_keep_their_range() -> None:
    big = Scaled(np.array([0.5]), np.array([5000]))
    assert big.over(Scaled(np.array([0.25]), np.array([4999]))).plain()[0] == 4.0
