"""A diagram with the weights of its pieces: written out, modulo a prime, or for given values.

For given values the determinant is a polynomial in s with rational coefficients. Every weight is scaled to
integer coefficients and s is replaced by a power of two that no coefficient of the result reaches (Kronecker
substitution): two integer passes over the diagram, one for the bound and one for the value, hold all
coefficients exactly, whatever the order of the network.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace
from fractions import Fraction
from functools import cached_property
from math import lcm, prod
from typing import Any, Final

from symnet.errors import Fault, LimitError
from symnet.exact.dense import multiply
from symnet.exact.digits import packed, unpacked
from symnet.exact.expansion import Expansion
from symnet.exact.kinds import Kinds
from symnet.exact.matrices import Matrix
from symnet.exact.modular import terms_at
from symnet.exact.polynomials import ONE, Generators, Terms, highest_exponents
from symnet.exact.structure import unchained
from symnet.exact.trees import ONE as _NO_ROWS
from symnet.exact.trees import Diagram, too_wide
from symnet.exact.unfolding import unfold

__all__ = [
    "MOST_TERMS",
    "Determinant",
    "coefficients_at",
    "count_in_words",
    "numeric_pair",
    "pair_modulo",
    "too_long",
]

#: Paths of a diagram that are still written out as terms.
MOST_TERMS: Final = 500_000
#: Of a term as an element of a ring of 30 names: its tuple of exponents and its place in a dict.
_TERM_BYTES: Final = 300


@dataclass(frozen=True)
class Determinant:
    """``factor`` times the determinant that ``form`` is with the weights ``take`` and ``leave``.

    The form is a diagram, or the matrix where that is too large to be built: then there are numbers only.
    """

    generators: Generators
    form: Diagram | Matrix
    take: tuple[Terms, ...]
    leave: tuple[Terms, ...]
    factor: Terms = ONE

    @property
    def diagram(self) -> Diagram:
        """The diagram; LimitError where it is too large to be built."""
        if isinstance(self.form, Matrix):
            raise too_wide()
        return self.form

    @property
    def is_built(self) -> bool:
        """Whether there is a diagram."""
        return isinstance(self.form, Diagram)

    def weights_modulo(self, point: Sequence[Any], prime: int) -> tuple[list[Any], list[Any]]:
        """All weights at a point (s first, then the names in order), modulo a prime."""
        take, leave = ([terms_at(terms, point, prime) for terms in side] for side in (self.take, self.leave))
        return take, leave

    @cached_property
    def terms(self) -> int:
        """An upper bound of the number of terms written out, known without expanding.

        The smallest of the number of paths, exact when every piece has a symbol of its own, the number of monomials
        that the degrees leave room for, and, where parts are equal, the number of ways to count them.
        """
        degrees = highest_exponents(len(self.generators), self.take, self.leave)
        bound = min(self.paths, prod(degree + 1 for degree in degrees))
        return len(self.factor) * (bound if self.kinds is None else min(bound, self.kinds.counts))

    @cached_property
    def paths(self) -> int:
        """The number of paths of the diagram; an upper bound of it where that is too large to be built."""
        return self.form.count()

    @cached_property
    def kinds(self) -> Kinds | None:
        """The pieces by kind, where equal parts make it worth while to count them; else None."""
        if isinstance(self.form, Matrix):
            return None
        kinds = Kinds.of(self.form, self.take, self.leave)
        return kinds if kinds is not None and kinds.is_short(self.paths) else None

    @cached_property
    def factors(self) -> tuple[Determinant, ...]:
        """Determinants whose product this one is: its diagram cut where that falls apart (:func:`unchained`).

        Weights that every term has are factors without a diagram; those of a single term are one factor together.
        """
        if isinstance(self.form, Matrix):
            return (self,)
        number, exponents = self.diagram.overall, [0] * len(self.generators)
        found = []

        def always(weight: Terms) -> None:
            nonlocal number
            if len(weight) != 1:
                found.append(replace(self, form=_NO_ROWS, take=(), leave=(), factor=weight))
                return
            ((coefficient, powers),) = weight
            number *= coefficient
            for k, exponent in powers:
                exponents[k] += exponent

        always(self.factor)
        for part in unchained(replace(self.diagram, overall=1)):
            if part.is_zero or len(part) > 1 or min(part.leave[0], part.take[0]) >= 0:
                here = sorted(set(part.piece))
                found.append(self.restricted(part, here, ONE))
            elif part.take[0] >= 0:
                number *= part.sign[0]
                always(self.take[part.piece[0]])
            else:
                always(self.leave[part.piece[0]])
        content = ((number, tuple((k, e) for k, e in enumerate(exponents) if e)),)
        return (*found, replace(self, form=_NO_ROWS, take=(), leave=(), factor=content))

    def restricted(self, form: Diagram | Matrix, pieces: Sequence[int], factor: Terms) -> Determinant:
        """The determinant of a form of some of these pieces alone, which are numbered anew."""
        place = {k: n for n, k in enumerate(pieces)}
        return Determinant(
            self.generators,
            replace(form, piece=tuple([place[k] for k in form.piece])),
            tuple([self.take[k] for k in pieces]),
            tuple([self.leave[k] for k in pieces]),
            factor,
        )

    def written(self, most: int = MOST_TERMS) -> Expansion:
        """Written out in arrays, term by term; LimitError when there may be more than ``most`` terms.

        A term takes about 9 bytes for each machine word of its packed exponents (60 names or so go into one), and
        up to three times that while it is made: two million terms stay below 100 MB. As an element of the ring a term
        takes 200 to 300. A node of the diagram, which is all that is kept of a network that is not written out,
        takes 150 to 200 bytes, in long narrow ones up to 650 while it is built.
        """
        if self.terms > most:
            raise too_long("this determinant", self.terms, most)
        if self.kinds is not None:
            return self.kinds.expansion(len(self.generators), self.factor, self.paths)
        return unfold(self.diagram, len(self.generators), self.factor, self.take, self.leave)

    def coefficients(self, values: Sequence[Fraction]) -> list[Fraction]:
        """The coefficients, ascending in s, for these values of the names; [] where they make it zero."""
        takes, leaves, scale = [], [], 1
        for take, leave in zip(self.take, self.leave, strict=True):
            taken, left = coefficients_at(take, values), coefficients_at(leave, values)
            common = lcm(*(c.denominator for c in (*taken, *left)))
            takes.append([int(c * common) for c in taken])
            leaves.append([int(c * common) for c in left])
            scale *= common
        factor = coefficients_at(self.factor, values)
        common = lcm(*(c.denominator for c in factor))
        found = _polynomial(self.form, takes, leaves, [int(c * common) for c in factor])
        return [Fraction(c, scale * common) for c in found]

    def modulo(self, point: Sequence[Any], prime: int) -> Any:
        """The value at a point (s first, then the names in order), modulo a prime."""
        value = self.form.evaluate_modulo(*self.weights_modulo(point, prime), prime)
        return value * terms_at(self.factor, point, prime) % prime


def pair_modulo(n: Determinant, d: Determinant, point: Sequence[Any], prime: int) -> tuple[Any, Any]:
    """N and D at a point modulo a prime; D's pieces are the first of N's, so their weights are found once."""
    take, leave = n.weights_modulo(point, prime)
    top, bottom = (
        det.form.evaluate_modulo(take, leave, prime) * terms_at(det.factor, point, prime) % prime
        for det in (n, d)
    )
    return top, bottom


def too_long(what: str, terms: int, most: int = MOST_TERMS) -> LimitError:
    """The refusal to write out something of so many terms."""
    return LimitError(
        Fault(
            f"written out, {what} has up to {count_in_words(terms)} terms; the limit is {most}, which take "
            f"{most * _TERM_BYTES // 10**6} MB (about {_TERM_BYTES} bytes a term)",
            "give the parts values and use H.numeric(), or keep only a few names as symbols: "
            'derive(net, symbols="R1 C1"); the diagram, about 200 bytes a node, is there as it is',
        )
    )


def count_in_words(paths: int) -> str:
    """An upper bound as it is said: all digits up to seven, then three, rounded up, and the power of ten."""
    power = len(str(paths)) - 1
    if power < 7:
        return str(paths)
    leading = -(-paths // 10 ** (power - 2))
    if leading == 1000:
        leading, power = 100, power + 1
    return f"{leading // 100}.{leading % 100:02d}e{power}"


def numeric_pair(n: Determinant, d: Determinant, values: Sequence[Fraction]) -> tuple[list[int], list[int]]:
    """Integer coefficients, ascending in s, of N and D for these values of the names: N/D is exact.

    D's pieces are the first of N's pieces, so whatever scales one of them scales both; the pieces that only N
    has (the read) are scaled on both sides.
    """
    takes, leaves, scales = [], [], []
    for take, leave in zip(n.take, n.leave, strict=True):
        taken, left = coefficients_at(take, values), coefficients_at(leave, values)
        scale = lcm(*(c.denominator for c in (*taken, *left)))
        takes.append([int(c * scale) for c in taken])
        leaves.append([int(c * scale) for c in left])
        scales.append(scale)
    n_factor, d_factor = (coefficients_at(factor, values) for factor in (n.factor, d.factor))
    common = lcm(*(c.denominator for c in (*n_factor, *d_factor)))
    own = len(d.take)
    extra = prod(scales[own:]) * common
    top = _polynomial(n.form, takes, leaves, [int(c * common) for c in n_factor])
    bottom = _polynomial(d.form, takes[:own], leaves[:own], [int(c * extra) for c in d_factor])
    return top, bottom


def coefficients_at(terms: Terms, values: Sequence[Fraction]) -> list[Fraction]:
    """The coefficients, ascending in s, of a weight at these values."""
    out: list[Fraction] = [Fraction(0)]
    for coefficient, powers in terms:
        term, degree = Fraction(coefficient), 0
        for k, exponent in powers:
            if k:
                term *= values[k - 1] ** exponent
            else:
                degree = exponent
        out += [Fraction(0)] * (degree + 1 - len(out))
        out[degree] += term
    return out


def _polynomial(
    form: Diagram | Matrix, takes: Sequence[list[int]], leaves: Sequence[list[int]], factor: list[int]
) -> list[int]:
    if isinstance(form, Matrix):
        return list(multiply(form.coefficients(takes, leaves), factor))
    bound = form.bound(list(map(_size, takes)), list(map(_size, leaves))) * _size(factor)
    bits = bound.bit_length() + 2
    value = form.evaluate([packed(w, bits) for w in takes], [packed(w, bits) for w in leaves])
    return unpacked(value * packed(factor, bits), bits)


def _size(coefficients: list[int]) -> int:
    return sum(map(abs, coefficients))
