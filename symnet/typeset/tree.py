"""What is to be written: a small tree of names, numbers, sums, products and fractions, in the order given.

The tree is for display only. It says how a formula is to look (which terms are grouped, what stands over the
fraction bar, which order the terms have) and nothing is rearranged when it is written. It is not the tree of
the notation (:mod:`symnet.expressions`): that one remembers places in a text, this one has fractions, roots and
the mark for terms left out. Trees are frozen, can be compared, and have an exact value (:func:`evaluate`), so
that a readable form can be checked against what it stands for.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from fractions import Fraction
from typing import Any, TypeAlias

from symnet.errors import Fault, LimitError

__all__ = [
    "ONE",
    "ZERO",
    "Atom",
    "Constant",
    "Omitted",
    "Parallel",
    "Power",
    "Product",
    "Quotient",
    "Root",
    "Sum",
    "Tree",
    "evaluate",
    "minus",
    "names_of",
    "number",
    "over",
    "plus",
    "power",
    "times",
]


@dataclass(frozen=True, slots=True)
class Atom:
    """A name: a part, a node, ``s``, a free symbol."""

    name: str


@dataclass(frozen=True, slots=True)
class Constant:
    """An exact number without unit."""

    value: Fraction


@dataclass(frozen=True, slots=True)
class Sum:
    """``+x - y + z``: terms with their sign, +1 or -1. One term with sign -1 is a negation."""

    terms: tuple[tuple[int, Tree], ...]


@dataclass(frozen=True, slots=True)
class Product:
    """``x*y*z``, from left to right."""

    factors: tuple[Tree, ...]


@dataclass(frozen=True, slots=True)
class Quotient:
    """``numerator/denominator``, a fraction bar in LaTeX."""

    numerator: Tree
    denominator: Tree


@dataclass(frozen=True, slots=True)
class Power:
    """``base^exponent`` with an integer exponent."""

    base: Tree
    exponent: int


@dataclass(frozen=True, slots=True)
class Parallel:
    """``x||y||z`` = 1/(1/x + 1/y + 1/z)."""

    branches: tuple[Tree, ...]


@dataclass(frozen=True, slots=True)
class Root:
    """The positive root of a positive quantity, the square root unless another degree is given."""

    radicand: Tree
    degree: int = 2


@dataclass(frozen=True, slots=True)
class Omitted:
    """Stands at the end of a sum for the terms that are not written."""

    count: int


Tree: TypeAlias = Atom | Constant | Sum | Product | Quotient | Power | Parallel | Root | Omitted

ZERO = Constant(Fraction(0))
ONE = Constant(Fraction(1))


def names_of(tree: Tree) -> set[str]:
    """Every name in a tree.

    >>> sorted(names_of(Quotient(Atom("R1"), Sum(((1, Atom("R2")), (-1, ONE))))))
    ['R1', 'R2']
    """
    match tree:
        case Atom(name):
            return {name}
        case Sum(terms):
            return set().union(*(names_of(term) for _, term in terms))
        case Product(factors) | Parallel(factors):
            return set().union(*map(names_of, factors))
        case Quotient(numerator, denominator):
            return names_of(numerator) | names_of(denominator)
        case Power(base) | Root(base):
            return names_of(base)
        case _:
            return set()


def number(value: int | Fraction) -> Constant:
    """A number as a tree."""
    return Constant(Fraction(value))


def minus(tree: Tree) -> Tree:
    """The negative, without piling up signs.

    >>> minus(minus(Atom("R1")))
    Atom(name='R1')
    """
    if isinstance(tree, Constant):
        return Constant(-tree.value)
    if isinstance(tree, Sum) and len(tree.terms) == 1:
        sign, term = tree.terms[0]
        return term if sign < 0 else Sum(((-1, term),))
    return Sum(((-1, tree),))


def plus(*terms: Tree) -> Tree:
    """The sum of the terms in the order given; sums among them are joined in, zeros dropped."""
    joined: list[tuple[int, Tree]] = []
    for term in terms:
        if isinstance(term, Sum):
            joined.extend(term.terms)
        elif isinstance(term, Constant) and term.value < 0:
            joined.append((-1, Constant(-term.value)))
        elif term != ZERO:
            joined.append((1, term))
    if not joined:
        return ZERO
    if len(joined) == 1 and joined[0][0] > 0:
        return joined[0][1]
    return Sum(tuple(joined))


def times(*factors: Tree) -> Tree:
    """The product in the order given; products among the factors are joined in, ones dropped, signs go in front.

    >>> from symnet.typeset.writing import to_text
    >>> to_text(times(Atom("s"), minus(Atom("R1")), Atom("C1")))
    '-s*R1*C1'
    """
    joined: list[Tree] = []
    negative = False
    for factor in factors:
        if isinstance(factor, Sum) and len(factor.terms) == 1:
            sign, factor = factor.terms[0]
            negative ^= sign < 0
        if isinstance(factor, Constant) and factor.value < 0:
            factor = Constant(-factor.value)
            negative = not negative
        if isinstance(factor, Product):
            joined.extend(factor.factors)
        elif factor == ZERO:
            return ZERO
        elif factor != ONE:
            joined.append(factor)
    body: Tree = ONE if not joined else joined[0] if len(joined) == 1 else Product(tuple(joined))
    return minus(body) if negative else body


def over(numerator: Tree, denominator: Tree) -> Tree:
    """The fraction, with signs in front of it and a denominator of 1 dropped."""
    negative = False
    parts: list[Tree] = []
    for part in (numerator, denominator):
        if isinstance(part, Sum) and len(part.terms) == 1 and part.terms[0][0] < 0:
            part, negative = part.terms[0][1], not negative
        elif isinstance(part, Constant) and part.value < 0:
            part, negative = Constant(-part.value), not negative
        parts.append(part)
    body = parts[0] if parts[1] == ONE or parts[0] == ZERO else Quotient(parts[0], parts[1])
    return minus(body) if negative else body


def power(base: Tree, exponent: int) -> Tree:
    """The power, where exponents 0 and 1 need no writing."""
    return ONE if exponent == 0 else base if exponent == 1 else Power(base, exponent)


def evaluate(
    tree: Tree, value_of: Callable[[str], Any], constant: Callable[[Fraction], Any] = Fraction
) -> Any:
    """The value of the tree in whatever arithmetic ``value_of`` brings; exact if that is exact and no root occurs.

    Raises :class:`~symnet.errors.LimitError` when terms were left out of the tree; ZeroDivisionError is passed
    on as it comes.

    >>> tree = Parallel((Atom("R1"), Atom("R2")))
    >>> evaluate(tree, {"R1": Fraction(3), "R2": Fraction(6)}.__getitem__)
    Fraction(2, 1)
    """

    def value(node: Tree) -> Any:
        match node:
            case Atom(name):
                return value_of(name)
            case Constant(fraction):
                return constant(fraction)
            case Sum(terms):
                total = constant(Fraction(0))
                for sign, term in terms:
                    total = total + value(term) if sign > 0 else total - value(term)
                return total
            case Product(factors):
                total = constant(Fraction(1))
                for factor in factors:
                    total = total * value(factor)
                return total
            case Quotient(numerator, denominator):
                return value(numerator) / value(denominator)
            case Power(base, exponent):
                return value(base) ** exponent
            case Parallel(branches):
                total = value(branches[0])
                for branch in branches[1:]:
                    other = value(branch)
                    total = total * other / (total + other)
                return total
            case Root(radicand, degree):
                return value(radicand) ** (1 / degree)
            case Omitted(count):
                raise LimitError(
                    Fault(f"{count} terms were left out of this formula, so that it has no value")
                )

    return value(tree)
