"""From the parser's tree to an expression, for both notations.

Trees are walked from the leaves up without recursion, so that no depth of nesting can exhaust the interpreter.
What is written is kept as it was written: parentheses make a node of their own, nothing is reordered. The only
arithmetic is that a parenthesis or a whole value without names becomes the one number it is worth.
"""

from __future__ import annotations

import unicodedata
from collections.abc import Sequence
from dataclasses import dataclass, replace
from fractions import Fraction
from typing import TYPE_CHECKING, Any, Final

from symnet.circuit.lines import Line
from symnet.errors import Fault, Span, SymnetError
from symnet.expressions import Expression, Name, Number, Parallel, Power, Product, Sum, negative
from symnet.quantities import (
    CODE,
    HERTZ,
    MOST_DIGITS,
    NUMBER,
    Dimension,
    Quantity,
    engineering,
    in_words,
    read_code,
    read_number,
    read_unit,
    spread_code,
    unit_hint,
)

if TYPE_CHECKING:
    from lark import Token, Tree

__all__ = ["MOST_EXPONENT", "MOST_LEVELS", "MOST_NAME", "Formed", "Formulas", "spelled"]

MOST_EXPONENT: Final = 64
MOST_LEVELS: Final = 150  # nodes inside one another in one expression
MOST_NAME: Final = 64  # characters
_MOST_FAULTS: Final = 10  # of one line
_MOST_BITS: Final = int(3.3 * MOST_DIGITS)


def spelled(name: str) -> str:
    """A name in ASCII: Greek letters as they are spoken.

    >>> spelled("\N{GREEK SMALL LETTER OMEGA}0"), spelled("R1")
    ('omega0', 'R1')
    """
    if name.isascii():
        return name
    return "".join(c if c.isascii() else _spoken_letter(c) for c in name)


def _spoken_letter(letter: str) -> str:
    if letter in {"\N{MICRO SIGN}", "\N{OHM SIGN}"}:
        return "mu" if letter == "\N{MICRO SIGN}" else "Omega"
    greek, _, word = unicodedata.name(letter, "").rpartition(" LETTER ")
    if not greek.startswith("GREEK"):
        return letter
    word = word.split()[-1].lower()  # FINAL SIGMA is a sigma
    return word.capitalize() if letter.isupper() else word


@dataclass(frozen=True, slots=True)
class Formed:
    """An expression while it is being built.

    ``worth`` is its value when it has no names; ``code`` the text of an IEC 60062 code, which may only stand
    alone; ``seconds`` the place of a bare unit s, which may not stand beside names; ``rule`` the grammar rule
    it came from; ``power`` the largest exponent that nested powers multiply up to.
    """

    expression: Expression
    span: Span
    rule: str
    worth: Quantity | None = None
    code: str = ""
    seconds: Span | None = None
    levels: int = 1
    power: int = 1


class Formulas:
    """Builds expressions from the trees of one line and collects what is wrong with them in ``faults``."""

    #: What a value in Hz is multiplied by; None where it is refused: s is in rad/s and 2 pi is no fraction.
    in_hertz: Fraction | None = None

    def __init__(self, line: Line) -> None:
        self.line = line
        self.faults: list[Fault] = []

    def build(self, tree: Tree[Token]) -> Any:
        """What the rules ``on_...`` make of the tree, the leaves first."""
        made: dict[int, Any] = {}
        for node in tree.iter_subtrees():
            children = [made.get(id(child), child) for child in node.children]
            rule = str(node.data).rpartition("__")[2]
            made[id(node)] = getattr(self, f"on_{rule}")(children)
        return made[id(tree)]

    def fault(self, message: str, hint: str = "", span: Span | None = None) -> None:
        """Note one thing that is wrong; beyond some number the rest of the line would only be noise."""
        if len(self.faults) < _MOST_FAULTS:
            self.faults.append(Fault(message, hint, span))

    def span_of(self, token: Token) -> Span:
        """The place of a token in the whole text."""
        start = token.start_pos or 0
        return self.line.span(start, start + len(token))

    # -- leaves ---------------------------------------------------------------------------------------------------

    def on_name(self, children: Sequence[Token]) -> Formed:
        """A name, Greek letters spelled out."""
        token = children[0]
        span = self.span_of(token)
        return Formed(Name(self.name(token), span), span, "name")

    def name(self, token: Token) -> str:
        """The name in a token; longer ones than symnet takes are a fault."""
        if len(token) > MOST_NAME:
            self.fault(f"a name has at most {MOST_NAME} letters", "choose a shorter one", self.span_of(token))
        return spelled(str(token))

    def on_number(self, children: Sequence[Any]) -> Formed:
        """A number with or without unit, or a code such as 4K7."""
        number: Token = children[0]
        unit: Token | None = children[1]
        span = self.span_of(number)
        try:
            value = read_number(str(number), span)
        except SymnetError as error:
            self.faults.extend(error.faults)
            value = Fraction(1)
        if unit is None:
            return self._number(value, NUMBER, span, "number")
        unit_span = self.span_of(unit)
        whole = span.to(unit_span)
        known = read_unit(str(unit))
        if known is None:
            text = f"{number}{unit}"
            if span.end == unit_span.start and CODE.fullmatch(text):
                worth = read_code(text, None) or Quantity(value)
                return replace(self._number(worth.value, worth.dimension, whole, "quantity"), code=text)
            self._no_unit(str(number), str(unit), unit_span)
            known = Fraction(1), NUMBER
        elif known[1] == HERTZ and str(unit).endswith("Hz") and self.in_hertz is not None:
            value *= self.in_hertz
        elif known[1] == HERTZ and str(unit).endswith("Hz"):
            # 2 pi is rounded for the message only; no value is made from it.
            shown = engineering(value * known[0] * Fraction("6.283185307"), HERTZ, digits=7, unit="rad/s")
            self.fault(f"{number} {unit} is a frequency, but s is in rad/s", f"write {shown}", whole)
        formed = self._number(value * known[0], known[1], whole, "quantity")
        return replace(formed, seconds=unit_span) if unit == "s" else formed

    def _number(self, value: Fraction, dimension: Dimension, span: Span, rule: str) -> Formed:
        return Formed(Number(value, dimension, span), span, rule, Quantity(value, dimension))

    def _no_unit(self, number: str, unit: str, span: Span) -> None:
        meant = unit_hint(unit)
        if meant:
            self.fault(f"{unit} is not a unit", f"did you mean {number} {meant}?", span)
        else:
            unit = unit if len(unit) <= MOST_NAME else unit[:MOST_NAME] + "..."
            self.fault(
                f"{unit} follows a number and is not a unit", f"a product is written {number}*{unit}", span
            )

    # -- operations -------------------------------------------------------------------------------------------------

    def on_group(self, children: Sequence[Formed]) -> Formed:
        """A parenthesis; a product of numbers in it becomes the one number it is worth.

        A sum of numbers stays, so that (1 - 2)/R1 can be seen to mean nodes.
        """
        inner = children[0]
        if inner.worth is None or isinstance(inner.expression, Sum | Parallel):
            return replace(inner, rule="group")
        number = Number(inner.worth.value, inner.worth.dimension, inner.span)
        return replace(inner, expression=number, rule="group", levels=1)

    def on_sign(self, children: Sequence[Any]) -> Formed:
        """One or several signs before a term."""
        inner: Formed = children[-1]
        signs = children[:-1]
        self.must_not_be_code(inner)
        span = self.span_of(signs[0]).to(inner.span)
        if sum(sign == "-" for sign in signs) % 2 == 0:
            return replace(inner, span=span, code="")
        expression = replace(negative(inner.expression), span=span)
        worth = Quantity(-inner.worth.value, inner.worth.dimension) if inner.worth else None
        return replace(inner, expression=expression, span=span, rule="sign", worth=worth, code="")

    def on_sum(self, children: Sequence[Any]) -> Formed:
        """Terms with their signs."""
        formed, signs = children[::2], [1, *(1 if sign == "+" else -1 for sign in children[1::2])]
        terms = []
        for sign, term in zip(signs, formed, strict=True):
            match term:
                case Formed(expression=Sum(terms=((-1, inner),)), rule="sign"):
                    terms.append((-sign, inner))
                case Formed(expression=Number(value=value, dimension=dimension), rule="sign"):
                    terms.append((-sign, Number(-value, dimension, term.span)))
                case _:
                    terms.append((sign, term.expression))
        made = self._combined(Sum(tuple(terms), self._whole(formed)), formed)
        worths = _worths(formed)
        return made if worths is None else self._folded_sum(made, signs, formed, worths)

    def _folded_sum(
        self, made: Formed, signs: list[int], terms: Sequence[Formed], worths: list[Quantity]
    ) -> Formed:
        total, dimension = Fraction(0), None
        for sign, term, worth in zip(signs, terms, worths, strict=True):
            if worth == Quantity(Fraction(0)):  # a bare zero fits everywhere
                continue
            if dimension is None:
                dimension = worth.dimension
            elif dimension != worth.dimension:
                self._unlike(worth, dimension, term.span)
                return made
            total = self._checked(total + sign * worth.value, term.span)
        return replace(made, worth=Quantity(total, dimension or NUMBER))

    def on_product(self, children: Sequence[Any]) -> Formed:
        """Factors and divisors from left to right; a minus before the first stands before the whole."""
        formed = list(children[::2])
        powers = [1, *(-1 if sign == "/" else 1 for sign in children[1::2])]
        first = formed[0]
        factors = [(power, part.expression) for power, part in zip(powers, formed, strict=True)]
        minus = first.rule == "sign"
        if minus:
            factors[0] = (1, negative(first.expression))
        span = self._whole(formed)
        product: Expression = Product(tuple(factors), span)
        made = self._combined(
            negative(product) if minus else product, formed, rule="sign" if minus else "product"
        )
        worths = _worths(formed)
        if worths is None:
            return made
        total = Quantity(Fraction(1))
        for power, part, own in zip(powers, formed, worths, strict=True):
            worth = self._power(own, power, part.span)
            value = self._checked(total.value * worth.value, part.span)
            total = Quantity(value, total.dimension * worth.dimension)
        return replace(made, worth=total)

    def on_parallel(self, children: Sequence[Formed]) -> Formed:
        """Branches side by side."""
        branches = tuple(child.expression for child in children)
        made = self._combined(Parallel(branches, self._whole(children)), children)
        worths = _worths(children)
        if worths is None:
            return made
        total, dimension = Fraction(0), worths[0].dimension
        for child, worth in zip(children, worths, strict=True):
            if worth.dimension != dimension:
                self._unlike(worth, dimension, child.span)
                return made
            total = self._checked(total + self._power(worth, -1, child.span).value, child.span)
        return replace(made, worth=self._power(Quantity(total, dimension**-1), -1, made.span))

    def on_power(self, children: Sequence[Any]) -> Formed:
        """A base with a whole exponent."""
        base: Formed = children[0]
        sign, exponent = children[1], children[-1]
        span = base.span.to(exponent[1] if isinstance(exponent, tuple) else self.span_of(sign))
        if base.rule == "quantity" and not base.code:
            hint = f"write ({self._text(base.span)}){self._text(Span(base.span.end, span.end)).strip()}"
            self.fault("does the exponent belong to the number or to its unit?", hint, span)
        number = exponent[0] if isinstance(exponent, tuple) else {"\N{SUPERSCRIPT TWO}": 2}.get(str(sign), 3)
        reach = base.power * max(1, abs(number))
        if reach > MOST_EXPONENT:
            self.fault(f"an exponent lies between -{MOST_EXPONENT} and {MOST_EXPONENT}", "", span)
            return replace(base, span=span, rule="power")
        made = replace(self._combined(Power(base.expression, number, span), [base], span=span), power=reach)
        if base.worth is not None:
            made = replace(made, worth=self._power(base.worth, number, span))
        return made

    def on_exponent(self, children: Sequence[Any]) -> tuple[int, Span]:
        """A whole number with or without sign."""
        minus, token = children
        span = self.span_of(token)
        if not token.isdigit() or len(token) > 9:
            self.fault("an exponent is a whole number", f"between -{MOST_EXPONENT} and {MOST_EXPONENT}", span)
            return 1, span
        return (-int(token) if minus else int(token)), span

    def whole(self, formed: Formed) -> Formed:
        """The expression as a whole right-hand side: one without names becomes a number."""
        if formed.worth is not None:
            number = Number(formed.worth.value, formed.worth.dimension, formed.span)
            return replace(formed, expression=number)
        if formed.seconds is not None:
            hint = "a product is written 2*s; seconds can be written as 1000 ms"
            self.fault("s is the Laplace variable and no unit inside an expression", hint, formed.seconds)
        return formed

    # -- shared -----------------------------------------------------------------------------------------------------

    def _combined(
        self, expression: Expression, parts: Sequence[Formed], rule: str = "", span: Span | None = None
    ) -> Formed:
        self.must_not_be_code(*parts)
        levels = 1 + max(part.levels for part in parts)
        span = span or self._whole(parts)
        if levels == MOST_LEVELS + 1:
            self.fault(
                f"more than {MOST_LEVELS} operations inside one another", "give a part of it a name", span
            )
        return Formed(
            expression,
            span,
            rule or type(expression).__name__.lower(),
            seconds=next((part.seconds for part in parts if part.seconds), None),
            levels=levels,
            power=max(part.power for part in parts),
        )

    def must_not_be_code(self, *parts: Formed) -> None:
        """Note a code inside a larger expression: 2R2*C1 might be meant as a product."""
        for part in parts:
            if part.code:
                hint = f"write {spread_code(part.code)} instead"
                self.fault(f"{part.code} is a value code and must stand alone", hint, part.span)

    def _power(self, base: Quantity, exponent: int, span: Span) -> Quantity:
        if base.value == 0 and exponent < 0:
            self.fault("division by zero", "", span)
            return base
        if _bits(base.value) * abs(exponent) > 2 * _MOST_BITS:
            self._too_large(span)
            return base
        return Quantity(self._checked(base.value**exponent, span), base.dimension**exponent)

    def _checked(self, value: Fraction, span: Span) -> Fraction:
        if _bits(value) > _MOST_BITS:
            self._too_large(span)
            return Fraction(1)
        return value

    def _unlike(self, worth: Quantity, dimension: Dimension, span: Span) -> None:
        hint = ""
        if worth.dimension == NUMBER:
            hint = f"write the unit: {engineering(worth.value)} {dimension}"
        self.fault(
            f"this is {_in(worth.dimension)} and what stands before it is {_in(dimension)}", hint, span
        )

    def _too_large(self, span: Span) -> None:
        self.fault(f"this comes to a number of more than {MOST_DIGITS} digits", "", span)

    def _whole(self, parts: Sequence[Formed]) -> Span:
        return parts[0].span.to(parts[-1].span)

    def _text(self, span: Span) -> str:
        return self.line.text[span.start - self.line.start : span.end - self.line.start]


def _bits(value: Fraction) -> int:
    return max(value.numerator.bit_length(), value.denominator.bit_length())


def _worths(parts: Sequence[Formed]) -> list[Quantity] | None:
    """What the parts are worth, if none of them has a name in it."""
    worths = [part.worth for part in parts if part.worth is not None]
    return worths if len(worths) == len(parts) else None


def _in(dimension: Dimension) -> str:
    return in_words(dimension) if dimension == NUMBER else f"in {dimension}"
