"""What stands right of an equals sign: an exact expression tree, shared by both notations.

Trees are frozen, sums and products are flat (a sum of ten thousand terms is one node), and every node knows
its span in the text, which takes no part in equality. Nothing here evaluates text: trees come from the parser
or from the constructors, and are turned into values by :func:`evaluate` over any arithmetic the caller brings.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator, Mapping
from dataclasses import dataclass, field
from fractions import Fraction
from typing import Any, TypeAlias

from symnet.errors import DimensionError, Fault, Span
from symnet.quantities import NUMBER, Dimension, in_words

__all__ = [
    "Expression",
    "Name",
    "Number",
    "Parallel",
    "Power",
    "Product",
    "Root",
    "Sum",
    "children",
    "dimension_of",
    "evaluate",
    "names_in",
    "negative",
    "substitute",
]


def _span() -> Any:
    return field(default=None, compare=False, repr=False)


@dataclass(frozen=True, slots=True)
class Number:
    """A number, with a dimension when a unit followed it (``10 kohm``); a bare number has dimension 1."""

    value: Fraction
    dimension: Dimension = NUMBER
    span: Span | None = _span()


@dataclass(frozen=True, slots=True)
class Name:
    """A part, a node (its voltage against gnd), ``i_R1``, ``v_a``, ``s`` or a free symbol."""

    name: str
    span: Span | None = _span()


@dataclass(frozen=True, slots=True)
class Sum:
    """``+x -y +z``: terms with their sign, +1 or -1. A single term with sign -1 is a negation."""

    terms: tuple[tuple[int, Expression], ...]
    span: Span | None = _span()


@dataclass(frozen=True, slots=True)
class Product:
    """``x * y / z``: factors with their exponent, +1 (times) or -1 (divided by), from left to right."""

    factors: tuple[tuple[int, Expression], ...]
    span: Span | None = _span()


@dataclass(frozen=True, slots=True)
class Power:
    """``base ^ exponent`` with an integer exponent."""

    base: Expression
    exponent: int
    span: Span | None = _span()


@dataclass(frozen=True, slots=True)
class Parallel:
    """``x || y || z`` = 1/(1/x + 1/y + 1/z)."""

    branches: tuple[Expression, ...]
    span: Span | None = _span()


@dataclass(frozen=True, slots=True)
class Root:
    """``sqrt(base)``, the positive square root; in hand derivations only."""

    base: Expression
    span: Span | None = _span()


Expression: TypeAlias = Number | Name | Sum | Product | Power | Parallel | Root


def negative(expression: Expression) -> Expression:
    """The negative of an expression, without piling up double signs."""
    if isinstance(expression, Number):
        return Number(-expression.value, expression.dimension, expression.span)
    if isinstance(expression, Sum) and len(expression.terms) == 1:
        sign, term = expression.terms[0]
        return term if sign < 0 else Sum(((-1, term),), expression.span)
    return Sum(((-1, expression),), expression.span)


def children(expression: Expression) -> tuple[Expression, ...]:
    """The expressions directly inside this one, from left to right."""
    match expression:
        case Sum(terms=terms):
            return tuple(term for _, term in terms)
        case Product(factors=factors):
            return tuple(factor for _, factor in factors)
        case Power(base=base) | Root(base=base):
            return (base,)
        case Parallel(branches=branches):
            return branches
        case _:
            return ()


def names_in(expression: Expression) -> Iterator[Name]:
    """Every name in the expression, in the order of writing, repeated names repeated."""
    stack = [expression]
    while stack:
        node = stack.pop()
        if isinstance(node, Name):
            yield node
        stack.extend(reversed(children(node)))


def substitute(expression: Expression, replace: Callable[[Name], Expression]) -> Expression:
    """The expression with every name replaced by what ``replace`` gives for it."""
    match expression:
        case Name():
            return replace(expression)
        case Sum(terms, span):
            return Sum(tuple((sign, substitute(term, replace)) for sign, term in terms), span)
        case Product(factors, span):
            return Product(tuple((power, substitute(factor, replace)) for power, factor in factors), span)
        case Power(base, exponent, span):
            return Power(substitute(base, replace), exponent, span)
        case Root(base, span):
            return Root(substitute(base, replace), span)
        case Parallel(branches, span):
            return Parallel(tuple(substitute(branch, replace) for branch in branches), span)
        case _:
            return expression


def evaluate(expression: Expression, value_of: Callable[[Name], Any], number: Callable[[Number], Any]) -> Any:
    """The value of the expression in whatever arithmetic ``value_of`` and ``number`` bring.

    The arithmetic needs ``+ - * /`` and integer powers, and ``root()`` where square roots are written.
    ZeroDivisionError is passed on as it comes.
    """
    match expression:
        case Number():
            return number(expression)
        case Name():
            return value_of(expression)
        case Sum(terms):
            total = None
            for sign, term in terms:
                value = evaluate(term, value_of, number)
                value = value if sign > 0 else -value
                total = value if total is None else total + value
            return total
        case Product(factors):
            total = None
            for power, factor in factors:
                value = evaluate(factor, value_of, number)
                if total is None:
                    total = value if power > 0 else number(Number(Fraction(1))) / value
                else:
                    total = total * value if power > 0 else total / value
            return total
        case Power(base, exponent):
            return evaluate(base, value_of, number) ** exponent
        case Root(base):
            return evaluate(base, value_of, number).root()
        case Parallel(branches):
            values = [evaluate(branch, value_of, number) for branch in branches]
            total = values[0]
            for value in values[1:]:
                total = total * value / (total + value)
            return total


def dimension_of(expression: Expression, known: Mapping[str, Dimension]) -> Dimension | None:
    """The dimension of an expression, or None while it hangs on a name whose dimension is not known.

    Raises :class:`~symnet.errors.DimensionError`, with the span of the term, when terms of different
    dimension are added or put in parallel. Zero has every dimension.
    """
    match expression:
        case Number(value=value, dimension=dimension):
            return None if value == 0 and dimension == NUMBER else dimension
        case Name(name=name):
            return known.get(name)
        case Product(factors=factors):
            product = NUMBER
            unknown = False
            for power, factor in factors:  # every factor is looked at, so that faults inside it are found
                inner = dimension_of(factor, known)
                if inner is None:
                    unknown = True
                else:
                    product = product * inner**power
            return None if unknown else product
        case Power(base=base, exponent=exponent):
            of_base = dimension_of(base, known)
            return None if of_base is None else of_base**exponent
        case Root(base=base):
            of_base = dimension_of(base, known)
            if of_base is None:
                return None
            half = Dimension(of_base.v // 2, of_base.a // 2, of_base.t // 2)
            if half * half != of_base:
                raise DimensionError(
                    Fault(f"the square root of {in_words(of_base)} has no unit", span=base.span)
                )
            return half
        case Sum():
            return _common([term for _, term in expression.terms], known, "added to")
        case Parallel(branches=branches):
            return _common(list(branches), known, "put in parallel with")


def _common(terms: list[Expression], known: Mapping[str, Dimension], verb: str) -> Dimension | None:
    first: Dimension | None = None
    for term in terms:
        dimension = dimension_of(term, known)
        if dimension is None:
            continue
        if first is None:
            first = dimension
        elif dimension != first:
            message = f"{in_words(dimension)} is {verb} {in_words(first)}"
            raise DimensionError(Fault(message, span=term.span))
    return first
