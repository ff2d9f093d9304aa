"""The dimension of every symbol, from where it is used; and the places where no dimension fits.

Every sum, every law and every tie says that two products of powers have the same dimension. With the exponents
of volt, ampere and second as unknowns these are linear equations, solved one at a time as they are met, so that
a conflict is found at the term that brings it. Rows are kept fully reduced; a symbol whose exponents stay open
has no dimension yet, and that is no fault.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field
from fractions import Fraction
from typing import Final

from symnet.circuit.meanings import Meanings, Use
from symnet.circuit.parts import dimension_of_class
from symnet.circuit.spelling import write_expression
from symnet.errors import Fault, Span
from symnet.expressions import Expression, Name, Number, Parallel, Power, Product, Root, Sum, names_in
from symnet.quantities import AMPERE, NUMBER, VOLT, Dimension, engineering, in_words

__all__ = ["MOST_UNKNOWN", "Inference"]

MOST_UNKNOWN: Final = 500  # symbols of unknown dimension


@dataclass(slots=True)
class _Form:
    """A dimension that may hang on symbols: constant + sum of exponent * dimension of symbol."""

    constant: tuple[Fraction | int, Fraction | int, Fraction | int] = (0, 0, 0)
    symbols: dict[str, Fraction | int] = field(default_factory=dict)

    def plus(self, other: _Form, factor: Fraction | int = 1) -> _Form:
        constant = self.constant
        if any(other.constant):
            a, b = constant, other.constant
            constant = (a[0] + factor * b[0], a[1] + factor * b[1], a[2] + factor * b[2])
        symbols = self.symbols
        if other.symbols:
            symbols = dict(symbols)
            for name, power in other.symbols.items():
                total = symbols.get(name, 0) + factor * power
                if total:
                    symbols[name] = total
                else:
                    symbols.pop(name, None)
        return _Form(constant, symbols)

    def known(self) -> Dimension | None:
        """The dimension, if nothing is open and its powers are whole."""
        if self.symbols or any(power != int(power) for power in self.constant):
            return None
        return Dimension(*(int(power) for power in self.constant))


def _form(dimension: Dimension) -> _Form:
    return _Form((dimension.v, dimension.a, dimension.t))


class Inference:
    """Collects what the expressions of one network say about dimensions."""

    def __init__(self, meanings: Meanings) -> None:
        self.meanings = meanings
        self.faults: list[Fault] = []
        self._solved: dict[str, _Form] = {}
        self._seen: dict[str, Span | None] = {}

    # -- equations -------------------------------------------------------------------------------------------------

    def _reduced(self, form: _Form) -> _Form:
        result = _Form(form.constant, {})
        for name, power in form.symbols.items():
            solved = self._solved.get(name)
            result = result.plus(solved or _Form(symbols={name: 1}), power)
        return result

    def _equate(self, one: _Form, two: _Form) -> bool:
        """Take two dimensions as equal; False when they cannot be."""
        difference = self._reduced(one.plus(two, -1))
        if not difference.symbols:
            return not any(difference.constant)
        # A symbol with exponent 1 keeps exponents whole; otherwise x^2 = ohm would be solved by a root.
        pivot = min(difference.symbols, key=lambda name: abs(Fraction(difference.symbols[name])))
        factor = Fraction(-1) / difference.symbols[pivot]
        rest = {name: power for name, power in difference.symbols.items() if name != pivot}
        row = _Form().plus(_Form(difference.constant, rest), factor)
        for name, solved in self._solved.items():
            power = solved.symbols.get(pivot)
            if power:
                rest = {other: p for other, p in solved.symbols.items() if other != pivot}
                self._solved[name] = _Form(solved.constant, rest).plus(row, power)
        self._solved[pivot] = row
        return True

    def dimension(self, name: str) -> Dimension | None:
        """The dimension of a name as far as it is known by now."""
        own = self.meanings.dimension(name)
        return own if own is not None else self._reduced(_Form(symbols={name: 1})).known()

    # -- expressions -----------------------------------------------------------------------------------------------

    def _of(self, expression: Expression) -> _Form | None:
        """The dimension of an expression; None for zero and for what could not be read, which fit anywhere."""
        match expression:
            case Number(value=value, dimension=dimension):
                return None if value == 0 and dimension == NUMBER else _form(dimension)
            case Name(name=name):
                return self._of_name(name, expression.span)
            case Product(factors=factors):
                total: _Form | None = _Form()
                for power, factor in factors:
                    form = self._of(factor)
                    total = total.plus(form, power) if total is not None and form is not None else None
                return total
            case Power(base=base, exponent=exponent):
                form = self._of(base)
                return None if form is None else _Form().plus(form, exponent)
            case Root(base=base):
                form = self._of(base)
                return None if form is None else _Form().plus(form, Fraction(1, 2))
            case Sum(terms=terms):
                return self._common([term for _, term in terms], "added")
            case Parallel(branches=branches):
                return self._common(list(branches), "put in parallel")

    def _of_name(self, name: str, span: Span | None = None) -> _Form | None:
        meaning = self.meanings.of(name)
        if meaning not in {"s", "voltage", "current", "part", "symbol", "unknown"}:
            return None
        own = self.meanings.dimension(name)
        if own is not None:
            return _form(own)
        self._seen.setdefault(name, span)
        return _Form(symbols={name: 1})

    def _common(self, terms: list[Expression], verb: str) -> _Form | None:
        first: tuple[Expression, _Form] | None = None
        for term in terms:
            form = self._of(term)
            if form is None:
                continue
            if first is None:
                first = term, form
            elif not self._equate(form, first[1]):
                self._unlike(term, form, first, verb)
        return first[1] if first else None

    def _unlike(self, term: Expression, form: _Form, first: tuple[Expression, _Form], verb: str) -> None:
        here, there = self._reduced(form).known(), self._reduced(first[1]).known()
        one, two = _shown(term), _shown(first[0])
        if here is None or there is None:
            message, hint = f"{one} and {two} have different dimensions and cannot be {verb}", ""
        else:
            message = f"{one} is {_in(here)} and {two} is {_in(there)}: they cannot be {verb}"
            hint = self._unit_hint(term, here, there) or self._unit_hint(first[0], there, here)
            if hint and verb != "added":
                hint += "; || binds tighter than *, so a product beside it stands in parentheses"
        self.faults.append(Fault(message, hint, term.span))

    def _unit_hint(self, term: Expression, here: Dimension, there: Dimension) -> str:
        if not isinstance(term, Number) or here != NUMBER or there == NUMBER:
            return ""
        number = engineering(term.value, exact=True)
        if there == VOLT and number in self.meanings.nodes:
            return f"{number} is a number here; node {number} is v_{number}"
        return f"{number} has no unit; write {number} {there}"

    # -- uses --------------------------------------------------------------------------------------------------------

    def add(self, use: Use) -> None:
        """Take in what one law, read or value says; a fault without a place of its own gets that of the whole."""
        found = len(self.faults)
        self._add(use)
        self.faults[found:] = [fault.at(use.span) for fault in self.faults[found:]]

    def _add(self, use: Use) -> None:
        found = len(self.faults)
        form = self._of(use.expression)
        if len(self.faults) > found or len(self._seen) > MOST_UNKNOWN or form is None or use.where == "read":
            return
        wanted = self._wanted(use)
        if self._equate(form, wanted):
            return
        here, there = self._reduced(form).known(), self._reduced(wanted).known()
        if use.where == "value":
            self.faults.append(self._wrong_value(use, here, there))
        else:
            gives = "a current (A)" if use.where == "push" else "a voltage (V)"
            unit = f"this is {_in(here)}" if here else "this has another dimension"
            message = f"a {use.where} gives {gives}; {unit}"
            self.faults.append(Fault(message, self._found(use), use.expression.span))

    def _wanted(self, use: Use) -> _Form:
        if use.is_law:
            return _form(AMPERE if use.where == "push" else VOLT)
        return self._of_name(use.target, use.span) or _Form(symbols={use.target: 1})

    def _wrong_value(self, use: Use, here: Dimension | None, there: Dimension | None) -> Fault:
        name, expression = use.target, use.expression
        if here is None or there is None:
            return Fault(
                f"the value of {name} has not the dimension of {name}", self._found(use), expression.span
            )
        message = f"{name} is {_in(there)}, its value is {_in(here)}"
        hint = f"give {name} in {there}" if dimension_of_class(name) else self._found(use)
        if isinstance(expression, Number) and here == NUMBER:
            number = engineering(expression.value, exact=True)
            hint = f"write the unit: {number} {there}"
        return Fault(message, hint, expression.span, parts=(name,))

    def _found(self, use: Use) -> str:
        """What has been found out about the symbols of an expression, for a hint."""
        names = [use.target] if use.where == "value" else []
        names += [name.name for name in names_in(use.expression)]
        told = [
            f"{name} is {_in(dimension)}"
            for name in dict.fromkeys(names)
            if name in self._seen and (dimension := self.dimension(name)) is not None
        ]
        return "from what stands elsewhere, " + ", ".join(told[:4]) if told else ""

    def result(self, names: tuple[str, ...]) -> Mapping[str, Dimension | None]:
        """The dimension of each of these names, None where it stays open."""
        return {name: self.dimension(name) for name in names}

    def closing_faults(self) -> list[Fault]:
        """Faults that show only at the end: too many symbols, or exponents that are no whole numbers."""
        if len(self._seen) > MOST_UNKNOWN:
            hint = "begin their names with R, L, C, Z or Y, or say: free NAME in ohm"
            return [Fault(f"more than {MOST_UNKNOWN} symbols of unknown dimension", hint)]
        return [
            Fault(
                f"no dimension fits {name}: it would be a root of one", "check the powers it stands in", span
            )
            for name, span in self._seen.items()
            if not (form := self._reduced(_Form(symbols={name: 1}))).symbols and form.known() is None
        ]


def _in(dimension: Dimension) -> str:
    return in_words(dimension) if dimension == NUMBER else f"in {dimension}"


def _shown(expression: Expression) -> str:
    text = write_expression(expression)
    return text if len(text) <= 40 else text[:37] + "..."
