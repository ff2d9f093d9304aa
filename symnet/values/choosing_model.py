"""H as a function of arrays of values: coefficients of thousands of candidates at once, and where they stand.

The diagram of H gives all coefficients in one pass (:mod:`symnet.exact.batches`). Where it holds a mode that H does
not show, its coefficients are not those of lowest terms, and H is evaluated term by term instead. Which powers of s
there are is found once, exactly, for generic values.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass
from fractions import Fraction
from typing import TYPE_CHECKING

import numpy as np

from symnet.errors import Fault, NotationError
from symnet.exact.batches import coefficient_arrays
from symnet.exact.ratio import Ratio
from symnet.values.choosing_aim import Aim, Figures, Floats, figures_of

if TYPE_CHECKING:
    from symnet.exact.transfer import Transfer

__all__ = ["Model"]


@dataclass(frozen=True, eq=False)
class Model:
    """H for arrays of values. ``layout`` are the degrees of N' and D' and the powers of s of N and D."""

    H: Transfer
    names: tuple[str, ...]
    coefficients: Callable[[Mapping[str, Floats]], tuple[Floats, Floats]]
    origin: tuple[int, int]
    layout: tuple[int, int, int, int]
    linear: tuple[bool, ...]

    @classmethod
    def of(cls, H: Transfer, names: tuple[str, ...]) -> Model:
        """The model; its layout is that of generic values of the chosen parts."""
        generic = {name: Fraction(1_000_003 + 2 * k, 10_000_019) for k, name in enumerate(names)}
        values = [
            generic.get(name, H.values.get(name, Fraction(1))) for name in H.naming.generators.names[1:]
        ]
        top, bottom = ([*numbers] for numbers in H.quotient.numbers(values))
        ratio = Ratio.of(top, bottom)
        if not ratio.num:
            raise NotationError(Fault("H = 0: no values make it anything else", "is the read connected?"))
        z, m = (next(k for k, c in enumerate(p) if c) for p in (ratio.num, ratio.den))
        layout = (len(ratio.num) - 1 - z, len(ratio.den) - 1 - m, z, m)
        z_raw, m_raw = (next(k for k, c in enumerate(p) if c) for p in (top, bottom))
        degrees = tuple(max(k for k, c in enumerate(p) if c) for p in (top, bottom))
        same = degrees == (z_raw + layout[0], m_raw + layout[1]) and z_raw - m_raw == z - m
        linear = _linear(H, names, (z, m))
        if same:  # no mode cancels, and the diagram gives the figures at once
            return cls(H, names, lambda arrays: coefficient_arrays(H, arrays), (z_raw, m_raw), layout, linear)
        return cls(H, names, lambda arrays: _by_terms(H, arrays), (z, m), layout, linear)

    def roots(self) -> tuple[tuple[complex, ...], tuple[complex, ...]]:
        """Poles and zeros away from the origin for the values that H has, those that cancel for them included."""
        n, d = self.coefficients({name: np.array([float(self.H.values[name])]) for name in self.names})
        sides = []
        for side, first, degree in zip((d, n), self.origin[::-1], self.layout[1::-1], strict=True):
            tau = (side[first, 0] / side[first + degree, 0]) ** (1 / degree) if degree else 1.0
            c = side[first : first + degree + 1, 0] * tau ** np.arange(degree + 1)
            sides.append(tuple(complex(root) * tau for root in np.roots(c[::-1])))
        return sides[0], sides[1]

    def figures(self, aim: Aim, values: Sequence[Floats]) -> Figures:
        """The figures of the aim for arrays of values, one for each name."""
        n, d = self.coefficients(dict(zip(self.names, values, strict=True)))
        top, bottom, _, _ = self.layout
        return figures_of(
            aim, _long(n, self.origin[0] + top + 1), _long(d, self.origin[1] + bottom + 1), self.origin
        )


def _long(rows: Floats, count: int) -> Floats:
    return rows if len(rows) >= count else np.vstack([rows, np.zeros((count - len(rows), rows.shape[1]))])


def _linear(H: Transfer, names: Sequence[str], origin: tuple[int, int]) -> tuple[bool, ...]:
    """Whether corners bound the figures: N and D linear in the part, the coefficients divided by of one sign."""
    generators = H.naming.generators.names
    signs = []
    for polynomial, power in ((H.numerator, origin[0]), (H.denominator, origin[1])):
        lowest = [c for powers, c in polynomial.terms() if powers[0] == power]
        signs.append(bool(lowest) and (all(c > 0 for c in lowest) or all(c < 0 for c in lowest)))
        signs[-1] &= min(powers[0] for powers in polynomial.monoms()) == power
    positive = all(value > 0 for name, value in H.values.items() if name in H.names and name not in names)
    degrees = dict(zip(generators, map(max, H.numerator.degrees(), H.denominator.degrees()), strict=True))
    return tuple(all(signs) and positive and degrees[name] <= 1 for name in names)


def _by_terms(H: Transfer, arrays: Mapping[str, Floats]) -> tuple[Floats, Floats]:
    """N and D in lowest terms, term by term, where the determinants hold a mode that H does not show."""
    sets = len(next(iter(arrays.values())))
    names = H.naming.generators.names[1:]
    columns = [arrays.get(name, np.full(sets, float(H.values.get(name, 1)))) for name in names]
    sides = []
    for polynomial in (H.numerator, H.denominator):
        out = np.zeros((polynomial.degree(polynomial.ring.gens[0]) + 1, sets))
        for powers, coefficient in polynomial.terms():
            term = np.full(sets, float(coefficient))
            for column, power in zip(columns, powers[1:], strict=True):
                if power:
                    term = term * column**power
            out[powers[0]] += term
        sides.append(out)
    return sides[0], sides[1]
