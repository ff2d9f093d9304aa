"""A determinant whose diagram is too large to be built: its matrix, for numbers.

A diagram needs few open rows and columns at a time. Where everything is joined to everything it has up to a Bell number
of nodes in a level: 700 000 in all for the complete graph on 13 nodes, three million on 14. With numbers there is
no need of it: the matrix has no more rows than the network has nodes. It is eliminated without fractions
(E. H. Bareiss, Sylvester's identity and multistep integer-preserving Gaussian elimination, Mathematics of
Computation 22, 1968, 565-578), at as many whole s as the degree asks for, and the coefficients follow from
the values.

Every piece is take/leave * u * v^T and the determinant is multiplied by all leaves. A leave that is zero at the point, a
short, is not divided by: it gets a row and a column of its own, which say that its current is free
and its voltage zero. So the value is right wherever the polynomial is.
"""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass
from fractions import Fraction
from math import factorial, lcm
from typing import TypeAlias

from symnet.exact.forests import Ends
from symnet.exact.trees import Piece
from symnet.progress import Progress

__all__ = ["Matrix"]

#: Entries by column.
_Row: TypeAlias = "list[int]"


@dataclass(frozen=True)
class Matrix:
    """The determinant, times the sign ``overall``, of the sum of some pieces, which ``ends`` gives.

    ``piece`` are their numbers among the weights.
    """

    size: int
    ends: tuple[Piece, ...]
    piece: tuple[int, ...]
    overall: int = 1

    @property
    def is_zero(self) -> bool:
        """False: a matrix is made only where there is a tree common to both graphs."""
        return False

    def count(self) -> int:
        """An upper bound of the number of common trees: how many the graph of fewer trees has.

        That is exact where both graphs are the same, as in networks of R, L and C (Kirchhoff 1847, the matrix-tree
        theorem).
        """
        return min(
            self._trees([(p.row_plus, p.row_minus) for p in self.ends]),
            self._trees([(p.column_plus, p.column_minus) for p in self.ends]),
        )

    def _trees(self, edges: Sequence[Ends]) -> int:
        matrix = [[0] * self.size for _ in range(self.size)]
        for plus, minus in edges:
            _add(matrix, Piece(plus, minus, plus, minus), 1)
        return _bareiss(matrix)

    def evaluate_modulo(self, take: Sequence[int], leave: Sequence[int], prime: int) -> int:
        """The determinant modulo a prime, for weights that are ints."""
        matrix, left = self._shorts(take, leave, lambda weight: weight % prime == 0)
        value = self.overall
        for ends, k in left:
            value = value * leave[k] % prime
            _add(matrix, ends, take[k] * pow(leave[k], -1, prime) % prime)
        return value * _eliminated([[entry % prime for entry in row] for row in matrix], prime) % prime

    def coefficients(self, take: Sequence[Sequence[int]], leave: Sequence[Sequence[int]]) -> list[int]:
        """The coefficients, ascending in s, for weights with these coefficients."""
        gains = sorted((len(take[k]) - len(leave[k]) for k in self.piece), reverse=True)
        degree = sum(len(leave[k]) - 1 for k in self.piece) + sum(
            gain for gain in gains[: self.size] if gain > 0
        )
        values = []
        with Progress("evaluating the determinant", "whole s", degree + 1) as at:
            for s in range(degree + 1):
                at(s)
                values.append(self._at(take, leave, s))
        return _through(values)

    def _at(self, take: Sequence[Sequence[int]], leave: Sequence[Sequence[int]], s: int) -> int:
        """The value at a whole s."""
        takes, leaves = ([_value(weight, s) for weight in side] for side in (take, leave))
        matrix, left = self._shorts(takes, leaves, lambda weight: weight == 0)
        scales = [1] * len(matrix)  # every row times a number by which its fractions go away
        for ends, k in left:
            for row in (ends.row_plus, ends.row_minus):
                if row is not None:
                    scales[row] = lcm(scales[row], leaves[k])
        for row, scale in enumerate(scales):
            matrix[row] = [entry * scale for entry in matrix[row]]
        value = Fraction(self.overall)
        for ends, k in left:
            value *= leaves[k]
            for row, sign in ((ends.row_plus, 1), (ends.row_minus, -1)):
                if row is not None:
                    alone = Piece(row, None, ends.column_plus, ends.column_minus)
                    _add(matrix, alone, sign * takes[k] * (scales[row] // leaves[k]))
        value *= _bareiss(matrix)
        for scale in scales:
            value /= scale
        return value.numerator  # the determinant, times all leaves, is a whole number

    def _shorts(
        self, take: Sequence[int], leave: Sequence[int], is_zero: Callable[[int], bool]
    ) -> tuple[list[_Row], list[tuple[Piece, int]]]:
        """The matrix with nothing but the pieces whose leave is zero, and the other pieces with their numbers."""
        pairs = list(zip(self.ends, self.piece, strict=True))
        shorts = [(ends, k) for ends, k in pairs if is_zero(leave[k])]
        count = self.size + len(shorts)
        matrix = [[0] * count for _ in range(count)]
        for at, (ends, k) in enumerate(shorts, self.size):
            _add(matrix, Piece(ends.row_plus, ends.row_minus, at, None), 1)
            _add(matrix, Piece(at, None, ends.column_plus, ends.column_minus), -take[k])
        return matrix, [(ends, k) for ends, k in pairs if not is_zero(leave[k])]


def _add(matrix: list[_Row], ends: Piece, weight: int) -> None:
    for row, sign in ((ends.row_plus, weight), (ends.row_minus, -weight)):
        if row is not None:
            if ends.column_plus is not None:
                matrix[row][ends.column_plus] += sign
            if ends.column_minus is not None:
                matrix[row][ends.column_minus] -= sign


def _value(coefficients: Sequence[int], s: int) -> int:
    value = 0
    for c in reversed(coefficients):
        value = value * s + c
    return value


def _bareiss(matrix: list[_Row]) -> int:
    """The determinant of a matrix of integers, which is used up."""
    sign, before = 1, 1
    for k in range(len(matrix)):
        pivot = next((r for r in range(k, len(matrix)) if matrix[r][k]), None)
        if pivot is None:
            return 0
        if pivot != k:
            matrix[k], matrix[pivot] = matrix[pivot], matrix[k]
            sign = -sign
        top = matrix[k]
        head = top[k]
        for r in range(k + 1, len(matrix)):
            row = matrix[r]
            factor = row[k]
            matrix[r] = [0] * (k + 1) + [
                (entry * head - factor * above) // before
                for entry, above in zip(row[k + 1 :], top[k + 1 :], strict=True)
            ]
        before = head
    return sign * before


def _eliminated(matrix: list[_Row], prime: int) -> int:
    """The determinant of a matrix modulo a prime; the matrix is used up."""
    value = 1
    for k in range(len(matrix)):
        pivot = next((r for r in range(k, len(matrix)) if matrix[r][k]), None)
        if pivot is None:
            return 0
        if pivot != k:
            matrix[k], matrix[pivot] = matrix[pivot], matrix[k]
            value = -value
        top = matrix[k]
        value = value * top[k] % prime
        inverse = pow(top[k], -1, prime)
        for r in range(k + 1, len(matrix)):
            row = matrix[r]
            factor = row[k] * inverse % prime
            if factor:
                matrix[r] = [(entry - factor * above) % prime for entry, above in zip(row, top, strict=True)]
    return value % prime


def _through(values: list[int]) -> list[int]:
    """The integer coefficients, ascending, of the polynomial with these values at 0, 1, 2 ... (Newton's differences).

    >>> _through([1, 2, 5])
    [1, 0, 1]
    """
    count = len(values)
    differences = list(values)
    for step in range(1, count):
        for k in range(count - 1, step - 1, -1):
            differences[k] -= differences[k - 1]
    whole = factorial(count - 1)
    found = [0] * count
    for k in range(count - 1, -1, -1):  # found * (s - k) + what stands beside s (s - 1) ... (s - k + 1)
        for j in range(count - 1, 0, -1):
            found[j] = found[j - 1] - k * found[j]
        found[0] = differences[k] * (whole // factorial(k)) - k * found[0]
    found = [c // whole for c in found]
    while found and not found[-1]:
        found.pop()
    return found
