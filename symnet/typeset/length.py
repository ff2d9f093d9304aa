"""How long a formula is to a reader, so that of several equal forms the one with the fewest symbols can be taken.

Names count most; a 1 or a sign costs little, brackets and brackets inside brackets some more. The weights are
tuned so that the forms in which designers write common networks win (tests/exact/test_readable.py holds them);
nothing but the choice among equal forms depends on them.
"""

from __future__ import annotations

from typing import Final

from symnet.typeset.tree import Constant, Parallel, Power, Product, Quotient, Root, Sum, Tree

__all__ = ["BRACKETS", "EXPONENT", "NAME", "NESTED", "SIGN", "length", "length_of_number"]

NAME: Final = 10
EXPONENT: Final = 3
SIGN: Final = 1
BRACKETS: Final = 6
#: Brackets that have brackets inside cost this much more.
NESTED: Final = 3
_ONE: Final = 4
_DIGIT: Final = 3


def length(tree: Tree) -> int:
    """How long a formula is to a reader: 10 for each name written, a little for signs, brackets and exponents.

    >>> from symnet.typeset.tree import Atom, Parallel
    >>> length(Product((Atom("R1"), Atom("R2")))), length(Parallel((Atom("R1"), Atom("R2"))))
    (20, 21)
    """
    match tree:
        case Constant(value):
            return length_of_number(abs(value.numerator)) + (
                0 if value.denominator == 1 else length_of_number(value.denominator)
            )
        case Sum(terms):
            signs = len(terms) - (terms[0][0] > 0)
            return sum(length(term) for _, term in terms) + signs * SIGN
        case Product(factors):
            return sum(length(factor) + _brackets(factor) for factor in factors)
        case Quotient(numerator, denominator):
            return length(numerator) + length(denominator) + SIGN
        case Power(base, _):
            return length(base) + EXPONENT + _brackets(base)
        case Parallel(branches):
            return sum(length(branch) + _brackets(branch) for branch in branches) + SIGN * (len(branches) - 1)
        case Root(radicand, _):
            return length(radicand) + EXPONENT
        case _:
            return NAME


def _brackets(tree: Tree) -> int:
    match tree:
        case Sum(terms):
            return BRACKETS + NESTED * any(
                isinstance(term, Product) and any(map(_brackets, term.factors)) for _, term in terms
            )
        case Parallel():
            return SIGN
        case _:
            return 0


def length_of_number(value: int) -> int:
    """What a whole number without its sign takes."""
    return _ONE if value == 1 else _ONE + _DIGIT * len(str(value))
