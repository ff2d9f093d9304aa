"""The solution of a network in which wrong lines stand in the place of some of its equations, exactly.

The equations are linear and homogeneous in the unknowns, one fewer than there are unknowns when there is one drive.
So the unknowns are, up to a common factor, the minors of the matrix with one column left out each. The minors are
expanded along the rows, remembered by the set of columns that are left: rows of networks are short, and the sets
that occur are few. What comes out is what a person gets who takes the wrong lines as true, without another slip.
"""

from __future__ import annotations

from collections.abc import Sequence
from typing import TYPE_CHECKING, Final

from symnet.errors import Fault, LimitError, SingularError
from symnet.review.solution import Substitution, Unknown

if TYPE_CHECKING:
    from symnet.exact.readable.packed import Polynomial
    from symnet.review.solution import Solution

__all__ = ["Altered"]

_MOST_UNKNOWNS: Final = 24


class Altered(Substitution):
    """Every unknown of a network under other equations; each is a polynomial in the unknowns that is zero.

    Raises SingularError when the equations do not determine the unknowns but for the drive, and LimitError for
    several drives, for equations that are not linear and for more than some twenty unknowns.
    """

    def __init__(self, solution: Solution, equations: Sequence[Polynomial]) -> None:
        self.algebra, self.unknowns = solution.algebra, solution.unknowns
        if len(solution.network.drives) > 1 or len(self.unknowns) > _MOST_UNKNOWNS:
            raise LimitError(Fault("an altered network is solved for one drive and a few unknowns only"))
        self._rows = [self._row(equation) for equation in equations]
        self._minors: dict[int, Polynomial] = {}
        every = (1 << len(self.unknowns)) - 1
        self._numerators: dict[Unknown, Polynomial] = {}
        for k, unknown in enumerate(self.unknowns):
            minor = self._minor(every & ~(1 << k))
            self._numerators[unknown] = minor if k % 2 == 0 else {m: -c for m, c in minor.items()}
        if not any(self._numerators.values()):
            raise SingularError(Fault("these equations do not determine the voltages"))

    def numerator(self, unknown: Unknown) -> Polynomial:
        """What an unknown is, up to a factor that all have in common."""
        return self._numerators[unknown]

    @property
    def denominator(self) -> Polynomial:
        """1: the unknowns are given up to a common factor only."""
        return {0: 1}

    def _row(self, equation: Polynomial) -> list[tuple[int, Polynomial]]:
        """The columns in which an equation has something, with their coefficients."""
        row = []
        for exponents, coefficient in self.by_unknowns(equation).items():
            if sum(exponents) != 1:
                raise LimitError(Fault("an altered network is solved where its equations are linear"))
            row.append((exponents.index(1), coefficient))
        return row

    def _minor(self, columns: int) -> Polynomial:
        """The determinant of the last rows in these columns, as many rows as columns."""
        if not columns:
            return {0: 1}
        known = self._minors.get(columns)
        if known is None:
            known = {}
            count = columns.bit_count()
            for column, coefficient in self._rows[len(self._rows) - count]:
                if columns >> column & 1:
                    sign = -1 if (columns & ((1 << column) - 1)).bit_count() % 2 else 1
                    minor = self._minor(columns & ~(1 << column))
                    if minor:
                        known = self.algebra.add(known, self.algebra.multiply(coefficient, minor), sign)
            self._minors[columns] = known
        return known
