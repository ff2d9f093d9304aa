"""How a derived H is held against what was published."""

from __future__ import annotations

from fractions import Fraction
from math import inf, log10, pi
from random import Random

import symnet as sn
from symnet.circuit.reading import read_expression
from symnet.exact.ports.figures import Parameter
from symnet.exact.ratio import Ratio
from symnet.exact.transfer import Transfer
from symnet.expressions import evaluate
from symnet.shape.closed import Figure
from tests import oracle
from tests.reference.cases import Case

__all__ = ["assert_same_figure", "assert_same_function", "decibels", "numeric", "poles", "values_at"]


def assert_same_function(H: Transfer | Parameter, formula: str) -> None:
    """H is the formula, exactly: by cross-multiplication in H's own ring, read by symnet and by the oracle."""
    field = H.ring.to_field()
    generators = dict(zip(map(str, H.ring.symbols), field.gens, strict=True))

    def number(value: Fraction) -> object:
        return field(value.numerator) / field(value.denominator)

    read = evaluate(read_expression(formula), lambda name: generators[name.name], lambda n: number(n.value))
    for wanted in (read, oracle.arithmetic(formula, generators, number)):
        assert H.numerator * wanted.denom == H.denominator * wanted.numer
    random = Random(formula)
    at = {name: Fraction(random.randint(1, 99), random.randint(1, 99)) for name in generators}
    numerator, denominator = values_at(H, at)
    assert numerator == denominator * oracle.arithmetic(formula, at)


def assert_same_figure(figure: Figure, formula: str, power: int = 1) -> None:
    """The figure to that power is the formula, exactly; a power takes the root out of a figure such as w0."""
    closed = figure.closed
    assert closed is not None
    assert power % closed.degree == 0
    field = closed.num.ring.to_field()
    parts = (closed.num, closed.den, closed.under_num, closed.under_den)
    num, den, under_num, under_den = (field(part) for part in parts)
    found = (num / den) ** power * (under_num / under_den) ** (power // closed.degree)
    generators = dict(zip(map(str, field.symbols), field.gens, strict=True))
    assert found == oracle.arithmetic(
        formula, generators, lambda x: field(x.numerator) / field(x.denominator)
    )


def values_at(H: Transfer | Parameter, at: dict[str, Fraction]) -> tuple[Fraction, Fraction]:
    """Numerator and denominator at a rational point, term by term."""
    names = list(map(str, H.ring.symbols))
    totals = []
    for polynomial in (H.numerator, H.denominator):
        total = Fraction(0)
        for powers, coefficient in polynomial.terms():
            term = Fraction(int(coefficient))
            for name, power in zip(names, powers, strict=True):
                term *= at[name] ** power
            total += term
        totals.append(total)
    return totals[0], totals[1]


def numeric(case: Case) -> Ratio:
    """H of the case with its numbers."""
    H: Ratio = sn.derive(sn.network(case.text)).numeric()
    return H


def decibels(H: Ratio, f: float) -> float:
    """20 log10 |H| at f in Hz; infinity and 0 are allowed."""
    return 20 * log10(abs(H(complex(f)))) if f == inf else H.decibels(2j * pi * f)


def poles(H: Ratio) -> tuple[complex, ...]:
    """The poles in rad/s, each as often as it occurs."""
    return tuple(root.value for root in H.poles() for _ in range(root.multiplicity))
