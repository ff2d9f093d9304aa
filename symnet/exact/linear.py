"""Expressions as exact values: ring fractions for part values, linear forms for laws and reads.

A part value such as ``R/(1 + s*R*C)`` becomes a fraction of two ring elements. A law or a read becomes a
linear form: a sum of voltages and currents, each with such a fraction before it. The work is bounded: a power
or product that would be larger than :data:`MOST_TERMS` terms is refused before it is multiplied out.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass
from math import comb
from typing import TYPE_CHECKING, Any, Final

from symnet.errors import Fault, LimitError, NotationError, SingularError
from symnet.expressions import Expression, Name, Number, evaluate

if TYPE_CHECKING:
    from sympy.polys.fields import FracElement, FracField

__all__ = ["MOST_TERMS", "Bounded", "LinearForm", "fraction_of"]

#: Terms that one value or law may have when multiplied out.
MOST_TERMS: Final = 20_000


@dataclass(frozen=True, slots=True)
class Bounded:
    """A fraction of ring elements that refuses to grow without bound."""

    value: FracElement

    def __add__(self, other: Bounded) -> Bounded:
        a, b = self.value, other.value
        _check(len(a.numer) * len(b.denom) + len(b.numer) * len(a.denom))
        return Bounded(a + b)

    def __sub__(self, other: Bounded) -> Bounded:
        return self + -other

    def __neg__(self) -> Bounded:
        return Bounded(-self.value)

    def __mul__(self, other: Bounded) -> Bounded:
        a, b = self.value, other.value
        _check(max(len(a.numer) * len(b.numer), len(a.denom) * len(b.denom)))
        return Bounded(a * b)

    def __truediv__(self, other: Bounded) -> Bounded:
        a, b = self.value, other.value
        if not b:
            raise ZeroDivisionError
        _check(max(len(a.numer) * len(b.denom), len(a.denom) * len(b.numer)))
        return Bounded(a / b)

    def __pow__(self, exponent: int) -> Bounded:
        if exponent < 0 and not self.value:
            raise ZeroDivisionError
        for part in (self.value.numer, self.value.denom):
            _check(comb(len(part) + abs(exponent) - 1, abs(exponent)) if len(part) > 1 else 1)
        return Bounded(self.value**exponent)


def _check(terms: int) -> None:
    if terms > MOST_TERMS:
        raise LimitError(
            Fault(
                f"a value or law would have {terms} terms when multiplied out; the limit is {MOST_TERMS}",
                "give some of its symbols numbers, or split it into several parts",
            )
        )


@dataclass(frozen=True, slots=True)
class LinearForm:
    """``scalar + sum of weight * unknown``; an unknown is ("v", node) or ("i", part)."""

    scalar: Bounded
    weights: Mapping[tuple[str, str], Bounded]

    def __add__(self, other: LinearForm) -> LinearForm:
        weights = dict(self.weights)
        for unknown, weight in other.weights.items():
            weights[unknown] = weights[unknown] + weight if unknown in weights else weight
        return LinearForm(self.scalar + other.scalar, {u: w for u, w in weights.items() if w.value})

    def __neg__(self) -> LinearForm:
        return LinearForm(-self.scalar, {u: -w for u, w in self.weights.items()})

    def __mul__(self, other: LinearForm) -> LinearForm:
        if self.weights and other.weights:
            raise NotationError(
                Fault("two voltages or currents are multiplied; a law must be linear in them")
            )
        form, factor = (self, other.scalar) if self.weights else (other, self.scalar)
        weights = {u: w * factor for u, w in form.weights.items()} if factor.value else {}
        return LinearForm(form.scalar * factor, weights)

    def __truediv__(self, other: LinearForm) -> LinearForm:
        if other.weights:
            raise NotationError(
                Fault("a voltage or current stands below a fraction; a law must be linear in them")
            )
        return LinearForm(self.scalar / other.scalar, {u: w / other.scalar for u, w in self.weights.items()})

    def __pow__(self, exponent: int) -> LinearForm:
        if self.weights and exponent != 1:
            raise NotationError(Fault("a voltage or current has an exponent; a law must be linear in them"))
        return self if self.weights else LinearForm(self.scalar**exponent, {})


def fraction_of(
    expression: Expression, field: FracField, value_of: Callable[[Name], Any], what: str
) -> FracElement:
    """The exact fraction of ring elements that an expression is; ``what`` names it in refusals."""

    def number(given: Number) -> Bounded:
        return Bounded(_rational(field, given))

    try:
        return evaluate(expression, lambda name: Bounded(value_of(name)), number).value
    except ZeroDivisionError:
        raise SingularError(Fault(f"{what} divides by zero", span=expression.span)) from None


def linear_form(
    expression: Expression, field: FracField, form_of: Callable[[Name], LinearForm], what: str
) -> LinearForm:
    """The linear form of a law or a read; ``form_of`` gives the form of each name."""

    def number(given: Number) -> LinearForm:
        return LinearForm(Bounded(_rational(field, given)), {})

    try:
        form: LinearForm = evaluate(expression, form_of, number)
    except ZeroDivisionError:
        raise SingularError(Fault(f"{what} divides by zero", span=expression.span)) from None
    if form.scalar.value:
        raise NotationError(
            Fault(
                f"{what} holds a term without a voltage or current",
                "a law and a read are sums of voltages and currents, each with a factor; what drives the "
                "network is said with drive",
                span=expression.span,
            )
        )
    return form


def _rational(field: FracField, given: Number) -> FracElement:
    return field(given.value.numerator) / field(given.value.denominator)
