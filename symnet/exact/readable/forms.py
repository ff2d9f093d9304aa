r"""H(s) and its coefficients in the form a designer reads: gain in front, constant term 1, parts grouped, R1||R2.

The measure is :func:`symnet.typeset.length.length`: the fewest symbols written win. Every step is an identity over
the integers, so that the tree has exactly the value of what was put in; :func:`as_ratio` turns a tree back into
ring elements to check just that. N and D are factored, and each factor is written with its own constant term
divided out, or all as they stand, whichever is shorter.

Middlebrook, "Low-entropy expressions: the key to design-oriented analysis", Frontiers in Education 1991 (from
memory), argues for the form: gain, poles and zeros in terms of the parts.

Before a tree leaves this module its value is compared with the polynomials it was made from, at a random point
modulo 2^127 - 1. Should the search ever go wrong, the plain fraction is shown, with a warning: what is displayed is
what an engineer signs.

Bounds: a coefficient of more than 60 terms is not grouped, H of more than 120 terms is not factored, and one of
more than 2000 terms is collected in powers of s and nothing else. Terms that are not written are counted.
"""

from __future__ import annotations

import warnings
from collections.abc import Sequence
from dataclasses import dataclass
from fractions import Fraction
from random import Random
from typing import TYPE_CHECKING, Final, Literal, TypeAlias

from symnet.errors import Fault, LimitError, SingularError
from symnet.exact.modular import PRIME, Residue, weight_at
from symnet.exact.readable.grouping import LONGEST_PLAIN, Grouping, Place
from symnet.exact.readable.packed import Factors, Polynomial
from symnet.exact.readable.ratios import Factored, Ratios, cancelled
from symnet.typeset.length import length
from symnet.typeset.polynomials import collected
from symnet.typeset.tree import (
    ONE,
    ZERO,
    Constant,
    Product,
    Quotient,
    Sum,
    Tree,
    evaluate,
    minus,
    over,
    plus,
    power,
    times,
)

if TYPE_CHECKING:
    from sympy.polys.rings import PolyElement, PolyRing

__all__ = ["DoubtfulFormWarning", "Form", "as_ratio", "readable", "readable_ratio", "readable_transfer"]

#: readable: whichever of the next and "undivided" is shorter. constant term 1: divided by the constant term.
#: monic: by the coefficient of the highest power. one fraction: nothing divided, powers of s collected.
Form: TypeAlias = Literal["readable", "constant term 1", "monic", "one fraction"]

_LARGEST_READABLE: Final = 120
_LARGEST_READ: Final = 2000
# A form that shows the gain by itself may be longer than the undivided one by a name and a half and its two 1s.
_GAIN_IS_WORTH: Final = 18
# Where the bracket with the powers of s stands in a product.
_LAST: Final[Place] = (9, 0, 0)


class DoubtfulFormWarning(UserWarning):
    """A readable form did not have the value of what it was made from: a defect of symnet."""


def readable(polynomial: PolyElement) -> Tree:
    """One polynomial in part names, grouped; with s in it, in ascending powers of s.

    >>> from symnet.exact.polynomials import make_ring
    >>> from symnet.typeset.writing import to_text
    >>> s, R1, R2, C1, C2 = make_ring(["R1", "R2", "C1", "C2"]).gens
    >>> to_text(readable(R1*C1 + R1*C2 + R2*C2))
    'R1*C1 + (R1 + R2)*C2'
    """
    if len(polynomial) > _LARGEST_READ:
        return collected(polynomial, LONGEST_PLAIN)
    writer = _Writer.of(polynomial)
    tree = writer.in_powers(writer.packed(polynomial))
    return _checked(tree, polynomial, polynomial.ring.one)


def readable_ratio(numerator: PolyElement, denominator: PolyElement) -> Tree:
    """The ratio of two polynomials in part names (no s, or s as one name among others).

    Raises :class:`~symnet.errors.SingularError` when the denominator is zero.

    >>> from symnet.exact.polynomials import make_ring
    >>> from symnet.typeset.writing import to_text
    >>> s, R1, R2, R3, C = make_ring(["R1", "R2", "R3", "C"]).gens
    >>> to_text(readable_ratio(R1*R2*C, R1 + R2))
    '(R1||R2)*C'
    >>> to_text(readable_ratio(R1*R2 + R1*R3 + R2*R3, R1 + R2))
    'R3 + R1||R2'
    """
    _refuse_zero(denominator)
    writer = _Writer.of(numerator, denominator)
    return writer.ratio(writer.quotient(writer.packed(numerator), writer.packed(denominator)))


def readable_transfer(
    numerator: PolyElement | Sequence[PolyElement],
    denominator: PolyElement | Sequence[PolyElement],
    form: Form = "readable",
    *,
    descending: bool = False,
) -> Tree:
    """H = N/D in the form asked for, powers of s ascending unless ``descending``.

    N and D are ring elements with s as their first generator, or their coefficients by ascending powers of s.

    - "readable": N and D factored over the rationals; gain in front and constant terms 1, or undivided when that is
      clearly shorter.
    - "constant term 1": K * s^k * N/D, where each factor of N and D begins with 1.
    - "monic": K * s^k * N/D, where the highest power in each factor has the coefficient 1.
    - "one fraction": N/D as it is, powers of s collected, nothing factored.

    Raises :class:`~symnet.errors.SingularError` when D is zero.

    >>> from symnet.exact.polynomials import make_ring
    >>> from symnet.typeset.writing import to_text
    >>> s, R1, R2, C = make_ring(["R1", "R2", "C"]).gens
    >>> to_text(readable_transfer(1 + s*R2*C, 1 + s*R1*C + s*R2*C))
    '(1 + s*R2*C)/(1 + s*(R1 + R2)*C)'
    >>> to_text(readable_transfer(R2, R1 + R2 + s*R1*R2*C))
    'R2/(R1 + R2) * 1/(1 + s*(R1||R2)*C)'
    """
    n, d = _whole(numerator), _whole(denominator)
    _refuse_zero(d)
    if not n:
        return ZERO
    if len(n) + len(d) > _LARGEST_READ:
        return over(collected(n, LONGEST_PLAIN), collected(d, LONGEST_PLAIN))
    return _checked(_written(n, d, form, descending=descending), n, d)


def _written(n: PolyElement, d: PolyElement, form: Form, *, descending: bool) -> Tree:
    writer = _Writer.of(n, d, descending=descending)
    above, below = writer.packed(n), writer.packed(d)
    if form == "one fraction":
        return writer.one_fraction(above, below)
    h = writer.quotient(above, below)
    if form != "readable":
        return writer.normalised(h, monic=form == "monic")
    if len(above) + len(below) > _LARGEST_READABLE:
        return writer.undivided(h)
    divided, whole = writer.normalised(h, monic=False), writer.undivided(h)
    return divided if length(divided) <= length(whole) + _GAIN_IS_WORTH else whole


def _checked(tree: Tree, n: PolyElement, d: PolyElement) -> Tree:
    """The tree if it is n/d at a random point modulo a prime; else the plain fraction, and a warning."""
    ring = n.ring
    random = Random(len(n) + 1000 * len(d))
    for _ in range(3):  # a point at which something in the tree divides by zero says nothing
        point = [random.randrange(1, PRIME) for _ in ring.symbols]
        values = dict(zip(map(str, ring.symbols), map(Residue, point), strict=True))
        try:
            value = evaluate(tree, values.__getitem__, lambda c: Residue.of(c.numerator, c.denominator))
        except ZeroDivisionError:
            continue
        except LimitError:  # terms were left out: there is no value to compare
            return tree
        above, below = (weight_at(p, point, PRIME) for p in (n, d))
        if (value.value * below - above) % PRIME:
            break
        return tree
    warnings.warn(
        "a shorter form of H did not pass its check and is not shown; please report the network",
        DoubtfulFormWarning,
        stacklevel=3,
    )
    return over(collected(n, LONGEST_PLAIN), collected(d, LONGEST_PLAIN))


def as_ratio(tree: Tree, ring: PolyRing) -> tuple[PolyElement, PolyElement]:
    """The exact value of a tree as numerator and denominator in the ring (not in lowest terms).

    Raises KeyError for a name that the ring has not, and LimitError when terms were left out of the tree.

    >>> from symnet.exact.polynomials import make_ring
    >>> from symnet.typeset.tree import Atom, Parallel
    >>> ring = make_ring(["R1", "R2"])
    >>> as_ratio(Parallel((Atom("R1"), Atom("R2"))), ring)
    (R1*R2, R1 + R2)
    """
    names = dict(zip(map(str, ring.symbols), ring.gens, strict=True))
    value = evaluate(
        tree,
        lambda name: _Pair(names[name], ring.one),
        lambda number: _Pair(ring(number.numerator), ring(number.denominator)),
    )
    return value.above, value.below


@dataclass(frozen=True, slots=True)
class _Pair:
    """A fraction that is never reduced: an arithmetic for :func:`evaluate`, without any gcd."""

    above: PolyElement
    below: PolyElement

    def __add__(self, other: _Pair) -> _Pair:
        if self.below == other.below:
            return _Pair(self.above + other.above, self.below)
        return _Pair(self.above * other.below + other.above * self.below, self.below * other.below)

    def __sub__(self, other: _Pair) -> _Pair:
        return self + _Pair(-other.above, other.below)

    def __mul__(self, other: _Pair) -> _Pair:
        return _Pair(self.above * other.above, self.below * other.below)

    def __truediv__(self, other: _Pair) -> _Pair:
        return _Pair(self.above * other.below, self.below * other.above)

    def __pow__(self, exponent: int) -> _Pair:
        if exponent < 0:
            return _Pair(self.below**-exponent, self.above**-exponent)
        return _Pair(self.above**exponent, self.below**exponent)


def _refuse_zero(denominator: PolyElement) -> None:
    if not denominator:
        raise SingularError(Fault("the denominator is zero, so that there is no ratio to write"))


def _whole(given: PolyElement | Sequence[PolyElement]) -> PolyElement:
    """The polynomial; an empty sequence of coefficients is zero."""
    if hasattr(given, "ring") or not given:
        return given
    s = given[0].ring.gens[0]
    return sum((coefficient * s**k for k, coefficient in enumerate(given)), given[0].ring.zero)


@dataclass
class _Writer(Ratios):
    """Writes polynomials in s and their ratios."""

    descending: bool = False

    @classmethod
    def of(cls, *polynomials: PolyElement, descending: bool = False) -> _Writer:
        names = [str(symbol) for symbol in polynomials[0].ring.symbols]
        largest = max((e for p in polynomials for m in p for e in m), default=1)
        return cls(Grouping(names, largest), descending)

    def packed(self, polynomial: PolyElement) -> Polynomial:
        pack = self.space.pack
        return {pack(m): int(c) for m, c in polynomial.items()}

    def in_powers(self, p: Polynomial) -> Tree:
        """A polynomial in powers of s, each coefficient grouped."""
        if not p:
            return ZERO
        return plus(*(self.space.tree(part) for _, part in self._ordered(p)))

    def _by_powers(self, p: Polynomial) -> dict[int, Polynomial]:
        parts: dict[int, Polynomial] = {}
        if self.space.names[:1] != ["s"]:
            return {0: p}
        for m, c in p.items():
            parts.setdefault(self.space.unpack(m)[0], {})[m] = c
        return dict(sorted(parts.items()))

    def _ordered(self, p: Polynomial) -> list[tuple[int, Polynomial]]:
        parts = list(self._by_powers(p).items())
        return parts[::-1] if self.descending else parts

    def _divided(self, p: Polynomial, by: Polynomial) -> Tree:
        """A sum in powers of s, every coefficient divided."""
        return plus(*(self.ratio(self.quotient(part, by)) for _, part in self._ordered(p)))

    def one_fraction(self, above: Polynomial, below: Polynomial) -> Tree:
        c = -1 if below and all(v < 0 for v in below.values()) else 1
        return over(
            *(self._whole({m: c * v for m, v in side.items()}) for side in (above, below)),
        )

    def _whole(self, p: Polynomial) -> Tree:
        """A polynomial in powers of s with its common names in front."""
        coefficient, monomial, rest = self.space.content(p)
        if len(rest) == 1:
            return self.space.tree(p)
        body = self.space.product(
            Fraction(abs(coefficient)), self.space.exponents(monomial), [(self.in_powers(rest), _LAST)]
        )
        return minus(body) if coefficient < 0 else body

    def undivided(self, h: Factored) -> Tree:
        """Factors as they stand, each beginning with a positive term; the sign in front."""
        coefficient = h.coefficient
        sides: list[list[Tree]] = []
        for side in (h.above, h.below):
            trees: list[Tree] = []
            for p, e in side:
                q, sign = self._positive(p)
                coefficient *= sign**e
                trees.append(power(self.in_powers(q), e))
            sides.append(trees)
        front = self.space.product(abs(coefficient), h.exponents)
        above, below = (front.numerator, front.denominator) if isinstance(front, Quotient) else (front, ONE)
        body = over(times(above, *sides[0]), times(below, *sides[1]))
        return minus(body) if coefficient < 0 else body

    def _positive(self, p: Polynomial) -> tuple[Polynomial, int]:
        lowest = next(iter(self._by_powers(p).values()))
        if lowest[max(lowest)] > 0 or any(c > 0 for c in lowest.values()):
            return p, 1
        return {m: -c for m, c in p.items()}, -1

    def normalised(self, h: Factored, *, monic: bool) -> Tree:
        """Gain in front, every factor divided by its constant (or highest) coefficient."""
        space = self.space
        gain = Factored(h.coefficient, h.exponents, [], [])
        sides: list[list[Tree]] = []
        for side, sign in ((h.above, 1), (h.below, -1)):
            trees: list[Tree] = []
            for p, e in side:
                parts = self._by_powers(p)
                degree = max(parts) if monic else min(parts)
                chosen = (
                    {m - degree * space.unit(0): c for m, c in parts[degree].items()}
                    if degree
                    else parts[degree]
                )
                gain = self._times(gain, self.quotient(chosen, {0: 1}), sign * e)
                if len(parts) > 1:
                    trees.append(power(self._divided(p, chosen), e))
            sides.append(trees)
        return _assembled(self.ratio(gain), times(*sides[0]), times(*sides[1]), apart=monic)

    def _times(self, a: Factored, b: Factored, exponent: int) -> Factored:
        exponents = dict(a.exponents)
        for name, e in b.exponents.items():
            exponents[name] = exponents.get(name, 0) + exponent * e
        above, below = (b.above, b.below) if exponent > 0 else (b.below, b.above)
        more_above = _joined(a.above, above, abs(exponent))
        more_below = _joined(a.below, below, abs(exponent))
        return Factored(
            a.coefficient * b.coefficient**exponent,
            {name: e for name, e in exponents.items() if e},
            cancelled(more_above, more_below),
            cancelled(more_below, more_above),
        )


def _assembled(gain: Tree, above: Tree, below: Tree, *, apart: bool) -> Tree:
    """The product gain * above/below; a gain that is a fraction stands apart, but 1/(...) joins what is below unless ``apart``."""
    negative = False
    if isinstance(gain, Sum) and len(gain.terms) == 1:
        gain, negative = gain.terms[0][1], True
    elif isinstance(gain, Constant) and gain.value < 0:
        gain, negative = Constant(-gain.value), True
    if above == below == ONE:
        body = gain
    elif not isinstance(gain, Quotient):
        body = over(times(gain, above), below)
    elif gain.numerator == ONE and not apart and not isinstance(gain.denominator, Constant):
        body = over(above, times(gain.denominator, below))
    elif below == ONE:
        body = Product((gain, above))
    elif (
        above == ONE
        and not isinstance(gain.denominator, Sum)
        and not isinstance(gain.numerator, Sum)
        and not apart
    ):
        body = Quotient(gain, below)
    else:
        body = Product((gain, Quotient(above, below)))
    return minus(body) if negative else body


def _joined(these: Factors, others: Factors, exponent: int) -> Factors:
    joined = list(these)
    for p, e in others:
        for k, (q, old) in enumerate(joined):
            if q == p:
                joined[k] = q, old + e * exponent
                break
        else:
            joined.append((p, e * exponent))
    return joined
