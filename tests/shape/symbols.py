"""An H in symbols put in by hand: polynomials in part names, for shapes that no small network has."""

from __future__ import annotations

import ast
from collections.abc import Mapping
from dataclasses import dataclass, field
from fractions import Fraction
from typing import Any

from symnet.exact.polynomials import by_powers_of_s, make_ring
from symnet.exact.ratio import Ratio
from symnet.quantities import FARAD, HENRY, HERTZ, NUMBER, OHM, Dimension


@dataclass(frozen=True)
class Symbols:
    """What :func:`symnet.shape.plain.plain` reads of a transfer function, from polynomials in text."""

    numerator: Any
    denominator: Any
    values: Mapping[str, Fraction]
    dimension: Dimension = NUMBER
    dimensions: Mapping[str, Dimension | None] = field(default_factory=dict)
    label: str = "out/in"

    @property
    def names(self) -> tuple[str, ...]:
        return tuple(str(symbol) for symbol in self.denominator.ring.symbols[1:])

    @property
    def terms(self) -> tuple[int, int]:
        return len(self.numerator), len(self.denominator)

    @property
    def is_numeric(self) -> bool:
        return all(name in self.values for name in self.names)

    def numeric(self) -> Ratio:
        return Ratio.of(
            *([self._number(c) for c in by_powers_of_s(p)] for p in (self.numerator, self.denominator))
        )

    def _number(self, coefficient: Any) -> Fraction:
        total = Fraction(0)
        for monomial, c in coefficient.items():
            term = Fraction(int(c))
            for name, exponent in zip(self.names, monomial[1:], strict=True):
                term *= self.values[name] ** exponent
            total += term
        return total


def transfer(num: str, den: str, names: str = "", **values: str) -> Any:
    """H = num/den, both written out in s and the names; values as decimal text in SI units."""
    ring = make_ring(names.split())
    known = dict(zip(map(str, ring.symbols), ring.gens, strict=True))
    kinds = {"R": OHM, "C": FARAD, "L": HENRY, "K": NUMBER}
    return Symbols(
        _read(ast.parse(num.replace("^", "**"), mode="eval").body, known, ring),
        _read(ast.parse(den.replace("^", "**"), mode="eval").body, known, ring),
        {name: Fraction(value) for name, value in values.items()},
        NUMBER,
        {"s": HERTZ, **{name: kinds.get(name[0]) for name in names.split()}},
    )


def _read(node: ast.expr, known: Mapping[str, Any], ring: Any) -> Any:
    match node:
        case ast.Constant(value=int() as value):
            return ring(value)
        case ast.Name(id=name):
            return known[name]
        case ast.UnaryOp(op=ast.USub(), operand=operand):
            return -_read(operand, known, ring)
        case ast.BinOp(left=left, op=ast.Pow(), right=ast.Constant(value=int() as power)):
            return _read(left, known, ring) ** power
        case ast.BinOp(left=left, op=operator, right=right):
            a, b = _read(left, known, ring), _read(right, known, ring)
            return (
                a + b if isinstance(operator, ast.Add) else a - b if isinstance(operator, ast.Sub) else a * b
            )
    raise ValueError(ast.dump(node))
