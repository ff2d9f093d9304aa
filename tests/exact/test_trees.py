"""Diagrams of determinants: against sympy's determinant, by their laws, and at sizes nobody expands."""

from __future__ import annotations

from fractions import Fraction
from random import Random

import pytest
import sympy

from symnet.exact.trees import Diagram, Piece, build


def random_pieces(random: Random, size: int, count: int, symmetric: float) -> list[Piece]:
    def end() -> int | None:
        end = random.randint(-1, size - 1)
        return None if end < 0 else end

    pieces = []
    for _ in range(count):
        a, b = end(), end()
        c, d = (a, b) if random.random() < symmetric else (end(), end())
        pieces.append(Piece(a, b, c, d))
    return pieces


def matrix_of(size: int, pieces: list[Piece], weights: list[Fraction]) -> sympy.Matrix:
    """The matrix written out: the definition of a piece, independent of how the diagram treats it."""

    def vector(plus: int | None, minus: int | None) -> sympy.Matrix:
        column = sympy.zeros(size, 1)
        if plus is not None:
            column[plus] += 1
        if minus is not None:
            column[minus] -= 1
        return column

    total = sympy.zeros(size, size)
    for piece, weight in zip(pieces, weights, strict=True):
        u = vector(piece.row_plus, piece.row_minus)
        v = vector(piece.column_plus, piece.column_minus)
        total += sympy.Rational(weight.numerator, weight.denominator) * u * v.T
    return total


@pytest.mark.parametrize("seed", range(150))
def test_equals_the_determinant_of_the_matrix(seed: int) -> None:
    random = Random(seed)
    size = random.randint(1, 5)
    pieces = random_pieces(random, size, random.randint(size, size + 6), random.random())
    take = [random.randint(-50, 50) for _ in pieces]
    leave = [random.randint(1, 50) for _ in pieces]
    weights = [Fraction(t, m) for t, m in zip(take, leave, strict=True)]
    expected = matrix_of(size, pieces, weights).det()
    for m in leave:
        expected *= m
    assert build(size, pieces).evaluate(take, leave) == expected


@pytest.mark.parametrize("seed", range(40))
def test_any_order_of_the_pieces_gives_the_same_value(seed: int) -> None:
    random = Random(seed)
    size = random.randint(1, 6)
    pieces = random_pieces(random, size, size + 6, 0.5)
    take = [random.randint(-9, 9) for _ in pieces]
    leave = [random.randint(-9, 9) for _ in pieces]
    chosen = build(size, pieces).evaluate(take, leave)
    order = list(range(len(pieces)))
    random.shuffle(order)
    assert build(size, pieces, order).evaluate(take, leave) == chosen


def ladder(sections: int) -> list[Piece]:
    pieces = []
    for k in range(sections):
        before = None if k == 0 else k - 1
        pieces += [Piece(before, k, before, k), Piece(k, None, k, None)]
    return pieces


@pytest.mark.parametrize("sections", [1, 2, 3, 5, 13, 40])
def test_a_ladder_has_a_fibonacci_number_of_terms(sections: int) -> None:
    """Law: the spanning trees of an n-section ladder number F(2n + 1) (Kirchhoff's matrix-tree theorem)."""
    assert build(sections, ladder(sections)).count() == sympy.fibonacci(2 * sections + 1)


@pytest.mark.parametrize("nodes", [2, 3, 4, 5, 6, 7])
def test_a_complete_graph_has_cayleys_number_of_terms(nodes: int) -> None:
    """Law: the complete graph on n nodes has n^(n-2) spanning trees (Cayley)."""
    pieces = [
        Piece(None if a == 0 else a - 1, b - 1, None if a == 0 else a - 1, b - 1)
        for a in range(nodes)
        for b in range(a + 1, nodes)
    ]
    assert build(nodes - 1, pieces).count() == nodes ** (nodes - 2)


def test_a_ladder_of_two_hundred_sections_stays_a_small_diagram() -> None:
    diagram = build(200, ladder(200))
    assert diagram.count() == sympy.fibonacci(401)
    assert len(diagram) < 2000


def test_bound_is_the_sum_of_magnitudes() -> None:
    pieces = [
        Piece(0, None, 0, None),
        Piece(1, None, 1, None),
        Piece(0, None, 1, None),
        Piece(1, None, 0, None),
    ]
    diagram = build(2, pieces)
    assert diagram.evaluate([2, 3, 5, 7], [1, 1, 1, 1]) == 2 * 3 - 5 * 7
    assert diagram.bound([2, 3, 5, 7], [1, 1, 1, 1]) == 2 * 3 + 5 * 7


def test_modulo_a_prime_is_the_value_modulo_the_prime() -> None:
    random = Random(3)
    pieces = random_pieces(random, 5, 12, 0.5)
    take = [random.randint(-99, 99) for _ in pieces]
    leave = [random.randint(-99, 99) for _ in pieces]
    diagram = build(5, pieces)
    assert diagram.evaluate_modulo(take, leave, 101) == diagram.evaluate(take, leave) % 101


def test_zero_for_every_value_is_known_from_the_graph() -> None:
    assert build(2, [Piece(0, 1, 0, 1)]).is_zero
    assert build(1, []).is_zero
    assert build(2, [Piece(0, 1, 0, 1), Piece(1, 0, 1, 0), Piece(0, 1, 0, 1)]).is_zero
    assert build(2, [Piece(0, 1, 0, 1)]).evaluate([5], [7]) == 0


def test_the_empty_determinant_is_one() -> None:
    assert build(0, []) == Diagram((), (), (), (), 0)
    assert build(0, []).evaluate([], []) == 1
