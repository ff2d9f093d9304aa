"""Laws and reads are sums of voltages and currents, each with a factor; here every other form is refused.

The equations of a network are linear in its voltages and currents only if each law is. A term without any of
them would be a hidden source; a product of two of them would have no transfer function.
"""

from __future__ import annotations

from enum import Enum
from typing import Final

from symnet.circuit.meanings import Meanings, Use
from symnet.errors import Fault
from symnet.expressions import (
    Expression,
    Name,
    Number,
    Parallel,
    Power,
    Product,
    Root,
    Sum,
    children,
    names_in,
)
from symnet.quantities import NUMBER

__all__ = ["law_faults"]


class _Class(Enum):
    ZERO = "zero"
    CONSTANT = "a constant"
    SIGNAL = "a voltage or current"
    UNKNOWN = "something that could not be read"


_CONSTANT: Final = (_Class.CONSTANT, _Class.ZERO)


class _Walk:
    def __init__(self, use: Use, meanings: Meanings) -> None:
        self.use = use
        self.meanings = meanings
        self.faults: list[Fault] = []

    def classify(self, expression: Expression) -> _Class:
        """What an expression is: zero, a constant, or linear and homogeneous in voltages and currents."""
        match expression:
            case Number(value=value):
                return _Class.ZERO if value == 0 else _Class.CONSTANT
            case Name(name=name):
                meaning = self.meanings.of(name)
                if meaning in {"voltage", "current"}:
                    return _Class.SIGNAL
                return _Class.CONSTANT if meaning in {"s", "part", "symbol", "unknown"} else _Class.UNKNOWN
            case Sum():
                return self._sum(expression)
            case Product():
                return self._product(expression)
            case Power(base=base, exponent=exponent):
                inner = self.classify(base)
                if inner is _Class.SIGNAL and exponent != 1:
                    self._fault("a power of a voltage or current is not linear", "", expression)
                return inner
            case Root(base=base):
                return _Class.UNKNOWN if self.classify(base) is _Class.UNKNOWN else _Class.CONSTANT
            case Parallel(branches=branches):
                kinds = [self.classify(branch) for branch in branches]
                if _Class.SIGNAL in kinds:
                    self._fault("|| joins impedances, not voltages or currents", "", expression)
                    return _Class.UNKNOWN
                return _Class.UNKNOWN if _Class.UNKNOWN in kinds else _Class.CONSTANT

    def _sum(self, expression: Sum) -> _Class:
        terms = [(term, self.classify(term)) for _, term in expression.terms]
        kinds = {kind for _, kind in terms}
        if _Class.SIGNAL not in kinds:
            return _Class.UNKNOWN if _Class.UNKNOWN in kinds else max(kinds, key=_CONSTANT[::-1].index)
        signal = next(term for term, kind in terms if kind is _Class.SIGNAL)
        for term, kind in terms:
            if kind is _Class.CONSTANT:
                self.constant(term, signal)
        return _Class.SIGNAL

    def _product(self, expression: Product) -> _Class:
        result = _Class.CONSTANT
        for power, factor in expression.factors:
            kind = self.classify(factor)
            if kind is _Class.SIGNAL and power < 0:
                self._fault("a voltage or current cannot be divided by", "laws are linear", factor)
                kind = _Class.UNKNOWN
            elif kind is _Class.SIGNAL and result is _Class.SIGNAL:
                self._fault("a product of two voltages or currents is not linear", "laws are linear", factor)
            if _Class.SIGNAL in {kind, result}:
                result = _Class.SIGNAL
            elif _Class.UNKNOWN in {kind, result}:
                result = _Class.UNKNOWN
            elif kind is _Class.ZERO and power > 0:
                result = _Class.ZERO
        return result

    def constant(self, term: Expression, beside: Expression | None = None) -> None:
        """Say what is wrong with a term that has no voltage or current in it."""
        number = _node_number(term, self.meanings)
        if number is not None:
            node = str(number.value)
            self._fault(f"{node} is a number here; node {node} is v_{node}", f"write v_{node}", number)
            return
        unknown = [name for name in names_in(term) if self.meanings.of(name.name) == "unknown"]
        if len({name.name for name in unknown}) == 1:
            name = unknown[0]
            what, has = self._wanted(beside), "node"
            if what == "a current":
                has = "part"
            known = self.meanings.shown_nodes if has == "node" else [f"i_{p}" for p in self.meanings.branches]
            listed = ", ".join(known[:12]) + (", ..." if len(known) > 12 else "")
            message = f"{name.name} stands where {what} must stand and the network has no {has} {name.name}"
            self._fault(message, f"{'nodes' if has == 'node' else 'currents'}: {listed}", name)
        elif beside is None:
            hint = "it is a sum of voltages and currents, each with a factor"
            self._fault(f"this {self.use.where} has no voltage and no current in it", hint, term)
        else:
            hint = "every term is a voltage or current with a factor; a constant would be a hidden source"
            self._fault("this term has no voltage and no current in it", hint, term)

    def _wanted(self, beside: Expression | None) -> str:
        if isinstance(beside, Name):
            return "a current" if self.meanings.of(beside.name) == "current" else "a voltage"
        return "a voltage or a current" if beside is not None else "a voltage"

    def _fault(self, message: str, hint: str, where: Expression) -> None:
        self.faults.append(Fault(message, hint, where.span or self.use.span))


def _node_number(term: Expression, meanings: Meanings) -> Number | None:
    """The first bare whole number that is a term of a sum and the name of a node."""
    stack: list[tuple[Expression, bool]] = [(term, True)]
    while stack:
        expression, summand = stack.pop()
        if isinstance(expression, Number):
            if summand and expression.dimension == NUMBER and str(expression.value) in meanings.nodes:
                return expression
        else:
            inner = isinstance(expression, Sum)
            stack.extend((child, inner) for child in reversed(children(expression)))
    return None


def law_faults(use: Use, meanings: Meanings) -> list[Fault]:
    """Why a law or a read is not linear and homogeneous in voltages and currents; empty when it is.

    A law may be zero (``hold a - b = 0`` is a wire whose current can be read); a read may not.
    """
    walk = _Walk(use, meanings)
    kind = walk.classify(use.expression)
    if kind is _Class.CONSTANT or (kind is _Class.ZERO and use.where == "read"):
        walk.constant(use.expression)
    return walk.faults
