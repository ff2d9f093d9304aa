"""From the parser's tree of one line of a hand derivation to what the line says."""

from __future__ import annotations

import re
from collections.abc import Sequence
from dataclasses import replace
from fractions import Fraction
from typing import TYPE_CHECKING, Any, Final

from symnet.circuit.formulas import Formed, Formulas
from symnet.errors import SymnetError
from symnet.expressions import Expression, Name, Number, Root
from symnet.quantities import HERTZ, NUMBER, read_number
from symnet.review.working import (
    FIGURES,
    Approximation,
    Assumption,
    Definition,
    Equation,
    Family,
    Infinite,
    Limit,
)

if TYPE_CHECKING:
    from lark import Token, Tree

    from symnet.circuit.lines import Line
    from symnet.errors import Span

__all__ = ["Statements"]

_ZERO: Final = Number(Fraction(0))
_MOST_ORDER: Final = 100
_DIGITS: Final = re.compile(r"\d+")


class Statements(Formulas):
    """Builds what one line says and collects what is wrong with it in ``faults``."""

    in_hertz = Fraction(1)

    def side(self, formed: Formed) -> Expression:
        """An expression as one side of an equation; numbers stay as they were written."""
        self.must_not_be_code(formed)
        if formed.worth is None:
            self.whole(formed)  # a bare unit s beside names
        return formed.expression

    def __init__(self, line: Line) -> None:
        super().__init__(line)
        self._decibels: list[Span] = []

    def build(self, tree: Tree[Token]) -> Any:
        """What a line says."""
        made = super().build(tree)
        for span in self._decibels:
            self.fault("dB stands behind the ripple of a family and behind within", "values are ratios", span)
        return made

    def on_number(self, children: Sequence[Any]) -> Formed:
        """A number; dB and deg are units of the settings of a family."""
        number, unit = children
        if unit is None or str(unit) not in {"dB", "deg"}:
            return super().on_number(children)
        formed = super().on_number((number, None))
        span = formed.span.to(self.span_of(unit))
        self._decibels.append(span)
        return replace(formed, expression=replace(formed.expression, span=span), span=span, rule="quantity")

    def on_group(self, children: Sequence[Formed]) -> Formed:
        """A parenthesis; the numbers in it stay as they were written, since their digits count."""
        return replace(children[0], rule="group")

    def must_not_be_code(self, *parts: Formed) -> None:
        """There are no value codes here: 2R1 is a product that was written without its sign."""
        for part in parts:
            if part.code:
                number = _DIGITS.match(part.code)
                head = number[0] if number else ""
                hint = f"write {head}*{part.code[len(head) :]}, or a value with its unit"
                self.fault(f"{part.code} is no product: a sign is missing", hint, part.span)

    def on_root(self, children: Sequence[Any]) -> Formed:
        """A square root."""
        inner: Formed = children[1]
        span = self.span_of(children[0]).to(inner.span)
        return replace(self._combined(Root(inner.expression, span), [inner], rule="name", span=span))

    def on_let(self, children: Sequence[Any]) -> Definition:
        """Let g = ...."""
        return Definition(self.name(children[1]), self.side(children[3]))

    def on_given(self, children: Sequence[Any]) -> Assumption:
        """Given R2 = R1, C2 = 2*C1."""
        return Assumption(tuple(child for child in children if isinstance(child, tuple)))

    def on_tie(self, children: Sequence[Any]) -> tuple[str, Expression]:
        """One name and its value."""
        return self.name(children[0]), self.whole(children[2]).expression

    def on_word(self, children: Sequence[Token]) -> str:
        """The name or number of a node."""
        return self.name(children[0])

    def on_node(self, children: Sequence[Any]) -> Equation:
        """Node x: currents that leave are zero, or currents in = currents out."""
        sides = [self.side(child) for child in children[3::2]]
        return Equation((sides[0], _ZERO) if len(sides) == 1 else tuple(sides), node=children[1])

    def on_figure(self, children: Sequence[Any]) -> tuple[Name, Expression]:
        """Q of x/in."""
        token = children[0]
        name, span = self.name(token), self.span_of(token)
        if name not in FIGURES:
            known = ", ".join(dict.fromkeys(FIGURES.values()))
            self.fault(f"{name} is no figure of a transfer function", f"figures: {known}", span)
        return Name(name, span), self.side(children[2])

    def on_equation(self, children: Sequence[Any]) -> Equation:
        """A chain of equal sides; numbers behind a figure carry its convention."""
        first, of = children[0], None
        if isinstance(first, tuple):
            left, of = first
        else:
            left = self.side(first)
        formed = children[2::2]
        sides = [self.side(child) for child in formed]
        if isinstance(left, Name) and left.name in FIGURES:
            for side in formed:
                self._convention(FIGURES[left.name], side)
        return Equation((left, *sides), of=of)

    def _convention(self, figure: str, side: Formed) -> None:
        """A bare frequency must say whether it is in Hz or in rad/s, and be in the unit of its figure."""
        if side.worth is None or figure[0] not in "wf":
            return
        unit, other = ("rad/s", "Hz") if figure[0] == "w" else ("Hz", "rad/s")
        text = self._text(side.span)
        if side.worth.dimension == NUMBER:
            self.fault(
                f"{figure} is in {unit} and this number has no unit", f"write {text} {unit}", side.span
            )
        elif side.worth.dimension == HERTZ and side.rule == "quantity" and text.endswith(other):
            hint = f"write {'f' if other == 'Hz' else 'w'}{figure[1:]} = {text}, or convert it: w = 2*pi*f"
            self.fault(f"{figure} is in {unit}, this is in {other}", hint, side.span)

    def on_infinity(self, children: Sequence[Any]) -> Infinite:
        """Infinity, with or without sign."""
        return Infinite(-1 if children[0] is not None and str(children[0][0]) == "-" else 1)

    def on_sign_of_end(self, children: Sequence[Token]) -> tuple[Token, ...]:
        """The sign of infinity."""
        return tuple(children)

    def on_limit(self, children: Sequence[Any]) -> Limit:
        """Value -> end as name -> toward."""
        value, _, end, _, name, _, toward = children
        ends = [part if isinstance(part, Infinite) else self.side(part) for part in (end, toward)]
        return Limit(self.side(value), ends[0], self.name(name), ends[1])

    def on_approximation(self, children: Sequence[Any]) -> Approximation:
        """Left ~= right over a range within a bound."""
        left, about, right, interval, within = children
        name, low, high = interval or ("", None, None)
        if within is None:
            hint = "write ... ~= ... for f = 10 Hz .. 1 kHz within 1 %"
            self.fault("an approximation says how near it is", hint, self.span_of(about))
            within = (Fraction(1), False)
        return Approximation(self.side(left), self.side(right), name, low, high, *within)

    def on_range(self, children: Sequence[Any]) -> tuple[str, Expression, Expression]:
        """For f = low .. high."""
        _, token, _, low, _, high = children
        name = self.name(token)
        if name not in {"f", "w", "omega"}:
            self.fault(f"a range is one of f in Hz or w in rad/s, not of {name}", "", self.span_of(token))
            return name, self.side(low), self.side(high)
        for end in (low, high):
            if end.worth is None or end.worth.dimension != HERTZ:
                unit = "Hz" if name == "f" else "rad/s"
                self.fault("the end of a range is a frequency", f"such as 10 {unit}", end.span)
            elif self._text(end.span).endswith("rad/s" if name == "f" else "Hz"):
                self.fault(f"{name} is in {'Hz' if name == 'f' else 'rad/s'}", "", end.span)
        return "w" if name == "omega" else name, self.side(low), self.side(high)

    def on_within(self, children: Sequence[Any]) -> tuple[Fraction, bool]:
        """Within 1 %, or within 0.5 dB."""
        _, number, unit = children
        span = self.span_of(number)
        try:
            value = read_number(str(number), span)
        except SymnetError as error:
            self.faults.extend(error.faults)
            value = Fraction(1)
        if value <= 0:
            self.fault("a bound is greater than zero", "such as within 1 %", span)
        if str(unit) not in {"%", "dB"}:
            self.fault(f"a bound is in % or in dB, not in {unit}", f"write {number} %", self.span_of(unit))
        return (value, True) if str(unit) == "dB" else (value / 100, False)

    def on_family(self, children: Sequence[Any]) -> Family:
        """Value is family order with settings."""
        value, _, name, number, *rest = children
        order = int(number) if number.isdigit() and len(number) <= 3 else 0
        if not 0 < order <= _MOST_ORDER:
            self.fault(
                "the order of a family is a whole number", "such as butterworth 3", self.span_of(number)
            )
        settings = tuple(part for part in rest if isinstance(part, tuple))
        return Family(self.side(value), self.name(name), order, settings)

    def on_setting(self, children: Sequence[Any]) -> tuple[str, Expression]:
        """One figure or parameter of the family."""
        token, _, formed = children
        name = self.name(token)
        self._decibels.clear()
        if name in FIGURES:
            self._convention(FIGURES[name], formed)
        return FIGURES.get(name, name), self.side(formed)
